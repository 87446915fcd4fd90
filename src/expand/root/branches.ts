/** Where the roots start: their leading terms, each simple enough for Newton's iteration to go on. */
import type { Element } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, Q, substitute, walk } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { add, compareMonomials, growth, isZero, type Monomial, monomialOf, monomialSeries, type Multi, multiplyMonomials, scaleBy, Series, unitMonomial } from '../../series/index.ts';
import { evaluate } from '../evaluate.ts';
import { solveFor } from './explicit.ts';
import { infiniteStarts } from './infinite.ts';
import { polygonEdges } from './polygon.ts';
import type { Start } from './start.ts';
import { type Curve, separate, taylorAt } from './taylor.ts';
import { isMonotone, lambertSolutions } from './transcendental.ts';
import { zerosOf } from './zeros.ts';

const MOST_DEGREE = 24;
const DEEPEST = 8;

/** The starts of all branches that can be found; real ones only unless `complex`. `near`: a finite limit, or a sign for plus or minus infinity. */
export function startsOf(curve: Curve, near: Element | 1 | -1 | null, complex: boolean): Start[] {
  const c = curve.side.context;
  if (near === 1 || near === -1) {
    const whole = tryTaylor(curve, Q.ZERO);
    const found = whole?.complete ? explore(curve, Q.ZERO, whole.coefficients, null, complex, 0).filter((s) => growth(c, s.value) === 'large') : infiniteStarts(curve);
    return found.filter((s) => isLargeWithSign(curve, s.value, near));
  }
  if (near !== null) return atLimit(curve, near, complex);
  const atZero = tryTaylor(curve, Q.ZERO);
  if (atZero?.complete) return explore(curve, Q.ZERO, atZero.coefficients, null, complex, 0);
  const limits = finiteLimits(curve);
  const finite = limits.values.flatMap((y) => atLimit(curve, y, complex));
  const toZero = finite.some((s) => growth(c, s.value) === 'small');
  // Roots that tend to 0 are ends of the real line to `infiniteStarts` too.
  const found = [...finite, ...infiniteStarts(curve).filter((s) => !toZero || growth(c, s.value) !== 'small')];
  if (!limits.complete) c.notes.assumptions.add(`other real roots may exist; name the value that ${curve.unknown} tends to`);
  return found.length > 0 ? found : explicitStart(curve);
}

/** The principal root where the unknown occurs once. */
function explicitStart(curve: Curve): Start[] {
  const parts = separate(curve);
  const tree = parts && solveFor(parts.left, curve.unknown, parts.right);
  return tree ? [{ value: evaluate(curve.side.session, tree), multiplicity: 1, exact: true }] : [];
}

function isLargeWithSign(curve: Curve, value: Multi, sign: 1 | -1): boolean {
  const lead = monomialOf(curve.side.context, value);
  return lead !== null && growth(curve.side.context, value) === 'large' && curve.side.context.field.sign(lead.constant) === sign;
}

function tryTaylor(curve: Curve, base: Multi): ReturnType<typeof taylorAt> | null {
  try {
    return taylorAt(curve, base, MOST_DEGREE);
  } catch (error) {
    if (error instanceof Declined && error.failure.code === 'no-expansion') return null;
    throw error;
  }
}

/** Branches that tend to the finite value. At a pole of A in A(y) = B(t) the equation 1/A = 1/B is used. */
function atLimit(curve: Curve, limit: Element, complex: boolean, reciprocal = false): Start[] {
  const c = curve.side.context;
  const taylor = tryTaylor(curve, limit);
  if (!taylor) {
    const parts = reciprocal ? null : separate(curve);
    if (!parts) return [];
    const tree = build.difference(build.power(parts.left, -1), build.power(parts.right, -1));
    return atLimit({ ...curve, tree }, limit, complex, true).map((s) => ({ ...s, tree }));
  }
  const { coefficients } = taylor;
  const degree = coefficients.findIndex((a) => dominates(curve, a, coefficients));
  if (degree < 0) throw new Declined('no-expansion', 'The equation is too degenerate at this value of the unknown; name another value.');
  if (degree === 0) return [];
  return explore(curve, limit, coefficients.slice(0, degree + 1), unitMonomial, complex, 0).filter((s) => growth(c, add(c, s.value, scaleBy(c, limit, Q.MINUS_ONE))) !== 'finite');
}

/** Whether the coefficient is at least as large as all others. */
function dominates(curve: Curve, a: Multi, all: readonly Multi[]): boolean {
  const c = curve.side.context;
  const lead = monomialOf(c, a);
  if (!lead) return false;
  return all.every((b) => {
    const other = monomialOf(c, b);
    return !other || compareMonomials(c, other, lead) <= 0;
  });
}

