/**
 * What rounding does to one evaluation of a program in a float format, for every argument in an interval.
 * Each operation rounds to nearest: computed = exact op (computed operands) + d, |d| at most half an ulp of the result's binade
 * (Higham, Accuracy and Stability of Numerical Algorithms, ch. 2 and 3, cited from memory). Bounds are carried as doubles rounded up.
 *
 * Contraction: a sum with a product in it may be computed with one rounding less. The bound of the uncontracted evaluation covers that,
 * since it only drops a rounding whose bound stays in the sum; the tests hold it against both.
 */
import { type Expression, Q, type Rational } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { type Interval, interval } from '../rigorous/index.ts';
import { binadeOf, binaryExponent, type FixedFormat, type FloatFormat, isRepresentable, type NumberFormat, powerOfTwo } from './format.ts';
import type { Arithmetic, Program } from './program.ts';

export interface RoundedValue {
  /** Encloses the exact value of the tree (exact operations on the exact argument) over the whole argument interval. */
  readonly exact: Interval;
  /** |computed - exact| at most this times 2^-ERROR_BITS, where nothing overflows. The scale keeps errors below the smallest double apart from zero. */
  readonly absolute: number;
  /** The part of it that was there before the last rounding. */
  readonly before: number;
  /** The exact value at the two ends of the argument interval, and its slope in between: they make `exact` tight. */
  readonly atLow: Interval;
  readonly atHigh: Interval;
  readonly slope: Interval;
}

/** Errors are carried as multiples of 2^-ERROR_BITS. */
export const ERROR_BITS = 64;
const SCALE = 2 ** ERROR_BITS;

const { up } = interval;
const addUp = (a: number, b: number): number => (a === 0 ? b : b === 0 ? a : up(a + b));
const mulUp = (a: number, b: number): number => (a === 0 || b === 0 ? 0 : up(a * b));
const UNIT: Interval = { lo: 0, hi: 1 };

/**
 * The largest rounding error of a result of at most this size, in units of 2^-ERROR_BITS: half an ulp of the binade below it, or its distance beyond the start of
 * its own binade (a float) where that is less; never more than the size itself (zero is a float). `scaled` is the size in the same unit, where it is known better.
 */
export function roundingError(magnitude: number, format: FloatFormat, scaled = magnitude * SCALE): number {
  if (magnitude === 0 || scaled === 0) return 0;
  if (!(magnitude < Infinity)) return Infinity;
  const e = Math.max(binadeOf(magnitude), format.emin);
  const half = 2 ** (e - format.precision + ERROR_BITS);
  const start = 2 ** e;
  const below = e > format.emin && magnitude >= start ? Math.max(half / 2, up(magnitude - start) * SCALE) : half;
  return Math.min(half, below, scaled);
}

export const exactValue = (exact: Interval, atLow = exact, atHigh = exact, slope: Interval = interval.ZERO): RoundedValue => ({ exact, absolute: 0, before: 0, atLow, atHigh, slope });
/** The argument itself: any float of the interval. */
export const argumentValue = (x: Interval): RoundedValue => ({ exact: x, absolute: 0, before: 0, atLow: { lo: x.lo, hi: x.lo }, atHigh: { lo: x.hi, hi: x.hi }, slope: interval.ONE });

type Exact = Pick<RoundedValue, 'exact' | 'atLow' | 'atHigh' | 'slope'>;

const meet = (a: Interval, b: Interval): Interval => interval.intersect(a, b) ?? a;

/** Sharpens the naive range by monotonicity or by the mean value form from both ends. */
function sharpened(naive: Interval, atLow: Interval, atHigh: Interval, slope: Interval, width: number): Exact {
  if (slope.lo >= 0 || slope.hi <= 0) return { exact: meet(naive, interval.union(atLow, atHigh)), atLow, atHigh, slope };
  const way = interval.multiply(slope, { lo: UNIT.lo, hi: width });
  return { exact: meet(meet(naive, interval.add(atLow, way)), interval.subtract(atHigh, way)), atLow, atHigh, slope };
}

