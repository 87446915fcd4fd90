/** Elliptic integrals in the parameter m = k^2. Sources: DLMF 19.2, 19.4, 19.5, 19.7, 19.12. */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { argument, call, cos, gamma, half, lift, log, minus, neg, over, pi, plus, pow, q, sin, sqrt, square, times } from '../compose.ts';
import type { FormalSeries, FunctionDescription, LocalForm, Place } from '../description.ts';
import { asMultipleOfPi } from '../exactForms.ts';
import { F1, F2, form, hypergeometricSeries, isAt, ratioSeries, series } from '../formal.ts';
import { fullRecurrence, recurrence } from '../sequences.ts';

const K = (m: Expression): Expression => call('ellipticKParameter', m);
const E = (m: Expression): Expression => call('ellipticEParameter', m);
const halfPi = times(half, pi);

/** ((1/2)_k/k!)^2. */
const centralSquares = recurrence<Rational>(Q.ONE, (k, previous) => Q.multiply(previous, Q.power(q(2 * k - 1, 2 * k), 2)));
/** d(k) - 2 log 2 with d of DLMF 19.12.1: d(k+1) = d(k) - 2/((2k+1)(2k+2)). */
const logarithmShift = recurrence<Rational>(Q.ZERO, (k, previous) => Q.subtract(previous, q(2, (2 * k - 1) * 2 * k)));
/** (1/2)_k (3/2)_k/((2)_k k!). */
const secondKind = recurrence<Rational>(Q.ONE, (k, previous) => Q.multiply(previous, Q.divide(q((2 * k - 1) * (2 * k + 1), 4), Q.rational((k + 1) * k))));

/** K near m = 1 as (log 4 - log(m1)/2) A(m1) + B(m1), m1 = 1 - m (DLMF 19.12.1); F1 = A, F2 = B. */
const kLogarithmic = (m1: Expression): readonly [FormalSeries, FormalSeries] => [series(m1, centralSquares), series(m1, (k) => Q.multiply(centralSquares(k), logarithmShift(k)))];
/** E near m = 1 as 1 + (log 4 - log(m1)/2) A(m1) + B(m1) (DLMF 19.12.2). */
const eLogarithmic = (m1: Expression): readonly [FormalSeries, FormalSeries] => [
  series(m1, (k) => (k === 0 ? Q.ZERO : Q.multiply(Q.HALF, secondKind(k - 1)))),
  series(m1, (k) => (k === 0 ? Q.ZERO : Q.multiply(Q.HALF, Q.multiply(secondKind(k - 1), Q.subtract(logarithmShift(k - 1), q(1, (2 * k - 1) * 2 * k)))))),
];
const logarithm = (m1: Expression): Expression => minus(log(4), times(half, log(m1)));

export function completeLocal(which: 'K' | 'E'): NonNullable<FunctionDescription['local']> {
  return (_args, _index, place: Place) => {
    if (place.kind === 'infinite') {
      if (place.direction !== -1) return null;
      // K(m) = K(m/(m-1))/sqrt(1-m), E(m) = sqrt(1-m) E(m/(m-1)); the new complementary parameter is 1/(1-m).
      const size = minus(1, place.argument);
      const m1 = over(1, size);
      const [a, b] = which === 'K' ? kLogarithmic(m1) : eLogarithmic(m1);
      const inner = plus(times(plus(log(4), times(half, log(size))), F1), F2);
      return form(which === 'K' ? over(inner, sqrt(size)) : times(sqrt(size), plus(1, inner)), [a, b], 'DLMF 19.7.2, 19.12.1, 19.12.2');
    }
    if (isAt(place, 0)) {
      const sum = hypergeometricSeries(place.offset, [which === 'K' ? Q.HALF : q(-1, 2), Q.HALF], [Q.ONE]);
      return form(times(halfPi, F1), [sum], which === 'K' ? 'DLMF 19.5.1' : 'DLMF 19.5.2');
    }
    if (!isAt(place, 1)) return null;
    const m1 = neg(place.offset);
    const [a, b] = which === 'K' ? kLogarithmic(m1) : eLogarithmic(m1);
    return form(plus(which === 'K' ? 0 : 1, times(logarithm(m1), F1), F2), [a, b], which === 'K' ? 'DLMF 19.12.1' : 'DLMF 19.12.2');
  };
}

