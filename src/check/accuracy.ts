/** Tolerances and percentages that a text states beside a claim, with the interval they are said to hold on: proved or refuted. */
import { boundDifference } from '../bound/index.ts';
import { build, dependsOn, Q, type Expression, type Rational, type Span } from '../expression/index.ts';
import { readFormula } from '../read/index.ts';
import type { Setting } from './context.ts';
import { enclose } from './enclose.ts';

export interface Statement {
  /** Where the number stands, its unit included. */
  readonly place: Span;
  readonly printed: string;
  readonly tolerance: Rational;
  readonly measure: 'absolute' | 'relative';
  readonly percent: boolean;
  readonly low: Expression;
  readonly high: Expression;
}

export type AccuracyVerdict =
  | { readonly kind: 'holds'; readonly error: string }
  | { readonly kind: 'fails'; readonly error: string; readonly text: string }
  | { readonly kind: 'undecided'; readonly reason: string };

const NUMBER = String.raw`(?:(\d+(?:\.\d+)?|\.\d+)\s*(?:\\times|\\cdot|×|\*|·)\s*10\s*\^\s*\{?\s*([-−]\s*\d+)\s*\}?|10\s*\^\s*\{?\s*([-−]\s*\d+)\s*\}?|(\d+(?:\.\d+)?(?:[eE][-+]?\d+)?|\.\d+(?:[eE][-+]?\d+)?))`;
const STATED = new RegExp(String.raw`(?:\berrors?\b|\baccura(?:te|cy)\b|\bwithin\b|\bcorrect to\b|\bprecision\b|\bdeviat\w+\b)(?:(?!\b(?:for|when|if|where|on|digits?|decimals?|places?|figures?)\b)[^.;\n0-9]){0,50}?${NUMBER}\s*(\\?%|per\s?cent\b)?`, 'i');

/** The statement in `text` between two offsets; null where number or interval is missing. */
export function statementIn(text: string, from: number, to: number, conditions: readonly Expression[], variable: string): Statement | null {
  const stretch = text.slice(from, to);
  const match = STATED.exec(stretch);
  if (!match) return null;
  const [, mantissa, exponent, power, plain, unit] = match;
  const ten = (e: string): Rational => Q.power(Q.rational(10), BigInt(e.replace(/[\s−]/g, (c) => (c === '−' ? '-' : ''))));
  const value = mantissa !== undefined && exponent !== undefined ? multiplied(Q.fromDecimal(mantissa), ten(exponent)) : power !== undefined ? ten(power) : Q.fromDecimal(plain ?? '');
  if (!value || Q.signOf(value) <= 0) return null;
  const percent = unit !== undefined;
  const interval = intervalFrom(conditions, stretch, variable);
  if (!interval) return null;
  const numberStart = match.index + match[0].search(new RegExp(`${NUMBER}\\s*(?:\\\\?%|per\\s?cent\\b)?$`, 'i'));
  const start = from + numberStart;
  return {
    place: { start, end: from + match.index + match[0].length },
    printed: text.slice(start, from + match.index + match[0].length).trim(),
    tolerance: percent ? Q.divide(value, Q.rational(100)) : value,
    measure: percent || /\brelative\b/i.test(stretch) ? 'relative' : 'absolute',
    percent,
    ...interval,
  };
}
const multiplied = (a: Rational | null, b: Rational): Rational | null => a && Q.multiply(a, b);

interface Ends {
  readonly low: Expression;
  readonly high: Expression;
}

function intervalFrom(conditions: readonly Expression[], words: string, variable: string): Ends | null {
  for (const condition of conditions) {
    const found = intervalOf(condition, variable);
    if (found) return found;
  }
  for (const match of words.matchAll(/\$([^$]+)\$|((?:\|[^|\n]{1,40}\||[\w\\.\-/+ ]{1,30}(?:<=?|\\leq?|≤)\s*[\w\\]{1,20})\s*(?:<=?|\\leq?(?![a-z])|≤)\s*[\w\\./{}^-]+)/g)) {
    const piece = (match[1] ?? match[2] ?? '').replace(/[.,;]+$/, '').trim();
    for (const candidate of [piece.replace(/^(?:(?:for|when|if|where|all|in|on|over)\s+)+/i, ''), piece]) {
      const read = readFormula(candidate, candidate.includes('\\') ? 'latex' : 'plain', { symbols: [variable] });
      const found = read.ok ? intervalOf(read.value.expression, variable) : null;
      if (found) return found;
    }
  }
  return null;
}