/** Rounding of a result; `scaled` bounds the exact one in the unit of errors. */
function rounded(exact: Exact, absolute: number, format: FloatFormat, scaled = interval.size(exact.exact) * SCALE): RoundedValue {
  const magnitude = addUp(interval.size(exact.exact), up(absolute / SCALE));
  const limit = 2 ** format.emax * (2 - 2 ** (1 - format.precision));
  if (!(magnitude <= limit)) throw new Declined('bad-request', `The evaluation can overflow ${format.name} on this interval; take a smaller interval or a wider format.`);
  return withError(exact, addUp(absolute, roundingError(magnitude, format, addUp(scaled, absolute))), absolute);
}

const withError = ({ exact, atLow, atHigh, slope }: Exact, absolute: number, before: number): RoundedValue => ({ exact, absolute, before, atLow, atHigh, slope });

/** Every intermediate value must be a number of the format. */
function withinFixed(exact: Exact, absolute: number, { integerBits, name }: FixedFormat): RoundedValue {
  if (!(addUp(interval.size(exact.exact), up(absolute / SCALE)) < 2 ** integerBits)) throw new Declined('bad-request', `An intermediate value can overflow ${name} on this interval; take more bits before the point or a smaller interval.`);
  return withError(exact, absolute, absolute);
}

const productError = (a: RoundedValue, b: RoundedValue): number =>
  addUp(addUp(mulUp(interval.size(a.exact), b.absolute), mulUp(interval.size(b.exact), a.absolute)), mulUp(a.absolute, up(b.absolute / SCALE)));

/** |a b| in the unit of errors, the scale given to the smaller factor so that it does not underflow. */
function scaledProduct(a: Exact, b: Exact): number {
  const [x, y] = [interval.size(a.exact), interval.size(b.exact)];
  return x < y ? mulUp(x * SCALE, y) : mulUp(x, y * SCALE);
}

/** The exponent of a constant that is a power of two (or its negative): multiplying by it only underflows. */
function powerOfTwoFactor(e: Expression): number | null {
  if (e.kind !== 'number' || Q.isZero(e.value)) return null;
  const k = binaryExponent(e.value);
  return Q.equal(Q.absolute(e.value), powerOfTwo(k)) ? k : null;
}

/**
 * A sum is exact where no bit of it can lie below the last place of both operands nor above what the significand reaches: floats of at least 2^e in size are multiples
 * of 2^(e-p+1), and so are their sums, which are floats while they are below 2^(e+1). A product fused into it is rounded by no more than it would be by itself.
 */
function sumsExactly(a: RoundedValue, b: RoundedValue, size: number, { emin }: FloatFormat): boolean {
  const least = ({ exact, absolute }: RoundedValue): number => (absolute === 0 ? interval.leastSize(exact) : interval.down(interval.leastSize(exact) - up(absolute / SCALE)));
  const smaller = Math.min(least(a), least(b));
  return smaller >= 2 ** emin && size < 2 ** (binadeOf(smaller) + 1);
}

/** Constants are looked at once per format, not once per piece. */
const numbers = new WeakMap<Expression, { readonly format: NumberFormat; readonly value: RoundedValue; readonly power: number | null }>();

/** Evaluates a program's trees over one argument interval, step by step. */
class Evaluator {
  readonly #values: Map<string, RoundedValue>;
  readonly #width: number;
  readonly #format: NumberFormat;

  constructor(values: Map<string, RoundedValue>, width: number, format: NumberFormat) {
    this.#values = values;
    this.#width = width;
    this.#format = format;
  }

  define(name: string, value: RoundedValue): void {
    this.#values.set(name, value);
  }

