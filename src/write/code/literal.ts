/** Float literals that read back to the same float, in the form of each language. */
import { Q, type Rational } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { hexFloat, roundToFormat, shortestDecimal, type FloatFormat } from '../float.ts';
import { codeLanguage, type FloatType, type LanguageRow } from './languages.ts';

export interface LiteralStyle {
  /** Suffix or kind as the file writes it (`_dp`, `f`, `_f64`, empty); default that of the language. */
  readonly suffix?: string;
  /** Hexadecimal digits where the language has them: always, or only for floats that are not a short decimal themselves. */
  readonly hexadecimal?: boolean | 'where inexact';
}

/**
 * The literal of a value in a format; the value is rounded to the nearest float of the format first. Null where it is beyond the largest float, or the language has no such type.
 * Negative values carry their sign in front. Hexadecimal only where the language has it.
 */
export function literal(value: Rational, format: FloatFormat, language: LanguageRow, style: LiteralStyle = {}): string | null {
  const type = language.floats[format];
  const rounded = roundToFormat(value, format);
  if (!type || !rounded) return null;
  const negative = rounded.num < 0n;
  const wanted = style.hexadecimal === 'where inexact' ? !isShortDecimal(rounded) : style.hexadecimal === true;
  const text = wanted && type.hexadecimal ? `${hexFloat(Q.absolute(rounded), format)}${style.suffix ?? (type.suffix === 'f' ? 'f' : '')}` : decimal(Q.absolute(rounded), format, type, style);
  const whole = type.wrap && style.suffix === undefined ? `${type.wrap[0]}${negative ? '-' : ''}${text}${type.wrap[1]}` : `${negative ? '-' : ''}${text}`;
  return whole;
}

/** A multiple of 2^-6 below 2^20: at most a dozen digits, all of them exact. */
const isShortDecimal = (value: Rational): boolean => 64n % value.den === 0n && value.num < 1n << 20n && value.num > -(1n << 20n);

function decimal(magnitude: Rational, format: FloatFormat, type: FloatType, style: LiteralStyle): string {
  const shortest = shortestDecimal(magnitude, format);
  const [mantissa = '0', exponent] = shortest.split('e');
  const point = mantissa.includes('.') ? mantissa : `${mantissa}.0`;
  if (style.suffix !== undefined) return `${point}${exponent === undefined ? '' : `e${exponent}`}${style.suffix}`;
  if (type.exponentLetter !== undefined) return `${point}${type.exponentLetter}${exponent ?? '0'}`;
  return `${point}${exponent === undefined ? '' : `e${exponent}`}${type.suffix}`;
}

/** The literal in a language by its id. Throws Declined for an unknown language, a type that it lacks, or a value beyond the largest float. */
export function floatLiteral(value: Rational | number, format: FloatFormat, language: string, style: LiteralStyle = {}): string {
  const row = codeLanguage(language);
  const text = row && literal(typeof value === 'number' ? Q.fromDouble(value) : value, format, row, style);
  if (text === null) throw new Declined('bad-request', `${row?.title ?? language} cannot write this number as ${format}; choose another language or format.`);
  return text;
}
