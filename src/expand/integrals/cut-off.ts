/**
 * The Mellin transform F(z) of a weight f(t) on (0, b): the continued integral of t^(-z) f, near one place z0.
 * - f a power of t times a power of log t: b^(a+1-z)/(a+1-z) and its derivatives by z, exact;
 * - f a sum of t^m exp(lambda t), lambda real or imaginary, m - z0 whole: the pole and the finite part (Hadamard), by parts from the exponential, sine and cosine integrals (DLMF 6.2.6, 6.2.9, 6.2.13);
 *   for m - z0 half an odd number and lambda real from the error function (DLMF 7.2.1).
 */
import type { Element } from '../../algebra/types.ts';
import { build, type Expression, Q, type Rational } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { addElements, type Context, isZero, multiplyElements } from '../../series/index.ts';
import { exponentOf, type Mode, modesOf } from '../differential/exponential-polynomial.ts';
import { SHIFT } from './complete.ts';
import { isPower, logarithmPower } from './growth-orders.ts';

export interface LocalMoment {
  /** In the shift e = z - z0. */
  readonly tree: Expression;
  /** Whether nothing is left out; else terms from e^1 on are. */
  readonly exact: boolean;
}

const unknown = (): Declined => new Declined('no-expansion', 'The moments of the integrand are not known in closed form; integrate first or split the integrand.');

/** `factors` depend on v alone (and parameters); b > 0 is `high`. Throws Declined for other weights. */
export function cutOffMoment(c: Context, factors: readonly Expression[], v: string, high: Expression, place: Element): LocalMoment {
  const { field } = c;
  const logarithms = factors.reduce((sum, f) => sum + logarithmPower(f, v), 0);
  const powers = factors.filter((f) => isPower(f, v));
  const rest = factors.filter((f) => !isPower(f, v) && logarithmPower(f, v) === 0);
  const [degree, constant] = monomial(c, powers, v);
  if (rest.length === 0) {
    const exponent = build.difference(field.toExpression(field.subtract(field.add(degree, Q.ONE), place)), build.symbol(SHIFT));
    let tree: Expression = build.product(field.toExpression(constant), build.quotient(build.power(high, exponent), exponent));
    for (let k = 0; k < logarithms; k += 1) {
      const slope = differentiate(tree, SHIFT);
      if (!slope) throw unknown();
      tree = build.negation(slope);
    }
    return { tree, exact: true };
  }
  const exponent = field.asRational(field.subtract(degree, place));
  if (logarithms > 0 || !exponent || exponent.den > 2n) throw unknown();
  const b = field.fromExpression(high);
  let [pole, finite]: [Element, Element] = [Q.ZERO, Q.ZERO];
  for (const mode of modesOf(c, build.product(...rest), v, () => null)) {
    const ladder = ladderOf(c, mode, b);
    mode.polynomial.forEach((a, j) => {
      const [p, f] = ladder(Q.add(exponent, Q.rational(j)));
      pole = addElements(c, pole, multiplyElements(c, a, p));
      finite = addElements(c, finite, multiplyElements(c, a, f));
    });
  }
  if ([pole, finite].some((e) => field.isReal(e) !== 'yes')) throw unknown();
  const scaled = [pole, finite].map((e) => field.toExpression(field.multiply(constant, e))) as [Expression, Expression];
  return { tree: build.sum(build.quotient(scaled[0], build.symbol(SHIFT)), scaled[1]), exact: false };
}

/** Degree and constant of a product of powers of v. */
function monomial(c: Context, powers: readonly Expression[], v: string): readonly [Element, Element] {
  const { field } = c;
  let [degree, constant]: [Element, Element] = [Q.ZERO, Q.ONE];
  const visit = (e: Expression, exponent: Element): void => {
    if (e.kind === 'symbol' && e.name === v) degree = field.add(degree, exponent);
    else if (e.kind === 'product') e.factors.forEach((f) => visit(f, exponent));
    else if (e.kind === 'quotient') {
      visit(e.numerator, exponent);
      visit(e.denominator, field.negate(exponent));
    } else if (e.kind === 'power' && isPower(e.base, v)) visit(e.base, field.multiply(exponent, field.fromExpression(e.exponent)));
    else constant = field.multiply(constant, field.power(field.fromExpression(e), exponent));
  };
  for (const f of powers) visit(f, Q.ONE);
  return [degree, constant];
}

