/**
 * Bessel functions whose order and argument grow together: J, Y of x = nu + delta (the transition region), J, Y, I, K of x = nu lambda.
 * Sources: DLMF 10.9.17, 10.9.18, 10.19.3 to 10.19.8, 10.41.3 to 10.41.10; Watson, Theory of Bessel Functions, 8.21, 8.42 (from memory).
 */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { call, cos, exp, gamma, lift, log, minus, neg, over, pi, plus, pow, q, sin, sqrt, square, times } from '../compose.ts';
import type { FormalSeries, FunctionDescription, LocalForm, Together } from '../description.ts';
import { F1, F2, form, series } from '../formal.ts';
import { factorial } from '../sequences.ts';

type Kind = 'J' | 'Y' | 'I' | 'K';
/** Coefficients by power, lowest first. */
type Polynomial = readonly Rational[];

/** The polynomials U_k(p) of DLMF 10.41.10, from the one before. */
const debye: Polynomial[] = [[Q.ONE]];
function debyePolynomial(k: number): Polynomial {
  while (debye.length <= k) {
    const u = debye[debye.length - 1] ?? [];
    const next: Rational[] = Array.from({ length: u.length + 3 }, () => Q.ZERO);
    const put = (power: number, value: Rational): void => void (next[power] = Q.add(next[power] ?? Q.ZERO, value));
    // U_(k+1) = p^2 (1 - p^2) U_k' / 2 + (1/8) times the integral of (1 - 5 t^2) U_k from 0 to p.
    u.forEach((c, j) => {
      put(j + 1, Q.multiply(c, Q.add(Q.rational(j, 2), Q.rational(1, 8 * (j + 1)))));
      put(j + 3, Q.negate(Q.multiply(c, Q.add(Q.rational(j, 2), Q.rational(5, 8 * (j + 3))))));
    });
    debye.push(next);
  }
  return debye[k] ?? [];
}

/** sum of c_j p^j, term by term with weights. */
const valueAt = (c: Polynomial, p: Expression, weight: (j: number) => Rational = () => Q.ONE): Expression => plus(...c.flatMap((a, j) => (Q.isZero(a) ? [] : [times(Q.multiply(a, weight(j)), pow(p, j))])));

/** sum of signs^k U_k(p)/nu^k. */
const debyeSeries = (nu: Expression, p: Expression, sign: 1 | -1): FormalSeries =>
  series(over(1, nu), (k) => valueAt(debyePolynomial(k), p, () => (sign === -1 && k % 2 === 1 ? Q.MINUS_ONE : Q.ONE)), { divergent: true });

/** Members U_k(i c)/nu^k of one parity; the odd ones are multiplied by -i, so that all are real. */
const oscillatingSeries = (nu: Expression, c: Expression, parity: 0 | 1): FormalSeries =>
  series(over(1, nu), (k) => (k % 2 === parity ? valueAt(debyePolynomial(k), c, (j) => (Math.floor((j - parity) / 2) % 2 === 0 ? Q.ONE : Q.MINUS_ONE)) : Q.ZERO), { divergent: true });

/** The symbol whose hyperbolic secant the ratio is written as; null where it is not. */
function secantAngle(ratio: Expression): Extract<Expression, { kind: 'symbol' }> | null {
  const below = ratio.kind === 'quotient' && ratio.numerator.kind === 'number' && Q.isOne(ratio.numerator.value) ? ratio.denominator : ratio.kind === 'power' && ratio.exponent.kind === 'number' && Q.equal(ratio.exponent.value, Q.MINUS_ONE) ? ratio.base : null;
  const [angle] = below?.kind === 'call' && below.function === 'cosh' ? below.args : ratio.kind === 'call' && ratio.function === 'sech' ? ratio.args : [];
  return angle?.kind === 'symbol' ? angle : null;
}

/** Argument nu * ratio with a ratio below 1: J falls and Y grows exponentially (DLMF 10.19.3, 10.19.4). */
function belowOrder(kind: 'J' | 'Y', nu: Expression, ratio: Expression): LocalForm {
  const written = secantAngle(ratio);
  const tangent = written ? call('tanh', written) : sqrt(minus(1, square(ratio)));
  const angle = written ?? log(over(plus(1, tangent), ratio));
  const exponent = times(nu, minus(tangent, angle));
  const positive = written ? { assumptions: [`${written.name} > 0`] } : {};
  if (kind === 'J') return form(times(exp(exponent), over(1, sqrt(times(2, pi, nu, tangent))), F1), [debyeSeries(nu, over(1, tangent), 1)], 'DLMF 10.19.3', positive);
  return form(times(-1, exp(neg(exponent)), sqrt(over(2, times(pi, nu, tangent))), F1), [debyeSeries(nu, over(1, tangent), -1)], 'DLMF 10.19.4', { ...positive, subdominantDropped: true });
}

/** Argument nu * ratio with a ratio above 1: both oscillate (DLMF 10.19.6, 10.19.7). */
function aboveOrder(kind: 'J' | 'Y', nu: Expression, ratio: Expression): LocalForm {
  const tangent = sqrt(minus(square(ratio), 1));
  const phase = minus(times(nu, minus(tangent, call('acos', over(1, ratio)))), times(q(1, 4), pi));
  const amplitude = sqrt(over(2, times(pi, nu, tangent)));
  const parts = [oscillatingSeries(nu, over(1, tangent), 0), oscillatingSeries(nu, over(1, tangent), 1)];
  const body = kind === 'J' ? plus(times(cos(phase), F1), times(sin(phase), F2)) : minus(times(sin(phase), F1), times(cos(phase), F2));
  return form(times(amplitude, body), parts, 'DLMF 10.19.6, 10.19.7');
}

