/** Rational functions for a machine: numerator and denominator in floats, the whole error proved for the program that evaluates their quotient. */
import { polynomialOf } from '../bound/index.ts';
import { build, Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import type { PolynomialTerm } from '../write/index.ts';
import { fromFixed } from './fixed.ts';
import { powerOfTwo, roundTo } from './format.ts';
import type { PolynomialProblem } from './polynomialFit.ts';
import { type Arithmetic, polynomialProgram, type Program } from './program.ts';
import { certified, errorParts, type ProofProblem, type ProvedError, proveProgram } from './proof.ts';
import { bestRational, type RationalApproximation } from './rational.ts';
import { basisFor, gridFor, leastDegree, powersOf, type Search } from './search.ts';
import { prepareTarget } from './target.ts';

export interface RationalFit {
  readonly numerator: readonly PolynomialTerm[];
  readonly denominator: readonly PolynomialTerm[];
  /** The larger of both degrees. */
  readonly degree: number;
  readonly centre: Rational;
  readonly program: Program;
  readonly writtenProgram: Program;
  readonly error: ProvedError;
}

const WORKING_BITS = 320;
const MOST_COEFFICIENTS = 24;

/**
 * With a degree d the free coefficients are those of a polynomial of that degree, shared evenly between numerator and denominator (the latter begins with one);
 * with a tolerance their least number is searched. Throws Declined like fitPolynomial.
 */
export function fitRational(problem: PolynomialProblem, budget: Budget): RationalFit {
  const { low, high, format, variable, measure } = problem;
  const relative = measure !== 'absolute';
  const target = prepareTarget(problem.function, variable, low, high, relative, WORKING_BITS, budget);
  const search: Search = { target, relative, low: Q.subtract(low, target.zero), high: Q.subtract(high, target.zero), basis: basisFor(target, low, high, problem.basis) };
  const stride = search.basis === 'all' ? 1 : 2;
  const first = leastDegree(search) - target.order;
  const arithmetic: Arithmetic = { operations: problem.operations ?? format, result: format };
  const symmetric = search.basis !== 'all' && target.parity === search.basis && Q.equal(low, Q.negate(high)) && Q.isZero(target.zero);
  const inside = Q.compare(low, target.zero) <= 0 && Q.compare(target.zero, high) <= 0;
  const proof: ProofProblem = { function: problem.function, variable, low, high, measure, arithmetic, centre: target.zero, through: inside, symmetric };
  const shapeOf = (count: number): { readonly top: readonly number[]; readonly bottom: readonly number[] } => {
    const bottom = Math.floor(count / 2);
    return { top: Array.from({ length: count - bottom }, (_, k) => first + k * stride), bottom: Array.from({ length: bottom + 1 }, (_, k) => k * stride) };
  };
  const search1 = (count: number): RationalApproximation | null => {
    const { top, bottom } = shapeOf(count);
    return bestRational(gridFor(search, stride * (count + 2), budget), top, bottom, budget);
  };
  const prove = (count: number, found: RationalApproximation): RationalFit => {
    const { top, bottom } = shapeOf(count);
    const { bits } = target;
    const terms = (coefficients: readonly Rational[], powers: readonly number[], order: number): PolynomialTerm[] => coefficients.map((value, k) => ({ power: (powers[k] ?? 0) + order, value }));
    const exact = { top: found.numerator.map((c) => fromFixed(c, bits)), bottom: found.denominator.map((c) => fromFixed(c, bits)) };
    const rounded = (list: readonly Rational[]): Rational[] =>
      list.map((c) => {
        const value = roundTo(c, format);
        if (!value) throw new Declined('bad-request', `A coefficient is beyond the range of ${format.name}; take another format or interval.`);
        return value;
      });
    const [numerator, denominator] = [terms(rounded(exact.top), top, target.order), terms(rounded(exact.bottom), bottom, 0)];
    const quotient = (a: readonly PolynomialTerm[], b: readonly PolynomialTerm[]) => build.quotient(polynomialOf(a, variable, target.zero), polynomialOf(b, variable, target.zero));
    const ideal = certified(quotient(terms(exact.top, top, target.order), terms(exact.bottom, bottom, 0)), proof, budget);
    const actual = certified(quotient(numerator, denominator), proof, budget);
    const programOf = (fma: boolean): Program => {
      const shape = { form: problem.form, fma, leadingApart: false };
      const [above, below] = [polynomialProgram(numerator, variable, target.zero, shape), polynomialProgram(denominator, variable, target.zero, shape)];
      const known = new Set(above.steps.map((s) => s.name));
      return { steps: [...above.steps, ...below.steps.filter((s) => !known.has(s.name))], result: build.quotient(above.result, below.result) };
    };
    const program = programOf(problem.fma);
    const total = proveProgram(program, actual, proof, budget);
    const degree = Math.max(...numerator.map((t) => t.power), ...denominator.map((t) => t.power));
    return { numerator, denominator, degree, centre: target.zero, program, writtenProgram: problem.fma === problem.writtenFma ? program : programOf(problem.writtenFma), error: errorParts(total, actual, ideal, proof, budget) };
  };
  if (problem.degree !== undefined) {
    const count = Math.max(2, powersOf(search, problem.degree).length);
    const found = search1(count);
    if (!found) throw new Declined('undecided', 'No best rational function of this degree was found on this interval; take another degree or the method minimax.');
    return prove(count, found);
  }
  const tolerance = problem.tolerance ?? Q.ZERO;
  const goal = measure === 'ulp' ? Q.multiply(tolerance, powerOfTwo(1 - format.precision)) : tolerance;
  let tries = 0;
  let reached: Rational | null = null;
  for (let count = 2; count <= MOST_COEFFICIENTS && tries < 3; count += 1) {
    const found = search1(count);
    if (!found || Q.compare(found.largest, goal) > 0) continue;
    tries += 1;
    const fit = prove(count, found);
    if (Q.compare(fit.error.total, tolerance) <= 0) return fit;
    if (!reached || Q.compare(fit.error.total, reached) < 0) reached = fit.error.total;
  }
  if (reached) throw new Declined('bad-request', `Rounding in ${format.name} takes this tolerance away: the smallest proven error is ${Q.toDouble(reached).toExponential(2)}; allow a larger tolerance or a wider format.`);
  throw new Declined('bad-request', `No rational function with up to ${MOST_COEFFICIENTS} coefficients keeps this tolerance; take a smaller interval or a larger tolerance.`);
}
