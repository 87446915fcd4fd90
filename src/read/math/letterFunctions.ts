/**
 * Special functions that are written with a letter: `J_0(x)`, `\Gamma(x)`, `\psi'(x)`, `W_{-1}(x)`, `E(k)`, `H_n`.
 * The descriptions in src/functions say which letters there are and with which indices; the rules here say when such a letter
 * is rather a quantity or a name of the author's own. They decide on the tokens alone, before anything in the bracket is read.
 */
import { build, type Expression } from '../../expression/index.ts';
import { describe, type FunctionDescription, lookupLatex, lookupLatexLetter } from '../../functions/index.ts';
import { bracketArguments, derivativeOfCall, opensBracket } from './calls.ts';
import { isName, nameText } from './facts.ts';
import { exponentOf, relationOf, smallText } from './grammar.ts';
import { deeper, fail, isMark, next, node, peek, type State } from './state.ts';
import type { Token } from './tokens.ts';

/** What stands in the bracket behind the letter, as far as the tokens tell. */
interface Bracket {
  readonly count: number;
  readonly inner: readonly Token[];
  /** A sum at the bracket's own level. */
  readonly isSum: boolean;
  /** A sum that starts with a number: `(1 + \frac{\theta^2}{16})`, the mark of a prefactor. */
  readonly isCorrection: boolean;
  readonly first: readonly Token[];
  readonly last: readonly Token[];
  /** The call is one whole side of a relation: a definition or a claim about a name. */
  readonly wholeSide: boolean;
}

function inspect(p: State, from: number, open: number): Bracket | null {
  const close = p.match[open] ?? -1;
  if (close <= open + 1) return null;
  let count = 1;
  let isSum = false;
  const pieces: Token[][] = [[]];
  for (let k = open + 1; k < close; k += 1) {
    const t = p.tokens[k] as Token;
    const skip = p.match[k] ?? -1;
    // A bar that starts an argument opens an absolute value.
    const last = pieces[pieces.length - 1];
    const closing = isMark(t, '|') && last?.length === 0 ? nextBar(p, k + 2, close) : -1;
    if (closing > k) {
      last?.push(...p.tokens.slice(k, closing + 1));
      k = closing;
      continue;
    }
    if (isMark(t, ',', ';', '|')) {
      count += 1;
      pieces.push([]);
      continue;
    }
    if (isMark(t, '+', '-') && k > open + 1) isSum = true;
    if (t.kind !== 'space') pieces[pieces.length - 1]?.push(t);
    if (skip > k) k = skip;
  }
  const before = p.tokens[from - 1];
  const after = p.tokens[close + 1] as Token;
  const first = pieces[0] ?? [];
  return {
    count,
    inner: p.tokens.slice(open + 1, close),
    isSum,
    isCorrection: isSum && first[0]?.kind === 'digit',
    first,
    last: pieces[pieces.length - 1] ?? [],
    wholeSide: (before === undefined || relationOf(before) !== null || before.kind === 'space' || isMark(before, ',', ';')) && relationOf(after) !== null,
  };
}

function nextBar(p: State, from: number, to: number): number {
  for (let k = from; k < to; k += 1) if (isMark(p.tokens[k] as Token, '|')) return k;
  return -1;
}

const only = (piece: readonly Token[], pattern: RegExp): boolean => piece.length === 1 && piece[0] !== undefined && (isName(piece[0]) ? pattern.test(nameText(piece[0])) : piece[0].kind === 'digit' && pattern.test(piece[0].text));
const MODULUS = /^(?:k|m|\d)$/;
const DEGREE = /^\{?(?:[nmklN]|\\ell|\\nu|\d+|n[+-]1)\}?$/;

/** Whether the letter is the special function here. `ask` is for what the text leaves open. */
function verdict(p: State, from: number, base: string, index: string, upright: boolean, b: Bracket): boolean | 'ask' {
  if (upright) return true;
  if (index === '') {
    switch (base) {
      case '\\Gamma':
      case '\\zeta':
      case '\\gamma':
        return b.count > 1 || base !== '\\gamma';
      case '\\psi':
        return b.count === 1;
      case '\\Pi':
        return b.count === 2;
      case 'W':
        if (b.wholeSide) return p.facts.truncated && !b.isSum;
        return !b.isSum ? true : p.facts.bare.has('W') ? false : 'ask';
      case 'K':
      case 'E':
        if (b.count === 2) return base === 'E' && only(b.last, MODULUS);
        return b.count === 1 && !b.isSum && (!b.wholeSide || only(b.first, MODULUS));
      case 'F':
        return b.count === 2 && only(b.last, MODULUS);
      case 'C':
      case 'S':
        return b.count === 1 && !b.isSum && !b.wholeSide;
      case 'M':
        return b.count === 2 || b.count === 3;
      case 'B':
        return b.count === 2;
      case 'U':
      case 'P':
      case 'Q':
        return b.count === 3 ? base === 'U' : b.count === 2 && only(b.first, /^(?:[as]|\\nu|\d)$/);
      case 'G': {
        const before = p.tokens[from - 1];
        return b.count === 1 && before?.kind === 'command' && /^(?:ln|log)$/.test(before.text);
      }
      default:
        return false;
    }
  }
  if (b.count !== 1) return false;
  switch (base) {
    case 'J':
      return true;
    case 'Y':
    case 'I':
    case 'K':
      return !b.isCorrection;
    case 'E':
      return !b.isSum && DEGREE.test(index);
    case 'W':
      return /^\{?-?(?:\d|k|n)\}?$/.test(index);
    case 'j':
      return !b.isSum && DEGREE.test(index);
    case 'P':
    case 'T':
    case 'U':
    case 'H':
    case 'L':
      return !b.isSum && DEGREE.test(index) && index !== '0';
    case 'B':
      return DEGREE.test(index) && index !== '0';
    case 'D':
      return !b.isSum && /^(?:p|\\nu|\d|\{-?[\d/]+\}|\{-?\d*(?:p|\\nu)[+-]?[\d/]*\})$/.test(index);
    default:
      return false;
  }
}

