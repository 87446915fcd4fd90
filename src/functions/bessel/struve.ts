/** Struve functions H and L of x for a fixed order. Sources: DLMF 11.2, 11.6. */
import { type Expression, Q, type Rational } from '../../expression/index.ts';
import { argument, call, gamma, half, lift, minus, neg, over, pi, plus, pow, q, reciprocalGamma, scaled, sqrt, square, times } from '../compose.ts';
import type { FormalSeries, FunctionDescription, LocalForm, Place } from '../description.ts';
import { form, formalName, hypergeometricSeries, isAt, ratioSeries, terminationLength } from '../formal.ts';
import { besselILocal, besselYLocal, type Order, orderOf } from './cylinder.ts';

const shift = (order: Order, r: Rational): Order => ('kind' in order ? plus(order, r) : Q.add(order, r));

function atZero(order: Order, x: Expression, sign: 1 | -1): LocalForm {
  const top = shift(order, q(3, 2));
  const lead = over(pow(times(half, x), lift(shift(order, Q.ONE))), times(gamma(q(3, 2)), gamma(lift(top))));
  const sum = hypergeometricSeries(times(q(1, 4), square(x)), [Q.ONE], [q(3, 2), top], Q.rational(sign));
  return form(times(lead, formalName(0)), [sum], sign === -1 ? 'DLMF 11.2.1' : 'DLMF 11.2.2');
}

/** (1/pi) Gamma(1/2)/Gamma(nu+1/2) (x/2)^(nu-1) times sum of (1/2)_k (1/2-nu)_k (-sign... )(4/x^2)^k: DLMF 11.6.1 with Gamma(nu+1/2-k) = Gamma(nu+1/2) (-1)^k/(1/2-nu)_k. */
function tail(order: Order, x: Expression, sign: 1 | -1): { readonly lead: Expression; readonly sum: FormalSeries } {
  const second = shift('kind' in order ? neg(order) : Q.negate(order), Q.HALF);
  const length = terminationLength([second]);
  const sum = ratioSeries(
    over(4, square(x)),
    Q.ONE,
    (k) => {
      const factor = 'kind' in second ? plus(second, k) : Q.add(second, Q.rational(k));
      return scaled(Q.multiply(Q.rational(sign), Q.add(Q.HALF, Q.rational(k))), factor);
    },
    { divergent: length === null, ...(length === null ? {} : { length }) },
  );
  const lead = times(over(pow(times(half, x), lift(shift(order, Q.MINUS_ONE))), sqrt(pi)), reciprocalGamma(lift(shift(order, Q.HALF))));
  return { lead, sum };
}

function atInfinity(which: 'H' | 'L', order: Order, args: readonly Expression[], place: Place & { readonly kind: 'infinite' }): LocalForm | null {
  const x = place.argument;
  const base = which === 'H' ? besselYLocal(args, 1, place) : besselILocal([lift('kind' in order ? neg(order) : Q.negate(order)), x], 1, place);
  if (!base) return null;
  const { lead, sum } = tail(order, x, which === 'H' ? -1 : 1);
  const name = formalName(Object.keys(base.formals).length);
  const key = name.kind === 'symbol' ? name.name : '';
  return {
    body: which === 'H' ? plus(base.body, times(lead, name)) : minus(base.body, times(lead, name)),
    formals: { ...base.formals, [key]: sum },
    source: which === 'H' ? 'DLMF 11.2.5, 11.6.1' : 'Abramowitz & Stegun 12.2.6; DLMF 11.5.6, 11.6.2',
    ...(which === 'L' ? { subdominantDropped: true } : {}),
  };
}

export const struveLocal =
  (which: 'H' | 'L'): NonNullable<FunctionDescription['local']> =>
  (args, index, place: Place) => {
    if (index !== 1) return null;
    const order = orderOf(args);
    // At nu = -1/2, -3/2, ... H and L are Bessel functions (DLMF 11.4.3): the lead 1/Gamma(nu+1/2) vanishes and the form below is exact.
    if (place.kind === 'infinite') return place.direction === 1 ? atInfinity(which, order, args, place) : null;
    if (!isAt(place, 0)) return null;
    if (!('kind' in order) && order.den === 2n && order.num <= -3n) return null;
    return atZero(order, place.offset, which === 'H' ? -1 : 1);
  };

/** H_nu' = H_(nu-1) - (nu/x) H_nu, L likewise (DLMF 11.4.27, 11.4.29). */
export const struveDerivative =
  (which: 'H' | 'L'): NonNullable<FunctionDescription['derivative']> =>
  (args, index) => {
    if (index !== 1) return null;
    const order = orderOf(args);
    const x = argument(args, 1);
    return minus(call(`struve${which}`, lift(shift(order, Q.MINUS_ONE)), x), times(lift(order), over(call(`struve${which}`, lift(order), x), x)));
  };

/** From DLMF 11.2.7: (x d/dx - nu - 1) applied to x^2 f'' + x f' + (s x^2 - nu^2) f = const x^(nu+1); s = 1 for H, -1 for L. */
export const struveEquation =
  (which: 'H' | 'L'): NonNullable<FunctionDescription['equation']> =>
  (args, index) => {
    if (index !== 1) return null;
    const nu = argument(args, 0);
    const s = which === 'H' ? 1 : -1;
    const up = plus(nu, 1);
    const zero = lift(0);
    const derivative = struveDerivative(which);
    const f = (p: Expression): Expression => call(`struve${which}`, nu, p);
    const f1 = (p: Expression): Expression => derivative([nu, p], 1) ?? zero;
    const rhs = (p: Expression): Expression => over(pow(times(half, p), minus(nu, 1)), times(sqrt(pi), gamma(plus(nu, q(1, 2)))));
    const f2 = (p: Expression): Expression => minus(minus(rhs(p), over(f1(p), p)), times(minus(s, over(square(nu), square(p))), f(p)));
    return {
      polynomials: [
        [times(up, square(nu)), zero, times(s, minus(2, up))],
        [zero, minus(minus(1, up), square(nu)), zero, lift(s)],
        [zero, zero, minus(3, up)],
        [zero, zero, zero, lift(1)],
      ],
      initial: [f, f1, f2],
    };
  };
