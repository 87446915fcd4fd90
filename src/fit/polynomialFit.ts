/** A polynomial for a machine: searched, its coefficients rounded together, its whole error proved. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { boundDifference, polynomialOf } from '../bound/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../outcome.ts';
import { polynomialTree, type PolynomialTerm } from '../write/index.ts';
import { type RoundedCoefficients, roundCoefficients } from './coefficients.ts';
import { evaluationBound } from './evaluationBound.ts';
import { fromFixed } from './fixed.ts';
import { type FloatFormat, powerOfTwo } from './format.ts';
import { type Basis, basisFor, bestOfDegree, errorOf, type Found, goalOf, leastDegree, leastWithin, nextDegree, type Search } from './search.ts';
import { type FitTarget, prepareTarget } from './target.ts';

export interface FitProblem {
  readonly function: Expression;
  readonly variable: string;
  /** Rational ends: the caller rounds exact ends outward. */
  readonly low: Rational;
  readonly high: Rational;
  readonly measure: 'absolute' | 'relative' | 'ulp';
  /** Exactly one of the two; a tolerance is in the measure. */
  readonly tolerance?: Rational;
  readonly degree?: number;
  readonly format: FloatFormat;
  readonly form: 'horner' | 'estrin';
  readonly fma: boolean;
  readonly basis?: Basis;
}

/** Errors in the measure of the problem, as rationals that bound from above. */
export interface ProvedError {
  /** Of the best polynomial before its coefficients were rounded. */
  readonly approximation: Rational;
  /** What rounding the coefficients added to it (never negative). */
  readonly rounding: Rational;
  readonly evaluation: Rational;
  readonly total: Rational;
  /** A proven lower bound of the error of the polynomial itself. */
  readonly lower: Rational;
}

export interface PolynomialFit {
  readonly target: FitTarget;
  /** In u = x - z, lowest power first, floats of the format. */
  readonly terms: readonly PolynomialTerm[];
  readonly unrounded: readonly PolynomialTerm[];
  readonly degree: number;
  readonly basis: Basis;
  /** The evaluation as code computes it, in the variable. */
  readonly tree: Expression;
  readonly error: ProvedError;
  readonly pieces: number;
}

const WORKING_BITS = 320;

/** Fails with bad-request (parameters, zeros, singular points), undecided (nothing could be proved), over-budget. */
export const fitPolynomial = (problem: FitProblem, budget: Budget): Outcome<PolynomialFit> => attempt(() => fit(problem, budget));

function fit(problem: FitProblem, budget: Budget): PolynomialFit {
  const { low, high, format } = problem;
  if (Q.compare(low, high) >= 0) throw new Declined('bad-request', 'The interval of a fit needs two different ends, the smaller one first.');
  const relative = problem.measure !== 'absolute';
  const target = prepareTarget(problem.function, problem.variable, low, high, relative, WORKING_BITS, budget);
  const search: Search = { target, relative, low: Q.subtract(low, target.zero), high: Q.subtract(high, target.zero), basis: basisFor(target, low, high, problem.basis) };
  if (problem.degree !== undefined) {
    const found = bestOfDegree(search, Math.max(problem.degree, leastDegree(search)), budget);
    if (!found) throw new Declined('undecided', 'No best polynomial of this degree was found on this interval; take a smaller interval or another degree.');
    return proved(problem, target, search, found, budget);
  }
  const goal = relativeGoal(problem);
  let found = leastWithin(search, goalOf(goal, WORKING_BITS), budget);
  if (!found) throw new Declined('bad-request', 'No polynomial of degree up to 120 keeps this tolerance; take a smaller interval or a larger tolerance.');
  let best: PolynomialFit | null = null;
  // The least degree for the approximation alone may lose the tolerance to rounding: then the next ones are tried while that can help.
  for (let tries = 0; tries < 4; tries += 1) {
    const candidate = proved(problem, target, search, found, budget);
    if (Q.compare(candidate.error.total, problem.tolerance ?? Q.ZERO) <= 0) return candidate;
    if (!best || Q.compare(candidate.error.total, best.error.total) < 0) best = candidate;
    if (Q.compare(candidate.error.evaluation, problem.tolerance ?? Q.ZERO) >= 0) break;
    const more: Found | null = bestOfDegree(search, nextDegree(search, found.degree), budget);
    if (!more) break;
    found = more;
  }
  throw new Declined('bad-request', `Rounding in ${format.name} alone takes this tolerance away: the best proven error is ${Q.toDouble(best?.error.total ?? Q.ONE).toExponential(2)}; allow a larger tolerance or a wider format.`);
}

