/** What the assumptions say of symbols and polynomials, in the form the sign rules ask for. */
import { Q, type Rational } from '../expression/index.ts';
import { isWhole, type Exponent } from './exponent.ts';
import type { Kernel, KernelTable } from './kernel.ts';
import { polynomialKey } from './polynomial.ts';
import { isQuotient } from './quotientParts.ts';
import { ANY, NEGATIVE, NIL, POSITIVE, REAL, type SignFacts, type SignSet } from './signs.ts';
import type { Element } from './types.ts';

export type Relation = '<' | '<=' | '>' | '>=' | '!=' | '=';

export interface Bounds {
  readonly lower: Rational | null;
  readonly upper: Rational | null;
}
interface SymbolFacts {
  real: boolean;
  integer: boolean;
  sign: SignSet;
  lower: Rational | null;
  upper: Rational | null;
}

export interface AssumptionStore extends SignFacts {
  setDomain(symbol: string, domain: 'integer' | 'real' | 'complex'): void;
  /** Takes note of `difference relation 0`. */
  note(difference: Element, relation: Relation): void;
  isInteger(symbol: string): boolean;
  boundsOf(symbol: string): Bounds;
  signOf(symbol: string): SignSet;
  isComplex(symbol: string): boolean;
}

const ALLOWED: Readonly<Record<Relation, SignSet>> = { '<': NEGATIVE, '<=': NEGATIVE | NIL, '>': POSITIVE, '>=': POSITIVE | NIL, '!=': NEGATIVE | POSITIVE, '=': NIL };
const mirror = (s: SignSet): SignSet => (s & NIL) | (s & NEGATIVE ? POSITIVE : 0) | (s & POSITIVE ? NEGATIVE : 0);

export function createAssumptionStore(table: KernelTable): AssumptionStore {
  const symbols = new Map<string, SymbolFacts>();
  const polynomials = new Map<string, SignSet>();
  const of = (name: string): SymbolFacts => {
    let facts = symbols.get(name);
    if (!facts) {
      facts = { real: true, integer: false, sign: REAL, lower: null, upper: null };
      symbols.set(name, facts);
    }
    return facts;
  };
  const refresh = (f: SymbolFacts): void => {
    if (f.lower && f.lower.num > 0n) f.sign &= POSITIVE;
    if (f.lower && f.lower.num === 0n) f.sign &= POSITIVE | NIL;
    if (f.upper && f.upper.num < 0n) f.sign &= NEGATIVE;
    if (f.upper && f.upper.num === 0n) f.sign &= NEGATIVE | NIL;
  };
  const store: AssumptionStore = {
    setDomain(symbol, domain) {
      const f = of(symbol);
      f.real = domain !== 'complex';
      f.integer = domain === 'integer';
      if (!f.real) f.sign = ANY;
    },
    note(difference, relation) {
      if (!isQuotient(difference)) return;
      let allowed = ALLOWED[relation];
      if (difference.content.num < 0n) allowed = mirror(allowed);
      if (difference.denominator.length > 0) return;
      const { monomial, numerator } = difference;
      const [first, second] = numerator;
      if (numerator.length === 1 && monomial.kernels.length === 1 && monomial.exponents[0] === 1) {
        const kernel = table.kernels[monomial.kernels[0] as number] as Kernel;
        if (kernel.shape.kind === 'parameter') {
          const f = of(kernel.shape.name);
          f.sign &= allowed;
          if ((allowed & NEGATIVE) === 0) f.lower = larger(f.lower, Q.ZERO);
          if ((allowed & POSITIVE) === 0) f.upper = smaller(f.upper, Q.ZERO);
          refresh(f);
        }
        return;
      }
      if (monomial.kernels.length > 0) return;
      const key = polynomialKey(numerator);
      polynomials.set(key, (polynomials.get(key) ?? REAL) & allowed);
      // c*a + d with a a parameter: an end of its interval.
      if (numerator.length === 2 && first && second && first.monomial.kernels.length === 1 && first.monomial.exponents[0] === 1 && second.monomial.kernels.length === 0) {
        const kernel = table.kernels[first.monomial.kernels[0] as number] as Kernel;
        if (kernel.shape.kind !== 'parameter') return;
        const f = of(kernel.shape.name);
        const end = Q.rational(-second.coefficient, first.coefficient);
        const upward = first.coefficient > 0n ? allowed : mirror(allowed);
        if ((upward & NEGATIVE) === 0) {
          f.lower = larger(f.lower, end);
          if (end.num === 0n && (upward & NIL) === 0) f.sign &= POSITIVE;
        }
        if ((upward & POSITIVE) === 0) f.upper = smaller(f.upper, end);
        refresh(f);
      }
    },
    isInteger: (symbol) => symbols.get(symbol)?.integer ?? false,
    isComplex: (symbol) => symbols.get(symbol)?.real === false,
    boundsOf: (symbol) => ({ lower: symbols.get(symbol)?.lower ?? null, upper: symbols.get(symbol)?.upper ?? null }),
    signOf: (symbol) => symbols.get(symbol)?.sign ?? REAL,
    ofParameter: (name) => symbols.get(name)?.sign ?? REAL,
    ofPolynomial: (key) => polynomials.get(key) ?? ANY,
    byIntervals(f) {
      let lower: Rational | null = Q.ZERO;
      let upper: Rational | null = Q.ZERO;
      for (const t of f) {
        const range = rangeOfTerm(table, store, t.monomial.kernels, t.monomial.exponents);
        if (!range) return ANY;
        const c = Q.rational(t.coefficient);
        const low: Rational | null = c.num > 0n ? range.lower : range.upper;
        const high: Rational | null = c.num > 0n ? range.upper : range.lower;
        lower = lower && low ? Q.add(lower, Q.multiply(c, low)) : null;
        upper = upper && high ? Q.add(upper, Q.multiply(c, high)) : null;
        if (!lower && !upper) return ANY;
      }
      if (lower && lower.num > 0n) return POSITIVE;
      if (upper && upper.num < 0n) return NEGATIVE;
      if (lower && lower.num === 0n) return POSITIVE | NIL;
      if (upper && upper.num === 0n) return NEGATIVE | NIL;
      return ANY;
    },
  };
  return store;
}

