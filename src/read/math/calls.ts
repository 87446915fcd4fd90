/** Arguments of known functions: in brackets, in braces, or bare (`\sin 2\pi x`), with exponents, subscripts and primes on the name. */
import { build, dependsOn, type Expression, freeSymbols } from '../../expression/index.ts';
import { isName } from './facts.ts';
import { describe } from '../../functions/index.ts';
import { commandName, type KnownName, resolve, wordName } from './functionNames.ts';
import { exponentOf, isCondition, smallText } from './grammar.ts';
import { deeper, fail, isCommand, isMark, named, next, node, peek, type State } from './state.ts';
import { type Token, Unreadable } from './tokens.ts';

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

/** A known function whose name has been read: exponent, subscript, primes, argument. `from` is the token where the name starts. */
export function applyKnown(p: State, from: number, known: KnownName): Expression {
  let exponent: Expression | null = null;
  let index: { readonly value: Expression; readonly text: string } | null = null;
  let primes = 0;
  for (;;) {
    const t = peek(p);
    if (isMark(t, '^') && exponent === null) {
      next(p);
      exponent = deeper(p, () => exponentOf(p));
    } else if (t.kind === 'super' && exponent === null) {
      next(p);
      exponent = smallText(t);
    } else if (isMark(t, '_') && index === null) {
      const at = next(p).end;
      const value = p.grammar.texArgument(p);
      index = { value, text: braced(p.text.slice(value.span?.start ?? at, value.span?.end ?? at).replace(/\s/g, '')) };
    } else if (t.kind === 'sub' && index === null) {
      next(p);
      index = { value: smallText(t), text: braced(t.text) };
    } else if (isMark(t, "'")) {
      next(p);
      primes += 1;
    } else break;
  }
  const args = opensBracket(skipGap(p)) ? bracketArguments(p) : [bareArgument(p, known.written)];
  if (args.length === 0) fail(p, `The brackets behind ${known.written} are empty; write the argument.`, p.tokens[p.at - 1]);
  const own = ownForm(known, index?.value ?? null, args);
  if (own) return raised(p, from, node(p, from, own), exponent);
  const found = resolve(known, { index: index?.text ?? null, primes, inverse: exponent !== null && isMinusOne(exponent), arguments: args.length });
  if (!found) {
    const first = p.tokens[from] as Token;
    throw new Unreadable(`The function ${known.written} is not known with ${args.length === 1 ? 'one argument' : `${args.length} arguments`}${index ? ' and a subscript' : ''}; check its arguments.`, { start: first.start, end: Math.max(first.end, first.start) }, 'unknown-function');
  }
  const { description } = found;
  const all = [...(index !== null && found.tookIndex === 'argument' ? [index.value] : []), ...(found.leadingZero ? [build.number(0)] : []), ...args];
  if (index !== null && found.tookIndex === 'none') fail(p, `The subscript of ${known.written} is not understood; remove it or write it as an argument.`, p.tokens[from]);
  const call = found.tookPrimes || primes === 0 ? node(p, from, { kind: 'call', function: description.id, args: all, written: known.written }) : derivativeOfCall(p, from, description.id, known.written, all, primes);
  return found.tookInverse ? call : raised(p, from, call, exponent);
}

const raised = (p: State, from: number, base: Expression, exponent: Expression | null): Expression => (exponent === null ? base : node(p, from, { kind: 'power', base, exponent }));
const braced = (text: string): string => {
  const inner = text.replace(/^\{(.*)\}$/, '$1');
  return inner.length === 1 || /^\\[A-Za-z]+$/.test(inner) ? inner : `{${inner}}`;
};

/** Forms that are nodes of their own: roots, and logarithms to a base. */
function ownForm(known: KnownName, index: Expression | null, args: readonly Expression[]): Expression | null {
  const [first, second] = args;
  if (!first) return null;
  const { plain, latex } = known;
  if (args.length === 1 && index === null) {
    if (plain === 'sqrt') return build.squareRoot(first);
    if (plain === 'cbrt') return build.root(3, first);
    if (plain === 're' || plain === 'Re') return { kind: 'call', function: 're', args, written: known.written };
    if (plain === 'im' || plain === 'Im') return { kind: 'call', function: 'im', args, written: known.written };
    if (plain === 'conj') return { kind: 'call', function: 'conj', args, written: known.written };
  }
  if (plain === 'pow' && second && args.length === 2 && index === null) return build.power(first, second);
  const base = index ?? (args.length === 2 ? second : undefined);
  if (base && /^(?:\\(?:log|ln)|\\operatorname\{(?:log|ln)\})$/.test(latex)) {
    const whole = base.kind === 'number' && base.value.den === 1n ? base.value.num : 0n;
    if (whole === 10n || whole === 2n) return { kind: 'call', function: whole === 10n ? 'log10' : 'log2', args: [first], written: known.written };
    const natural: Expression = { kind: 'call', function: 'log', args: [first], written: known.written };
    return base.kind === 'constant' && base.name === 'e' ? natural : build.quotient(natural, build.call('log', base));
  }
  return null;
}

/** f'(u), the derivative at u: by d/du where u is a symbol, else by the derivative that the function's description states. */
export function derivativeOfCall(p: State, from: number, id: string, written: string, args: readonly Expression[], primes: number): Expression {
  const last = args[args.length - 1];
  const call: Expression = { kind: 'call', function: id, args, written };
  // Where another argument holds the symbol too (`J_\nu'(\nu)`), d/du of the whole is another derivative.
  const alone = last?.kind === 'symbol' && !args.slice(0, -1).some((a) => dependsOn(a, last.name));
  if (alone) return node(p, from, { kind: 'derivative', body: node(p, from, call), variable: last, times: primes });
  const stated = primes === 1 ? describe(id)?.derivative?.(args, args.length - 1) : null;
  if (stated) return { ...stated, span: node(p, from, call).span };
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
  if (t.kind === 'word') return t.text.length > 1 ? wordName(t.text) !== null : /^[Oo]$/.test(t.text);
  if (t.kind === 'command') return (!isName(t) && commandName(t.text) !== null) || /^(?:int|sum|prod|lim|mathcal|order|cdots|ldots|dots|oint|iint)$/.test(t.text);
  if (t.kind === 'letter') {
    if (t.text === 'e' && isMark(peek(p, 1), '^')) return true;
    if (/^[Oo]$/.test(t.text) && isMark(peek(p, 1), '(')) return true;
    let word = '';
    for (let k = 0; k < 8 && peek(p, k).kind === 'letter' && (k === 0 || !peek(p, k).spaced); k += 1) word += peek(p, k).text;
    return word.length > 1 && wordName(word) !== null;
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
        while (isName(peek(p)) && !startsFunction(p) && !isMark(p.tokens[p.at - 1], ')'));
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

/** `\det(1 + \epsilon A)`, `\operatorname{tr} A`: the name is read, its argument follows. */
export function ofMatrix(p: State, from: number, operation: 'trace' | 'determinant'): Expression {
  while (peek(p).kind === 'space') next(p);
  if (!p.grammar.startsFactor(p)) fail(p, `The argument of ${operation === 'trace' ? 'the trace' : 'the determinant'} is missing; write it in brackets.`);
  const argument = opensBracket(peek(p)) ? bracketArguments(p)[0] : p.grammar.factor(p);
  if (!argument) return fail(p, 'These brackets are empty; write what belongs in them.');
  return node(p, from, { kind: 'vector', operation, args: [argument] });
}