/** dK/dm = (E - (1-m)K)/(2m(1-m)), dE/dm = (E - K)/(2m) (DLMF 19.4.1, 19.4.2 with m = k^2). */
export const kDerivative = ([m = lift(0)]: readonly Expression[]): Expression => over(minus(E(m), times(minus(1, m), K(m))), times(2, m, minus(1, m)));
export const eDerivative = ([m = lift(0)]: readonly Expression[]): Expression => over(minus(E(m), K(m)), times(2, m));

/** m(1-m) f'' + (1-2m) f' - f/4 = 0 for K, m(1-m) f'' + (1-m) f' + f/4 = 0 for E (DLMF 19.4.8, 19.4.9 in m). */
export const completeEquation =
  (which: 'K' | 'E'): NonNullable<FunctionDescription['equation']> =>
  () => ({
    polynomials: which === 'K' ? [[lift(q(-1, 4))], [lift(1), lift(-2)], [lift(0), lift(1), lift(-1)]] : [[lift(q(1, 4))], [lift(1), lift(-1)], [lift(0), lift(1), lift(-1)]],
    initial: which === 'K' ? [(p) => K(p), (p) => kDerivative([p])] : [(p) => E(p), (p) => eDerivative([p])],
  });

/** K(0), K(1/2), K(-1) and E of the same, E(1) (DLMF 19.6.1, 19.20(ii) with Gamma(1/4)). */
export function completeValue(which: 'K' | 'E'): NonNullable<FunctionDescription['value']> {
  return (args) => {
    const m = rationalOf(argument(args, 0));
    if (!m) return null;
    if (Q.isZero(m)) return halfPi;
    if (Q.isOne(m)) return which === 'E' ? lift(1) : null;
    const quarter = square(gamma(q(1, 4)));
    const lemniscate = over(quarter, times(4, sqrt(pi)));
    if (Q.equal(m, Q.HALF)) return which === 'K' ? lemniscate : plus(times(half, lemniscate), over(pow(pi, q(3, 2)), quarter));
    // K(-1) = K(1/2)/sqrt 2, E(-1) = sqrt 2 E(1/2).
    if (Q.equal(m, Q.MINUS_ONE)) return which === 'K' ? over(lemniscate, sqrt(2)) : times(sqrt(2), plus(times(half, lemniscate), over(pow(pi, q(3, 2)), quarter)));
    return null;
  };
}

const delta = (phi: Expression, m: Expression): Expression => sqrt(minus(1, times(m, square(sin(phi)))));

/** F and E of amplitude phi. */
export function incompleteDerivative(which: 'F' | 'E'): NonNullable<FunctionDescription['derivative']> {
  return ([phi = lift(0), m = lift(0)], index) => {
    if (index === 0) return which === 'F' ? over(1, delta(phi, m)) : delta(phi, m);
    const F = call('ellipticFParameter', phi, m);
    const second = call('ellipticEIncompleteParameter', phi, m);
    if (which === 'E') return over(minus(second, F), times(2, m));
    return minus(over(minus(second, times(minus(1, m), F)), times(2, m, minus(1, m))), over(times(sin(phi), cos(phi)), times(2, minus(1, m), delta(phi, m))));
  };
}

/** Coefficients in m at 0: binomial(-1/2 or 1/2, k)(-1)^k times the integral of sin^2k from 0 to phi, by its reduction formula. */
export function incompleteLocal(which: 'F' | 'E'): NonNullable<FunctionDescription['local']> {
  return (args, index, place: Place) => {
    if (index !== 1 || place.kind !== 'finite') return null;
    const phi = argument(args, 0);
    if (isAt(place, 1)) return incompleteAtOne(which, phi, neg(place.offset));
    if (!isAt(place, 0)) return null;
    const powers = recurrence<Expression>(phi, (k, previous) => over(minus(times(2 * k - 1, previous), times(cos(phi), pow(sin(phi), 2 * k - 1))), 2 * k));
    const scales = recurrence<Rational>(Q.ONE, (k, previous) => Q.multiply(previous, q(which === 'F' ? 2 * k - 1 : 2 * k - 3, 2 * k)));
    return form(F1, [series(place.offset, (k) => times(scales(k), powers(k)))], 'DLMF 19.2.4, 19.2.5, expanded in k^2 under the integral');
  };
}
/** At m = 1 for |phi| < pi/2, in m1 = 1 - m: Delta = cos (1 + m1 tan^2)^(1/2); the integrals of tan^2k sec and tan^2k cos by reduction. */
function incompleteAtOne(which: 'F' | 'E', phi: Expression, m1: Expression): LocalForm {
  const tangent = call('tan', phi);
  const secants = recurrence<Expression>(call('asinh', tangent), (k, previous) => over(minus(times(pow(tangent, 2 * k - 1), over(1, cos(phi))), times(2 * k - 1, previous)), 2 * k));
  const cosines = recurrence<Expression>(sin(phi), (k, previous) => minus(secants(k - 1), previous));
  const scales = recurrence<Rational>(Q.ONE, (k, previous) => Q.multiply(previous, q(which === 'F' ? 1 - 2 * k : 3 - 2 * k, 2 * k)));
  return form(F1, [series(m1, (k) => times(scales(k), which === 'F' ? secants(k) : cosines(k)))], 'DLMF 19.2.4, 19.2.5, expanded in 1 - k^2 under the integral, |phi| < pi/2');
}
export function incompleteValue(which: 'F' | 'E'): NonNullable<FunctionDescription['value']> {
  return (args) => {
    const phi = argument(args, 0);
    const m = argument(args, 1);
    const zero = rationalOf(phi);
    if (zero && Q.isZero(zero)) return lift(0);
    const parameter = rationalOf(m);
    if (parameter && Q.isZero(parameter)) return phi;
    // F(j pi/2) = j K (DLMF 19.2.10).
    const turn = asMultipleOfPi(phi);
    if (!turn) return null;
    const j = Q.multiply(turn, Q.rational(2));
    return Q.isInteger(j) ? times(j, which === 'F' ? K(m) : E(m)) : null;
  };
}

