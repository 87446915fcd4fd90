/** Arguments of known functions: in brackets, in braces, or bare (`\sin 2\pi x`), with exponents, subscripts and primes on the name. */
import { build, type Expression, freeSymbols } from '../../expression/index.ts';
import { isName } from './facts.ts';
import { functionId } from './functionNames.ts';
import { exponentOf, isCondition, smallText } from './grammar.ts';
import { deeper, fail, isCommand, isMark, named, next, node, peek, type State } from './state.ts';
import type { Token } from './tokens.ts';

const OPENERS = ['(', '[', '\\{'] as const;
export const opensBracket = (t: Token): boolean => isMark(t, ...OPENERS);

/** The expressions in a bracket, separated by commas, semicolons or bars. The bracket is consumed. */
export function bracketArguments(p: State): Expression[] {
  return deeper(p, () => {
    const open = p.at;
    const close = p.match[open] ?? -1;
    next(p);
    const bars = p.bars;
    p.bars = 0;
    const args: Expression[] = [];
    for (;;) {
      while (peek(p).kind === 'space') next(p);
      if (p.at >= close) break;
      args.push(p.grammar.relation(p));
      while (peek(p).kind === 'space') next(p);
      if (p.at < close && (isMark(peek(p), ',', ';', '|') || isCommand(peek(p), 'mid', 'vert'))) next(p);
      else break;
    }
    if (p.at !== close) fail(p, `${named(peek(p)).replace(/^./, (c) => c.toUpperCase())} is not understood inside these brackets; remove it or add an operator.`);
    p.bars = bars;
    next(p);
    return args;
  });
}

/** Functions whose inverse is meant by an exponent -1. */
const INVERSES: Readonly<Record<string, string>> = { sin: 'asin', cos: 'acos', tan: 'atan', cot: 'acot', sec: 'asec', csc: 'acsc', sinh: 'asinh', cosh: 'acosh', tanh: 'atanh', coth: 'acoth', sech: 'asech', csch: 'acsch' };

/** A known function whose name has been read: exponent, subscript, primes, argument. `from` is the token where the name starts. */
export function applyKnown(p: State, from: number, id: string, written: string): Expression {
  let exponent: Expression | null = null;
  let index: Expression | null = null;
  let primes = 0;
  for (;;) {
    const t = peek(p);
    if (isMark(t, '^') && exponent === null) {
      next(p);
      exponent = exponentOf(p);
    } else if (t.kind === 'super' && exponent === null) {
      next(p);
      exponent = smallText(t);
    } else if (isMark(t, '_') && index === null) {
      next(p);
      index = p.grammar.texArgument(p);
    } else if (t.kind === 'sub' && index === null) {
      next(p);
      index = smallText(t);
    } else if (isMark(t, "'")) {
      next(p);
      primes += 1;
    } else break;
  }
  const args = opensBracket(skipGap(p)) ? bracketArguments(p) : [bareArgument(p, written)];
  if (args.length === 0) fail(p, `The brackets behind ${written} are empty; write the argument.`, p.tokens[p.at - 1]);
  const inverse = exponent !== null && isMinusOne(exponent) ? INVERSES[id] : undefined;
  let value = plainCall(p, from, inverse ?? id, written, index, primes, args);
  if (exponent !== null && inverse === undefined) value = node(p, from, { kind: 'power', base: value, exponent });
  return value;
}

function plainCall(p: State, from: number, id: string, written: string, index: Expression | null, primes: number, args: readonly Expression[]): Expression {
  const [first] = args;
  if (id === 'sqrt' && first) return node(p, from, { kind: 'power', base: first, exponent: build.number({ num: 1n, den: 2n }) });
  if (id === 'cbrt' && first) return node(p, from, { kind: 'root', degree: build.number(3), radicand: first });
  if (id === 'log' && first && (index !== null || args.length === 2)) {
    const base = index ?? args[1];
    if (base?.kind === 'number' && base.value.den === 1n && base.value.num === 10n) return node(p, from, { kind: 'call', function: 'log10', args: [first], written });
    if (base?.kind === 'number' && base.value.den === 1n && base.value.num === 2n) return node(p, from, { kind: 'call', function: 'log2', args: [first], written });
    if (base?.kind === 'constant' && base.name === 'e') return node(p, from, { kind: 'call', function: 'log', args: [first], written });
    if (base) return node(p, from, { kind: 'quotient', numerator: { kind: 'call', function: 'log', args: [first], written }, denominator: { kind: 'call', function: 'log', args: [base] } });
  }
  const all = index === null ? args : [index, ...args];
  if (primes > 0) return derivativeOfCall(p, from, id, written, all, primes);
  return node(p, from, { kind: 'call', function: id, args: all, written });
}

