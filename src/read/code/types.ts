/** The machine type of a value, as far as the text shows it: what decides integer division and the float format of a result. */
import type { CodeLanguage, FloatFormat } from './languages/language.ts';

export interface ValueType {
  readonly kind: 'integer' | 'float' | 'unknown';
  readonly format: FloatFormat | null;
  /** The format gives way to that of the other operand (an unsuffixed literal in Rust, Go, Swift). */
  readonly weak: boolean;
  /** What showed the format. */
  readonly evidence: FormatEvidence | null;
  /** An integer made of literals only, whose type the surroundings may still decide. */
  readonly flexible: boolean;
  /** A quotient of flexible integers stands inside: right only if the surroundings make it a float. */
  readonly pending: boolean;
}
export type FormatEvidence = 'suffix' | 'declared' | 'function' | 'literal' | 'language';

export const UNKNOWN: ValueType = { kind: 'unknown', format: null, weak: true, evidence: null, flexible: false, pending: false };
export const INTEGER: ValueType = { ...UNKNOWN, kind: 'integer' };
export const floating = (format: FloatFormat | null, evidence: FormatEvidence | null, weak = false): ValueType => ({ ...UNKNOWN, kind: 'float', format, evidence, weak: weak || format === null });

const WIDTH: Readonly<Record<FloatFormat, number>> = { binary16: 1, bfloat16: 1, binary32: 2, binary64: 3, extended: 4, binary128: 5, decimal: 6 };

/** The type of a sum, product or power of two values. */
export function combine(a: ValueType, b: ValueType): ValueType {
  if (a === b) return a;
  if (a.kind === 'integer' && b.kind === 'integer') return { ...INTEGER, flexible: a.flexible && b.flexible, pending: a.pending || b.pending };
  const kind = a.kind === 'float' || b.kind === 'float' ? 'float' : 'unknown';
  const stronger = a.format === null ? b : b.format === null ? a : a.weak !== b.weak ? (a.weak ? b : a) : WIDTH[a.format] >= WIDTH[b.format] ? a : b;
  return { ...stronger, kind, flexible: false, pending: false };
}

/** A type by its text in a declaration; unknown where the language's table does not list it. */
export function declaredType(text: string, language: CodeLanguage): ValueType {
  let table = declared.get(language);
  if (!table) declared.set(language, (table = new Map()));
  const known = table.get(text);
  if (known) return known;
  const type = text.length > 200 ? UNKNOWN : typeOfText(text, language);
  if (table.size > 500) table.clear();
  table.set(text, type);
  return type;
}
const declared = new WeakMap<CodeLanguage, Map<string, ValueType>>();

function typeOfText(text: string, language: CodeLanguage): ValueType {
  const plain = text
    .replace(/\b(?:intent|attributes?|dimension|bind)\s*\([^)]*\)/gi, ' ')
    .replace(/\b(?:const|constexpr|constinit|static|inline|volatile|register|extern|mutable|mut|final|readonly|in|out|inout|uniform|varying|highp|mediump|lowp|precise|let|var|val|parameter|value|optional|save|pure|elemental|recursive|allocatable|pointer|target)\b/gi, ' ')
    .replace(/[&*?]/g, ' ')
    .replace(/^\s*::?/, '')
    .replace(/,/g, ' ')
    .replace(/\s+/g, ' ')
    .trim();
  if (plain === '') return UNKNOWN;
  const key = language.foldCase ? plain.toLowerCase().replace(/\s+(?=\()|(?<=[(=])\s+|\s+(?=[)=])/g, '') : plain;
  const format = Object.hasOwn(language.floatTypes, key) ? language.floatTypes[key] : undefined;
  if (format) return floating(format, 'declared');
  if (key.split(' ').every((word) => language.integerTypes.includes(word))) return INTEGER;
  const last = /[\w]+$/.exec(key)?.[0] ?? '';
  const lastFormat = /::|\./.test(key) && Object.hasOwn(language.floatTypes, last) ? language.floatTypes[last] : undefined;
  if (lastFormat) return floating(lastFormat, 'declared');
  if (language.foldCase && /^real\b/.test(key)) return floating(null, null);
  if (language.foldCase && /^integer\b/.test(key)) return INTEGER;
  return UNKNOWN;
}
