/** Radius of convergence from the form of the function: all places where it can be singular, and a proof that the nearest one is. */
import type { Element } from '../algebra/types.ts';
import { build, dependsOn, type Expression, Q } from '../expression/index.ts';
import { type Budget, budget as newBudget, Declined } from '../outcome.ts';
import { compareExponents, type Context, imaginaryPart, isRational, isZero, realPart, Series } from '../series/index.ts';
import { evaluate } from './evaluate.ts';
import type { Expansion, ExpansionProblem } from './expansion.ts';
import { rawTerms } from './flatten.ts';
import { openSide } from './open-side.ts';
import { zerosOf } from './root/zeros.ts';

/** Points base + k step for all integers k; step null for one point. */
interface Family {
  readonly base: Element;
  readonly step: Element | null;
}

interface Search {
  readonly c: Context;
  readonly x: string;
  /** A polynomial tree in x as coefficients, lowest first; null if it is not one. */
  readonly polynomial: (e: Expression) => Element[] | null;
}

/** The time that may be spent, so that the expansion itself is never late. */
const MOST_MILLISECONDS = 1000;

/** Undefined where the radius is not proven. Only for functions of one symbol without parameters, at a finite point. */
export function radiusOf(problem: ExpansionProblem, budget: Budget): Expansion['radius'] {
  const { point, variable } = problem;
  if (point === 'inf' || point === '-inf' || variable.kind !== 'symbol') return undefined;
  try {
    const own = newBudget(Math.min(MOST_MILLISECONDS, Math.max(0, budget.remaining() / 2)));
    const side = openSide({ variable: build.symbol("z'"), point: build.number(0), assumptions: problem.assumptions }, 'right', own);
    const c = side.context;
    const search: Search = { c, x: variable.name, polynomial: (e) => polynomialOf(c, e, variable.name, own) };
    const families = singular(search, problem.function);
    if (!families) return undefined;
    if (families.length === 0) return { value: null };
    const center = c.field.fromExpression(point);
    const near = nearest(c, center, families);
    if (near === 'none') return { value: null };
    if (!near || !isSingularAt(problem, c.field.toExpression(near.at), own)) return undefined;
    return { value: c.field.toExpression(near.distance), nearest: c.field.toExpression(near.at) };
  } catch (error) {
    if (error instanceof Declined) return undefined;
    throw error;
  }
}

function polynomialOf(c: Context, e: Expression, x: string, budget: Budget): Element[] | null {
  const side = openSide({ variable: build.symbol(x), point: build.number(0), assumptions: [] }, 'right', budget);
  const m = evaluate(side.session, e);
  if (!(m instanceof Series)) return [c.field.fromExpression(e)];
  const found: Element[] = [];
  for (let k = 0; k < 12; k += 1) {
    const t = m.stream.at(k);
    if (!t) return found;
    if (t.order || t.coefficient instanceof Series || !isRational(t.exponent) || t.exponent.den !== 1n || t.exponent.num < 0n || t.exponent.num > 20n) return null;
    const power = Number(t.exponent.num);
    while (found.length <= power) found.push(Q.ZERO);
    found[power] = isRational(t.coefficient) ? t.coefficient : c.field.fromExpression(side.context.field.toExpression(t.coefficient));
  }
  return null;
}

const union = (parts: readonly (Family[] | null)[]): Family[] | null => (parts.some((p) => p === null) ? null : parts.flatMap((p) => p ?? []));
const ENTIRE = new Set(['exp', 'sin', 'cos', 'sinh', 'cosh', 'erf', 'erfc', 'expm1', 'cosm1', 'sinc', 'airyAi', 'airyBi', 'dawson', 'sinIntegral']);