/** f'(u): the derivative at u. With a symbol as argument it is d/du; else an unspecified derivative cannot be written as a node of a known function. */
export function derivativeOfCall(p: State, from: number, id: string, written: string, args: readonly Expression[], primes: number): Expression {
  const last = args[args.length - 1];
  if (last?.kind === 'symbol') return node(p, from, { kind: 'derivative', body: { kind: 'call', function: id, args, written }, variable: last, times: primes });
  return fail(p, `The prime on ${written} is understood only with a single symbol as argument; write the derivative out.`, p.tokens[from]);
}

const isMinusOne = (e: Expression): boolean => e.kind === 'negation' && e.operand.kind === 'number' && e.operand.value.num === 1n && e.operand.value.den === 1n;

/** A negative or small gap between a function and its argument means nothing. */
function skipGap(p: State): Token {
  while (peek(p).kind === 'space' && !/^q?quad$/.test(peek(p).text)) next(p);
  return peek(p);
}

/** Whether the factor that starts here is a function, operator or order term, which ends a bare argument. */
function startsFunction(p: State): boolean {
  const t = peek(p);
  if (t.kind === 'word') return t.text.length > 1 ? functionId(t.text) !== null : /^[Oo]$/.test(t.text);
  if (t.kind === 'command') return functionId(t.text) !== null || /^(?:int|sum|prod|lim|mathcal|order|cdots|ldots|dots|oint|iint)$/.test(t.text);
  if (t.kind === 'letter') {
    if (t.text === 'e' && isMark(peek(p, 1), '^')) return true;
    if (/^[Oo]$/.test(t.text) && isMark(peek(p, 1), '(')) return true;
    let word = '';
    for (let k = 0; k < 8 && peek(p, k).kind === 'letter' && (k === 0 || !peek(p, k).spaced); k += 1) word += peek(p, k).text;
    return word.length > 1 && functionId(word) !== null;
  }
  return false;
}

/**
 * The argument of a function without brackets: the product that follows, up to a sign, a visible gap, another function or a bracket.
 * A slash belongs to it if the argument so far is a product or a constant (`\cos 2\pi x/L`) and not if it repeats the argument (`\sin x/x`); otherwise the reading is refused.
 */
function bareArgument(p: State, written: string): Expression {
  return deeper(p, () => {
    const from = p.at;
    const start = peek(p);
    const sign = isMark(start, '-', '+') ? next(p) : null;
    if (!p.grammar.startsFactor(p)) fail(p, `The argument of ${written} is missing; write it, for example ${written}(x).`, start.kind === 'end' ? p.tokens[from - 1] : start);
    const whole = peek(p).kind === 'open' || isMark(peek(p), '|', 'l|') || isCommand(peek(p), 'lvert', 'frac', 'dfrac', 'tfrac', 'sqrt');
    const nested = startsFunction(p);
    const factors: Expression[] = [p.grammar.factor(p)];
    if (!nested && !(whole && p.tokens[from]?.kind !== 'command')) {
      while (p.grammar.startsFactor(p) && !startsFunction(p) && !isCondition(p)) {
        const t = peek(p);
        if (opensBracket(t)) {
          if (whole) break;
          fail(p, `It is not plain whether the bracket belongs to the argument of ${written}; write ${written}(...) with brackets.`);
        }
        if (p.differentials.has(p.at)) break;
        if (isMark(t, '|', 'l|') || t.kind === 'open') break;
        if (p.options.notation === 'plain' && t.spaced && whole) break;
        factors.push(p.grammar.factor(p));
      }
    }
    let value: Expression = factors.length === 1 ? (factors[0] as Expression) : node(p, from, { kind: 'product', factors });
    const slash = peek(p);
    if (isMark(slash, '/') && !nested && !whole) {
      const constantOnly = freeSymbols(value).length === 0;
      const behind = peek(p, 1);
      if (factors.length > 1 || constantOnly) {
        next(p);
        const denominators: Expression[] = [];
        const at = p.at;
        do denominators.push(p.grammar.factor(p));
        while (isName(peek(p)) && !startsFunction(p) && !isMark(p.tokens[p.at - 1] as Token, ')'));
        value = node(p, from, { kind: 'quotient', numerator: value, denominator: denominators.length === 1 ? (denominators[0] as Expression) : node(p, at, { kind: 'product', factors: denominators }) });
      } else if (!(slash.spaced || behind.spaced) && !repeats(p, value)) {
        fail(p, `It is not plain whether the slash belongs to the argument of ${written}; put brackets around the argument.`, slash);
      }
    }
    return sign?.text === '-' ? node(p, from, { kind: 'negation', operand: value }) : value;
  });
}

/** Whether the divisor behind the slash holds a symbol of the argument. */
function repeats(p: State, argument: Expression): boolean {
  const symbols = new Set(freeSymbols(argument));
  const close = p.match[p.at + 1] ?? -1;
  const last = close > 0 ? close : p.at + 2;
  for (let k = p.at + 1; k <= last && k < p.tokens.length; k += 1) {
    const t = p.tokens[k] as Token;
    if (isName(t) && symbols.has(t.kind === 'command' ? `\\${t.text}` : t.text)) return true;
  }
  return false;
}
