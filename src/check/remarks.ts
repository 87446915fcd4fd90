/** Accuracy that a comment promises for a polynomial of a program ("max error 2e-8 on [0, 1]", "good to 2 ulp"): proved or refuted for the polynomial as it stands. */
import { build, type Expression, freeSymbols, literalRational, Q, type Rational, type Span, substitute, walk } from '../expression/index.ts';
import { lookupPlain } from '../functions/index.ts';
import { polynomialReport } from '../guard/index.ts';
import type { Finding } from '../protocol.ts';
import { type CommentText, documentOffset, type PolynomialCode, readExact, readFormula, type SeriesBranch } from '../read/index.ts';
import { FLOAT_FORMATS, toPlain } from '../write/index.ts';
import { decimalUp } from './accuracy.ts';
import { enclose } from './enclose.ts';
import { intervalIn, intervalOf } from './intervals.ts';
import type { Asked } from './setting.ts';

/** What reads polynomials and comments of a program. */
export interface PolynomialReader {
  readPolynomials(text: string, language: string): readonly PolynomialCode[];
  readComments(text: string, language: string): readonly CommentText[];
}

/** A promise in a comment, and the polynomial that it stands beside. */
export interface Remark {
  /** The number with its unit, in the document. */
  readonly place: Span;
  readonly polynomial: PolynomialCode;
  readonly comment: CommentText;
  readonly tolerance: Rational;
  readonly unit: 'number' | 'percent' | 'ulp';
  readonly relative: boolean;
  readonly named: Expression | null;
  /** The comment speaks of the polynomial's own variable, or of none. */
  readonly certain: boolean;
  readonly interval: { readonly low: Rational; readonly high: Rational } | null;
}

/** Lines between a comment and the polynomial that it speaks of. */
const MOST_LINES = 14;
const NUMBER = String.raw`(?:(\d+(?:\.\d*)?|\.\d+)\s*[*×x·]\s*10\s*(?:\^|\*\*)?\s*([-−⁻]\s*[\d⁰¹²³⁴⁵⁶⁷⁸⁹]+)|(\d+(?:\.\d*)?(?:[eE][-+]?\d+)?|\.\d+(?:[eE][-+]?\d+)?)\s*(?:(?:\^|\*\*)\s*\(?\s*([-−]\s*\d+)\)?)?)`;
const PROMISE = new RegExp(
  String.raw`(?:\berr(?:or)?s?\b|\baccura(?:te|cy)\b|\bprecision\b|\bprecise\b|\bwithin\b|\bgood\s+to\b|\bcorrect\s+to\b|\bdeviat\w+\b|\|\s*(?:eps(?:ilon)?|ε|err(?:or)?|e|delta)\s*(?:\(\w\))?\s*\|)[^.;\n0-9]{0,40}?${NUMBER}\s*(\\?%|percent\b|ulps?\b)?`,
  'gi',
);
const WORDS: Readonly<Record<string, string>> = { sine: 'sin', cosine: 'cos', tangent: 'tan', arctangent: 'atan', arcsine: 'asin', arccosine: 'acos', exponential: 'exp', logarithm: 'log', arctan: 'atan', arcsin: 'asin', arccos: 'acos', ln: 'log' };

/** Promises beside the polynomials of a program, each comment belonging to the next polynomial behind it or the one on its line. */
export function remarksIn(text: string, polynomials: readonly PolynomialCode[], comments: readonly CommentText[], branches: readonly SeriesBranch[]): readonly Remark[] {
  const out: Remark[] = [];
  for (const comment of comments) {
    // A note to the tool asks; it promises nothing.
    if (!/\d/.test(comment.text) || /^\s*leading-order\s*:/i.test(comment.text)) continue;
    const polynomial = beside(text, comment, polynomials);
    if (!polynomial) continue;
    const branch = branches.find((b) => b.seriesSpan.start <= polynomial.span.start && polynomial.span.end <= b.seriesSpan.end);
    for (const match of comment.text.matchAll(PROMISE)) {
      const tolerance = toleranceOf(match);
      if (!tolerance) continue;
      const [whole, , , , , unit] = match;
      const at = match.index + whole.search(new RegExp(`${NUMBER}\\s*(?:\\\\?%|percent\\b|ulps?\\b)?$`, 'i'));
      const named = branch ? { value: branch.direct, symbol: polynomial.variable } : functionNamed(comment.text, polynomial);
      const spoken = intervalSpoken(comment.text, polynomial.variable, named?.symbol ?? null);
      const condition = branch?.condition && !branch.negated ? intervalOf(branch.condition, polynomial.variable) : null;
      const adjacent = lineOf(text, polynomial.span.start) - lineOf(text, comment.span.end) <= 1;
      out.push({
        place: { start: documentOffset(comment, at), end: documentOffset(comment, match.index + whole.trimEnd().length) },
        polynomial,
        comment,
        tolerance,
        unit: unit === undefined ? 'number' : /^ulp/i.test(unit) ? 'ulp' : 'percent',
        relative: /\brel(?:ative)?\b/i.test(comment.text.slice(Math.max(0, match.index - 30), match.index + whole.length + 12)) || (unit !== undefined && !/^ulp/i.test(unit)),
        named: named?.value ?? null,
        certain: named !== null && (named.symbol === polynomial.variable || (named.symbol === null && (polynomial.target === null || adjacent))),
        interval: spoken ?? (condition ? rationalEnds(condition.low, condition.high) : null),
      });
      break;
    }
  }
  return out;
}

