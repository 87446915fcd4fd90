/** The smallest pieces: numbers, brackets, bars, commands with arguments. */
import { BOLD, build, type Expression } from '../../expression/index.ts';
import { bars, bracket, cases, fenced, group } from './brackets.ts';
import { bracketArguments, applyKnown, ofMatrix, opensBracket } from './calls.ts';
import { derivative, indexed, integral, limit, shortDerivative } from './calculus.ts';
import { evaluated } from './evaluation.ts';
import { isName } from './facts.ts';
import { commandName, wordName } from './functionNames.ts';
import { numberOf, relationOf } from './grammar.ts';
import { indexExpression } from './letterFunctions.ts';
import { name, order } from './names.ts';
import { deeper, fail, isMark, named, next, node, peek, type State, within } from './state.ts';
import { type Token, Unreadable } from './tokens.ts';
import { vectorFunction } from './vectorFunctions.ts';
import { between } from './vectors.ts';

const DOTS = new Set('dots ldots cdots dotsb dotsc dotsi dotsm dotso vdots ddots'.split(' '));
const ACCENTS = new Set('hat bar tilde dot ddot dddot check breve widehat widetilde overline mathring acute grave'.split(' '));
const LETTERFORMS = new Set('mathcal mathscr mathfrak mathbb'.split(' '));
const SYMBOLS = new Set('hbar ell nabla imath jmath wp Re Im aleph prime dagger star circ degree square triangle'.split(' '));
const ATOM_COMMANDS = new Set(['frac', 'dfrac', 'tfrac', 'cfrac', 'nicefrac', 'sfrac', 'sqrt', 'surd', 'binom', 'dbinom', 'tbinom', 'infty', 'sum', 'prod', 'int', 'lim', 'order', 'e', 'mathrmd', 'lvert', 'lVert', 'Vert', 'langle', 'lfloor', 'lceil', 'lparen', 'lbrack', 'lbrace', 'begin', 'partial', 'dv', 'pdv', 'abs', 'norm', 'intop', 'smallint', 'oint', 'iint', 'iiint', 'root', 'Gamma']);

export function startsFactor(p: State): boolean {
  const t = peek(p);
  switch (t.kind) {
    case 'letter':
    case 'word':
    case 'digit':
      return true;
    case 'open':
      return true;
    case 'text':
      return isTextName(p);
    case 'mark':
      if (t.text === '|') return p.bars === 0 || opensHere(p);
      if (t.text === '.') return startsDecimal(p);
      return opensBracket(t) || t.text === 'l|' || t.text === 'left.' || t.text === '...' || t.text === 'begin{cases}' || t.text === 'begin{table}';
    case 'command':
      if (p.differentials.has(p.at)) return true;
      return isName(t) || DOTS.has(t.text) || ACCENTS.has(t.text) || BOLD.has(t.text) || LETTERFORMS.has(t.text) || SYMBOLS.has(t.text) || ATOM_COMMANDS.has(t.text) || (relationOf(t) === null && !NOT_FACTORS.has(t.text));
    default:
      return false;
  }
}
/** Commands that end or separate what is being read. */
const NOT_FACTORS = new Set('cdot times ast div pm mp bullet star rvert rVert rangle rfloor rceil rparen rbrack rbrace implies iff Rightarrow Leftrightarrow Longrightarrow in notin forall exists therefore because land lor wedge vee mid colon semicolon not over choose atop end quad qquad hline cr slash vert middle to where qedhere dotproduct cross leftarrow subset subseteq cup cap setminus'.split(' '));

/** `\text{SVF} = ...`: words before a relation sign at the start of a formula are a name. */
export function isTextName(p: State): boolean {
  const after = peek(p, 1);
  return peek(p).kind === 'text' && /^\s*[\p{L}][\p{L}\d _-]{0,30}\s*$/u.test(peek(p).text) && relationOf(after) !== null && (p.at === 0 || p.tokens[p.at - 1]?.kind === 'space');
}

