/** Relations, sums, products, quotients, powers: one rule a level of precedence. Widths are loops; depth is counted and capped. */
import { build, type Expression, Q, type Relation, type Span } from '../../expression/index.ts';
import { atPlace } from './evaluation.ts';
import { isName, nameText } from './facts.ts';
import { deeper, fail, isCommand, isMark, named, next, node, peek, type State } from './state.ts';
import { MAX_DEPTH, type Token, TOO_DEEP } from './tokens.ts';
import { vectorPair } from './vectors.ts';

const RELATION_MARKS: Readonly<Record<string, Relation>> = { '=': '=', '==': '=', ':=': 'define', '<': '<', '>': '>', '<=': '<=', '>=': '>=', '!=': '!=', '~=': 'about', '=~': 'about', '~': 'tilde', '->': 'to', '<<': 'll', '>>': 'gg' };
const RELATION_COMMANDS: Readonly<Record<string, Relation>> = {
  approx: 'about', simeq: 'about', cong: 'about', approxeq: 'about', thickapprox: 'about', doteq: 'about', fallingdotseq: 'about', sim: 'tilde', thicksim: 'tilde', asymp: 'tilde',
  to: 'to', rightarrow: 'to', longrightarrow: 'to', xrightarrow: 'to', tendsto: 'to', mapsto: 'to', searrow: 'to', nearrow: 'to', downarrow: 'to', uparrow: 'to',
  equiv: 'define', coloneqq: 'define', coloneq: 'define', triangleq: 'define', eqdef: 'define', lt: '<', gt: '>', le: '<=', leq: '<=', leqslant: '<=', lesssim: '<=', lessapprox: '<=', ge: '>=', geq: '>=', geqslant: '>=', gtrsim: '>=', ne: '!=', neq: '!=', propto: 'propto', varpropto: 'propto', ll: 'll', lll: 'll', gg: 'gg', ggg: 'gg',
};

/** The relation that the token is, or null. `\not=` is two tokens and is handled by the caller. */
export function relationOf(t: Token): Relation | null {
  if (t.kind === 'mark') return RELATION_MARKS[t.text] ?? null;
  return t.kind === 'command' ? (RELATION_COMMANDS[t.text] ?? null) : null;
}

/** `a = b ≈ c`: a chain is one node; a single side is itself. */
export function relation(p: State): Expression {
  const from = p.at;
  const sides: Expression[] = [];
  const relations: Relation[] = [];
  const relationSpans: Span[] = [];
  skipGaps(p);
  // A line of an aligned formula may start with its relation sign: the left side stands in the row above.
  if (relationOf(peek(p)) === null) sides.push(p.grammar.sum(p));
  for (;;) {
    skipGaps(p, true);
    const sign = peek(p);
    let kind = relationOf(sign);
    const negated = isCommand(sign, 'not');
    if (negated) {
      kind = relationOf(peek(p, 1)) === '=' ? '!=' : null;
      if (kind === null) fail(p, 'This negated sign is not understood; write \\ne, \\nless or words.');
      next(p);
    }
    if (kind === null) break;
    if (sides.length === 0) fail(p, `There is nothing before ${named(sign)}; add the left side.`);
    next(p);
    if (sign.text === 'xrightarrow') {
      if (isMark(peek(p), '[')) p.at = (p.match[p.at] ?? p.at) + 1;
      skipArgument(p);
    }
    if (isMark(peek(p), '=') && (kind === 'about' || kind === 'tilde')) next(p);
    if (isMark(peek(p), '_', '^') && kind === 'to') {
      next(p);
      skipArgument(p);
    }
    relations.push(kind);
    relationSpans.push({ start: sign.start, end: sign.end });
    skipGaps(p);
    if (!canStartSum(p)) {
      if (kind === 'to' || peek(p).kind !== 'end') fail(p, `Something is missing after ${named(sign)}; add the right side.`);
      fail(p, `The formula ends after ${named(sign)}; add the right side.`, sign);
    }
    sides.push(p.grammar.sum(p));
  }
  const [only] = sides;
  if (relations.length === 0 && only) return only;
  return node(p, from, { kind: 'relation', sides, relations, relationSpans });
}

