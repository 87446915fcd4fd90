/**
 * Real balls: (mid +- rad) * 2^exp. Every result contains the exact result for every choice of numbers inside the arguments.
 * `precision` is the number of bits kept in the midpoint; radii keep at most 32 bits, so a wide ball is also a short one.
 * Here: making, rounding, ends and sizes.
 */
import type { Rational } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import type { Ball } from './ball.types.ts';
import { bitLength, magnitude, shiftCeil, shiftFloor } from './bits.ts';

const RADIUS_BITS = 32;
/** Exponents beyond this are not turned into integers: 2^(10^6) has 300 000 digits. */
export const EXPANSION_LIMIT = 1_000_000;

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
