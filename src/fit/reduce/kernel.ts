/** What the reductions share: the polynomial on the small interval, its statements, and how errors of a sum with it add up. */
import { build, type Expression, Q, type Rational } from '../../expression/index.ts';
import { describe } from '../../functions/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { encloseReal, real } from '../../rigorous/index.ts';
import type { LanguageRow, Statement } from '../../write/index.ts';
import { binaryExponent, type FloatFormat, largestFinite, powerOfTwo, ulp } from '../format.ts';
import { fitPolynomial, type PolynomialFit, type PolynomialProblem } from '../polynomialFit.ts';
import type { Arithmetic, Program } from '../program.ts';
import type { FitMeasure, InheritedError, ProvedError } from '../proof.ts';
import { halfUlp } from './parts.ts';

export interface ReductionProblem {
  /** The request on the whole interval; `variable` is what its function is written in. */
  readonly whole: PolynomialProblem;
  readonly row: LanguageRow;
  /** Name of the variable in the code. */
  readonly parameter: string;
}

export interface Kernel {
  /** The polynomial stands for this function of r. */
  readonly function: Expression;
  readonly found: PolynomialFit;
  readonly low: Rational;
  readonly high: Rational;
}

export interface Reduced {
  readonly kernels: readonly Kernel[];
  readonly body: readonly Statement[];
  readonly error: ProvedError;
  /** How, as one line: `x = k ln 2 + r, ...`. */
  readonly method: string;
}

/** The reduced argument in polynomials and code. */
export const REDUCED = 'r';
/** Names that the code of a reduction uses itself. */
export const LOCALS: readonly string[] = ['r', 'k', 'q', 'e', 'm', 'n', 'a', 'b', 'h', 'l', 's', 'w', 'y', 'v', 'u', 'uu', 'p', 't', 'c', 'd', 'g'];

export const arithmeticOf = ({ operations, format }: PolynomialProblem): Arithmetic => ({ operations: operations ?? format, result: format });

export interface KernelProblem {
  /** In REDUCED. */
  readonly function: Expression;
  readonly low: Rational;
  readonly high: Rational;
  readonly measure: FitMeasure;
  readonly tolerance?: Rational;
  readonly inherited?: InheritedError;
}

/** The degree asked for is that of the kernel. */
export function fitKernel({ whole }: ReductionProblem, kernel: KernelProblem, budget: Budget): Kernel {
  const { tolerance, degree, basis: _, ...rest } = whole;
  const goal = kernel.tolerance ? { tolerance: kernel.tolerance } : degree === undefined ? {} : { degree };
  if (kernel.tolerance && Q.signOf(kernel.tolerance) <= 0) throw tooSmall(whole, tolerance ?? Q.ZERO);
  const asked: PolynomialProblem = { ...rest, ...goal, variable: REDUCED, function: kernel.function, low: kernel.low, high: kernel.high, measure: kernel.measure, ...(kernel.inherited ? { inherited: kernel.inherited } : {}) };
  return { function: kernel.function, found: kernel.tolerance ? kept(asked, whole, tolerance ?? Q.ZERO, budget) : fitPolynomial(asked, budget), low: kernel.low, high: kernel.high };
}

/** A polynomial that cannot keep its share of the tolerance is declined in terms of the whole. */
function kept(asked: PolynomialProblem, whole: PolynomialProblem, tolerance: Rational, budget: Budget): PolynomialFit {
  try {
    return fitPolynomial(asked, budget);
  } catch (error) {
    if (error instanceof Declined && error.failure.code === 'bad-request') throw tooSmall(whole, tolerance);
    throw error;
  }
}

export const tooSmall = ({ format }: PolynomialProblem, tolerance: Rational): Declined =>
  new Declined('bad-request', `Rounding in ${format.name} takes the tolerance ${Q.toDouble(tolerance).toExponential(2)} away when the argument is reduced; allow a larger tolerance or a wider format.`);

/**
 * A kernel whose values are so small that its relative error is not kept would carry that through the scaling. `size` is the least of its values, or the largest
 * where it has a zero: far above the subnormal numbers, a relative error of the largest value covers what is lost beside the zero.
 */
export function requireSolid({ found }: Kernel, size: Rational, { emin, precision, name }: FloatFormat): void {
  if (found.error.subnormal && Q.compare(size, powerOfTwo(emin + 3 * precision)) < 0) throw new Declined('bad-request', `The values of this function on the reduced interval come near the smallest ${name} numbers; take a constant factor out or a wider format.`);
}

/** Steps and value of a kernel whose argument is named REDUCED in the code. */
export function kernelStatements(program: Program): { readonly steps: readonly Statement[]; readonly value: Expression } {
  return { steps: program.steps.map((s): Statement => ({ kind: 'let', ...s })), value: program.result };
}

