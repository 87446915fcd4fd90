/** Which quantity is small (or large), and near which point: from what the text around says, else a list to choose from. */
import { build, children, dependsOn, type Expression, freeSymbols, literalRational, Q, type Rational, walk } from '../expression/index.ts';
import { maximalMonomials, type Monomial, monomialKey, monomialOf, primitive } from './monomial.ts';

export interface Candidate {
  /** As a request names it: `x`, `\epsilon`, `v/c`, `\frac{\hbar\omega}{k_B T}`. */
  readonly name: string;
  readonly expression: Expression;
  readonly kind: 'symbol' | 'ratio';
}

export interface Found {
  readonly variable: Candidate;
  /** An exact expression; `infinity` for large quantities. */
  readonly point: Expression;
  /** Where a side is written: `x \\to 0^+`. */
  readonly side?: 'right' | 'left';
  readonly from: 'order term' | 'condition' | 'text' | 'only symbol' | 'only ratio';
}

export interface Candidates {
  /** What the text shows beyond doubt; null where the user is to be asked. */
  readonly found: Found | null;
  /** Ratios on which the expression depends as a unit, then symbols in order of appearance. */
  readonly list: readonly Candidate[];
}

export interface Surroundings {
  /** O-terms of the formula or document. */
  readonly orders?: readonly Expression[];
  readonly conditions?: readonly Expression[];
  /** Sides of the same chain that are truncated expansions: their powers tell small from large. */
  readonly expansions?: readonly Expression[];
  /** Running text before and after the formula, a few hundred characters. */
  readonly before?: string;
  readonly after?: string;
}

const INFINITY = build.constant('infinity');
const ZERO = build.number(0);

/** Candidates for the expansion variable of an expression. Cost: a few walks over the tree. */
export function candidates(expression: Expression, around: Surroundings = {}): Candidates {
  const symbols = freeSymbols(expression);
  const ratios = ratiosOf(expression);
  const vectors = vectorsOf(expression);
  const list: Candidate[] = [...ratios, ...vectors, ...symbols.map(symbolCandidate)];
  if (vectors.length > 0) {
    const found = smallVector(vectors, around) ?? (vectors.length === 1 && symbols.length === 0 ? vectorAt(vectors[0]) : null);
    if (found) return { found, list };
  }
  const known = (names: readonly string[]): boolean => names.every((name) => symbols.includes(name));
  for (const order of around.orders ?? []) {
    const found = fromOrder(order, ratios);
    if (found && known(freeSymbols(found.variable.expression))) return { found, list };
  }
  for (const condition of around.conditions ?? []) {
    const found = fromCondition(condition, ratios);
    if (found && known(freeSymbols(found.variable.expression))) return { found, list };
  }
  const worded = fromText(around.after ?? '', symbols, ratios) ?? fromText(around.before ?? '', symbols, ratios);
  if (worded) return { found: worded, list };
  // Beside vectors no scalar is the only candidate.
  if (vectors.length > 0) return { found: null, list };
  // Symbols that only multiply the whole are no candidates: in E_0 \sqrt{1+\epsilon} only \epsilon is.
  const core = withoutPrefactor(expression);
  const active = core.flatMap(freeSymbols).filter((name, i, all) => all.indexOf(name) === i);
  const [only] = active.length > 0 ? active : symbols;
  if ((active.length > 0 ? active : symbols).length === 1 && only !== undefined) {
    const point = isLarge(expression, only) || (around.expansions ?? []).some((e) => descends(e, only)) ? INFINITY : ZERO;
    return { found: { variable: symbolCandidate(only), point, from: 'only symbol' }, list };
  }
  const [ratio] = ratios;
  if (ratios.length === 1 && ratio && core.every((part) => coversAll(part, ratio))) return { found: { variable: ratio, point: ZERO, from: 'only ratio' }, list };
  return { found: null, list };
}

