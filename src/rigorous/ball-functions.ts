/**
 * Elementary functions of real balls. Each result contains f(y) for every y in the argument, wide balls included.
 * `null` means that f is not defined (real and finite) on the whole ball: a pole inside, or part of the ball outside the domain.
 */
import type { Rational } from '../expression/index.ts';
import type { Ball } from './ball.types.ts';
import {
  absolute, absoluteUpper, add, containsZero, divide, exponentOf, fromEnds, fromInteger, fromRational, intersection, isExact, isNonNegative, isPositive, lowerEnd, midpoint, multiply, negate, nearestInteger,
  ONE, powerInteger, radius, reciprocal, relativeAccuracy, round, rounded, scaleByPowerOfTwo, subtract, subtractExact, union, upperEnd, withRadius, ZERO,
} from './ball.ts';
import { bitLength, magnitude, rootFloor, shiftFloor, squareRootFloor } from './bits.ts';
import { exponential, inverseTangent, logarithm, logTwoFixed, piFixed, sineCosine } from './fixed.ts';

/** exp is refused above 2^30 in the argument: the result would have an exponent of a billion. */
const LARGEST_EXPONENT = 30;
/** Sines of arguments beyond 2^20000 are answered by [-1, 1] rather than by 20000 bits of pi. */
const LARGEST_PHASE = 20000;
const MINUS_ONE: Ball = { mid: -1n, rad: 0n, exp: 0 };
const UNIT: Ball = { mid: 0n, rad: 1n, exp: 0 };
const RADIUS_PRECISION = 40;

export const pi = (precision: number): Ball => ({ mid: piFixed(precision), rad: 2n, exp: -precision });
export const logTwo = (precision: number): Ball => ({ mid: logTwoFixed(precision), rad: 2n, exp: -precision });

/** The exact ball x as a fixed-point number with `bits` fractional bits, and its error in ulp. */
const toFixed = (x: Ball, bits: number): bigint => shiftFloor(x.mid, x.exp + bits);

/** f(x) enclosed by f(midpoint) and a bound of |f'| over x: right for balls narrow enough that the bound is near the truth. */
const byDerivative = (value: Ball, x: Ball, derivativeBound: Ball): Ball =>
  isExact(x) ? value : withRadius(value, absoluteUpper(multiply(radius(x), derivativeBound, RADIUS_PRECISION)));

/** f increasing: the ends decide. */
function increasing(f: (x: Ball, precision: number) => Ball | null, x: Ball, precision: number): Ball | null {
  const bits = relativeAccuracy(x) > 20 ? precision : Math.min(precision, 64);
  const low = f(lowerEnd(x), bits);
  const high = f(upperEnd(x), bits);
  return low === null || high === null ? null : fromEnds(low, high, bits);
}

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

/** Square root; null unless every number of x is at least 0. */
export function sqrt(x: Ball, precision: number): Ball | null {
  return root(x, 2, precision);
}

function rootExact(x: Ball, n: number, precision: number): Ball {
  if (x.mid === 0n) return ZERO;
  let shift = Math.max(0, n * (precision + 2) - bitLength(x.mid));
  shift += (((x.exp - shift) % n) + n) % n;
  const radicand = x.mid << BigInt(shift);
  const value = n === 2 ? squareRootFloor(radicand) : rootFloor(radicand, n);
  return rounded(value, value ** BigInt(n) === radicand ? 0n : 1n, (x.exp - shift) / n, precision + 2);
}

