/** An expansion as functions of the variable: its partial sum, and the size of what it leaves out. */
import { build, type Expression, Q } from '../expression/index.ts';
import type { Expansion, ExpansionRemainder } from './expansion.ts';

const isZero = (e: Expression): boolean => e.kind === 'number' && Q.isZero(e.value);

function monomial(x: Expansion, coefficient: Expression | null, power: Expression | null, log: number, scale: Expression | null, absolute: boolean): Expression {
  const size = (e: Expression): Expression => (absolute ? build.call('abs', e) : e);
  const factors: Expression[] = [];
  if (coefficient && !build.isOneNumber(coefficient)) factors.push(coefficient);
  if (power && !isZero(power)) factors.push(raised(size(x.local), power));
  if (log !== 0) factors.push(raised(size(x.logarithm), build.number(log)));
  if (scale) factors.push(scale);
  return build.product(...factors);
}

const raised = (base: Expression, exponent: Expression): Expression => (build.isOneNumber(exponent) ? base : build.power(base, exponent));

/** prefactor * sum of the terms, in the variable; 0 where there are none. */
export function partialSum(x: Expansion): Expression {
  const inner = build.sum(...x.terms.map((t) => monomial(x, t.coefficient, t.power, t.log, t.scale, false)));
  return x.prefactor ? build.product(x.prefactor, inner) : inner;
}

/** The function that the remainder is O of: |t|^p |L|^k times scales and the prefactor's size; 0 for an exact sum. Positive near the point. */
export function remainderScale(x: Expansion): Expression {
  if (!x.remainder) return build.number(0);
  const inner = monomial(x, null, x.remainder.power, x.remainder.log, x.remainder.scale, true);
  return x.prefactor ? build.product(build.call('abs', x.prefactor), inner) : inner;
}

/** The same expansion cut after n terms (n at least 0); unchanged where it has no more than that. The `left` side and `branches` are cut too. */
export function prefix(x: Expansion, n: number): Expansion {
  const next = x.terms[n];
  const sides = { ...(x.left ? { left: prefix(x.left, n) } : {}), ...(x.branches ? { branches: x.branches.map((b) => prefix(b, n)) } : {}) };
  if (!next) return { ...x, ...sides };
  const remainder: ExpansionRemainder = { power: next.power, log: next.log, scale: x.oscillating ? null : next.scale };
  return { ...x, ...sides, terms: x.terms.slice(0, n), remainder, exact: false };
}
