/**
 * x - k T for a constant T that is no float: T as a sum of floats whose first parts are short enough that their products with k are exact
 * (Cody and Waite, Software Manual for the Elementary Functions, 1980, cited from memory), and what of the difference is lost.
 */
import { build, type Expression, Q, type Rational } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { type Ball, real } from '../../rigorous/index.ts';
import type { LanguageRow } from '../../write/index.ts';
import { binaryExponent, type FloatFormat, powerOfTwo, roundTo } from '../format.ts';
import type { Arithmetic } from '../program.ts';

export interface Period {
  /** T as floats of the result's format, largest first; k times each but the last is exact. */
  readonly parts: readonly Rational[];
  /** 1/T as a float. */
  readonly inverse: Rational;
  /** Bounds for |x - k T|, exactly and as computed. */
  readonly reach: Rational;
  /** Bound for |computed - (x - k T)|; nothing is lost where k = 0. */
  readonly error: Rational;
  /** The same for |k| at most `count`, not zero, where |x - k T| is at most `reach`. */
  readonly errorAt: (count: number, reach: Rational) => Rational;
  /** k lies in [least, most]. */
  readonly least: number;
  readonly most: number;
}

const magnitude = Q.absolute;
const greater = (a: Rational, b: Rational): Rational => (Q.compare(a, b) >= 0 ? a : b);

/** A rational not below q with few digits. */
export function roundedUp(q: Rational, bits = 30): Rational {
  if (Q.signOf(q) <= 0) return Q.ZERO;
  const unit = powerOfTwo(binaryExponent(q) - bits);
  return Q.multiply(Q.rational(-Q.floor(Q.negate(Q.divide(q, unit)))), unit);
}

/** Half a unit in the last place of a float no larger than `size`. */
export const halfUlp = (size: Rational, { precision, emin }: FloatFormat): Rational => (Q.isZero(size) ? Q.ZERO : powerOfTwo(Math.max(binaryExponent(size), emin) - precision));

/** The nearest float with at most `bits` significant bits. */
export function shortened(q: Rational, bits: number): Rational {
  if (Q.isZero(q)) return q;
  const unit = powerOfTwo(binaryExponent(q) - bits + 1);
  return Q.multiply(Q.rational(Q.floor(Q.add(Q.divide(q, unit), Q.HALF))), unit);
}

/** The exponent of the last bit that is set. */
function lastBit(q: Rational): number {
  const shift = BigInt(q.den.toString(2).length - 1);
  let [n, e] = [q.num < 0n ? -q.num : q.num, -Number(shift)];
  while (n !== 0n && n % 2n === 0n) [n, e] = [n / 2n, e + 1];
  return e;
}

const MOST_PARTS = 5;
/** x/T and its rounding may miss the nearest integer by this much: the polynomial then serves an interval wider by as much. */
const MOST_MARGIN = Q.rational(1, 16);

/**
 * `allowed` is the error of x - k T that still does no harm; more parts are taken until it is reached or rounding alone is larger.
 * `closest` is the |x - k T| at which that is judged (default: all of them): where f is steep or zero beside a multiple of T, that near to it.
 * Throws Declined beyond the |x| up to which the products stay exact and k the nearest integer but for a sixteenth.
 */
export function splitPeriod(period: Ball, low: Rational, high: Rational, { operations, result }: Arithmetic, allowed: Rational, what: string, closest?: Rational): Period {
  const [lower, upper] = [real.lower(period), real.upper(period)];
  const size = greater(magnitude(lower), magnitude(upper));
  const middle = Q.divide(Q.add(lower, upper), Q.rational(2));
  const inverse = roundTo(Q.reciprocal(middle), result);
  const largest = greater(magnitude(low), magnitude(high));
  if (!inverse || Q.isZero(inverse)) throw new Declined('bad-request', `The period ${what} is out of range in ${result.name}; ask for another format.`);
  // y = fl(x fl(1/T)); adding and subtracting 3/2 2^(p-1) makes the nearest integer of it, exactly, while |y| < 2^(p-2).
  const turns = Q.divide(largest, magnitude(middle));
  const u = powerOfTwo(-operations.precision);
  const wrong = Q.add(magnitude(Q.subtract(Q.ONE, Q.multiply(inverse, middle))), Q.multiply(Q.rational(3), u));
  const margin = Q.add(Q.multiply(roundedUp(turns), Q.multiply(wrong, Q.rational(9, 8))), Q.add(u, powerOfTwo(-40)));
  const limit = Q.multiply(Q.divide(MOST_MARGIN, wrong), size);
  const nearest = (x: Rational, sign: 1 | -1): number => {
    const y = Q.add(Q.divide(x, middle), Q.multiply(Q.rational(sign), Q.add(Q.HALF, Q.multiply(margin, Q.rational(2)))));
    return Number(sign > 0 ? Q.floor(y) : -Q.floor(Q.negate(y)));
  };
  if (Q.compare(margin, MOST_MARGIN) > 0) throw beyond(limit, what, result);
  const ends = [low, high].flatMap((x) => [nearest(x, 1), nearest(x, -1)]);
  const [least, most] = [Math.min(...ends), Math.max(...ends)];
  const count = Math.max(Math.abs(least), Math.abs(most), 1);
  const bitsOfCount = count.toString(2).length;
  const bits = result.precision - bitsOfCount;
  if (bits < 6 || count >= 2 ** 30) throw beyond(Q.multiply(size, powerOfTwo(Math.min(result.precision - 6, 30))), what, result);
  const half = Q.add(Q.HALF, margin);
  const parts: Rational[] = [];
  const exactPeriod: ExactPeriod = { value: middle, spread: Q.subtract(upper, lower), smallest: Q.multiply(Q.subtract(Q.ONE, half), size), arithmetic: { operations, result } };
  let best: Loss | null = null;
  const everywhere = Q.multiply(half, size);
  const judgedAt = closest && Q.compare(closest, everywhere) < 0 ? closest : everywhere;
  let rest = middle;
  for (let n = 1; n <= MOST_PARTS; n += 1) {
    const last = roundTo(rest, result);
    if (!last || (!Q.isZero(rest) && binaryExponent(rest) < result.emin)) break;
    const tried = lossOf([...parts, last], exactPeriod, judgedAt, count);
    if (!best || Q.compare(Q.multiply(tried.error, Q.rational(17, 16)), best.error) < 0) best = tried;
    if (Q.compare(tried.error, allowed) <= 0) break;
    const part = shortened(rest, bits);
    parts.push(part);
    rest = Q.subtract(rest, part);
    if (Q.isZero(rest)) break;
  }
  if (!best) throw new Declined('bad-request', `The period ${what} is out of range in ${result.name}; ask for another format.`);
  const taken = best.parts;
  const { reach, error } = lossOf(taken, exactPeriod, everywhere, count);
  return { parts: taken, inverse, reach: roundedUp(reach), error: roundedUp(error), errorAt: (k, near) => roundedUp(lossOf(taken, exactPeriod, near, k).error), least, most };
}