/** The tolerance as a bound for the weighted error of the search. One ulp of y is at least 2^-p |y|. */
function relativeGoal({ tolerance = Q.ZERO, measure, format }: FitProblem): Rational {
  return measure === 'ulp' ? Q.multiply(tolerance, powerOfTwo(-format.precision)) : tolerance;
}

const shiftBy = (coefficients: readonly Rational[], powers: readonly number[], order: number): PolynomialTerm[] => coefficients.map((value, k) => ({ power: (powers[k] ?? 0) + order, value }));

function proved(problem: FitProblem, target: FitTarget, search: Search, found: Found, budget: Budget): PolynomialFit {
  const { format, variable, low, high } = problem;
  const rounded: RoundedCoefficients | null = roundCoefficients(found.result.coefficients, found.problem, found.result.reference, format, budget);
  if (!rounded) throw new Declined('bad-request', `A coefficient is beyond the range of ${format.name}; take another format or interval.`);
  const unrounded = shiftBy(
    found.result.coefficients.map((c) => fromFixed(c, found.problem.bits)),
    found.problem.powers,
    target.order,
  );
  const terms = shiftBy(rounded.values, found.problem.powers, target.order);
  const x = build.symbol(variable);
  const argument = Q.isZero(target.zero) ? x : build.sum(x, build.number(Q.negate(target.zero)));
  const tree = polynomialTree(terms, argument, { form: problem.form, fma: problem.fma });
  const relative = problem.measure !== 'absolute';
  const cancelled = Math.max(8, -Math.log2(Math.max(Number.MIN_VALUE, Q.toDouble(errorOf(found)))));
  const through = relative || target.order > 0 || (Q.compare(low, target.zero) <= 0 && Q.compare(target.zero, high) <= 0) ? target.zero : undefined;
  const certify = (list: readonly PolynomialTerm[]) => {
    // A function and a polynomial of one parity have the same error on both sides.
    const half = search.basis !== 'all' && target.parity === search.basis && Q.equal(low, Q.negate(high));
    const result = boundDifference({ function: problem.function, approximation: polynomialOf(list, variable, target.zero), variable, low: half ? Q.ZERO : low, high, measure: relative ? 'relative' : 'absolute', ...(through ? { through } : {}), cancelled, budget });
    if (!result.ok) throw new Declined(result.error.code, result.error.message);
    return result.value;
  };
  const ideal = certify(unrounded);
  const actual = certify(terms);
  const evaluation = evaluationBound(tree, variable, low, high, target.zero, format, budget);
  const rounding = Q.subtract(actual.upper, ideal.upper);
  const shared = { target, terms, unrounded, degree: found.degree, basis: search.basis, tree, pieces: ideal.pieces + actual.pieces };
  const nonNegative = (q: Rational): Rational => (q.num < 0n ? Q.ZERO : q);
  if (!relative) {
    const spent = Q.fromDouble(evaluation.absolute);
    return { ...shared, error: { approximation: ideal.upper, rounding: nonNegative(rounding), evaluation: spent, total: Q.add(actual.upper, spent), lower: actual.lower } };
  }
  if (!Number.isFinite(evaluation.relative)) throw new Declined('undecided', 'The rounding error relative to the function could not be bounded; ask for the absolute measure.');
  // |computed - f| <= |p - f| + e |p| <= (a + e (1 + a)) |f|.
  const spent = Q.multiply(Q.fromDouble(evaluation.relative), Q.add(Q.ONE, actual.upper));
  const scale = problem.measure === 'ulp' ? powerOfTwo(format.precision) : Q.ONE;
  const inMeasure = (q: Rational): Rational => Q.multiply(q, scale);
  return {
    ...shared,
    error: { approximation: inMeasure(ideal.upper), rounding: inMeasure(nonNegative(rounding)), evaluation: inMeasure(spent), total: inMeasure(Q.add(actual.upper, spent)), lower: problem.measure === 'ulp' ? Q.multiply(actual.lower, powerOfTwo(format.precision - 1)) : actual.lower },
  };
}
