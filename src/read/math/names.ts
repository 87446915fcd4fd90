/** A name in a formula: symbol, constant, unspecified function, or special function written with a letter. */
import { BOLD, build, type Expression } from '../../expression/index.ts';
import { lookupLatex } from '../../functions/index.ts';
import { isName, nameText } from './facts.ts';
import { resolve, wordName } from './functionNames.ts';
import { exponentOf, smallText } from './grammar.ts';
import { applyKnown, bracketArguments, ofMatrix } from './calls.ts';
import { indexExpression, letterFunction } from './letterFunctions.ts';
import { raisedFunction } from './raisedFunctions.ts';
import { fail, isMark, next, node, peek, type State, within } from './state.ts';
import { GREEK } from './unicode.ts';
import { type Token, Unreadable } from './tokens.ts';

/** Subscript text in canonical form: one character or command bare, more in braces, no spaces. */
export function subscript(p: State): string {
  const t = peek(p);
  if (t.kind === 'sub') {
    next(p);
    return braced(t.text);
  }
  next(p);
  const first = peek(p);
  if (first.kind === 'end') fail(p, 'The subscript is missing; add it after the underscore.', t);
  if (first.kind !== 'open') {
    next(p);
    if (first.kind === 'digit' && p.options.notation === 'plain') {
      let digits = first.text;
      while (peek(p).kind === 'digit' && !peek(p).spaced) digits += next(p).text;
      return braced(digits);
    }
    return braced(written(first));
  }
  const close = p.match[p.at] ?? -1;
  const parts: string[] = [];
  for (p.at += 1; p.at < close; p.at += 1) {
    const t0 = p.tokens[p.at] as Token;
    const before = parts[parts.length - 1];
    const value = written(t0);
    parts.push(before !== undefined && /\\[A-Za-z]+$/.test(before) && /^[A-Za-z]/.test(value) ? ` ${value}` : value);
  }
  p.at = close + 1;
  return braced(parts.join(''));
}
const written = (t: Token): string => (t.kind === 'command' ? `\\${t.text === 'varepsilon' ? 'epsilon' : t.text}` : t.kind === 'space' ? '' : t.text.replace(/^\\(?=[{}])/, ''));
export const braced = (s: string): string => (s.length === 1 || /^\\[A-Za-z]+$/.test(s) ? s : `{${s}}`);

