/**
 * Real balls: (mid +- rad) * 2^exp. Every result contains the exact result for every choice of numbers inside the arguments.
 * `precision` is the number of bits kept in the midpoint; radii keep at most 32 bits, so a wide ball is also a short one.
 */
import type { Rational } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import type { Ball } from './ball.types.ts';
import { bitLength, divideCeil, divideFloor, magnitude, shiftCeil, shiftFloor } from './bits.ts';

const RADIUS_BITS = 32;
/** Exponents beyond this are not turned into integers: 2^(10^6) has 300 000 digits. */
const EXPANSION_LIMIT = 1_000_000;

export const ZERO: Ball = { mid: 0n, rad: 0n, exp: 0 };
export const ONE: Ball = { mid: 1n, rad: 0n, exp: 0 };

/** The ball cut down to `precision` bits of midpoint and 32 bits of radius. */
export function round(x: Ball, precision: number): Ball {
  return rounded(x.mid, x.rad, x.exp, precision);
}

export function rounded(mid: bigint, rad: bigint, exp: number, precision: number): Ball {
  const byMid = bitLength(mid) - precision;
  const byRad = rad === 0n ? 0 : bitLength(rad) - RADIUS_BITS;
  const cut = byMid > byRad ? byMid : byRad;
  if (cut <= 0) return { mid, rad, exp };
  const n = BigInt(cut);
  const short = mid >> n;
  if (rad === 0n && short << n === mid) return { mid: short, rad, exp: exp + cut };
  return { mid: short, rad: (rad >> n) + 2n, exp: exp + cut };
}

export const fromInteger = (n: bigint | number): Ball => ({ mid: BigInt(n), rad: 0n, exp: 0 });

/** Exact for dyadic rationals that fit, else within one unit of the last of `precision` bits. */
export function fromRational(q: Rational, precision: number): Ball {
  if (q.den === 1n) return rounded(q.num, 0n, 0, precision);
  const shift = precision + 2 - (bitLength(q.num) - bitLength(q.den));
  const scaled = shift >= 0 ? q.num << BigInt(shift) : q.num;
  const divisor = shift >= 0 ? q.den : q.den << BigInt(-shift);
  const quotient = scaled / divisor;
  return rounded(quotient, quotient * divisor === scaled ? 0n : 1n, -shift, precision + 4);
}

/** Exact. Rejects NaN and infinities by a RangeError. */
export function fromDouble(value: number): Ball {
  if (!Number.isFinite(value)) throw new RangeError('not a finite number');
  if (Number.isInteger(value)) return { mid: BigInt(value), rad: 0n, exp: 0 };
  let exp = 0;
  let scaled = value;
  while (!Number.isInteger(scaled)) {
    scaled *= 2 ** 32;
    exp -= 32;
  }
  return { mid: BigInt(scaled), rad: 0n, exp };
}

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

/** A ball around everything from the lower end of `low` to the upper end of `high`. */
export function fromEnds(low: Ball, high: Ball, precision: number): Ball {
  const l = lowerEnd(low);
  const h = upperEnd(high);
  if (l.mid !== 0n && h.mid !== 0n && Math.abs(exponentOf(l) - exponentOf(h)) > 10_000) {
    // One end is nothing beside the other: a ball from zero to the larger end, widened by the smaller.
    const [large, small] = exponentOf(l) > exponentOf(h) ? [l, h] : [h, l];
    const halfWay = round(scaleByPowerOfTwo(large, -1), precision);
    return withRadius(withRadius(halfWay, absoluteUpper(halfWay)), absoluteUpper(small));
  }
  const centre = scaleByPowerOfTwo(addExact(l, h), -1);
  const half = scaleByPowerOfTwo(subtractExact(h, l), -1);
  return withRadius(round(centre, precision), half);
}

