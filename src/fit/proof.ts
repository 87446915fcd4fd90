/** The whole error of a polynomial as a machine evaluates it: against the function (certified supremum) and by rounding, in the measure of the fit. */
import { boundDifference, type DifferenceBound, polynomialOf } from '../bound/index.ts';
import { type Expression, Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import type { PolynomialTerm } from '../write/index.ts';
import { interval } from '../rigorous/index.ts';
import { absoluteError, type BinadeRun, binadeRuns, errorPieces, relativeError } from './evaluationBound.ts';
import { ERROR_BITS } from './evaluationError.ts';
import { powerOfTwo, smallestNormal, unitRoundoff } from './format.ts';
import type { Arithmetic, Program } from './program.ts';

export type FitMeasure = 'absolute' | 'relative' | 'ulp';

/** What is approximated, where and in which measure. */
export interface ProofProblem {
  readonly function: Expression;
  readonly variable: string;
  readonly low: Rational;
  readonly high: Rational;
  readonly measure: FitMeasure;
  readonly arithmetic: Arithmetic;
  /** The zero that function and polynomial share, or the centre of the polynomial. */
  readonly centre: Rational;
  /** The function has its zero (or a removable singularity) at the centre: bounds start there. */
  readonly through: boolean;
  /** Function and polynomial are both even or both odd on a symmetric interval: one half says all. */
  readonly symmetric: boolean;
  /** What an error of the argument, made before this polynomial is evaluated, has changed the function by already. */
  readonly inherited?: InheritedError;
}

/** |f(computed argument) - f(argument)| at most `absolute`, and at most `relative` |f(argument)|; only the one that the measure needs is looked at. */
export interface InheritedError {
  readonly absolute: Rational;
  readonly relative: Rational;
}

/** Errors in the measure, as rationals that bound from above. */
export interface ProvedError {
  /** Of the polynomial before its coefficients were rounded. */
  readonly approximation: Rational;
  /** What rounding the coefficients added to it (never negative). */
  readonly rounding: Rational;
  readonly evaluation: Rational;
  readonly total: Rational;
  /** A proven lower bound of the error of the rounded polynomial, evaluated exactly. */
  readonly lower: Rational;
  /** Absolute error where |f| is below the smallest normal number; null where it never is. */
  readonly subnormal: Rational | null;
}

const greater = (a: Rational, b: Rational): Rational => (Q.compare(a, b) >= 0 ? a : b);
const nonNegative = (q: Rational): Rational => greater(q, Q.ZERO);
/** Doubles that are bounds, rounded up already. */
const fromBound = (x: number): Rational => Q.fromDouble(x);

/** sup |f - p| or |f - p|/|f|, as the measure needs it: ulp bounds start from the relative one. */
export function certify(approximation: Expression, problem: ProofProblem, budget: Budget, settled = 1.001, part?: { readonly low: Rational; readonly high: Rational }): DifferenceBound {
  const { low, high } = part ?? { low: problem.symmetric ? Q.ZERO : problem.low, high: problem.high };
  const inside = Q.compare(low, problem.centre) <= 0 && Q.compare(problem.centre, high) <= 0;
  const result = boundDifference({
    function: problem.function,
    approximation,
    variable: problem.variable,
    low,
    high,
    measure: part || problem.measure === 'absolute' ? 'absolute' : 'relative',
    ...(problem.through && inside ? { through: problem.centre } : {}),
    settled,
    ...nearestArgument([low, high], problem.arithmetic),
    budget,
  });
  if (!result.ok) throw new Declined(result.error.code, result.error.message);
  return result.value;
}

/** Floats are multiples of the smallest subnormal number; where both ends are, no other float is nearer to them than that. */
function nearestArgument(ends: readonly Rational[], { operations }: Arithmetic): { readonly nearest?: number } {
  const exponent = operations.emin - operations.precision + 1;
  return ends.every((q) => Q.multiply(q, powerOfTwo(-exponent)).den === 1n) ? { nearest: exponent } : {};
}

/** What is known of a polynomial in one measure, whatever program evaluates it. */
export interface CertifiedPolynomial {
  /** A polynomial, or a quotient of two, in the variable. */
  readonly approximation: Expression;
  readonly whole: DifferenceBound;
  /** Certified absolute suprema on parts, by their ends. */
  readonly parts: Map<string, Rational>;
}

export const certified = (approximation: Expression, problem: ProofProblem, budget: Budget): CertifiedPolynomial => ({ approximation, whole: certify(approximation, problem, budget), parts: new Map() });
export const certifiedTerms = (terms: readonly PolynomialTerm[], problem: ProofProblem, budget: Budget): CertifiedPolynomial => certified(polynomialOf(terms, problem.variable, problem.centre), problem, budget);

/** A change of the coefficients that moves a certified bound by less than this part of it needs no certificate of its own. */
const NEGLIGIBLE = powerOfTwo(-16);

/**
 * The same for a polynomial close to one that is certified: sup |p - q| by the sizes of the coefficients' changes where that is negligible, else a certificate of its own.
 * Only the absolute measure has such a shortcut: relative to f the change can be large beside a zero.
 */
export function certifiedBeside(terms: readonly PolynomialTerm[], neighbour: { readonly terms: readonly PolynomialTerm[]; readonly polynomial: CertifiedPolynomial }, problem: ProofProblem, budget: Budget): CertifiedPolynomial {
  const { whole } = neighbour.polynomial;
  const moved = problem.measure === 'absolute' ? largestChange(terms, neighbour.terms, problem) : null;
  if (!moved || Q.compare(moved, Q.multiply(whole.upper, NEGLIGIBLE)) > 0) return certifiedTerms(terms, problem, budget);
  const shifted = { ...whole, upper: Q.add(whole.upper, moved), lower: nonNegative(Q.subtract(whole.lower, moved)) };
  return { approximation: polynomialOf(terms, problem.variable, problem.centre), whole: shifted, parts: new Map() };
}

/** sup |p - q| on the interval, at most. */
function largestChange(p: readonly PolynomialTerm[], q: readonly PolynomialTerm[], { low, high, centre }: ProofProblem): Rational {
  const reach = greater(Q.absolute(Q.subtract(low, centre)), Q.absolute(Q.subtract(high, centre)));
  const changes = new Map<number, Rational>();
  for (const { power, value } of p) changes.set(power, Q.add(changes.get(power) ?? Q.ZERO, value));
  for (const { power, value } of q) changes.set(power, Q.subtract(changes.get(power) ?? Q.ZERO, value));
  return [...changes].reduce((sum, [power, change]) => Q.add(sum, Q.multiply(Q.absolute(change), Q.power(reach, power))), Q.ZERO);
}

/** The certified bound of |f - p| with the inherited error: r |f(y)| + |f(y) - f(x)| <= (r + e + r e) |f(x)|. */
function withInherited(upper: Rational, { measure, inherited }: ProofProblem): Rational {
  if (!inherited) return upper;
  if (measure === 'absolute') return Q.add(upper, inherited.absolute);
  return Q.add(upper, Q.multiply(inherited.relative, Q.add(Q.ONE, upper)));
}

/** Certified parts of an interval that one bound in ulp may rest on. */
const MOST_PARTS = 12;

/** Below this part of the largest value the relative bound serves: next to a shared zero it is as good. */
const SMALL = 2 ** -12;

/** sup over the runs of (|p - f| + spent error) / ulp: the worst run is certified by itself until the worst one is certified. */
function inUlp(polynomial: CertifiedPolynomial, runs: readonly BinadeRun[], problem: ProofProblem, withEvaluation: boolean, budget: Budget): Rational {
  // |p - f| <= r |f| and |f| <= |p| / (1 - r).
  const r = withEvaluation ? withInherited(polynomial.whole.upper, problem) : polynomial.whole.upper;
  const coarse = upward(Q.divide(r, Q.subtract(Q.ONE, r)));
  const inherited = withEvaluation && problem.inherited ? Q.divide(problem.inherited.relative, Q.subtract(Q.ONE, r)) : Q.ZERO;
  const largest = runs.reduce((most, run) => Math.max(most, run.size), 0);
  // Thousands of runs: their totals are doubles rounded up.
  const entries = runs.map((run) => {
    const spent = withEvaluation ? scaledUp(run.error, -run.exponent - ERROR_BITS) : 0;
    return { run, spent, total: interval.up(interval.up(coarse * scaledUp(run.size, -run.exponent)) + spent), done: run.size < largest * SMALL };
  });
  for (let parts = 0; parts < MOST_PARTS; parts += 1) {
    const worst = entries.reduce<(typeof entries)[number] | null>((a, b) => (a && a.total >= b.total ? a : b), null);
    if (!worst || worst.done) return fromBound(worst?.total ?? 0);
    const [low, high] = [Q.fromDouble(worst.run.low), Q.fromDouble(worst.run.high)];
    const key = `${worst.run.low}:${worst.run.high}`;
    const known = polynomial.parts.get(key) ?? certify(polynomial.approximation, problem, budget, 1.01, { low: greater(low, problem.low), high: Q.compare(high, problem.high) > 0 ? problem.high : high }).upper;
    polynomial.parts.set(key, known);
    worst.total = interval.up(upward(Q.multiply(Q.add(known, Q.multiply(inherited, fromBound(worst.run.size))), powerOfTwo(-worst.run.exponent))) + worst.spent);
    worst.done = true;
  }
  return fromBound(entries.reduce((most, e) => Math.max(most, e.total), 0));
}

const upward = (q: Rational): number => interval.fromRational(q).hi;

/** x 2^k, rounded up where it is not exact; in two steps where 2^k alone has no double. */
function scaledUp(x: number, k: number): number {
  const half = Math.trunc(k / 2);
  const value = x * 2 ** half * 2 ** (k - half);
  return value === 0 || value < 2 ** -1000 ? (x === 0 ? 0 : interval.up(value)) : value;
}

export interface EvaluationProof {
  readonly total: Rational;
  readonly evaluation: Rational;
  readonly subnormal: Rational | null;
  readonly runs: readonly BinadeRun[];
}

/** The total error of one program that evaluates the polynomial. Throws Declined where it can overflow or where no relative bound is known. */
export function proveProgram(program: Program, polynomial: CertifiedPolynomial, problem: ProofProblem, budget: Budget): EvaluationProof {
  const { measure, arithmetic } = problem;
  const certainly = polynomial.whole.upper;
  const upper = withInherited(certainly, problem);
  const r = Q.toDouble(upper) * (1 + 2 ** -50);
  const sliver = measure === 'ulp' ? Math.min(2 * r + 2 ** -60, 2 ** -13) : 0;
  const pieces = errorPieces(program, problem.variable, arithmetic, { low: problem.symmetric ? Q.ZERO : problem.low, high: problem.high, centre: problem.centre, sliver }, budget);
  if (measure === 'absolute') {
    const spent = absoluteError(pieces);
    return { total: Q.add(upper, spent), evaluation: Q.add(spent, Q.subtract(upper, certainly)), subnormal: null, runs: [] };
  }
  if (!(r < 1)) throw new Declined('bad-request', 'The relative error of this polynomial reaches one; ask for a higher degree or the absolute measure.');
  const { relative, subnormal } = relativeError(pieces, r, arithmetic);
  if (measure === 'ulp') {
    const runs = binadeRuns(pieces, r, arithmetic);
    if (!runs.every((run) => run.error < Infinity)) throw new Declined('undecided', 'The rounding error could not be bounded on this interval; take a smaller one.');
    const total = inUlp(polynomial, runs, problem, true, budget);
    return { total, evaluation: nonNegative(Q.subtract(total, inUlp(polynomial, runs, problem, false, budget))), subnormal: below(subnormal, upper, problem), runs };
  }
  if (!Number.isFinite(relative)) throw new Declined('undecided', 'The rounding error relative to the function could not be bounded; ask for the absolute measure.');
  // |computed - f| <= |p - f| + e |p| <= (r + e (1 + r)) |f|.
  const spent = Q.multiply(fromBound(relative), Q.add(Q.ONE, upper));
  return { total: Q.add(upper, spent), evaluation: Q.add(spent, Q.subtract(upper, certainly)), subnormal: below(subnormal, upper, problem), runs: [] };
}

const below = (evaluation: Rational | null, r: Rational, { arithmetic }: ProofProblem): Rational | null =>
  evaluation === null ? null : Q.add(evaluation, Q.multiply(r, smallestNormal(arithmetic.result)));

/** Splits a total into what the best polynomial owes, what rounding its coefficients added, and what evaluation adds. */
export function errorParts(proof: EvaluationProof, polynomial: CertifiedPolynomial, ideal: CertifiedPolynomial, problem: ProofProblem, budget: Budget): ProvedError {
  const shared = { evaluation: proof.evaluation, total: proof.total, subnormal: proof.subnormal };
  if (problem.measure !== 'ulp') {
    const rounding = nonNegative(Q.subtract(polynomial.whole.upper, ideal.whole.upper));
    return { ...shared, approximation: ideal.whole.upper, rounding, lower: polynomial.whole.lower };
  }
  const approximation = inUlp(ideal, proof.runs, problem, false, budget);
  const actual = inUlp(polynomial, proof.runs, problem, false, budget);
  // One ulp is at most 2 u |f| for normal numbers.
  const lower = Q.divide(polynomial.whole.lower, Q.multiply(unitRoundoff(problem.arithmetic.result), Q.rational(2)));
  return { ...shared, approximation, rounding: nonNegative(Q.subtract(actual, approximation)), lower };
}