/** The call, its name already read up to subscript and primes; null where the letter is no special function here (nothing is consumed then). */
export function letterFunction(p: State, from: number, base: string, index: string, primes: number): Expression | null {
  const start = p.at;
  const full = index === '' ? base : `${base}_${index}`;
  if (p.facts.differentiated.has(full)) return null;
  let at = start;
  let exponentAt = -1;
  if (isMark(peek(p), '^')) {
    exponentAt = at + 1;
    const close = p.match[at + 1] ?? -1;
    at = close > at ? close + 1 : at + 2;
  } else if (peek(p).kind === 'super') at += 1;
  while (p.tokens[at]?.kind === 'space' && !/quad/.test(p.tokens[at]?.text ?? '')) at += 1;
  const bracket = p.tokens[at];
  if (!bracket || at >= p.end || !opensBracket(bracket)) return at === start ? numbersOf(p, from, base, index, primes) : null;
  const shown = inspect(p, from, at);
  if (!shown) return null;
  const upright = p.tokens[from]?.upright === true;
  const decided = verdict(p, from, base, index, upright, shown);
  if (decided === false) return null;
  const description = find(base, index, primes, upright, shown.count);
  if (!description) return null;
  if (decided === 'ask') fail(p, `It is not plain whether ${base}(...) is a function or a product; write \\operatorname{${base}}(...) or ${base} \\cdot (...).`, p.tokens[from]);
  let exponent: Expression | null = null;
  if (exponentAt > 0) {
    next(p);
    exponent = deeper(p, () => exponentOf(p));
  } else if (peek(p).kind === 'super') exponent = smallText(next(p));
  while (peek(p).kind === 'space') next(p);
  const args = bracketArguments(p);
  const indices = description.names.latexIndices?.count ?? 0;
  const order = description.id === 'polygamma' || description.id === 'zetaDerivative' ? build.number(primes) : index !== '' ? indexExpression(index) : indices > 0 ? build.number(0) : null;
  const all = indices > 0 && order ? [order, ...args] : args;
  const known = description.id === 'polygamma' || description.id === 'zetaDerivative' || primes === 0;
  const call = known ? node(p, from, { kind: 'call', function: description.id, args: all, written: full }) : derivativeOfCall(p, from, description.id, full, all, primes);
  return exponent ? node(p, from, { kind: 'power', base: call, exponent }) : call;
}

function find(base: string, index: string, primes: number, upright: boolean, count: number): FunctionDescription | null {
  const shape = { indices: index === '' ? 0 : 1, place: 'subscript', arguments: count } as const;
  if (base.startsWith('\\')) {
    if (base === '\\psi' && primes > 0) return lookupLatex('\\operatorname{polygamma}', { indices: 1, place: 'superscript', arguments: 1 });
    if (base === '\\zeta' && primes > 0 && count === 1) return describe('zetaDerivative');
    return index === '' ? lookupLatex(base, shape) : null;
  }
  const named = upright ? (lookupLatex(`\\operatorname{${base}}`, shape) ?? lookupLatex(`\\mathsf{${base}}`, shape)) : null;
  const letter = named ?? lookupLatexLetter(base, shape);
  if (letter) return letter;
  return base === 'W' && index === '' ? lookupLatexLetter('W', { indices: 1, place: 'subscript', arguments: count }) : null;
}

/** Numbers with an index and no argument: the harmonic number H_n, and Bernoulli numbers where the index is summed over or counts. */
function numbersOf(p: State, from: number, base: string, index: string, primes: number): Expression | null {
  if (primes > 0 || index === '') return null;
  const counts = /^(?:[nNmk]|\{[2-9]?[nNmk](?:[+-][1-9])?\})$/.test(index);
  if (base === 'H' && counts) return node(p, from, { kind: 'call', function: 'harmonic', args: [indexExpression(index)], written: `H_${index}` });
  if (base === 'B' && counts && [...p.facts.indices, ...p.bound].some((name) => index.includes(name))) return node(p, from, { kind: 'call', function: 'bernoulliNumber', args: [indexExpression(index)], written: `B_${index}` });
  return null;
}

/** A subscript as an expression: whole numbers, ratios, a letter, sums such as `\nu+1`, `2n`. */
export function indexExpression(index: string): Expression {
  const ratios = index.replace(/\\[td]?frac\s*(?:\{\s*(\d+)\s*\}|(\d))\s*(?:\{\s*(\d+)\s*\}|(\d))/g, (_, a?: string, b?: string, c?: string, d?: string) => `${a ?? b ?? ''}/${c ?? d ?? ''}`);
  const bare = ratios.replace(/^\{|\}$/g, '');
  const terms = bare.match(/[+-]?[^+-]+/g) ?? [bare];
  const read = (text: string): Expression => {
    const match = /^([+-]?)(\d*)(\/\d+)?((?:\\[A-Za-z]+|[A-Za-z])?(?:_.*)?)$/.exec(text);
    if (!match) return build.symbol(text);
    const [, sign, digits = '', below = '', name = ''] = match;
    const parts: Expression[] = [];
    if (digits) {
      const value = build.number(BigInt(digits));
      parts.push(below ? build.quotient(value, build.number(BigInt(below.slice(1)))) : value);
    }
    if (name) parts.push(build.symbol(name));
    const value = build.product(...parts);
    return sign === '-' ? build.negation(value) : value;
  };
  return build.sum(...terms.map(read));
}
