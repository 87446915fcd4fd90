/**
 * Elementary functions of double intervals. At a double each function is computed by argument reduction and a Taylor polynomial in plain doubles, whose
 * whole relative error (truncation, coefficients, Horner's rule: sum of (2i+1) u |a_i x^i|, reduced argument) is below 8 u, u = 2^-53; the result is widened by 16 u.
 * Intervals follow by monotone pieces. Nothing of Math but sqrt, floor, round and abs takes part in a result. Null: not defined on the whole interval.
 */
import type { Rational } from '../expression/index.ts';
import * as real from './real.ts';
import type { Interval } from './ball.types.ts';
import {
  absolute, add, containsZero, divide, down, fromBall, fromDouble, fromInteger, fromRational, intersect, multiply, negate, ONE, powerInteger, sqrt, square, subtract, union, up, WHOLE, ZERO,
} from './interval.ts';

const RELATIVE = 2 ** -49;
/** log 2 = LOG2_HIGH + LOG2_LOW + less than 2^-86; the first has 32 trailing zero bits, so products with |k| < 2^11 are exact. */
const LOG2_HIGH = 6.93147180369123816490e-1;
const LOG2_LOW = 1.90821492927058770002e-10;
/** pi/2 in two parts of 33 bits and a rest: products of the first two with |k| < 2^20 are exact. */
const HALF_PI_1 = 1.57079632673412561417;
const HALF_PI_2 = 6.07710050630396597660e-11;
const HALF_PI_REST: Interval = { lo: 2.0222662487959505e-21, hi: 2.0222662487959508e-21 };
const LARGEST_REDUCTION = 2 ** 19;

export const PI: Interval = fromBall(real.pi(80));
const HALF_PI: Interval = { lo: PI.lo / 2, hi: PI.hi / 2 };
const QUARTER_PI: Interval = { lo: PI.lo / 4, hi: PI.hi / 4 };
export const LOG_TWO: Interval = fromBall(real.logTwo(80));
const UNIT: Interval = { lo: -1, hi: 1 };

/** y (1 +- 16 u), and a subnormal step for results near zero. */
function widen(y: number): Interval {
  const slack = Math.abs(y) * RELATIVE + 2 ** -1074;
  return { lo: y - slack, hi: y + slack };
}

const reciprocalFactorials: number[] = [];
{
  let f = 1;
  for (let k = 0; k <= 24; k += 1) {
    if (k > 0) f *= k;
    reciprocalFactorials.push(1 / f);
  }
}
const inverseFactorial = (k: number): number => reciprocalFactorials[k] ?? 0;

/** sum over k of x^k / (first + k step)! up to `last`, Horner's rule. */
function exponentialTail(x: number, first: number, last: number, step: number): number {
  let sum = inverseFactorial(last);
  for (let k = last - step; k >= first; k -= step) sum = sum * x + inverseFactorial(k);
  return sum;
}

/** x * 2^n for a positive normal x near 1, outward where the result is subnormal. */
function scaled(x: Interval, n: number): Interval {
  if (n >= -1000 && n <= 1000) {
    const f = 2 ** n;
    return { lo: x.lo * f, hi: x.hi * f };
  }
  const half = Math.trunc(n / 2);
  const f = 2 ** half;
  const g = 2 ** (n - half);
  return { lo: Math.max(0, down(x.lo * f * g)), hi: up(x.hi * f * g) };
}

function expAt(x: number): Interval {
  if (x === 0) return ONE;
  if (x > 709.7) return x === Infinity ? WHOLE : x < 710 ? { lo: 1.6e308, hi: Infinity } : { lo: Number.MAX_VALUE, hi: Infinity };
  if (x < -740) return { lo: 0, hi: 2 ** -1066 };
  const k = Math.round(x * 1.4426950408889634);
  const r = x - k * LOG2_HIGH - k * LOG2_LOW;
  return scaled(widen(exponentialTail(r, 0, 14, 1)), k);
}

function expm1At(x: number): Interval {
  if (x === 0) return ZERO;
  if (Math.abs(x) < 0.35) return widen(x * exponentialTail(x, 1, 15, 1));
  return subtract(expAt(x), ONE);
}

/** 2 atanh(s) = 2s (1 + s^2/3 + ...), s^2 <= 0.0295: the terms left out are below 2^-60 of the first. */
function twiceInverseTanh(s: number): number {
  const q = s * s;
  let sum = 1 / 25;
  for (let k = 23; k >= 1; k -= 2) sum = sum * q + 1 / k;
  return 2 * s * sum;
}

