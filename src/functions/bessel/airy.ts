/** Airy functions and their derivatives. Sources: DLMF 9.2, 9.4, 9.7. */
import { type Expression, Q, type Rational } from '../../expression/index.ts';
import { call, cos, exp, gamma, lift, minus, neg, over, pi, plus, pow, q, sin, sqrt, times } from '../compose.ts';
import type { FormalSeries, FunctionDescription, LocalForm, Place } from '../description.ts';
import { F1, F2, form, isAt, series } from '../formal.ts';
import { recurrence } from '../sequences.ts';

export type AiryKind = 'Ai' | 'Bi' | 'AiPrime' | 'BiPrime';

/** u_k of DLMF 9.7.2: u_0 = 1, u_k = u_(k-1) (6k-5)(6k-3)(6k-1)/(216 k (2k-1)). */
const airyU = recurrence<Rational>(Q.ONE, (k, previous) => Q.multiply(previous, q(BigInt(6 * k - 5) * BigInt(6 * k - 3) * BigInt(6 * k - 1), BigInt(216 * k) * BigInt(2 * k - 1))));
/** v_k = (6k+1)/(1-6k) u_k. */
const airyV = (k: number): Rational => Q.multiply(airyU(k), q(6 * k + 1, 1 - 6 * k));
const isPrime = (kind: AiryKind): boolean => kind === 'AiPrime' || kind === 'BiPrime';

/** sum of sign^k c_k zeta^-k. */
const plain = (zeta: Expression, kind: AiryKind, sign: 1 | -1): FormalSeries =>
  series(
    over(1, zeta),
    (k) => {
      const c = isPrime(kind) ? airyV(k) : airyU(k);
      return sign === -1 && k % 2 === 1 ? Q.negate(c) : c;
    },
    { divergent: true },
  );
/** Every second member with signs (-1)^(k div 2). */
const part = (zeta: Expression, kind: AiryKind, parity: 0 | 1): FormalSeries =>
  series(
    over(1, zeta),
    (k) => {
      if (k % 2 !== parity) return Q.ZERO;
      const c = isPrime(kind) ? airyV(k) : airyU(k);
      return Math.floor(k / 2) % 2 === 0 ? c : Q.negate(c);
    },
    { divergent: true },
  );

/** The Maclaurin series f and g of DLMF 9.4.1 and their derivatives, in powers of z^3 without the leading power (g: z, f': z^2/2). */
function maclaurin(z: Expression, which: 'f' | 'g', derivative: boolean): FormalSeries {
  const start = which === 'f' ? 0 : 1;
  // Taylor coefficients t_n of the solution: t_(n+3) = t_n/((n+3)(n+2)).
  const t = recurrence<Rational>(Q.ONE, (k, previous) => Q.divide(previous, Q.rational((3 * k + start) * (3 * k + start - 1))));
  return series(pow(z, 3), (k) => {
    if (!derivative) return t(k);
    const index = which === 'f' ? k + 1 : k;
    return Q.multiply(t(index), Q.rational(3 * index + start));
  });
}

/** Ai(0) = 3^(-2/3)/Gamma(2/3), -Ai'(0) = 3^(-1/3)/Gamma(1/3) (DLMF 9.2.3, 9.2.4). */
const c1 = over(pow(3, q(-2, 3)), gamma(q(2, 3)));
const c2 = over(pow(3, q(-1, 3)), gamma(q(1, 3)));

function atZero(kind: AiryKind, z: Expression): LocalForm {
  const prime = isPrime(kind);
  // Derivatives: f' = z^2 * series, g' = series.
  const f = prime ? times(pow(z, 2), F1) : F1;
  const g = prime ? F2 : times(z, F2);
  const bi = kind === 'Bi' || kind === 'BiPrime';
  const body = bi ? times(sqrt(3), plus(times(c1, f), times(c2, g))) : minus(times(c1, f), times(c2, g));
  return form(body, [maclaurin(z, 'f', prime), maclaurin(z, 'g', prime)], 'DLMF 9.4.1 to 9.4.4');
}