/** x with its radius enlarged by the largest absolute value in `extra`. */
export function withRadius(x: Ball, extra: Ball): Ball {
  const mid = magnitude(extra.mid) + extra.rad;
  if (mid === 0n) return x;
  if (x.mid === 0n && x.rad === 0n) return rounded(0n, mid, extra.exp, 64);
  // Bring both to an exponent at which the extra radius has at most 32 bits, or the exponent of x if that is larger and the radius still shows.
  const top = extra.exp + bitLength(mid);
  const exp = Math.min(x.exp, top - RADIUS_BITS);
  const floorExp = Math.max(exp, x.exp + bitLength(x.mid === 0n ? x.rad : x.mid) - 4096);
  const add = shiftCeil(mid, extra.exp - floorExp);
  const shifted = shiftFloor(x.mid, x.exp - floorExp);
  const own = shiftCeil(x.rad, x.exp - floorExp) + (x.exp < floorExp ? 1n : 0n);
  return rounded(shifted, own + add, floorExp, bitLength(shifted) + 1);
}

/** An exact ball at the lower end. */
export const lowerEnd = (x: Ball): Ball => (x.rad === 0n ? x : { mid: x.mid - x.rad, rad: 0n, exp: x.exp });
/** An exact ball at the upper end. */
export const upperEnd = (x: Ball): Ball => (x.rad === 0n ? x : { mid: x.mid + x.rad, rad: 0n, exp: x.exp });
export const midpoint = (x: Ball): Ball => (x.rad === 0n ? x : { mid: x.mid, rad: 0n, exp: x.exp });
export const radius = (x: Ball): Ball => ({ mid: x.rad, rad: 0n, exp: x.exp });

function toRational(mid: bigint, exp: number, direction: -1 | 1): Rational {
  if (mid === 0n) return { num: 0n, den: 1n };
  if (exp > EXPANSION_LIMIT) {
    if ((mid > 0n) === (direction < 0)) return { num: (mid > 0n ? 1n : -1n) << BigInt(EXPANSION_LIMIT), den: 1n };
    throw new Declined('undecided', 'A value here is larger than 2^1000000; choose a smaller interval.');
  }
  if (exp >= 0) return { num: mid << BigInt(exp), den: 1n };
  if (bitLength(mid) + exp < -EXPANSION_LIMIT) {
    if (mid > 0n === direction < 0) return { num: 0n, den: 1n };
    return { num: BigInt(direction), den: 1n << BigInt(EXPANSION_LIMIT) };
  }
  let m = mid;
  let e = -exp;
  // Reduced: the denominator is a power of two, so only trailing zero bits can cancel.
  while (e >= 32 && (m & 0xffffffffn) === 0n) {
    m >>= 32n;
    e -= 32;
  }
  while (e > 0 && (m & 1n) === 0n) {
    m >>= 1n;
    e -= 1;
  }
  return { num: m, den: 1n << BigInt(e) };
}

/** A rational not above any number in x (its lower end, exactly, unless its exponent is beyond a million). */
export const lower = (x: Ball): Rational => toRational(x.mid - x.rad, x.exp, -1);
/** A rational not below any number in x. */
export const upper = (x: Ball): Rational => toRational(x.mid + x.rad, x.exp, 1);

/** A double near the midpoint: for drawing and choosing, never for proof. */
export function toDouble(x: Ball): number {
  const bits = bitLength(x.mid);
  const cut = bits > 64 ? bits - 64 : 0;
  const exp = x.exp + cut;
  const value = Number(x.mid >> BigInt(cut));
  if (exp > 1100) return value === 0 ? 0 : value * Infinity;
  if (exp < -1200) return 0;
  return exp < -500 ? value * 2 ** -500 * 2 ** (exp + 500) : exp > 500 ? value * 2 ** 500 * 2 ** (exp - 500) : value * 2 ** exp;
}

/** An upper bound of |x| over the ball, as an exact ball of at most 34 bits. */
export function absoluteUpper(x: Ball): Ball {
  const m = magnitude(x.mid) + x.rad;
  const cut = bitLength(m) - 32;
  return cut <= 0 ? { mid: m, rad: 0n, exp: x.exp } : { mid: (m >> BigInt(cut)) + 1n, rad: 0n, exp: x.exp + cut };
}

/** A lower bound of |x| over the ball (zero if the ball contains zero), as an exact ball of at most 34 bits. */
export function absoluteLower(x: Ball): Ball {
  const m = magnitude(x.mid) - x.rad;
  if (m <= 0n) return ZERO;
  const cut = bitLength(m) - 32;
  return cut <= 0 ? { mid: m, rad: 0n, exp: x.exp } : { mid: m >> BigInt(cut), rad: 0n, exp: x.exp + cut };
}