/** Follows Newton's polygon from base + smaller, splitting multiple leading coefficients further. */
function explore(curve: Curve, base: Multi, coefficients: readonly Multi[], bound: Monomial | null, complex: boolean, depth: number): Start[] {
  const c = curve.side.context;
  c.budget.check();
  if (depth > DEEPEST) throw new Declined('undecided', 'Two roots agree in so many terms that they could not be told apart; factor the equation.');
  const first = coefficients.findIndex((a) => !vanishes(curve, a));
  if (first < 0) throw new Declined('bad-request', 'The equation holds for every value of the unknown; correct it.');
  const starts: Start[] = first > 0 ? [{ value: base, multiplicity: first, exact: true }] : [];
  for (const edge of polygonEdges(c, coefficients.slice(first), bound)) {
    for (const zero of zerosOf(c, edge.polynomial, complex)) {
      if (!zero.real && !complex) continue;
      const value = add(c, base, monomialSeries(c, multiplyMonomials(c, edge.size, { constant: zero.value, factors: [] })));
      if (zero.multiplicity === 1) starts.push({ value, multiplicity: 1, exact: false });
      else {
        const next = taylorAt(curve, value, MOST_DEGREE);
        starts.push(...explore(curve, value, next.coefficients.slice(0, zero.multiplicity + 1), edge.size, complex, depth + 1));
      }
    }
  }
  return starts;
}

const vanishes = (curve: Curve, a: Multi): boolean => (a instanceof Series ? monomialOf(curve.side.context, a) === null : isZero(curve.side.context, a));

/** Functions that take each value once on the real line, or nowhere. */
const ONE_TO_ONE = new Set(['exp', 'log', 'sinh', 'tanh', 'expm1', 'log1p']);

/** The real solution of an equation for constants in which the unknown occurs once, under functions that are one to one. */
function onlySolution(curve: Curve, limit: Expression): Element | null {
  const { field } = curve.side.context;
  let occurrences = 0;
  for (const node of walk(limit)) {
    if (node.kind === 'symbol' && node.name === curve.unknown) occurrences += 1;
    if (!dependsOn(node, curve.unknown)) continue;
    if (node.kind === 'call' && !ONE_TO_ONE.has(node.function)) return null;
    if (node.kind === 'power' && dependsOn(node.base, curve.unknown) && !(node.exponent.kind === 'number' && node.exponent.value.num % 2n !== 0n)) return null;
    if (node.kind === 'root' && !(node.degree.kind === 'number' && node.degree.value.den === 1n)) return null;
  }
  const tree = occurrences === 1 ? solveFor(limit, curve.unknown, build.number(0)) : null;
  if (!tree) return null;
  try {
    const value = field.fromExpression(tree);
    const check = field.isZero(field.fromExpression(substitute(limit, curve.unknown, field.toExpression(value))));
    return check === 'yes' && field.isReal(value) === 'yes' ? value : null;
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}

/** Finite values that roots can tend to, and whether they are all. */
interface Limits {
  readonly values: readonly Element[];
  readonly complete: boolean;
}

/** Zeros of the leading coefficient of F at fixed y, where that is a polynomial, is solved by Lambert's W, or takes each value once; else 0 alone, if it is one. */
function finiteLimits(curve: Curve): Limits {
  const { context: c, session } = curve.side;
  const f = evaluate(session, curve.tree);
  const lead = monomialOf(c, f);
  if (!lead) throw new Declined('bad-request', 'The equation holds for every value of the unknown; correct it.');
  if (!c.field.parameters(lead.constant).includes(curve.unknown)) return { values: [], complete: !hasPoles(curve) };
  const limit = c.field.toExpression(lead.constant);
  const inner = tryTaylor({ ...curve, tree: limit }, Q.ZERO);
  if (!inner?.complete) {
    const value = onlySolution(curve, limit);
    if (value) return { values: [value], complete: true };
    const all = lambertSolutions(c, limit, curve.unknown) ?? zerosOfFactors(curve, limit);
    if (all) return { values: all, complete: true };
  }
  if (!inner) return { values: [], complete: false };
  const constants = inner.coefficients.map((a) => (a instanceof Series ? Q.ZERO : a));
  const zero: Element[] = constants[0] !== undefined && isZero(c, constants[0]) ? [Q.ZERO] : [];
  if (!inner.complete) return { values: zero, complete: zero.length > 0 && isMonotone(c, limit, curve.unknown) };
  return { values: [...zero, ...zerosOf(c, constants, false).filter((z) => z.real).map((z) => z.value)], complete: true };
}

/** All real zeros of a product whose factors are one to one each; null for anything else. */
function zerosOfFactors(curve: Curve, limit: Expression): Element[] | null {
  if (limit.kind !== 'product') return null;
  const values = limit.factors.filter((f) => dependsOn(f, curve.unknown)).map((f) => onlySolution(curve, f));
  return values.some((v) => v === null) ? null : values.flatMap((v) => v ?? []);
}

/** Functions without a pole or a singular end at a finite argument. */
const WITHOUT_POLES = new Set(['exp', 'sin', 'cos', 'sinh', 'cosh', 'tanh', 'atan', 'asinh', 'erf', 'erfc', 'abs']);

/** Whether the unknown may stay finite while the equation grows without bound, other than at 0. */
function hasPoles(curve: Curve): boolean {
  for (const node of walk(curve.tree)) {
    if (!dependsOn(node, curve.unknown)) continue;
    if (node.kind === 'call' && !WITHOUT_POLES.has(node.function) && !(['log', 'sqrt'].includes(node.function) && node.args[0]?.kind === 'symbol')) return true;
    if (node.kind === 'quotient' && dependsOn(node.denominator, curve.unknown) && node.denominator.kind !== 'symbol') return true;
    if (node.kind === 'power' && dependsOn(node.base, curve.unknown) && node.base.kind !== 'symbol' && !(node.exponent.kind === 'number' && Q.signOf(node.exponent.value) > 0)) return true;
  }
  return false;
}