/** Gaps such as `\;` mean nothing before or after a relation sign. With `onlyBeforeRelation` the gap stays if something else follows. */
function skipGaps(p: State, onlyBeforeRelation = false): void {
  const start = p.at;
  while (peek(p).kind === 'space') next(p);
  if (onlyBeforeRelation && relationOf(peek(p)) === null && !isCommand(peek(p), 'not')) p.at = start;
}

function skipArgument(p: State): void {
  const close = p.match[p.at] ?? -1;
  p.at = peek(p).kind === 'open' && close > 0 ? close + 1 : p.at + 1;
}

const isSign = (t: Token): boolean => isMark(t, '+', '-') || isCommand(t, 'pm', 'mp');
const canStartSum = (p: State): boolean => isSign(peek(p)) || p.grammar.startsFactor(p);

export function sum(p: State): Expression {
  return deeper(p, () => {
    const from = p.at;
    const terms: Expression[] = [];
    for (;;) {
      while (peek(p).kind === 'space') next(p);
      const sign = peek(p);
      const start = p.at;
      if (isCommand(sign, 'pm', 'mp')) fail(p, 'The sign ± stands for two formulas; choose one of them.');
      if (isMark(sign, '+', '-')) {
        next(p);
        const signs: Token[] = [sign];
        while (isMark(peek(p), '+', '-') || peek(p).kind === 'space') {
          const more = next(p);
          if (more.kind === 'mark') signs.push(more);
        }
        if (!p.grammar.startsFactor(p)) fail(p, peek(p).kind === 'end' ? `The formula ends after ${named(sign)}; add the next term.` : `A term is missing between ${named(sign)} and ${named(peek(p))}; add it.`, peek(p).kind === 'end' ? sign : peek(p));
        const value = p.grammar.term(p);
        const minus = signs.filter((s) => s.text === '-').length % 2 === 1;
        terms.push(minus ? node(p, start, { kind: 'negation', operand: value }) : value);
      } else if (p.grammar.startsFactor(p) && (terms.length === 0 || joinsWithoutSign(p, terms))) {
        terms.push(p.grammar.term(p));
      } else break;
      const gap = p.at;
      while (peek(p).kind === 'space') next(p);
      const joins = isSign(peek(p)) || joinsWithoutSign(p, terms);
      if (!joins) {
        p.at = gap;
        break;
      }
    }
    const [only] = terms;
    if (!only) return fail(p, peek(p).kind === 'end' ? 'Nothing to read here yet; write a formula.' : `${capital(named(peek(p)))} cannot start a formula; put a number, a symbol or a function before it.`);
    return terms.length === 1 ? only : node(p, from, { kind: 'sum', terms });
  });
}

const capital = (s: string): string => s.charAt(0).toUpperCase() + s.slice(1);
/** `\cdots o(x^3)`: after dots an order term may follow without a sign. */
const joinsWithoutSign = (p: State, terms: readonly Expression[]): boolean => {
  const last = terms[terms.length - 1];
  return (last?.kind === 'dots' || (last?.kind === 'negation' && last.operand.kind === 'dots')) && (isOrderName(p) || isCommand(peek(p), 'mathcal', 'order'));
};

const isTimes = (t: Token): boolean => isMark(t, '*') || isCommand(t, 'cdot', 'times', 'ast', 'bullet', 'star', 'cross', 'dotproduct');
const isDivide = (t: Token): boolean => isMark(t, '/') || isCommand(t, 'div', 'slash');

export function term(p: State): Expression {
  return deeper(p, () => product(p, false));
}
/** The body of \sum, \int or d/dx: a product. */
export const factorRun = (p: State): Expression => deeper(p, () => product(p, true));