/** An integer n with |x| < 2^n for every x in the ball; -Infinity for the exact zero. */
export function exponentOf(x: Ball): number {
  const m = magnitude(x.mid) + x.rad;
  return m === 0n ? -Infinity : bitLength(m) + x.exp;
}

/** Bits of relative accuracy, about; Infinity for exact balls, negative where the ball is wider than its midpoint. */
export const relativeAccuracy = (x: Ball): number => (x.rad === 0n ? Infinity : bitLength(x.mid) - bitLength(x.rad));

export const negate = (x: Ball): Ball => ({ mid: -x.mid, rad: x.rad, exp: x.exp });

/** All |y| for y in x. */
export function absolute(x: Ball): Ball {
  if (x.mid >= x.rad) return x;
  if (-x.mid >= x.rad) return negate(x);
  const top = magnitude(x.mid) + x.rad;
  return { mid: top, rad: top, exp: x.exp - 1 };
}

export const scaleByPowerOfTwo = (x: Ball, n: number): Ball => (x.mid === 0n && x.rad === 0n ? x : { mid: x.mid, rad: x.rad, exp: x.exp + n });

/** The sum of two exact balls, exactly; their exponents must not be far apart. */
export function addExact(a: Ball, b: Ball): Ball {
  if (a.mid === 0n) return b;
  if (b.mid === 0n) return a;
  const exp = Math.min(a.exp, b.exp);
  if (Math.max(a.exp, b.exp) - exp > EXPANSION_LIMIT) throw new Declined('undecided', 'The ends of an enclosure differ by more than 2^1000000; choose a smaller interval.');
  return { mid: (a.mid << BigInt(a.exp - exp)) + (b.mid << BigInt(b.exp - exp)), rad: 0n, exp };
}
export const subtractExact = (a: Ball, b: Ball): Ball => addExact(a, negate(b));

export function add(a: Ball, b: Ball, precision: number): Ball {
  if (a.exp === b.exp) return rounded(a.mid + b.mid, a.rad + b.rad, a.exp, precision);
  if (a.mid === 0n && a.rad === 0n) return round(b, precision);
  if (b.mid === 0n && b.rad === 0n) return round(a, precision);
  const [high, low] = a.exp > b.exp ? [a, b] : [b, a];
  const difference = high.exp - low.exp;
  const topHigh = high.exp + Math.max(bitLength(high.mid), bitLength(high.rad));
  const topLow = low.exp + Math.max(bitLength(low.mid), bitLength(low.rad));
  const floorExp = Math.max(topHigh, topLow) - precision - 64;
  if (low.exp >= floorExp || difference <= precision + 4096) {
    const n = BigInt(difference);
    return rounded((high.mid << n) + low.mid, (high.rad << n) + low.rad, low.exp, precision);
  }
  const exp = Math.min(floorExp, high.exp);
  const up = BigInt(high.exp - exp);
  const mid = (high.mid << up) + shiftFloor(low.mid, low.exp - exp);
  return rounded(mid, (high.rad << up) + shiftCeil(low.rad, low.exp - exp) + 1n, exp, precision);
}

export const subtract = (a: Ball, b: Ball, precision: number): Ball => add(a, negate(b), precision);

export function multiply(a: Ball, b: Ball, precision: number): Ball {
  const mid = a.mid * b.mid;
  if (a.rad === 0n && b.rad === 0n) return rounded(mid, 0n, mid === 0n ? 0 : a.exp + b.exp, precision);
  const sizeA = magnitude(a.mid);
  const sizeB = magnitude(b.mid);
  if (a.rad << 20n > sizeA && b.rad << 20n > sizeB) return multiplyWide(a, b, precision);
  return rounded(mid, sizeA * b.rad + a.rad * (sizeB + b.rad), a.exp + b.exp, precision);
}