const beyond = (limit: Rational, what: string, { name }: FloatFormat): Declined =>
  new Declined('bad-request', `Beyond |x| about ${Q.toDouble(limit).toPrecision(3)} multiples of ${what} cannot be taken off exactly in ${name}; take a smaller interval or a wider format.`);

/** T as the middle of its enclosure, how wide that is, and the least |x| that is no nearer to zero than to a multiple of T. */
interface ExactPeriod {
  readonly value: Rational;
  readonly spread: Rational;
  readonly smallest: Rational;
  readonly arithmetic: Arithmetic;
}

interface Loss {
  readonly parts: readonly Rational[];
  readonly error: Rational;
  readonly reach: Rational;
}

/** The differences v_i = x - k (c_1 + ... + c_i), |k| <= count, computed one after the other, with or without fusing; `exactReach` bounds |x - k T|. */
function lossOf(parts: readonly Rational[], { value: period, spread, smallest, arithmetic: { operations, result } }: ExactPeriod, exactReach: Rational, count: number): Loss {
  const k = Q.rational(count);
  const bitsOfCount = count.toString(2).length;
  // Where k is not zero, x is a float of the result's format beyond T/2 - margin: a multiple of its last place there.
  let grid = binaryExponent(smallest) - result.precision + 1;
  let [sum, error, reach] = [Q.ZERO, Q.ZERO, exactReach];
  parts.forEach((c, i) => {
    sum = Q.add(sum, c);
    const multiply = i + 1 === parts.length && !fits(c, bitsOfCount, operations) ? Q.add(Q.multiply(Q.multiply(k, magnitude(c)), powerOfTwo(-operations.precision)), powerOfTwo(operations.emin - operations.precision)) : Q.ZERO;
    const left = Q.add(Q.add(exactReach, Q.multiply(k, magnitude(Q.subtract(period, sum)))), Q.add(error, multiply));
    grid = Math.min(grid, lastBit(c));
    // A multiple of 2^grid below 2^(p + grid) is a float.
    const exact = Q.isZero(error) && Q.isZero(multiply) && Q.compare(left, powerOfTwo(operations.precision + grid)) <= 0;
    error = Q.add(Q.add(error, multiply), exact ? Q.ZERO : halfUlp(left, operations));
    reach = left;
  });
  const missing = Q.multiply(k, Q.add(magnitude(Q.subtract(period, sum)), spread));
  return { parts, error: Q.add(error, missing), reach: Q.add(greater(reach, exactReach), Q.add(error, missing)) };
}

const fits = (c: Rational, bitsOfCount: number, { precision }: FloatFormat): boolean => Q.isZero(c) || binaryExponent(c) - lastBit(c) + 1 + bitsOfCount <= precision;

/** The integer nearest to y, |y| < 2^(p-2), as a float: y + M - M with M = 3/2 2^(p-1). Shading languages may drop that sum, so they get floor(y + 1/2). */
export function nearestInteger(y: Expression, row: LanguageRow, operations: FloatFormat): Expression {
  if (row.family === 'glsl' || row.family === 'hlsl') return build.call('floor', build.sum(y, build.number(Q.HALF)));
  const magic = Q.multiply(Q.rational(3, 2), powerOfTwo(operations.precision - 1));
  return build.sum(build.sum(y, build.number(magic)), build.number(Q.negate(magic)));
}

/** x - k c_1 - k c_2 - ... */
export const reduced = (x: Expression, k: Expression, parts: readonly Rational[]): Expression =>
  parts.reduce<Expression>((difference, c) => build.sum(difference, Q.signOf(c) < 0 ? build.product(k, build.number(Q.negate(c))) : build.negation(build.product(k, build.number(c)))), x);
