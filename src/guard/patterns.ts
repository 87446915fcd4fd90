/** Views of a tree that identities ask for: sums as coefficients times cores, products as factors, exponentials, roots, squares. */
import { createField, type Field } from '../algebra/index.ts';
import { type Assumption, build, type Expression, Q, type Rational, rationalOf, structureKey, walk } from '../expression/index.ts';
import { type Budget, budget as budgetOf, Declined } from '../outcome.ts';

export const ONE = build.number(1);
export const same = (a: Expression, b: Expression): boolean => structureKey(a) === structureKey(b);
export const isOne = (e: Expression): boolean => e.kind === 'number' && Q.isOne(e.value);

/** Operations, calls counted several times: for choices only. */
export const costOf = (e: Expression): number => [...walk(e)].reduce((n, node) => n + (node.kind === 'call' || node.kind === 'root' ? 6 : node.kind === 'number' || node.kind === 'symbol' || node.kind === 'negation' ? 0 : 1), 0);

/** coefficient * core; the core of a plain number is 1. */
export interface Term {
  readonly coefficient: Rational;
  readonly factors: readonly Expression[];
}

export function factorsOf(e: Expression): Term {
  const value = rationalOf(e);
  if (value) return { coefficient: value, factors: [] };
  if (e.kind === 'negation') {
    const inner = factorsOf(e.operand);
    return { ...inner, coefficient: Q.negate(inner.coefficient) };
  }
  if (e.kind === 'product') {
    let coefficient = Q.ONE;
    const factors: Expression[] = [];
    for (const f of e.factors) {
      const part = factorsOf(f);
      coefficient = Q.multiply(coefficient, part.coefficient);
      factors.push(...part.factors);
    }
    return { coefficient, factors };
  }
  if (e.kind === 'quotient') {
    const below = rationalOf(e.denominator);
    if (below && !Q.isZero(below)) {
      const top = factorsOf(e.numerator);
      return { ...top, coefficient: Q.divide(top.coefficient, below) };
    }
    const top = factorsOf(e.numerator);
    if (!Q.isOne(top.coefficient)) return { coefficient: top.coefficient, factors: [build.quotient(build.product(...top.factors), e.denominator)] };
  }
  return { coefficient: Q.ONE, factors: [e] };
}

export function termsOf(e: Expression): readonly Term[] {
  if (e.kind === 'sum') return e.terms.flatMap(termsOf);
  if (e.kind === 'negation' && e.operand.kind === 'sum') return termsOf(e.operand).map((t) => ({ ...t, coefficient: Q.negate(t.coefficient) }));
  return [factorsOf(e)];
}

export const coreOf = (t: Term): Expression => build.product(...t.factors);
/** The coefficient is written as a dividing integer where that is plainer. */
export function scaled(coefficient: Rational, e: Expression): Expression {
  if (Q.isOne(coefficient)) return e;
  if (coefficient.num < 0n) return build.negation(scaled(Q.negate(coefficient), e));
  if (isOne(e)) return build.number(coefficient);
  if (coefficient.num === 1n) return build.quotient(e, build.number(coefficient.den));
  return build.product(build.number(coefficient), ...(e.kind === 'product' ? e.factors : [e]));
}
export const expressionOf = (t: Term): Expression => (t.factors.length === 0 ? build.number(t.coefficient) : scaled(t.coefficient, coreOf(t)));

/** The factors that both have, and what is left of each. */
export function commonFactors(a: readonly Expression[], b: readonly Expression[]): { readonly common: readonly Expression[]; readonly a: readonly Expression[]; readonly b: readonly Expression[] } {
  const rest = [...b];
  const common: Expression[] = [];
  const left: Expression[] = [];
  for (const f of a) {
    const at = rest.findIndex((g) => same(f, g));
    if (at < 0) left.push(f);
    else {
      common.push(f);
      rest.splice(at, 1);
    }
  }
  return { common, a: left, b: rest };
}

