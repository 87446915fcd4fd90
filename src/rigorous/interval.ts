/**
 * Closed intervals of doubles with outward rounding and no rounding modes: for x = fl(a op b) the exact result lies between
 * x - (phi |x| + eta) and x + (phi |x| + eta), phi = 2^-53 (1 + 2^-52), eta = 2^-1074 (Rump, Zimmermann, Boldo, Melquiond, BIT 49 (2009), formulas (4), (5)).
 * An infinite end means "no bound known on this side"; it is never a value. NaN never leaves this file.
 */
import type { Rational } from '../expression/index.ts';
import * as ball from './ball.ts';
import type { Ball, Interval } from './ball.types.ts';
import { bitLength, magnitude } from './bits.ts';

const PHI = 2 ** -53 * (1 + 2 ** -52);
const ETA = 2 ** -1074;

/** A double not below the exact value whose nearest double is x. */
export function up(x: number): number {
  const y = x + (PHI * Math.abs(x) + ETA);
  return y === y ? y : x < 0 ? -Number.MAX_VALUE : Infinity;
}
/** A double not above the exact value whose nearest double is x. */
export function down(x: number): number {
  const y = x - (PHI * Math.abs(x) + ETA);
  return y === y ? y : x > 0 ? Number.MAX_VALUE : -Infinity;
}

export const ZERO: Interval = { lo: 0, hi: 0 };
export const ONE: Interval = { lo: 1, hi: 1 };
export const WHOLE: Interval = { lo: -Infinity, hi: Infinity };

export const fromDouble = (x: number): Interval => ({ lo: x, hi: x });
export const fromEnds = (lo: number, hi: number): Interval => ({ lo, hi });

export function fromInteger(n: number | bigint): Interval {
  const x = Number(n);
  return Number.isSafeInteger(x) ? { lo: x, hi: x } : { lo: down(x), hi: up(x) };
}

/** Tight to two units in the last place; exact where the rational is a double with a small numerator. */
export function fromRational(q: Rational): Interval {
  if (q.den === 1n) return fromInteger(q.num);
  const n = Number(q.num);
  const d = Number(q.den);
  if (Number.isSafeInteger(n) && Number.isSafeInteger(d)) {
    const x = n / d;
    // Exact for powers of two below.
    return (q.den & (q.den - 1n)) === 0n && Math.abs(x) > 2 ** -1000 ? { lo: x, hi: x } : { lo: down(x), hi: up(x) };
  }
  return fromBall(ball.fromRational(q, 64));
}

/** Outward: every number of the ball is inside. */
export function fromBall(x: Ball): Interval {
  return { lo: endToDouble(x.mid - x.rad, x.exp, -1), hi: endToDouble(x.mid + x.rad, x.exp, 1) };
}

function endToDouble(mid: bigint, exp: number, direction: 1 | -1): number {
  if (mid === 0n) return 0;
  const bits = bitLength(mid);
  const cut = bits > 53 ? bits - 53 : 0;
  const size = magnitude(mid);
  // Truncated or raised magnitude, by the side wanted; an integer below 2^53 + 2 is exact as a double.
  const short = size >> BigInt(cut);
  const exact = short << BigInt(cut) === size;
  const outward = mid > 0n === direction > 0;
  const m = Number(outward && !exact ? short + 1n : short);
  const e = exp + cut;
  const value = scale(m, e);
  const signed = mid > 0n ? value : -value;
  if (e < -1074 || e > 970) {
    // Subnormal results are rounded by the scaling, large ones may overflow.
    if (value === Infinity) return outward ? signed : mid > 0n ? Number.MAX_VALUE : -Number.MAX_VALUE;
    return direction > 0 ? up(signed) : down(signed);
  }
  return signed;
}

/** x * 2^n with at most one rounding, for |n| up to a few thousand; beyond, zero or infinity. */
function scale(x: number, n: number): number {
  if (n > 970) return n > 2100 ? (x === 0 ? 0 : x * Infinity) : x * 2 ** 970 * 2 ** Math.min(n - 970, 1023);
  if (n < -1022) return n < -2200 ? 0 : x * 2 ** -1022 < 2 ** -500 ? x * 2 ** Math.max(n, -1074) * 2 ** Math.min(0, n + 1074) : x * 2 ** -1022 * 2 ** (n + 1022);
  return x * 2 ** n;
}

/** Exact; rejects intervals without finite ends. */
export function toBall(x: Interval, precision = 64): Ball | null {
  if (!Number.isFinite(x.lo) || !Number.isFinite(x.hi)) return null;
  return x.lo === x.hi ? ball.fromDouble(x.lo) : ball.fromEnds(ball.fromDouble(x.lo), ball.fromDouble(x.hi), precision);
}