const view = new DataView(new ArrayBuffer(8));
/** [m, k] with x = m 2^k exactly and m in [sqrt(1/2), sqrt 2), about. */
function split(x: number): readonly [number, number] {
  let y = x;
  let k = 0;
  if (y < 2 ** -1022) {
    y *= 2 ** 60;
    k -= 60;
  }
  view.setFloat64(0, y);
  const exponent = ((view.getUint16(0) >>> 4) & 0x7ff) - 1023;
  let m = y * 2 ** -exponent;
  if (exponent > 1000) m = y * 2 ** -500 * 2 ** (500 - exponent);
  k += exponent;
  return m > Math.SQRT2 ? [m / 2, k + 1] : [m, k];
}

function logAt(x: number): Interval {
  if (x === 1) return ZERO;
  if (x === Infinity) return { lo: 709, hi: Infinity };
  if (x === 0) return { lo: -Infinity, hi: -744 };
  const [m, k] = split(x);
  const f = m - 1;
  const main = widen(twiceInverseTanh(f / (2 + f)));
  if (k === 0) return main;
  return add(fromDouble(k * LOG2_HIGH), add(widen(k * LOG2_LOW), main));
}

function log1pAt(x: number): Interval | null {
  if (x <= -1) return null;
  if (Math.abs(x) < 0.29) return x === 0 ? ZERO : widen(twiceInverseTanh(x / (2 + x)));
  return log(add(ONE, fromDouble(x)));
}

/** [sin, cos] at a double. */
function sineCosineAt(x: number): readonly [Interval, Interval] {
  if (x === 0) return [ZERO, ONE];
  const size = Math.abs(x);
  if (size < 0.78) return [sineKernel(x), cosineKernel(x)];
  const k = Math.round(x * 0.6366197723675814);
  if (!(Math.abs(k) < LARGEST_REDUCTION)) {
    if (!Number.isFinite(x)) return [UNIT, UNIT];
    const [s, c] = real.sinCos(real.fromDouble(x), 64);
    return [fromBall(s), fromBall(c)];
  }
  const r = subtract(subtract(subtract(fromDouble(x), fromDouble(k * HALF_PI_1)), fromDouble(k * HALF_PI_2)), multiply(fromDouble(k), HALF_PI_REST));
  // r is a few ulp wide; |sin'|, |cos'| <= 1.
  const middle = r.lo / 2 + r.hi / 2;
  const slack = up(r.hi - r.lo);
  const around = (y: Interval): Interval => intersect({ lo: down(y.lo - slack), hi: up(y.hi + slack) }, UNIT) ?? UNIT;
  const s = around(sineKernel(middle));
  const c = around(cosineKernel(middle));
  const turn = ((k % 4) + 4) % 4;
  return turn === 0 ? [s, c] : turn === 1 ? [c, negate(s)] : turn === 2 ? [negate(s), negate(c)] : [negate(c), s];
}
/** |x| <= 0.8. */
const sineKernel = (x: number): Interval => widen(x * exponentialAlternating(x * x, 1, 19));
const cosineKernel = (x: number): Interval => widen(exponentialAlternating(x * x, 0, 20));
function exponentialAlternating(x: number, first: number, last: number): number {
  let sum = inverseFactorial(last);
  for (let k = last - 2; k >= first; k -= 2) sum = inverseFactorial(k) - sum * x;
  return sum;
}

function atanAt(x: number): Interval {
  if (x < 0) return negate(atanAt(-x));
  if (x === 0) return ZERO;
  if (x === Infinity) return { lo: 1.57, hi: HALF_PI.hi };
  if (x > 2 ** 60) return subtract(HALF_PI, { lo: 0, hi: 2 ** -60 });
  if (x > 1) {
    const inverse = divide(ONE, fromDouble(x)) ?? ONE;
    return subtract(HALF_PI, { lo: atanAt(inverse.lo).lo, hi: atanAt(inverse.hi).hi });
  }
  if (x > 0.4143) return add(QUARTER_PI, widen(atanKernel((x - 1) / (x + 1))));
  return widen(atanKernel(x));
}
/** |x| < 0.415: the first term left out, x^49/49, is below 2^-66 of x. */
function atanKernel(x: number): number {
  const q = x * x;
  let sum = 1 / 47;
  for (let k = 45; k >= 1; k -= 2) sum = 1 / k - sum * q;
  return x * sum;
}