function product(p: State, operatorBody: boolean): Expression {
  const from = p.at;
  let factors: Expression[] = [];
  let quotients = 0;
  /** The last operator was none: two factors stand side by side. */
  const collapse = (): Expression => {
    const [only] = factors;
    if (only && factors.length === 1) return only;
    return node(p, from, { kind: 'product', factors });
  };
  factors.push(factorWithSign(p, false));
  for (;;) {
    const gap = p.at;
    while (peek(p).kind === 'space' && !endsFormula(peek(p))) next(p);
    const t = peek(p);
    if (isTimes(t) || isFullStopProduct(p)) {
      next(p);
      while (peek(p).kind === 'space') next(p);
      if (isCommand(peek(p), 'cdots', 'dots', 'ldots', 'dotsm', 'dotsb')) continue;
      if (!p.grammar.startsFactor(p) && !isMark(peek(p), '-', '+')) missing(p, t);
      const start = p.at;
      const right = factorWithSign(p, true);
      const left = factors[factors.length - 1];
      const pair = left && t.kind === 'command' ? vectorPair(left, right) : null;
      if (pair) {
        factors[factors.length - 1] = node(p, Math.min(start, from), { kind: 'vector', operation: t.text === 'times' || t.text === 'cross' ? 'cross' : 'dot', args: pair });
      } else factors.push(right);
    } else if (isDivide(t)) {
      next(p);
      while (peek(p).kind === 'space') next(p);
      if (!p.grammar.startsFactor(p) && !isMark(peek(p), '-', '+')) missing(p, t);
      quotients += 1;
      if (quotients > MAX_DEPTH) fail(p, TOO_DEEP);
      const numerator = collapse();
      const denominator = denominatorAfterSlash(p, factors);
      factors = [node(p, from, { kind: 'quotient', numerator, denominator })];
    } else if (p.grammar.startsFactor(p)) {
      if (isCondition(p)) {
        p.at = gap;
        break;
      }
      const last = factors[factors.length - 1];
      if (last?.kind === 'dots' && factors.length === 1 && !operatorBody) break;
      factors.push(p.grammar.factor(p));
    } else {
      p.at = gap;
      break;
    }
  }
  return collapse();
}

function missing(p: State, after: Token): never {
  return fail(p, `A factor is missing after ${named(after)}; add it.`, peek(p).kind === 'end' ? after : peek(p));
}

const endsFormula = (t: Token): boolean => t.kind === 'space' && (t.text === 'quad' || t.text === 'qquad');
/** A bracket behind a term that holds a relation sign or words at its own level: `(|x| < 1)`, `(x \to \infty)`. */
export function isCondition(p: State): boolean {
  const t = peek(p);
  if (t.kind === 'open') return isWords(p);
  if (!isMark(t, '(', '[')) return false;
  const close = p.match[p.at] ?? -1;
  for (let k = p.at + 1; k < close; k += 1) {
    const inner = p.tokens[k] as Token;
    const skip = p.match[k] ?? -1;
    if (skip > k && inner.text !== '|') {
      k = skip;
      continue;
    }
    if (relationOf(inner) !== null || inner.kind === 'text' || isCommand(inner, 'in')) return true;
  }
  return false;
}

/** Braces that hold gaps and words only: `{\;\text{(3rd order)}}`. */
function isWords(p: State): boolean {
  const close = p.match[p.at] ?? -1;
  let words = false;
  for (let k = p.at + 1; k < close; k += 1) {
    const t = p.tokens[k] as Token;
    if (t.kind === 'text') words = true;
    else if (t.kind !== 'space' && !isMark(t, '(', ')', ',', '.')) return false;
  }
  return words;
}

function isFullStopProduct(p: State): boolean {
  const t = peek(p);
  if (!isMark(t, '.')) return false;
  const after = peek(p, 1);
  const before = p.tokens[p.at - 1];
  if (!before) return false;
  if (after.kind === 'digit') return p.facts.dotProducts;
  return (isName(after) || isMark(after, '(')) && !after.spaced && !t.spaced && (isName(before) || before.kind === 'digit' || before.kind === 'close' || isMark(before, ')'));
}

function factorWithSign(p: State, allowed: boolean): Expression {
  const start = p.at;
  if (allowed && isMark(peek(p), '-', '+')) {
    const sign = next(p);
    if (!p.grammar.startsFactor(p) && !isMark(peek(p), '-', '+')) missing(p, sign);
    const operand = deeper(p, () => factorWithSign(p, true));
    return sign.text === '-' ? node(p, start, { kind: 'negation', operand }) : operand;
  }
  return p.grammar.factor(p);
}

