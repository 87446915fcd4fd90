/** Inverse circular and hyperbolic functions at their branch points and at infinity. Sources: DLMF 4.24, 4.38. */
import { type Expression, Q, rationalOf } from '../../expression/index.ts';
import { half, imaginary, log, minus, neg, over, pi, plus, q, sqrt, square, times } from '../compose.ts';
import type { FormalSeries, LocalForm, Place } from '../description.ts';
import { alternating, F1, form, isAt, ratioSeries, series } from '../formal.ts';

/** arccos(1 - v) = sqrt(2v) S(v), S = sum of 1*3*...*(2n-1)/(4^n (2n+1) n!) v^n (DLMF 4.24.2). */
function arccosSeries(v: Expression): FormalSeries {
  return ratioSeries(v, Q.ONE, (k) => Q.multiply(q(2 * k + 1, 4 * (k + 1)), q(2 * k + 1, 2 * k + 3)));
}

/** 0 where the place is neither 1 nor -1. */
const unitCenter = (place: Place): 1 | -1 | 0 => (isAt(place, 1) ? 1 : isAt(place, -1) ? -1 : 0);

export function asinLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind !== 'finite') return null;
  const u = place.offset;
  const center = unitCenter(place);
  if (center === 1) return form(minus(times(half, pi), times(sqrt(times(-2, u)), F1)), [arccosSeries(neg(u))], 'DLMF 4.24.2, 4.23.19');
  if (center === -1) return form(minus(times(sqrt(times(2, u)), F1), times(half, pi)), [arccosSeries(u)], 'DLMF 4.24.2, 4.23.19; odd');
  return null;
}
export function acosLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind !== 'finite') return null;
  const u = place.offset;
  const center = unitCenter(place);
  if (center === 1) return form(times(sqrt(times(-2, u)), F1), [arccosSeries(neg(u))], 'DLMF 4.24.2');
  if (center === -1) return form(minus(pi, times(sqrt(times(2, u)), F1)), [arccosSeries(u)], 'DLMF 4.24.2, arccos(-z) = pi - arccos z');
  return null;
}

/** sum of (-1)^k/(2k+1) z^-(2k+1). */
const arctanTail = (z: Expression): FormalSeries => series(over(1, z), (j) => (j % 2 === 0 ? Q.ZERO : Q.multiply(alternating((j - 1) / 2), q(1, j))));

function imaginaryUnitCenter(center: Expression): 1 | -1 | 0 {
  const isUnit = (e: Expression): boolean => e.kind === 'constant' && e.name === 'i';
  if (isUnit(center)) return 1;
  if (center.kind === 'negation' && isUnit(center.operand)) return -1;
  if (center.kind === 'product' && center.factors.length === 2 && center.factors.some(isUnit)) {
    const other = center.factors.find((f) => !isUnit(f));
    const scale = other && rationalOf(other);
    if (scale && Q.isOne(Q.absolute(scale))) return scale.num > 0n ? 1 : -1;
  }
  return 0;
}

export function atanLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    return form(minus(times(q(place.direction, 2), pi), F1), [arctanTail(place.argument)], 'DLMF 4.24.4');
  }
  // arctan z = (i/2)(log(1 - iz) - log(1 + iz)), DLMF 4.23.26.
  const center = imaginaryUnitCenter(place.center);
  const iu = times(imaginary, place.offset);
  const scale = times(half, imaginary);
  if (center === 1) return form(times(scale, minus(log(minus(2, iu)), log(iu))), [], 'DLMF 4.23.26');
  if (center === -1) return form(times(scale, minus(log(neg(iu)), log(plus(2, iu)))), [], 'DLMF 4.23.26');
  return null;
}

/** sum over k >= 1 of sign^(k+1) (2k-1)!!/((2k)!! 2k) z^-2k (DLMF 4.38.3, 4.38.4 for sign 1 and -1 up to overall sign). */
function areaTail(z: Expression, sign: 1 | -1): FormalSeries {
  const binomials = ratioSeries(z, Q.ONE, (k) => q(2 * k + 1, 2 * k + 2));
  return series(over(1, square(z)), (k) => {
    if (k === 0) return Q.ZERO;
    const c = binomials.coefficient(k);
    if ('kind' in c) return Q.ZERO;
    const size = Q.divide(c, Q.rational(2 * k));
    return sign === 1 && k % 2 === 0 ? Q.negate(size) : size;
  });
}

export function asinhLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind !== 'infinite' || (place.direction !== 1 && place.direction !== -1)) return null;
  const size = times(place.direction, place.argument);
  return form(times(place.direction, plus(log(times(2, size)), F1)), [areaTail(place.argument, 1)], 'DLMF 4.38.3; odd');
}
export function acoshLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    if (place.direction !== 1) return null;
    return form(minus(log(times(2, place.argument)), F1), [areaTail(place.argument, -1)], 'DLMF 4.38.4');
  }
  if (!isAt(place, 1)) return null;
  return form(times(sqrt(times(2, place.offset)), F1), [arccosSeries(neg(place.offset))], 'DLMF 4.24.2 with arccosh(1+u) = sqrt(2u) S(-u)');
}
export function atanhLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind !== 'finite') return null;
  const u = place.offset;
  const center = unitCenter(place);
  if (center === 1) return form(times(half, minus(log(plus(2, u)), log(neg(u)))), [], 'DLMF 4.37.24');
  if (center === -1) return form(times(half, minus(log(u), log(minus(2, u)))), [], 'DLMF 4.37.24');
  return null;
}
