/** The words of a note: `small x, on |x| <= 0.5, within 1e-6, assume a > 0`. */
import { build, type Expression, literalRational, Q, type Rational } from '../expression/index.ts';
import type { Failure, Side } from '../protocol.ts';
import { type Assumption, notationOf, readAssumption, readExact, readSmall, readVariable, type SmallQuantity } from './exact.ts';
import { readExpression } from './math/read.ts';

/** What notes can settle. Absent fields are left to the next in precedence. */
export interface Settings {
  /** As written: `x`, `\epsilon`, `v/c`. */
  readonly variable?: string;
  /** Several small quantities, or one with a weight; entries as in a request. */
  readonly small?: readonly string[];
  readonly quantities?: readonly SmallQuantity[];
  /** Exact expression as written (`0`, `inf`, `\pi/2`), and its tree. */
  readonly point?: string;
  readonly pointExpression?: Expression;
  readonly side?: Side;
  readonly unknown?: string;
  readonly interval?: readonly [string, string];
  readonly tolerance?: string;
  readonly measure?: 'absolute' | 'relative' | 'ulp';
  readonly terms?: number;
  /** Exact rational as text (`6`, `7/2`). */
  readonly order?: string;
  readonly assume?: readonly string[];
  readonly assumptions?: readonly Assumption[];
  readonly format?: string;
  readonly skip?: boolean;
  /** Label of the equation that the code below implements. */
  readonly implements?: string;
}

interface Words {
  settings: Record<string, unknown>;
  readonly errors: (Failure & { start: number; end: number })[];
}

/** The clauses of a note. Each is read by itself, so that one wrong word leaves the others in force. */
export function readWords(text: string, start: number, end: number): { readonly settings: Settings; readonly errors: readonly (Failure & { readonly start: number; readonly end: number })[] } {
  const words: Words = { settings: {}, errors: [] };
  for (const clause of clauses(text, start, end)) readClause(words, text.slice(clause.start, clause.end), clause.start, clause.end);
  if (words.errors.length === 0 && Object.keys(words.settings).length === 0) words.errors.push({ code: 'bad-request', message: 'The note says nothing yet; write for example small x, on |x| <= 0.5, within 1e-6.', start, end: Math.max(end, start) });
  return { settings: words.settings as Settings, errors: words.errors };
}

/** Splits at commas and semicolons outside brackets and bars; trims. */
function clauses(text: string, start: number, end: number): readonly { readonly start: number; readonly end: number }[] {
  const out: { start: number; end: number }[] = [];
  let depth = 0;
  let from = start;
  const push = (to: number): void => {
    let a = from;
    let b = to;
    while (a < b && /[\s*]/.test(text.charAt(a))) a += 1;
    while (b > a && /[\s.*]/.test(text.charAt(b - 1))) b -= 1;
    if (b > a) out.push({ start: a, end: b });
  };
  for (let i = start; i < end; i += 1) {
    const c = text.charAt(i);
    if ('([{'.includes(c)) depth += 1;
    else if (')]}'.includes(c)) depth -= 1;
    else if (depth <= 0 && (c === ',' || c === ';')) {
      push(i);
      from = i + 1;
    }
  }
  push(end);
  return out;
}

const say = (words: Words, message: string, start: number, end: number): void => {
  words.errors.push({ code: 'bad-request', message, start, end });
};