function sinhAt(x: number): Interval {
  if (x === 0) return ZERO;
  if (Math.abs(x) < 1) return widen(x * exponentialTail(x * x, 1, 21, 2));
  const difference = subtract(expAt(x), expAt(-x));
  return { lo: difference.lo / 2, hi: difference.hi / 2 };
}
function coshAt(x: number): Interval {
  const sum = add(expAt(x), expAt(-x));
  return { lo: Math.max(1, sum.lo / 2), hi: sum.hi / 2 };
}
function tanhAt(x: number): Interval {
  if (x < 0) return negate(tanhAt(-x));
  if (x === 0) return ZERO;
  const m = expm1At(-2 * x);
  return intersect(divide(negate(m), add(fromDouble(2), m)) ?? UNIT, UNIT) ?? UNIT;
}
function asinhAt(x: number): Interval {
  if (x < 0) return negate(asinhAt(-x));
  if (x === 0) return ZERO;
  const y = fromDouble(x);
  if (x > 2 ** 500) return add(add(logAt(x), LOG_TWO), { lo: 0, hi: 2 ** -900 });
  const squared = square(y);
  const root = sqrt(add(ONE, squared)) ?? ONE;
  return log1p(add(y, divide(squared, add(ONE, root)) ?? ZERO)) ?? WHOLE;
}
function acoshAt(x: number): Interval | null {
  if (x < 1) return null;
  if (x === 1) return ZERO;
  if (x > 2 ** 500) return add(add(logAt(x), LOG_TWO), { lo: -(2 ** -900), hi: 0 });
  const t = subtract(fromDouble(x), ONE);
  const root = sqrt(multiply(t, add(t, fromDouble(2))));
  return root === null ? null : log1p(add(t, root));
}
function atanhAt(x: number): Interval | null {
  if (x < 0) {
    const positive = atanhAt(-x);
    return positive === null ? null : negate(positive);
  }
  if (x >= 1) return null;
  if (x === 0) return ZERO;
  const quotient = divide(fromDouble(2 * x), subtract(ONE, fromDouble(x)));
  const value = quotient === null ? null : log1p(quotient);
  return value === null ? null : { lo: value.lo / 2, hi: value.hi / 2 };
}
function asinAt(x: number): Interval | null {
  if (Math.abs(x) > 1) return null;
  if (Math.abs(x) === 1) return x > 0 ? HALF_PI : negate(HALF_PI);
  const y = fromDouble(x);
  const root = sqrt(multiply(subtract(ONE, y), add(ONE, y)));
  const quotient = root === null ? null : divide(y, root);
  return quotient === null ? null : atan(quotient);
}
function acosAt(x: number): Interval | null {
  if (Math.abs(x) > 1) return null;
  if (x === -1) return PI;
  const y = fromDouble(x);
  const quotient = divide(subtract(ONE, y), add(ONE, y));
  const root = quotient === null ? null : sqrt(quotient);
  if (root === null) return null;
  const angle = atan(root);
  return { lo: angle.lo * 2, hi: angle.hi * 2 };
}

const increasing = (f: (x: number) => Interval | null, x: Interval): Interval | null => {
  const low = f(x.lo);
  if (x.lo === x.hi) return low;
  const high = f(x.hi);
  return low === null || high === null ? null : { lo: low.lo, hi: high.hi };
};
/** The ends decide, either way round. */
const total = (f: (x: number) => Interval, x: Interval): Interval => {
  const low = f(x.lo);
  return x.lo === x.hi ? low : { lo: low.lo, hi: f(x.hi).hi };
};

export const exp = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? 0 : expAt(x.lo).lo, hi: x.hi === Infinity ? Infinity : expAt(x.hi).hi });
export const expm1 = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -1 : expm1At(x.lo).lo, hi: x.hi === Infinity ? Infinity : expm1At(x.hi).hi });
export const log = (x: Interval): Interval | null => (x.lo > 0 ? total(logAt, x) : null);
export const log1p = (x: Interval): Interval | null => (x.hi === Infinity ? (x.lo > -1 ? { lo: (log1pAt(x.lo) ?? WHOLE).lo, hi: Infinity } : null) : increasing(log1pAt, x));
export const atan = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -HALF_PI.hi : atanAt(x.lo).lo, hi: x.hi === Infinity ? HALF_PI.hi : atanAt(x.hi).hi });
export const sinh = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -Infinity : sinhAt(x.lo).lo, hi: x.hi === Infinity ? Infinity : sinhAt(x.hi).hi });
export const cosh = (x: Interval): Interval => {
  const y = absolute(x);
  return { lo: coshAt(Math.min(y.lo, 711)).lo, hi: y.hi === Infinity ? Infinity : coshAt(y.hi).hi };
};
export const tanh = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -1 : tanhAt(x.lo).lo, hi: x.hi === Infinity ? 1 : tanhAt(x.hi).hi });
export const asinh = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -Infinity : asinhAt(x.lo).lo, hi: x.hi === Infinity ? Infinity : asinhAt(x.hi).hi });
export const acosh = (x: Interval): Interval | null => (x.hi === Infinity ? (x.lo >= 1 ? { lo: (acoshAt(x.lo) ?? ZERO).lo, hi: Infinity } : null) : increasing(acoshAt, x));
export const atanh = (x: Interval): Interval | null => increasing(atanhAt, x);
export const asin = (x: Interval): Interval | null => increasing(asinAt, x);
export const acos = (x: Interval): Interval | null => {
  const high = acosAt(x.lo);
  const low = acosAt(x.hi);
  return high === null || low === null ? null : { lo: low.lo, hi: high.hi };
};

