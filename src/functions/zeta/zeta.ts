/** Riemann and Hurwitz zeta functions and derivatives. Sources: DLMF 25.2, 25.4, 25.6, 25.11. */
import { build, type Expression, Q, rationalOf } from '../../expression/index.ts';
import { argument, bigO, call, euler, exp, lift, log, minus, neg, over, pi, plus, pow, q, scaled, sin, times } from '../compose.ts';
import type { FunctionDescription, LocalForm, Place } from '../description.ts';
import { asInteger } from '../exactForms.ts';
import { alternating, atInfinity, F1, F2, form, isAt, series, taylor } from '../formal.ts';
import { polygammaTree } from '../gamma/gamma.ts';
import { bernoulli, factorial, risingFactorial } from '../sequences.ts';
import { zetaAtInteger } from './exactZeta.ts';
import { bernoulliPolynomialValue } from './numbers.ts';

const stieltjes = (n: number): Expression => (n === 0 ? euler : call('stieltjes', n));

/** Terms of a Dirichlet series that are written before its O-term. */
const DIRICHLET_TERMS = 32;

/** sum of (-log k)^n k^-s for k up to a fixed number, and the next term as O. */
function dirichletSum(s: Expression, n: number): Expression {
  const term = (k: number): Expression => times(n % 2 === 0 ? 1 : -1, n === 0 ? 1 : pow(log(k), n), exp(neg(times(s, log(k)))));
  const terms = Array.from({ length: DIRICHLET_TERMS - 1 }, (_, i) => term(i + 2));
  return plus(n === 0 ? 1 : 0, ...terms, bigO(exp(neg(times(s, log(DIRICHLET_TERMS + 1))))));
}

/** zeta^(n)(a) where a closed form is known, else the call. */
export function zetaDerivativeTree(n: number, a: Expression): Expression {
  if (n === 0) return zetaValue([a]) ?? call('zeta', a);
  return zetaDerivativeValue([build.number(n), a]) ?? call('zetaDerivative', n, a);
}

/** (1-s)^-1-like expansion at 0 through the functional equation zeta(u) = 2 (2pi)^(u-1) sin(pi u/2) Gamma(1-u) zeta(1-u) (DLMF 25.4.1), so that the constants are Euler's, Stieltjes' and log 2pi. */
function atOrigin(u: Expression): LocalForm {
  // Gamma(1-u) = exp(gamma u + sum zeta(k) u^k/k).
  const logGamma = series(u, (k) => (k === 0 ? Q.ZERO : k === 1 ? euler : scaled(q(1, k), zetaAtInteger(k))));
  // -u zeta(1-u) = 1 - gamma u - gamma_1 u^2 - gamma_2/2 u^3 - ...
  const laurent = series(u, (k) => (k === 0 ? Q.ONE : times(Q.rational(-1n, factorial(k - 1)), stieltjes(k - 1))));
  const body = neg(times(over(sin(over(times(pi, u), 2)), times(pi, u)), exp(plus(times(u, log(times(2, pi))), F1)), F2));
  return form(body, [logGamma, laurent], 'DLMF 25.4.1, 25.2.4');
}

export function zetaLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    const s = atInfinity(place, 1);
    return s && form(dirichletSum(s, 0), [], 'DLMF 25.2.1');
  }
  if (isAt(place, 1)) return form(plus(over(1, place.offset), F1), [series(place.offset, (k) => times(Q.divide(alternating(k), Q.rational(factorial(k))), stieltjes(k)))], 'DLMF 25.2.4');
  if (isAt(place, 0)) return atOrigin(place.offset);
  return form(F1, [taylor(place, (k) => times(Q.rational(1n, factorial(k)), zetaDerivativeTree(k, place.center)))], 'Taylor series');
}

export function zetaDerivativeLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  const n = asInteger(argument(args, 0), 200);
  if (index !== 1 || n === null || n < 0) return null;
  if (place.kind === 'infinite') {
    const s = atInfinity(place, 1);
    return s && form(dirichletSum(s, n), [], 'DLMF 25.2.7');
  }
  if (isAt(place, 1)) {
    const pole = times(Q.multiply(alternating(n), Q.rational(factorial(n))), pow(place.offset, -n - 1));
    return form(plus(pole, F1), [series(place.offset, (k) => times(Q.divide(alternating(k + n), Q.rational(factorial(k))), stieltjes(k + n)))], 'DLMF 25.2.4');
  }
  return form(F1, [taylor(place, (k) => times(Q.rational(1n, factorial(k)), zetaDerivativeTree(n + k, place.center)))], 'Taylor series');
}

export function zetaValue(args: readonly Expression[]): Expression | null {
  const n = asInteger(argument(args, 0), 2000);
  return n === null || n === 1 || (n > 1 && n % 2 === 1) ? null : lift(zetaAtInteger(n));
}

