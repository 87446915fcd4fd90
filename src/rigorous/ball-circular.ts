/**
 * Circular functions of real balls and their inverses. Each result contains f(y) for every y in the argument, wide balls included.
 * `null`: a pole inside, or part of the ball outside the domain.
 */
import { byRootSlope, oneMinusSquareLower, onePlusSquareLower } from './ball-inverse-slopes.ts';
import { add, divide, multiply, reciprocal, subtract } from './ball-operations.ts';
import { sqrt } from './ball-powers.ts';
import { byDerivative, increasing, nearIdentity, RADIUS_PRECISION, toFixed, UNIT } from './ball-propagation.ts';
import { containsZero, intersection, isExact, isPositive, union } from './ball-sets.ts';
import { absoluteUpper, exponentOf, lowerEnd, midpoint, negate, ONE, radius, round, rounded, scaleByPowerOfTwo, upperEnd, withRadius, ZERO } from './ball.ts';
import type { Ball } from './ball.types.ts';
import { bitLength, magnitude, shiftFloor } from './bits.ts';
import { inverseTangent, piFixed, sineCosine } from './fixed.ts';

/** Sines of arguments beyond 2^20000 are answered by [-1, 1] rather than by 20000 bits of pi. */
const LARGEST_PHASE = 20000;
const MINUS_ONE: Ball = { mid: -1n, rad: 0n, exp: 0 };

export const pi = (precision: number): Ball => ({ mid: piFixed(precision), rad: 2n, exp: -precision });

/** [sin, cos] of an exact ball. */
function sineCosineExact(x: Ball, precision: number): readonly [Ball, Ball] {
  if (x.mid === 0n) return [ZERO, ONE];
  const size = exponentOf(x);
  if (size > LARGEST_PHASE) return [UNIT, UNIT];
  if (size < -precision) {
    const squared = absoluteUpper(multiply(x, x, RADIUS_PRECISION));
    return [withRadius(round(x, precision), multiply(squared, absoluteUpper(x), RADIUS_PRECISION)), withRadius({ mid: 1n << BigInt(precision), rad: 0n, exp: -precision }, squared)];
  }
  // Enough bits that a sine near a multiple of pi/2 keeps its relative accuracy is asked for by `extra`, once.
  for (let extra = Math.max(0, -size); ; extra += precision + 64) {
    const bits = precision + 8 + extra;
    const work = bits + Math.max(0, size) + 4;
    const fixed = toFixed(x, work);
    const quarter = piFixed(work) >> 1n;
    const k = roundQuotient(fixed, quarter);
    const reduced = (fixed - k * quarter) >> BigInt(work - bits);
    const [s, c] = sineCosine(reduced, bits);
    const turn = Number(((k % 4n) + 4n) % 4n);
    const [sine, cosine] = turn === 0 ? [s, c] : turn === 1 ? [c, -s] : turn === 2 ? [-s, -c] : [-c, s];
    const small = magnitude(s) < magnitude(c) ? s : c;
    // One round more where the value nearly vanishes; after it the radius says what is not known.
    if (bitLength(small) < precision && extra <= Math.max(0, -size)) continue;
    return [rounded(sine, 8n, -bits, precision), rounded(cosine, 8n, -bits, precision)];
  }
}

function roundQuotient(a: bigint, b: bigint): bigint {
  const twice = 2n * a + b;
  const quotient = twice / (2n * b);
  return twice < 0n && quotient * 2n * b !== twice ? quotient - 1n : quotient;
}

/** [sin x, cos x], never null. Wide balls: the ends, and -1 or 1 where an extreme lies (or may lie) inside. */
export function sinCos(x: Ball, precision: number): readonly [Ball, Ball] {
  if (isExact(x)) return sineCosineExact(x, precision);
  const width = exponentOf(radius(x));
  if (width > 2 || exponentOf(x) > LARGEST_PHASE) return [UNIT, UNIT];
  if (width < -8) {
    const [sine, cosine] = sineCosineExact(midpoint(x), precision);
    const r = radius(x);
    // |sin y - sin m| <= r (|cos m| + r), and the same the other way round.
    const slope = (other: Ball): Ball => add(absoluteUpper(other), r, RADIUS_PRECISION);
    return [clip(withRadius(sine, absoluteUpper(multiply(r, slope(cosine), RADIUS_PRECISION)))), clip(withRadius(cosine, absoluteUpper(multiply(r, slope(sine), RADIUS_PRECISION))))];
  }
  const p = Math.min(precision, 64);
  const [lowSine, lowCosine] = sineCosineExact(lowerEnd(x), p);
  const [highSine, highCosine] = sineCosineExact(upperEnd(x), p);
  const work = p + Math.max(0, exponentOf(x)) + 8;
  const quarter = scaleByPowerOfTwo(pi(work), -1);
  // Quarter turns passed: extremes of cos at even multiples of pi/2 times two, of sin at odd multiples.
  const turns = divide(x, quarter, work);
  if (turns === null) return [UNIT, UNIT];
  const first = ceilOf(lowerEnd(turns));
  const last = floorOfExact(upperEnd(turns));
  let sine = union(lowSine, highSine, p);
  let cosine = union(lowCosine, highCosine, p);
  for (let k = first, n = 0; k <= last && n < 8; k += 1n, n += 1) {
    const turn = Number(((k % 4n) + 4n) % 4n);
    if (turn === 0) cosine = union(cosine, ONE, p);
    else if (turn === 1) sine = union(sine, ONE, p);
    else if (turn === 2) cosine = union(cosine, MINUS_ONE, p);
    else sine = union(sine, MINUS_ONE, p);
  }
  return [clip(sine), clip(cosine)];
}

