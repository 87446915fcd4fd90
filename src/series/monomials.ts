/** Products and powers of leading monomials, and their way back into multiseries. */
import type { Element } from '../algebra/types.ts';
import { type Expression, Q } from '../expression/index.ts';
import { signOfExponent } from './exponent.ts';
import { exponential, logarithm } from './exponential.ts';
import { compareMonomials, eventualSign, isZero, type Monomial, monomialOf, nextTermOrOrder } from './leading.ts';
import { addElements, type Context, type Multi, multiplyElements, Series, unnamed } from './multi.ts';
import { add, monomial, multiply, negate } from './ring.ts';
import { finiteStream } from './stream.ts';

export const unitMonomial: Monomial = { constant: Q.ONE, factors: [] };

export function multiplyMonomials(c: Context, a: Monomial, b: Monomial): Monomial {
  const factors = a.factors.map((f) => ({ ...f }));
  for (const g of b.factors) {
    const k = factors.findIndex((f) => f.element === g.element);
    const own = factors[k];
    if (own) factors[k] = { element: own.element, exponent: addElements(c, own.exponent, g.exponent) };
    else factors.push(g);
  }
  return {
    constant: multiplyElements(c, a.constant, b.constant),
    factors: factors.filter((f) => signOfExponent(c, f.exponent) !== 0).sort((x, y) => y.element.rank - x.element.rank),
  };
}

/** The size |monomial|^power with constant 1. */
export function raiseMonomial(c: Context, a: Monomial, power: Element): Monomial {
  return { constant: Q.ONE, factors: a.factors.map((f) => ({ element: f.element, exponent: multiplyElements(c, f.exponent, power) })) };
}

export function monomialSeries(c: Context, m: Monomial): Multi {
  let result: Multi = m.constant;
  for (const f of [...m.factors].reverse()) result = multiply(c, result, monomial(c, f.element, f.exponent));
  return result;
}

/** O of the monomial: in the slowest of its elements nothing is known from that power on, inside the powers of the faster ones. */
export function orderSeries(c: Context, m: Monomial, exact: () => Expression = unnamed): Series {
  const slowToFast = [...m.factors].reverse();
  const [slowest = { element: c.scale.local, exponent: Q.ZERO }, ...faster] = slowToFast;
  let result = new Series(slowest.element, finiteStream([{ exponent: slowest.exponent, coefficient: Q.ONE, order: true }]), exact);
  for (const f of faster) result = new Series(f.element, finiteStream([{ exponent: f.exponent, coefficient: result }]), exact);
  return result;
}

/** O(exp(-log(large)^2)): smaller than every power of a quantity that grows without bound, larger than what is exponentially small in it. */
export function beyondAllOrders(c: Context, large: Multi): Series {
  const logarithm_ = logarithm(c, eventualSign(c, large) === -1 ? negate(c, large) : large);
  const size = monomialOf(c, exponential(c, negate(c, multiply(c, logarithm_, logarithm_))));
  const [first] = size?.factors ?? [];
  if (!size || !first) throw new Error('an unbounded quantity without a scale');
  first.element.beyond = true;
  return orderSeries(c, size);
}

export interface Truncation {
  /** The terms above the bound, a finite sum. */
  readonly kept: Multi;
  readonly count: number;
  /** The first term left out; null where there is none. */
  readonly next: Monomial | null;
}

/** The terms of m that are larger than the bound, at most `most` of them. */
export function truncate(c: Context, m: Multi, bound: Monomial | null, most: number, outer: Monomial = unitMonomial): Truncation {
  if (!(m instanceof Series)) {
    if (isZero(c, m)) return { kept: Q.ZERO, count: 0, next: null };
    const here = multiplyMonomials(c, outer, { constant: m, factors: [] });
    if (most < 1 || (bound && compareMonomials(c, here, bound) <= 0)) return { kept: Q.ZERO, count: 0, next: here };
    return { kept: m, count: 1, next: null };
  }
  let kept: Multi = Q.ZERO;
  let count = 0;
  for (let k = 0; ; k += 1) {
    c.budget.check();
    const term = nextTermOrOrder(c, m, k);
    if (!term) return { kept, count, next: null };
    k = term.index;
    const here = multiplyMonomials(c, outer, { constant: Q.ONE, factors: [{ element: m.element, exponent: term.exponent }] });
    if (term.order) {
      const size = monomialOf(c, term.coefficient);
      return { kept, count, next: size ? multiplyMonomials(c, here, size) : here };
    }
    const inner = truncate(c, term.coefficient, bound, most - count, here);
    if (inner.count > 0) {
      count += inner.count;
      kept = add(c, kept, multiply(c, inner.kept, monomial(c, m.element, term.exponent)));
    }
    if (inner.next) return { kept, count, next: inner.next };
  }
}