/** An interval of the variable that running words state. */
export const intervalIn = (words: string, variable: string): Ends | null => intervalFrom([], words, variable);

/** |x| < c, |x - a| <= c, a < x < b, a <= x <= b. */
export function intervalOf(e: Expression, variable: string): Ends | null {
  if (e.kind !== 'relation' || !e.relations.every((r) => r === '<' || r === '<=')) return null;
  const [first, second, third] = e.sides;
  if (!first || !second) return null;
  const isVariable = (x: Expression): boolean => x.kind === 'symbol' && x.name === variable;
  if (e.sides.length === 3 && third && isVariable(second) && !dependsOn(first, variable) && !dependsOn(third, variable)) return { low: first, high: third };
  if (e.sides.length !== 2 || dependsOn(second, variable)) return null;
  if (first.kind === 'call' && first.function === 'abs' && first.args[0]) {
    const inner = first.args[0];
    if (isVariable(inner)) return { low: build.negation(second), high: second };
    const shift = inner.kind === 'sum' && inner.terms.length === 2 && inner.terms[0] && isVariable(inner.terms[0]) && inner.terms[1]?.kind === 'negation' ? inner.terms[1].operand : null;
    return shift && { low: build.difference(shift, second), high: build.sum(shift, second) };
  }
  return null;
}

/** sup |f - sum| over the interval against the stated tolerance, by enclosures. */
export function judgeAccuracy(statement: Statement, f: Expression, sum: Expression, setting: Setting): AccuracyVerdict {
  const [low, high] = [enclose(statement.low), enclose(statement.high)];
  if (!low || !high || Q.compare(low.high, high.low) >= 0) return { kind: 'undecided', reason: 'The ends of the interval are not plain numbers.' };
  const problem = { function: f, approximation: sum, variable: setting.variable, measure: statement.measure, budget: setting.budget };
  const through = typeof setting.point === 'object' && setting.point.kind === 'number' ? { through: setting.point.value } : {};
  const wide = boundDifference({ ...problem, ...through, low: low.low, high: high.high });
  if (!wide.ok) return { kind: 'undecided', reason: wide.error.message };
  const error = decimalUp(wide.value.upper, statement.percent);
  if (Q.compare(wide.value.upper, statement.tolerance) <= 0) return { kind: 'holds', error };
  const narrow = boundDifference({ ...problem, ...through, low: low.high, high: high.low });
  if (!narrow.ok || Q.compare(narrow.value.lower, statement.tolerance) <= 0) return { kind: 'undecided', reason: 'The stated tolerance is too close to the largest error to be decided.' };
  return { kind: 'fails', error, text: error };
}

/** Two significant digits, rounded up; percent where the text has percent. */
export function decimalUp(value: Rational, percent: boolean): string {
  const shown = percent ? Q.multiply(value, Q.rational(100)) : value;
  if (Q.isZero(shown)) return '0';
  let exponent = Math.floor(Math.log10(Q.toDouble(shown)));
  const unitOf = (e: number): Rational => (e >= 0 ? Q.rational(10n ** BigInt(e)) : Q.rational(1n, 10n ** BigInt(-e)));
  const scaled = Q.divide(shown, unitOf(exponent - 1));
  let digits = -Q.floor(Q.negate(scaled));
  if (digits >= 100n) {
    digits = 10n;
    exponent += 1;
  }
  const text = digits.toString();
  const number = exponent >= -4 && exponent < 2 ? Number(`${text}e${exponent - 1}`).toString() : `${text.charAt(0)}.${text.slice(1)}e${exponent}`;
  return percent ? `${number} %` : number;
}