/** `.5`: a point before a digit, not behind something it could be a full stop of. */
function startsDecimal(p: State): boolean {
  if (peek(p, 1).kind !== 'digit' || peek(p, 1).spaced) return false;
  const before = p.tokens[p.at - 1];
  return before === undefined || before.kind === 'mark' || before.kind === 'open' || (peek(p).spaced && !(before.kind === 'digit' && p.facts.dotProducts));
}

/** A bar inside bars opens a new pair only right behind an operator or bracket. */
function opensHere(p: State): boolean {
  const before = p.tokens[p.at - 1];
  return before !== undefined && (isMark(before, '+', '-', '*', '/', '(', '[', '=', '<', '>', ',', '|') || before.kind === 'open');
}

export function atom(p: State): Expression {
  const from = p.at;
  const t = peek(p);
  if (p.differentials.has(from)) {
    // A differential inside the integrand (`\frac{dt}{\sqrt{t}}`) counts as the factor 1.
    skipDifferential(p);
    return node(p, from, build.number(1));
  }
  switch (t.kind) {
    case 'digit':
      return number(p);
    case 'letter':
    case 'word':
      return name(p);
    case 'open':
      return group(p);
    case 'text':
      if (isTextName(p)) return node(p, from, { kind: 'symbol', name: `\\text{${next(p).text.trim()}}` });
      break;
    case 'mark':
      if (t.text === '.') return number(p);
      if (t.text === '...') {
        next(p);
        return node(p, from, { kind: 'dots' });
      }
      if (opensBracket(t)) return bracket(p);
      if (t.text === '|' || t.text === 'l|') return bars(p);
      if (t.text === 'begin{cases}') return cases(p);
      if (t.text === 'begin{table}') fail(p, 'Matrices and tables are not read as one quantity; select one entry.');
      if (t.text === 'left.') return evaluated(p);
      break;
    case 'command':
      return command(p);
    default:
  }
  return fail(p, t.kind === 'end' ? 'The formula ends too early; add what is missing.' : `${named(t).replace(/^./, (c) => c.toUpperCase())} cannot stand here; remove it or add what belongs before it.`);
}

function skipDifferential(p: State): void {
  next(p);
  if (isMark(peek(p), '^')) {
    next(p);
    p.grammar.texArgument(p);
  }
  p.grammar.atom(p);
}

function number(p: State): Expression {
  const from = p.at;
  let digits = '';
  const run = (): void => {
    while (peek(p).kind === 'digit' && (digits === '' || !peek(p).spaced || p.tokens[p.at - 1]?.text === '.')) {
      digits += next(p).text;
      // Thousands: `1{,}000`, `1\,000`.
      if (peek(p).kind === 'open' && isMark(peek(p, 1), ',') && peek(p, 2).kind === 'close' && peek(p, 3).kind === 'digit') p.at += 3;
      if (peek(p).kind === 'space' && peek(p).text === ',' && peek(p, 1).kind === 'digit' && peek(p, 2).kind === 'digit' && peek(p, 3).kind === 'digit') p.at += 1;
    }
  };
  run();
  if (isMark(peek(p), '.') && (digits === '' || !peek(p).spaced) && !(p.facts.dotProducts && digits !== '') && (peek(p, 1).kind === 'digit' ? !peek(p, 1).spaced : digits !== '' && decimalPointEnds(p))) {
    digits += next(p).text;
    run();
  }
  if (p.options.notation === 'plain' && (peek(p).kind === 'word' || peek(p).kind === 'letter') && !peek(p).spaced) {
    const e = /^[eE](\d*)$/.exec(peek(p).text);
    const signAt = e?.[1] === '' ? 1 : 0;
    if (e && e[1] !== '') {
      next(p);
      return scaled(p, from, digits, Number(e[1]), `${digits}e${e[1]}`);
    }
    if (e && signAt === 1 && isMark(peek(p, 1), '+', '-') && !peek(p, 1).spaced && peek(p, 2).kind === 'digit' && !peek(p, 2).spaced) {
      next(p);
      const sign = next(p).text;
      let power = '';
      while (peek(p).kind === 'digit' && !peek(p).spaced) power += next(p).text;
      return scaled(p, from, digits, Number(power) * (sign === '-' ? -1 : 1), `${digits}e${sign}${power}`);
    }
    if (e && e[1] === '' && peek(p, 1).kind === 'digit' && !peek(p, 1).spaced) {
      next(p);
      let power = '';
      while (peek(p).kind === 'digit' && !peek(p).spaced) power += next(p).text;
      return scaled(p, from, digits, Number(power), `${digits}e${power}`);
    }
  }
  return node(p, from, numberOf(digits));
}

