/** Gamma, its logarithm, digamma and polygamma: behaviour at every point of the real line and at infinity. Sources: DLMF 5.2 to 5.15. */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { argument, call, euler, exp, imaginary, log, minus, neg, over, pi, plus, pow, q, scaled, sqrt, times, gamma as gammaCall } from '../compose.ts';
import type { FormalSeries, LocalForm, Place } from '../description.ts';
import { asInteger } from '../exactForms.ts';
import { alternating, atInfinity, F1, form, integerCenter, series, taylor } from '../formal.ts';
import { bernoulli, factorial, harmonicNumber } from '../sequences.ts';
import { zetaAtInteger } from '../zeta/exactZeta.ts';

/** zeta(k) + sign * H_n^(k), with zeta(1) read as Euler's constant times -1: the Laurent coefficients of digamma at -n, up to sign. */
function zetaWithHarmonic(k: number, n: number): Expression {
  const harmonic = harmonicNumber(n, k);
  if (k === 1) return minus(harmonic, euler);
  return plus(scaled(alternating(k), zetaAtInteger(k)), harmonic);
}

/** T(u) = sum over k >= 1 of ((-1)^k zeta(k) + H_n^(k)) u^k / k, with log Gamma(-n+u) = log((-1)^n/(n! u)) + T(u). From DLMF 5.7.3 and reflection 5.5.3. */
function poleExponent(n: number, u: Expression): FormalSeries {
  return series(u, (k) => (k === 0 ? Q.ZERO : scaled(q(1, k), zetaWithHarmonic(k, n))));
}

/** Stirling's series S(1/z) = sum of B_2k/(2k(2k-1)) z^(1-2k) (DLMF 5.11.1). */
export function stirlingSeries(z: Expression): FormalSeries {
  return series(over(1, z), (k) => (k % 2 === 0 ? Q.ZERO : Q.divide(bernoulli(k + 1), Q.rational(k * (k + 1)))), { divergent: true });
}

/** psi^(k-1)(a)/k! u^k summed over k >= 1. */
const regularExponent = (place: Extract<Place, { kind: 'finite' }>): FormalSeries => taylor(place, (k) => (k === 0 ? Q.ZERO : scaled(Q.rational(1n, factorial(k)), polygammaTree(k - 1, place.center))));

/** psi^(n)(a), simplified where there is a closed form. */
export function polygammaTree(n: number, a: Expression): Expression {
  const simple = polygammaValue(n, a);
  if (simple) return simple;
  return n === 0 ? call('digamma', a) : call('polygamma', n, a);
}

const isPole = (place: Place): number | null => {
  const center = integerCenter(place);
  return center !== null && center <= 0 ? -center : null;
};

export function gammaLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    const z = atInfinity(place, 1);
    if (!z) return null;
    const body = times(sqrt(over(times(2, pi), z)), exp(minus(times(z, log(z)), z)), exp(F1));
    return form(body, [stirlingSeries(z)], 'DLMF 5.11.1, 5.11.3');
  }
  const n = isPole(place);
  if (n === null) return form(times(gammaCall(place.center), exp(F1)), [regularExponent(place)], 'DLMF 5.15.1 (Taylor series of log Gamma)');
  const scale = Q.divide(alternating(n), Q.rational(factorial(n)));
  return form(times(scale, over(1, place.offset), exp(F1)), [poleExponent(n, place.offset)], 'DLMF 5.7.3, 5.5.3');
}

export function logGammaLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    const z = atInfinity(place, 1);
    if (!z) return null;
    return form(plus(times(minus(z, q(1, 2)), log(z)), neg(z), times(q(1, 2), log(times(2, pi))), F1), [stirlingSeries(z)], 'DLMF 5.11.1');
  }
  const n = isPole(place);
  if (n === null) return form(plus(call('logGamma', place.center), F1), [regularExponent(place)], 'DLMF 5.7.3');
  const constants = n === 0 ? [] : [neg(log(factorial(n))), neg(times(n, imaginary, pi))];
  return form(plus(neg(log(place.offset)), ...constants, F1), [poleExponent(n, place.offset)], 'DLMF 5.7.3, 5.5.3; branch continuous from above');
}

export function polygammaLocal(order: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    const z = atInfinity(place, 1);
    if (!z) return null;
    return form(order === 0 ? plus(log(z), F1) : F1, [polygammaAtInfinity(order, z)], 'DLMF 5.11.2, 5.15.8, 5.15.9');
  }
  const n = isPole(place);
  if (n === null) {
    return form(F1, [taylor(place, (k) => scaled(Q.rational(1n, factorial(k)), polygammaTree(order + k, place.center)))], 'DLMF 5.15.1');
  }
  const pole = times(Q.multiply(alternating(order + 1), Q.rational(factorial(order))), pow(place.offset, -(order + 1)));
  const regular = series(place.offset, (j) => scaled(Q.rational(factorial(j + order), factorial(j)), zetaWithHarmonic(j + order + 1, n)));
  return form(plus(pole, F1), [regular], 'DLMF 5.7.6, 5.5.4');
}