/** A name with its decorations: subscripts, primes, what stands in the brackets behind it. */
export function name(p: State): Expression {
  const from = p.at;
  const t = next(p);
  let base = nameText(t);
  if (t.kind === 'word') {
    const plain = plainWord(p, from, t);
    if (typeof plain !== 'string') return plain;
    base = plain;
  } else if (t.kind === 'letter') {
    const run = functionRun(p, from);
    if (run) return run;
  }
  if (isOrder(p, base, t)) return order(p, from, base === 'o');
  // A difference is one quantity: `\Delta t`, `\Delta x^2` is (\Delta x)^2.
  if (base === '\\Delta' && isName(peek(p)) && !p.options.symbols.has(base)) base = `${base} ${nameText(next(p))}`;
  let index = '';
  let primes = 0;
  /** A superscript that is a label: `E^{\\text{mix}}`, `x^*`. */
  let label = '';
  /** An exponent that stands before the subscript: `x^2_1`. */
  let early: { readonly at: number; readonly end: number } | null = null;
  for (;;) {
    const mark = peek(p);
    if (mark.kind === 'sub' || isMark(mark, '_')) {
      if (index !== '') fail(p, 'Two subscripts stand side by side; put braces around the inner name.');
      index = subscript(p);
    } else if (isMark(mark, "'")) {
      next(p);
      primes += 1;
    } else if (isMark(mark, '^') && label === '' && labelBehind(p) !== null) {
      label = labelBehind(p)?.text ?? '';
      p.at = labelBehind(p)?.end ?? p.at;
    } else if (isMark(mark, '^') && early === null && index === '' && subscriptBehind(p) > 0 && derivativeExponent(p) === null && !isPrimeExponent(p)) {
      const behind = subscriptBehind(p);
      early = { at: p.at, end: behind };
      p.at = behind;
    } else if (isMark(mark, '^') && base === 'H' && hankelKind(p) !== null) {
      const kind = hankelKind(p);
      p.at = (p.match[p.at + 1] ?? p.at) + 1;
      if (isMark(peek(p), '_')) index = subscript(p);
      const known = kind === null ? null : lookupLatex(`\\operatorname{H}^{(${kind})}`, { indices: 1, place: 'subscript', arguments: 1 });
      if (!known || index === '' || !isMark(peek(p), '(', '[')) fail(p, 'A Hankel function needs an order and an argument; write H^{(1)}_{\\nu}(x).', t);
      return node(p, from, { kind: 'call', function: known.id, args: [indexExpression(index), ...bracketArguments(p)], written: 'H' });
    } else if (isMark(mark, '^') && (isPrimeExponent(p) || (derivativeExponent(p) !== null && looksLikeFunction(p, base, index, primes)))) {
      const count = derivativeExponent(p);
      if (count === null) {
        const close = p.match[p.at + 1] ?? -1;
        primes += p.tokens.slice(p.at, close > 0 ? close : p.at + 2).filter((x) => x.text === 'prime' || x.text === "'").length;
        p.at = close > 0 ? close + 1 : p.at + 2;
      } else {
        primes += count;
        p.at = (p.match[p.at + 1] ?? p.at) + 1;
      }
    } else break;
  }
  const full = `${index === '' ? base : `${base}_${index}`}${label}`;
  if (early) {
    const behind = p.at;
    const symbol = node(p, from, { kind: 'symbol', name: full });
    const { at, end } = early;
    p.at = at + 1;
    const exponent = within(p, end, () => exponentOf(p));
    p.at = behind;
    return node(p, from, { kind: 'power', base: symbol, exponent });
  }
  if (isMark(peek(p), '^') && isSymbolicOrder(p) && looksLikeFunction(p, base, index, primes)) fail(p, `The derivative of ${full} has a symbolic order; write a number for the order.`, t);
  const constant = index === '' && primes === 0 && label === '' && !p.options.symbols.has(full) ? constantOf(p, t, base) : null;
  if (constant) return node(p, from, constant);
  if (index !== '' && primes === 0 && /^\\gamma_(?:E|\{EM\}|\{\\mathrm\{E\}\})$/.test(full) && !p.options.symbols.has(full)) return node(p, from, build.constant('eulerGamma'));
  const special = label !== '' || p.options.symbols.has(full) || p.options.functions.has(full) ? null : letterFunction(p, from, base, index, primes);
  if (special) return special;
  const raised = label === '' && primes === 0 ? raisedFunction(p, from, base, index, () => applies(p, base, index, 0)) : null;
  if (raised) return raised;
  const bracket = peek(p);
  if (isMark(bracket, '(', '[') && applies(p, base, index, primes)) {
    const args = bracketArguments(p);
    return node(p, from, { kind: 'apply', name: full, args, derivatives: args.map((_, i) => (i === 0 ? primes : 0)) });
  }
  return node(p, from, { kind: 'symbol', name: primes === 0 ? full : `${base}${"'".repeat(primes)}${index === '' ? '' : `_${index}`}${label}` });
}

/** `^{(4)}` behind a function's name; the number of differentiations, or null. */
function derivativeExponent(p: State): number | null {
  const open = p.at + 1;
  if (p.tokens[open]?.kind !== 'open' || !isMark(p.tokens[open + 1], '(')) return null;
  const close = p.match[open + 1] ?? -1;
  if (close < 0 || p.match[open] !== close + 1) return null;
  const inner = p.tokens.slice(open + 2, close);
  return inner.length > 0 && inner.length < 4 && inner.every((t) => t.kind === 'digit') ? Number(inner.map((t) => t.text).join('')) : null;
}
/** The label that stands as a superscript here (`^*`, `^\\dagger`, `^{\\text{mix}}`), its spelling and the token behind it; null for a real exponent. */
function labelBehind(p: State): { readonly text: string; readonly end: number } | null {
  const open = p.at + 1;
  const close = p.match[open] ?? -1;
  const inner = close > open ? p.tokens.slice(open + 1, close) : [p.tokens[open]];
  const [only] = inner;
  if (inner.length !== 1 || !only) return null;
  const end = close > open ? close + 1 : open + 1;
  if (only.kind === 'text') return { text: `^{\\text{${only.text.trim()}}}`, end };
  if (isMark(only, '*')) return { text: '^*', end };
  return only.kind === 'command' && /^(?:ast|star|dagger|ddagger|dag|sharp|flat|parallel|perp)$/.test(only.text) ? { text: `^\\${only.text}`, end } : null;
}

