/**
 * Definite integrals of P(v) q(v)^r with a polynomial P, a quadratic q that is positive on the whole real line, and r a negative whole number or half of an odd number.
 * In w, q = a w^2 + g with a, g > 0: reduction formulas down to an arctangent, an area sine or a power (Abramowitz & Stegun 3.3.16, 3.3.21 ff., from memory).
 */
import type { Element } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, Q, type Rational, substitute } from '../../expression/index.ts';
import type { Context } from '../../series/index.ts';
import { type PowerSum, powersOf } from './powers.ts';
import type { ClosedInterval } from './uniform.ts';

const TWO = Q.rational(2);
const MOST_REDUCTIONS = 60n;

/** Null where the integrand is of another form or q is not proven positive. */
export function byQuadratic(c: Context, body: Expression, { variable: v, low, high }: ClosedInterval): Element | null {
  const { field } = c;
  const found: Found = { polynomial: [], quadratic: null, exponent: Q.ZERO };
  if (!sort(c, body, v, Q.ONE, found) || !found.quadratic || !isReducible(found.exponent)) return null;
  const of = (p: PowerSum, n: number): Element => p.terms.find((t) => Q.equal(t.exponent, Q.rational(n)))?.coefficient ?? Q.ZERO;
  const [g0, b, a] = [0, 1, 2].map((n) => of(found.quadratic as PowerSum, n)) as [Element, Element, Element];
  if (field.sign(a) !== 1) return null;
  const middle = field.divide(b, field.multiply(TWO, a));
  const g = field.subtract(g0, field.multiply(a, field.multiply(middle, middle)));
  if (field.sign(g) !== 1) return null;
  const shifted = build.difference(build.symbol(v), field.toExpression(middle));
  const numerator = powersOf(field, substitute(build.product(...found.polynomial), v, shifted), v);
  if (!numerator || numerator.terms.some((t) => t.exponent.den !== 1n || t.exponent.num < 0n || t.exponent.num > MOST_REDUCTIONS)) return null;
  const moment = reduction(c, a, g, [low, high].map((end) => field.add(field.fromExpression(end), middle)) as [Element, Element]);
  return numerator.terms.reduce<Element>((total, t) => field.add(total, field.multiply(t.coefficient, moment(t.exponent.num, found.exponent))), Q.ZERO);
}

interface Found {
  readonly polynomial: Expression[];
  quadratic: PowerSum | null;
  exponent: Rational;
}

const isReducible = (r: Rational): boolean => (r.den === 2n || (r.den === 1n && r.num < 0n)) && Q.compare(Q.absolute(r), Q.rational(MOST_REDUCTIONS)) < 0;

/** Factors into the polynomial part and powers of one quadratic. */
function sort(c: Context, e: Expression, v: string, exponent: Rational, into: Found): boolean {
  const plain = exponent.den === 1n && exponent.num >= 0n;
  if (!dependsOn(e, v)) {
    into.polynomial.push(build.power(e, exponent));
    return true;
  }
  if (e.kind === 'product' && exponent.den === 1n) return e.factors.every((f) => sort(c, f, v, exponent, into));
  if (e.kind === 'negation' && exponent.den === 1n) return sort(c, build.number(-1), v, exponent, into) && sort(c, e.operand, v, exponent, into);
  if (e.kind === 'quotient' && exponent.den === 1n) return sort(c, e.numerator, v, exponent, into) && sort(c, e.denominator, v, Q.negate(exponent), into);
  if (e.kind === 'power' && !dependsOn(e.exponent, v)) {
    const own = c.field.asRational(c.field.fromExpression(e.exponent));
    // q > 0 is shown later: powers of its powers multiply.
    if (own && (own.den === 2n || own.den === 1n)) return sort(c, e.base, v, Q.multiply(own, exponent), into);
  }
  const powers = powersOf(c.field, e, v);
  if (!powers) return false;
  if (plain) {
    into.polynomial.push(build.power(e, exponent));
    return true;
  }
  const degree = powers.terms.reduce((most, t) => (Q.compare(t.exponent, most) > 0 ? t.exponent : most), Q.ZERO);
  if (!Q.equal(degree, TWO) || powers.terms.some((t) => t.exponent.den !== 1n || t.exponent.num < 0n)) return false;
  if (into.quadratic && !sameSum(c, into.quadratic, powers)) return false;
  into.quadratic = powers;
  into.exponent = Q.add(into.exponent, exponent);
  return true;
}

const sameSum = (c: Context, a: PowerSum, b: PowerSum): boolean =>
  a.terms.length === b.terms.length && a.terms.every((x) => b.terms.some((y) => Q.equal(x.exponent, y.exponent) && c.field.equal(x.coefficient, y.coefficient) === 'yes'));

/** (n, r) -> the integral of w^n (a w^2 + g)^r between the ends. */
function reduction(c: Context, a: Element, g: Element, ends: readonly [Element, Element]): (n: bigint, r: Rational) => Element {
  const { field } = c;
  const y = (w: Element): Element => field.add(field.multiply(a, field.multiply(w, w)), g);
  const between = (f: (w: Element) => Element): Element => field.subtract(f(ends[1]), f(ends[0]));
  const whole = (w: Element, n: bigint): Element => (n === 0n ? Q.ONE : field.power(w, Q.rational(n)));
  const moment = (n: bigint, r: Rational): Element => {
    c.budget.check();
    const next = Q.add(r, Q.ONE);
    const ratio = field.divide(g, a);
    if (Q.isZero(r)) return field.divide(between((w) => whole(w, n + 1n)), Q.rational(n + 1n));
    if (r.num > 0n) {
      const before = Q.subtract(r, Q.ONE);
      return field.add(field.multiply(a, moment(n + 2n, before)), field.multiply(g, moment(n, before)));
    }
    if (n === 1n) {
      const doubled = field.multiply(TWO, a);
      return Q.isZero(next) ? field.divide(between((w) => field.log(y(w))), doubled) : field.divide(between((w) => field.power(y(w), next)), field.multiply(doubled, next));
    }
    const half = Q.equal(r, Q.rational(-1, 2));
    if (n >= 2n && half) {
      const boundary = between((w) => field.multiply(whole(w, n - 1n), field.power(y(w), Q.HALF)));
      return field.divide(field.subtract(field.divide(boundary, a), field.multiply(Q.rational(n - 1n), field.multiply(ratio, moment(n - 2n, r)))), Q.rational(n));
    }
    if (n >= 2n) return field.subtract(field.divide(moment(n - 2n, next), a), field.multiply(ratio, moment(n - 2n, r)));
    const scale = field.power(field.divide(a, g), Q.HALF);
    if (half) return field.divide(between((w) => field.call('asinh', [field.multiply(w, scale)])), field.power(a, Q.HALF));
    if (Q.isZero(next)) return field.divide(between((w) => field.call('atan', [field.multiply(w, scale)])), field.power(field.multiply(a, g), Q.HALF));
    const boundary = between((w) => field.multiply(w, field.power(y(w), next)));
    const above = field.multiply(Q.add(Q.multiply(TWO, r), Q.rational(3)), moment(0n, next));
    return field.divide(field.subtract(above, boundary), field.multiply(field.multiply(TWO, g), next));
  };
  return moment;
}
