/** Ei, E_n, Si, Ci, Shi, Chi: at 0 with their logarithms and at infinity. Sources: DLMF 6.6, 6.12, 8.19, 8.20. */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { argument, cos, euler, exp, gamma, lift, log, minus, neg, over, pi, plus, pow, q, scaled, sin, square, times } from '../compose.ts';
import type { FormalSeries, LocalForm, Place } from '../description.ts';
import { asInteger } from '../exactForms.ts';
import { alternating, atInfinity, F1, F2, form, isAt, ratioSeries, realLog, series, terminationLength } from '../formal.ts';
import { lowerSeriesAtZero } from '../gamma/incomplete.ts';
import { factorial, harmonicNumber } from '../sequences.ts';

/** sum of sign^k k! z^-k. */
const factorialSeries = (z: Expression, sign: 1 | -1): FormalSeries =>
  series(over(1, z), (k) => Q.rational(sign === -1 && k % 2 === 1 ? -factorial(k) : factorial(k)), { divergent: true });

/** sum over k >= 1 of x^k/(k k!). */
const exponentialIntegralSeries = (x: Expression): FormalSeries => series(x, (k) => (k === 0 ? Q.ZERO : Q.rational(1n, BigInt(k) * factorial(k))));

export function eiLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    const z = place.argument;
    return form(times(exp(z), over(1, z), F1), [factorialSeries(z, 1)], 'DLMF 6.12.2, 6.12.1');
  }
  if (!isAt(place, 0) || place.side === 'complex') return null;
  return form(plus(euler, realLog(place), F1), [exponentialIntegralSeries(place.offset)], 'DLMF 6.6.1');
}

/** E_n(x) in x. */
export function expIntegralLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  if (index !== 1) return null;
  const n = argument(args, 0);
  const exact = rationalOf(n);
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    const x = place.argument;
    const length = terminationLength([exact ?? n]);
    const falling = ratioSeries(over(1, x), Q.ONE, (k) => scaled(Q.MINUS_ONE, exact ? Q.add(exact, Q.rational(k)) : plus(n, k)), {
      divergent: length === null,
      ...(length === null ? {} : { length }),
    });
    return form(times(exp(neg(x)), over(1, x), F1), [falling], 'DLMF 8.20.2');
  }
  if (!isAt(place, 0)) return null;
  const x = place.offset;
  const order = asInteger(n);
  const lower = lowerSeriesAtZero(lift(exact ? Q.subtract(Q.ONE, exact) : minus(1, n)), x);
  if (order !== null && order >= 1) {
    const scale = Q.divide(alternating(order - 1), Q.rational(factorial(order - 1)));
    return form(minus(times(scale, pow(x, order - 1), minus(minus(harmonicNumber(order - 1), euler), log(x))), F1), [lower], 'DLMF 8.19.8');
  }
  return form(minus(times(gamma(minus(1, n)), pow(x, minus(n, 1))), F1), [lower], 'DLMF 8.19.10');
}

/** E_n at 0 for n > 1 and E_0, E_-1, ... which are elementary (DLMF 8.19.6, 8.4.8). */
export function expIntegralValue(args: readonly Expression[]): Expression | null {
  const x = argument(args, 1);
  const n = rationalOf(argument(args, 0));
  const zero = rationalOf(x);
  if (n && zero && Q.isZero(zero)) return Q.compare(n, Q.ONE) > 0 ? lift(Q.reciprocal(Q.subtract(n, Q.ONE))) : null;
  if (!n || n.den !== 1n || n.num > 0n || n.num < -30n) return null;
  const m = -Number(n.num);
  const terms = Array.from({ length: m + 1 }, (_, k) => times(Q.rational(factorial(m), factorial(m - k)), pow(x, -k - 1)));
  return times(exp(neg(x)), plus(...terms));
}