/** Token of the underscore behind the exponent that starts here, or -1. */
function subscriptBehind(p: State): number {
  const close = p.match[p.at + 1] ?? -1;
  const behind = close > p.at ? close + 1 : p.at + 2;
  return behind < p.end && isMark(p.tokens[behind], '_') ? behind : -1;
}
const hankelKind = (p: State): number | null => {
  const kind = derivativeExponent(p);
  return kind === 1 || kind === 2 ? kind : null;
};

/** `f^{(n)}(x)`: an exponent in brackets that is no number, before an argument. */
function isSymbolicOrder(p: State): boolean {
  const open = p.at + 1;
  const close = p.match[open] ?? -1;
  return p.tokens[open]?.kind === 'open' && isMark(p.tokens[open + 1], '(') && p.match[open + 1] === close - 1 && isMark(p.tokens[close + 1], '(');
}
const isPrimeExponent = (p: State): boolean => {
  const first = p.tokens[p.at + 1];
  return first?.text === 'prime' || (first?.kind === 'open' && p.tokens[p.at + 2]?.text === 'prime');
};

/** Whether `^{(n)}` behind this name counts derivatives: it does for everything that is a function here. */
function looksLikeFunction(p: State, base: string, index: string, primes: number): boolean {
  const full = index === '' ? base : `${base}_${index}`;
  return primes > 0 || p.facts.surelyFunctions.has(full) || p.options.functions.has(full) || /^(?:[fghuyFGHUY]|\\psi|\\phi|\\varphi|\\zeta|\\Gamma)$/.test(base);
}

/**
 * Whether the bracket behind a name holds arguments. A name with a prime or a comma in its brackets is a function;
 * f, g, h, u, y and their like are functions unless they also stand alone or multiply themselves; any other name is a
 * function only if its brackets hold a single symbol or number (`x(\epsilon)`, `T(\theta_0)`, `L(0)`), so that `n(n-1)` and `a(1+x)` stay products.
 */
function applies(p: State, base: string, index: string, primes: number): boolean {
  const full = index === '' ? base : `${base}_${index}`;
  if (p.options.symbols.has(full)) return false;
  if (primes > 0 || p.options.functions.has(full) || p.facts.surelyFunctions.has(full)) return true;
  const open = p.at;
  const close = p.match[open] ?? -1;
  if (close < 0) return false;
  const inner = p.tokens.slice(open + 1, close).filter((t) => t.kind !== 'space');
  const itself = inner.some((t) => isName(t) && nameText(t) === base);
  const single = inner.length > 0 && (inner.every((t) => t.kind === 'digit') || (isName(inner[0]) && !inner.some((t) => (t.kind === 'mark' && !'_\''.includes(t.text)) || t.kind === 'command' && !GREEK.has(t.text)) && names(inner) === 1));
  if (itself) return false;
  if (/^(?:[VWT]|\\rho)$/.test(base) && inner.some((t) => t.kind === 'command' && BOLD.has(t.text))) return !p.facts.bare.has(full);
  if (/^(?:[fFguyhGHUYS]|\\phi|\\varphi|\\psi|\\Phi|\\Psi)$/.test(base)) return !p.facts.bare.has(full) || /^[fuy]$/.test(base);
  return single && !p.facts.bare.has(full);
}
/** Names of a token run, subscripts not counted. */
function names(inner: readonly Token[]): number {
  let count = 0;
  let depth = 0;
  inner.forEach((t, i) => {
    if (t.kind === 'open') depth += 1;
    else if (t.kind === 'close') depth -= 1;
    else if (depth === 0 && isName(t) && inner[i - 1]?.text !== '_') count += 1;
  });
  return count;
}

