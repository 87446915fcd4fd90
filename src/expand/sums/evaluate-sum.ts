/** Sums and products over an index: written out, by closed forms, or by Euler-Maclaurin with known constants. */
import { build, dependsOn, type Expression, type IndexedNode, Q, rationalOf, substitute } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { exponential, type Multi, multiply, sumOf } from '../../series/index.ts';
import { infinityOf } from '../integrals/integral.ts';
import type { Evaluate, Session } from '../session.ts';
import { bernoulliNumbers } from './bernoulli.ts';
import { eulerMaclaurin } from './euler-maclaurin.ts';
import { powerSeries } from './power-series.ts';
import { type PowerTerm, type SummandTerm, summandTerms } from './summand.ts';

/** Sums with at most this many terms are written out. */
const MOST_WRITTEN = 400;

export function evaluateIndexed(s: Session, e: IndexedNode, evaluate: Evaluate): Multi {
  if (e.index.kind !== 'symbol') throw new Declined('bad-request', 'A sum runs over one symbol; replace the index by one.');
  const k = e.index.name;
  const lower = rationalOf(e.lower);
  const upper = rationalOf(e.upper);
  if (lower && upper && lower.den === 1n && upper.den === 1n) {
    const count = upper.num - lower.num + 1n;
    if (count > BigInt(MOST_WRITTEN)) throw new Declined('bad-request', `A sum of ${count} terms is not written out; make its upper limit a symbol.`);
    const parts = Array.from({ length: Number(count > 0n ? count : 0n) }, (_, j) => substitute(e.body, k, build.number(lower.num + BigInt(j))));
    return evaluate(s, e.kind === 'indexedSum' ? build.sum(...parts) : build.product(...parts));
  }
  if (e.kind === 'indexedProduct') {
    const factorial = productOfLinear(e, k);
    if (factorial) return evaluate(s, factorial);
    return exponential(s.context, evaluateIndexed(s, { ...e, kind: 'indexedSum', body: build.call('log', e.body) }, evaluate));
  }
  const terms = summandTerms(e.body, k);
  const series = !terms && infinityOf(e.upper) === 1 ? powerSeries(s, e, (tree) => [...s.bindings.keys()].some((name) => name !== k && dependsOn(tree, name)), evaluate) : null;
  if (series !== null) return series;
  if (!terms) throw new Declined('no-expansion', 'This sum has no known closed form or constant; write it with powers, logarithms or geometric terms of its index.');
  return sumOf(s.context, terms.map((t) => (t.kind === 'geometric' ? evaluate(s, geometric(t.base, t.coefficient, e)) : powerSum(s, t, e, evaluate))));
}

/** product of c (k + a)^n: gamma functions. */
function productOfLinear(e: IndexedNode, k: string): Expression | null {
  const terms: SummandTerm[] | null = summandTerms(e.body, k);
  const [only] = terms ?? [];
  if (terms?.length !== 1 || only?.kind !== 'power' || only.logs > 0 || infinityOf(e.upper) !== 0) return null;
  const count = build.sum(e.upper, build.negation(e.lower), build.number(1));
  const ratio = build.quotient(build.call('gamma', build.sum(e.upper, only.shift, build.number(1))), build.call('gamma', build.sum(e.lower, only.shift)));
  return build.product(build.power(only.coefficient, count), build.power(ratio, only.exponent));
}

/** sum of c b^k from l to u: c (b^(u+1) - b^l)/(b - 1); c b^l/(1 - b) without end. */
function geometric(base: Expression, coefficient: Expression, e: IndexedNode): Expression {
  const first = build.power(base, e.lower);
  if (infinityOf(e.upper) === 1) return build.quotient(build.product(coefficient, first), build.difference(build.number(1), base));
  return build.quotient(build.product(coefficient, build.difference(build.power(base, build.sum(e.upper, build.number(1))), first)), build.difference(base, build.number(1)));
}

/** sum of c (k + a)^p log(k + a)^j from l to u. */
function powerSum(s: Session, t: PowerTerm, e: IndexedNode, evaluate: Evaluate): Multi {
  const infinite = infinityOf(e.upper) === 1;
  if (t.logs > 0) {
    if (infinite) throw new Declined('no-expansion', 'This infinite sum with logarithms is not evaluated; give it a symbolic upper limit.');
    return multiply(s.context, evaluate(s, t.coefficient), eulerMaclaurin(s, t, e.lower, e.upper, evaluate));
  }
  const from = build.sum(e.lower, t.shift);
  const behind = build.sum(e.upper, t.shift, build.number(1));
  const exponent = rationalOf(t.exponent);
  const order = build.negation(t.exponent);
  const { call, difference, product } = build;
  let closed: Expression;
  if (exponent && exponent.den === 1n && exponent.num >= 0n) {
    if (infinite) throw new Declined('no-expansion', 'The infinite sum diverges; correct it.');
    const n = Number(exponent.num);
    if (n > 60) throw new Declined('bad-request', 'A sum of such high powers is not expanded; lower the exponent.');
    closed = build.quotient(difference(bernoulliPolynomial(n + 1, behind), bernoulliPolynomial(n + 1, from)), build.number(n + 1));
  } else if (exponent && Q.equal(exponent, Q.MINUS_ONE)) {
    if (infinite) throw new Declined('no-expansion', 'The infinite sum diverges; correct it.');
    closed = difference(call('digamma', behind), call('digamma', from));
  } else {
    if (infinite && !(exponent && Q.compare(exponent, Q.MINUS_ONE) < 0)) throw new Declined('no-expansion', 'The infinite sum is not known to converge; correct it.');
    const start = isOneTree(from) ? call('zeta', order) : call('hurwitzZeta', order, from);
    closed = infinite ? start : difference(start, call('hurwitzZeta', order, behind));
  }
  return evaluate(s, product(t.coefficient, closed));
}

const isOneTree = (e: Expression): boolean => {
  const value = rationalOf(e);
  return value !== null && Q.isOne(value);
};

/** B_n(x) as a polynomial written out. */
function bernoulliPolynomial(n: number, x: Expression): Expression {
  const b = bernoulliNumbers(n);
  let binomial = 1n;
  const terms: Expression[] = [];
  for (let k = 0; k <= n; k += 1) {
    const coefficient = Q.multiply(Q.rational(binomial), b[k] ?? Q.ZERO);
    if (!Q.isZero(coefficient)) terms.push(build.product(build.number(coefficient), build.power(x, n - k)));
    binomial = (binomial * BigInt(n - k)) / BigInt(k + 1);
  }
  return build.sum(...terms);
}