/** sum of sign^k z^(2k+shift)/((2k+shift) (2k+shift)!). */
function sineIntegralSeries(z: Expression, shift: 0 | 1, sign: 1 | -1): FormalSeries {
  return series(z, (j) => {
    if (j === 0 || j % 2 !== shift) return Q.ZERO;
    const k = (j - shift) / 2;
    return Q.rational(sign === -1 && k % 2 === 1 ? -1n : 1n, BigInt(j) * factorial(j));
  });
}

/** The auxiliary f and g (DLMF 6.12.3, 6.12.4) without their leading powers, in 1/z^2. */
const auxiliaries = (z: Expression): readonly [FormalSeries, FormalSeries] => {
  const inverseSquare = over(1, square(z));
  const rule =
    (odd: 0 | 1) =>
    (k: number): Rational =>
      Q.multiply(alternating(k), Q.rational(factorial(2 * k + odd)));
  return [series(inverseSquare, rule(0), { divergent: true }), series(inverseSquare, rule(1), { divergent: true })];
};

export function siLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    const z = place.argument;
    // f and g are odd and even in z as they stand, so both directions differ in the constant alone.
    const constant = times(place.direction, q(1, 2), pi);
    return form(minus(minus(constant, times(cos(z), over(1, z), F1)), times(sin(z), over(1, square(z)), F2)), auxiliaries(z), 'DLMF 6.2.19, 6.12.3, 6.12.4');
  }
  if (!isAt(place, 0)) return null;
  return form(F1, [sineIntegralSeries(place.offset, 1, -1)], 'DLMF 6.6.5');
}

export function ciLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    const z = place.argument;
    const constant = place.direction === 1 ? lift(0) : times(lift({ kind: 'constant', name: 'i' }), pi);
    return form(plus(constant, times(sin(z), over(1, z), F1), neg(times(cos(z), over(1, square(z)), F2))), auxiliaries(z), 'DLMF 6.2.20, 6.12.3, 6.12.4, 6.4.4');
  }
  if (!isAt(place, 0)) return null;
  return form(plus(euler, log(place.offset), F1), [sineIntegralSeries(place.offset, 0, -1)], 'DLMF 6.6.6');
}

export function shiLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    const z = place.argument;
    // Shi = (Ei + E_1)/2 on the positive axis, and odd.
    return form(times(q(1, 2), plus(times(exp(z), over(1, z), F1), times(exp(neg(z)), over(1, z), F2))), [factorialSeries(z, 1), factorialSeries(z, -1)], 'DLMF 6.5.5, 6.12.1, 6.12.2');
  }
  if (!isAt(place, 0)) return null;
  return form(F1, [sineIntegralSeries(place.offset, 1, 1)], 'DLMF 6.6.5 with z replaced by iz');
}

export function chiLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const z = atInfinity(place, 1);
  if (z) return form(times(q(1, 2), minus(times(exp(z), over(1, z), F1), times(exp(neg(z)), over(1, z), F2))), [factorialSeries(z, 1), factorialSeries(z, -1)], 'DLMF 6.5.6, 6.12.1, 6.12.2');
  if (place.kind === 'infinite' || !isAt(place, 0)) return null;
  return form(plus(euler, log(place.offset), F1), [sineIntegralSeries(place.offset, 0, 1)], 'DLMF 6.6.6 with z replaced by iz');
}

/** Cin(z) = gamma + log z - Ci(z), entire and even (DLMF 6.6.6). */
export function cinLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite' || !isAt(place, 0)) return null;
  const rule = sineIntegralSeries(place.offset, 0, -1);
  return form(neg(F1), [rule], 'DLMF 6.2.13, 6.6.6');
}

/** Ein(z) = E_1(z) + log z + gamma, entire (DLMF 6.2.4, 6.6.4). */
export function einLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite' || !isAt(place, 0)) return null;
  return form(neg(F1), [exponentialIntegralSeries(neg(place.offset))], 'DLMF 6.6.4');
}