function constantOf(p: State, t: Token, base: string): Expression | null {
  const exact = p.options.exact;
  if (base === '\\pi') return isMark(peek(p), '(') && p.facts.bare.has('\\pi') === false && applies(p, base, '', 0) ? null : build.constant('pi');
  if (base === 'e') return t.upright || exact || p.facts.eulerNumber ? build.constant('e') : null;
  if (base === 'i' || base === 'j') {
    if (t.upright && base === 'i') return build.constant('i');
    return (exact && base === 'i') || (p.facts.imaginary === base && !p.bound.includes(base) && !(isMark(peek(p), '(') && applies(p, base, '', 0))) ? build.constant('i') : null;
  }
  if (base === 'I' && exact) return build.constant('i');
  return null;
}

const isOrder = (p: State, base: string, t: Token): boolean => (base === 'O' || base === 'o') && (isMark(peek(p), '(', '[', '\\{') || (t.kind === 'word' && peek(p).kind === 'open')) && !p.options.symbols.has(base);

/** O(...) or o(...), the letter already read. */
export function order(p: State, from: number, little: boolean): Expression {
  const args = peek(p).kind === 'open' ? [p.grammar.texArgument(p)] : bracketArguments(p);
  const [argument] = args;
  if (!argument) return fail(p, 'The order term is empty; write what it is of, for example O(x^3).');
  // O(x^2, y^2): the sum of the sizes.
  return node(p, from, { kind: 'order', little, argument: args.length === 1 ? argument : { kind: 'sum', terms: args } });
}

/** Functions that take an argument without brackets also where they are written as plain letters. */
const FAMILIAR = /^(?:sin|cos|tan|cot|sec|csc|sinh|cosh|tanh|coth|sech|csch|exp|log|ln|a(?:rc)?(?:sin|cos|tan|cot)|a(?:r|rc)?(?:sinh|cosh|tanh)|sqrt|cbrt|erf|erfc)$/;
/** Letters of LaTeX text without backslash that spell a function before a bracket or argument: `cos(x)`, `exp(x)`, `sin x`. */
function functionRun(p: State, from: number): Expression | null {
  let word = p.tokens[from]?.text ?? '';
  let k = from + 1;
  const before = p.tokens[from - 1];
  if (before?.kind === 'letter' && !p.tokens[from]?.spaced) return null;
  while (k < p.end && p.tokens[k]?.kind === 'letter' && !p.tokens[k]?.spaced) {
    word += p.tokens[k]?.text ?? '';
    k += 1;
  }
  if (word.length < 2) return null;
  for (let digits = k; p.tokens[digits]?.kind === 'digit' && digits < k + 2; digits += 1) {
    const longer = word + p.tokens.slice(k, digits + 1).map((t) => t.text).join('');
    if (wordName(longer) && isMark(p.tokens[digits + 1], '(')) {
      word = longer;
      k = digits + 1;
      break;
    }
  }
  const known = wordName(word);
  if (!known) return null;
  const after = p.tokens[k];
  const familiar = FAMILIAR.test(word);
  // Letters that spell a function and have no argument are never meant as a product.
  if (familiar && (after === undefined || k >= p.end || after.kind === 'close' || after.kind === 'end' || isMark(after, ')', ']', '+', '-', '=', ',')) && !p.options.symbols.has(word)) fail(p, `The argument of ${word} is missing; write it, for example ${word}(x).`, p.tokens[from]);
  if (!(after && (isMark(after, '(') || (familiar && (after.spaced || isMark(after, '^', '[') || after.kind === 'open' || after.kind === 'super'))))) return null;
  p.at = k;
  return applyKnown(p, from, known);
}

const CONSTANT_WORDS: Readonly<Record<string, Expression>> = { pi: build.constant('pi'), inf: build.constant('infinity'), infinity: build.constant('infinity'), infty: build.constant('infinity'), oo: build.constant('infinity'), Inf: build.constant('infinity') };

