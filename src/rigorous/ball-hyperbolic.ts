/**
 * Hyperbolic functions of real balls and their inverses. Each result contains f(y) for every y in the argument, wide balls included.
 * `null`: part of the ball lies outside the domain, or the result is too large to be held.
 */
import { exp, expm1, log1p } from './ball-exponential.ts';
import { byRootSlope, oneMinusSquareLower, onePlusSquareLower } from './ball-inverse-slopes.ts';
import { absolute, add, divide, multiply, reciprocal, subtract } from './ball-operations.ts';
import { sqrt } from './ball-powers.ts';
import { byDerivative, increasing, nearIdentity, RADIUS_PRECISION, UNIT } from './ball-propagation.ts';
import { containsZero, isExact } from './ball-sets.ts';
import { absoluteUpper, exponentOf, fromInteger, lowerEnd, midpoint, negate, ONE, radius, scaleByPowerOfTwo, upperEnd, withRadius, ZERO } from './ball.ts';
import type { Ball } from './ball.types.ts';
import { bitLength } from './bits.ts';

function sinhExact(x: Ball, precision: number): Ball | null {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (size < -precision / 2) return nearIdentity(x, precision);
  const work = precision + 8 + Math.max(0, -size);
  const e = exp(x, work);
  const inverse = e === null ? exp(negate(x), work) : reciprocal(e, work);
  return e === null || inverse === null ? null : scaleByPowerOfTwo(subtract(e, inverse, precision), -1);
}

function coshExact(x: Ball, precision: number): Ball | null {
  const e = exp(absolute(x), precision + 8);
  const inverse = e === null ? null : reciprocal(e, precision + 8);
  return e === null || inverse === null ? null : scaleByPowerOfTwo(add(e, inverse, precision), -1);
}

/** Null only where the result would be beyond 2^(2^30). */
export function sinh(x: Ball, precision: number): Ball | null {
  if (isExact(x)) return sinhExact(x, precision);
  if (exponentOf(radius(x)) > -8) return increasing(sinhExact, x, precision);
  const value = sinhExact(midpoint(x), precision);
  const slope = coshExact(absoluteUpper(x), RADIUS_PRECISION);
  return value === null || slope === null ? null : byDerivative(value, x, absoluteUpper(slope));
}

export function cosh(x: Ball, precision: number): Ball | null {
  if (isExact(x)) return coshExact(x, precision);
  if (exponentOf(radius(x)) > -8) return increasing(coshExact, absolute(x), precision);
  const value = coshExact(midpoint(x), precision);
  const slope = sinhExact(absoluteUpper(x), RADIUS_PRECISION);
  return value === null || slope === null ? null : byDerivative(value, x, absoluteUpper(slope));
}

function tanhExact(x: Ball, precision: number): Ball {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (size < -precision / 2) return nearIdentity(x, precision);
  // tanh x = -m/(2 + m) with m = e^(-2|x|) - 1.
  const positive = absolute(x);
  const m = expm1(scaleByPowerOfTwo(negate(positive), 1), precision + 8);
  const quotient = m === null ? null : divide(negate(m), add(fromInteger(2), m, precision + 8), precision);
  const value = quotient ?? withRadius(ONE, ONE);
  return x.mid < 0n ? negate(value) : value;
}

export function tanh(x: Ball, precision: number): Ball {
  if (isExact(x)) return tanhExact(x, precision);
  if (exponentOf(radius(x)) > -8) return increasing(tanhExact, x, precision) ?? UNIT;
  // tanh' = 1 - tanh^2 <= 1; with the square at the end nearer to zero it stays near the truth for large arguments.
  const value = tanhExact(midpoint(x), precision);
  const nearest = tanhExact(x.mid >= 0n ? lowerEnd(x) : upperEnd(x), RADIUS_PRECISION);
  const slope = containsZero(x) ? ONE : absoluteUpper(subtract(ONE, multiply(nearest, nearest, RADIUS_PRECISION), RADIUS_PRECISION));
  return byDerivative(value, x, slope);
}

function asinhExact(x: Ball, precision: number): Ball | null {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (size < -precision / 2) return nearIdentity(x, precision);
  // asinh x = log1p(x + x^2/(1 + sqrt(1 + x^2))) for x > 0.
  const work = precision + 16 + Math.max(0, -size);
  const y = absolute(x);
  const squared = multiply(y, y, work);
  const hypotenuse = sqrt(add(ONE, squared, work), work);
  const quotient = hypotenuse === null ? null : divide(squared, add(ONE, hypotenuse, work), work);
  const value = quotient === null ? null : log1p(add(y, quotient, work), precision);
  return value === null ? null : x.mid < 0n ? negate(value) : value;
}

export function asinh(x: Ball, precision: number): Ball | null {
  if (isExact(x)) return asinhExact(x, precision);
  if (exponentOf(radius(x)) > -8) return increasing(asinhExact, x, precision);
  const value = asinhExact(midpoint(x), precision);
  const least = sqrt(onePlusSquareLower(x), RADIUS_PRECISION);
  const slope = least === null ? null : reciprocal(least, RADIUS_PRECISION);
  return value === null || slope === null ? null : byDerivative(value, x, absoluteUpper(slope));
}

/** Null unless every number of the ball is at least 1. */
export function acosh(x: Ball, precision: number): Ball | null {
  const exact = (y: Ball, p: number): Ball | null => {
    // Only beside 1 does y - 1 lose bits.
    const work = p + (exponentOf(y) > 2 ? 0 : bitLength(y.mid)) + 64;
    const above = subtract(y, ONE, work);
    if (above.mid < 0n) return null;
    if (above.mid === 0n) return ZERO;
    const inner = sqrt(multiply(above, add(y, ONE, work), p + 16), p + 16);
    return inner === null ? null : log1p(add(above, inner, p + 16), p);
  };
  if (isExact(x)) return exact(x, precision);
  const low = exact(lowerEnd(x), 64);
  const high = exact(upperEnd(x), 64);
  if (low === null || high === null) return null;
  const end = lowerEnd(x);
  const gap = lowerEnd(multiply(subtract(end, ONE, 64), add(end, ONE, 64), 64));
  return byRootSlope(exact, x, low, high, gap, precision);
}

/** Null unless the ball lies in (-1, 1). */
export function atanh(x: Ball, precision: number): Ball | null {
  const exact = (y: Ball, p: number): Ball | null => {
    const size = exponentOf(y);
    if (size === -Infinity) return ZERO;
    if (size < -p / 2) return nearIdentity(y, p);
    const positive = absolute(y);
    const below = subtract(ONE, positive, p + bitLength(y.mid) + 64);
    if (below.mid <= 0n) return null;
    const quotient = divide(scaleByPowerOfTwo(positive, 1), below, p + 16);
    const value = quotient === null ? null : log1p(quotient, p);
    return value === null ? null : scaleByPowerOfTwo(y.mid < 0n ? negate(value) : value, -1);
  };
  if (isExact(x)) return exact(x, precision);
  const gap = oneMinusSquareLower(x);
  if (gap.mid === 0n) return null;
  if (exponentOf(radius(x)) > -8 || exponentOf(gap) < exponentOf(radius(x)) + 6) return increasing(exact, x, precision);
  const value = exact(midpoint(x), precision);
  const slope = reciprocal(gap, RADIUS_PRECISION);
  return value === null || slope === null ? null : byDerivative(value, x, absoluteUpper(slope));
}
