/** Real balls as sets of numbers: hulls, common parts, order, and what lies inside. */
import type { Rational } from '../expression/index.ts';
import { EXPANSION_LIMIT, fromEnds, lowerEnd, negate, upperEnd } from './ball.ts';
import type { Ball } from './ball.types.ts';
import { bitLength, magnitude, shiftFloor } from './bits.ts';

/** The smallest ball (up to rounding) that contains both. */
export function union(a: Ball, b: Ball, precision = 128): Ball {
  return fromEnds(compareExact(lowerEnd(a), lowerEnd(b)) <= 0 ? lowerEnd(a) : lowerEnd(b), compareExact(upperEnd(a), upperEnd(b)) >= 0 ? upperEnd(a) : upperEnd(b), precision);
}

/** The common part; null where there is none. */
export function intersection(a: Ball, b: Ball, precision = 128): Ball | null {
  const low = compareExact(lowerEnd(a), lowerEnd(b)) >= 0 ? lowerEnd(a) : lowerEnd(b);
  const high = compareExact(upperEnd(a), upperEnd(b)) <= 0 ? upperEnd(a) : upperEnd(b);
  return compareExact(low, high) > 0 ? null : fromEnds(low, high, precision);
}

/** Three-valued sign: undefined ("cannot tell") as null. */
export function sign(x: Ball): -1 | 0 | 1 | null {
  if (x.mid > x.rad) return 1;
  if (-x.mid > x.rad) return -1;
  return x.mid === 0n && x.rad === 0n ? 0 : null;
}

function compareExact(a: Ball, b: Ball): number {
  if (a.exp === b.exp) return a.mid < b.mid ? -1 : a.mid > b.mid ? 1 : 0;
  const sa = a.mid > 0n ? 1 : a.mid < 0n ? -1 : 0;
  const sb = b.mid > 0n ? 1 : b.mid < 0n ? -1 : 0;
  if (sa !== sb) return sa - sb;
  if (sa === 0) return 0;
  const ta = a.exp + bitLength(a.mid);
  const tb = b.exp + bitLength(b.mid);
  if (Math.abs(ta - tb) > 2) return ta > tb ? sa : -sa;
  const exp = Math.min(a.exp, b.exp);
  const left = a.mid << BigInt(a.exp - exp);
  const right = b.mid << BigInt(b.exp - exp);
  return left < right ? -1 : left > right ? 1 : 0;
}

/** -1 where every number of a is below every number of b, 1 the other way round, 0 where both are the same exact number, null where the balls overlap. */
export function compare(a: Ball, b: Ball): -1 | 0 | 1 | null {
  if (compareExact(upperEnd(a), lowerEnd(b)) < 0) return -1;
  if (compareExact(lowerEnd(a), upperEnd(b)) > 0) return 1;
  return a.rad === 0n && b.rad === 0n ? 0 : null;
}

export const isExact = (x: Ball): boolean => x.rad === 0n;
export const containsZero = (x: Ball): boolean => magnitude(x.mid) <= x.rad;
export const isPositive = (x: Ball): boolean => x.mid > x.rad;
export const isNegative = (x: Ball): boolean => -x.mid > x.rad;
export const isNonNegative = (x: Ball): boolean => x.mid >= x.rad;
/** Every number of `inner` lies in `outer`. */
export const containsBall = (outer: Ball, inner: Ball): boolean =>
  compareExact(lowerEnd(outer), lowerEnd(inner)) <= 0 && compareExact(upperEnd(inner), upperEnd(outer)) <= 0;
export const overlaps = (a: Ball, b: Ball): boolean => compareExact(lowerEnd(a), upperEnd(b)) <= 0 && compareExact(lowerEnd(b), upperEnd(a)) <= 0;
/** The exact rational lies in the ball. */
export function contains(x: Ball, q: Rational): boolean {
  const scaled = (n: bigint): bigint => (x.exp >= 0 ? (n << BigInt(x.exp)) * q.den : n * q.den);
  const target = x.exp >= 0 ? q.num : q.num << BigInt(-x.exp);
  return scaled(x.mid - x.rad) <= target && target <= scaled(x.mid + x.rad);
}
export const minimum = (a: Ball, b: Ball, precision = 128): Ball => {
  const [la, lb, ua, ub] = [lowerEnd(a), lowerEnd(b), upperEnd(a), upperEnd(b)];
  if (compareExact(ua, lb) <= 0) return a;
  if (compareExact(ub, la) <= 0) return b;
  return fromEnds(compareExact(la, lb) <= 0 ? la : lb, compareExact(ua, ub) <= 0 ? ua : ub, precision);
};
export const maximum = (a: Ball, b: Ball, precision = 128): Ball => negate(minimum(negate(a), negate(b), precision));

/** floor(x) where it is the same for the whole ball, else null. */
export function floorOf(x: Ball): bigint | null {
  if (x.exp > EXPANSION_LIMIT) return null;
  const low = shiftFloor(x.mid - x.rad, x.exp);
  return low === shiftFloor(x.mid + x.rad, x.exp) ? low : null;
}

/** The integer nearest to the midpoint. */
export const nearestInteger = (x: Ball): bigint => (x.exp >= 0 ? x.mid << BigInt(x.exp) : -x.exp > bitLength(x.mid) + 1 ? 0n : (x.mid + (1n << BigInt(-x.exp - 1))) >> BigInt(-x.exp));