/** I and K of nu * ratio for every positive ratio (DLMF 10.41.3, 10.41.4). */
function modified(kind: 'I' | 'K', nu: Expression, ratio: Expression): LocalForm {
  const root = sqrt(plus(1, square(ratio)));
  const exponent = times(nu, plus(root, log(over(ratio, plus(1, root)))));
  if (kind === 'I') return form(times(exp(exponent), over(1, sqrt(times(2, pi, nu, root))), F1), [debyeSeries(nu, over(1, root), 1)], 'DLMF 10.41.3', { subdominantDropped: true });
  return form(times(exp(neg(exponent)), sqrt(over(pi, times(2, nu, root))), F1), [debyeSeries(nu, over(1, root), -1)], 'DLMF 10.41.4');
}

/** Coefficients of (sum of 6 w^k/(2k + 3)!)^power below w^count: 6 (sinh t - t) = t^3 times the sum at w = t^2. */
function cubicRoot(power: Rational, count: number): Polynomial {
  const g = (k: number): Rational => Q.rational(6n, factorial(2 * k + 3));
  const p: Rational[] = [Q.ONE];
  for (let k = 1; k < count; k += 1) {
    let total = Q.ZERO;
    for (let j = 1; j <= k; j += 1) total = Q.add(total, Q.multiply(Q.multiply(Q.subtract(Q.multiply(power, Q.rational(j)), Q.rational(k - j)), g(j)), p[k - j] ?? Q.ZERO));
    p.push(Q.divide(total, Q.rational(k)));
  }
  return p;
}

/** Coefficients of t^0, t^1, ... of e^(delta sinh t), each a polynomial in delta. */
const exponentials: Polynomial[] = [[Q.ONE]];
function exponentialOfSinh(m: number): Polynomial {
  while (exponentials.length <= m) {
    const i = exponentials.length;
    const next: Rational[] = Array.from({ length: i + 1 }, () => Q.ZERO);
    for (let k = 0; k < i; k += 2) (exponentials[i - 1 - k] ?? []).forEach((c, j) => (next[j + 1] = Q.add(next[j + 1] ?? Q.ZERO, Q.divide(c, Q.rational(BigInt(i) * factorial(k))))));
    exponentials.push(next);
  }
  return exponentials[m] ?? [];
}

/** [t^m] of e^(delta sinh t) (6 (sinh t - t)/t^3)^(-(m+1)/3), a polynomial in delta: by Lagrange's theorem the coefficient of u^m in e^(delta sinh t) dt/du for u^3 = 6 (sinh t - t). */
function transitionPolynomial(m: number): Polynomial {
  const root = cubicRoot(Q.rational(-(m + 1), 3), Math.floor(m / 2) + 1);
  const total: Rational[] = Array.from({ length: m + 1 }, () => Q.ZERO);
  root.forEach((g, k) => exponentialOfSinh(m - 2 * k).forEach((c, j) => (total[j] = Q.add(total[j] ?? Q.ZERO, Q.multiply(g, c)))));
  return total;
}

/**
 * Argument nu + delta: Schlaefli's integral of e^((nu + delta) sinh t - nu t) (DLMF 10.9.17) in powers of u, u^3 = 6 (sinh t - t), each power integrated along the directions of steepest descent.
 * For delta = 0 these are Abramowitz & Stegun 9.3.31 and 9.3.32.
 */
function transition(kind: 'J' | 'Y', nu: Expression, delta: Expression): LocalForm {
  const exact = rationalOf(delta);
  const coefficient = (m: number): Rational | Expression => {
    const r = (m + 1) % 3;
    if (r === 0) return Q.ZERO;
    const n = (m + 1 - r) / 3;
    let factor = Q.rational(n % 2 === 0 ? 1 : -1, 3);
    for (let k = 0; k < n; k += 1) factor = Q.multiply(factor, Q.rational(6 * (r + 3 * k), 3));
    const c = transitionPolynomial(m);
    const polynomial = exact ? lift(c.reduce((sum, a, j) => Q.add(sum, Q.multiply(a, Q.power(exact, BigInt(j)))), Q.ZERO)) : valueAt(c, delta);
    if (polynomial.kind === 'number' && Q.isZero(polynomial.value)) return Q.ZERO;
    const turned = kind === 'J' ? lift(1) : times(r === 1 ? -1 : 1, sqrt(3));
    return times(factor, turned, polynomial, pow(2, q(r, 3)), pow(3, q(r, 3)), over(1, gamma(q(3 - r, 3))));
  };
  return form(times(pow(nu, q(-1, 3)), F1), [series(pow(nu, q(-1, 3)), coefficient, { divergent: true })], 'DLMF 10.9.17, 10.9.18; for equal order and argument 10.19.8');
}

const together =
  (kind: Kind): NonNullable<FunctionDescription['together']> =>
  (relation: Together, order: Expression) => {
    if (relation.kind === 'difference') return kind === 'J' || kind === 'Y' ? transition(kind, order, relation.value) : null;
    if (kind === 'I' || kind === 'K') return modified(kind, order, relation.value);
    return relation.size === 'below' ? belowOrder(kind, order, relation.value) : relation.size === 'above' ? aboveOrder(kind, order, relation.value) : null;
  };
export const besselJTogether = together('J');
export const besselYTogether = together('Y');
export const besselITogether = together('I');
export const besselKTogether = together('K');