export const numberNode = (q: Rational): Expression => build.number(q);
export const relation = (left: Expression, sign: '<' | '<=' | '>' | '>=' | '=', right: Rational): Expression => ({ kind: 'relation', sides: [left, build.number(right)], relations: [sign] });
export const choice = (...branches: readonly (readonly [Expression | null, Expression])[]): Expression => ({ kind: 'piecewise', branches: branches.map(([condition, value]) => ({ condition, value })) });
export const let_ = (name: string, value: Expression): Statement => ({ kind: 'let', name, value });
export const greater = (a: Rational, b: Rational): Rational => (Q.compare(a, b) >= 0 ? a : b);
export const lesser = (a: Rational, b: Rational): Rational => (Q.compare(a, b) <= 0 ? a : b);

/** Bounds of f at a rational point; null where it has no value there. */
export function valueRange(f: Expression, variable: string, x: Rational): { readonly low: Rational; readonly high: Rational } | null {
  const value = encloseReal(f, new Map([[variable, real.fromRational(x, 256)]]), 192, describe);
  return value && { low: real.lower(value), high: real.upper(value) };
}
export const largestIn = ({ low, high }: { readonly low: Rational; readonly high: Rational }): Rational => greater(Q.absolute(low), Q.absolute(high));
export const leastIn = ({ low, high }: { readonly low: Rational; readonly high: Rational }): Rational => (Q.signOf(low) !== Q.signOf(high) ? Q.ZERO : lesser(Q.absolute(low), Q.absolute(high)));

/** sup and inf of |f| on [low, high] for a function that is monotone there. */
export function monotoneSize(f: Expression, variable: string, low: Rational, high: Rational): { readonly most: Rational; readonly least: Rational } {
  const ends = [low, high].map((x) => valueRange(f, variable, x));
  const [a, b] = ends;
  if (!a || !b) throw new Declined('bad-request', 'The function has no real value at an end of the interval; take an interval inside its domain.');
  const crossing = Q.signOf(a.low) * Q.signOf(b.high) <= 0 || Q.signOf(a.high) * Q.signOf(b.low) <= 0;
  return { most: greater(largestIn(a), largestIn(b)), least: crossing ? Q.ZERO : lesser(leastIn(a), leastIn(b)) };
}

/**
 * The error of fl(v) in a measure where v is off by `off` from f, |f| in [least, most]. In ulp: a float lies between f and v where they lie in
 * different binades, so that rounding moves v by half an ulp of f, or by no more than v is off and than one ulp of f (half an ulp of the next binade; v is off by less than that).
 */
export function lastRounded(off: Rational, least: Rational, most: Rational, measure: FitMeasure, { operations, result }: Arithmetic): Rational {
  // A wider format rounds once more before the result is handed over.
  const before = operations.name === result.name ? off : Q.add(off, halfUlp(Q.add(most, off), operations));
  if (measure === 'absolute') return Q.add(before, halfUlp(Q.add(most, before), result));
  if (measure === 'relative') {
    const share = Q.divide(before, least);
    return Q.add(share, Q.multiply(powerOfTwo(-result.precision), Q.add(Q.ONE, share)));
  }
  const units = Q.divide(before, ulp(least, result));
  return Q.add(units, greater(Q.HALF, lesser(Q.ONE, units)));
}

/** The error of fl(v) in a measure where v is off by the part `off` of f, |f| <= most: half an ulp more, or in ulp no more than v is off and than one ulp where a float lies between (as above). */
export function scaledError(off: Rational, most: Rational, measure: FitMeasure, { operations, result }: Arithmetic): Rational {
  const before = operations.name === result.name ? off : Q.add(off, Q.multiply(powerOfTwo(-operations.precision), Q.add(Q.ONE, off)));
  if (measure === 'absolute') return Q.add(Q.multiply(before, most), halfUlp(Q.multiply(most, Q.add(Q.ONE, before)), result));
  if (measure === 'relative') return Q.add(before, Q.multiply(powerOfTwo(-result.precision), Q.add(Q.ONE, before)));
  // One ulp of f is more than 2^-p |f|.
  const units = Q.multiply(before, powerOfTwo(result.precision));
  return Q.add(units, greater(Q.HALF, lesser(Q.ONE, units)));
}

/** Beyond the smallest tolerance that a binary64 result can keep. */
const MOST_HALVINGS = 128;