/** [sin, cos] over an interval. */
export function sinCos(x: Interval): readonly [Interval, Interval] {
  if (x.lo === x.hi) return sineCosineAt(x.lo);
  if (!(x.hi - x.lo < 6.3) || Math.abs(x.lo) > 1e15 || Math.abs(x.hi) > 1e15) return [UNIT, UNIT];
  const [lowSine, lowCosine] = sineCosineAt(x.lo);
  const [highSine, highCosine] = sineCosineAt(x.hi);
  let sine = union(lowSine, highSine);
  let cosine = union(lowCosine, highCosine);
  const turns = divide(x, HALF_PI) ?? WHOLE;
  for (let k = Math.ceil(turns.lo), n = 0; k <= Math.floor(turns.hi) && n < 8; k += 1, n += 1) {
    const turn = ((k % 4) + 4) % 4;
    if (turn === 0) cosine = { lo: cosine.lo, hi: 1 };
    else if (turn === 1) sine = { lo: sine.lo, hi: 1 };
    else if (turn === 2) cosine = { lo: -1, hi: cosine.hi };
    else sine = { lo: -1, hi: sine.hi };
  }
  return [intersect(sine, UNIT) ?? UNIT, intersect(cosine, UNIT) ?? UNIT];
}
export const sin = (x: Interval): Interval => sinCos(x)[0];
export const cos = (x: Interval): Interval => sinCos(x)[1];

/** Increasing between its poles; null where there is, or may be, one inside. */
export function tan(x: Interval): Interval | null {
  const tangentAt = (y: number): Interval | null => {
    const [s, c] = sineCosineAt(y);
    return divide(s, c);
  };
  return containsZero(cos(x)) ? null : increasing(tangentAt, x);
}

/** n-th root of a double >= 0: a start by any means, then ends that are checked by powers. */
function rootAt(x: number, n: number): Interval {
  if (x === 0 || x === 1) return { lo: x, hi: x };
  if (x === Infinity) return { lo: 1, hi: Infinity };
  const start = Math.pow(x, 1 / n);
  for (let slack = 2 ** -51; ; slack *= 4) {
    const lo = start * (1 - slack);
    const hi = start * (1 + slack);
    const below = powerInteger(fromDouble(lo), n);
    const above = powerInteger(fromDouble(hi), n);
    if (below !== null && above !== null && below.hi <= x && above.lo >= x) return { lo, hi };
    if (slack > 1) return { lo: 0, hi: Math.max(1, x) };
  }
}

/** Real n-th root: of any number for odd n, of numbers at least 0 for even n. */
export function root(x: Interval, n: number): Interval | null {
  if (n === 1) return x;
  if (n === 2) return sqrt(x);
  if (x.lo < 0 && n % 2 === 0) return null;
  const at = (y: number): Interval => (y < 0 ? negate(rootAt(-y, n)) : rootAt(y, n));
  return total(at, x);
}

/** x^q; x >= 0 unless q is an integer, x > 0 where q < 0. */
export function powerRational(x: Interval, q: Rational): Interval | null {
  if (q.den === 1n) return powerInteger(x, q.num);
  if (x.lo < 0) return null;
  if (q.den <= 64n && q.num < 4096n && q.num > -4096n) {
    const base = root(x, Number(q.den));
    return base === null ? null : powerInteger(base, q.num);
  }
  if (x.lo > 0) return power(x, fromRational(q));
  if (q.num < 0n) return null;
  if (x.hi === 0) return ZERO;
  const top = power(fromDouble(x.hi), fromRational(q));
  return top === null ? null : { lo: 0, hi: top.hi };
}

/** x^y = exp(y log x), x > 0. */
export function power(x: Interval, y: Interval): Interval | null {
  const logarithm = log(x);
  return logarithm === null ? null : exp(multiply(y, logarithm));
}

/** Angle of (x, y) in (-pi, pi]; null at the origin and where both sides of the negative x-axis are met. */
export function atan2(y: Interval, x: Interval): Interval | null {
  if (x.lo > 0) {
    const quotient = divide(y, x);
    return quotient === null ? null : atan(quotient);
  }
  if (y.lo > 0 || y.hi < 0) {
    const quotient = divide(x, y);
    if (quotient === null) return null;
    return subtract(y.lo > 0 ? HALF_PI : negate(HALF_PI), atan(quotient));
  }
  return y.lo === 0 && y.hi === 0 && x.hi < 0 ? PI : null;
}

export { fromInteger };
