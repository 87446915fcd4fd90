/** Exact values, assumptions and small quantities, as they stand outside a document: in requests, notes and settings. */
import { build, type Expression, literalRational, Q, type Rational, type Relation } from '../expression/index.ts';
import { failure, type Outcome, success } from '../outcome.ts';
import { readExpression, readFormula, type ReadOptions } from './math/read.ts';

/** LaTeX shows itself by a backslash; everything else outside a document is plain notation. */
export const notationOf = (text: string): 'latex' | 'plain' => (text.includes('\\') ? 'latex' : 'plain');

/** An exact value in plain notation or LaTeX: `pi/2`, `-exp(-1)`, `I*pi`, `\pi/4`, `c/10`, `inf`, `-inf`. e is Euler's number unless named in `symbols`. Rejects relations. */
export function readExact(text: string, options: ReadOptions = {}): Outcome<Expression> {
  const trimmed = text.trim();
  const found = readExpression(trimmed, notationOf(trimmed), { ...options, exact: true });
  if (!found.ok) return found;
  if (found.value.kind === 'relation') return failure('bad-request', `“${short(trimmed)}” is a relation, not a value; write one value such as pi/2.`);
  return found;
}

export const PROPERTIES = ['integer', 'real', 'positive', 'negative', 'nonzero', 'nonnegative', 'nonpositive', 'even', 'odd', 'natural', 'complex', 'noninteger', 'rational', 'operator'] as const;
export type Property = (typeof PROPERTIES)[number];

/** One thing taken for granted. A chain such as `0.9 <= c <= 1.1` gives one assumption a relation. */
export type Assumption =
  | { readonly kind: 'relation'; readonly left: Expression; readonly relation: '<' | '<=' | '>' | '>=' | '!=' | '='; readonly right: Expression }
  | { readonly kind: 'property'; readonly subject: Expression; readonly property: Property };

const WORDS: Readonly<Record<string, Property>> = { integer: 'integer', integers: 'integer', int: 'integer', whole: 'integer', real: 'real', reals: 'real', positive: 'positive', negative: 'negative', nonzero: 'nonzero', 'non-zero': 'nonzero', nonnegative: 'nonnegative', 'non-negative': 'nonnegative', nonpositive: 'nonpositive', 'non-positive': 'nonpositive', even: 'even', odd: 'odd', natural: 'natural', complex: 'complex', noninteger: 'noninteger', 'non-integer': 'noninteger', rational: 'rational', operator: 'operator', operators: 'operator', matrix: 'operator', matrices: 'operator', noncommuting: 'operator', 'non-commuting': 'operator' };
const SETS: Readonly<Record<string, Property>> = { Z: 'integer', N: 'natural', R: 'real', C: 'complex', Q: 'rational' };

/** `A, B do not commute`, `A operator`, `a > 0`, `n integer`, `x is real`, `0.9 <= c <= 1.1`, `a \ne 0`, `n \in \mathbb{Z}`, several joined by commas or `and`. */
export function readAssumption(text: string, options: ReadOptions = {}): Outcome<readonly Assumption[]> {
  const out: Assumption[] = [];
  /** Names waiting for what is said of them: `a, b > 0`. */
  let waiting: string[] = [];
  for (const part of splitList(text)) {
    if (/^(?:\\?[A-Za-z]\w*|\\[a-z]+\s*\{\w+\})(?:_\{[^{}]*\}|_\w)?$/.test(part)) {
      waiting.push(part);
      continue;
    }
    const one = readOneAssumption(part, options);
    if (!one.ok) return one;
    out.push(...one.value);
    for (const name of waiting) {
      const also = readExpression(name, notationOf(name), options);
      if (!also.ok) return also;
      const first = one.value[0];
      if (first?.kind === 'relation') out.push({ ...first, left: also.value });
      else out.push(...one.value.map((a): Assumption => (a.kind === 'property' ? { ...a, subject: also.value } : a)));
    }
    waiting = [];
  }
  const [left] = waiting;
  if (left !== undefined) return failure('bad-request', `“${short(left)}” is not understood as an assumption; write for example a > 0 or n integer.`);
  return out.length > 0 ? success(out) : failure('bad-request', 'The assumption is empty; write for example a > 0 or n integer.');
}