/** The smallest ball around all products of two wide balls. */
function multiplyWide(a: Ball, b: Ball, precision: number): Ball {
  const [sizeA, sizeB] = [magnitude(a.mid), magnitude(b.mid)];
  const exp = a.exp + b.exp;
  if (sizeA >= a.rad && sizeB >= b.rad) {
    const corner = a.mid < 0n === b.mid < 0n ? a.rad * b.rad : -a.rad * b.rad;
    return rounded(a.mid * b.mid + corner, sizeA * b.rad + sizeB * a.rad, exp, precision);
  }
  if (sizeA >= a.rad) return rounded((a.mid < 0n ? a.mid - a.rad : a.mid + a.rad) * b.mid, (sizeA + a.rad) * b.rad, exp, precision);
  if (sizeB >= b.rad) return rounded((b.mid < 0n ? b.mid - b.rad : b.mid + b.rad) * a.mid, (sizeB + b.rad) * a.rad, exp, precision);
  const [la, ua, lb, ub] = [a.mid - a.rad, a.mid + a.rad, b.mid - b.rad, b.mid + b.rad];
  const low = la * ub < ua * lb ? la * ub : ua * lb;
  const high = la * lb > ua * ub ? la * lb : ua * ub;
  return rounded(low + high, high - low, exp - 1, precision);
}

export function square(x: Ball, precision: number): Ball {
  // [(m-r)^2, (m+r)^2] = m^2 + r^2 +- 2mr.
  const size = magnitude(x.mid);
  if (x.rad <= size) return rounded(x.mid * x.mid + x.rad * x.rad, 2n * size * x.rad, 2 * x.exp, precision);
  const top = size + x.rad;
  return rounded(top * top, top * top, 2 * x.exp - 1, precision);
}

/** a / b; null where b contains zero. */
export function divide(a: Ball, b: Ball, precision: number): Ball | null {
  const size = magnitude(b.mid);
  const least = size - b.rad;
  if (least <= 0n) return null;
  if (a.mid === 0n && a.rad === 0n) return ZERO;
  if (b.rad << 3n > size) {
    const p = Math.min(precision, 64);
    const narrow = (x: Ball): Ball | null => divide(a, x, p);
    const low = narrow(lowerEnd(b));
    const high = narrow(upperEnd(b));
    return low === null || high === null ? null : union(low, high, p);
  }
  const shift = Math.max(0, precision + 2 + bitLength(b.mid) - bitLength(a.mid));
  const quotient = (a.mid << BigInt(shift)) / b.mid;
  let rad = 1n;
  if (a.rad !== 0n || b.rad !== 0n) {
    // |a/b - A/B| <= (|A| rb + |B| ra) / (|B| (|B| - rb)) for |a - A| <= ra, |b - B| <= rb.
    const numerator = (magnitude(a.mid) * b.rad + size * a.rad) << BigInt(shift);
    rad += numerator / (size * least) + 1n;
  } else if (quotient * b.mid === a.mid << BigInt(shift)) rad = 0n;
  return rounded(quotient, rad, a.exp - b.exp - shift, precision);
}

export const reciprocal = (x: Ball, precision: number): Ball | null => divide(ONE, x, precision);

/** x^n for an integer n; null for a negative n where x contains zero. Even powers of balls around zero do not go below zero. */
export function powerInteger(x: Ball, n: bigint | number, precision: number): Ball | null {
  let exponent = BigInt(n);
  if (exponent === 0n) return ONE;
  if (exponent < 0n) {
    const positive = powerInteger(x, -exponent, precision + 8);
    return positive === null ? null : divide(ONE, positive, precision);
  }
  // Wide balls: x -> x^n is monotone on each side of zero, so the ends decide.
  if (x.rad !== 0n && (x.rad * 2n * exponent > magnitude(x.mid))) {
    const p = Math.min(precision, 96);
    const ends = [lowerEnd(x), upperEnd(x)].map((e) => powerInteger(e, exponent, p));
    const [low, high] = ends;
    if (!low || !high) return null;
    const spanned = union(low, high, p);
    if (exponent % 2n === 0n && x.rad > magnitude(x.mid)) return union(ZERO, spanned, p);
    return spanned;
  }
  const work = precision + bitLength(exponent) + 8;
  let base = x;
  let result = ONE;
  for (;;) {
    if (exponent & 1n) result = multiply(result, base, work);
    exponent >>= 1n;
    if (exponent === 0n) return round(result, precision);
    base = square(base, work);
  }
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
export const isNonPositive = (x: Ball): boolean => -x.mid >= x.rad;
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

export { divideCeil, divideFloor };
