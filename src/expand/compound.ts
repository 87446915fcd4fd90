/** A quantity made of several symbols (v/c, \hbar\omega/(k_B T)) taken as one variable. */
import { build, dependsOn, type Expression, mapChildren, Q, type Rational, substitute } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import type { Expansion, ExpansionProblem, ExpansionRemainder, ExpansionTerm } from './expansion.ts';

interface Factor {
  readonly symbol: string;
  readonly exponent: Rational;
}

/** Symbols of a product of powers, and the rest without symbols. */
function factorsOf(e: Expression, exponent: Rational = Q.ONE): { factors: Factor[]; constants: Expression[] } | null {
  const join = (parts: readonly (ReturnType<typeof factorsOf>)[]): ReturnType<typeof factorsOf> =>
    parts.reduce<ReturnType<typeof factorsOf>>((all, p) => (all && p ? { factors: [...all.factors, ...p.factors], constants: [...all.constants, ...p.constants] } : null), { factors: [], constants: [] });
  switch (e.kind) {
    case 'symbol':
      return { factors: [{ symbol: e.name, exponent }], constants: [] };
    case 'number':
    case 'constant':
      return { factors: [], constants: [build.power(e, exponent)] };
    case 'product':
      return join(e.factors.map((f) => factorsOf(f, exponent)));
    case 'quotient':
      return join([factorsOf(e.numerator, exponent), factorsOf(e.denominator, Q.negate(exponent))]);
    case 'power':
      return e.exponent.kind === 'number' ? factorsOf(e.base, Q.multiply(exponent, e.exponent.value)) : null;
    default:
      return null;
  }
}

/** Expands in a fresh symbol u that stands for the quantity, and writes the quantity back for u. */
export function inCompound(problem: ExpansionProblem, expandInner: (inner: ExpansionProblem) => Expansion): Expansion {
  const parsed = factorsOf(problem.variable);
  // The first symbol with a positive power carries the variation: v = u c for v/c.
  const carrier = parsed?.factors.find((f) => Q.signOf(f.exponent) > 0 && parsed.factors.filter((g) => g.symbol === f.symbol).length === 1);
  if (!parsed || !carrier) throw new Declined('bad-request', 'The variable must be a symbol or a product of powers of symbols, such as v/c.');
  const name = "u'";
  const rest = [...parsed.constants, ...parsed.factors.filter((f) => f !== carrier).map((f) => build.power(build.symbol(f.symbol), f.exponent))];
  const solved = build.product(build.symbol(name), ...rest.map((r) => build.power(r, -1)));
  const replacement = Q.isOne(carrier.exponent) ? solved : build.power(solved, Q.reciprocal(carrier.exponent));
  const inner = substitute(problem.function, carrier.symbol, replacement);
  if (!dependsOn(inner, name)) throw new Declined('bad-request', 'The formula does not contain the chosen quantity; choose another variable.');
  const back = (e: Expression): Expression => (e.kind === 'symbol' ? (e.name === name ? problem.variable : e) : mapChildren(e, back));
  return { ...rewrite(expandInner({ ...problem, function: inner, variable: build.symbol(name) }), back), function: problem.function, variable: problem.variable };
}

/** All trees of the expansion mapped. */
export function rewrite(x: Expansion, back: (e: Expression) => Expression): Expansion {
  const maybe = (e: Expression | null): Expression | null => e && back(e);
  const term = (t: ExpansionTerm): ExpansionTerm => ({ ...t, scale: maybe(t.scale), coefficient: back(t.coefficient) });
  const remainder = (r: ExpansionRemainder): ExpansionRemainder => ({ ...r, scale: maybe(r.scale) });
  return {
    ...x,
    local: back(x.local),
    logarithm: back(x.logarithm),
    prefactor: maybe(x.prefactor),
    terms: x.terms.map(term),
    remainder: x.remainder && remainder(x.remainder),
    assumptions: x.assumptions.map((a) => a.replaceAll("u'", 'u')),
    ...(x.left ? { left: rewrite(x.left, back) } : {}),
    ...(x.branches ? { branches: x.branches.map((b) => rewrite(b, back)) } : {}),
  };
}
