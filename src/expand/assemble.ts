/** From the terms of one side to the Expansion that everybody reads. */
import { build, type Expression, Q } from '../expression/index.ts';
import { type Context, exactOf, isRational, negateElement, addElements } from '../series/index.ts';
import type { Expansion, ExpansionProblem, ExpansionRemainder, ExpansionTerm } from './expansion.ts';
import { factorTree, type RawTerm } from './flatten.ts';
import type { Direction } from './open-side.ts';
import type { SideResult } from './side.ts';
import { excludesValuesOfFresh } from './session.ts';

const one = build.number(1);

export function assemble(problem: ExpansionProblem, direction: Direction | 'both', side: SideResult, assumptions: readonly string[]): Expansion {
  const c = side.context;
  const { local, logarithm } = localTrees(problem, direction);
  const lead = side.terms[0] ?? side.remainder;
  const prefactor = lead && lead.factors.length > 0 && !lead.oscillation ? lead : null;
  const negative = direction === '-inf';
  const finite = direction !== 'inf' && direction !== '-inf';
  const shapes = { c, finite, negative, prefactor, toVariable: side.toVariable };
  const oscillating = side.terms.some((t) => t.oscillation !== null) || side.remainder?.oscillation != null;
  const exact = side.remainder === null;
  return {
    function: problem.function,
    variable: problem.variable,
    point: problem.point,
    side: direction === 'left' || direction === 'right' ? direction : 'both',
    local,
    logarithm,
    prefactor: prefactor ? prefactorTree(shapes, prefactor) : null,
    terms: side.terms.map((t) => termOf(shapes, t)),
    remainder: side.remainder ? remainderOf(shapes, side.remainder) : null,
    exact,
    divergent: c.notes.divergent && side.remainder !== null,
    oscillating,
    assumptions: [...new Set([...assumptions, ...c.notes.assumptions, ...[...c.field.needed].filter((a) => !mentions(a, c.local) && !excludesValuesOfFresh(a))])],
  };
}

const mentions = (assumption: string, symbol: string): boolean => assumption.includes(symbol) && symbol.includes("'");

/** The trees of t and L in the variable. */
function localTrees(problem: ExpansionProblem, direction: Direction | 'both'): { local: Expression; logarithm: Expression } {
  const x = problem.variable;
  if (direction === 'inf') return { local: build.quotient(one, x), logarithm: build.call('log', x) };
  if (direction === '-inf') return { local: build.quotient(one, x), logarithm: build.call('log', build.negation(x)) };
  const a = problem.point as Expression;
  const atZero = a.kind === 'number' && Q.isZero(a.value);
  const local = direction === 'left' ? (atZero ? build.negation(x) : build.difference(a, x)) : atZero ? x : build.sum(x, opposite(a));
  return { local, logarithm: build.call('log', direction === 'both' ? build.call('abs', local) : local) };
}

function opposite(e: Expression): Expression {
  if (e.kind === 'negation') return e.operand;
  return e.kind === 'number' && e.value.num < 0n ? build.number(Q.negate(e.value)) : build.negation(e);
}

interface Shapes {
  readonly c: Context;
  readonly finite: boolean;
  /** At minus infinity t = 1/x is negative while the series is in 1/(-x). */
  readonly negative: boolean;
  readonly prefactor: RawTerm | null;
  readonly toVariable: (e: Expression) => Expression;
}

/** The leading monomial with its coefficient and scales, in the variable. */
function prefactorTree(s: Shapes, t: RawTerm): Expression {
  const { c } = s;
  const parts: Expression[] = [];
  const coefficient = exactOf(c, t.coefficient);
  if (!build.isOneNumber(coefficient)) parts.push(coefficient);
  if (!(isRational(t.power) && t.power.num === 0n)) parts.push(s.toVariable(build.power(c.scale.local.expression, exactOf(c, t.power))));
  if (t.log !== 0) parts.push(s.toVariable(build.power(c.scale.largeLogarithm, t.log)));
  const scale = factorTree(c, t.factors);
  if (scale) parts.push(s.toVariable(scale));
  return build.product(...parts);
}

interface Monomial {
  readonly coefficient: Expression;
  readonly power: Expression;
  readonly log: number;
  readonly scale: Expression | null;
}

/** Divides by the prefactor, and turns log(1/t) into L and powers of |t| into powers of t. */
function monomialOf(s: Shapes, t: RawTerm): Monomial {
  const { c, prefactor: p } = s;
  let coefficient = p ? c.field.divide(t.coefficient, p.coefficient) : t.coefficient;
  const power = p ? addElements(c, t.power, negateElement(c, p.power)) : t.power;
  const log = t.log - (p?.log ?? 0);
  const factors = p ? dividedFactors(c, t.factors, p.factors) : t.factors;
  if (s.finite && log % 2 !== 0) coefficient = negateElement(c, coefficient);
  const scales: Expression[] = [];
  let shown: Expression = exactOf(c, power);
  if (s.negative && !(isRational(power) && power.num === 0n)) {
    if (isRational(power) && power.den === 1n) {
      if (power.num % 2n !== 0n) coefficient = negateElement(c, coefficient);
    } else {
      scales.push(s.toVariable(build.power(build.symbol(c.local), exactOf(c, negateElement(c, power)))));
      shown = build.number(0);
    }
  }
  const scale = factorTree(c, factors);
  if (scale) scales.push(s.toVariable(scale));
  if (t.oscillation) scales.push(s.toVariable(t.oscillation));
  return { coefficient: exactOf(c, coefficient), power: shown, log, scale: scales.length > 0 ? build.product(...scales) : null };
}

function dividedFactors(c: Context, a: RawTerm['factors'], b: RawTerm['factors']): RawTerm['factors'] {
  const result = a.map((f) => {
    const other = b.find((g) => g.element === f.element);
    return other ? { element: f.element, exponent: addElements(c, f.exponent, negateElement(c, other.exponent)) } : f;
  });
  for (const g of b) if (!a.some((f) => f.element === g.element)) result.push({ element: g.element, exponent: negateElement(c, g.exponent) });
  return result.filter((f) => !(isRational(f.exponent) && f.exponent.num === 0n)).sort((x, y) => y.element.rank - x.element.rank);
}

const termOf = (s: Shapes, t: RawTerm): ExpansionTerm => monomialOf(s, t);

/** The size of the first term left out, without its coefficient and oscillation. */
function remainderOf(s: Shapes, t: RawTerm): ExpansionRemainder {
  const prefactor = s.prefactor && { ...s.prefactor, coefficient: Q.ONE };
  const { power, log, scale } = monomialOf({ ...s, prefactor }, { ...t, coefficient: Q.ONE, oscillation: null });
  const isPower = scale === null || !(power.kind === 'number' && Q.isZero(power.value));
  return { power: isPower ? power : null, log, scale };
}