/** Everywhere the function can fail to be analytic, on any branch; null where that is not known. */
function singular(s: Search, e: Expression): Family[] | null {
  if (!dependsOn(e, s.x)) return [];
  switch (e.kind) {
    case 'symbol':
      return [];
    case 'sum':
      return union(e.terms.map((t) => singular(s, t)));
    case 'product':
      return union(e.factors.map((f) => singular(s, f)));
    case 'negation':
      return singular(s, e.operand);
    case 'quotient':
      return union([singular(s, e.numerator), singular(s, e.denominator), zeros(s, e.denominator)]);
    case 'power': {
      const { base, exponent } = e;
      const whole = exponent.kind === 'number' && exponent.value.den === 1n && exponent.value.num >= 0n;
      if (!dependsOn(base, s.x)) return singular(s, exponent);
      return union([singular(s, base), singular(s, exponent), whole ? [] : zeros(s, base)]);
    }
    case 'call': {
      const [a] = e.args;
      if (e.args.length !== 1 || !a) return null;
      const inner = singular(s, a);
      if (ENTIRE.has(e.function)) return inner;
      const at = (values: readonly Expression[]): Family[] | null => union([inner, ...values.map((v) => zeros(s, build.difference(a, v)))]);
      const i = build.constant('i');
      const one = build.number(1);
      switch (e.function) {
        case 'log':
        case 'sqrt':
          return at([build.number(0)]);
        case 'log1p':
          return at([build.number(-1)]);
        case 'asin':
        case 'acos':
        case 'atanh':
        case 'acosh':
          return at([one, build.number(-1)]);
        case 'atan':
        case 'asinh':
          return at([i, build.negation(i)]);
        case 'tan':
        case 'sec':
          return union([inner, zeros(s, build.call('cos', a))]);
        case 'cot':
        case 'csc':
          return union([inner, zeros(s, build.call('sin', a))]);
        case 'tanh':
        case 'sech':
          return union([inner, zeros(s, build.call('cosh', a))]);
        case 'coth':
        case 'csch':
          return union([inner, zeros(s, build.call('sinh', a))]);
        default:
          return null;
      }
    }
    default:
      return null;
  }
}

/** All zeros of a tree; null where they are not known. */
function zeros(s: Search, e: Expression): Family[] | null {
  const { field } = s.c;
  if (!dependsOn(e, s.x)) return isZero(s.c, field.fromExpression(e)) ? null : [];
  if (e.kind === 'negation') return zeros(s, e.operand);
  if (e.kind === 'product') return union(e.factors.map((f) => zeros(s, f)));
  if (e.kind === 'quotient') return zeros(s, e.numerator);
  if (e.kind === 'power' && !dependsOn(e.exponent, s.x)) return zeros(s, e.base);
  if ((e.kind === 'power' && !dependsOn(e.base, s.x)) || (e.kind === 'call' && e.function === 'exp')) return [];
  const pi = field.fromExpression(build.constant('pi'));
  const half = field.multiply(pi, Q.HALF);
  if (e.kind === 'call' && e.args.length === 1 && e.args[0]) {
    const [a] = e.args;
    if (e.function === 'sin' || e.function === 'tan') return preimages(s, a, { base: Q.ZERO, step: pi });
    if (e.function === 'cos') return preimages(s, a, { base: half, step: pi });
    if (e.function === 'sinh' || e.function === 'tanh') return preimages(s, a, { base: Q.ZERO, step: field.multiply(field.i, pi) });
    if (e.function === 'cosh') return preimages(s, a, { base: field.multiply(field.i, half), step: field.multiply(field.i, pi) });
  }
  const exponential = e.kind === 'sum' ? exponentialZeros(s, e.terms) : null;
  if (exponential) return exponential;
  const p = s.polynomial(e);
  if (!p) return null;
  const own = zerosOf(s.c, p, true).map((z) => ({ base: z.value, step: null }));
  return p[0] !== undefined && isZero(s.c, p[0]) ? [...own, { base: Q.ZERO, step: null }] : own;
}

/** c exp(a) + b = 0 with linear a. */
function exponentialZeros(s: Search, terms: readonly Expression[]): Family[] | null {
  const moving = terms.filter((t) => dependsOn(t, s.x));
  const [only] = moving;
  if (moving.length !== 1 || !only) return null;
  const { field } = s.c;
  let factor: Expression = build.number(1);
  let core: Expression = only;
  for (;;) {
    if (core.kind === 'negation') {
      factor = build.negation(factor);
      core = core.operand;
    } else if (core.kind === 'product') {
      const inside = core.factors.filter((f) => dependsOn(f, s.x));
      const [inner] = inside;
      if (inside.length !== 1 || !inner) return null;
      factor = build.product(factor, ...core.factors.filter((f) => !dependsOn(f, s.x)));
      core = inner;
    } else break;
  }
  const exponent = core.kind === 'power' && core.base.kind === 'constant' && core.base.name === 'e' ? core.exponent : core.kind === 'call' && core.function === 'exp' ? core.args[0] : undefined;
  if (!exponent) return null;
  const value = field.divide(field.negate(field.fromExpression(build.sum(...terms.filter((t) => t !== only)))), field.fromExpression(factor));
  if (isZero(s.c, value)) return [];
  const turn = field.multiply(field.i, field.fromExpression(build.product(build.number(2), build.constant('pi'))));
  return preimages(s, exponent, { base: field.log(value), step: turn });
}

