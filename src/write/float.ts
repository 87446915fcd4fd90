/** Binary floating-point formats: exact rounding, and texts that read back to the same float. Nothing here uses the rounding of the machine, so every format is exact. */
import { Q, type Rational } from '../expression/index.ts';

/** IEEE 754: `precision` counts the implicit bit; the smallest normal number is 2^minExponent, the largest finite one below 2^(maxExponent + 1). */
export interface FloatParameters {
  readonly precision: number;
  readonly minExponent: number;
  readonly maxExponent: number;
}
export type FloatFormat = 'binary16' | 'bfloat16' | 'binary32' | 'binary64';
/** IEEE 754-2019, table 3.5; bfloat16 is binary32 with 8 bits of precision (common practice). */
export const FLOAT_FORMATS: Readonly<Record<FloatFormat, FloatParameters>> = {
  binary16: { precision: 11, minExponent: -14, maxExponent: 15 },
  bfloat16: { precision: 8, minExponent: -126, maxExponent: 127 },
  binary32: { precision: 24, minExponent: -126, maxExponent: 127 },
  binary64: { precision: 53, minExponent: -1022, maxExponent: 1023 },
};

const bitLength = (value: bigint): number => {
  const hex = value.toString(16);
  return (hex.length - 1) * 4 + (32 - Math.clz32(parseInt(hex.charAt(0), 16)));
};

/** floor(log2 |value|) of a non-zero rational. */
export function binaryExponent(value: Rational): number {
  const num = value.num < 0n ? -value.num : value.num;
  const guess = bitLength(num) - bitLength(value.den);
  const below = guess >= 0 ? num < value.den << BigInt(guess) : num << BigInt(-guess) < value.den;
  return below ? guess - 1 : guess;
}

/** 2^exponent. */
export const powerOfTwo = (exponent: number): Rational => (exponent >= 0 ? Q.rational(1n << BigInt(exponent)) : Q.rational(1n, 1n << BigInt(-exponent)));

/** The float nearest to the value, ties to even; null beyond the largest finite one. */
export function roundToFormat(value: Rational, format: FloatFormat): Rational | null {
  if (value.num === 0n) return Q.ZERO;
  const { precision, minExponent, maxExponent } = FLOAT_FORMATS[format];
  const unit = Math.max(binaryExponent(value), minExponent) - precision + 1;
  const scaled = Q.multiply(value, powerOfTwo(-unit));
  const magnitude = scaled.num < 0n ? -scaled.num : scaled.num;
  const low = magnitude / scaled.den;
  const twice = 2n * (magnitude - low * scaled.den);
  const significand = twice > scaled.den || (twice === scaled.den && low % 2n === 1n) ? low + 1n : low;
  const rounded = Q.multiply(Q.rational(value.num < 0n ? -significand : significand), powerOfTwo(unit));
  return rounded.num !== 0n && binaryExponent(rounded) > maxExponent ? null : rounded;
}

export function isRepresentable(value: Rational, format: FloatFormat): boolean {
  const rounded = roundToFormat(value, format);
  return rounded !== null && Q.equal(rounded, value);
}

/** The shortest decimal that reads back to the same float (of two, the nearer), as digits and a decimal exponent: 0.d1d2... * 10^exponent. */
function shortestDigits(value: Rational, format: FloatFormat): { readonly digits: string; readonly exponent: number } {
  let exponent = Math.floor((binaryExponent(value) + 1) * Math.log10(2));
  const ten = (n: number): Rational => (n >= 0 ? Q.rational(10n ** BigInt(n)) : Q.rational(1n, 10n ** BigInt(-n)));
  while (Q.compare(value, ten(exponent)) >= 0) exponent += 1;
  while (Q.compare(value, ten(exponent - 1)) < 0) exponent -= 1;
  for (let count = 1; ; count += 1) {
    const unit = ten(exponent - count);
    const scaled = Q.divide(value, unit);
    const low = Q.floor(scaled);
    const nearFirst = Q.compare(Q.subtract(scaled, Q.rational(low)), Q.HALF) <= 0 ? [low, low + 1n] : [low + 1n, low];
    for (const candidate of nearFirst) {
      const back = roundToFormat(Q.multiply(Q.rational(candidate), unit), format);
      if (back && Q.equal(back, value)) {
        const digits = candidate.toString();
        return { digits: digits.replace(/0+$/, ''), exponent: exponent + (digits.length - count) };
      }
    }
  }
}

/**
 * The shortest decimal text that reads back to the float: `0.1`, `-1.6666667e-1` as `-0.16666667`, `1e-7`, `123456`.
 * The value must be a float of the format (a RangeError otherwise). Plain digits between 1e-5 and 1e17, an exponent outside.
 */
export function shortestDecimal(value: number | Rational, format: FloatFormat): string {
  const exact = typeof value === 'number' ? Q.fromDouble(value) : value;
  if (!isRepresentable(exact, format)) throw new RangeError(`not a ${format} number`);
  if (exact.num === 0n) return Object.is(value, -0) ? '-0' : '0';
  const sign = exact.num < 0n ? '-' : '';
  const { digits, exponent } = shortestDigits(Q.absolute(exact), format);
  if (exponent > -5 && exponent <= 17) {
    if (exponent <= 0) return `${sign}0.${'0'.repeat(-exponent)}${digits}`;
    return digits.length <= exponent ? sign + digits.padEnd(exponent, '0') : `${sign}${digits.slice(0, exponent)}.${digits.slice(exponent)}`;
  }
  return `${sign}${digits.charAt(0)}${digits.length > 1 ? `.${digits.slice(1)}` : ''}e${exponent - 1}`;
}

/** C99 hexadecimal: `0x1.555556p-3`, `-0x1p+0`; exact for every float. The value must be a float of the format. */
export function hexFloat(value: number | Rational, format: FloatFormat): string {
  const exact = typeof value === 'number' ? Q.fromDouble(value) : value;
  if (!isRepresentable(exact, format)) throw new RangeError(`not a ${format} number`);
  if (exact.num === 0n) return Object.is(value, -0) ? '-0x0p+0' : '0x0p+0';
  const magnitude = Q.absolute(exact);
  const exponent = binaryExponent(magnitude);
  const fraction = Q.subtract(Q.multiply(magnitude, powerOfTwo(-exponent)), Q.ONE);
  const bits = Q.multiply(fraction, powerOfTwo(52)).num;
  const hex = bits.toString(16).padStart(13, '0').replace(/0+$/, '');
  return `${exact.num < 0n ? '-' : ''}0x1${hex === '' ? '' : `.${hex}`}p${exponent < 0 ? '-' : '+'}${Math.abs(exponent)}`;
}