function scaled(p: State, from: number, digits: string, exponent: number, written: string): Expression {
  if (Math.abs(exponent) > 10000) fail(p, 'This number is too large or too small; write it as a power of ten with a smaller exponent.', p.tokens[from]);
  const mantissa = numberOf(digits);
  if (mantissa.kind !== 'number') return mantissa;
  const shift = 10n ** BigInt(Math.abs(exponent));
  const { num, den } = mantissa.value;
  const value = exponent >= 0 ? build.number({ num: num * shift, den }) : build.number({ num, den: den * shift });
  return node(p, from, { ...reduceNumber(value), written } as Expression);
}
function reduceNumber(e: Expression): Expression {
  if (e.kind !== 'number') return e;
  let a = e.value.num;
  let b = e.value.den;
  while (b !== 0n) [a, b] = [b, a % b];
  return a === 0n || a === 1n ? (a === 0n ? build.number(0) : e) : build.number({ num: e.value.num / a, den: e.value.den / a });
}

/** `21.` is a number where an operator or a factor follows; at the end of a formula the full stop is punctuation. */
function decimalPointEnds(p: State): boolean {
  const after = peek(p, 1);
  return p.options.notation === 'plain' && !after.spaced && after.kind === 'mark' && /^[*/+)-]/.test(after.text);
}

export function texArgument(p: State): Expression {
  return deeper(p, () => {
    while (peek(p).kind === 'space') next(p);
    const from = p.at;
    const t = peek(p);
    if (t.kind === 'digit') {
      next(p);
      return node(p, from, numberOf(t.text));
    }
    if (t.kind === 'open') return group(p);
    if (t.kind === 'letter' || (t.kind === 'command' && isName(t))) return singleName(p);
    if (t.kind === 'command' || t.kind === 'word' || isMark(t, '(', '|')) return atom(p);
    if (isMark(t, '*') || isMark(t, "'")) {
      next(p);
      return node(p, from, { kind: 'symbol', name: t.text });
    }
    return fail(p, t.kind === 'end' ? 'The formula ends where an argument is missing; add it.' : `An argument is missing before ${named(t)}; add it.`, t.kind === 'end' ? (p.tokens[from - 1] as Token) : t);
  });
}

/** One letter as an argument of TeX: nothing behind it belongs to it. */
function singleName(p: State): Expression {
  return within(p, p.at + 1, () => name(p));
}

