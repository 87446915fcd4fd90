/** Untrusted JSON -> a typed request, or one plain sentence that says which field is wrong. */
import { failure, type Outcome, success } from '../outcome.ts';
import type { Request } from '../protocol.ts';

/** Longest text that is looked at, in UTF-16 code units. */
const LONGEST_TEXT = 20_000_000;

type Check = (value: unknown) => string | null;

const text: Check = (v) => (typeof v === 'string' ? null : 'must be a text');
const flag: Check = (v) => (typeof v === 'boolean' ? null : 'must be true or false');
const count = (least: number, most: number): Check => (v) =>
  typeof v === 'number' && Number.isInteger(v) && v >= least && v <= most ? null : `must be a whole number from ${least} to ${most}`;
const positive: Check = (v) => {
  const value = typeof v === 'string' ? Number(v) : v;
  return typeof value === 'number' && value > 0 && Number.isFinite(value) ? null : 'must be a positive number';
};
const numberOrText: Check = (v) => ((typeof v === 'number' && Number.isFinite(v)) || typeof v === 'string' ? null : 'must be a number or an exact expression');
const oneOf = (...names: readonly string[]): Check => (v) => (typeof v === 'string' && names.includes(v) ? null : `must be one of ${names.join(', ')}`);
const texts: Check = (v) => (Array.isArray(v) && v.every((item) => typeof item === 'string') ? null : 'must be a list of texts');
const ends: Check = (v) =>
  Array.isArray(v) && v.length === 2 && v.every((item) => typeof item === 'string' || (typeof item === 'number' && Number.isFinite(item))) ? null : 'must be a list of two ends';
const textMap: Check = (v) => (typeof v === 'object' && v !== null && !Array.isArray(v) && Object.values(v).every((item) => typeof item === 'string') ? null : 'must map names to texts');
const selection: Check = (v) => {
  if (typeof v !== 'object' || v === null) return 'must hold start and end';
  const { start, end } = v as { readonly start?: unknown; readonly end?: unknown };
  return Number.isInteger(start) && Number.isInteger(end) && (start as number) >= 0 && (end as number) >= (start as number) ? null : 'must hold whole numbers 0 <= start <= end';
};
const isText = (v: unknown): v is string => typeof v === 'string';
const fileList: Check = (v) => {
  if (!Array.isArray(v) || !v.every((f) => typeof f === 'object' && f !== null && isText((f as { readonly name?: unknown }).name) && isText((f as { readonly text?: unknown }).text))) return 'must be a list of files with name and text';
  return (v as readonly { readonly text: string }[]).reduce((sum, f) => sum + f.text.length, 0) <= LONGEST_TEXT ? null : 'holds more than 20 million characters';
};
const identifier: Check = (v) => (typeof v === 'string' || typeof v === 'number' ? null : 'must be a text or a number');

const COMMON: Readonly<Record<string, Check>> = {
  id: identifier,
  text,
  language: text,
  variable: text,
  small: texts,
  points: textMap,
  point: numberOrText,
  side: oneOf('both', 'right', 'left'),
  unknown: text,
  near: numberOrText,
  complex: flag,
  assume: texts,
  constants: oneOf('symbols', 'values'),
  budget_ms: count(1, 3_600_000),
  selection,
  files: fileList,
};
const MEASURE = oneOf('absolute', 'relative');
const SPECIFIC: Readonly<Record<Request['ask'], Readonly<Record<string, Check>>>> = {
  expand: { terms: count(1, 10_000), order: numberOrText, interval: ends, tolerance: positive, measure: MEASURE, at: numberOrText, details: texts },
  fit: {
    interval: ends,
    tolerance: positive,
    degree: count(0, 1000),
    measure: oneOf('absolute', 'relative', 'ulp'),
    format: text,
    emit: text,
    basis: oneOf('even', 'odd', 'all'),
    exact: count(0, 16),
    form: oneOf('horner', 'estrin'),
    contraction: oneOf('any', 'none', 'fma'),
    method: oneOf('minimax', 'taylor', 'economized', 'rational'),
    result: oneOf('function', 'expression'),
    details: texts,
    intervals: (v) => (typeof v === 'object' && v !== null && !Array.isArray(v) && Object.keys(v).length >= 1 && Object.keys(v).length <= 2 && Object.values(v).every((item) => ends(item) === null) ? null : 'must map one or two variables to lists of two ends'),
    words: count(1, 2),
    assertion: flag,
    reduction: oneOf('auto', 'none', 'always'),
    pieces: (v) => (v === 'auto' ? null : count(1, 1000)(v)),
  },
  guard: {
    interval: ends,
    format: text,
    emit: text,
    tolerance: positive,
    derivative: flag,
    library: (v) => (typeof v === 'number' && v >= 0.5 && v <= 1e6 ? null : 'must be a number of ulp from 0.5 on'),
  },
  check: { of: text },
};
export function validateRequest(value: unknown): Outcome<Request> {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return failure('bad-request', 'A request is one JSON object.');
  const record = value as Readonly<Record<string, unknown>>;
  const { ask } = record;
  if (ask !== 'expand' && ask !== 'fit' && ask !== 'guard' && ask !== 'check') return failure('bad-request', 'The field "ask" must be expand, fit, guard or check.');
  if (typeof record['text'] !== 'string') return failure('bad-request', 'The field "text" must hold the expression or document.');
  if (record['text'].length > LONGEST_TEXT) return failure('bad-request', 'The text is longer than 20 million characters; ask for a part of it.');
  const known = { ...COMMON, ...SPECIFIC[ask] };
  const cleaned: Record<string, unknown> = { ask, language: 'plain' };
  for (const [name, field] of Object.entries(record)) {
    if (name === 'ask' || field === undefined || field === null) continue;
    const check = known[name];
    // Unknown fields are allowed: newer clients may send them.
    if (!check) continue;
    const complaint = check(field);
    if (complaint) return failure('bad-request', `The field "${name}" ${complaint}.`);
    cleaned[name] = field;
  }
  for (const name of ['point', 'near', 'at', 'order', 'tolerance']) if (typeof cleaned[name] === 'number') cleaned[name] = String(cleaned[name]);
  if (Array.isArray(cleaned['interval'])) cleaned['interval'] = cleaned['interval'].map(String);
  if (cleaned['terms'] !== undefined && cleaned['order'] !== undefined) return failure('bad-request', 'Ask for "terms" or for "order", not for both.');
  if (cleaned['variable'] !== undefined && cleaned['small'] !== undefined) return failure('bad-request', 'Name one "variable" or several "small" quantities, not both.');
  const { intervals } = cleaned;
  if (ask === 'fit' && typeof intervals === 'object' && intervals !== null) {
    cleaned['intervals'] = Object.fromEntries(Object.entries(intervals as Readonly<Record<string, readonly unknown[]>>).map(([name, list]) => [name, list.map(String)]));
    cleaned['interval'] ??= Object.values(cleaned['intervals'] as object)[0];
  }
  if (ask === 'fit' && cleaned['interval'] === undefined) return failure('bad-request', 'A fit needs an "interval".');
  return success(cleaned as unknown as Request);
}
