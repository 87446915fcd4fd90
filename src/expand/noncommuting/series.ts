/** Power series in s whose coefficients are sums of words. */
import type { Element, Field } from '../../algebra/types.ts';
import type { Budget } from '../../outcome.ts';
import { Declined } from '../../outcome.ts';
import { Q } from '../../expression/index.ts';
import { addSums, NONE, one, scalarOf, scaleSum, type Sum, sumOfProducts } from './words.ts';

/** sum of terms[k] s^(start + k); beyond its terms it is zero where `exact`, else unknown. The first term is not zero. */
export interface OperatorSeries {
  readonly start: number;
  readonly terms: readonly Sum[];
  readonly exact: boolean;
}
/** What a calculation shares: coefficients, time, and how many terms of a series that does not end are kept. */
export interface Setting {
  readonly field: Field;
  readonly budget: Budget;
  readonly width: number;
}

/** Thrown where a series has no known term: more are needed. */
export class TooNarrow extends Error {}

export const constantSeries = (value: Sum, start = 0): OperatorSeries => ({ start, terms: value.size === 0 ? [] : [value], exact: true });
export const isZeroSeries = (a: OperatorSeries): boolean => a.exact && a.terms.length === 0;
const endOf = (a: OperatorSeries): number => (a.exact ? Infinity : a.start + a.terms.length);

function normal(start: number, terms: readonly Sum[], exact: boolean): OperatorSeries {
  const first = terms.findIndex((t) => t.size > 0);
  if (first < 0) return exact ? { start: 0, terms: [], exact } : { start: start + terms.length, terms: [], exact };
  let last = terms.length;
  while (exact && terms[last - 1]?.size === 0) last -= 1;
  return { start: start + first, terms: terms.slice(first, last), exact };
}

export function addSeries(s: Setting, a: OperatorSeries, b: OperatorSeries): OperatorSeries {
  if (isZeroSeries(a)) return b;
  if (isZeroSeries(b)) return a;
  const start = Math.min(a.start, b.start);
  const end = Math.min(endOf(a), endOf(b));
  const length = end === Infinity ? Math.max(a.start + a.terms.length, b.start + b.terms.length) - start : end - start;
  const terms = Array.from({ length }, (_, k) => addSums(s.field, a.terms[start + k - a.start] ?? NONE, b.terms[start + k - b.start] ?? NONE));
  return normal(start, terms, end === Infinity);
}

/** `below`: powers of s from there on are left out. */
export function multiplySeries(s: Setting, a: OperatorSeries, b: OperatorSeries, below = Infinity): OperatorSeries {
  if (isZeroSeries(a) || isZeroSeries(b)) return constantSeries(NONE);
  const start = a.start + b.start;
  const end = Math.min(endOf(a) + b.start, endOf(b) + a.start);
  const full = end === Infinity ? a.terms.length + b.terms.length - 1 : Math.min(end - start, s.width);
  const length = Math.min(full, Math.max(0, below - start));
  const terms = Array.from({ length }, (_, n) => {
    const pairs = a.terms.slice(0, n + 1).map((x, i) => [x, b.terms[n - i] ?? NONE] as const);
    return sumOfProducts(s.field, pairs, s.budget.check);
  });
  return normal(start, terms, end === Infinity && length === full);
}

export const scaleSeries = (s: Setting, a: OperatorSeries, factor: Element): OperatorSeries => normal(a.start, a.terms.map((t) => scaleSum(s.field, t, factor)), a.exact);

/** 1/a = sum of (-L R)^k L with L the inverse of the leading term and R the rest; `inverseOf` gives L. */
export function invertSeries(s: Setting, a: OperatorSeries, inverseOf: (lead: Sum) => Sum): OperatorSeries {
  const [lead] = a.terms;
  if (!lead) {
    if (a.exact) throw new Declined('no-expansion', 'This divides by zero; check the formula.');
    throw new TooNarrow();
  }
  const inverse = inverseOf(lead);
  const left = constantSeries(inverse, -a.start);
  const rest = scaleSeries(s, multiplySeries(s, left, normal(a.start + 1, a.terms.slice(1), a.exact)), Q.rational(-1));
  return multiplySeries(s, composed(s, rest, () => Q.ONE), left);
}

/** sum of c_k x^k for an x that vanishes with s. */
export function composed(s: Setting, x: OperatorSeries, coefficient: (k: number) => Element): OperatorSeries {
  let total = constantSeries(scaleSum(s.field, one(Q.ONE), coefficient(0)));
  if (isZeroSeries(x)) return total;
  if (x.start < 1) throw new Error('composition with a series that does not vanish');
  let power = constantSeries(one(Q.ONE));
  for (let k = 1; k * x.start < s.width; k += 1) {
    power = multiplySeries(s, power, x, s.width);
    total = addSeries(s, total, scaleSeries(s, power, coefficient(k)));
  }
  const terms = Array.from({ length: s.width }, (_, k) => total.terms[k - total.start] ?? NONE);
  return normal(0, terms, false);
}

/** The scalar that the series tends to, and what is left; null where it tends to an operator. */
export function apart(a: OperatorSeries): { readonly limit: Element; readonly rest: OperatorSeries } | null {
  if (a.start < 0) return null;
  if (a.start > 0 || a.terms.length === 0) {
    if (a.terms.length === 0 && !a.exact && a.start < 1) throw new TooNarrow();
    return { limit: Q.ZERO, rest: a };
  }
  const limit = scalarOf(a.terms[0] ?? NONE);
  return limit === null ? null : { limit, rest: normal(1, a.terms.slice(1), a.exact) };
}
