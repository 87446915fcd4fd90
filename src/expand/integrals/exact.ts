/** Definite integrals with an elementary antiderivative: sums of powers of v and of a linear function of it, square roots and quotients of one quadratic, and sums of powers times exponentials and oscillations (so also products of powers of sines and cosines: Wallis, DLMF 4.26). */
import type { Element } from '../../algebra/types.ts';
import { build, type Expression, Q, substitute, walk } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { addElements, type Context, isRational, isZero, multiplyElements, negateElement } from '../../series/index.ts';
import { type ExponentialPolynomial, exponentOf, modesOf, treeOf } from '../differential/exponential-polynomial.ts';
import { addPolynomials, derivativeOf, type Polynomial, scalePolynomial } from '../differential/operator.ts';
import { refuse } from './polynomial.ts';
import { type PowerSum, powersOf } from './powers.ts';
import { byQuadratic } from './quadratic.ts';
import type { ClosedInterval } from './uniform.ts';

/** Exact. Throws Declined where the antiderivative is none of those above or the integral does not exist. */
export function exactIntegral(c: Context, body: Expression, over: ClosedInterval): Element {
  const powers = powersOf(c.field, body, over.variable);
  if (powers) return overPowers(c, powers, over);
  return byLinear(c, body, over) ?? byQuadratic(c, body, over) ?? overModes(c, body, over);
}

function overPowers(c: Context, { terms, positive }: PowerSum, { low, high }: ClosedInterval): Element {
  const { field } = c;
  const ends = [low, high].map((end) => field.fromExpression(end)) as [Element, Element];
  const signs = ends.map((end) => field.sign(end));
  const inside = signs.every((x) => x === 1) || signs.every((x) => x === -1);
  const notNegative = signs.every((x) => x === 0 || x === 1);
  let total: Element = Q.ZERO;
  for (const { exponent, coefficient } of terms) {
    if (isZero(c, coefficient)) continue;
    const n = Q.add(exponent, Q.ONE);
    const whole = exponent.den === 1n && exponent.num >= 0n;
    const exists = whole && !positive ? true : n.num > 0n ? notNegative : inside && (signs[0] === 1 || (exponent.den === 1n && !positive));
    if (!exists) throw refuse();
    const at = (end: Element): Element => (isZero(c, end) ? Q.ZERO : field.power(end, n));
    const moment = n.num === 0n ? field.log(field.divide(ends[1], ends[0])) : field.divide(field.subtract(at(ends[1]), at(ends[0])), n);
    total = addElements(c, total, multiplyElements(c, coefficient, moment));
  }
  return total;
}

/** Sums of powers of one linear function b + a v: that function is the new variable. Null for others. */
function byLinear(c: Context, body: Expression, { variable, low, high }: ClosedInterval): Element | null {
  const { field } = c;
  for (const node of walk(body)) {
    const line = node.kind === 'sum' ? powersOf(field, node, variable) : null;
    const slope = line?.terms.find((t) => Q.isOne(t.exponent));
    const constant = line?.terms.find((t) => Q.isZero(t.exponent));
    if (!slope || !constant || line?.terms.length !== 2 || field.isZero(slope.coefficient) !== 'no') continue;
    const at = (end: Expression): Expression => substitute(node, variable, end);
    const back = build.quotient(build.difference(build.symbol(variable), field.toExpression(constant.coefficient)), field.toExpression(slope.coefficient));
    const powers = powersOf(field, substitute(body, variable, back), variable);
    if (powers) return field.divide(overPowers(c, powers, { variable, low: at(low), high: at(high) }), slope.coefficient);
  }
  return null;
}

function overModes(c: Context, body: Expression, { variable, low, high }: ClosedInterval): Element {
  const { field, notes } = c;
  // The exponentials are complex on the way only.
  const before = notes.complex;
  const primitive = treeOf(c, antiderivative(c, modesIn(c, body, variable)), build.symbol(variable));
  const at = (end: Expression): Element => field.fromExpression(substitute(primitive, variable, end));
  const value = field.subtract(at(high), at(low));
  notes.complex = before || (!isRational(value) && field.isReal(value) !== 'yes');
  return value;
}

function modesIn(c: Context, body: Expression, variable: string): ExponentialPolynomial {
  try {
    return modesOf(c, body, variable, () => null);
  } catch (error) {
    if (error instanceof Declined && error.failure.code === 'no-expansion') throw refuse();
    throw error;
  }
}

/** Mode by mode: of p exp(lambda v) it is exp(lambda v) times the sum of (-1)^k p^(k)/lambda^(k+1). */
function antiderivative(c: Context, modes: ExponentialPolynomial): ExponentialPolynomial {
  return modes.map((mode) => {
    const rate = exponentOf(c, mode);
    if (isZero(c, rate)) return { ...mode, polynomial: [Q.ZERO, ...mode.polynomial.map((a, k) => multiplyElements(c, a, Q.rational(1, k + 1)))] };
    const inverse = c.field.divide(Q.ONE, rate);
    let [part, polynomial]: Polynomial[] = [scalePolynomial(c, mode.polynomial, inverse), []] as [Polynomial, Polynomial];
    while (part.length > 0) {
      polynomial = addPolynomials(c, polynomial, part);
      part = scalePolynomial(c, derivativeOf(c, part), negateElement(c, inverse));
    }
    return { ...mode, polynomial };
  });
}
