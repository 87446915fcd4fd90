/** Definite integrals with an elementary antiderivative: sums of powers (and logarithms) of v or of a linear function of it, square roots and quotients of one quadratic, and sums of powers times exponentials and oscillations (so also products of powers of sines and cosines: Wallis, DLMF 4.26). */
import type { Element, Field } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, mapChildren, Q, type Rational, sameExpression, substitute, walk } from '../../expression/index.ts';
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
  return byLogarithm(c, body, over) ?? byLinear(c, body, over) ?? byQuadratic(c, body, over) ?? overModes(c, body, over);
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
    const within = { variable, low: at(low), high: at(high) };
    // The function itself where it stands, so that its logarithm is one of the new variable.
    const turned = substitute(replaced(body, node, build.symbol(LINE)), variable, back);
    const inLine = substitute(turned, LINE, build.symbol(variable));
    const powers = powersOf(field, inLine, variable);
    const value = powers ? overPowers(c, powers, within) : byLogarithm(c, inLine, within);
    if (value) return field.divide(value, slope.coefficient);
  }
  return null;
}

const LINE = "line'0";
const LOGARITHM = "log'0";

const replaced = (e: Expression, old: Expression, by: Expression): Expression => (sameExpression(e, old) ? by : mapChildren(e, (child) => replaced(child, old, by)));

/** Sums of powers of v and of log v, over v >= 0; null for others. */
function byLogarithm(c: Context, body: Expression, over: ClosedInterval): Element | null {
  const { field } = c;
  const v = over.variable;
  const marked = replaced(body, build.call('log', build.symbol(v)), build.symbol(LOGARITHM));
  if (!dependsOn(marked, LOGARITHM)) return null;
  const [low, high] = [over.low, over.high].map((end) => field.fromExpression(end)) as [Element, Element];
  if (![low, high].every((end) => field.sign(end) === 0 || field.sign(end) === 1)) return null;
  const byPower = powersOf(field, marked, LOGARITHM);
  if (!byPower || byPower.positive) return null;
  let total: Element = Q.ZERO;
  for (const { exponent: k, coefficient } of byPower.terms) {
    const powers = k.den === 1n && k.num >= 0n ? powersOf(field, field.toExpression(coefficient), v) : null;
    if (!powers) return null;
    for (const term of powers.terms) {
      const n = Q.add(term.exponent, Q.ONE);
      if (n.num <= 0n) return null;
      const at = (end: Element): Element => (isZero(c, end) ? Q.ZERO : logarithmicPrimitive(field, end, n, k.num));
      total = addElements(c, total, multiplyElements(c, term.coefficient, field.subtract(at(high), at(low))));
    }
  }
  return total;
}

/** The antiderivative of w^(n-1) log(w)^k that vanishes at 0, by parts. */
function logarithmicPrimitive(field: Field, w: Element, n: Rational, k: bigint): Element {
  const log = field.log(w);
  let value: Element = field.divide(field.power(w, n), n);
  let power: Element = value;
  for (let j = 1n; j <= k; j += 1n) {
    power = field.multiply(power, log);
    value = field.subtract(power, field.multiply(Q.divide(Q.rational(j), n), value));
  }
  return value;
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
