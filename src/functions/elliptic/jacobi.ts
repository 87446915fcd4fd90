/** Jacobian elliptic functions of the argument for a fixed modulus. Sources: DLMF 22.8, 22.10, 22.13. */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { argument, call, lift, minus, neg, over, plus, pow, square, times } from '../compose.ts';
import type { FormalSeries, FunctionDescription, Place } from '../description.ts';
import { F1, F2, F3, form, isAt, series } from '../formal.ts';
import { factorial, binomial } from '../sequences.ts';

export type JacobiKind = 'sn' | 'cn' | 'dn';
/** Coefficients of 1, m, m^2, ... */
type Polynomial = readonly bigint[];

/** n-th derivatives at u = 0 of sn, cn, dn as polynomials in m = k^2, from sn' = cn dn, cn' = -sn dn, dn' = -m sn cn (DLMF 22.13.1 to 22.13.3) by Leibniz' rule. */
const derivatives: Record<JacobiKind, Polynomial[]> = { sn: [[0n]], cn: [[1n]], dn: [[1n]] };

function leibniz(a: readonly Polynomial[], b: readonly Polynomial[], n: number): bigint[] {
  const out: bigint[] = [];
  for (let j = 0; j <= n; j++) {
    const scale = binomial(n, j);
    const [p, r] = [a[j] ?? [], b[n - j] ?? []];
    p.forEach((x, i) => {
      if (x !== 0n) r.forEach((y, l) => (out[i + l] = (out[i + l] ?? 0n) + scale * x * y));
    });
  }
  return Array.from(out, (v) => v ?? 0n);
}
function derivativeAtZero(kind: JacobiKind, n: number): Polynomial {
  while (derivatives.sn.length <= n) {
    const at = derivatives.sn.length - 1;
    const sn = leibniz(derivatives.cn, derivatives.dn, at);
    const cn = leibniz(derivatives.sn, derivatives.dn, at).map((v) => -v);
    const dn = [0n, ...leibniz(derivatives.sn, derivatives.cn, at).map((v) => -v)];
    derivatives.sn.push(sn);
    derivatives.cn.push(cn);
    derivatives.dn.push(dn);
  }
  return derivatives[kind][n] ?? [];
}

function maclaurin(kind: JacobiKind, k: Expression, u: Expression): FormalSeries {
  const exact = rationalOf(k);
  return series(u, (n) => {
    const p = derivativeAtZero(kind, n);
    const scale = Q.rational(1n, factorial(n));
    if (exact) {
      const m = Q.multiply(exact, exact);
      return Q.multiply(scale, p.reduceRight<Rational>((sum, c) => Q.add(Q.multiply(sum, m), Q.rational(c)), Q.ZERO));
    }
    const terms = p.flatMap((c, i) => (c === 0n ? [] : [times(Q.multiply(scale, Q.rational(c)), pow(k, 2 * i))]));
    if (terms.length === 0) return Q.ZERO;
    const [only] = terms;
    return terms.length === 1 && only && only.kind === 'number' ? only.value : plus(...terms);
  });
}

/** In the argument u at any regular point, by the addition theorems DLMF 22.8.1 to 22.8.3. */
export const jacobiLocal =
  (kind: JacobiKind): NonNullable<FunctionDescription['local']> =>
  (args, index, place: Place) => {
    if (index !== 0 || place.kind !== 'finite') return null;
    const k = argument(args, 1);
    if (isAt(place, 0)) return form(F1, [maclaurin(kind, k, place.offset)], 'DLMF 22.10.1 to 22.10.3');
    const at = (id: 'Sn' | 'Cn' | 'Dn'): Expression => call(`jacobi${id}`, place.center, k);
    const [s, c, d] = [at('Sn'), at('Cn'), at('Dn')];
    const formals = (['sn', 'cn', 'dn'] as const).map((id) => maclaurin(id, k, place.offset));
    const bottom = minus(1, times(square(k), square(s), square(F1)));
    const top =
      kind === 'sn'
        ? plus(times(s, F2, F3), times(c, d, F1))
        : kind === 'cn'
          ? minus(times(c, F2), times(s, d, F1, F3))
          : minus(times(d, F3), times(square(k), s, c, F1, F2));
    return form(over(top, bottom), formals, 'DLMF 22.8.1 to 22.8.3');
  };

export const jacobiDerivative =
  (kind: JacobiKind): NonNullable<FunctionDescription['derivative']> =>
  ([u = lift(0), k = lift(0)], index) => {
    if (index !== 0) return null;
    const f = (id: 'Sn' | 'Cn' | 'Dn'): Expression => call(`jacobi${id}`, u, k);
    if (kind === 'sn') return times(f('Cn'), f('Dn'));
    if (kind === 'cn') return neg(times(f('Sn'), f('Dn')));
    return neg(times(square(k), f('Sn'), f('Cn')));
  };

/** u = 0, and the limits k = 0 (circular) and k = 1 (hyperbolic), DLMF 22.5(ii). */
export const jacobiValue =
  (kind: JacobiKind): NonNullable<FunctionDescription['value']> =>
  (args) => {
    const u = argument(args, 0);
    const zero = rationalOf(u);
    if (zero && Q.isZero(zero)) return lift(kind === 'sn' ? 0 : 1);
    const k = rationalOf(argument(args, 1));
    if (!k) return null;
    if (Q.isZero(k)) return kind === 'dn' ? lift(1) : call(kind === 'sn' ? 'sin' : 'cos', u);
    if (Q.isOne(Q.absolute(k))) return call(kind === 'sn' ? 'tanh' : 'sech', u);
    return null;
  };

/** am(u, k) at 0: the integral of the series of dn (DLMF 22.16.1). */
export const amplitudeLocal: NonNullable<FunctionDescription['local']> = (args, index, place: Place) => {
  if (index !== 0 || place.kind !== 'finite' || !isAt(place, 0)) return null;
  const inner = maclaurin('dn', argument(args, 1), place.offset);
  const integrated = series(place.offset, (n) => {
    if (n === 0) return Q.ZERO;
    const c = inner.coefficient(n - 1);
    return 'kind' in c ? times(Q.rational(1, n), c) : Q.divide(c, Q.rational(n));
  });
  return form(F1, [integrated], 'DLMF 22.16.1, 22.10.3');
};