function readClause(words: Words, clause: string, start: number, end: number): void {
  const s = words.settings;
  const match = /^(small|large|near|at|on|within|to within|relative|tolerance|assume|assuming|with|from|terms?|order|to order|up to order|through|skip|ignore|implements?|unknown|solve for|for|format|in|absolute|variable|side|as)\b\s*:?\s*/i.exec(clause);
  const bareFormat = FORMATS[clause.toLowerCase()];
  if (bareFormat !== undefined) {
    s['format'] = bareFormat;
    return;
  }
  const leadingCount = /^(\d+)\s+terms?$/i.exec(clause);
  if (leadingCount) {
    s['terms'] = Number(leadingCount[1]);
    return;
  }
  if (!match) {
    // A clause without its own word goes on with the one before: `small x, y`; `assume a > 0, b > 0`.
    if (words.settings['assume'] && /[<>=≤≥≠]|\\(?:ne|le|ge|in|lt|gt)|\b(?:integer|real|positive|negative|even|odd)\b/.test(clause)) {
      assume(words, clause, start, end);
      return;
    }
    if (words.settings['small'] && /^\\?[A-Za-z]/.test(clause) && clause.length < 30 && !/\s[a-z]{3,}\s/.test(clause)) {
      smalls(words, clause, start, end);
      return;
    }
    const word = /^\S+/.exec(clause)?.[0] ?? clause;
    say(words, `“${word}” is not understood in a note; use small, large, near, on, within, assume, from the right, terms, to order, skip or implements.`, start, start + word.length);
    return;
  }
  const key = (match[1] ?? '').toLowerCase();
  const rest = clause.slice(match[0].length).trim();
  const restStart = start + match[0].length;
  const need = (what: string): boolean => {
    if (rest !== '') return false;
    say(words, `Something is missing after “${key}”; write ${what}.`, start, end);
    return true;
  };
  switch (key) {
    case 'skip':
    case 'ignore':
      s['skip'] = true;
      if (rest !== '' && !/^(?:this|file|formula|next|claim)?$/i.test(rest)) say(words, `“${rest}” is not understood after “${key}”; remove it.`, restStart, end);
      return;
    case 'small':
      if (!need('the small quantity, for example small x')) smalls(words, rest, restStart, end);
      return;
    case 'large':
      if (need('the large quantity, for example large n')) return;
      variable(words, rest, restStart, end);
      s['point'] = 'inf';
      s['pointExpression'] = build.constant('infinity');
      return;
    case 'near':
    case 'at':
      if (!need('a place, for example near x = 1')) near(words, rest, restStart, end);
      return;
    case 'on':
    case 'for':
      if (!need('an interval, for example on |x| <= 0.5 or on [0, 1]')) interval(words, rest, restStart, end);
      return;
    case 'in':
      if (/^(?:binary|bfloat|fixed|float|double)/i.test(rest)) format(words, rest, restStart, end);
      else if (!need('an interval, for example on [0, 1]')) interval(words, rest, restStart, end);
      return;
    case 'within':
    case 'to within':
    case 'tolerance':
    case 'relative':
    case 'absolute':
      if (key === 'relative' || key === 'absolute') s['measure'] = key;
      if (!need('a tolerance, for example within 1e-6')) tolerance(words, rest.replace(/^(?:tolerance|error|within)\s+/i, ''), end - rest.replace(/^(?:tolerance|error|within)\s+/i, '').length, end);
      return;
    case 'assume':
    case 'assuming':
    case 'with':
      if (!need('an assumption, for example assume a > 0')) assume(words, rest, restStart, end);
      return;
    case 'from':
    case 'side':
      if (/^(?:the\s+)?(?:right|above)$/i.test(rest)) s['side'] = 'right';
      else if (/^(?:the\s+)?(?:left|below)$/i.test(rest)) s['side'] = 'left';
      else if (/^both(?:\s+sides)?$/i.test(rest)) s['side'] = 'both';
      else say(words, `“${rest}” is no side; write from the right or from the left.`, restStart, end);
      return;
    case 'term':
    case 'terms': {
      const count = /^\d+$/.test(rest) ? Number(rest) : NaN;
      if (count >= 1 && count <= 1000) s['terms'] = count;
      else say(words, `“${rest}” is no number of terms; write a whole number from 1 to 1000.`, restStart, end);
      return;
    }
    case 'order':
    case 'to order':
    case 'up to order':
    case 'through': {
      const found = readExact(rest.replace(/^order\s+/, ''));
      const value: Rational | null = found.ok ? literalRational(found.value) : null;
      if (value) s['order'] = Q.toText(value);
      else say(words, `“${rest}” is no order; write a number such as 6 or 7/2.`, restStart, end);
      return;
    }
    case 'implements':
    case 'implement':
      if (!need('the label of an equation, for example implements eq:sag')) s['implements'] = rest.replace(/^\\(?:eq)?ref\{([^}]*)\}$/, '$1').replace(/^equation\s+/, '');
      return;
    case 'unknown':
    case 'solve for':
      if (!need('the symbol to solve for, for example unknown y')) {
        const found = readVariable(rest);
        if (found.ok) s['unknown'] = rest;
        else say(words, found.error.message, restStart, end);
      }
      return;
    case 'variable':
      if (!need('the variable, for example variable x')) variable(words, rest, restStart, end);
      return;
    case 'as':
      near(words, rest, restStart, end);
      return;
    case 'format':
      if (!need('a float format, for example binary32')) format(words, rest, restStart, end);
      return;
    default:
  }
}