function readOneAssumption(given: string, options: ReadOptions): Outcome<readonly Assumption[]> {
  const text = given.replace(/\s+(?:do|does)(?: not|n't) commute\s*$/i, ' operator');
  const membership = /^(.*?)\s*(?:\\in|∈)\s*(?:\\(?:mathbb|mathbf|mathrm|Bbb)\s*\{?\s*([ZNRCQ])\s*\}?|([ℤℕℝℂℚ]))\s*(?:\^?\{?[+*]\}?)?$/.exec(text);
  if (membership) {
    const letter = membership[2] ?? { 'ℤ': 'Z', 'ℕ': 'N', 'ℝ': 'R', 'ℂ': 'C', 'ℚ': 'Q' }[membership[3] ?? ''] ?? '';
    return propertyOf(membership[1] ?? '', SETS[letter], options, text);
  }
  const worded = /^(.*?)\s+(?:(?:is|are|an?|be|being)\s+)*((?:non-?)?[a-z]+)$/i.exec(text.replace(/\\(?:text|mathrm)\{\s*([^}]*?)\s*\}/g, ' $1 ').replace(/\\[ ,;]/g, ' ').trim());
  const property = worded && WORDS[(worded[2] ?? '').toLowerCase()];
  if (worded && property) {
    // `n positive integer` holds two properties.
    const inner = /^(.*?)\s+(?:(?:is|are|an?)\s+)*((?:non-?)?[a-z]+)$/i.exec(worded[1] ?? '');
    const more = inner && WORDS[(inner[2] ?? '').toLowerCase()];
    if (inner && more) {
      const one = propertyOf(inner[1] ?? '', more, options, text);
      const two = propertyOf(inner[1] ?? '', property, options, text);
      return one.ok && two.ok ? success([...one.value, ...two.value]) : one.ok ? two : one;
    }
    return propertyOf(worded[1] ?? '', property, options, text);
  }
  const found = readExpression(text, notationOf(text), options);
  if (!found.ok) return found;
  if (found.value.kind !== 'relation') return failure('bad-request', `“${short(text)}” is not understood as an assumption; write for example a > 0 or n integer.`);
  const { sides, relations } = found.value;
  const out: Assumption[] = [];
  for (let i = 0; i < relations.length; i += 1) {
    const left = sides[i];
    const right = sides[i + 1];
    const relation = relations[i];
    if (!left || !right || !relation || !isOrdering(relation)) return failure('bad-request', `“${short(text)}” is not understood as an assumption; use <, <=, >, >=, = or \\ne.`);
    out.push({ kind: 'relation', left, relation, right });
  }
  return success(out);
}

const isOrdering = (r: Relation): r is '<' | '<=' | '>' | '>=' | '!=' | '=' => r === '<' || r === '<=' || r === '>' || r === '>=' || r === '!=' || r === '=';

function propertyOf(subjectText: string, property: Property | undefined, options: ReadOptions, whole: string): Outcome<readonly Assumption[]> {
  if (!property) return failure('bad-request', `“${short(whole)}” is not understood as an assumption; write for example a > 0 or n integer.`);
  const out: Assumption[] = [];
  for (const name of subjectText.split(/\s*,\s*/)) {
    const subject = readExpression(name, notationOf(name), options);
    if (!subject.ok) return subject;
    out.push({ kind: 'property', subject: subject.value, property });
  }
  return success(out);
}

/** One small quantity. `quantity` tends to 0 like s^weight; `below` names the quantities that it is smaller than every power of. */
export interface SmallQuantity {
  readonly quantity: Expression;
  readonly weight: Rational;
  readonly below: readonly Expression[];
}

/**
 * Small quantities as a request or note gives them: `["x", "y"]` (equal weight), `["\\epsilon ~ \\theta^2"]` (weight 2 against 1), `["y << x"]`.
 * A compound quantity (`v/c`) is kept as it is written.
 */
export function readSmall(entries: string | readonly string[], options: ReadOptions = {}): Outcome<readonly SmallQuantity[]> {
  const list = typeof entries === 'string' ? splitList(entries) : entries;
  const found: { quantity: Expression; weight: Rational; below: Expression[] }[] = [];
  const place = (quantity: Expression, weight: Rational): void => {
    const known = found.find((f) => keyOf(f.quantity) === keyOf(quantity));
    if (known) known.weight = weight;
    else found.push({ quantity, weight, below: [] });
  };
  for (const entry of list) {
    const notation = notationOf(entry);
    const sign = /\\sim(?![A-Za-z])|~|∼|\\ll(?![A-Za-z])|<<|≪/.exec(entry);
    if (!sign) {
      const one = readExpression(entry, notation, options);
      if (!one.ok) return one;
      if (one.value.kind === 'relation') return failure('bad-request', `“${short(entry)}” is not a small quantity; write for example x, or \\epsilon ~ \\theta^2.`);
      place(one.value, found.find((f) => keyOf(f.quantity) === keyOf(one.value))?.weight ?? Q.ONE);
      continue;
    }
    const left = readExpression(entry.slice(0, sign.index), notation, options);
    const right = readExpression(entry.slice(sign.index + sign[0].length), notation, options);
    if (!left.ok) return left;
    if (!right.ok) return right;
    if (/ll|<<|≪/.test(sign[0])) {
      place(left.value, Q.ONE);
      place(right.value, Q.ONE);
      found.find((f) => keyOf(f.quantity) === keyOf(left.value))?.below.push(right.value);
      continue;
    }
    const powered = right.value.kind === 'power' ? right.value : null;
    const base = powered ? powered.base : right.value;
    const exponent = powered ? literalRational(powered.exponent) : Q.ONE;
    if (!exponent || Q.signOf(exponent) <= 0) return failure('bad-request', `The exponent in “${short(entry)}” must be a positive number; write for example \\epsilon ~ \\theta^2.`);
    const anchor = found.find((f) => keyOf(f.quantity) === keyOf(base));
    const weight = anchor ? Q.multiply(anchor.weight, exponent) : exponent;
    if (!anchor) place(base, Q.ONE);
    place(left.value, weight);
  }
  return found.length > 0 ? success(found) : failure('bad-request', 'No small quantity is named; write for example x, or \\epsilon ~ \\theta^2.');
}

const keyOf = (e: Expression): string => JSON.stringify(e, (key, value: unknown) => (key === 'span' || key === 'written' ? undefined : typeof value === 'bigint' ? `${value}` : value));

/** Splits at commas, semicolons and the word `and` outside brackets. */
export function splitList(text: string): string[] {
  const parts: string[] = [];
  let depth = 0;
  let from = 0;
  for (let i = 0; i < text.length; i += 1) {
    const c = text.charAt(i);
    if ('([{'.includes(c)) depth += 1;
    else if (')]}'.includes(c)) depth -= 1;
    else if (depth === 0 && (c === ',' || c === ';')) {
      parts.push(text.slice(from, i));
      from = i + 1;
    } else if (depth === 0 && /^\s+and\s+/i.test(text.slice(i, i + 8))) {
      parts.push(text.slice(from, i));
      from = i + (/^\s+and\s+/i.exec(text.slice(i, i + 8))?.[0].length ?? 0);
      i = from - 1;
    }
  }
  parts.push(text.slice(from));
  return parts.map((part) => part.trim()).filter((part) => part !== '');
}

const short = (text: string): string => (text.length > 40 ? `${text.slice(0, 40)}…` : text);

/** A name as a request writes it (`x`, `\epsilon`, `epsilon`, `v_0`, `\frac{v}{c}`): the expression, a plain symbol in most cases. */
export function readVariable(text: string, options: ReadOptions = {}): Outcome<Expression> {
  const trimmed = text.trim();
  const formula = readFormula(trimmed, notationOf(trimmed), { ...options, symbols: [...(options.symbols ?? []), trimmed] });
  if (!formula.ok) return formula;
  const { expression } = formula.value;
  if (expression.kind === 'relation' || expression.kind === 'number') return failure('bad-request', `“${short(trimmed)}” is not a variable; name a symbol such as x or a ratio such as v/c.`);
  return success(expression.kind === 'constant' && expression.name === 'e' ? build.symbol('e') : expression);
}