/** `null`: nothing is promised that could be judged. */
export function remarkFinding(remark: Remark, asked: Asked): Finding {
  const { polynomial, tolerance, unit, named, interval, place } = remark;
  const base = { ...place, claim: place, found: '', fix: null };
  const undecided = (reason: string): Finding => ({ ...base, verdict: 'undecided', severity: 'hint', reason });
  const precision = (FLOAT_FORMATS as Readonly<Record<string, { readonly precision: number } | undefined>>)[polynomial.format]?.precision;
  if (precision === undefined) return undecided('What an ulp is in this number format is not known.');
  /** An ulp is between 2^-p and 2^(1-p) of the value. */
  const ulp = Q.power(Q.rational(2), BigInt(-precision));
  const relative = remark.relative || unit === 'ulp';
  const stated = unit === 'percent' ? Q.divide(tolerance, Q.rational(100)) : unit === 'ulp' ? Q.multiply(tolerance, ulp) : tolerance;
  const report = polynomialReport({ coefficients: polynomial.coefficients, variable: polynomial.variable, stated, measure: relative ? 'relative' : 'absolute', ...(named ? { named } : {}), ...(interval ? { interval } : {}) }, asked.budget);
  if (!report.ok) return undecided(report.error.message);
  const { error, function: f, interval: where } = report.value;
  const of = `${toPlain(f)} on [${shown(where.low)}, ${shown(where.high)}]`;
  const kind = relative ? 'relative error' : 'error';
  const upper = unit === 'ulp' ? `${decimalUp(Q.divide(error.upper, ulp), false)} ulp` : decimalUp(error.upper, unit === 'percent');
  if (Q.compare(error.upper, stated) <= 0) return { ...base, verdict: 'holds', severity: 'none', reason: `Holds: the ${kind} of this polynomial against ${of}, rounding apart, is proved to be at most ${upper}.` };
  const limit = unit === 'ulp' ? Q.multiply(stated, Q.rational(2)) : stated;
  if (Q.compare(error.lower, limit) <= 0) return undecided(`The ${kind} against ${of} is too close to the promised one to be decided.`);
  if (!interval) return undecided(`The ${kind} against ${of} reaches ${upper}; the comment does not say on which interval it is promised.`);
  if (!named) return undecided(`The polynomial is near ${of} with a ${kind} of ${upper}; name the function in the comment to have the promise judged.`);
  if (!remark.certain) return undecided(`Whether this promise is about the polynomial in ${polynomial.variable} is not plain; its ${kind} against ${of} reaches ${upper}.`);
  return { ...base, verdict: 'fails', severity: 'error', reason: `The ${kind} of this polynomial against ${of} reaches ${upper}.`, found: upper, fix: { ...place, text: upper } };
}

const shown = (q: Rational): string => (q.den === 1n ? q.num.toString() : Number(Q.toDouble(q).toPrecision(6)).toString());

function toleranceOf(match: RegExpMatchArray): Rational | null {
  const [, mantissa, ten, plain, exponent] = match;
  const integer = (digits: string): bigint => BigInt(digits.replace(/[\s−⁻⁰¹²³⁴⁵⁶⁷⁸⁹]/g, (c) => (c === '−' || c === '⁻' ? '-' : /\s/.test(c) ? '' : String('⁰¹²³⁴⁵⁶⁷⁸⁹'.indexOf(c)))));
  const power = (base: Rational, digits: string): Rational | null => (integer(digits) < -400n ? null : Q.power(base, integer(digits)));
  const front = Q.fromDecimal((mantissa ?? plain ?? '').replace(/\.$/, ''));
  if (!front || Q.signOf(front) <= 0) return null;
  if (ten !== undefined) {
    const scale = power(Q.rational(10), ten);
    return scale && Q.multiply(front, scale);
  }
  const value = exponent === undefined ? front : power(front, exponent);
  return value && Q.compare(value, Q.rational(1)) < 0 ? value : match[5] === undefined ? null : value;
}