/** zeta'(0) = -log(2pi)/2 (DLMF 25.6.11), zeta'(-2n) (25.6.13), zeta'(-1) = 1/12 - log A, zeta'(2) through A (5.17.7). */
export function zetaDerivativeValue(args: readonly Expression[]): Expression | null {
  const n = asInteger(argument(args, 0), 2000);
  const s = asInteger(argument(args, 1), 400);
  if (n === 0) return zetaValue([argument(args, 1)]) ?? call('zeta', argument(args, 1));
  if (n !== 1 || s === null) return null;
  if (s === 0) return times(q(-1, 2), log(times(2, pi)));
  const logGlaisher = log(build.constant('glaisher'));
  if (s === -1) return minus(q(1, 12), logGlaisher);
  if (s === 2) return times(q(1, 6), pow(pi, 2), plus(euler, log(times(2, pi)), times(-12, logGlaisher)));
  if (s < 0 && s % 2 === 0) {
    const m = -s / 2;
    const scale = Q.multiply(alternating(m), Q.rational(factorial(2 * m), 2n ** BigInt(2 * m + 1)));
    return over(times(scale, zetaAtInteger(2 * m + 1)), pow(pi, 2 * m));
  }
  return null;
}

/** Hurwitz zeta in a: zeta(s,a) ~ a^(1-s)/(s-1) + a^-s/2 + sum of B_2k/(2k)! (s)_(2k-1) a^(1-s-2k) (DLMF 25.11.43); a^-s + Taylor series at 0 (25.11.10). */
export function hurwitzLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  const s = argument(args, 0);
  const exact = rationalOf(s);
  if (index !== 1 || (exact && Q.isOne(exact))) return null;
  const rising = (n: number): Expression => (exact ? lift(risingFactorial(exact, n)) : n === 0 ? lift(1) : times(...Array.from({ length: n }, (_, i) => plus(s, i))));
  if (place.kind === 'infinite') {
    const a = atInfinity(place, 1);
    if (!a) return null;
    const terminates = exact && Q.isInteger(exact) && exact.num <= 0n;
    const sum = series(over(1, a), (k) => {
      if (k === 0) return over(1, minus(s, 1));
      if (k === 1) return Q.HALF;
      return k % 2 === 1 ? Q.ZERO : times(Q.divide(bernoulli(k), Q.rational(factorial(k))), rising(k - 1));
    }, { divergent: !terminates, ...(terminates ? { length: 2 - Number(exact.num) + 1 } : {}) });
    return form(times(pow(a, minus(1, s)), F1), [sum], 'DLMF 25.11.43');
  }
  const center = isAt(place, 0) ? null : place.center;
  const zetaAt = (k: number): Expression => {
    const order = exact ? lift(Q.add(exact, Q.rational(k))) : plus(s, k);
    if (center) return call('hurwitzZeta', order, center);
    return zetaValue([order]) ?? call('zeta', order);
  };
  const sum = taylor(place, (k) => times(Q.divide(alternating(k), Q.rational(factorial(k))), rising(k), rising(k).kind === 'number' && isZeroTree(rising(k)) ? 0 : zetaAt(k)));
  if (center) {
    const at = rationalOf(center);
    return at && at.num <= 0n ? null : form(F1, [sum], 'DLMF 25.11.17');
  }
  // (s)_k zeta(s+k) has a finite limit where s + k = 1, which needs care: declined for s = 0, -1, -2, ...
  if (exact && Q.isInteger(exact) && exact.num <= 0n) return null;
  return form(plus(pow(place.offset, neg(s)), F1), [sum], 'DLMF 25.11.10');
}
const isZeroTree = (e: Expression): boolean => e.kind === 'number' && Q.isZero(e.value);

export function hurwitzValue(args: readonly Expression[]): Expression | null {
  const [s = lift(2), a = lift(1)] = args;
  const at = rationalOf(a);
  if (at && Q.isOne(at)) return zetaValue([s]) ?? call('zeta', s);
  const n = asInteger(s, 60);
  if (n !== null && n >= 2) return times(Q.divide(alternating(n), Q.rational(factorial(n - 1))), polygammaTree(n - 1, a));
  if (n !== null && n <= 0) return over(neg((at && bernoulliPolynomialValue([build.number(1 - n), a])) ?? call('bernoulliPolynomial', 1 - n, a)), 1 - n);
  if (at && Q.equal(at, Q.HALF)) return times(minus(pow(2, s), 1), call('zeta', s));
  return null;
}
export const hurwitzDerivative: NonNullable<FunctionDescription['derivative']> = ([s = lift(2), a = lift(1)], index) => (index === 1 ? neg(times(s, call('hurwitzZeta', plus(s, 1), a))) : null);