/** Complete third kind, Pi(n|m) = integral of 1/((1 - n sin^2)(1 - m sin^2)^(1/2)); DLMF 19.4.4 and 19.4.3-like rule in n. */
export function piDerivative([n = lift(0), m = lift(0)]: readonly Expression[], index: number): Expression {
  const P = call('ellipticPiParameter', n, m);
  if (index === 1) return over(plus(over(E(m), minus(m, 1)), P), times(2, minus(n, m)));
  const bracket = plus(E(m), over(times(minus(m, n), K(m)), n), over(times(minus(square(n), m), P), n));
  return over(bracket, times(2, minus(m, n), minus(n, 1)));
}

export function piLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  if (place.kind !== 'finite' || !isAt(place, 0)) return null;
  const centralBinomials = recurrence<Rational>(Q.ONE, (k, previous) => Q.multiply(previous, q(2 * k - 1, 2 * k)));
  if (index === 1) {
    // J_k = integral of sin^2k/(1 - n sin^2): J_0 = pi/(2 sqrt(1-n)), n J_k = J_(k-1) - W_(k-1), W Wallis' integrals.
    const n = argument(args, 0);
    const exact = rationalOf(n);
    if (exact && Q.isZero(exact)) return form(times(halfPi, F1), [hypergeometricSeries(place.offset, [Q.HALF, Q.HALF], [Q.ONE])], 'DLMF 19.5.1, Pi(0|m) = K(m)');
    const moments = recurrence<Expression>(over(pi, times(2, sqrt(minus(1, n)))), (k, previous) => over(minus(previous, times(centralBinomials(k - 1), halfPi)), n));
    return form(F1, [series(place.offset, (k) => times(centralBinomials(k), moments(k)))], 'DLMF 19.2.7, expanded in k^2 under the integral');
  }
  // S_k = integral of sin^2k/Delta: S_0 = K, S_1 = (K-E)/m, (2k+1) m S_(k+1) = 2k(1+m) S_k - (2k-1) S_(k-1).
  const m = argument(args, 1);
  const exact = rationalOf(m);
  if (exact && Q.isZero(exact)) return form(times(halfPi, F1), [ratioSeries(place.offset, Q.ONE, (k) => q(2 * k + 1, 2 * k + 2))], 'DLMF 19.6.2');
  const moments = fullRecurrence<Expression>([K(m), over(minus(K(m), E(m)), m)], (k, earlier) => {
    const [one, two] = [earlier[k - 1] ?? lift(0), earlier[k - 2] ?? lift(0)];
    return over(minus(times(2 * (k - 1), plus(1, m), one), times(2 * k - 3, two)), times(2 * k - 1, m));
  });
  return form(F1, [series(place.offset, (k) => moments(k))], 'DLMF 19.2.7, expanded in alpha^2 under the integral');
}
export function piValue(args: readonly Expression[]): Expression | null {
  const n = rationalOf(argument(args, 0));
  const m = rationalOf(argument(args, 1));
  if (n && Q.isZero(n)) return K(argument(args, 1));
  if (m && Q.isZero(m) && n && Q.compare(n, Q.ONE) < 0) return over(pi, times(2, sqrt(Q.subtract(Q.ONE, n))));
  return null;
}
