/** A quantity made of several symbols (v/c, \hbar\omega/(k_B T)) taken as one variable. */
import { build, dependsOn, type Expression, mapChildren, Q, type Rational, sameExpression, substitute } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { plainText } from '../series/index.ts';
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
  if (problem.variable.kind === 'apply') return inValue(problem, problem.variable, expandInner);
  const parsed = factorsOf(problem.variable);
  // The first symbol with a positive power carries the variation: v = u c for v/c.
  const carrier = parsed?.factors.find((f) => Q.signOf(f.exponent) > 0 && parsed.factors.filter((g) => g.symbol === f.symbol).length === 1);
  if (!parsed || !carrier) throw new Declined('bad-request', 'The variable must be a symbol or a product of powers of symbols, such as v/c.');
  const name = "u'";
  const rest = [...parsed.constants, ...parsed.factors.filter((f) => f !== carrier).map((f) => build.power(build.symbol(f.symbol), f.exponent))];
  const solved = build.product(build.symbol(name), ...rest.map((r) => build.power(r, -1)));
  const replacement = Q.isOne(carrier.exponent) ? solved : build.power(solved, Q.reciprocal(carrier.exponent));
  const inner = withMonomialsJoined(substitute(problem.function, carrier.symbol, replacement), name);
  if (!dependsOn(inner, name)) throw new Declined('bad-request', 'The formula does not contain the chosen quantity; choose another variable.');
  const back = (e: Expression): Expression => (e.kind === 'symbol' ? (e.name === name ? problem.variable : e) : mapChildren(e, back));
  const found = expandInner({ ...problem, function: inner, variable: build.symbol(name) });
  return { ...rewrite(found, back), function: problem.function, variable: problem.variable, inOneSymbol: found };
}

/** u c/c as u: what the other symbols of the quantity cancel in is free of them, and has values. Whole powers only, so that no branch is crossed. */
function withMonomialsJoined(e: Expression, name: string): Expression {
  if (!dependsOn(e, name)) return e;
  const factors = isWholeMonomial(e) ? factorsOf(e) : null;
  if (!factors) return mapChildren(e, (child) => withMonomialsJoined(child, name));
  const exponents = new Map<string, Rational>();
  for (const f of factors.factors) exponents.set(f.symbol, Q.add(exponents.get(f.symbol) ?? Q.ZERO, f.exponent));
  return build.product(...factors.constants, ...[...exponents].filter(([, x]) => !Q.isZero(x)).map(([symbol, x]) => build.power(build.symbol(symbol), x)));
}

function isWholeMonomial(e: Expression): boolean {
  switch (e.kind) {
    case 'symbol':
    case 'number':
    case 'constant':
      return true;
    case 'product':
      return e.factors.every(isWholeMonomial);
    case 'quotient':
      return isWholeMonomial(e.numerator) && isWholeMonomial(e.denominator);
    case 'power':
      return isWholeMonomial(e.base) && e.exponent.kind === 'number' && e.exponent.value.den === 1n;
    default:
      return false;
  }
}

/** A value of an unspecified function, such as theta(t), taken as one quantity; its derivatives are quantities of their own. */
function inValue(problem: ExpansionProblem, value: Expression, expandInner: (inner: ExpansionProblem) => Expansion): Expansion {
  const name = "u'";
  const inner = replaced(problem.function, value, build.symbol(name));
  if (!dependsOn(inner, name)) throw new Declined('bad-request', 'The formula does not contain the chosen quantity; choose another variable.');
  const back = (e: Expression): Expression => replaced(e, build.symbol(name), value);
  const point = typeof problem.point === 'object' ? replaced(problem.point, value, build.symbol(name)) : problem.point;
  const found = expandInner({ ...problem, function: inner, variable: build.symbol(name), point });
  return { ...rewrite(found, back, plainText(value)), function: problem.function, variable: value, inOneSymbol: found };
}

/** Every occurrence of one tree replaced by another. */
function replaced(e: Expression, from: Expression, to: Expression): Expression {
  const visit = (node: Expression): Expression => (node.kind === from.kind && sameExpression(node, from) ? to : mapChildren(node, visit));
  return visit(e);
}

/** All trees of the expansion mapped; assumptions name the quantity by `shown`. */
export function rewrite(x: Expansion, back: (e: Expression) => Expression, shown = 'u'): Expansion {
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
    ...(x.general ? { general: back(x.general) } : {}),
    assumptions: x.assumptions.map((a) => a.replaceAll("u'", shown)),
    ...(x.left ? { left: rewrite(x.left, back, shown) } : {}),
    ...(x.branches ? { branches: x.branches.map((b) => rewrite(b, back, shown)) } : {}),
  };
}