export const isFinite = (x: Interval): boolean => x.lo > -Infinity && x.hi < Infinity;
export const isPoint = (x: Interval): boolean => x.lo === x.hi;
export const isZero = (x: Interval): boolean => x.lo === 0 && x.hi === 0;
export const containsZero = (x: Interval): boolean => x.lo <= 0 && x.hi >= 0;
export const contains = (x: Interval, value: number): boolean => x.lo <= value && value <= x.hi;
export const isPositive = (x: Interval): boolean => x.lo > 0;
export const isNegative = (x: Interval): boolean => x.hi < 0;
export const isNonNegative = (x: Interval): boolean => x.lo >= 0;
export const width = (x: Interval): number => up(x.hi - x.lo);

export const negate = (x: Interval): Interval => ({ lo: -x.hi, hi: -x.lo });

/** The rounding error of x + y is exactly zero (Knuth's two-sum). */
function exactSum(x: number, y: number, s: number): boolean {
  const part = s - x;
  return x - (s - part) + (y - part) === 0;
}
/** A sum of doubles that rounds to zero is zero. */
const sumDown = (s: number): number => (s === 0 ? 0 : down(s));
const sumUp = (s: number): number => (s === 0 ? 0 : up(s));

export function add(a: Interval, b: Interval): Interval {
  if (a.lo === 0 && a.hi === 0) return b;
  if (b.lo === 0 && b.hi === 0) return a;
  const lo = a.lo + b.lo;
  if (a.lo === a.hi && b.lo === b.hi && exactSum(a.lo, b.lo, lo)) return { lo, hi: lo };
  return { lo: sumDown(lo), hi: sumUp(a.hi + b.hi) };
}
export const subtract = (a: Interval, b: Interval): Interval => (b.lo === 0 && b.hi === 0 ? a : add(a, { lo: -b.hi, hi: -b.lo }));

/** Products and quotients of small integers are exact: values at special points stay so. */
const exactProduct = (x: number, y: number): boolean => Number.isInteger(x) && Number.isInteger(y) && Math.abs(x * y) <= Number.MAX_SAFE_INTEGER;

/** Zero times infinity is zero here: an infinite end stands for arbitrarily large finite numbers. */
const times = (a: number, b: number): number => (a === 0 || b === 0 ? 0 : a * b);

export function multiply(a: Interval, b: Interval): Interval {
  if ((a.lo === 0 && a.hi === 0) || (b.lo === 0 && b.hi === 0)) return ZERO;
  if (a.lo === a.hi) {
    if (a.lo === 1) return b;
    if (a.lo === -1) return { lo: -b.hi, hi: -b.lo };
    if (b.lo === b.hi && exactProduct(a.lo, b.lo)) return { lo: a.lo * b.lo, hi: a.lo * b.lo };
  }
  if (b.lo === b.hi) {
    if (b.lo === 1) return a;
    if (b.lo === -1) return { lo: -a.hi, hi: -a.lo };
  }
  if (a.lo >= 0) {
    if (b.lo >= 0) return { lo: Math.max(0, down(times(a.lo, b.lo))), hi: up(times(a.hi, b.hi)) };
    if (b.hi <= 0) return { lo: down(times(a.hi, b.lo)), hi: Math.min(0, up(times(a.lo, b.hi))) };
    return { lo: down(times(a.hi, b.lo)), hi: up(times(a.hi, b.hi)) };
  }
  if (a.hi <= 0) {
    if (b.lo >= 0) return { lo: down(times(a.lo, b.hi)), hi: Math.min(0, up(times(a.hi, b.lo))) };
    if (b.hi <= 0) return { lo: Math.max(0, down(times(a.hi, b.hi))), hi: up(times(a.lo, b.lo)) };
    return { lo: down(times(a.lo, b.hi)), hi: up(times(a.lo, b.lo)) };
  }
  if (b.lo >= 0) return { lo: down(times(a.lo, b.hi)), hi: up(times(a.hi, b.hi)) };
  if (b.hi <= 0) return { lo: down(times(a.hi, b.lo)), hi: up(times(a.lo, b.lo)) };
  return { lo: down(Math.min(times(a.lo, b.hi), times(a.hi, b.lo))), hi: up(Math.max(times(a.lo, b.lo), times(a.hi, b.hi))) };
}

export function square(x: Interval): Interval {
  if (x.lo === x.hi && exactProduct(x.lo, x.lo)) return { lo: x.lo * x.lo, hi: x.lo * x.lo };
  const a = Math.abs(x.lo);
  const b = Math.abs(x.hi);
  const large = a > b ? a : b;
  const small = x.lo <= 0 && x.hi >= 0 ? 0 : a > b ? b : a;
  return { lo: small === 0 ? 0 : Math.max(0, down(small * small)), hi: large === 0 ? 0 : up(large * large) };
}

