/** erf and its relatives, Fresnel integrals. Sources: DLMF 7.6, 7.12, 7.17. */
import { type Expression, Q, type Rational } from '../../expression/index.ts';
import { call, cos, exp, half as oneHalf, log, minus, neg, over, pi, plus, pow, q, sin, sqrt, square, times } from '../compose.ts';
import type { FormalSeries, LocalForm, Place } from '../description.ts';
import { alternating, F1, F2, form, isAt, series } from '../formal.ts';
import { inverseTail } from './inverseTail.ts';
import { doubleFactorial, factorial, fullRecurrence, risingFactorial } from '../sequences.ts';

const atZero = (place: Place): Expression | null => (place.kind === 'finite' && isAt(place, 0) ? place.offset : null);
const realInfinity = (place: Place): { readonly z: Expression; readonly direction: 1 | -1 } | null =>
  place.kind === 'infinite' && (place.direction === 1 || place.direction === -1) ? { z: place.argument, direction: place.direction } : null;

/** sum of sign^k z^(2k+1)/(k!(2k+1)), DLMF 7.6.1. */
const errorSeries = (z: Expression, sign: 1 | -1): FormalSeries =>
  series(z, (j) => {
    if (j % 2 === 0) return Q.ZERO;
    const k = (j - 1) / 2;
    return Q.rational(sign === -1 && k % 2 === 1 ? -1n : 1n, BigInt(j) * factorial(k));
  });
const twoOverRootPi = over(2, sqrt(pi));

/** sum of (1/2)_k (sign/z^2)^k, DLMF 7.12.1. */
const tailSeries = (z: Expression, sign: 1 | -1): FormalSeries =>
  series(over(1, square(z)), (k) => Q.multiply(sign === -1 ? alternating(k) : Q.ONE, risingFactorial(oneHalf, k)), { divergent: true });
const tailBody = (z: Expression): Expression => times(over(1, sqrt(pi)), exp(neg(square(z))), over(1, z), F1);

export function erfLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const u = atZero(place);
  if (u) return form(times(twoOverRootPi, F1), [errorSeries(u, -1)], 'DLMF 7.6.1');
  const infinity = realInfinity(place);
  return infinity && form(minus(infinity.direction, tailBody(infinity.z)), [tailSeries(infinity.z, -1)], 'DLMF 7.12.1; odd');
}
export function erfcLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const u = atZero(place);
  if (u) return form(minus(1, times(twoOverRootPi, F1)), [errorSeries(u, -1)], 'DLMF 7.6.1');
  const infinity = realInfinity(place);
  return infinity && form(plus(infinity.direction === 1 ? 0 : 2, tailBody(infinity.z)), [tailSeries(infinity.z, -1)], 'DLMF 7.12.1, 7.4.2');
}
export function erfiLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const u = atZero(place);
  if (u) return form(times(twoOverRootPi, F1), [errorSeries(u, 1)], 'DLMF 7.6.1');
  const infinity = realInfinity(place);
  return infinity && form(times(over(1, sqrt(pi)), exp(square(infinity.z)), over(1, infinity.z), F1), [tailSeries(infinity.z, 1)], 'DLMF 7.12.1 with z replaced by iz; real part on the real line');
}
export function dawsonLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const u = atZero(place);
  if (u) {
    const coefficients = series(u, (j) => (j % 2 === 0 ? Q.ZERO : Q.multiply(alternating((j - 1) / 2), Q.rational(2n ** BigInt((j - 1) / 2), doubleFactorial(j)))));
    return form(F1, [coefficients], 'DLMF 7.6.3');
  }
  const infinity = realInfinity(place);
  return infinity && form(over(F1, times(2, infinity.z)), [tailSeries(infinity.z, 1)], 'DLMF 7.5.1, 7.12.1');
}

/** c_k of DLMF 7.17.2 in the recurrence form of Carlitz (1963): c_k = sum of c_m c_(k-1-m)/((m+1)(2m+1)). */
const inverseErrorNumbers = fullRecurrence<Rational>([Q.ONE], (k, c) => {
  let total = Q.ZERO;
  for (let m = 0; m < k; m++) total = Q.add(total, Q.divide(Q.multiply(c[m] ?? Q.ZERO, c[k - 1 - m] ?? Q.ZERO), Q.rational((m + 1) * (2 * m + 1))));
  return total;
});
/** inverf(x) = sum of c_k/(2k+1) w^(2k+1), w = sqrt(pi) x/2. */
const inverseErrorSeries = (x: Expression): FormalSeries =>
  series(times(oneHalf, sqrt(pi), x), (j) => (j % 2 === 0 ? Q.ZERO : Q.divide(inverseErrorNumbers((j - 1) / 2), Q.rational(j))));

/** Coefficients of P_n with P_1 = 1, P_(n+1) = P_n' + 2 n y P_n, lowest power first. */
const inverseErrorPolynomial = fullRecurrence<readonly bigint[]>([[], [1n]], (n, p) => {
  const before = p[n - 1] ?? [];
  return Array.from({ length: before.length + 1 }, (_, k) => BigInt(k + 1) * (before[k + 1] ?? 0n) + 2n * BigInt(n - 1) * (before[k - 1] ?? 0n));
});

