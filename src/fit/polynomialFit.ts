/** A polynomial for a machine: searched, its coefficients rounded together, its whole error proved for the program that evaluates it. */
import { type Expression, Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import type { PolynomialTerm } from '../write/index.ts';
import { type RoundedCoefficients, roundCoefficients } from './coefficients.ts';
import { fromFixed } from './fixed.ts';
import { type FloatFormat, powerOfTwo } from './format.ts';
import { type Arithmetic, polynomialProgram, type Program } from './program.ts';
import { certified, type CertifiedPolynomial, errorParts, type EvaluationProof, type FitMeasure, type ProofProblem, type ProvedError, proveProgram } from './proof.ts';
import { type Basis, basisFor, bestOfDegree, type Found, leastDegree, leastWithin, nextDegree, type Search } from './search.ts';
import { type FitTarget, prepareTarget } from './target.ts';

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
  readonly method: 'minimax' | 'taylor' | 'economized';
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
}

const WORKING_BITS = 320;

/** Throws Declined with bad-request (parameters, zeros, singular points), undecided (nothing could be proved), over-budget. */
export function fitPolynomial(problem: PolynomialProblem, budget: Budget): PolynomialFit {
  const { low, high, format } = problem;
  if (Q.compare(low, high) >= 0) throw new Declined('bad-request', 'The interval of a fit needs two different ends, the smaller one first.');
  const relative = problem.measure !== 'absolute';
  const target = prepareTarget(problem.function, problem.variable, low, high, relative, WORKING_BITS, budget);
  const search: Search = { target, relative, low: Q.subtract(low, target.zero), high: Q.subtract(high, target.zero), basis: basisFor(target, low, high, problem.basis) };
  const setting: Setting = { problem, search, proof: proofProblem(problem, search) };
  if (problem.degree !== undefined) {
    const found = bestOfDegree(search, Math.max(problem.degree, leastDegree(search)), budget);
    if (!found) throw new Declined('undecided', 'No best polynomial of this degree was found on this interval; take a smaller interval or another degree.');
    return finished(setting, candidate(setting, found, budget), budget);
  }
  const tolerance = problem.tolerance ?? Q.ZERO;
  let found = leastWithin(search, relativeGoal(problem), budget);
  if (!found) throw new Declined('bad-request', 'No polynomial of degree up to 120 keeps this tolerance; take a smaller interval or a larger tolerance.');
  let best: Candidate | null = null;
  // The least degree for the approximation alone may lose the tolerance to rounding: then the next ones are tried while that can help.
  for (let tries = 0; tries < 4; tries += 1) {
    const next = candidate(setting, found, budget);
    if (Q.compare(next.proof.total, tolerance) <= 0) return finished(setting, next, budget);
    if (!best || Q.compare(next.proof.total, best.proof.total) < 0) best = next;
    if (Q.compare(next.proof.evaluation, tolerance) >= 0) break;
    const more: Found | null = bestOfDegree(search, nextDegree(search, found.degree), budget);
    if (!more) break;
    found = more;
  }
  const reached = Q.toDouble(best?.proof.total ?? Q.ONE).toExponential(2);
  throw new Declined('bad-request', `Rounding in ${format.name} alone takes this tolerance away: the best proven error is ${reached}; allow a larger tolerance or a wider format.`);
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
  return { function: problem.function, variable: problem.variable, low, high, measure: problem.measure, arithmetic, centre: target.zero, through: inside, symmetric };
}

interface Candidate {
  readonly found: Found;
  readonly polynomial: CertifiedPolynomial;
  readonly program: Program;
  readonly writtenProgram: Program;
  readonly proof: EvaluationProof;
}

const shiftBy = (coefficients: readonly Rational[], { powers }: { readonly powers: readonly number[] }, order: number): PolynomialTerm[] =>
  coefficients.map((value, k) => ({ power: (powers[k] ?? 0) + order, value }));

/** Rounds the coefficients, certifies the polynomial and takes the program with the smaller proven error. */
function candidate({ problem, search, proof }: Setting, found: Found, budget: Budget): Candidate {
  const { format, variable, form, fma } = problem;
  const { order, zero } = search.target;
  const rounded: RoundedCoefficients | null = roundCoefficients(found, format, budget);
  if (!rounded) throw new Declined('bad-request', `A coefficient is beyond the range of ${format.name}; take another format or interval.`);
  const polynomial = certified(shiftBy(rounded.values, found.problem, order), proof, budget);
  let best: Candidate | null = null;
  for (const leadingApart of order === 1 ? [false, true] : [false]) {
    const program = polynomialProgram(polynomial.terms, variable, zero, { form, fma, leadingApart });
    const writtenProgram = problem.writtenFma === fma ? program : polynomialProgram(polynomial.terms, variable, zero, { form, fma: problem.writtenFma, leadingApart });
    const next = { found, polynomial, program, writtenProgram, proof: proveProgram(program, polynomial, proof, budget) };
    if (!best || Q.compare(next.proof.total, best.proof.total) < 0) best = next;
  }
  if (!best) throw new RangeError('no program was tried');
  return best;
}

function finished({ search, proof }: Setting, { found, polynomial, program, writtenProgram, proof: total }: Candidate, budget: Budget): PolynomialFit {
  const { target, basis } = search;
  const unrounded = shiftBy(
    found.result.coefficients.map((c) => fromFixed(c, found.problem.grid.bits)),
    found.problem,
    target.order,
  );
  const ideal = certified(unrounded, proof, budget);
  return { target, terms: polynomial.terms, unrounded, degree: found.degree, basis, centre: target.zero, program, writtenProgram, error: errorParts(total, polynomial, ideal, proof, budget) };
}