/** Null where b contains zero. */
export function divide(a: Interval, b: Interval): Interval | null {
  if (b.lo <= 0 && b.hi >= 0) return null;
  if (a.lo === 0 && a.hi === 0) return ZERO;
  if (b.lo === b.hi) {
    if (b.lo === 1) return a;
    const q = a.lo / b.lo;
    if (a.lo === a.hi && exactProduct(q, b.lo) && q * b.lo === a.lo) return { lo: q, hi: q };
  }
  if (b.hi < 0) return divide(negate(a), negate(b));
  // b > 0: each end of a by the end of b that makes it extreme.
  const over = (x: number, y: number): number => (y === Infinity ? 0 : x / y);
  const lo = a.lo >= 0 ? Math.max(0, down(over(a.lo, b.hi))) : down(over(a.lo, b.lo));
  const hi = a.hi <= 0 ? Math.min(0, up(over(a.hi, b.hi))) : up(over(a.hi, b.lo));
  return { lo, hi };
}

export function absolute(x: Interval): Interval {
  if (x.lo >= 0) return x;
  if (x.hi <= 0) return negate(x);
  return { lo: 0, hi: Math.max(-x.lo, x.hi) };
}
/** The largest absolute value. */
export const size = (x: Interval): number => Math.max(-x.lo, x.hi);
/** The smallest absolute value. */
export const leastSize = (x: Interval): number => (x.lo > 0 ? x.lo : x.hi < 0 ? -x.hi : 0);
export const union = (a: Interval, b: Interval): Interval => ({ lo: a.lo < b.lo ? a.lo : b.lo, hi: a.hi > b.hi ? a.hi : b.hi });
export function intersect(a: Interval, b: Interval): Interval | null {
  const lo = a.lo > b.lo ? a.lo : b.lo;
  const hi = a.hi < b.hi ? a.hi : b.hi;
  return lo <= hi ? { lo, hi } : null;
}
export function midpoint(x: Interval): number {
  if (x.lo === -Infinity) return x.hi === Infinity ? 0 : -Number.MAX_VALUE;
  if (x.hi === Infinity) return Number.MAX_VALUE;
  const m = x.lo / 2 + x.hi / 2;
  return m < x.lo ? x.lo : m > x.hi ? x.hi : m;
}
export const maximum = (a: Interval, b: Interval): Interval => ({ lo: Math.max(a.lo, b.lo), hi: Math.max(a.hi, b.hi) });
export const minimum = (a: Interval, b: Interval): Interval => ({ lo: Math.min(a.lo, b.lo), hi: Math.min(a.hi, b.hi) });

/** Square root of the whole interval; null where part of it is negative. Math.sqrt is correctly rounded (IEEE 754). */
export function sqrt(x: Interval): Interval | null {
  if (x.lo < 0) return null;
  const r = Math.sqrt(x.lo);
  if (x.lo === x.hi && exactProduct(r, r) && r * r === x.lo) return { lo: r, hi: r };
  return { lo: x.lo === 0 ? 0 : Math.max(0, down(Math.sqrt(x.lo))), hi: x.hi === 0 ? 0 : up(Math.sqrt(x.hi)) };
}

/** x^n for an integer n; null for a negative n where x contains zero. */
export function powerInteger(x: Interval, n: number | bigint): Interval | null {
  const exponent = Number(n);
  if (exponent === 0) return ONE;
  if (exponent < 0) {
    const positive = powerInteger(x, -exponent);
    return positive === null ? null : divide(ONE, positive);
  }
  if (exponent === 1) return x;
  if (exponent === 2) return square(x);
  if (x.lo === x.hi && Math.abs(x.lo) === 1) return exponent % 2 === 0 ? ONE : x;
  const even = exponent % 2 === 0;
  if (even) {
    const y = absolute(x);
    return { lo: powerDown(y.lo, exponent), hi: powerUp(y.hi, exponent) };
  }
  return { lo: x.lo >= 0 ? powerDown(x.lo, exponent) : -powerUp(-x.lo, exponent), hi: x.hi >= 0 ? powerUp(x.hi, exponent) : -powerDown(-x.hi, exponent) };
}

function powerUp(x: number, n: number): number {
  let base = x;
  let result = 1;
  for (let k = n; ; ) {
    if (k % 2 === 1) result = result === 1 ? base : up(result * base);
    k = Math.floor(k / 2);
    if (k === 0) return x === 0 ? 0 : result;
    base = up(base * base);
  }
}
function powerDown(x: number, n: number): number {
  let base = x;
  let result = 1;
  for (let k = n; ; ) {
    if (k % 2 === 1) result = result === 1 ? base : Math.max(0, down(result * base));
    k = Math.floor(k / 2);
    if (k === 0) return result;
    base = Math.max(0, down(base * base));
  }
}