function atPlusInfinity(kind: AiryKind, z: Expression): LocalForm {
  const zeta = times(q(2, 3), pow(z, q(3, 2)));
  const rootPi = sqrt(pi);
  const quarter = pow(z, q(1, 4));
  switch (kind) {
    case 'Ai':
      return form(times(q(1, 2), over(1, rootPi), over(1, quarter), exp(neg(zeta)), F1), [plain(zeta, kind, -1)], 'DLMF 9.7.5');
    case 'AiPrime':
      return form(times(q(-1, 2), over(1, rootPi), quarter, exp(neg(zeta)), F1), [plain(zeta, kind, -1)], 'DLMF 9.7.6');
    case 'Bi':
      return form(times(over(1, rootPi), over(1, quarter), exp(zeta), F1), [plain(zeta, kind, 1)], 'DLMF 9.7.7');
    case 'BiPrime':
      return form(times(over(1, rootPi), quarter, exp(zeta), F1), [plain(zeta, kind, 1)], 'DLMF 9.7.8');
  }
}

function atMinusInfinity(kind: AiryKind, z: Expression): LocalForm {
  const w = neg(z);
  const zeta = times(q(2, 3), pow(w, q(3, 2)));
  const omega = minus(zeta, times(q(1, 4), pi));
  const amplitude = isPrime(kind) ? times(over(1, sqrt(pi)), pow(w, q(1, 4))) : times(over(1, sqrt(pi)), over(1, pow(w, q(1, 4))));
  const formals = [part(zeta, kind, 0), part(zeta, kind, 1)];
  const body = (first: Expression, second: Expression): Expression => times(amplitude, plus(times(first, F1), times(second, F2)));
  switch (kind) {
    case 'Ai':
      return form(body(cos(omega), sin(omega)), formals, 'DLMF 9.7.9');
    case 'AiPrime':
      return form(body(sin(omega), neg(cos(omega))), formals, 'DLMF 9.7.10');
    case 'Bi':
      return form(body(neg(sin(omega)), cos(omega)), formals, 'DLMF 9.7.11');
    case 'BiPrime':
      return form(body(cos(omega), sin(omega)), formals, 'DLMF 9.7.12');
  }
}

export const airyLocal =
  (kind: AiryKind): NonNullable<FunctionDescription['local']> =>
  (_args, _index, place: Place) => {
    if (place.kind === 'infinite') {
      if (place.direction === 1) return atPlusInfinity(kind, place.argument);
      return place.direction === -1 ? atMinusInfinity(kind, place.argument) : null;
    }
    return isAt(place, 0) ? atZero(kind, place.offset) : null;
  };

/** y'' = z y (DLMF 9.2.1); for the derivative w = y': z w'' - w' - z^2 w = 0. */
export const airyEquation =
  (kind: AiryKind): NonNullable<FunctionDescription['equation']> =>
  () => {
    const base = kind === 'Ai' || kind === 'AiPrime' ? 'airyAi' : 'airyBi';
    if (!isPrime(kind)) return { polynomials: [[lift(0), lift(-1)], [], [lift(1)]], initial: [(p) => call(base, p), (p) => call(`${base}Prime`, p)] };
    return { polynomials: [[lift(0), lift(0), lift(-1)], [lift(-1)], [lift(0), lift(1)]], initial: [(p) => call(`${base}Prime`, p), (p) => times(p, call(base, p))] };
  };

/** Values at 0 (DLMF 9.2.3 to 9.2.6). */
export const airyValue =
  (kind: AiryKind): NonNullable<FunctionDescription['value']> =>
  ([z]) => {
    if (!z || z.kind !== 'number' || !Q.isZero(z.value)) return null;
    switch (kind) {
      case 'Ai':
        return c1;
      case 'AiPrime':
        return neg(c2);
      case 'Bi':
        return times(sqrt(3), c1);
      case 'BiPrime':
        return times(sqrt(3), c2);
    }
  };
