/** Number formats of machines: binary floating point (IEEE 754 parameters) and fixed point, with exact rounding of rationals. */
import { Q, type Rational } from '../expression/index.ts';

export interface FloatFormat {
  readonly kind: 'float';
  readonly name: 'binary16' | 'bfloat16' | 'binary32' | 'binary64';
  /** Significand bits p, the hidden one included. */
  readonly precision: number;
  /** Exponent e of the smallest and largest normal number 2^e. */
  readonly emin: number;
  readonly emax: number;
}
export interface FixedFormat {
  readonly kind: 'fixed';
  readonly name: string;
  /** Bits before the point, the sign not counted, and behind it. */
  readonly integerBits: number;
  readonly fractionBits: number;
}
export type NumberFormat = FloatFormat | FixedFormat;

const FLOATS: Readonly<Record<FloatFormat['name'], FloatFormat>> = {
  binary16: { kind: 'float', name: 'binary16', precision: 11, emin: -14, emax: 15 },
  bfloat16: { kind: 'float', name: 'bfloat16', precision: 8, emin: -126, emax: 127 },
  binary32: { kind: 'float', name: 'binary32', precision: 24, emin: -126, emax: 127 },
  binary64: { kind: 'float', name: 'binary64', precision: 53, emin: -1022, emax: 1023 },
};

/** `binary32`, ..., `fixed:m.n` with m + n at most 62; null for anything else. */
export function formatByName(name: string): NumberFormat | null {
  if (name in FLOATS) return FLOATS[name as FloatFormat['name']];
  const [, m, n] = /^fixed:(\d{1,2})\.(\d{1,2})$/.exec(name) ?? [];
  if (m === undefined || n === undefined) return null;
  const [integerBits, fractionBits] = [Number(m), Number(n)];
  return integerBits + fractionBits >= 1 && integerBits + fractionBits <= 62 ? { kind: 'fixed', name, integerBits, fractionBits } : null;
}

const powerOfTwo = (e: number): Rational => (e >= 0 ? { num: 1n << BigInt(e), den: 1n } : { num: 1n, den: 1n << BigInt(-e) });

/** The e with 2^e <= |y| < 2^(e+1); y must not be zero. */
export function binaryExponent(y: Rational): number {
  const a = y.num < 0n ? -y.num : y.num;
  const estimate = a.toString(2).length - y.den.toString(2).length;
  const reaches = estimate >= 0 ? a >= y.den << BigInt(estimate) : a << BigInt(-estimate) >= y.den;
  return reaches ? estimate : estimate - 1;
}

/** Exponent of the unit in the last place at y: ulp = 2^(max(e, emin) - p + 1); at zero the smallest subnormal. */
export function ulpExponent(y: Rational, format: FloatFormat): number {
  const e = Q.isZero(y) ? format.emin : Math.max(binaryExponent(y), format.emin);
  return e - format.precision + 1;
}
export const ulp = (y: Rational, format: FloatFormat): Rational => powerOfTwo(ulpExponent(y, format));

/** Half the distance of 1 to the next number: the unit roundoff u = 2^-p. */
export const unitRoundoff = (format: FloatFormat): Rational => powerOfTwo(-format.precision);

/** The integer nearest to y; ties to even. */
export function nearestInteger(y: Rational): bigint {
  const doubled = Q.rational(2n * y.num + y.den, 2n * y.den);
  const up = Q.floor(doubled);
  return doubled.den === 1n && up % 2n !== 0n ? up - 1n : up;
}

/** Round to nearest, ties to even, subnormals kept; null where the result overflows. */
export function roundTo(y: Rational, format: NumberFormat): Rational | null {
  if (Q.isZero(y)) return Q.ZERO;
  const step = format.kind === 'float' ? ulpExponent(y, format) : -format.fractionBits;
  const units = nearestInteger(Q.multiply(y, powerOfTwo(-step)));
  const value = Q.multiply(Q.rational(units), powerOfTwo(step));
  const limit = format.kind === 'float' ? powerOfTwo(format.emax + 1) : powerOfTwo(format.integerBits);
  return Q.compare(Q.absolute(value), limit) < 0 ? value : null;
}

export const isRepresentable = (y: Rational, format: NumberFormat): boolean => {
  const rounded = roundTo(y, format);
  return rounded !== null && Q.equal(rounded, y);
};

/** The number after y away from zero; y representable. */
export function nextAway(y: Rational, format: FloatFormat): Rational {
  const step = powerOfTwo(ulpExponent(y, format));
  return y.num < 0n ? Q.subtract(y, step) : Q.add(y, step);
}

export const largestFinite = (format: FloatFormat): Rational => Q.subtract(powerOfTwo(format.emax + 1), powerOfTwo(format.emax + 1 - format.precision));
export const smallestNormal = (format: FloatFormat): Rational => powerOfTwo(format.emin);
export { powerOfTwo };