const FORMATS: Readonly<Record<string, string>> = { float: 'binary32', double: 'binary64', single: 'binary32', half: 'binary16', float32: 'binary32', float64: 'binary64', float16: 'binary16', binary32: 'binary32', binary64: 'binary64', binary16: 'binary16', bfloat16: 'bfloat16' };
function format(words: Words, rest: string, start: number, end: number): void {
  const known = FORMATS[rest.toLowerCase()] ?? (/^fixed:\d+\.\d+$/.test(rest) ? rest : null);
  if (known) words.settings['format'] = known;
  else say(words, `“${rest}” is no float format; write binary32, binary64, binary16, bfloat16 or fixed:m.n.`, start, end);
}

function variable(words: Words, rest: string, start: number, end: number): void {
  const found = readVariable(rest);
  if (found.ok) words.settings['variable'] = rest;
  else say(words, `“${rest}” is not understood as a quantity; name a symbol such as x or a ratio such as v/c.`, start, end);
}

function smalls(words: Words, rest: string, start: number, end: number): void {
  const entries = [...((words.settings['small'] as readonly string[] | undefined) ?? []), ...rest.split(/\s+and\s+/)];
  const found = readSmall(entries);
  if (!found.ok) {
    say(words, found.error.code === 'bad-request' ? found.error.message : `“${rest}” is not understood as a small quantity; write for example small x, or small \\epsilon ~ \\theta^2.`, start, end);
    return;
  }
  words.settings['small'] = entries;
  const [only] = entries;
  if (entries.length === 1 && only !== undefined && found.value.length === 1) {
    words.settings['variable'] = only;
    words.settings['point'] ??= '0';
    words.settings['pointExpression'] ??= build.number(0);
    delete words.settings['quantities'];
  } else {
    words.settings['quantities'] = found.value;
    delete words.settings['variable'];
  }
}

