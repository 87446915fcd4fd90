/** Functions like cos(sqrt(x)): made of square roots of the local variable, and yet analytic. */
import { createField } from '../algebra/index.ts';
import { build, children, dependsOn, type Expression, mapChildren, Q, type Rational, substitute } from '../expression/index.ts';
import { type Budget, budget, Declined } from '../outcome.ts';
import { evaluate } from './evaluate.ts';
import type { ExpansionProblem } from './expansion.ts';
import { openSide } from './open-side.ts';

const T = "t'";
const R = "r'";

/**
 * Proof that f = F(r) with r the principal square root of t = x - a, F meromorphic at r = 0 and even: f is then a Laurent series in t, the same on both sides.
 * F is got by writing r^2 for t and r^p for principal powers t^(p/2); no step of its expansion may depend on r being positive, and F(r) = F(-r) must hold in the field.
 */
export function isEvenInRoot(problem: ExpansionProblem, time: Budget): boolean {
  const { point, variable } = problem;
  if (typeof point !== 'object' || variable.kind !== 'symbol') return false;
  const shifted = point.kind === 'number' && Q.isZero(point.value) ? substitute(problem.function, variable.name, build.symbol(T)) : withOffset(problem.function, variable.name, point, build.symbol(T));
  const inRoot = rewritten(shifted, T, build.symbol(R));
  if (!dependsOn(inRoot, R) || !isMeromorphic(inRoot, R)) return false;
  try {
    const side = openSide({ variable: build.symbol(R), point: build.number(0), assumptions: problem.assumptions }, 'right', time);
    evaluate(side.session, side.fromVariable(inRoot));
    if (side.context.notes.sided || side.context.notes.onReal) return false;
    const { field } = side.context;
    const vanishes = (e: Expression): boolean => field.isZero(field.fromExpression(e)) === 'yes';
    return vanishes(build.difference(inRoot, mirrored(inRoot, vanishes)));
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return false;
    throw error;
  }
}

/** x = a + t, with x - a written as t. */
function withOffset(e: Expression, x: string, a: Expression, t: Expression): Expression {
  const key = JSON.stringify(a, (_, v: unknown) => (typeof v === 'bigint' ? v.toString() : v));
  const same = (b: Expression): boolean => JSON.stringify(b, (_, v: unknown) => (typeof v === 'bigint' ? v.toString() : v)) === key;
  const isNumber = (b: Expression, value: Rational): boolean => b.kind === 'number' && Q.equal(b.value, value);
  const opposite = (b: Expression): boolean => (b.kind === 'negation' && (same(b.operand) || (a.kind === 'number' && isNumber(b.operand, a.value)))) || (a.kind === 'number' && isNumber(b, Q.negate(a.value)));
  const visit = (node: Expression): Expression => {
    if (node.kind === 'symbol') return node.name === x ? build.sum(a, t) : node;
    if (node.kind === 'sum' && node.terms.length === 2) {
      const [first, second] = node.terms;
      if (first?.kind === 'symbol' && first.name === x && second && opposite(second)) return t;
    }
    return mapChildren(node, visit);
  };
  return visit(e);
}

/** r^2 for t; principal powers of t that are multiples of 1/2 become powers of r. */
function rewritten(e: Expression, t: string, r: Expression): Expression {
  const isT = (node: Expression | undefined): boolean => node?.kind === 'symbol' && node.name === t;
  const visit = (node: Expression): Expression => {
    const arc = node.kind === 'call' && node.args[0] ? arcInRoot(node.function, node.args[0], t, r) : null;
    if (arc) return arc;
    if (isT(node)) return build.power(r, 2);
    if (node.kind === 'call' && node.function === 'sqrt' && isT(node.args[0])) return r;
    if (node.kind === 'root' && isT(node.radicand) && node.degree.kind === 'number' && node.degree.value.num === 2n && node.degree.value.den === 1n) return r;
    if (node.kind === 'power' && isT(node.base) && node.exponent.kind === 'number' && node.exponent.value.den === 2n) return build.power(r, Q.multiply(node.exponent.value, Q.rational(2)));
    return mapChildren(node, visit);
  };
  return visit(e);
}

/**
 * acos(1 - 2c r^2) = 2 asin(sqrt(c) r), acosh(1 + 2c r^2) = 2 asinh(sqrt(c) r), and their complements at -1 and for asin (DLMF 4.23.19, 4.24.13 and 4.38.15, from memory).
 * For c < 0 the value beyond the branch point is right up to the sign of the root, which an even function does not see.
 */
