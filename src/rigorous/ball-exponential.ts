/**
 * Exponential and logarithm of real balls. Each result contains f(y) for every y in the argument, wide balls included.
 * `null`: not defined (real and finite) on the whole ball, or too large to be held.
 */
import { add, multiply, reciprocal, subtract } from './ball-operations.ts';
import { byDerivative, increasing, RADIUS_PRECISION, toFixed } from './ball-propagation.ts';
import { isExact, isPositive } from './ball-sets.ts';
import { absoluteUpper, exponentOf, fromInteger, lowerEnd, midpoint, ONE, radius, round, rounded, scaleByPowerOfTwo, subtractExact, withRadius, ZERO } from './ball.ts';
import type { Ball } from './ball.types.ts';
import { bitLength, shiftFloor } from './bits.ts';
import { exponential, logarithm, logTwoFixed } from './fixed.ts';

/** exp is refused above 2^30 in the argument: the result would have an exponent of a billion. */
const LARGEST_EXPONENT = 30;
export const logTwo = (precision: number): Ball => ({ mid: logTwoFixed(precision), rad: 2n, exp: -precision });

function expExact(x: Ball, precision: number): Ball | null {
  if (x.mid === 0n) return ONE;
  const size = exponentOf(x);
  if (size > LARGEST_EXPONENT) return x.mid > 0n ? null : { mid: 1n, rad: 1n, exp: -(2 ** LARGEST_EXPONENT) };
  if (size < -precision - 8) return { mid: 1n << BigInt(precision + 4), rad: 1n, exp: -precision - 4 };
  const bits = precision + 8;
  const work = bits + Math.max(0, size) + 4;
  const fixed = toFixed(x, work);
  const logTwoWork = logTwoFixed(work);
  const k = (2n * fixed + logTwoWork) / (2n * logTwoWork);
  const times = fixed < 0n && (2n * fixed + logTwoWork) % (2n * logTwoWork) !== 0n ? k - 1n : k;
  // The reduced argument is off by 1 + 2|k| ulp of `work`, |k| < 2^(size+1): below one ulp of `bits`; e^r < 2 turns it into two.
  const reduced = (fixed - times * logTwoWork) >> BigInt(work - bits);
  return rounded(exponential(reduced, bits), 8n, -bits + Number(times), precision);
}

export function exp(x: Ball, precision: number): Ball | null {
  if (isExact(x)) return expExact(x, precision);
  if (exponentOf(radius(x)) > -6) return increasing(expExact, x, precision);
  const value = expExact(midpoint(x), precision);
  // |e^y - e^m| <= e^m (e^r - 1) <= 2 r e^m for r <= 1.
  return value === null ? null : byDerivative(value, x, scaleByPowerOfTwo(absoluteUpper(value), 1));
}

/** e^x - 1 without cancellation. */
export function expm1(x: Ball, precision: number): Ball | null {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (isExact(x) || size > -2) {
    if (size < -precision) return withRadius(round(x, precision), absoluteUpper(multiply(x, x, RADIUS_PRECISION)));
    const value = exp(x, precision + Math.max(0, -size) + 4);
    return value === null ? null : subtract(value, ONE, precision);
  }
  const value = expm1(midpoint(x), precision);
  return value === null ? null : byDerivative(value, x, fromInteger(2));
}

function logExact(x: Ball, precision: number): Ball | null {
  if (x.mid <= 0n) return null;
  if (x.mid === 1n) return x.exp === 0 ? ZERO : multiply(fromInteger(x.exp), logTwo(precision + bitLength(BigInt(x.exp))), precision);
  // x = m 2^e with m in [1/2, 2], and e = 0 whenever x itself is in that range.
  const top = bitLength(x.mid) + x.exp;
  const exponent = top === 0 || top === 1 || top === 2 ? (top === 2 && !(x.exp <= 0 && x.mid <= 2n << BigInt(-x.exp)) ? 2 : 0) : top;
  const difference = exponent === 0 ? subtractExact(x, ONE) : null;
  const closeness = difference === null ? 0 : exponentOf(difference);
  if (closeness === -Infinity) return ZERO;
  if (difference !== null && closeness < -precision) {
    // |log(1+d) - d| <= d^2 for |d| <= 1/2.
    return withRadius(round(difference, precision), absoluteUpper(multiply(difference, difference, RADIUS_PRECISION)));
  }
  const bits = precision + 8 + Math.max(0, -closeness);
  const fixed = shiftFloor(x.mid, x.exp - exponent + bits);
  // The argument is off by one ulp, and |log'| <= 2 on [1/2, 2].
  const main: Ball = { mid: logarithm(fixed, bits), rad: 8n, exp: -bits };
  if (exponent === 0) return round(main, precision);
  return add(main, multiply(fromInteger(exponent), logTwo(bits + bitLength(BigInt(exponent))), bits), precision);
}

/** Natural logarithm; null unless every number of x is positive. */
export function log(x: Ball, precision: number): Ball | null {
  if (!isPositive(x)) return null;
  if (isExact(x)) return logExact(x, precision);
  if (x.rad << 6n > x.mid) return increasing(logExact, x, precision);
  const value = logExact(midpoint(x), precision);
  const slope = reciprocal(lowerEnd(x), RADIUS_PRECISION);
  return value === null || slope === null ? null : byDerivative(value, x, absoluteUpper(slope));
}

/** log(1 + x) without cancellation; null unless x > -1. */
export function log1p(x: Ball, precision: number): Ball | null {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (size < -1) {
    const d = midpoint(x);
    // 1 + d is exact when enough bits are kept; beyond that the quadratic term decides.
    const value = exponentOf(d) < -2 * precision ? withRadius(round(d, precision), absoluteUpper(multiply(d, d, RADIUS_PRECISION))) : logExact(add(ONE, d, precision + bitLength(d.mid) - d.exp + 64), precision);
    return value === null ? null : byDerivative(value, x, fromInteger(2));
  }
  return log(add(ONE, x, precision + 16), precision);
}