/** Real n-th root, n >= 1; of negative numbers only where n is odd, null otherwise. */
export function root(x: Ball, n: number, precision: number): Ball | null {
  if (x.mid < 0n && n % 2 === 1) {
    const positive = root(negate(x), n, precision);
    return positive === null ? null : negate(positive);
  }
  if (isExact(x)) return x.mid < 0n ? null : rootExact(x, n, precision);
  if (!isNonNegative(x)) {
    if (n % 2 === 0) return null;
    const low = negate(rootExact(negate(lowerEnd(x)), n, Math.min(precision, 64)));
    return fromEnds(low, rootExact(upperEnd(x), n, Math.min(precision, 64)), precision);
  }
  if (x.rad << 6n > x.mid) return increasing((e, p) => rootExact(e, n, p), x, precision);
  const value = rootExact(midpoint(x), n, precision);
  // |f'| = f/(n x) at the lower end is largest there; f(lower) <= f(mid).
  const slope = divide(absoluteUpper(value), multiply(fromInteger(n), lowerEnd(x), RADIUS_PRECISION), RADIUS_PRECISION);
  return slope === null ? null : byDerivative(value, x, absoluteUpper(slope));
}

/** x^q for a rational q: by roots where the denominator is small, else exp(q log x). x >= 0 unless q is an integer; x > 0 where q < 0. */
export function powerRational(x: Ball, q: Rational, precision: number): Ball | null {
  if (q.den === 1n) return powerInteger(x, q.num, precision);
  if (q.den <= 16n && bitLength(q.num) < 12) {
    const base = root(x, Number(q.den), precision + bitLength(q.num) + 4);
    return base === null || (x.mid < 0n) ? null : powerInteger(base, q.num, precision);
  }
  if (q.num > 0n && !isPositive(x)) {
    if (!isNonNegative(x)) return null;
    if (isExact(x)) return ZERO;
    const high = powerRational(upperEnd(x), q, Math.min(precision, 64));
    return high === null ? null : fromEnds(ZERO, high, precision);
  }
  return power(x, fromRational(q, precision + 16), precision);
}

/** x^y = exp(y log x) for x > 0. */
export function power(x: Ball, y: Ball, precision: number): Ball | null {
  const extra = Math.max(0, exponentOf(y)) + 40;
  const logarithmOfBase = log(x, precision + extra);
  return logarithmOfBase === null ? null : exp(multiply(logarithmOfBase, y, precision + extra), precision);
}

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
  let sine = fromEndsUnordered(lowSine, highSine, p);
  let cosine = fromEndsUnordered(lowCosine, highCosine, p);
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
const fromEndsUnordered = (a: Ball, b: Ball, precision: number): Ball => union(a, b, precision);
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