/** n, in halves, -> coefficient of 1/e and finite part of the integral of t^(n-e) exp(lambda t) over (0, b). */
function ladderOf(c: Context, mode: Mode, b: Element): (n: Rational) => readonly [Element, Element] {
  const { field } = c;
  const rate = exponentOf(c, mode);
  const still = isZero(c, rate);
  const end = exponentialAt(c, mode, b);
  const known = new Map<string, Element>();
  /** Of t^(-1) in t^n exp(lambda t). */
  const weight = (n: Rational): Element => {
    let value: Element = Q.isInteger(n) && n.num < 0n ? Q.ONE : Q.ZERO;
    for (let k = 1n; k < -n.num && Q.isInteger(n); k += 1n) value = field.divide(field.multiply(value, rate), Q.rational(k));
    return value;
  };
  const finite = (n: Rational): Element => {
    const key = Q.toText(n);
    const found = known.get(key);
    if (found !== undefined) return found;
    c.budget.check();
    const value = computed(n);
    known.set(key, value);
    return value;
  };
  const computed = (n: Rational): Element => {
    const above = Q.add(n, Q.ONE);
    if (Q.isZero(above)) return firstIntegral(c, mode, b);
    const boundary = field.multiply(field.power(b, above), end);
    if (still) return field.divide(boundary, above);
    if (Q.equal(n, HALF_DOWN)) return errorIntegral(c, mode, b);
    if (above.num < 0n) return field.divide(field.subtract(field.subtract(boundary, weight(n)), field.multiply(rate, finite(above))), above);
    const below = Q.isZero(n) ? Q.ONE : field.multiply(n, finite(Q.subtract(n, Q.ONE)));
    return field.divide(field.subtract(field.multiply(field.power(b, n), end), below), rate);
  };
  return (n) => [field.negate(weight(n)), finite(n)];
}

const HALF_DOWN = Q.rational(-1, 2);

/** The integral of t^(-1/2) exp(lambda t) over (0, b), lambda real. */
function errorIntegral(c: Context, { re, im }: Mode, b: Element): Element {
  const { field } = c;
  const sign = field.sign(re);
  if (!isZero(c, im) || (sign !== 1 && sign !== -1)) throw unknown();
  const size = sign === 1 ? re : field.negate(re);
  const root = (e: Element): Element => field.power(e, Q.rational(1, 2));
  return field.multiply(root(field.divide(field.fromExpression(build.constant('pi')), size)), field.call(sign === 1 ? 'erfi' : 'erf', [root(field.multiply(size, b))]));
}

/** exp(lambda b). */
function exponentialAt(c: Context, { re, im }: Mode, b: Element): Element {
  const { field } = c;
  const [growth, angle] = [field.call('exp', [field.multiply(re, b)]), field.multiply(im, b)];
  return isZero(c, im) ? growth : field.multiply(growth, field.add(field.call('cos', [angle]), field.multiply(field.i, field.call('sin', [angle]))));
}

/** The finite part of the integral of exp(lambda t)/t over (0, b). */
function firstIntegral(c: Context, { re, im }: Mode, b: Element): Element {
  const { field } = c;
  const constant = (rate: Element): Element => field.add(field.fromExpression(build.constant('eulerGamma')), field.log(rate));
  const sign = field.sign(re);
  if (isZero(c, im)) {
    if (sign === 0) return field.log(b);
    if (sign !== 1 && sign !== -1) throw unknown();
    return field.subtract(field.call('expIntegralEi', [field.multiply(re, b)]), constant(sign === 1 ? re : field.negate(re)));
  }
  const turn = field.sign(im);
  if (!isZero(c, re) || (turn !== 1 && turn !== -1)) throw unknown();
  const frequency = turn === 1 ? im : field.negate(im);
  const angle = field.multiply(frequency, b);
  return field.add(field.subtract(field.call('cosIntegral', [angle]), constant(frequency)), field.multiply(field.multiply(field.i, Q.rational(turn)), field.call('sinIntegral', [angle])));
}