/** Without the logarithm of order 0. In powers of 1/z. */
function polygammaAtInfinity(order: number, z: Expression): FormalSeries {
  const sign = alternating(order + 1);
  return series(
    over(1, z),
    (j) => {
      if (j === order) return order === 0 ? Q.ZERO : Q.multiply(sign, Q.rational(factorial(order - 1)));
      if (j === order + 1) return Q.multiply(sign, Q.rational(factorial(order), 2));
      const twoK = j - order;
      if (twoK < 2 || twoK % 2 === 1) return Q.ZERO;
      return Q.multiply(sign, Q.divide(Q.multiply(bernoulli(twoK), Q.rational(factorial(twoK + order - 1))), Q.rational(factorial(twoK))));
    },
    { divergent: true },
  );
}

/** Exact psi^(n)(a) at integers and half-integers (DLMF 5.4.14, 5.4.15, 5.15.2, 5.15.3), digamma at other small fractions (Gauss, DLMF 5.4.19); null elsewhere. */
export function polygammaValue(n: number, a: Expression): Expression | null {
  const exact = rationalOf(a);
  if (!exact || exact.den > 12n || Q.compare(Q.absolute(exact), Q.rational(60)) > 0) return null;
  if (exact.num <= 0n && exact.den === 1n) return null;
  // psi^(n)(r + m) from psi^(n)(r), 0 < r <= 1: psi^(n)(x+1) = psi^(n)(x) + (-1)^n n!/x^(n+1).
  const whole = exact.den === 1n ? Number(exact.num) - 1 : Number(Q.floor(exact));
  const base = Q.subtract(exact, Q.rational(whole));
  const start = n === 0 ? gaussDigamma(base) : exact.den <= 2n ? polygammaBase(n, exact.den === 1n) : null;
  if (!start) return null;
  let shift = Q.ZERO;
  const step = (x: Rational): Rational => Q.reciprocal(Q.power(x, n + 1));
  for (let j = 0; j < whole; j++) shift = Q.add(shift, step(Q.add(base, Q.rational(j))));
  for (let j = -1; j >= whole; j--) shift = Q.subtract(shift, step(Q.add(base, Q.rational(j))));
  return plus(start, Q.multiply(Q.multiply(alternating(n), Q.rational(factorial(n))), shift));
}

function polygammaBase(n: number, atOne: boolean): Expression {
  const scale = Q.multiply(alternating(n + 1), Q.rational(factorial(n)));
  const zeta = zetaAtInteger(n + 1);
  return times(atOne ? scale : Q.multiply(scale, Q.rational(2n ** BigInt(n + 1) - 1n)), zeta);
}

/** psi(p/r), 0 < p/r <= 1: -gamma - log(2r) - (pi/2) cot(pi p/r) + 2 sum cos(2 pi k p/r) log sin(pi k/r). Written out where the sum is simple (r = 1, 2, 3, 4, 6). */
function gaussDigamma(x: Rational): Expression | null {
  const r = Number(x.den);
  const p = Number(x.num);
  const cotangents: Readonly<Record<string, Expression>> = {
    '1/3': over(sqrt(3), 3),
    '2/3': neg(over(sqrt(3), 3)),
    '1/4': plus(1),
    '3/4': plus(-1),
    '1/6': sqrt(3),
    '5/6': neg(sqrt(3)),
  };
  if (r === 1) return neg(euler);
  if (r === 2) return plus(neg(euler), times(-2, log(2)));
  const cotangent = cotangents[`${p}/${r}`];
  if (!cotangent) return null;
  const turn = neg(times(q(1, 2), pi, cotangent));
  if (r === 3) return plus(neg(euler), turn, times(q(-3, 2), log(3)));
  if (r === 4) return plus(neg(euler), turn, times(-3, log(2)));
  return plus(neg(euler), turn, times(-2, log(2)), times(q(-3, 2), log(3)));
}

/** Gamma at integers and half-integers (DLMF 5.4.1, 5.4.6). */
export function gammaValue(args: readonly Expression[]): Expression | null {
  const exact = rationalOf(argument(args, 0));
  if (!exact || exact.den > 2n || Q.compare(Q.absolute(exact), Q.rational(3000)) > 0) return null;
  if (exact.den === 1n) return exact.num > 0n ? plus(factorial(Number(exact.num) - 1)) : null;
  const m = Number((exact.num - 1n) / 2n);
  let scale = Q.ONE;
  for (let j = 0; j < m; j++) scale = Q.multiply(scale, q(2 * j + 1, 2));
  for (let j = -1; j >= m; j--) scale = Q.divide(scale, q(2 * j + 1, 2));
  return times(scale, sqrt(pi));
}

export function logGammaValue(args: readonly Expression[]): Expression | null {
  const exact = rationalOf(argument(args, 0));
  if (!exact || exact.num <= 0n) return null;
  if (exact.den === 1n && exact.num <= 2n) return plus(0);
  const value = gammaValue(args);
  return value && log(value);
}

export const explicitOrder = (args: readonly Expression[]): number | null => {
  const n = asInteger(argument(args, 0), 500);
  return n !== null && n >= 0 ? n : null;
};