/** u of e^u; 0 for the number 1. */
export function exponentOf(e: Expression): Expression | null {
  if (isOne(e)) return build.number(0);
  if (e.kind === 'call' && e.function === 'exp') return e.args[0] ?? null;
  if (e.kind === 'power' && e.base.kind === 'constant' && e.base.name === 'e') return e.exponent;
  return null;
}
export const callOf = (e: Expression, id: string): Expression | null => (e.kind === 'call' && e.function === id && e.args.length === 1 ? (e.args[0] ?? null) : null);
/** The radicand of a square root. */
export const radicandOf = (e: Expression): Expression | null => (e.kind === 'power' && e.exponent.kind === 'number' && Q.equal(e.exponent.value, Q.HALF) ? e.base : callOf(e, 'sqrt'));
/** The radicand of a real cube root. */
export const cubeOf = (e: Expression): Expression | null =>
  e.kind === 'root' && e.degree.kind === 'number' && Q.equal(e.degree.value, Q.rational(3)) ? e.radicand : e.kind === 'power' && e.exponent.kind === 'number' && Q.equal(e.exponent.value, Q.rational(1, 3)) ? e.base : null;

/** g with g^2 = e, where that shows. */
export function squareBase(e: Expression): Expression | null {
  const value = rationalOf(e);
  if (value) {
    const [p, q] = [integerRoot(value.num), integerRoot(value.den)];
    return p !== null && q !== null ? build.number(Q.rational(p, q)) : null;
  }
  if (e.kind === 'power' && e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num % 2n === 0n && e.exponent.value.num > 0n) {
    const half = e.exponent.value.num / 2n;
    return half === 1n ? e.base : build.power(e.base, half);
  }
  if (e.kind === 'product') {
    const { coefficient, factors } = factorsOf(e);
    const number = squareBase(build.number(coefficient));
    if (!number) return null;
    const bases: Expression[] = isOne(number) ? [] : [number];
    const rest = [...factors];
    for (let f = rest.shift(); f; f = rest.shift()) {
      const own = f.kind === 'power' ? squareBase(f) : null;
      if (own) {
        bases.push(own);
        continue;
      }
      const at = rest.findIndex((g) => same(g, f));
      if (at < 0) return null;
      rest.splice(at, 1);
      bases.push(f);
    }
    return build.product(...bases);
  }
  return null;
}

function integerRoot(n: bigint): bigint | null {
  if (n < 0n) return null;
  let r = BigInt(Math.round(Math.sqrt(Number(n))));
  while (r * r > n) r -= 1n;
  while ((r + 1n) * (r + 1n) <= n) r += 1n;
  return r * r === n ? r : null;
}

/** Exact normal forms for what stands inside an identity. */
export class Normal {
  readonly #field: Field;
  readonly #known = new Map<string, Expression>();

  constructor(assumptions: readonly Assumption[], budget: Budget) {
    this.#field = createField(assumptions, budgetOf(Math.min(2000, Math.max(1, budget.remaining()))));
  }

  /** The tree or its normal form, whichever is plainer. */
  tidy(e: Expression): Expression {
    const key = structureKey(e);
    let found = this.#known.get(key);
    if (!found) {
      const normal = this.#attempt(() => this.#field.toExpression(this.#field.fromExpression(e)));
      found = normal && costOf(normal) <= costOf(e) ? normal : e;
      this.#known.set(key, found);
    }
    return found;
  }

  /** a = b for every value of the variable, proved by the normal form of the difference. */
  equal(a: Expression, b: Expression): boolean {
    return this.#attempt(() => this.#field.isZero(this.#field.subtract(this.#field.fromExpression(a), this.#field.fromExpression(b))) === 'yes') ?? false;
  }

  isZero(e: Expression): boolean {
    return rationalOf(this.tidy(e))?.num === 0n;
  }

  #attempt<T>(body: () => T): T | null {
    try {
      return body();
    } catch (error) {
      if (error instanceof Declined) return null;
      throw error;
    }
  }
}
