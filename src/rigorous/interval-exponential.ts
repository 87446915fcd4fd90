/** Exponential, logarithm, roots and powers of double intervals. Null: not defined on the whole interval. */
import type { Rational } from '../expression/index.ts';
import type { Interval } from './ball.types.ts';
import { exponentialTail, increasing, total, widen } from './interval-kernels.ts';
import { add, down, fromBall, fromDouble, fromRational, multiply, negate, ONE, powerInteger, sqrt, subtract, up, WHOLE, ZERO } from './interval.ts';
import * as real from './real.ts';

/** log 2 = LOG2_HIGH + LOG2_LOW + less than 2^-86; the first has 32 trailing zero bits, so products with |k| < 2^11 are exact. */
const LOG2_HIGH = 6.93147180369123816490e-1;
const LOG2_LOW = 1.90821492927058770002e-10;
export const LOG_TWO: Interval = fromBall(real.logTwo(80));

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

export function expAt(x: number): Interval {
  if (x === 0) return ONE;
  if (x > 709.7) return x === Infinity ? WHOLE : x < 710 ? { lo: 1.6e308, hi: Infinity } : { lo: Number.MAX_VALUE, hi: Infinity };
  if (x < -740) return { lo: 0, hi: 2 ** -1066 };
  const k = Math.round(x * 1.4426950408889634);
  const r = x - k * LOG2_HIGH - k * LOG2_LOW;
  return scaled(widen(exponentialTail(r, 0, 14, 1)), k);
}

export function expm1At(x: number): Interval {
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

export function logAt(x: number): Interval {
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

export const exp = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? 0 : expAt(x.lo).lo, hi: x.hi === Infinity ? Infinity : expAt(x.hi).hi });
export const expm1 = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -1 : expm1At(x.lo).lo, hi: x.hi === Infinity ? Infinity : expm1At(x.hi).hi });
export const log = (x: Interval): Interval | null => (x.lo > 0 ? total(logAt, x) : null);
export const log1p = (x: Interval): Interval | null => (x.hi === Infinity ? (x.lo > -1 ? { lo: (log1pAt(x.lo) ?? WHOLE).lo, hi: Infinity } : null) : increasing(log1pAt, x));

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