/** Bold letters, in order of appearance; those under a hat are directions and do not vary. */
function vectorsOf(expression: Expression): readonly Candidate[] {
  const found = new Map<string, Candidate>();
  for (const e of walk(expression)) if (e.kind === 'vector' && e.operation === 'symbol' && e.name !== undefined && !/^\\(?:wide)?hat\{/.test(e.name)) found.set(e.name, { name: e.name, expression: { kind: 'vector', operation: 'symbol', name: e.name, args: [] }, kind: 'symbol' });
  return [...found.values()];
}
const vectorAt = (variable: Candidate | undefined, point: Expression = ZERO): Found | null => (variable ? { variable, point, from: 'only symbol' } : null);

/** The vector that an O-term (`O(r'^3)`, `O(|\mathbf{d}|^2)`, `O(r^{-3})`) or a condition (`|\mathbf{d}| \ll |\mathbf{r}|`, `r' \ll r`) speaks of by its length. */
function smallVector(vectors: readonly Candidate[], around: Surroundings): Found | null {
  const lengthOf = (e: Expression): Candidate | undefined => {
    if (e.kind === 'vector') return e.operation === 'symbol' ? vectors.find((v) => v.name === e.name) : e.operation === 'norm' && e.args[0] ? lengthOf(e.args[0]) : undefined;
    return e.kind === 'symbol' ? vectors.find((v) => bareLetter(v.name) === e.name) : undefined;
  };
  for (const order of around.orders ?? []) {
    if (order.kind !== 'order') continue;
    const { argument } = order;
    const inverted = argument.kind === 'quotient';
    const base = inverted ? argument.denominator : argument;
    const power = base.kind === 'power' ? literalRational(base.exponent) : Q.ONE;
    const vector = lengthOf(base.kind === 'power' ? base.base : base);
    if (vector && power) return { variable: vector, point: (Q.signOf(power) < 0) !== inverted ? INFINITY : ZERO, from: 'order term' };
  }
  for (const condition of around.conditions ?? []) {
    if (condition.kind !== 'relation') continue;
    const [left, right] = condition.sides;
    const [kind] = condition.relations;
    if (!left || !right || (kind !== 'll' && kind !== 'gg')) continue;
    const vector = lengthOf(kind === 'll' ? left : right);
    if (vector) return { variable: vector, point: ZERO, from: 'condition' };
  }
  return vectorInText(vectors, around.after ?? '') ?? vectorInText(vectors, around.before ?? '');
}

/** "for $r' \ll r$", "small $\mathbf{d}$", "$|\mathbf{r}| \to \infty$" in running text. */
function vectorInText(vectors: readonly Candidate[], text: string): Found | null {
  const plain = text
    .replace(/\\(?:vec|mathbf|bm|boldsymbol|overrightarrow|pmb|mathbfit)\s*(?:\{([^{}]*)\}|([A-Za-z]))/g, '$1$2')
    .replace(/[${}|]|\\(?:left|right|[lr]vert)(?![A-Za-z])/g, ' ')
    .replace(/\s+/g, ' ');
  for (const variable of vectors) {
    const letter = bareLetter(variable.name).replace(/[{}]/g, '').replace(/[.*+?^$()[\]\\]/g, '\\$&');
    const name = `(?<![A-Za-z\\\\])${letter}(?![A-Za-z_'])`;
    if (new RegExp(`${name} ?(?:\\\\ll(?![A-Za-z])|≪|<<)|(?:\\\\gg|≫|>>) ?${name}|\\bsmall ${name}|${name} (?:is|being) small|${name} ?(?:\\\\to|→) ?0`).test(plain)) return { variable, point: ZERO, from: 'text' };
    if (new RegExp(`\\blarge ${name}|${name} (?:is|being) large|${name} ?(?:\\\\to|→) ?(?:\\\\infty|∞)`).test(plain)) return { variable, point: INFINITY, from: 'text' };
  }
  return null;
}
/** `r'` for `\mathbf{r}'`. */
const bareLetter = (name: string): string => name.replace(/\\[a-z]+\{([^{}]*)\}/g, '$1');

/** What is left of an expression without factors that are monomials. */
function withoutPrefactor(e: Expression): readonly Expression[] {
  switch (e.kind) {
    case 'negation':
      return withoutPrefactor(e.operand);
    case 'product':
      return e.factors.filter((f) => monomialOf(f) === null).flatMap(withoutPrefactor);
    case 'quotient':
      return [e.numerator, e.denominator].filter((f) => monomialOf(f) === null).flatMap(withoutPrefactor);
    default:
      return monomialOf(e) === null ? [e] : [];
  }
}

/** A number that counts: under a factorial, in a binomial or harmonic number, the upper limit of a sum. */
function isLarge(e: Expression, name: string): boolean {
  for (const n of walk(e)) {
    if (n.kind === 'call' && /^(?:factorial|doubleFactorial|binomial|harmonic)$/.test(n.function) && n.args.some((a) => dependsOn(a, name))) return true;
    if ((n.kind === 'indexedSum' || n.kind === 'indexedProduct') && dependsOn(n.upper, name)) return true;
  }
  return false;
}

/** The printed terms run from higher to lower powers of the symbol. */
function descends(e: Expression, name: string): boolean {
  const terms = e.kind === 'sum' ? e.terms : e.kind === 'product' ? (e.factors.find((f) => f.kind === 'sum') as Extract<Expression, { kind: 'sum' }> | undefined)?.terms ?? [] : [];
  const powers = terms.filter((t) => t.kind !== 'order' && t.kind !== 'dots').map((t) => powerIn(t, name));
  const first = powers[0];
  const last = powers[powers.length - 1];
  return powers.length > 1 && first !== undefined && last !== undefined && first !== null && last !== null && Q.compare(last, first) < 0;
}

/** Power of the symbol in one term, logarithms counted as power 0; null where it stands elsewhere too. */
function powerIn(e: Expression, name: string): Rational | null {
  if (!dependsOn(e, name)) return Q.ZERO;
  switch (e.kind) {
    case 'negation':
      return powerIn(e.operand, name);
    case 'product':
      return e.factors.map((f) => powerIn(f, name)).reduce<Rational | null>((a, b) => (a && b ? Q.add(a, b) : null), Q.ZERO);
    case 'quotient': {
      const above = powerIn(e.numerator, name);
      const below = powerIn(e.denominator, name);
      return above && below ? Q.subtract(above, below) : null;
    }
    case 'call':
      return e.function === 'log' ? Q.ZERO : null;
    default:
      return monomialOf(e)?.get(name) ?? null;
  }
}

const symbolCandidate = (name: string): Candidate => ({ name, expression: build.symbol(name), kind: 'symbol' });

/** The expression holds no symbol but through the ratio. */
function coversAll(expression: Expression, ratio: Candidate): boolean {
  const unit = monomialOf(ratio.expression);
  return unit !== null && maximalMonomials(expression, children).every((m) => isPowerOf(m, unit));
}

function isPowerOf(m: Monomial, unit: Monomial): boolean {
  return m.size === unit.size && (monomialKey(primitive(m)) === monomialKey(primitive(unit)));
}

/**
 * Ratios of products of symbols that occur as a unit: some symbol of the ratio occurs in no other way.
 * `v` in `m c^2/\sqrt{1-v^2/c^2}` occurs only in v^2/c^2, so v/c is one.
 */
export function ratiosOf(expression: Expression): readonly Candidate[] {
  const all = maximalMonomials(expression, children);
  const out = new Map<string, Candidate>();
  for (const m of all) {
    const positive = [...m.values()].some((q) => q.num > 0n);
    const negative = [...m.values()].some((q) => q.num < 0n);
    if (!positive || !negative) continue;
    const unit = primitive(m);
    const key = monomialKey(unit);
    if (out.has(key)) continue;
    const ownSymbol = [...unit.keys()].some((name) => all.every((other) => !other.has(name) || isPowerOf(other, unit)));
    if (ownSymbol) out.set(key, ratioCandidate(unit));
  }
  return [...out.values()];
}

function ratioCandidate(unit: Monomial): Candidate {
  const part = (sign: 1n | -1n): readonly (readonly [string, bigint])[] => [...unit].filter(([, q]) => q.num * sign > 0n).map(([name, q]) => [name, q.num * sign] as const);
  const tree = (factors: readonly (readonly [string, bigint])[]): Expression => build.product(...factors.map(([name, n]) => (n === 1n ? build.symbol(name) : build.power(build.symbol(name), n))));
  const text = (factors: readonly (readonly [string, bigint])[]): string =>
    factors
      .map(([name, n]) => (n === 1n ? name : `${name}^${n < 10n ? n : `{${n}}`}`))
      .reduce((joined, next) => (joined === '' ? next : `${joined}${/\\[A-Za-z]+$/.test(joined) && /^[A-Za-z]/.test(next) ? ' ' : /_[^{}]$|_\\[A-Za-z]+$/.test(joined) ? ' ' : ''}${next}`), '');
  const above = part(1n);
  const below = part(-1n);
  const simple = above.length === 1 && below.length === 1 && above[0]?.[1] === 1n && below[0]?.[1] === 1n;
  return { name: simple ? `${text(above)}/${text(below)}` : `\\frac{${text(above)}}{${text(below)}}`, expression: build.quotient(tree(above), tree(below)), kind: 'ratio' };
}

/** What O(...) names: O(x^3) x at 0, O((x-a)^2) x at a, O(1/n^2), O(\ln n/n) n at infinity, O(v^4/c^4) the ratio v/c. */
function fromOrder(order: Expression, ratios: readonly Candidate[]): Found | null {
  if (order.kind !== 'order') return null;
  const { argument } = order;
  const m = monomialOf(argument);
  if (m) {
    const [entry] = m;
    if (m.size === 1 && entry) {
      const [name, q] = entry;
      return { variable: symbolCandidate(name), point: Q.signOf(q) < 0 ? INFINITY : ZERO, from: 'order term' };
    }
    const ratio = ratios.find((r) => {
      const unit = monomialOf(r.expression);
      return unit !== null && isPowerOf(m, unit);
    });
    if (ratio) {
      const unit = monomialOf(ratio.expression) as Monomial;
      const [name] = unit.keys();
      const same = name !== undefined && Q.signOf(m.get(name) ?? Q.ONE) === Q.signOf(unit.get(name) ?? Q.ONE);
      return { variable: ratio, point: same ? ZERO : INFINITY, from: 'order term' };
    }
    return null;
  }
  const shifted = shiftOf(argument);
  if (shifted) return { variable: symbolCandidate(shifted.name), point: shifted.point, from: 'order term' };
  const symbols = freeSymbols(argument);
  const [only] = symbols;
  if (symbols.length !== 1 || only === undefined) return null;
  // Logarithms: decreasing at infinity if the power part is (`\ln n/n`), else at 0 (`x^2 \ln x`).
  const sign = powerSign(argument);
  return sign === 0 ? null : { variable: symbolCandidate(only), point: sign < 0 ? INFINITY : ZERO, from: 'order term' };
}

function powerSign(e: Expression): number {
  if (e.kind === 'product') return e.factors.map(powerSign).find((s) => s !== 0) ?? 0;
  if (e.kind === 'quotient') return powerSign(e.numerator) || -powerSign(e.denominator);
  const m = monomialOf(e);
  const [q] = m ? m.values() : [];
  return q ? Q.signOf(q) : 0;
}

/** (x - a)^n, h with x = a + h left to the caller. */
function shiftOf(e: Expression): { readonly name: string; readonly point: Expression } | null {
  const base = e.kind === 'power' ? e.base : e.kind === 'call' && e.function === 'abs' ? (e.args[0] ?? e) : e;
  const bare = base.kind === 'call' && base.function === 'abs' ? (base.args[0] ?? base) : base;
  if (bare.kind !== 'sum' || bare.terms.length !== 2) return null;
  const [first, second] = bare.terms;
  if (first?.kind !== 'symbol' || !second) return null;
  const point = second.kind === 'negation' ? second.operand : build.negation(second);
  return freeSymbols(point).includes(first.name) ? null : { name: first.name, point };
}

/** `x \to 0`, `n \to \infty`, `x \ll 1`, `v \ll c`, `n \gg 1`. */
function fromCondition(condition: Expression, ratios: readonly Candidate[]): Found | null {
  if (condition.kind !== 'relation' || condition.sides.length !== 2) return null;
  const [left, right] = condition.sides;
  const [kind] = condition.relations;
  if (!left || !right) return null;
  const one = literalRational(right);
  if (kind === 'to') {
    if (left.kind === 'symbol') {
      const side = right.kind === 'power' && right.exponent.kind === 'symbol' ? right.exponent.name : '';
      return { variable: symbolCandidate(left.name), point: withoutSide(right), ...(side === '+' ? { side: 'right' as const } : side === '-' ? { side: 'left' as const } : {}), from: 'condition' };
    }
    const asRatio = ratioOf(left, ratios);
    return asRatio ? { variable: asRatio, point: right, from: 'condition' } : null;
  }
  const small = kind === 'll' ? left : kind === 'gg' ? right : null;
  const large = kind === 'll' ? right : kind === 'gg' ? left : null;
  if (!small || !large) return null;
  const bare = small.kind === 'call' && small.function === 'abs' ? (small.args[0] ?? small) : small;
  if (kind === 'll' && one) {
    if (bare.kind === 'symbol') return { variable: symbolCandidate(bare.name), point: ZERO, from: 'condition' };
    const asRatio = ratioOf(bare, ratios);
    return asRatio ? { variable: asRatio, point: ZERO, from: 'condition' } : null;
  }
  if (kind === 'gg' && one && left.kind === 'symbol') return { variable: symbolCandidate(left.name), point: INFINITY, from: 'condition' };
  const quotient = build.quotient(bare, large);
  const asRatio = ratioOf(quotient, ratios);
  if (asRatio) return { variable: asRatio, point: ZERO, from: 'condition' };
  return bare.kind === 'symbol' && kind === 'll' ? { variable: symbolCandidate(bare.name), point: ZERO, from: 'condition' } : null;
}

function ratioOf(e: Expression, ratios: readonly Candidate[]): Candidate | null {
  const m = monomialOf(e);
  return (m && ratios.find((r) => monomialKey(monomialOf(r.expression) ?? new Map()) === monomialKey(m))) ?? null;
}

/** `0^+`, written as a power of the point by a plus sign, is read by the formula reader as `0`. */
const withoutSide = (e: Expression): Expression => (e.kind === 'power' && e.exponent.kind === 'symbol' && /^[+-]$/.test(e.exponent.name) ? e.base : e);

/** Words of running text: "for small x", "x is small", "as n \to \infty", "large n", "near x = 1". */
function fromText(text: string, symbols: readonly string[], ratios: readonly Candidate[]): Found | null {
  const plain = text.replace(/\$|\\[()]|\\(?:left|right)(?![A-Za-z])/g, ' ').replace(/\\varepsilon(?![A-Za-z])/g, '\\epsilon').replace(/\s+/g, ' ');
  let best: { at: number; found: Found } | null = null;
  for (const name of symbols) {
    const n = name.replace(/[.*+?^${}()|[\]\\]/g, '\\$&').replace(/ /g, '\\s*');
    const edge = '(?![A-Za-z_])';
    const tries: readonly (readonly [RegExp, Expression])[] = [
      [new RegExp(`\\b(?:small|tiny|infinitesimal)(?: values of)? ${n}${edge}`), ZERO],
      [new RegExp(`(?<![A-Za-z\\\\])${n} (?:is|being|was)(?: very| sufficiently)? small`), ZERO],
      [new RegExp(`(?<![A-Za-z\\\\])${n} ?(?:\\\\to|\\\\rightarrow|→|->) ?0${edge}`), ZERO],
      [new RegExp(`(?<![A-Za-z\\\\])${n} ?(?:\\\\ll|≪|<<) ?1${edge}`), ZERO],
      [new RegExp(`\\blarge(?: values of)? ${n}${edge}`), INFINITY],
      [new RegExp(`(?<![A-Za-z\\\\])${n} (?:is|being)(?: very| sufficiently)? large`), INFINITY],
      [new RegExp(`(?<![A-Za-z\\\\])${n} ?(?:\\\\to|\\\\rightarrow|→|->) ?(?:\\+ ?)?(?:\\\\infty|∞)`), INFINITY],
      [new RegExp(`(?<![A-Za-z\\\\])${n} ?(?:\\\\gg|≫|>>) ?1${edge}`), INFINITY],
      [new RegExp(`\\b(?:near|about|around|at) ${n} ?= ?0(?![.\\d])`), ZERO],
      [new RegExp(`\\b(?:near|about|around) ${n} ?= ?1(?![.\\d])`), build.number(1)],
    ];
    for (const [pattern, point] of tries) {
      const match = pattern.exec(plain);
      if (match && (best === null || match.index < best.at)) best = { at: match.index, found: { variable: symbolCandidate(name), point, from: 'text' } };
    }
  }
  return best?.found ?? comparison(plain, symbols, ratios);
}

/** `a \ll x` between two symbols of the expression: the ratio where it is one of its units, else the smaller symbol. */
function comparison(plain: string, symbols: readonly string[], ratios: readonly Candidate[]): Found | null {
  const name = '(\\\\?[A-Za-z]+(?:_(?:\\{[^{}]*\\}|\\\\?[A-Za-z0-9]+))?)';
  const match = new RegExp(`${name} ?(\\\\ll|≪|<<|\\\\gg|≫|>>)(?![A-Za-z]) ?${name}`).exec(plain);
  if (!match) return null;
  const [, left = '', sign = '', right = ''] = match;
  const [small, large] = /ll|≪|<</.test(sign) ? [left, right] : [right, left];
  if (!symbols.includes(small) || !symbols.includes(large)) return null;
  const ratio = ratioOf(build.quotient(build.symbol(small), build.symbol(large)), ratios);
  return { variable: ratio ?? symbolCandidate(small), point: ZERO, from: 'text' };
}