/** The largest error `off` that keeps a growing total within the tolerance; zero where none does. */
export function allowedOff(total: (off: Rational) => Rational, tolerance: Rational, from: Rational): Rational {
  let [good, bad] = [Q.ZERO, from];
  if (Q.compare(total(good), tolerance) > 0) return Q.ZERO;
  for (let k = 0; k < MOST_HALVINGS && Q.compare(total(bad), tolerance) > 0; k += 1) bad = Q.divide(bad, Q.rational(2));
  if (Q.compare(total(bad), tolerance) > 0) return Q.ZERO;
  if (Q.compare(bad, from) < 0) [good, bad] = [bad, Q.multiply(bad, Q.rational(2))];
  for (let k = 0; k < 20; k += 1) {
    const middle = Q.divide(Q.add(good, bad), Q.rational(2));
    if (Q.compare(total(middle), tolerance) <= 0) good = middle;
    else bad = middle;
  }
  return good;
}

/** A kernel's error on values up to `largest`, absolutely. */
export const absoluteOf = (error: Rational, measure: FitMeasure, largest: Rational, format: FloatFormat): Rational =>
  measure === 'absolute' ? error : Q.multiply(error, measure === 'ulp' ? ulp(largest, format) : largest);
/** The kernel's tolerance that keeps an absolute error on values up to `largest`. */
export const toleranceFor = (absolute: Rational, measure: FitMeasure, largest: Rational, format: FloatFormat): Rational =>
  measure === 'absolute' ? absolute : Q.divide(absolute, measure === 'ulp' ? ulp(largest, format) : largest);

/** A power of two below zero exponents such that everything smaller rounds to zero: half the smallest subnormal number. */
export const vanishing = ({ emin, precision }: FloatFormat): Rational => powerOfTwo(emin - precision);

/** Parts of a total whose approximation and coefficient rounding are known. */
export function inParts(total: Rational, approximation: Rational, rounding: Rational, subnormal: Rational | null = null): ProvedError {
  const rest = Q.subtract(total, Q.add(approximation, rounding));
  return { approximation, rounding, evaluation: greater(rest, Q.ZERO), total, lower: Q.ZERO, subnormal };
}

/** value * 2^k, in two steps where 2^k itself or a step between would leave the format. */
export function scaledStatements(value: Expression, k: Expression, least: number, most: number, size: { readonly most: Rational; readonly least: Rational }, half: (k: Expression) => Expression, format: FloatFormat): { readonly statements: readonly Statement[]; readonly value: Expression } {
  const power = (n: Expression): Expression => build.call('power-of-two', n);
  if (least >= format.emin && most <= format.emax) return { statements: [], value: build.product(value, power(k)) };
  const [low, high] = [Math.floor(least / 2) - 1, Math.ceil(most / 2) + 1];
  const fits = Q.compare(Q.multiply(size.most, powerOfTwo(Math.max(high, 0))), largestFinite(format)) <= 0 && Q.compare(Q.multiply(size.least, powerOfTwo(Math.min(low, 0))), powerOfTwo(format.emin)) >= 0;
  if (low < format.emin || high > format.emax || !fits) throw new Declined('bad-request', `The scaling by powers of two leaves ${format.name} on this interval; take a smaller interval or a wider format.`);
  return { statements: [let_('h', half(k))], value: build.product(value, power(build.symbol('h')), power(build.sum(k, build.negation(build.symbol('h'))))) };
}

/** What gradual underflow of the last product adds, where |f| comes down to `least`: half the smallest subnormal number. */
export interface Underflow {
  readonly reached: boolean;
  readonly half: Rational;
}
export const underflow = (least: Rational, { emin, precision }: FloatFormat): Underflow => ({ reached: Q.compare(least, powerOfTwo(emin + 1)) < 0, half: powerOfTwo(emin - precision) });

/** A total that is relative (or in ulp) on scaled values, with what underflow adds, and the absolute error below the smallest normal number. */
export function withUnderflow(error: ProvedError, measure: FitMeasure, { reached, half }: Underflow, format: FloatFormat): ProvedError {
  if (!reached) return { ...error, subnormal: null };
  const u = powerOfTwo(-format.precision);
  const more = measure === 'absolute' ? half : measure === 'ulp' ? Q.HALF : u;
  const relative = measure === 'ulp' ? Q.multiply(error.total, Q.multiply(u, Q.rational(2))) : error.total;
  const subnormal = measure === 'absolute' ? null : Q.add(Q.multiply(relative, powerOfTwo(format.emin)), half);
  return { ...error, evaluation: Q.add(error.evaluation, more), total: Q.add(error.total, more), subnormal };
}

export const overflowing = (most: Rational, format: FloatFormat): boolean => Q.compare(Q.multiply(most, Q.rational(1025, 1024)), largestFinite(format)) > 0;
export { binaryExponent };
