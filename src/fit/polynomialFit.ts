/** A polynomial for a machine: searched, its coefficients rounded together, its whole error proved for the program that evaluates it. */
import { type Expression, Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import type { PolynomialTerm } from '../write/index.ts';
import { type RoundedCoefficients, roundCoefficients } from './coefficients.ts';
import { level } from './exchange.ts';
import { fromFixed } from './fixed.ts';
import { binaryExponent, type FloatFormat, isRepresentable, powerOfTwo, roundTo } from './format.ts';
import { shiftedResidual } from './grid.ts';
import { type Arithmetic, canStandApart, polynomialProgram, type Program, twoWordProgram } from './program.ts';
import { certifiedBeside, certifiedTerms, type CertifiedPolynomial, errorParts, type EvaluationProof, type FitMeasure, type InheritedError, type ProofProblem, type ProvedError, proveProgram } from './proof.ts';
import { type Basis, basisFor, bestOfDegree, errorOf, type Found, leastDegree, leastWithin, MOST_DEGREE, nextDegree, type Search } from './search.ts';
import { type FitTarget, prepareKept, prepareTarget } from './target.ts';
import { economizedOfDegree, taylorOfDegree, taylorWithin } from './truncated.ts';

export interface PolynomialProblem {
  readonly function: Expression;
  readonly variable: string;
  /** Rational ends: the caller rounds exact ends outward. */
  readonly low: Rational;
  readonly high: Rational;
  readonly measure: FitMeasure;
  /** Exactly one of the two; a tolerance is in the measure. */
  readonly tolerance?: Rational;
  readonly degree?: number;
  /** Format of the coefficients and of the result. */
  readonly format: FloatFormat;
  /** Format in which the target language computes, where it is a wider one. */
  readonly operations?: FloatFormat;
  readonly form: 'horner' | 'estrin';
  /** Every multiply-add is one operation with one rounding. */
  readonly fma: boolean;
  /** The code calls the language's multiply-add, which may still round twice. */
  readonly writtenFma: boolean;
  readonly basis?: Basis;
  /** Floats that the leading coefficient is the sum of; absent: two where the tolerance is not kept with one. */
  readonly words?: 1 | 2;
  /** Leading coefficients of the expansion at 0 that are kept as they are. */
  readonly exact?: number;
  readonly method: 'minimax' | 'taylor' | 'economized';
  /** What an error of the argument has changed the function by before the polynomial is evaluated. */
  readonly inherited?: InheritedError;
}

export interface PolynomialFit {
  readonly target: FitTarget;
  /** In u = x - centre, lowest power first, floats of the format. */
  readonly terms: readonly PolynomialTerm[];
  readonly unrounded: readonly PolynomialTerm[];
  readonly degree: number;
  readonly basis: Basis;
  readonly centre: Rational;
  /** What was proved. */
  readonly program: Program;
  /** The same operations with the language's multiply-add. */
  readonly writtenProgram: Program;
  readonly error: ProvedError;
  /** sup |p - f| in the absolute measure, else sup |p - f| / |f|: a proven upper bound, evaluation not included. */
  readonly certified: Rational;
}

const WORKING_BITS = 320;

/** Throws Declined with bad-request (parameters, zeros, singular points), undecided (nothing could be proved), over-budget. */
export function fitPolynomial(problem: PolynomialProblem, budget: Budget): PolynomialFit {
  const { low, high, format, method } = problem;
  if (Q.compare(low, high) >= 0) throw new Declined('bad-request', 'The interval of a fit needs two different ends, the smaller one first.');
  const atZero = Q.compare(low, Q.ZERO) <= 0 && Q.compare(Q.ZERO, high) <= 0;
  const middle = roundTo(Q.divide(Q.add(low, high), Q.rational(2)), format) ?? Q.ZERO;
  if (problem.exact) return about(Q.ZERO, problem, budget);
  if (method === 'taylor' && !atZero) return about(middle, problem, budget);
  try {
    const plain = about(Q.ZERO, problem, budget);
    const { evaluation, rounding, total } = plain.error;
    if (atZero || problem.tolerance || !Q.isZero(plain.centre) || Q.compare(Q.multiply(Q.add(evaluation, rounding), Q.rational(2)), total) <= 0) return plain;
    // Rounding dominates: about the middle the powers of x are smaller.
    try {
      const shifted = about(middle, problem, budget);
      return Q.compare(Q.multiply(shifted.error.total, Q.rational(3, 2)), total) < 0 ? shifted : plain;
    } catch {
      return plain;
    }
  } catch (error) {
    // Far from zero the powers of x cancel: about the middle they do not, where x - middle is exact.
    if (atZero || !(error instanceof Declined) || error.failure.code === 'over-budget' || error.failure.code === 'needs-assumption') throw error;
    try {
      return about(middle, problem, budget);
    } catch {
      throw error;
    }
  }
}

function about(centre: Rational, problem: PolynomialProblem, budget: Budget): PolynomialFit {
  const { low, high, format, method } = problem;
  const relative = problem.measure !== 'absolute';
  const target = problem.exact ? keptTarget(problem, problem.exact, budget) : prepareTarget(problem.function, problem.variable, low, high, relative, WORKING_BITS, budget, centre);
  const search: Search = { target, relative, low: Q.subtract(low, target.zero), high: Q.subtract(high, target.zero), basis: basisFor(target, low, high, problem.basis) };
  const setting: Setting = { problem, search, proof: proofProblem(problem, search) };
  if (problem.degree !== undefined) {
    const degree = Math.max(problem.degree, leastDegree(search));
    if (method === 'minimax' && degree > MODERATE_DEGREE) requireUse(search, degree, problem, budget);
    const found = method === 'taylor' ? taylorOfDegree(search, degree, budget) : method === 'economized' ? economizedOfDegree(search, degree, budget) : bestOfDegree(search, degree, budget);
    if (!found) throw new Declined('undecided', 'No best polynomial of this degree was found on this interval; take a smaller interval or another degree.');
    return finished(setting, candidate(setting, found, budget), budget);
  }
  const tolerance = problem.tolerance ?? Q.ZERO;
  const goal = relativeGoal(problem);
  let found: Found | null = method === 'taylor' ? taylorWithin(search, goal, 0, budget) : leastWithin(search, goal, budget);
  if (!found) throw new Declined('bad-request', 'No polynomial of degree up to 160 keeps this tolerance: the interval is too wide for it, or the function has a corner or a singular point there; take a smaller interval or a larger tolerance.');
  if (method === 'economized') found = economizedOfDegree(search, found.degree, budget);
  let best: Candidate | null = null;
  // The least degree for the approximation alone may lose the tolerance to rounding: then the next ones are tried while that can help.
  for (let tries = 0; tries < 4; tries += 1) {
    const next = candidate(setting, found, budget);
    if (Q.compare(next.proof.total, tolerance) <= 0) return finished(setting, next, budget);
    if (!best || Q.compare(next.proof.total, best.proof.total) < 0) best = next;
    if (Q.compare(next.proof.evaluation, tolerance) >= 0) break;
    const degree = nextDegree(search, found.degree);
    const more: Found | null = method === 'taylor' ? taylorOfDegree(search, degree, budget) : method === 'economized' ? economizedOfDegree(search, degree, budget) : bestOfDegree(search, degree, budget);
    if (!more) break;
    found = more;
  }
  const reached = Q.toDouble(best?.proof.total ?? Q.ONE).toExponential(2);
  throw new Declined('bad-request', `Rounding in ${format.name} takes this tolerance away: the smallest proven error is ${reached}; allow a larger tolerance or a wider format.`);
}

/** Degrees above it are asked whether the format has any use for them. */
const MODERATE_DEGREE = 24;

/** Declines a degree whose last terms are nothing beside the rounding of the first ones, or beyond what is fitted. */
function requireUse(search: Search, degree: number, { format, measure }: PolynomialProblem, budget: Budget): void {
  const lowest = measure === 'absolute' ? bestOfDegree(search, leastDegree(search), budget) : null;
  const scale = lowest ? errorOf(lowest) : Q.ONE;
  const enough = leastWithin(search, Q.multiply(scale, powerOfTwo(-2 * format.precision)), budget);
  if (enough && enough.degree < degree) throw new Declined('bad-request', `Degree ${enough.degree} is already far below what ${format.name} can resolve on this interval; ask for that degree or less.`);
  if (degree > MOST_DEGREE) throw new Declined('bad-request', `Polynomials are fitted up to degree ${MOST_DEGREE}; split the interval or ask for a lower degree.`);
}

function keptTarget(problem: PolynomialProblem, count: number, budget: Budget): FitTarget {
  if (problem.method !== 'minimax') throw new Declined('bad-request', 'Leading coefficients are kept by the method minimax; truncated expansions keep all of them anyway.');
  const { low, high, format } = problem;
  return prepareKept(problem.function, problem.variable, low, high, count, (q) => isRepresentable(q, format), WORKING_BITS, budget);
}

interface Setting {
  readonly problem: PolynomialProblem;
  readonly search: Search;
  readonly proof: ProofProblem;
}

/** One ulp of y is between 2^-p |y| and 2^(1-p) |y|: a relative error of half the tolerance in ulp may do, twice as much never does. */
function relativeGoal({ tolerance = Q.ZERO, measure, format }: PolynomialProblem): Rational {
  return measure === 'ulp' ? Q.multiply(tolerance, powerOfTwo(1 - format.precision)) : tolerance;
}

function proofProblem(problem: PolynomialProblem, { target, basis }: Search): ProofProblem {
  const { low, high } = problem;
  const arithmetic: Arithmetic = { operations: problem.operations ?? problem.format, result: problem.format };
  const symmetric = basis !== 'all' && target.parity === basis && Q.equal(low, Q.negate(high)) && Q.isZero(target.zero);
  const inside = Q.compare(low, target.zero) <= 0 && Q.compare(target.zero, high) <= 0;
  return { function: problem.function, variable: problem.variable, low, high, measure: problem.measure, arithmetic, centre: target.zero, through: inside, symmetric, ...(problem.inherited ? { inherited: problem.inherited } : {}) };
}

interface Candidate {
  readonly found: Found;
  readonly terms: readonly PolynomialTerm[];
  readonly polynomial: CertifiedPolynomial;
  readonly program: Program;
  readonly writtenProgram: Program;
  readonly proof: EvaluationProof;
}

const shiftBy = (coefficients: readonly Rational[], { powers }: { readonly powers: readonly number[] }, order: number): PolynomialTerm[] =>
  coefficients.map((value, k) => ({ power: (powers[k] ?? 0) + order, value }));

/** Rounds the coefficients, certifies the polynomial and takes the program with the smaller proven error. */
function candidate(setting: Setting, found: Found, budget: Budget): Candidate {
  const { problem } = setting;
  if (problem.words === 2) {
    const two = doublyLed(setting, found, budget);
    if (!two) throw new Declined('bad-request', 'The leading coefficient of this polynomial is a float already, or cannot be split in two words; leave words out.');
    return withTwoWords(setting, found, two, null, budget);
  }
  const plain = bestProgram(setting, found, roundedTerms(setting, found, budget), null, budget);
  const enough = problem.tolerance && Q.compare(plain.proof.total, problem.tolerance) <= 0;
  // Where rounding dominates, leading coefficients that multiply exactly can save most of it at a small cost in approximation.
  if (enough || problem.method === 'taylor' || (problem.measure !== 'ulp' && Q.compare(plain.proof.evaluation, plain.polynomial.whole.upper) < 0)) return plain;
  const apart = exactlyLed(setting, found, budget);
  const best = apart && !apart.every((t, k) => Q.equal(t.value, plain.terms[k]?.value ?? Q.ZERO)) ? bestProgram(setting, found, apart, plain, budget) : plain;
  if (problem.words === 1 || (!problem.tolerance || problem.measure === 'absolute' || Q.compare(best.proof.total, problem.tolerance) <= 0)) return best;
  const two = doublyLed(setting, found, budget);
  return two ? withTwoWords(setting, found, two, best, budget) : best;
}

function roundedTerms({ problem, search }: Setting, found: Found, budget: Budget): readonly PolynomialTerm[] {
  const { format, method } = problem;
  const rounded: RoundedCoefficients | null = roundCoefficients(found, format, method === 'taylor', budget);
  if (!rounded) throw new Declined('bad-request', `A coefficient is beyond the range of ${format.name}; take another format or interval.`);
  return [...search.target.kept, ...shiftBy(rounded.values, found.problem, search.target.order)];
}

/** The polynomial with its first coefficient rounded and the next one a power of two, the others fitted again; null where that does not apply or settle. */
function exactlyLed({ problem, search }: Setting, { problem: { grid, powers }, result }: Found, budget: Budget): readonly PolynomialTerm[] | null {
  const { order, kept } = search.target;
  if (kept.length > 0) return null;
  const power = (k: number): number => (powers[k] ?? 0) + order;
  const lead = power(0) === 0 ? 1 : 0;
  if (power(lead) > 2 || power(lead) !== (lead === 1 ? power(1) : 1) || powers.length <= lead + 1) return null;
  const exact = result.coefficients.map((c) => fromFixed(c, grid.bits));
  const value = exact[lead] ?? Q.ZERO;
  if (Q.isZero(value)) return null;
  const exponent = binaryExponent(Q.multiply(Q.absolute(value), Q.rational(3, 2)));
  const near = Q.multiply(powerOfTwo(exponent), Q.rational(Q.signOf(value)));
  if (Q.compare(Q.absolute(Q.subtract(near, value)), Q.multiply(Q.absolute(value), Q.rational(1, 1000))) > 0) return null;
  const first = lead === 1 ? roundTo(exact[0] ?? Q.ZERO, problem.format) : null;
  if (lead === 1 && !first) return null;
  return withFixed(problem, { problem: { grid, powers }, result, degree: 0 }, first ? [first, near] : [near], order, budget);
}

/** The first coefficients as given, the rest fitted and rounded against what these leave of the function; null where that does not settle. */
function withFixed({ format }: PolynomialProblem, { problem: { grid, powers }, result }: Found, fixed: readonly Rational[], order: number, budget: Budget): readonly PolynomialTerm[] | null {
  const residual = fixed.reduce((r, v, k) => shiftedResidual(r, grid, powers[k] ?? 0, Q.subtract(v, fromFixed(result.coefficients[k] ?? 0n, grid.bits))), result.residual);
  const rest = level(grid, powers.slice(fixed.length), result.coefficients.slice(fixed.length), residual, budget);
  if (!rest) return null;
  const remaining: Found = { problem: { grid, powers: powers.slice(fixed.length) }, result: rest, degree: 0 };
  const rounded = roundCoefficients(remaining, format, false, budget);
  return rounded && shiftBy([...fixed, ...rounded.values], { powers }, order);
}

/** The leading coefficient as the sum of two floats, two terms of one power; null where it is one float or the rest does not settle. */
function doublyLed({ problem, search }: Setting, { problem: { grid, powers }, result }: Found, budget: Budget): readonly PolynomialTerm[] | null {
  const { order, kept } = search.target;
  const [first] = result.coefficients;
  if (kept.length > 0 || first === undefined || powers.length < 2) return null;
  const value = fromFixed(first, grid.bits);
  const high = roundTo(value, problem.format);
  const low = high && roundTo(Q.subtract(value, high), problem.format);
  if (!high || !low || Q.isZero(low) || Q.isZero(high)) return null;
  const terms = withFixed(problem, { problem: { grid, powers }, result, degree: 0 }, [Q.add(high, low)], order, budget);
  const [lead, ...rest] = terms ?? [];
  return lead ? [{ power: lead.power, value: high }, { power: lead.power, value: low }, ...rest] : null;
}

function withTwoWords({ problem, search, proof }: Setting, found: Found, terms: readonly PolynomialTerm[], known: Candidate | null, budget: Budget): Candidate {
  const { variable, form, fma, writtenFma } = problem;
  const { zero } = search.target;
  const polynomial = certifiedTerms(terms, proof, budget);
  const program = twoWordProgram(terms, variable, zero, { form, fma });
  const next: Candidate = { found, terms, polynomial, program, writtenProgram: twoWordProgram(terms, variable, zero, { form, fma: writtenFma }), proof: proveProgram(program, polynomial, proof, budget) };
  return known && Q.compare(known.proof.total, next.proof.total) <= 0 ? known : next;
}

function bestProgram({ problem, search, proof }: Setting, found: Found, terms: readonly PolynomialTerm[], known: Candidate | null, budget: Budget): Candidate {
  const { variable, form, fma } = problem;
  const { zero } = search.target;
  const polynomial = certifiedTerms(terms, proof, budget);
  let best = known;
  const apart = canStandApart(terms);
  // In ulp the last roundings decide: a leading term that is exact and added last is always the better one there.
  for (const leadingApart of apart ? (problem.measure === 'ulp' ? [true] : [false, true]) : [false]) {
    const program = polynomialProgram(terms, variable, zero, { form, fma, leadingApart });
    const writtenProgram = problem.writtenFma === fma ? program : polynomialProgram(terms, variable, zero, { form, fma: problem.writtenFma, leadingApart });
    const next = { found, terms, polynomial, program, writtenProgram, proof: proveProgram(program, polynomial, proof, budget) };
    // One more operation is only worth a smaller error.
    if (!best || Q.compare(Q.multiply(next.proof.total, Q.rational(102, 100)), best.proof.total) < 0) best = next;
  }
  if (!best) throw new RangeError('no program was tried');
  return best;
}

function finished({ search, proof }: Setting, { found, terms, polynomial, program, writtenProgram, proof: total }: Candidate, budget: Budget): PolynomialFit {
  const { target, basis } = search;
  const unrounded = [...target.kept, ...shiftBy(
    found.result.coefficients.map((c) => fromFixed(c, found.problem.grid.bits)),
    found.problem,
    target.order,
  )];
  const ideal = certifiedBeside(unrounded, { terms, polynomial }, proof, budget);
  return { target, terms, unrounded, degree: found.degree, basis, centre: target.zero, program, writtenProgram, error: errorParts(total, polynomial, ideal, proof, budget), certified: polynomial.whole.upper };
}