const floorOfExact = (x: Ball): bigint => shiftFloor(x.mid, x.exp);
const ceilOf = (x: Ball): bigint => -shiftFloor(-x.mid, x.exp);
/** Values of sine and cosine never leave [-1, 1]; only wide balls are worth the cut. */
const clip = (x: Ball): Ball => (x.rad === 0n || exponentOf(radius(x)) < -20 ? x : (intersection(x, UNIT, 64) ?? x));

export const sin = (x: Ball, precision: number): Ball => sinCos(x, precision)[0];
export const cos = (x: Ball, precision: number): Ball => sinCos(x, precision)[1];

/** Null where cos has (or may have) a zero in the ball. */
export function tan(x: Ball, precision: number): Ball | null {
  const quotientAt = (y: Ball, p: number): Ball | null => {
    const [s, c] = sinCos(y, p + 8);
    return divide(s, c, p);
  };
  if (isExact(x)) return quotientAt(x, precision);
  // tan is increasing between its poles; cos decides whether there is one inside.
  const cosine = cos(x, 64);
  if (containsZero(cosine)) return null;
  if (exponentOf(radius(x)) > -8) return increasing(quotientAt, x, precision);
  const value = quotientAt(midpoint(x), precision);
  const least = multiply(cosine, cosine, RADIUS_PRECISION);
  const slope = reciprocal(least, RADIUS_PRECISION);
  return value === null || slope === null ? null : byDerivative(value, x, absoluteUpper(slope));
}

function atanExact(x: Ball, precision: number): Ball {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (size < -precision / 2) return nearIdentity(x, precision);
  if (size > 0) {
    // atan x = sign(x) pi/2 - atan(1/x) for |x| > 1; the reciprocal is off by less than one ulp.
    const bits = precision + 8;
    const shift = bits - x.exp;
    if (shift < bits || magnitude(x.mid) > 1n << BigInt(-x.exp)) {
      const inverse = shift <= 0 ? 0n : (1n << BigInt(shift)) / x.mid;
      const half = piFixed(bits) >> 1n;
      return rounded((x.mid > 0n ? half : -half) - inverseTangent(inverse, bits), 10n, -bits, precision);
    }
  }
  const bits = precision + 8 + Math.max(0, -size);
  return rounded(inverseTangent(toFixed(x, bits), bits), 6n, -bits, precision);
}

export function atan(x: Ball, precision: number): Ball {
  if (isExact(x)) return atanExact(x, precision);
  if (exponentOf(radius(x)) > -8) return increasing(atanExact, x, precision) ?? scaleByPowerOfTwo(UNIT, 1);
  const value = atanExact(midpoint(x), precision);
  const least = onePlusSquareLower(x);
  const slope = reciprocal(least, RADIUS_PRECISION) ?? ONE;
  return byDerivative(value, x, absoluteUpper(slope));
}

/** The angle of the point (x, y), in [-pi, pi]; null at the origin and where the ball meets the negative x-axis. */
export function atan2(y: Ball, x: Ball, precision: number): Ball | null {
  const p = precision + 8;
  const steep = exponentOf(y) > exponentOf(x) && !containsZero(y);
  if (isPositive(x) && !steep) {
    const quotient = divide(y, x, p);
    return quotient === null ? null : atan(quotient, precision);
  }
  const half = scaleByPowerOfTwo(pi(p), -1);
  if (isPositive(y) || isPositive(negate(y))) {
    const quotient = divide(x, y, p);
    if (quotient === null) return null;
    return subtract(isPositive(y) ? half : negate(half), atan(quotient, p), precision);
  }
  if (y.mid === 0n && y.rad === 0n && isPositive(negate(x))) return pi(precision);
  return null;
}

/** Null unless the ball lies in [-1, 1]. */
export function asin(x: Ball, precision: number): Ball | null {
  if (isExact(x)) return asinExact(x, precision);
  const low = asinExact(lowerEnd(x), 64);
  const high = asinExact(upperEnd(x), 64);
  if (low === null || high === null) return null;
  return byRootSlope(asinExact, x, low, high, oneMinusSquareLower(x), precision);
}

function asinExact(x: Ball, precision: number): Ball | null {
  const gap = oneMinusSquare(x, precision);
  if (gap.mid < 0n) return null;
  if (gap.mid === 0n) {
    const half = scaleByPowerOfTwo(pi(precision), -1);
    return x.mid > 0n ? half : negate(half);
  }
  const cosine = sqrt(gap, precision + 8);
  return cosine === null ? null : atan2(x, cosine, precision);
}

function acosExact(x: Ball, precision: number): Ball | null {
  const gap = oneMinusSquare(x, precision);
  if (gap.mid < 0n) return null;
  if (gap.mid === 0n) return x.mid > 0n ? ZERO : pi(precision);
  const sine = sqrt(gap, precision + 8);
  return sine === null ? null : atan2(sine, x, precision);
}

/** 1 - x^2 of an exact ball, without cancellation. */
function oneMinusSquare(x: Ball, precision: number): Ball {
  const work = precision + bitLength(x.mid) + 64;
  return multiply(subtract(ONE, x, work), add(ONE, x, work), precision + 8);
}

/** Null unless the ball lies in [-1, 1]. */
export function acos(x: Ball, precision: number): Ball | null {
  if (isExact(x)) return acosExact(x, precision);
  const low = acosExact(upperEnd(x), 64);
  const high = acosExact(lowerEnd(x), 64);
  if (low === null || high === null) return null;
  return byRootSlope(acosExact, x, low, high, oneMinusSquareLower(x), precision);
}