/** inverf(center + u) = y + sum of (sqrt(pi)/2 e^(y^2) u)^n P_n(y)/n!, y = inverf(center): inverf' = sqrt(pi)/2 e^(inverf^2) differentiated n - 1 times (DLMF 7.17.3). */
const inverseErrorTaylor = (y: Expression, u: Expression): FormalSeries =>
  series(times(oneHalf, sqrt(pi), exp(square(y)), u), (n) => (n === 0 ? y : times(q(1n, factorial(n)), plus(...inverseErrorPolynomial(n).map((a, k) => times(q(a), pow(y, k)))))));

/** A number inside (-1, 1), or a quantity that is not a plain number. */
const mayLieInside = (x: Expression): boolean => x.kind !== 'number' || Q.compare(Q.absolute(x.value), Q.ONE) < 0;

export function erfinvLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const u = atZero(place);
  if (u) return form(F1, [inverseErrorSeries(u)], 'DLMF 7.17.2; Carlitz 1963 for the recurrence (from memory)');
  if (place.kind !== 'finite') return null;
  // inverf(1 - v) = inverfc(v), odd.
  if (isAt(place, 1)) return form(inverseTail(neg(log(neg(place.offset)))), [], 'DLMF 7.17(iii), 7.12.1');
  if (isAt(place, -1)) return form(neg(inverseTail(neg(log(place.offset)))), [], 'DLMF 7.17(iii), 7.12.1');
  return mayLieInside(place.center) ? form(F1, [inverseErrorTaylor(call('erfinv', place.center), place.offset)], 'DLMF 7.17.3, differentiated') : null;
}
export function erfcinvLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind !== 'finite') return null;
  if (isAt(place, 0)) return form(inverseTail(neg(log(place.offset))), [], 'DLMF 7.17(iii), 7.12.1');
  if (isAt(place, 2)) return form(neg(inverseTail(neg(log(neg(place.offset))))), [], 'DLMF 7.17(iii), 7.12.1');
  if (isAt(place, 1)) return form(neg(F1), [inverseErrorSeries(place.offset)], 'DLMF 7.17.2: inverfc(1 + u) = -inverf(u)');
  const center = minus(1, place.center);
  return mayLieInside(center) ? form(F1, [inverseErrorTaylor(call('erfcinv', place.center), neg(place.offset))], 'DLMF 7.17.3, differentiated; inverfc(x) = inverf(1 - x)') : null;
}

/** z^(4k+1) (C) or z^(4k+3) (S) series of DLMF 7.6.4, 7.6.6, as power series in z^4 without the leading power; powers of pi/2 stand in the argument. */
function fresnelSeries(z: Expression, odd: 0 | 1): FormalSeries {
  return series(square(times(oneHalf, pi, square(z))), (k) => Q.multiply(alternating(k), Q.rational(1n, factorial(2 * k + odd) * BigInt(4 * k + 1 + 2 * odd))));
}
/** The auxiliary f and g of DLMF 7.12.2, 7.12.3: sum of (-1)^m (1/2)_(2m + odd) / (pi z^2/2)^(2m), without their leading powers. */
const fresnelAuxiliary = (z: Expression, odd: 0 | 1): FormalSeries =>
  series(over(1, square(times(oneHalf, pi, square(z)))), (m) => Q.multiply(alternating(m), risingFactorial(oneHalf, 2 * m + odd)), { divergent: true });

function fresnelLocal(place: Place, which: 'S' | 'C'): LocalForm | null {
  const u = atZero(place);
  if (u) {
    const lead = which === 'C' ? u : times(oneHalf, pi, u, square(u));
    return form(times(lead, F1), [fresnelSeries(u, which === 'C' ? 0 : 1)], 'DLMF 7.6.4, 7.6.6');
  }
  const infinity = realInfinity(place);
  if (!infinity) return null;
  const { z, direction } = infinity;
  const phase = times(oneHalf, pi, square(z));
  const f = times(over(1, times(pi, z)), F1);
  const g = times(over(1, times(pi, z)), over(2, times(pi, square(z))), F2);
  const constant = q(direction, 2);
  const body = which === 'C' ? plus(constant, times(f, sin(phase)), neg(times(g, cos(phase)))) : plus(constant, neg(times(f, cos(phase))), neg(times(g, sin(phase))));
  return form(body, [fresnelAuxiliary(z, 0), fresnelAuxiliary(z, 1)], 'DLMF 7.5.3, 7.5.4, 7.12.2, 7.12.3');
}
export const fresnelSLocal = (_args: readonly Expression[], _index: number, place: Place): LocalForm | null => fresnelLocal(place, 'S');
export const fresnelCLocal = (_args: readonly Expression[], _index: number, place: Place): LocalForm | null => fresnelLocal(place, 'C');