/**
 * What a slash divides by. Side-by-side factors bind tighter than the slash (`\hbar\omega/k_B T`, `v^2/2c^2`), as in print;
 * a number over a number is a ratio (`1/2 x` is x/2). A bracket or function right behind a written-out divisor is refused as ambiguous, unless the ratio is numeric.
 */
function denominatorAfterSlash(p: State, before: readonly Expression[]): Expression {
  const from = p.at;
  const divisors: Expression[] = [factorWithSign(p, true)];
  const first = divisors[0] as Expression;
  const dividend = before[before.length - 1];
  const plainNumber = (e: Expression | undefined): boolean => e !== undefined && (e.kind === 'number' || (e.kind === 'negation' && e.operand.kind === 'number') || (e.kind === 'call' && e.function === 'factorial' && e.args[0]?.kind === 'number'));
  const ratio = plainNumber(dividend) && plainNumber(first);
  const firstToken = p.tokens[from] as Token;
  if (ratio || firstToken.kind === 'open' || isMark(firstToken, '(', '[', '|', 'l|') || first.kind === 'call' || (firstToken.kind === 'command' && !isName(firstToken))) return first;
  while (p.grammar.startsFactor(p) && !isCondition(p)) {
    const t = peek(p);
    if (!isName(t) && t.kind !== 'digit') {
      if (t.kind === 'command' && /^(?:l?dots|cdots|dots.)$/.test(t.text)) break;
      if (plainNumber(first) && divisors.length === 1 && (t.kind === 'super' || t.kind === 'sub')) break;
      fail(p, `It is not plain whether ${named(t)} belongs to the divisor; put brackets around what is divided by.`);
    }
    if (isOrderName(p)) break;
    if (isFunctionWord(t)) fail(p, `It is not plain whether ${named(t)} belongs to the divisor; put brackets around what is divided by.`);
    divisors.push(p.grammar.factor(p));
  }
  return divisors.length === 1 ? first : node(p, from, { kind: 'product', factors: divisors });
}

const isFunctionWord = (t: Token): boolean => t.kind === 'word' && t.text.length > 1 && /^(?:sin|cos|tan|exp|ln|log|sqrt)/.test(t.text);
const isOrderName = (p: State): boolean => /^[Oo]$/.test(peek(p).text) && isMark(peek(p, 1), '(');

export function factor(p: State): Expression {
  return deeper(p, () => {
    const from = p.at;
    let value = p.grammar.atom(p);
    // Every rule must consume something, or the loops above it would not end.
    if (p.at === from) fail(p, `${capital(named(peek(p)))} is not understood here; remove it or add an operator.`);
    for (let count = 0; ; count += 1) {
      if (count > MAX_DEPTH) fail(p, TOO_DEEP);
      const t = peek(p);
      if (isMark(t, '^', '**')) {
        const second = count > 0 && value.kind === 'power' && p.options.notation === 'latex' && t.text === '^' && p.tokens[p.at - 1]?.kind !== 'mark';
        if (second && !isMark(p.tokens[p.at - 1], ')')) fail(p, 'Two exponents stand side by side; put braces around the inner power.');
        next(p);
        const exponent = sideMark(p) ?? exponentOf(p);
        value = node(p, from, { kind: 'power', base: value, exponent });
      } else if (t.kind === 'super') {
        next(p);
        value = node(p, from, { kind: 'power', base: value, exponent: smallText(t) });
      } else if (isMark(t, '!')) {
        next(p);
        const twice = isMark(peek(p), '!');
        if (twice) next(p);
        value = node(p, from, { kind: 'call', function: twice ? 'doubleFactorial' : 'factorial', args: [value], written: twice ? '!!' : '!' });
      } else if (isMark(t, '|') && isMark(peek(p, 1), '_') && p.bars === 0) {
        next(p);
        value = atPlace(p, from, value);
      } else if (isMark(t, '_') && isMark(p.tokens[p.at - 1], ')')) {
        next(p);
        const index = p.grammar.texArgument(p);
        value = node(p, from, { kind: 'call', function: 'pochhammer', args: [value, index], written: '()_' });
      } else if (isMark(t, '_')) {
        fail(p, 'A subscript stands here without a symbol it could belong to; remove it or write the symbol.');
      } else return value;
    }
  });
}