  visit(e: Expression): RoundedValue {
    switch (e.kind) {
      case 'symbol': {
        const value = this.#values.get(e.name);
        if (!value) throw new Declined('bad-request', `The symbol ${e.name} has no value here.`);
        return value;
      }
      case 'number':
        return this.#number(e);
      case 'negation': {
        const inner = this.visit(e.operand);
        return { absolute: inner.absolute, before: inner.before, exact: interval.negate(inner.exact), atLow: interval.negate(inner.atLow), atHigh: interval.negate(inner.atHigh), slope: interval.negate(inner.slope) };
      }
      case 'sum':
        return e.terms.map((t) => this.visit(t)).reduce((a, b) => this.#added(a, b));
      case 'product':
        return this.#product(e.factors);
      case 'quotient':
        return this.#quotient(this.visit(e.numerator), this.visit(e.denominator));
      case 'call': {
        const [x, y, z] = e.args.map((a) => this.visit(a));
        if (e.function !== 'fma' || !x || !y || !z) throw new Declined('bad-request', `The call of ${e.function} is not part of a polynomial.`);
        const error = productError(x, y);
        const inner = withError(this.#times(x, y), error, error);
        if (this.#format.kind === 'fixed') throw new Declined('bad-request', 'Fixed-point code has no fused multiply-add; ask for the contraction any or none.');
        return rounded(this.#sum(inner, z), addUp(inner.absolute, z.absolute), this.#format);
      }
      default:
        throw new Declined('bad-request', 'Only sums, products and quotients of floats can be bounded.');
    }
  }

  #number(e: Extract<Expression, { kind: 'number' }>): RoundedValue {
    const known = numbers.get(e);
    if (known?.format === this.#format) return known.value;
    if (!isRepresentable(e.value, this.#format)) throw new Declined('bad-request', 'A coefficient is not a number of the format.');
    const value = exactValue(interval.fromRational(e.value));
    numbers.set(e, { format: this.#format, value, power: powerOfTwoFactor(e) });
    return value;
  }

  #added(a: RoundedValue, b: RoundedValue): RoundedValue {
    const sum = this.#sum(a, b);
    // Sums of fixed-point numbers are exact while they do not overflow.
    if (this.#format.kind === 'fixed') return withinFixed(sum, addUp(a.absolute, b.absolute), this.#format);
    const error = addUp(a.absolute, b.absolute);
    // Sums of floats below twice the smallest normal number are exact: all are multiples of the smallest subnormal. A product fused into the sum is then
    // rounded to such a multiple once, by no more than it would be by itself.
    const size = addUp(interval.size(sum.exact), up(error / SCALE));
    return size < 2 ** (this.#format.emin + 1) || sumsExactly(a, b, size, this.#format) ? withError(sum, error, error) : rounded(sum, error, this.#format);
  }

  #sum(a: Exact, b: Exact): Exact {
    const { add } = interval;
    return sharpened(add(a.exact, b.exact), add(a.atLow, b.atLow), add(a.atHigh, b.atHigh), add(a.slope, b.slope), this.#width);
  }

  #times(a: Exact, b: Exact): Exact {
    const { add, multiply } = interval;
    const naive = a === b ? interval.square(a.exact) : multiply(a.exact, b.exact);
    return sharpened(naive, multiply(a.atLow, b.atLow), multiply(a.atHigh, b.atHigh), add(multiply(a.slope, b.exact), multiply(a.exact, b.slope)), this.#width);
  }

  #product(factors: readonly Expression[]): RoundedValue {
    const [first, ...rest] = factors;
    if (!first) throw new Declined('bad-request', 'An empty product has no evaluation.');
    let left = this.visit(first);
    let leftPower = numbers.get(first)?.power ?? null;
    for (const node of rest) {
      const value = this.visit(node);
      const factor = left;
      const whole = this.#times(left, value);
      const error = productError(left, value);
      if (this.#format.kind === 'fixed') {
        left = withinFixed(whole, addUp(error, 2 ** (ERROR_BITS - this.#format.fractionBits - 1)), this.#format);
        continue;
      }
      const k = leftPower ?? numbers.get(node)?.power ?? null;
      leftPower = null;
      // By a power of two of at least one nothing is lost; by a smaller one only digits below the smallest subnormal.
      if (k === null || (k < 0 && interval.leastSize(whole.exact) < 2 ** this.#format.emin)) left = rounded(whole, error, this.#format, scaledProduct(factor, value));
      else left = withError(rounded(whole, error, this.#format), error, error);
    }
    return left;
  }

  #quotient(a: RoundedValue, b: RoundedValue): RoundedValue {
    const { divide, multiply, subtract, square } = interval;
    const [exact, atLow, atHigh] = [divide(a.exact, b.exact), divide(a.atLow, b.atLow), divide(a.atHigh, b.atHigh)];
    const slope = divide(subtract(multiply(a.slope, b.exact), multiply(a.exact, b.slope)), square(b.exact));
    const least = interval.down(interval.leastSize(b.exact) - up(b.absolute / SCALE));
    if (!exact || !atLow || !atHigh || !slope || !(least > 0)) throw new Declined('bad-request', 'A divisor can be zero on this interval; take a smaller interval.');
    const range = sharpened(exact, atLow, atHigh, slope, this.#width);
    const absolute = up(addUp(a.absolute, mulUp(interval.size(range.exact), b.absolute)) / least);
    if (this.#format.kind === 'fixed') throw new Declined('bad-request', 'Quotients are not written as fixed-point code.');
    return rounded(range, absolute, this.#format);
  }
}

/**
 * Bounds for the value and the rounding error of the program, the argument being any float of `argument`. Sums and products are taken from left to right, two at a time, as code does.
 * Allowed nodes: the variable (an exact float), steps, numbers of the format, sums, products, quotients, negations, fma calls.
 */
export function evaluationError(program: Program, variable: string, argument: Interval, { operations, result }: Arithmetic): RoundedValue {
  const evaluator = new Evaluator(new Map([[variable, argumentValue(argument)]]), interval.width(argument), operations);
  for (const step of program.steps) evaluator.define(step.name, evaluator.visit(step.value));
  const value = evaluator.visit(program.result);
  return operations.name === result.name ? value : rounded(value, value.absolute, result);
}

/** The exact value of a program of sums and products at a rational. */
export function exactProgramValue({ steps, result }: Program, variable: string, x: Rational): Rational {
  const values = new Map([[variable, x]]);
  const visit = (e: Expression): Rational => {
    switch (e.kind) {
      case 'symbol': {
        const value = values.get(e.name);
        if (!value) throw new RangeError(`no value for ${e.name}`);
        return value;
      }
      case 'number':
        return e.value;
      case 'negation':
        return Q.negate(visit(e.operand));
      case 'sum':
        return e.terms.map(visit).reduce(Q.add);
      case 'product':
        return e.factors.map(visit).reduce(Q.multiply);
      case 'quotient':
        return Q.divide(visit(e.numerator), visit(e.denominator));
      case 'call': {
        const [a, b, c] = e.args.map(visit);
        if (e.function === 'fma' && a && b && c) return Q.add(Q.multiply(a, b), c);
        throw new RangeError(`no exact value of ${e.function}`);
      }
      default:
        throw new RangeError(`no exact value of a ${e.kind}`);
    }
  };
  for (const step of steps) values.set(step.name, visit(step.value));
  return visit(result);
}

/** The value in plain double arithmetic: for choosing places, never for a bound. */
export function approximateValue({ steps, result }: Program, variable: string, x: number): number {
  const values = new Map([[variable, x]]);
  const visit = (e: Expression): number => {
    switch (e.kind) {
      case 'symbol':
        return values.get(e.name) ?? NaN;
      case 'number':
        return Q.toDouble(e.value);
      case 'negation':
        return -visit(e.operand);
      case 'sum':
        return e.terms.reduce((sum, t) => sum + visit(t), 0);
      case 'product':
        return e.factors.reduce((product, f) => product * visit(f), 1);
      case 'quotient':
        return visit(e.numerator) / visit(e.denominator);
      case 'call': {
        const [a = NaN, b = NaN, c = NaN] = e.args.map(visit);
        return a * b + c;
      }
      default:
        return NaN;
    }
  };
  for (const step of steps) values.set(step.name, visit(step.value));
  return visit(result);
}

/** The same for a program in fixed point: products round to nearest by half a unit, sums are exact, every value stays inside the format. */
export function fixedEvaluationError(program: Program, variable: string, argument: Interval, format: FixedFormat): RoundedValue {
  const evaluator = new Evaluator(new Map([[variable, argumentValue(argument)]]), interval.width(argument), format);
  for (const step of program.steps) evaluator.define(step.name, evaluator.visit(step.value));
  return evaluator.visit(program.result);
}
