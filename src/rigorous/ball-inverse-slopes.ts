/** Bounds of the slopes of inverse functions, and what follows from them for wide balls. */
import { add, multiply, reciprocal, subtract } from './ball-operations.ts';
import { sqrt } from './ball-powers.ts';
import { byDerivative, RADIUS_PRECISION } from './ball-propagation.ts';
import { containsZero } from './ball-sets.ts';
import { absoluteUpper, exponentOf, fromEnds, lowerEnd, midpoint, negate, ONE, radius, upperEnd, ZERO } from './ball.ts';
import type { Ball } from './ball.types.ts';
import { bitLength } from './bits.ts';

/** A lower bound of 1 + y^2 over the ball. */
export function onePlusSquareLower(x: Ball): Ball {
  const end = containsZero(x) ? ZERO : x.mid > 0n ? lowerEnd(x) : upperEnd(x);
  return add(ONE, multiply(end, end, RADIUS_PRECISION), RADIUS_PRECISION);
}

/** A lower bound of 1 - y^2 over the ball, as an exact ball (zero where none is positive). */
export function oneMinusSquareLower(x: Ball): Ball {
  const top = x.mid < 0n ? negate(lowerEnd(x)) : upperEnd(x);
  const gap = lowerEnd(multiply(subtract(ONE, top, bitLength(top.mid) + Math.max(0, -top.exp) + 64), add(ONE, top, 64), 64));
  return gap.mid > 0n ? gap : ZERO;
}

/**
 * A monotone f with |f'|^2 <= 1/gap over the ball (asin, acos, acosh): by the derivative where the ball is narrow beside its distance from the end of the domain, else between
 * f's values `low` and `high` at the ends.
 */
export function byRootSlope(f: (x: Ball, precision: number) => Ball | null, x: Ball, low: Ball, high: Ball, gap: Ball, precision: number): Ball | null {
  if (gap.mid <= 0n || exponentOf(radius(x)) > -8 || exponentOf(gap) < exponentOf(radius(x)) + 6) return fromEnds(low, high, Math.min(precision, 64));
  const value = f(midpoint(x), precision);
  const least = sqrt(gap, RADIUS_PRECISION);
  const slope = least === null ? null : reciprocal(least, RADIUS_PRECISION);
  return value === null || slope === null ? fromEnds(low, high, 64) : byDerivative(value, x, absoluteUpper(slope));
}