/** `0^+`, `a^{-}`: the side from which a limit is taken, kept as a power by a sign. */
function sideMark(p: State): Expression | null {
  const from = p.at;
  const braced = peek(p).kind === 'open';
  const sign = braced ? peek(p, 1) : peek(p);
  if (!isMark(sign, '+', '-') || (braced && p.match[from] !== from + 2)) return null;
  const after = peek(p, braced ? 3 : 1);
  if (!braced && !(after.kind === 'end' || after.kind === 'close' || after.kind === 'space' || after.kind === 'text' || isMark(after, ')', ']', ',', ';', '.'))) return null;
  p.at += braced ? 3 : 1;
  return node(p, from, { kind: 'symbol', name: sign.text });
}

/** The number or letter run of Unicode superscripts. */
export function smallText(t: Token): Expression {
  const span = { start: t.start, end: t.end };
  const match = /^([+-]?)(\d*)([a-z]?)(?:\/(\d+))?$/.exec(t.text);
  if (!match) return { kind: 'symbol', name: t.text, span };
  const [, sign, digits = '', letter = '', below] = match;
  const parts: Expression[] = [];
  if (digits) parts.push({ ...build.number(BigInt(digits)), span });
  if (letter) parts.push({ kind: 'symbol', name: letter, span });
  let value: Expression = parts.length === 1 ? (parts[0] as Expression) : { kind: 'product', factors: parts, span };
  if (below) value = { kind: 'quotient', numerator: value, denominator: { ...build.number(BigInt(below)), span }, span };
  return sign === '-' ? { kind: 'negation', operand: value, span } : value;
}

/** What stands behind `^`. In every notation a whole number is one exponent and a bracket is a group; plain notation is right-associative. */
export function exponentOf(p: State): Expression {
  const from = p.at;
  const t = peek(p);
  if (isMark(t, '-', '+')) {
    next(p);
    const operand = deeper(p, () => exponentOf(p));
    return t.text === '-' ? node(p, from, { kind: 'negation', operand }) : operand;
  }
  if (t.kind === 'digit' || (isMark(t, '.') && peek(p, 1).kind === 'digit')) {
    let digits = '';
    while (peek(p).kind === 'digit' && (digits === '' || !peek(p).spaced)) digits += next(p).text;
    if (isMark(peek(p), '.') && peek(p, 1).kind === 'digit' && !peek(p, 1).spaced) {
      digits += next(p).text;
      while (peek(p).kind === 'digit' && !peek(p).spaced) digits += next(p).text;
    }
    const value = node(p, from, numberOf(digits));
    return p.options.notation === 'plain' || p.facts.indices.size > 0 ? withIndex(p, from, value) : value;
  }
  if (p.options.notation === 'plain' && t.kind !== 'open' && !isMark(t, '(')) return deeper(p, () => p.grammar.factor(p));
  if (isMark(t, '(')) return p.grammar.atom(p);
  return p.grammar.texArgument(p);
}

/** `x^2m` with an index m of the same text (`(2m)!`, a sum over m) means x^(2m). */
function withIndex(p: State, from: number, value: Expression): Expression {
  const t = peek(p);
  if (!isName(t) || t.spaced) return value;
  const name = nameText(t);
  const counts = p.facts.indices.has(name) || (p.options.notation === 'plain' && /^[kmn]$/.test(name));
  if (!counts || isMark(peek(p, 1), '^', '(')) return value;
  const at = p.at;
  next(p);
  return node(p, from, { kind: 'product', factors: [value, node(p, at, { kind: 'symbol', name })] });
}

export function numberOf(written: string): Expression {
  const point = written.indexOf('.');
  const digits = written.replace('.', '');
  const value = digits === '' ? 0n : BigInt(digits);
  const places = point < 0 ? 0 : written.length - point - 1;
  const exact = build.number(Q.rational(value, 10n ** BigInt(places)));
  return point < 0 ? exact : ({ ...exact, written } as Expression);
}
