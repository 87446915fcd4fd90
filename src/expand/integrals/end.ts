/**
 * What the end of an interval contributes to the integral of g(s) exp(-lambda psi(s)), or of g(s) exp(+-i lambda psi(s)), s > 0 the distance from the end: with psi = a s^p (1 + e(s)) and X = a lambda it is
 * the sum over powers n of [s^n](g (1+e)^(-(n+1)/p)) Gamma((n+1)/p)/p X^(-(n+1)/p), where log(s)^k in g stands for k derivatives by n of the rest.
 * Source: Lagrange's theorem in Watson's lemma; Olver, Asymptotics and Special Functions (1974), ch. 3, sections 3, 8 and 13 (from memory).
 */
import type { Element } from '../../algebra/types.ts';
import { Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import {
  add, addElements, binomial, compareExponents, type Context, isRational, isZero, leading, logarithm, monomialOf, type Multi, multiply, multiplyElements, negate, pi, power, powerTailOf, relativeTail, scaleBy,
  Series, signOfExponent, type Stream, streamIn, sumOfSeries,
} from '../../series/index.ts';

/** Turned: the real and imaginary part of the integral with exp(i sign lambda psi) are found. */
export interface Contribution {
  readonly sum: Multi;
  /** Of the imaginary part; zero where nothing is turned. */
  readonly imaginary: Multi;
  /** Whether the sum has finitely many terms. */
  readonly finite: boolean;
}

export const transfer = (to: Context, from: Context, e: Element): Element => (isRational(e) ? e : to.field.fromExpression(from.field.toExpression(e)));

/** `c` is the context of lambda, `own` that of psi and g. `turned` is the sign of i in exp(i sign lambda psi), null for exp(-lambda psi). */
export function atEnd(c: Context, own: Context, psi: Multi, g: Multi, lambda: Multi, turned: 1 | -1 | null): Contribution {
  const refuse = (): Declined => new Declined('no-expansion', 'The exponent of the integrand has no power series at its extremum; split the integral.');
  if (!(psi instanceof Series) || psi.element !== own.scale.local) throw refuse();
  const lead = leading(own, psi);
  if (!lead || lead.coefficient instanceof Series || signOfExponent(own, lead.exponent) <= 0) throw refuse();
  const slope = lead.coefficient;
  const p = lead.exponent;
  const rest = relativeTail(own, psi, lead);
  const weights = streamIn(g, own.scale.local);
  // The exponents n that can occur: those of g times any power of 1 + e.
  const support = productOf(own, weights, powerTailOf(own, rest, Q.MINUS_ONE));
  const inverse = own.field.divide(Q.ONE, p);
  const element = monomialOf(c, lambda)?.factors[0]?.element;
  if (!element) throw new Error('an unbounded parameter without a scale');
  const { field } = own;
  const logarithmOfPhase = logTailOf(own, rest);
  const memo = new Map<number, readonly [Multi, Multi]>();
  const part = (k: number): readonly [Multi, Multi] => {
    const known = memo.get(k);
    if (known) return known;
    const found = computed(k);
    memo.set(k, found);
    return found;
  };
  const computed = (k: number): readonly [Multi, Multi] => {
    const n = support.at(k);
    if (!n) return [Q.ZERO, Q.ZERO];
    if (n.order) throw new Declined('no-expansion', 'An O-term stands inside the integral; integrate the terms before it.');
    const order = multiplyElements(own, addElements(own, n.exponent, Q.ONE), inverse);
    if (field.sign(order) !== 1) throw new Declined('no-expansion', 'The integral diverges at the end that matters most; correct it.');
    // byLogarithms[m]: coefficient of the m-th derivative by the order of Gamma(order) X^(-order).
    const byDerivative: Element[] = [];
    let factor: Stream | null = powerTailOf(own, rest, field.negate(order));
    const most = logarithmDegree(own, weights, n.exponent);
    for (let i = 0; i <= most && factor !== null; i += 1) {
      const powers = logarithmPowers(own, coefficientAt(own, productOf(own, weights, factor), n.exponent));
      powers.forEach((a, power_) => {
        if (power_ < i) return;
        const m = power_ - i;
        const weight = multiplyElements(own, multiplyElements(own, a, Q.rational(binomial(power_, i))), field.power(inverse, Q.rational(power_ + 1)));
        byDerivative[m] = addElements(own, byDerivative[m] ?? Q.ZERO, i % 2 === 0 ? weight : field.negate(weight));
      });
      factor = logarithmOfPhase === null ? null : productOf(own, factor, logarithmOfPhase);
    }
    const scale = power(c, lambda, transfer(c, own, field.negate(order)));
    const size = field.power(slope, field.negate(order));
    const logarithmOfScale = byDerivative.length > 1 ? add(c, logarithm(c, lambda), transfer(c, own, field.log(slope))) : Q.ZERO;
    const angle = turned === null ? Q.ZERO : field.multiply(Q.rational(-turned, 2), pi(own));
    let [real, imaginary]: [Multi, Multi] = [Q.ZERO, Q.ZERO];
    byDerivative.forEach((a, m) => {
      // (d/dorder)^m Gamma X^(-order) = X^(-order) sum binomial Gamma^(i) (-log|X| - i angle)^(m - i).
      for (let i = 0; i <= m; i += 1) {
        const derivative = multiplyElements(own, gammaDerivative(own, order, i), Q.rational(binomial(m, i)));
        let [re, im]: [Multi, Multi] = [Q.ONE, Q.ZERO];
        for (let j = i; j < m; j += 1) {
          const theta = transfer(c, own, angle);
          [re, im] = [add(c, negate(c, multiply(c, re, logarithmOfScale)), scaleBy(c, im, theta)), add(c, negate(c, multiply(c, im, logarithmOfScale)), negate(c, scaleBy(c, re, theta)))];
        }
        const weight = transfer(c, own, multiplyElements(own, a, derivative));
        real = add(c, real, scaleBy(c, re, weight));
        imaginary = add(c, imaginary, scaleBy(c, im, weight));
      }
    });
    // X^(-order) = |X|^(-order) exp(-i angle order).
    const front = transfer(c, own, size);
    const value: [Multi, Multi] = [scaleBy(c, multiply(c, scale, real), front), scaleBy(c, multiply(c, scale, imaginary), front)];
    if (turned === null) return value;
    const turn = field.negate(field.multiply(angle, order));
    const [cosine, sine] = ['cos', 'sin'].map((f) => transfer(c, own, field.call(f, [turn]))) as [Element, Element];
    return [add(c, scaleBy(c, value[0], cosine), scaleBy(c, value[1], field.negate(sine))), add(c, scaleBy(c, value[0], sine), scaleBy(c, value[1], cosine))];
  };
  const exists = (k: number): boolean => support.at(k) !== null;
  const empty = [0, 0];
  const counted = (k: number, which: 0 | 1): Multi => {
    const value = part(k)[which];
    empty[which] = value instanceof Series || !isZero(c, value) ? 0 : (empty[which] ?? 0) + 1;
    if ((empty[which] ?? 0) > MOST_TERMS) throw new Declined('undecided', 'It could not be decided whether an end of the integral contributes anything; split the integral there.');
    return value;
  };
  const finite = rest.at(0) === null && weights.at(0) !== null && endsSoon(weights);
  return { sum: sumOfSeries(c, element, (k) => counted(k, 0), exists), imaginary: turned === null ? Q.ZERO : sumOfSeries(c, element, (k) => counted(k, 1), exists), finite };
}

const MOST_TERMS = 40;

function endsSoon(stream: Stream): boolean {
  for (let k = 0; k < MOST_TERMS; k += 1) if (stream.at(k) === null) return true;
  return false;
}

/** The stream of log(1 + e); null where e is zero. */
function logTailOf(c: Context, e: Stream): Stream | null {
  if (e.at(0) === null) return null;
  const one: Multi = Q.ONE;
  const value = logarithm(c, add(c, one, new Series(c.scale.local, e, () => ({ kind: 'dots' }))));
  return value instanceof Series ? streamIn(value, c.scale.local) : null;
}

function productOf(c: Context, a: Stream, b: Stream): Stream {
  return streamIn(multiply(c, new Series(c.scale.local, a, () => ({ kind: 'dots' })), new Series(c.scale.local, b, () => ({ kind: 'dots' }))), c.scale.local);
}

function coefficientAt(c: Context, stream: Stream, exponent: Element): Multi {
  for (let k = 0; ; k += 1) {
    const term = stream.at(k);
    if (!term) return Q.ZERO;
    const sign = compareExponents(c, term.exponent, exponent);
    if (sign > 0) return Q.ZERO;
    if (sign === 0) return term.coefficient;
  }
}

/** The greatest power of log s in the terms up to that exponent. */
function logarithmDegree(c: Context, stream: Stream, exponent: Element): number {
  let most = 0;
  for (let k = 0; ; k += 1) {
    const term = stream.at(k);
    if (!term || compareExponents(c, term.exponent, exponent) > 0) return most;
    most = Math.max(most, logarithmPowers(c, term.coefficient).length - 1);
  }
}

/** A polynomial in log s by its coefficients. */
function logarithmPowers(c: Context, m: Multi): Element[] {
  if (!(m instanceof Series)) return isZero(c, m) ? [] : [m];
  const refuse = (): Declined => new Declined('no-expansion', 'Only whole powers of a logarithm at the end that matters most are expanded; split the integral.');
  if (m.element.kind !== 'logarithm' || m.element.depth !== 1) throw refuse();
  const found: Element[] = [];
  for (let k = 0; k < MOST_TERMS; k += 1) {
    const t = m.stream.at(k);
    if (!t) return found;
    const exponent = c.field.asRational(t.exponent);
    if (t.order || t.coefficient instanceof Series || exponent?.den !== 1n || exponent.num > 0n) throw refuse();
    // The scale element is 1/log(1/s).
    const n = -Number(exponent.num);
    while (found.length <= n) found.push(Q.ZERO);
    found[n] = n % 2 === 0 ? t.coefficient : c.field.negate(t.coefficient);
  }
  throw refuse();
}

/** The n-th derivative of Gamma, by those of its logarithm. */
function gammaDerivative(c: Context, z: Element, n: number): Element {
  const { field } = c;
  const derivatives: Element[] = [field.call('gamma', [z])];
  for (let k = 1; k <= n; k += 1) {
    let sum: Element = Q.ZERO;
    for (let j = 0; j < k; j += 1) {
      const psi = j === 0 ? field.call('digamma', [z]) : field.call('polygamma', [Q.rational(j), z]);
      sum = field.add(sum, field.multiply(field.multiply(Q.rational(binomial(k - 1, j)), psi), derivatives[k - 1 - j] as Element));
    }
    derivatives.push(sum);
  }
  return derivatives[n] as Element;
}
