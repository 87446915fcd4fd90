/** How a function that is known at exact balls becomes one of wide balls. */
import { multiply } from './ball-operations.ts';
import { isExact } from './ball-sets.ts';
import { absoluteUpper, fromEnds, lowerEnd, radius, relativeAccuracy, round, upperEnd, withRadius } from './ball.ts';
import type { Ball } from './ball.types.ts';
import { shiftFloor } from './bits.ts';

/** [-1, 1]. */
export const UNIT: Ball = { mid: 0n, rad: 1n, exp: 0 };
/** Bits in which bounds of derivatives and other radii are computed. */
export const RADIUS_PRECISION = 40;

/** The exact ball x as a fixed-point number with `bits` fractional bits, and its error in ulp. */
export const toFixed = (x: Ball, bits: number): bigint => shiftFloor(x.mid, x.exp + bits);

/** f(x) enclosed by f(midpoint) and a bound of |f'| over x: right for balls narrow enough that the bound is near the truth. */
export const byDerivative = (value: Ball, x: Ball, derivativeBound: Ball): Ball =>
  isExact(x) ? value : withRadius(value, absoluteUpper(multiply(radius(x), derivativeBound, RADIUS_PRECISION)));

/** f increasing: the ends decide. */
export function increasing(f: (x: Ball, precision: number) => Ball | null, x: Ball, precision: number): Ball | null {
  const bits = relativeAccuracy(x) > 20 ? precision : Math.min(precision, 64);
  const low = f(lowerEnd(x), bits);
  const high = f(upperEnd(x), bits);
  return low === null || high === null ? null : fromEnds(low, high, bits);
}

/** x +- |x|^3 for an exact x: encloses atan, sinh, tanh, asinh and atanh of small arguments, |x| <= 1/2. */
export const nearIdentity = (x: Ball, precision: number): Ball =>
  withRadius(round(x, precision), multiply(absoluteUpper(multiply(x, x, RADIUS_PRECISION)), absoluteUpper(x), RADIUS_PRECISION));