/** An identifier of plain notation or an upright name: a constant, a function with its argument, or the canonical text of a symbol. */
function plainWord(p: State, from: number, t: Token): Expression | string {
  const word = t.text;
  if (word === 'e') return 'e';
  if (word.length === 1) return word;
  const constant = CONSTANT_WORDS[word];
  if (constant && !p.options.symbols.has(word) && !(t.upright && word !== 'pi')) return node(p, from, { ...constant });
  if (word === 'Pi' && !isMark(peek(p), '(')) return node(p, from, build.constant('pi'));
  if (p.options.symbols.has(word)) return word;
  const logarithm = /^(?:ln|LN)_?(2|10)$/.exec(word)?.[1];
  if (logarithm !== undefined && !isMark(peek(p), '(')) return node(p, from, build.call('log', build.number(Number(logarithm))));
  const known = wordName(word);
  if (known && canTakeArgument(p, word, t)) return applyKnown(p, from, known);
  if (t.upright && /^(?:[Tt]r|trace|det)$/.test(word)) return ofMatrix(p, from, word === 'det' ? 'determinant' : 'trace');
  if (t.upright && !known && isMark(peek(p), '(') && !p.options.functions.has(word)) {
    throw new Unreadable(`The function ${word} is not known; write it with known functions.`, { start: t.start, end: t.end }, 'unknown-function');
  }
  const product = lettersApart(p, from, t);
  if (product) return product;
  const [head = '', ...rest] = word.split('_');
  const greek = /^([A-Za-z]+?)(\d*)$/.exec(head);
  const base = GREEK.has(head) ? `\\${head === 'varepsilon' ? 'epsilon' : head}` : greek && GREEK.has(greek[1] ?? '') && greek[2] ? `\\${greek[1]}_${braced(greek[2])}` : head === 'hbar' ? '\\hbar' : head;
  if (rest.length > 0) {
    const tail = rest.join('_');
    return `${base}_${braced(GREEK.has(tail) ? `\\${tail}` : tail)}`;
  }
  return base;
}

/** `nx` in a text in which n and x stand alone is their product; `sinx` there is sin x. */
function lettersApart(p: State, from: number, t: Token): Expression | null {
  if (t.upright || !/^[A-Za-z]{2,6}$/.test(t.text) || GREEK.has(t.text) || t.text === 'hbar' || isMark(peek(p), '_', "'")) return null;
  const glued = /^(a?(?:rc)?(?:sin|cos|tan)h?|exp|log|ln)([A-Za-z])$/.exec(t.text);
  const inner = glued?.[2];
  const known = glued ? wordName(glued[1] ?? '') : null;
  if (known && inner !== undefined && p.facts.alone.has(inner)) {
    const argument: Expression = { kind: 'symbol', name: inner, span: { start: t.end - 1, end: t.end } };
    return { kind: 'call', function: known.plain === 'ln' ? 'log' : (resolve(known, { index: null, primes: 0, inverse: false, arguments: 1 })?.description.id ?? known.written), args: [argument], written: known.written, span: { start: t.start, end: t.end } };
  }
  const letters = [...t.text];
  if (isMark(peek(p), '(') || !letters.every((letter) => p.facts.alone.has(letter))) return null;
  const factors = letters.map((letter, i): Expression => ({ kind: 'symbol', name: letter, span: { start: t.start + i, end: t.start + i + 1 } }));
  const last = factors[factors.length - 1] as Expression;
  // A power behind the run belongs to its last letter.
  if (isMark(peek(p), '^', '**')) {
    next(p);
    const exponent = exponentOf(p);
    factors[factors.length - 1] = { kind: 'power', base: last, exponent, span: { start: last.span?.start ?? t.start, end: p.tokens[p.at - 1]?.end ?? t.end } };
  } else if (peek(p).kind === 'super') {
    const exponent = smallText(next(p));
    factors[factors.length - 1] = { kind: 'power', base: last, exponent, span: { start: last.span?.start ?? t.start, end: p.tokens[p.at - 1]?.end ?? t.end } };
  }
  return node(p, from, { kind: 'product', factors });
}

/** Upright names and familiar functions take a bare argument; other plain words only one in brackets, so that `gamma x` stays a product. */
function canTakeArgument(p: State, word: string, t: Token): boolean {
  let k = p.at;
  while (isMark(p.tokens[k], '^', '_', "'")) {
    if (p.tokens[k]?.text === "'") k += 1;
    else {
      const close = p.match[k + 1] ?? -1;
      k = close > k ? close + 1 : k + 2;
      while (p.tokens[k]?.kind === 'digit' && p.tokens[k - 1]?.kind === 'digit') k += 1;
    }
  }
  if (isMark(p.tokens[k], '(', '[', '\\{')) return true;
  if (!t.upright && !FAMILIAR.test(word)) return false;
  return k > p.at || p.grammar.startsFactor(p) || peek(p).kind === 'super' || peek(p).kind === 'space' || isMark(peek(p), '-');
}