function sinhExact(x: Ball, precision: number): Ball | null {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (size < -precision / 2) {
    const squared = absoluteUpper(multiply(x, x, RADIUS_PRECISION));
    return withRadius(round(x, precision), multiply(squared, absoluteUpper(x), RADIUS_PRECISION));
  }
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
  if (size < -precision / 2) {
    const squared = absoluteUpper(multiply(x, x, RADIUS_PRECISION));
    return withRadius(round(x, precision), multiply(squared, absoluteUpper(x), RADIUS_PRECISION));
  }
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

function atanExact(x: Ball, precision: number): Ball {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (size < -precision / 2) {
    const squared = absoluteUpper(multiply(x, x, RADIUS_PRECISION));
    return withRadius(round(x, precision), multiply(squared, absoluteUpper(x), RADIUS_PRECISION));
  }
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
  if (exponentOf(radius(x)) > -8) return increasing(atanExact, x, precision) ?? ZERO;
  const value = atanExact(midpoint(x), precision);
  const least = absoluteLowerSquarePlusOne(x);
  const slope = reciprocal(least, RADIUS_PRECISION) ?? ONE;
  return byDerivative(value, x, absoluteUpper(slope));
}

function absoluteLowerSquarePlusOne(x: Ball): Ball {
  const end = containsZero(x) ? ZERO : x.mid > 0n ? lowerEnd(x) : upperEnd(x);
  return add(ONE, multiply(end, end, RADIUS_PRECISION), RADIUS_PRECISION);
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
  const gap = oneMinusSquareLower(x);
  if (exponentOf(radius(x)) > -8 || exponentOf(gap) < exponentOf(radius(x)) + 6) return fromEnds(low, high, Math.min(precision, 64));
  const value = asinExact(midpoint(x), precision);
  const least = sqrt(gap, RADIUS_PRECISION);
  const slope = least === null ? null : reciprocal(least, RADIUS_PRECISION);
  return value === null || slope === null ? fromEnds(low, high, 64) : byDerivative(value, x, absoluteUpper(slope));
}

/** A lower bound of 1 - y^2 over the ball, as an exact ball (zero where none is positive). */
function oneMinusSquareLower(x: Ball): Ball {
  const top = x.mid < 0n ? negate(lowerEnd(x)) : upperEnd(x);
  const gap = lowerEnd(multiply(subtract(ONE, top, bitLength(top.mid) + Math.max(0, -top.exp) + 64), add(ONE, top, 64), 64));
  return gap.mid > 0n ? gap : ZERO;
}

function asinExact(x: Ball, precision: number): Ball | null {
  const gap = multiply(subtract(ONE, x, precision + bitLength(x.mid) + 64), add(ONE, x, precision + bitLength(x.mid) + 64), precision + 8);
  if (gap.mid < 0n) return null;
  if (gap.mid === 0n) {
    const half = scaleByPowerOfTwo(pi(precision), -1);
    return x.mid > 0n ? half : negate(half);
  }
  const cosine = sqrt(gap, precision + 8);
  return cosine === null ? null : atan2(x, cosine, precision);
}

/** Null unless the ball lies in [-1, 1]. */
export function acos(x: Ball, precision: number): Ball | null {
  const exact = (y: Ball, p: number): Ball | null => {
    const work = p + bitLength(y.mid) + 64;
    const gap = multiply(subtract(ONE, y, work), add(ONE, y, work), p + 8);
    if (gap.mid < 0n) return null;
    if (gap.mid === 0n) return y.mid > 0n ? ZERO : pi(p);
    const sine = sqrt(gap, p + 8);
    return sine === null ? null : atan2(sine, y, p);
  };
  if (isExact(x)) return exact(x, precision);
  const low = exact(upperEnd(x), 64);
  const high = exact(lowerEnd(x), 64);
  if (low === null || high === null) return null;
  const gap = oneMinusSquareLower(x);
  if (exponentOf(radius(x)) > -8 || exponentOf(gap) < exponentOf(radius(x)) + 6) return fromEnds(low, high, Math.min(precision, 64));
  const value = exact(midpoint(x), precision);
  const least = sqrt(gap, RADIUS_PRECISION);
  const slope = least === null ? null : reciprocal(least, RADIUS_PRECISION);
  return value === null || slope === null ? fromEnds(low, high, 64) : byDerivative(value, x, absoluteUpper(slope));
}

function asinhExact(x: Ball, precision: number): Ball | null {
  const size = exponentOf(x);
  if (size === -Infinity) return ZERO;
  if (size < -precision / 2) {
    const squared = absoluteUpper(multiply(x, x, RADIUS_PRECISION));
    return withRadius(round(x, precision), multiply(squared, absoluteUpper(x), RADIUS_PRECISION));
  }
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
  const least = sqrt(absoluteLowerSquarePlusOne(x), RADIUS_PRECISION);
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
  if (gap.mid <= 0n || exponentOf(radius(x)) > -8 || exponentOf(gap) < exponentOf(radius(x)) + 6) return fromEnds(low, high, Math.min(precision, 64));
  const value = exact(midpoint(x), precision);
  const least = sqrt(gap, RADIUS_PRECISION);
  const slope = least === null ? null : reciprocal(least, RADIUS_PRECISION);
  return value === null || slope === null ? fromEnds(low, high, 64) : byDerivative(value, x, absoluteUpper(slope));
}

/** Null unless the ball lies in (-1, 1). */
export function atanh(x: Ball, precision: number): Ball | null {
  const exact = (y: Ball, p: number): Ball | null => {
    const size = exponentOf(y);
    if (size === -Infinity) return ZERO;
    if (size < -p / 2) {
      const squared = absoluteUpper(multiply(y, y, RADIUS_PRECISION));
      return withRadius(round(y, p), multiply(squared, absoluteUpper(y), RADIUS_PRECISION));
    }
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

export { nearestInteger };
