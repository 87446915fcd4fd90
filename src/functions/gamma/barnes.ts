/** Barnes G and its logarithm, the hyperfactorial. Sources: DLMF 5.17. */
import { build, type Expression, Q } from '../../expression/index.ts';
import { argument, call, euler, exp, log, minus, over, pi, plus, pow, q, scaled, square, times } from '../compose.ts';
import type { FormalSeries, LocalForm, Place } from '../description.ts';
import { asInteger } from '../exactForms.ts';
import { alternating, atInfinity, F1, F2, form, integerCenter, series } from '../formal.ts';
import { bernoulli, factorial } from '../sequences.ts';
import { zetaAtInteger } from '../zeta/exactZeta.ts';
import { polygammaTree } from './gamma.ts';

/** log G(n + u) - log G(n) for n >= 1, in powers of u: DLMF 5.17.3 and G(z+1) = Gamma(z) G(z). */
function regularSeries(n: number, u: Expression): FormalSeries {
  const atOne = (k: number): Expression => {
    if (k === 1) return times(q(1, 2), minus(log(times(2, pi)), 1));
    if (k === 2) return times(q(-1, 2), plus(1, euler));
    return plus(scaled(Q.multiply(alternating(k - 1), q(1, k)), zetaAtInteger(k - 1)));
  };
  return series(u, (k) => {
    if (k === 0) return Q.ZERO;
    const shifts = Array.from({ length: n - 1 }, (_, j) => times(Q.rational(1n, factorial(k)), polygammaTree(k - 1, build.number(j + 1))));
    return plus(atOne(k), ...shifts);
  });
}

/** log G(1+z) = z^2/2 log z - 3z^2/4 + z/2 log 2pi - log(z)/12 + 1/12 - log A + sum of B_(2k+2)/(4k(k+1)) z^-2k: DLMF 5.17.5 with Stirling's series put in. */
function logarithmAtInfinity(z: Expression): { readonly body: Expression; readonly formals: readonly FormalSeries[] } {
  const formal = series(
    over(1, square(z)),
    (k) => (k === 0 ? Q.ZERO : Q.divide(bernoulli(2 * k + 2), Q.rational(4 * k * (k + 1)))),
    { divergent: true },
  );
  const body = plus(
    times(minus(times(q(1, 2), square(z)), q(1, 12)), log(z)),
    times(q(-3, 4), square(z)),
    times(q(1, 2), z, log(times(2, pi))),
    q(1, 12),
    times(-1, log(build.constant('glaisher'))),
    F1,
  );
  return { body, formals: [formal] };
}

const superfactorialLog = (n: number): bigint => {
  let value = 1n;
  for (let j = 1; j < n - 1; j++) value *= factorial(j);
  return value;
};

export function logBarnesGLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const w = atInfinity(place, 1);
  if (w) {
    const { body, formals } = logarithmAtInfinity(minus(w, 1));
    return form(body, formals, 'DLMF 5.17.5');
  }
  const n = integerCenter(place);
  if (n === null || n < 1 || n > 40 || place.kind !== 'finite') return null;
  return form(plus(log(superfactorialLog(n)), F1), [regularSeries(n, place.offset)], 'DLMF 5.17.3');
}

export function barnesGLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const w = atInfinity(place, 1);
  if (w) {
    const { body, formals } = logarithmAtInfinity(minus(w, 1));
    return form(exp(body), formals, 'DLMF 5.17.5');
  }
  const n = integerCenter(place);
  if (n === null || Math.abs(n) > 40 || place.kind !== 'finite') return null;
  const u = place.offset;
  if (n >= 1) return form(times(superfactorialLog(n), exp(F1)), [regularSeries(n, u)], 'DLMF 5.17.3');
  // G(-m+u) = G(1+u) / (Gamma(u) Gamma(u-1) ... Gamma(u-m)); 1/Gamma(u-j) = (-1)^j j! u exp(-T_j(u)).
  const m = -n;
  let scale = 1n;
  for (let j = 0; j <= m; j++) scale *= (j % 2 === 0 ? 1n : -1n) * factorial(j);
  const exponents = series(u, (k) => {
    if (k === 0) return Q.ZERO;
    const parts = Array.from({ length: m + 1 }, (_, j) => {
      let harmonic = Q.ZERO;
      for (let i = 1; i <= j; i++) harmonic = Q.add(harmonic, Q.power(Q.rational(i), -k));
      const zetaPart = k === 1 ? times(-1, euler) : plus(scaled(alternating(k), zetaAtInteger(k)));
      return times(q(-1, k), plus(zetaPart, harmonic));
    });
    return plus(...parts);
  });
  return form(times(scale, pow(u, m + 1), exp(plus(F1, F2))), [regularSeries(1, u), exponents], 'DLMF 5.17.1, 5.17.3');
}

/** G(n) at integers: zero for n <= 0, superfactorials above. */
export function barnesGValue(args: readonly Expression[]): Expression | null {
  const n = asInteger(argument(args, 0), 60);
  if (n === null) return null;
  return plus(n <= 0 ? 0n : superfactorialLog(n));
}

/** d/dw log G(w) = (w-1) psi(w) - w + (1 + log 2pi)/2, from DLMF 5.17.4. */
export const logBarnesGDerivative = ([w = build.number(1)]: readonly Expression[]): Expression =>
  plus(times(minus(w, 1), call('digamma', w)), times(-1, w), times(q(1, 2), plus(1, log(times(2, pi)))));
