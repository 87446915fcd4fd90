/** Number formats that a fit can be made for: binary floating point and fixed point, with exact rounding of rationals. */
import { Q, type Rational } from '../expression/index.ts';
import { binaryExponent, FLOAT_FORMATS, type FloatFormat as FloatName, powerOfTwo, roundToFormat } from '../write/index.ts';

export interface FloatFormat {
  readonly kind: 'float';
  readonly name: FloatName;
  /** Significand bits p, the hidden one included. */
  readonly precision: number;
  /** Exponents e of the smallest and the largest normal binade [2^e, 2^(e+1)). */
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

/** `binary32`, ..., `fixed:m.n` with 1 <= m + n <= 62; null for anything else. */
export function formatByName(name: string): NumberFormat | null {
  if (Object.hasOwn(FLOAT_FORMATS, name)) {
    const float = name as FloatName;
    const { precision, minExponent, maxExponent } = FLOAT_FORMATS[float];
    return { kind: 'float', name: float, precision, emin: minExponent, emax: maxExponent };
  }
  const [, m, n] = /^fixed:(\d{1,2})\.(\d{1,2})$/.exec(name) ?? [];
  if (m === undefined || n === undefined) return null;
  const [integerBits, fractionBits] = [Number(m), Number(n)];
  return integerBits + fractionBits >= 1 && integerBits + fractionBits <= 62 ? { kind: 'fixed', name, integerBits, fractionBits } : null;
}

/** Exponent of the unit in the last place at y: ulp = 2^(max(e, emin) - p + 1); at zero the smallest subnormal. */
export function ulpExponent(y: Rational, format: FloatFormat): number {
  const e = Q.isZero(y) ? format.emin : Math.max(binaryExponent(y), format.emin);
  return e - format.precision + 1;
}
/** The same of a double that is not negative. */
export const ulpExponentOf = (y: number, format: FloatFormat): number => Math.max(binadeOf(y), format.emin) - format.precision + 1;

/** Floor of log2 of a positive double; -1075 at zero. The logarithm is only a guess that exact powers of two settle. */
export function binadeOf(y: number): number {
  if (y === 0) return -1075;
  let e = Math.max(Math.floor(Math.log2(y)), -1074);
  while (e < 1023 && 2 ** (e + 1) <= y) e += 1;
  while (e > -1074 && 2 ** e > y) e -= 1;
  return e;
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
  if (format.kind === 'float') return roundToFormat(y, format.name);
  const value = Q.multiply(Q.rational(nearestInteger(Q.multiply(y, powerOfTwo(format.fractionBits)))), powerOfTwo(-format.fractionBits));
  return Q.compare(Q.absolute(value), powerOfTwo(format.integerBits)) < 0 ? value : null;
}

export const isRepresentable = (y: Rational, format: NumberFormat): boolean => {
  const rounded = roundTo(y, format);
  return rounded !== null && Q.equal(rounded, y);
};

export const largestFinite = (format: FloatFormat): Rational => Q.subtract(powerOfTwo(format.emax + 1), powerOfTwo(format.emax + 1 - format.precision));
export const smallestNormal = (format: FloatFormat): Rational => powerOfTwo(format.emin);
export { binaryExponent, powerOfTwo };