/** `x = 1`, `x -> 0`, `x \to \infty`, `1`. */
function near(words: Words, rest: string, start: number, end: number): void {
  const parts = /^(.*?)\s*(?:=|->|→|\\to(?![A-Za-z])|\\rightarrow(?![A-Za-z]))\s*(.*)$/.exec(rest);
  const value = (parts ? (parts[2] ?? '') : rest).replace(/\^?\{?\+\}?$/, '').replace(/\s*from the (?:right|left)$/i, '');
  const point = readExact(value);
  if (!point.ok) {
    say(words, `“${value}” is not understood as a place; write for example near x = 1 or near x = pi/2.`, end - (parts ? (parts[2] ?? '').length : rest.length), end);
    return;
  }
  if (parts) variable(words, (parts[1] ?? '').trim(), start, start + (parts[1] ?? '').length);
  words.settings['point'] = value;
  words.settings['pointExpression'] = point.value;
  if (/\^?\{?\+\}?$/.test(rest) && /\d\^?\{?\+/.test(rest)) words.settings['side'] = 'right';
}

/** `|x| <= 0.5`, `[0, 1]`, `0 <= x <= 1`, `x >= 10`, `(0, inf)`. Ends are kept as written. */
function interval(words: Words, rest: string, start: number, end: number): void {
  const fail = (): void => say(words, `“${rest}” is not understood as an interval; write for example on |x| <= 0.5, on [0, 1] or on 0 <= x <= pi/4.`, start, end);
  const brackets = /^(?:([^[(\s=]+)\s*(?:in|\\in|∈|=)\s*)?[[(](.*)[\])]$/.exec(rest);
  const ends = brackets ? splitAtComma(brackets[2] ?? '') : null;
  if (brackets && ends) {
    if (![...ends].every((e) => readExact(e).ok)) fail();
    else words.settings['interval'] = ends;
    return;
  }
  const to = /^(\S.*?)\s+to\s+(\S.*)$/.exec(rest);
  if (to && readExact(to[1] ?? '').ok && readExact(to[2] ?? '').ok) {
    words.settings['interval'] = [to[1] ?? '', to[2] ?? ''];
    return;
  }
  const relation = readExpression(rest, notationOf(rest));
  if (!relation.ok || relation.value.kind !== 'relation') {
    fail();
    return;
  }
  const { sides, relations } = relation.value;
  const written = (i: number): string => {
    const span = sides[i]?.span;
    return span ? rest.slice(span.start, span.end) : '';
  };
  const down = (r: string | undefined): boolean => r === '<' || r === '<=';
  const up = (r: string | undefined): boolean => r === '>' || r === '>=';
  const [left, middle] = sides;
  if (sides.length === 2 && left?.kind === 'call' && left.function === 'abs' && down(relations[0])) {
    const bound = written(1);
    words.settings['interval'] = [/^[\w.]+$|^\\[A-Za-z]+$/.test(bound) ? `-${bound}` : `-(${bound})`, bound];
  } else if (sides.length === 3 && down(relations[0]) && down(relations[1]) && middle && !literalRational(middle)) words.settings['interval'] = [written(0), written(2)];
  else if (sides.length === 3 && up(relations[0]) && up(relations[1])) words.settings['interval'] = [written(2), written(0)];
  else if (sides.length === 2 && up(relations[0])) words.settings['interval'] = [written(1), 'inf'];
  else if (sides.length === 2 && down(relations[0])) words.settings['interval'] = ['-inf', written(1)];
  else fail();
}

function splitAtComma(text: string): readonly [string, string] | null {
  let depth = 0;
  for (let i = 0; i < text.length; i += 1) {
    const c = text.charAt(i);
    if ('([{'.includes(c)) depth += 1;
    else if (')]}'.includes(c)) depth -= 1;
    else if (c === ',' && depth === 0) {
      const pair = [text.slice(0, i).trim(), text.slice(i + 1).trim()] as const;
      return pair[0] !== '' && pair[1] !== '' ? pair : null;
    }
  }
  return null;
}

/** `1e-6`, `0.1 %`, `10^{-6}`, `2 ulp`, `1e-6 relative`. */
function tolerance(words: Words, rest: string, start: number, end: number): void {
  const match = /^(.*?)\s*(%|percent|ulps?|relative|absolute)?$/i.exec(rest);
  const unit = (match?.[2] ?? '').toLowerCase();
  const found = readExact((match?.[1] ?? rest).replace(/\\%|\\times/g, (m) => (m === '\\%' ? '' : '\\times')));
  const value = found.ok ? positiveRational(found.value) : null;
  if (!value) {
    say(words, `“${rest}” is not understood as a tolerance; write for example within 1e-6 or within 0.1 %.`, start, end);
    return;
  }
  const percent = unit === '%' || unit === 'percent';
  words.settings['tolerance'] = percent ? Q.toText(Q.divide(value, Q.rational(100))) : (match?.[1] ?? rest);
  if (percent || unit === 'relative') words.settings['measure'] = 'relative';
  else if (unit.startsWith('ulp')) words.settings['measure'] = 'ulp';
  else if (unit === 'absolute') words.settings['measure'] = 'absolute';
}

/** A literal positive rational, powers of ten and products included. */
function positiveRational(e: Expression): Rational | null {
  const value = valueOf(e);
  return value && Q.signOf(value) > 0 ? value : null;
}
function valueOf(e: Expression): Rational | null {
  if (e.kind === 'product') {
    const parts = e.factors.map(valueOf);
    return parts.reduce<Rational | null>((a, b) => (a && b ? Q.multiply(a, b) : null), Q.ONE);
  }
  if (e.kind === 'power') {
    const base = valueOf(e.base);
    const exponent = literalRational(e.exponent);
    return base && exponent && Q.isInteger(exponent) && exponent.num < 400n && exponent.num > -400n && !Q.isZero(base) ? Q.power(base, exponent.num) : null;
  }
  return literalRational(e);
}

function assume(words: Words, rest: string, start: number, end: number): void {
  const found = readAssumption(rest);
  if (!found.ok) {
    say(words, `“${rest}” is not understood as an assumption; write for example assume a > 0 or assume n integer.`, start, end);
    return;
  }
  words.settings['assume'] = [...((words.settings['assume'] as readonly string[] | undefined) ?? []), rest];
  words.settings['assumptions'] = [...((words.settings['assumptions'] as readonly Assumption[] | undefined) ?? []), ...found.value];
}