function arcInRoot(id: string, argument: Expression, t: string, r: Expression): Expression | null {
  if (id !== 'acos' && id !== 'asin' && id !== 'acosh') return null;
  try {
    return arcOfLinear(id, argument, t, r);
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}

function arcOfLinear(id: 'acos' | 'asin' | 'acosh', argument: Expression, t: string, r: Expression): Expression | null {
  const field = createField([], budget(1000));
  const symbol = field.fromExpression(build.symbol(t));
  const speed = (end: 1 | -1): Expression | null => {
    const half = field.multiply(Q.HALF, field.subtract(Q.ONE, field.multiply(Q.rational(end), field.fromExpression(argument))));
    const c = field.divide(half, symbol);
    return field.parameters(c).includes(t) || field.isZero(c) !== 'no' ? null : field.toExpression(c);
  };
  const [right, left] = [speed(1), speed(-1)];
  const c = right ?? left;
  if (!c) return null;
  if (id === 'acosh') return right ? build.product(build.number(2), build.call('asinh', build.product(build.squareRoot(build.negation(right)), r))) : null;
  const angle = build.product(build.number(2), build.call('asin', build.product(build.squareRoot(c), r)));
  const pi = build.constant('pi');
  if (id === 'acos') return right ? angle : build.difference(pi, angle);
  const quarter = build.quotient(pi, build.number(2));
  return right ? build.difference(quarter, angle) : build.difference(angle, quarter);
}

/** The tree at -r, with the parity of Bessel functions of whole order used (DLMF 10.4.1, 10.27.1, from memory). */
function mirrored(e: Expression, vanishes: (e: Expression) => boolean): Expression {
  if (e.kind === 'symbol') return e.name === R ? build.negation(e) : e;
  const [order, argument] = e.kind === 'call' ? e.args : [];
  if (e.kind === 'call' && (e.function === 'besselJ' || e.function === 'besselI') && order?.kind === 'number' && order.value.den === 1n && argument) {
    const other = mirrored(argument, vanishes);
    if (vanishes(build.sum(argument, other))) return order.value.num % 2n === 0n ? e : build.negation(e);
  }
  return mapChildren(e, (child) => mirrored(child, vanishes));
}

/** Meromorphic in the whole plane (in the last argument). */
const MEROMORPHIC = new Set(['exp', 'sin', 'cos', 'tan', 'cot', 'sec', 'csc', 'sinh', 'cosh', 'tanh', 'coth', 'sech', 'csch', 'erf', 'erfc', 'sinc', 'gamma', 'digamma', 'airyAi', 'airyBi', 'dawson', 'sinIntegral', 'besselJ', 'besselI']);
/** Analytic around 0 in the form that their principal values have there. */
const REGULAR_AT_ZERO = new Set(['asin', 'atan', 'asinh', 'atanh', 'log1p', 'expm1']);

/** Sums, products, whole powers and calls whose composition is meromorphic near r = 0 for complex r. */
function isMeromorphic(e: Expression, r: string): boolean {
  if (!dependsOn(e, r)) return true;
  const inside = (): boolean => children(e).every((child) => isMeromorphic(child, r));
  switch (e.kind) {
    case 'symbol':
      return true;
    case 'sum':
    case 'product':
    case 'quotient':
    case 'negation':
      return inside();
    case 'power':
      return (e.base.kind === 'constant' && e.base.name === 'e' ? true : e.exponent.kind === 'number' && e.exponent.value.den === 1n) && inside();
    case 'call': {
      const last = e.args[e.args.length - 1];
      if (!last || e.args.some((a) => a !== last && dependsOn(a, r))) return false;
      if (MEROMORPHIC.has(e.function)) return inside();
      if (REGULAR_AT_ZERO.has(e.function)) return isMultiple(last, r) && inside();
      return (e.function === 'log' || e.function === 'sqrt') && last.kind === 'sum' && last.terms.some((t) => t.kind === 'number' && t.value.num > 0n) && last.terms.every((t) => t.kind === 'number' || isMultiple(t, r));
    }
    default:
      return false;
  }
}

/** A polynomial in r without constant term, by form. */
function isMultiple(e: Expression, r: string): boolean {
  if (e.kind === 'symbol') return e.name === r;
  if (e.kind === 'negation') return isMultiple(e.operand, r);
  if (e.kind === 'power') return e.base.kind === 'symbol' && e.base.name === r && e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num > 0n;
  if (e.kind === 'product') return e.factors.every((f) => !dependsOn(f, r) || isMultiple(f, r)) && dependsOn(e, r);
  return e.kind === 'quotient' && !dependsOn(e.denominator, r) && isMultiple(e.numerator, r);
}
