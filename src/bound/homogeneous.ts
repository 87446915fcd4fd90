/**
 * Free parameters by scaling: where f(c^a x; c) = c^b f(x; 1), and the sum, the point and the interval scale alike, the bound is c^b times the bound for c = 1.
 * The exponents are guessed from values and then proved by the field's zero test.
 */
import { type Assumption, build, type Expression, freeSymbols, Q, type Rational, substitute } from '../expression/index.ts';
import type { Expansion, ExpansionTerm } from '../expand/index.ts';
import { describe } from '../functions/index.ts';
import { encloseReal, real } from '../rigorous/index.ts';
import { sumOf } from './local.ts';
import { isExactlyZero } from './region.ts';
import type { BoundProblem } from './types.ts';

export interface Scaled {
  readonly problem: BoundProblem;
  readonly factor: Expression;
}

const isInfinite = (e: Expression): boolean => (e.kind === 'constant' && e.name === 'infinity') || (e.kind === 'negation' && isInfinite(e.operand));
const one = build.number(1);

/** The problem with the parameter set to 1 and the factor that takes its place; null where the problem is not homogeneous in it. */
export function scaleOut(problem: BoundProblem, parameter: string, variable: string): Scaled | null {
  const { expansion, interval, assumptions } = problem;
  const positive = assumptions.some((a) => a.kind === 'relation' && isPositiveRelation(a, parameter));
  const nonzero = positive || assumptions.some((a) => a.kind === 'relation' && a.relation === '!=' && [a.left, a.right].some((side) => side.kind === 'symbol' && side.name === parameter));
  const marks = [interval.lower, interval.upper, ...(typeof expansion.point === 'object' ? [expansion.point] : [])].filter((e) => !isInfinite(e));
  const set = (e: Expression, value: Expression): Expression => substitute(e, parameter, value);
  const others = new Map(freeSymbols(expansion.function).filter((name) => name !== variable && name !== parameter).map((name, k) => [name, 1.25 + 0.375 * k] as const));
  const valueAt = (e: Expression, c: number, x: number): number | null => {
    const environment = new Map([...others, [parameter, c] as const, [variable, x] as const].map(([name, v]) => [name, real.fromDouble(v)] as const));
    const value = encloseReal(e, environment, 80, describe);
    return value === null ? null : real.toDouble(value);
  };
  const exponentOf = (before: number | null, after: number | null): Rational | null => {
    if (before === null || after === null || before === 0 || after === 0 || before > 0 !== after > 0) return null;
    const guess = Math.round((12 * Math.log(after / before)) / Math.log(2));
    return Math.abs(guess / 12 - Math.log(after / before) / Math.log(2)) < 1e-6 ? Q.rational(guess, 12) : null;
  };
  const candidates: Rational[] = [];
  const known = marks.map((mark) => [valueAt(mark, 1, 0.5), valueAt(mark, 2, 0.5)] as const).filter(([a, b]) => a !== 0 || b !== 0);
  if (known.length > 0) {
    const [first] = known;
    const guess = first ? exponentOf(first[0], first[1]) : null;
    if (guess === null) return null;
    candidates.push(guess);
  } else candidates.push(Q.ZERO, Q.ONE, Q.MINUS_ONE, Q.HALF, Q.rational(-1, 2), Q.rational(2), Q.rational(-2));
  const c = build.symbol(parameter);
  const facts: readonly Assumption[] = positive ? assumptions : [...assumptions];
  const zero = (e: Expression): boolean => isExactlyZero(e, facts);
  for (const a of candidates) {
    if (!Q.isZero(a) && !positive) continue;
    const stretch = build.power(c, a);
    const scaledVariable = Q.isZero(a) ? build.symbol(variable) : build.product(stretch, build.symbol(variable));
    const stretched = 2 ** Q.toDouble(a);
    const b = exponentOf(valueAt(expansion.function, 1, 0.375), valueAt(expansion.function, 2, 0.375 * stretched)) ?? exponentOf(valueAt(expansion.function, 1, 3.25), valueAt(expansion.function, 2, 3.25 * stretched));
    if (b === null || (!positive && !(Q.isInteger(b) && nonzero) && !(Q.isInteger(b) && b.num >= 0n))) continue;
    const factor = build.power(c, b);
    const scales = (e: Expression): boolean => zero(build.difference(substitute(e, variable, scaledVariable), build.product(factor, set(e, one))));
    if (!marks.every((mark) => zero(build.difference(mark, build.product(stretch, set(mark, one)))))) continue;
    if (!scales(expansion.function) || !scales(sumOf(expansion))) continue;
    if (expansion.left && !(scales(expansion.left.function) && scales(sumOf(expansion.left)))) continue;
    const size = Q.isZero(b) || problem.measure === 'relative' ? one : positive ? plainPower(c, b) : plainPower(build.call('abs', c), b);
    return { problem: { ...problem, expansion: withParameter(expansion, set), interval: { lower: set(interval.lower, one), upper: set(interval.upper, one) } }, factor: size };
  }
  return null;
}

const plainPower = (c: Expression, b: Rational): Expression => (Q.isOne(b) ? c : build.power(c, b));

function isPositiveRelation(a: Extract<Assumption, { kind: 'relation' }>, parameter: string): boolean {
  const own = (e: Expression): boolean => e.kind === 'symbol' && e.name === parameter;
  const nonNegative = (e: Expression): boolean => e.kind === 'number' && e.value.num >= 0n;
  const positive = (e: Expression): boolean => e.kind === 'number' && e.value.num > 0n;
  if (own(a.left)) return (a.relation === '>' && nonNegative(a.right)) || ((a.relation === '>=' || a.relation === '=') && positive(a.right));
  return own(a.right) && ((a.relation === '<' && nonNegative(a.left)) || ((a.relation === '<=' || a.relation === '=') && positive(a.left)));
}

function withParameter(expansion: Expansion, set: (e: Expression, value: Expression) => Expression): Expansion {
  const put = (e: Expression): Expression => set(e, one);
  const maybe = (e: Expression | null): Expression | null => e && put(e);
  const term = (t: ExpansionTerm): ExpansionTerm => ({ ...t, coefficient: put(t.coefficient), power: put(t.power), scale: maybe(t.scale) });
  return {
    ...expansion,
    function: put(expansion.function),
    point: typeof expansion.point === 'object' ? put(expansion.point) : expansion.point,
    local: put(expansion.local),
    logarithm: put(expansion.logarithm),
    prefactor: maybe(expansion.prefactor),
    terms: expansion.terms.map(term),
    remainder: expansion.remainder && { ...expansion.remainder, power: maybe(expansion.remainder.power), scale: maybe(expansion.remainder.scale) },
    ...(expansion.left ? { left: withParameter(expansion.left, set) } : {}),
  };
}