function command(p: State): Expression {
  const from = p.at;
  const t = peek(p);
  const c = t.text;
  if (isName(t)) return name(p);
  if (DOTS.has(c)) {
    next(p);
    return node(p, from, { kind: 'dots' });
  }
  switch (c) {
    case 'frac':
    case 'dfrac':
    case 'tfrac':
    case 'cfrac':
    case 'nicefrac':
    case 'sfrac': {
      const operator = derivative(p);
      if (operator) return operator;
      next(p);
      const numerator = texArgument(p);
      const denominator = texArgument(p);
      return node(p, from, { kind: 'quotient', numerator, denominator });
    }
    case 'sqrt':
    case 'surd': {
      next(p);
      if (isMark(peek(p), '[')) return rootWithDegree(p, from);
      const radicand = texArgument(p);
      return node(p, from, { kind: 'power', base: radicand, exponent: build.number({ num: 1n, den: 2n }) });
    }
    case 'binom':
    case 'dbinom':
    case 'tbinom': {
      next(p);
      const above = texArgument(p);
      const below = texArgument(p);
      return node(p, from, { kind: 'call', function: 'binomial', args: [above, below], written: '\\binom' });
    }
    case 'infty':
      next(p);
      return node(p, from, build.constant('infinity'));
    case 'e':
      next(p);
      return node(p, from, build.constant('e'));
    case 'sum':
    case 'prod':
      return indexed(p);
    case 'int':
    case 'intop':
    case 'smallint':
      return integral(p);
    case 'lim':
      return limit(p);
    case 'dv':
    case 'pdv':
    case 'odv':
      return shortDerivative(p);
    case 'norm': {
      next(p);
      const value = texArgument(p);
      return node(p, from, { kind: 'vector', operation: 'norm', args: [value] });
    }
    case 'order':
      next(p);
      return order(p, from, false);
    case 'abs': {
      next(p);
      const value = opensBracket(peek(p)) ? bracket(p) : texArgument(p);
      return node(p, from, { kind: 'call', function: 'abs', args: [value], written: '\\abs' });
    }
    case 'lvert':
      return fenced(p, 'rvert', (value) => between(value, '|'));
    case 'lVert':
      return fenced(p, 'rVert', (value) => ({ kind: 'vector', operation: 'norm', args: [value] }));
    case 'Vert':
      return doubleBars(p);
    case 'det':
      next(p);
      return ofMatrix(p, from, 'determinant');
    case 'lfloor':
      return fenced(p, 'rfloor', (value) => ({ kind: 'call', function: 'floor', args: [value] }));
    case 'lceil':
      return fenced(p, 'rceil', (value) => ({ kind: 'call', function: 'ceil', args: [value] }));
    case 'langle':
      return fenced(p, 'rangle', (value) => value);
    default:
  }
  if (ACCENTS.has(c) || BOLD.has(c) || LETTERFORMS.has(c)) return decorated(p);
  if (c === 'Re' || c === 'Im') {
    next(p);
    const known = wordName(c);
    if (known) return applyKnown(p, from, known);
  }
  if (SYMBOLS.has(c)) {
    if (c === 'nabla') fail(p, 'Vector derivatives are not read; write the components.');
    if (c === 'prime') fail(p, 'A prime stands here without a name before it; write the name.');
    return plainSymbol(p);
  }
  const known = commandName(c);
  if (known) {
    next(p);
    return applyKnown(p, from, known);
  }
  if (c === 'partial') fail(p, 'A derivative sign stands alone here; write it as \\frac{\\partial}{\\partial x}.');
  throw new Unreadable(`The command \\${c} is not known; define it with \\newcommand or write it with known functions.`, { start: t.start, end: t.end }, 'unknown-function');
}

/** A command that is a symbol of its own, with an optional subscript: `\hbar`, `\ell_0`. */
function plainSymbol(p: State): Expression {
  const from = p.at;
  const t = next(p);
  const base = `\\${t.text}`;
  return withSubscript(p, from, base);
}

function withSubscript(p: State, from: number, base: string): Expression {
  if (!(isMark(peek(p), '_') || peek(p).kind === 'sub')) return node(p, from, { kind: 'symbol', name: base });
  const start = peek(p).start;
  if (peek(p).kind === 'sub') {
    const sub = next(p).text;
    return node(p, from, { kind: 'symbol', name: `${base}_${sub.length === 1 ? sub : `{${sub}}`}` });
  }
  void start;
  next(p);
  const argument = p.at;
  const close = peek(p).kind === 'open' ? (p.match[p.at] ?? -1) : -1;
  const tokens = close > 0 ? p.tokens.slice(argument + 1, close) : [peek(p)];
  p.at = close > 0 ? close + 1 : argument + 1;
  const text = tokens.map((x) => (x.kind === 'command' ? `\\${x.text}` : x.text)).join('');
  return node(p, from, { kind: 'symbol', name: `${base}_${text.length === 1 || /^\\[A-Za-z]+$/.test(text) ? text : `{${text}}`}` });
}