const larger = (a: Rational | null, b: Rational): Rational => (a && Q.compare(a, b) >= 0 ? a : b);
const smaller = (a: Rational | null, b: Rational): Rational => (a && Q.compare(a, b) <= 0 ? a : b);

/** Range of a product of parameter powers, ends null where unbounded; null where a factor is no bounded real parameter. */
function rangeOfTerm(table: KernelTable, store: AssumptionStore, kernels: readonly number[], exponents: readonly Exponent[]): Bounds | null {
  let range: Bounds = { lower: Q.ONE, upper: Q.ONE };
  for (let i = 0; i < kernels.length; i += 1) {
    const kernel = table.kernels[kernels[i] as number] as Kernel;
    const e = exponents[i];
    if (kernel.shape.kind !== 'parameter' || e === undefined || !isWhole(e) || e < 0 || e > 1000 || store.isComplex(kernel.shape.name)) return null;
    const b = store.boundsOf(kernel.shape.name);
    range = multiplyRanges(range, powerRange(b, e));
  }
  return range;
}

function powerRange(b: Bounds, n: number): Bounds {
  const p = (x: Rational | null): Rational | null => (x ? Q.power(x, n) : null);
  if (n % 2 === 1 || (b.lower && b.lower.num >= 0n)) return { lower: p(b.lower), upper: p(b.upper) };
  if (b.upper && b.upper.num <= 0n) return { lower: p(b.upper), upper: p(b.lower) };
  const ends = b.lower && b.upper ? larger(p(b.lower), p(b.upper) as Rational) : null;
  return { lower: Q.ZERO, upper: ends };
}
function multiplyRanges(a: Bounds, b: Bounds): Bounds {
  const nonNegative = (r: Bounds): boolean => r.lower !== null && r.lower.num >= 0n;
  if (a.lower && a.upper && b.lower && b.upper) {
    const products = [Q.multiply(a.lower, b.lower), Q.multiply(a.lower, b.upper), Q.multiply(a.upper, b.lower), Q.multiply(a.upper, b.upper)];
    return { lower: products.reduce((x, y) => smaller(x, y)), upper: products.reduce((x, y) => larger(x, y)) };
  }
  if (nonNegative(a) && nonNegative(b)) return { lower: Q.multiply(a.lower as Rational, b.lower as Rational), upper: a.upper && b.upper ? Q.multiply(a.upper, b.upper) : null };
  if (a.lower && Q.isOne(a.lower) && a.upper && Q.isOne(a.upper)) return b;
  return { lower: null, upper: null };
}