/** Where a linear tree takes the values of a family; null if it is not linear. */
function preimages(s: Search, a: Expression, values: Family): Family[] | null {
  const p = s.polynomial(a);
  const [constant = Q.ZERO, slope] = p ?? [];
  if (!p || p.length !== 2 || slope === undefined) return null;
  const { field } = s.c;
  return [{ base: field.divide(field.subtract(values.base, constant), slope), step: values.step && field.divide(values.step, slope) }];
}

/** The point nearest to the center other than itself; 'none' if there is none. */
function nearest(c: Context, center: Element, families: readonly Family[]): { at: Element; distance: Element } | 'none' | null {
  let best: { at: Element; square: Element } | null = null;
  for (const f of families) {
    const indices = f.step ? around(nearestIndex(c, center, f.base, f.step)) : [0n];
    if (!indices) return null;
    for (const k of indices) {
      const at = f.step ? c.field.add(f.base, c.field.multiply(f.step, Q.rational(k))) : f.base;
      const d = c.field.subtract(at, center);
      const re = realPart(c, d);
      const im = imaginaryPart(c, d);
      const square = c.field.add(c.field.multiply(re, re), c.field.multiply(im, im));
      // The center itself may be a pole: the radius is then that of the punctured disc.
      if (isZero(c, square)) continue;
      if (!best || compareExponents(c, square, best.square) < 0) best = { at, square };
    }
  }
  if (!best) return 'none';
  return { at: best.at, distance: c.field.power(best.square, Q.HALF) };
}

/** The squared distance is convex in the index: its least value, and the least one other than zero, lie at these. */
const around = (k: bigint | null): bigint[] | null => (k === null ? null : [k - 1n, k, k + 1n]);

/** The least k with |base + (k+1) step - center| >= |base + k step - center|, that is |step|^2 (2k + 1) + 2 Re((base - center) conj(step)) >= 0; null beyond 2^64. */
function nearestIndex(c: Context, center: Element, base: Element, step: Element): bigint | null {
  const { field } = c;
  const parts = (e: Element): [Element, Element] => [realPart(c, e), imaginaryPart(c, e)];
  const [u, v] = parts(step);
  const [a, b] = parts(field.subtract(base, center));
  const size = field.add(field.multiply(u, u), field.multiply(v, v));
  const slope = field.multiply(Q.rational(2), field.add(field.multiply(a, u), field.multiply(b, v)));
  const rises = (k: bigint): boolean => compareExponents(c, field.add(field.multiply(size, Q.rational(2n * k + 1n)), slope), Q.ZERO) >= 0;
  let low = -1n;
  let high = 0n;
  for (let reach = 1n; !rises(high); reach *= 2n) {
    if (reach > 1n << 64n) return null;
    low = high;
    high += reach;
  }
  for (let reach = 1n; rises(low); reach *= 2n) {
    if (reach > 1n << 64n) return null;
    high = low;
    low -= reach;
  }
  while (high - low > 1n) {
    const middle = (low + high) >> 1n;
    if (rises(middle)) high = middle;
    else low = middle;
  }
  return high;
}

/** Whether the function's expansion at the place shows a pole, a branch point or a logarithm. */
function isSingularAt(problem: ExpansionProblem, at: Expression, budget: Budget): boolean {
  const side = openSide({ variable: problem.variable, point: at, assumptions: problem.assumptions }, 'right', budget);
  const m = evaluate(side.session, side.fromVariable(problem.function));
  let count = 0;
  for (const t of rawTerms(side.context, m)) {
    const regular = t.factors.length === 0 && t.log === 0 && isRational(t.power) && t.power.den === 1n && t.power.num >= 0n;
    if (!regular) return true;
    count += 1;
    if (count >= 4) return false;
  }
  return false;
}
