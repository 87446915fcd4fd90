/** Numeric literals of all languages as exact rationals, with the type their spelling gives them. */
import { Q, type Rational } from '../../expression/index.ts';
import type { CodeLanguage, FloatFormat } from './languages/language.ts';

export interface Literal {
  readonly value: Rational;
  readonly integer: boolean;
  /** The format named by a suffix, else null. */
  readonly format: FloatFormat | null;
  readonly imaginary: boolean;
}

const RADIX: Readonly<Record<string, bigint>> = { '0x': 16n, '0o': 8n, '0b': 2n };

function digits(text: string, radix: bigint): bigint | null {
  if (text === '') return 0n;
  if (text.length > 20000) return null;
  const prefix = radix === 16n ? '0x' : radix === 8n ? '0o' : '0b';
  const allowed = radix === 16n ? /^[0-9a-f]+$/i : radix === 8n ? /^[0-7]+$/ : /^[01]+$/;
  return allowed.test(text) ? BigInt(prefix + text) : null;
}

/** C99 hexadecimal floats: `0x1.8p3`. Without an exponent only whole numbers. */
function hexadecimal(body: string): { readonly value: Rational; readonly integer: boolean } | null {
  const match = /^([0-9a-f]*)(?:\.([0-9a-f]*))?(?:p([+-]?\d{1,6}))?$/i.exec(body);
  if (!match) return null;
  const [, whole = '', fraction, exponent] = match;
  if (whole === '' && (fraction ?? '') === '') return null;
  const mantissa = digits(whole + (fraction ?? ''), 16n);
  if (mantissa === null) return null;
  const shift = Number(exponent ?? 0) - 4 * (fraction ?? '').length;
  if (Math.abs(shift) > 100000) return null;
  const value = shift >= 0 ? Q.rational(mantissa << BigInt(shift)) : Q.rational(mantissa, 1n << BigInt(-shift));
  return { value, integer: fraction === undefined && exponent === undefined };
}

/** Letters that end an integer without making it a float. */
const INTEGER_SUFFIX = /^(?:u|l|ul|lu|ll|ull|llu|z|uz|n|i\d+|u\d+|isize|usize)$/i;

/** Null where the text is no literal this language has. */
export function readLiteral(written: string, language: CodeLanguage): Literal | null {
  const text = written.replace(/(?<=[0-9a-f])['_](?=[0-9a-f])/gi, '').replace(/(?<=\d)_(?=[a-z])/i, '_');
  const radix = RADIX[text.slice(0, 2).toLowerCase()];
  if (radix === 16n) return hexLiteral(text.slice(2), language);
  if (radix !== undefined) {
    const match = /^([0-7]+)_?([a-z]\w*)?$/i.exec(text.slice(2));
    const value = match?.[1] === undefined ? null : digits(match[1], radix);
    return value === null || (match?.[2] !== undefined && !INTEGER_SUFFIX.test(match[2])) ? null : { value: Q.rational(value), integer: true, format: null, imaginary: false };
  }
  // Julia marks a Float32 by f in the place of e.
  const single = language.family === 'julia' ? /^([\d.]+)f([+-]?\d+)$/.exec(text) : null;
  if (single) {
    const value = Q.fromDecimal(`${single[1]}e${single[2]}`);
    return value ? { value, integer: false, format: 'binary32', imaginary: false } : null;
  }
  const match = /^(\d*)(?:(\.)(\d*))?(?:([edq])([+-]?\d+))?_?([a-z]\w*)?$/i.exec(text);
  if (!match) return null;
  const [, whole = '', dot, fraction = '', letter, exponent, suffixText = ''] = match;
  if (whole === '' && fraction === '') return null;
  const suffix = suffixText.toLowerCase();
  const marker = letter?.toLowerCase();
  if (marker !== undefined && marker !== 'e' && language.family !== 'fortran') return null;
  const value = Q.fromDecimal(`${whole}${dot ?? ''}${fraction}${exponent === undefined ? '' : `e${exponent}`}`);
  if (!value) return null;
  const imaginary = /^(?:i|j|im)$/.test(suffix) && ['python', 'matlab', 'go', 'r', 'julia', 'cpp', 'c'].includes(language.family);
  const byLetter: FloatFormat | null = marker === 'd' ? 'binary64' : marker === 'q' ? 'binary128' : null;
  const named = language.suffixes[suffix] ?? null;
  const decimalPoint = dot !== undefined || exponent !== undefined;
  if (suffix !== '' && !imaginary && !named) {
    if (decimalPoint || !INTEGER_SUFFIX.test(suffix)) return language.family === 'fortran' && text.includes('_') ? { value, integer: !decimalPoint, format: null, imaginary: false } : null;
  }
  // C, C++, Java and Go: a leading zero makes a whole number octal.
  if (!decimalPoint && !named && /^0\d/.test(whole) && ['c', 'cpp', 'java', 'go', 'glsl', 'hlsl'].includes(language.family)) {
    const octal = digits(whole, 8n);
    return octal === null ? null : { value: Q.rational(octal), integer: true, format: null, imaginary };
  }
  const integer = !decimalPoint && !named && !imaginary && !(language.family === 'r' && suffix !== 'l');
  return { value, integer, format: named ?? byLetter, imaginary };
}

function hexLiteral(body: string, language: CodeLanguage): Literal | null {
  const exponent = /p[+-]?\d+/i.exec(body);
  const split = exponent ? exponent.index + exponent[0].length : body.search(/[^0-9a-f.]/i);
  const cut = split < 0 ? body.length : split;
  const suffix = body.slice(cut).replace(/^_/, '').toLowerCase();
  const read = hexadecimal(body.slice(0, cut));
  if (!read) return null;
  const format = read.integer ? null : (language.suffixes[suffix] ?? null);
  if (suffix !== '' && !format && !INTEGER_SUFFIX.test(suffix)) return null;
  return { ...read, format, imaginary: false };
}
