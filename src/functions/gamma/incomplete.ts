/** Incomplete gamma functions of x for a fixed first argument. Sources: DLMF 8.2 to 8.11. */
import { type Expression, Q, rationalOf } from '../../expression/index.ts';
import { argument, bigO, euler, exp, gamma, lift, log, minus, neg, over, plus, pow, scaled, times } from '../compose.ts';
import type { FormalSeries, LocalForm, Place } from '../description.ts';
import { asInteger } from '../exactForms.ts';
import { alternating, F1, form, isAt, ratioSeries, series, terminationLength } from '../formal.ts';
import { factorial, harmonicNumber } from '../sequences.ts';

/** sum of (1-a)_k (-1/x)^k: Gamma(a,x) = x^(a-1) e^-x times it (DLMF 8.11.2). Ends for a = 1, 2, ... */
function upperSeriesAtInfinity(a: Expression, x: Expression): FormalSeries {
  const exact = rationalOf(a);
  const top = exact ? Q.subtract(Q.ONE, exact) : minus(1, a);
  const length = terminationLength([top]);
  return ratioSeries(over(1, x), Q.ONE, (k) => scaled(Q.MINUS_ONE, 'kind' in top ? plus(top, k) : Q.add(top, Q.rational(k))), {
    divergent: length === null,
    ...(length === null ? {} : { length }),
  });
}

/** sum of (-1)^k x^k/(k!(a+k)), leaving out the term whose denominator vanishes. */
export function lowerSeriesAtZero(a: Expression, x: Expression): FormalSeries {
  const exact = rationalOf(a);
  return series(x, (k) => {
    const scale = Q.divide(alternating(k), Q.rational(factorial(k)));
    if (!exact) return over(scale, plus(a, k));
    const bottom = Q.add(exact, Q.rational(k));
    return Q.isZero(bottom) ? Q.ZERO : Q.divide(scale, bottom);
  });
}

/** gamma(a,x) for large a and fixed x > 0: x^a e^-x sum of x^k/(a)_(k+1) (DLMF 8.11.4, 8.11(ii)), written out with an O-term. */
const LARGE_PARAMETER_TERMS = 16;
function largeParameter(x: Expression, place: Place): Expression | null {
  if (place.kind !== 'infinite' || place.direction !== 1) return null;
  const a = place.argument;
  let term: Expression = over(1, a);
  const terms: Expression[] = [];
  for (let k = 0; k < LARGE_PARAMETER_TERMS; k++) {
    terms.push(term);
    term = over(times(term, x), plus(a, k + 1));
  }
  return times(pow(x, a), exp(neg(x)), plus(...terms, bigO(pow(a, -LARGE_PARAMETER_TERMS - 1))));
}

export function upperGammaLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  if (index === 0) {
    const lower = largeParameter(argument(args, 1), place);
    return lower && place.kind === 'infinite' ? form(minus(gamma(place.argument), lower), [], 'DLMF 8.2.3, 8.11.4') : null;
  }
  if (index !== 1) return null;
  const a = argument(args, 0);
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    const x = place.argument;
    return form(times(pow(x, minus(a, 1)), exp(neg(x)), F1), [upperSeriesAtInfinity(a, x)], 'DLMF 8.11.2');
  }
  if (!isAt(place, 0)) return null;
  const x = place.offset;
  const n = asInteger(a);
  if (n === null || n > 0) return form(minus(gamma(a), times(pow(x, a), F1)), [lowerSeriesAtZero(a, x)], 'DLMF 8.7.3');
  // a = -m: Gamma(-m,x) = (-1)^m/m! (psi(m+1) - log x) - x^-m sum over k other than m (DLMF 8.4.15).
  const m = -n;
  const scale = Q.divide(alternating(m), Q.rational(factorial(m)));
  return form(minus(times(scale, minus(minus(harmonicNumber(m), euler), log(x))), times(pow(x, n), F1)), [lowerSeriesAtZero(a, x)], 'DLMF 8.4.15');
}

export function lowerGammaLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  if (index === 0) {
    const lower = largeParameter(argument(args, 1), place);
    return lower && form(lower, [], 'DLMF 8.11.4');
  }
  if (index !== 1) return null;
  const a = argument(args, 0);
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    const x = place.argument;
    return form(minus(gamma(a), times(pow(x, minus(a, 1)), exp(neg(x)), F1)), [upperSeriesAtInfinity(a, x)], 'DLMF 8.2.3, 8.11.2');
  }
  if (!isAt(place, 0)) return null;
  return form(times(pow(place.offset, a), F1), [lowerSeriesAtZero(a, place.offset)], 'DLMF 8.7.1');
}

/** Gamma(n, x) for n = 1, 2, ... is elementary (DLMF 8.4.8): (n-1)! e^-x sum of x^k/k!. */
export function upperGammaValue(args: readonly Expression[]): Expression | null {
  const [a = lift(1), x = lift(0)] = args;
  const zero = rationalOf(x);
  if (zero && Q.isZero(zero)) {
    const exact = rationalOf(a);
    return exact && exact.num > 0n ? gamma(a) : null;
  }
  const n = asInteger(a, 40);
  if (n === null || n < 1) return null;
  const terms = Array.from({ length: n }, (_, k) => times(Q.rational(factorial(n - 1), factorial(k)), pow(x, k)));
  return times(exp(neg(x)), plus(...terms));
}
export function lowerGammaValue(args: readonly Expression[]): Expression | null {
  const upper = upperGammaValue(args);
  const zero = rationalOf(argument(args, 1));
  if (zero && Q.isZero(zero)) return upper && lift(0);
  return upper && minus(gamma(argument(args, 0)), upper);
}
export const incompleteDerivative =
  (sign: 1 | -1) =>
  ([a = lift(1), x = lift(0)]: readonly Expression[], index: number): Expression | null =>
    index === 1 ? times(sign, pow(x, minus(a, 1)), exp(neg(x))) : null;
