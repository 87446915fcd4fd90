/** The four operations and integer powers of real balls. */
import { union } from './ball-sets.ts';
import { lowerEnd, negate, ONE, round, rounded, upperEnd, ZERO } from './ball.ts';
import type { Ball } from './ball.types.ts';
import { bitLength, magnitude, shiftCeil, shiftFloor } from './bits.ts';

/** All |y| for y in x. */
export function absolute(x: Ball): Ball {
  if (x.mid >= x.rad) return x;
  if (-x.mid >= x.rad) return negate(x);
  const top = magnitude(x.mid) + x.rad;
  return { mid: top, rad: top, exp: x.exp - 1 };
}

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