/** `\hat{x}`, `\vec r`, `\mathcal{O}(x)`. */
function decorated(p: State): Expression {
  const from = p.at;
  const t = next(p);
  const open = peek(p).kind === 'open';
  const close = open ? (p.match[p.at] ?? -1) : p.at;
  const inner = open ? p.tokens.slice(p.at + 1, close) : [peek(p)];
  const content = contentOf(p, inner, p.at + (open ? 1 : 0));
  p.at = close + 1;
  if (LETTERFORMS.has(t.text) && /^[Oo]$/.test(content) && (opensBracket(peek(p)) || peek(p).kind === 'open')) return order(p, from, content === 'o');
  if (content === '') fail(p, `\\${t.text} has no argument yet; add it in braces.`, t);
  // `\vec r\,'`: the prime belongs to the name.
  let behind = p.at;
  while (p.tokens[behind]?.kind === 'space') behind += 1;
  let primes = 0;
  for (; isMark(p.tokens[behind], "'") && behind < p.end; behind += 1) primes += 1;
  if (primes > 0) p.at = behind;
  const value = withSubscript(p, from, `\\${t.text}{${content}}${"'".repeat(primes)}`);
  const bold = BOLD.has(t.text) || inner.some((x) => x.kind === 'command' && BOLD.has(x.text));
  const struve = /^\\mathbf\{([HL])\}_(\d|\\[a-z]+|n|\{[^{}]*\})$/.exec(value.kind === 'symbol' ? value.name : '');
  if (struve && primes === 0 && isMark(peek(p), '(') && !bracketHoldsBold(p)) {
    const index = (struve[2] ?? '').replace(/^\{|\}$/g, '');
    return node(p, from, { kind: 'call', function: `struve${struve[1] ?? 'H'}`, args: [indexExpression(index), ...bracketArguments(p)], written: `\\mathbf{${struve[1] ?? 'H'}}` });
  }
  if (bold && value.kind === 'symbol') {
    if (/^\d+$/.test(content)) return node(p, from, build.number(BigInt(content)));
    return vectorFunction(p, from, value.name) ?? node(p, from, { kind: 'vector', operation: 'symbol', name: value.name, args: [] });
  }
  return value;
}

/** Vectors or matrices in the bracket that opens here: what stands before it is no Struve function then. */
function bracketHoldsBold(p: State): boolean {
  return p.tokens.slice(p.at, Math.max(p.at, p.match[p.at] ?? p.at)).some((t) => t.kind === 'command' && BOLD.has(t.text));
}

/** The spelling of the tokens in an accent's argument; letters behind a command stay apart from it: `\mathbf{r}` for `\mathbf r`. */
function contentOf(p: State, inner: readonly Token[], first: number): string {
  return inner
    .map((x, k) => {
      if (x.kind === 'command') return `\\${x.text}`;
      const before = inner[k - 1];
      const argument = before?.kind === 'command' && (BOLD.has(before.text) || ACCENTS.has(before.text)) && p.tokens[first + k]?.kind === 'letter';
      return argument ? `{${x.text}}` : x.text;
    })
    .join('');
}

/** `\|v\|`: the same sign opens and closes. */
function doubleBars(p: State): Expression {
  const from = p.at;
  let close = from + 1;
  while (close < p.end && !(p.tokens[close]?.kind === 'command' && p.tokens[close]?.text === 'Vert')) close = Math.max(close + 1, (p.match[close] ?? -1) + 1);
  if (close >= p.end) fail(p, 'The double bar opened here is never closed; close it with \\|.');
  next(p);
  const value = within(p, close, () => p.grammar.sum(p));
  if (p.at !== close) fail(p, `${named(peek(p))} is not understood between double bars; remove it or add an operator.`);
  next(p);
  return node(p, from, { kind: 'vector', operation: 'norm', args: [value] });
}

function rootWithDegree(p: State, from: number): Expression {
  const open = p.at;
  const close = p.match[open] ?? -1;
  if (close < 0) fail(p, 'The degree of the root is never closed; close it with ].');
  const [degree, ...more] = bracketArguments(p);
  if (!degree || more.length > 0) return fail(p, 'The degree of the root is missing; write it between [ and ].', p.tokens[open]);
  const radicand = texArgument(p);
  if (degree.kind === 'number' && degree.value.den === 1n && degree.value.num === 2n) return node(p, from, { kind: 'power', base: radicand, exponent: build.number({ num: 1n, den: 2n }) });
  return node(p, from, { kind: 'root', degree, radicand });
}