function lineOf(text: string, offset: number): number {
  let lines = 0;
  for (let at = text.indexOf('\n'); at >= 0 && at < offset; at = text.indexOf('\n', at + 1)) lines += 1;
  return lines;
}

/** The polynomial on the comment's line, else the first one behind it that no other comment with a promise and no blank stretch parts from it. */
function beside(text: string, comment: CommentText, polynomials: readonly PolynomialCode[]): PolynomialCode | null {
  const code = comment.beside;
  const same = code && polynomials.find((p) => p.span.start < code.end && code.start < p.span.end);
  if (same) return same;
  const next = polynomials.find((p) => p.span.start >= comment.span.end);
  return next && (text.slice(comment.span.end, next.span.start).match(/\n/g)?.length ?? 0) <= MOST_LINES ? next : null;
}

/** The function that the comment, or else the name of the function around, speaks of, in the polynomial's variable. */
function functionNamed(comment: string, polynomial: PolynomialCode): { readonly value: Expression; readonly symbol: string | null } | null {
  const variable = build.symbol(polynomial.variable);
  let best: { readonly value: Expression; readonly symbol: string; readonly length: number } | null = null;
  for (const start of comment.matchAll(/(?<![\w.])[\w(]/g)) {
    const line = /^[^\n,;:<>=|≤≥]*/.exec(comment.slice(start.index, start.index + 60))?.[0] ?? '';
    for (const end of [...line.matchAll(/[\w)](?![\w(])/g)].reverse()) {
      const piece = line.slice(0, end.index + 1);
      if (piece.length <= (best?.length ?? 0) || !/[a-z^]/i.test(piece)) continue;
      const read = readFormula(piece, 'plain');
      if (!read.ok || read.value.expression.kind === 'relation' || !speaks(read.value.expression)) continue;
      const [symbol, ...more] = freeSymbols(read.value.expression);
      if (symbol === undefined || more.length > 0 || symbol.length > 2 || symbol === 'e') continue;
      best = { value: substitute(read.value.expression, symbol, variable), symbol, length: piece.length };
      break;
    }
  }
  if (best) return best;
  const words = `${comment} ${(polynomial.function ?? '').replace(/([a-z\d])([A-Z])/g, '$1 $2').replace(/_/g, ' ')}`.toLowerCase().split(/[^a-z\d]+/);
  const known = words.map((word) => lookupPlain(WORDS[word] ?? word, 1)?.id).find((id) => id !== undefined && /^(?:a?(?:sin|cos|tan)h?|exp[2m]?1?|log(?:1p|2|10)?|erfc?|gamma|logistic)$/.test(id));
  return known === undefined ? null : { value: build.call(known, variable), symbol: null };
}

/** More than sums and products: a function or a power with the symbol above. */
const speaks = (e: Expression): boolean => [...walk(e)].every((n) => n.kind !== 'apply') && [...walk(e)].some((n) => n.kind === 'call' || (n.kind === 'power' && freeSymbols(n.exponent).length > 0) || (n.kind === 'power' && n.exponent.kind === 'quotient') || n.kind === 'root');

function intervalSpoken(comment: string, variable: string, symbol: string | null): Remark['interval'] {
  for (const name of new Set([variable, ...(symbol === null ? [] : [symbol])])) {
    const ends = intervalIn(comment, name);
    const found = ends && rationalEnds(ends.low, ends.high);
    if (found) return found;
  }
  for (const match of comment.matchAll(/[[(]\s*([^[\](),;\n]{1,24})\s*(?:,|;|\.\.)\s*([^[\](),;\n]{1,24})\s*[\])]/g)) {
    const [low, high] = [readExact(match[1] ?? ''), readExact(match[2] ?? '')];
    const found = low.ok && high.ok ? rationalEnds(low.value, high.value) : null;
    if (found) return found;
  }
  return null;
}

/** Rational ends inside of the stated ones, so that what is refuted is refuted on the stated interval too. */
function rationalEnds(low: Expression, high: Expression): Remark['interval'] {
  const [a, b] = [enclose(low), enclose(high)];
  if (!a || !b) return null;
  const inside = { low: literalRational(low) ?? Q.negate(shortBelow(Q.negate(a.high))), high: literalRational(high) ?? shortBelow(b.low) };
  return Q.compare(inside.low, inside.high) < 0 ? inside : null;
}

/** The next multiple of 2^-40 below. */
const shortBelow = (q: Rational): Rational => Q.divide(Q.rational(Q.floor(Q.multiply(q, Q.rational(1n << 40n)))), Q.rational(1n << 40n));
