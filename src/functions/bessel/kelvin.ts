/** Kelvin functions of x for a fixed order. Sources: DLMF 10.61, 10.65, 10.67. */
import { type Expression, Q, type Rational } from '../../expression/index.ts';
import { argument, call, cos, euler, exp, gamma, half, lift, log, minus, neg, over, pi, plus, pow, q, scaled, sin, sqrt, square, times } from '../compose.ts';
import type { FormalSeries, FunctionDescription, LocalForm, Place } from '../description.ts';
import { formalName, form, isAt, series } from '../formal.ts';
import { factorial, harmonicNumber } from '../sequences.ts';
import { hankelCoefficients, type Order, orderOf } from './cylinder.ts';

export type KelvinKind = 'Ber' | 'Bei' | 'Ker' | 'Kei';

/** cos or sin of n pi/4 as an exact value. */
function eighth(n: number, which: 'cos' | 'sin'): Rational | Expression {
  const turn = ((which === 'cos' ? n : n - 2) % 8 + 8) % 8;
  const root = over(sqrt(2), 2);
  return [Q.ONE, root, Q.ZERO, neg(root), Q.MINUS_ONE, neg(root), Q.ZERO, root][turn] ?? Q.ZERO;
}
/** cos or sin of quarters nu pi/4 + k pi/2 for any order. */
function turned(order: Order, k: number, which: 'cos' | 'sin', quarters = 3): Rational | Expression {
  if (!('kind' in order) && Q.isInteger(order)) return eighth(quarters * Number(order.num % 8n) + 2 * k, which);
  return call(which, times(plus(times(q(quarters, 4), lift(order)), q(k, 2)), pi));
}

const quarterSquare = (x: Expression): Expression => times(q(1, 4), square(x));

/** ber or bei of any order that is no negative integer, without (x/2)^nu/Gamma(nu+1): DLMF 10.65.1. */
function entire(order: Order, x: Expression, which: 'cos' | 'sin', quarters = 3): FormalSeries {
  const rising: (Rational | Expression)[] = [Q.ONE];
  return series(quarterSquare(x), (k) => {
    for (let i = rising.length; i <= k; i++) {
      const next = 'kind' in order ? plus(order, i) : Q.add(order, Q.rational(i));
      rising.push(scaled(rising[i - 1] ?? Q.ONE, next));
    }
    const bottom = scaled(rising[k] ?? Q.ONE, Q.rational(factorial(k)));
    const top = turned(order, k, which, quarters);
    return 'kind' in bottom || 'kind' in top ? over(lift(top), lift(bottom)) : Q.divide(top, bottom);
  });
}

function atZero(kind: KelvinKind, order: Order, x: Expression): LocalForm | null {
  const which = kind === 'Ber' || kind === 'Ker' ? 'cos' : 'sin';
  const lead = over(pow(times(half, x), lift(order)), gamma('kind' in order ? plus(order, 1) : Q.add(order, Q.ONE)));
  const isInteger = !('kind' in order) && Q.isInteger(order);
  if (isInteger && order.num < 0n) return null;
  if (kind === 'Ber' || kind === 'Bei') return form(times(lead, formalName(0)), [entire(order, x, which)], 'DLMF 10.65.1');
  if (!isInteger) {
    // exp(-nu pi i/2) K_nu(x exp(i pi/4)) with K_nu from I of both signs (DLMF 10.61.2, 10.27.4).
    const minusOrder = 'kind' in order ? neg(order) : Q.negate(order);
    const down = times(over(pow(times(half, x), lift(minusOrder)), gamma(plus(minusOrder, 1))), formalName(0));
    const up = times(lead, formalName(1));
    const body = over(times(half, pi, minus(down, up)), sin(times(lift(order), pi)));
    return form(body, [entire(minusOrder, x, which), entire(order, x, which, -1)], 'DLMF 10.61.2, 10.27.4');
  }
  const n = Number(order.num);
  const [ber, bei] = [times(lead, formalName(0)), times(lead, formalName(1))];
  const finite = series(quarterSquare(x), (k) => scaled(Q.rational(factorial(n - k - 1), factorial(k)), turned(order, k, which)), { length: n });
  const harmonic = series(quarterSquare(x), (k) => scaled(Q.divide(Q.add(harmonicNumber(k), harmonicNumber(n + k)), Q.rational(factorial(k) * factorial(n + k))), turned(order, k, which)));
  const logarithm = plus(log(times(half, x)), euler);
  const lower = n === 0 ? lift(0) : times(kind === 'Ker' ? half : q(-1, 2), pow(times(half, x), -n), formalName(2));
  const own = kind === 'Ker' ? ber : bei;
  const other = kind === 'Ker' ? bei : neg(ber);
  const body = plus(lower, neg(times(logarithm, own)), times(q(1, 4), pi, other), times(half, pow(times(half, x), n), formalName(3)));
  return form(body, [entire(order, x, 'cos'), entire(order, x, 'sin'), finite, harmonic], 'DLMF 10.65.3, 10.65.4');
}

/** a_k(nu) x^-k times cos or sin of k times an eighth turn: the sums of DLMF 10.67. */
function turnedHankel(order: Order, x: Expression, step: 1 | 3, which: 'cos' | 'sin'): FormalSeries {
  const all = hankelCoefficients(order, x);
  return { ...all, coefficient: (k) => scaled(all.coefficient(k), eighth(step * k, which)) };
}

function atPlusInfinity(kind: KelvinKind, order: Order, x: Expression): LocalForm {
  const scaledX = over(x, sqrt(2));
  const halfOrder = 'kind' in order ? times(half, order) : Q.multiply(Q.HALF, order);
  // ker = sum a_k cos(b + k pi/4), kei = -sum a_k sin(b + k pi/4), b = x/sqrt2 + (nu/2 + 1/8) pi.
  const decayPhase = plus(scaledX, times(plus(halfOrder, q(1, 8)), pi));
  const decay = times(exp(neg(scaledX)), sqrt(over(pi, times(2, x))));
  const [c1, s1, c3, s3] = [formalName(0), formalName(1), formalName(2), formalName(3)];
  const decaying = [turnedHankel(order, x, 1, 'cos'), turnedHankel(order, x, 1, 'sin')];
  const ker = times(decay, minus(times(cos(decayPhase), c1), times(sin(decayPhase), s1)));
  const kei = neg(times(decay, plus(times(sin(decayPhase), c1), times(cos(decayPhase), s1))));
  if (kind === 'Ker') return form(ker, decaying, 'DLMF 10.67.1');
  if (kind === 'Kei') return form(kei, decaying, 'DLMF 10.67.2');
  const growth = over(exp(scaledX), sqrt(times(2, pi, x)));
  const growthPhase = plus(scaledX, times(plus(halfOrder, q(-1, 8)), pi));
  const growing = [turnedHankel(order, x, 3, 'cos'), turnedHankel(order, x, 3, 'sin')];
  const twoNu = times(2, lift(order), pi);
  const integer = !('kind' in order) && Q.isInteger(order);
  const [cosTwoNu, sinTwoNu] = integer ? [lift(1), lift(0)] : [cos(twoNu), sin(twoNu)];
  const all = [...decaying, ...growing];
  if (kind === 'Ber') {
    const main = times(growth, minus(times(cos(growthPhase), c3), times(sin(growthPhase), s3)));
    return form(minus(main, over(plus(times(sinTwoNu, ker), times(cosTwoNu, kei)), pi)), all, 'DLMF 10.67.3');
  }
  const main = times(growth, plus(times(sin(growthPhase), c3), times(cos(growthPhase), s3)));
  return form(plus(main, over(minus(times(cosTwoNu, ker), times(sinTwoNu, kei)), pi)), all, 'DLMF 10.67.4');
}

export const kelvinLocal =
  (kind: KelvinKind): NonNullable<FunctionDescription['local']> =>
  (args, index, place: Place) => {
    if (index !== 1) return null;
    const order = orderOf(args);
    if (place.kind === 'infinite') return place.direction === 1 ? atPlusInfinity(kind, order, place.argument) : null;
    return isAt(place, 0) ? atZero(kind, order, place.offset) : null;
  };

const PAIRS: Readonly<Record<KelvinKind, readonly [string, string, 1 | -1]>> = {
  Ber: ['kelvinBer', 'kelvinBei', 1],
  Bei: ['kelvinBei', 'kelvinBer', -1],
  Ker: ['kelvinKer', 'kelvinKei', 1],
  Kei: ['kelvinKei', 'kelvinKer', -1],
};

/** sqrt2 ber_nu' = ber_(nu+1) + bei_(nu+1) + sqrt2 nu ber_nu/x, sqrt2 bei_nu' = -ber_(nu+1) + bei_(nu+1) + sqrt2 nu bei_nu/x (DLMF 10.63.1). */
export const kelvinDerivative =
  (kind: KelvinKind): NonNullable<FunctionDescription['derivative']> =>
  (args, index) => {
    if (index !== 1) return null;
    const order = orderOf(args);
    const x = argument(args, 1);
    const up = 'kind' in order ? plus(order, 1) : Q.add(order, Q.ONE);
    const [own, other, sign] = PAIRS[kind];
    return plus(over(plus(call(own, up, x), times(sign, call(other, up, x))), sqrt(2)), times(lift(order), over(call(own, lift(order), x), x)));
  };

/** x^4 w'''' + 2x^3 w''' - (1+2nu^2)(x^2 w'' - x w') + (nu^4 - 4nu^2 + x^4) w = 0 (DLMF 10.61.4). */
export const kelvinEquation =
  (kind: KelvinKind): NonNullable<FunctionDescription['equation']> =>
  (args, index) => {
    if (index !== 1) return null;
    const order = argument(args, 0);
    const nu2 = square(order);
    const middle = plus(1, times(2, nu2));
    const zero = lift(0);
    // Third derivatives would need long closed forms; the pair w, w' with the companion's is enough for order 0 only.
    const [own, other, sign] = PAIRS[kind];
    const exact = order.kind === 'number' && Q.isZero(order.value);
    if (!exact) return null;
    const first = kelvinDerivative(kind);
    const companion = kelvinDerivative(other.replace('kelvin', '') as KelvinKind);
    // Order 0: (x w')' = -sign * x * companion (real and imaginary part of x^2 w'' + x w' - i x^2 w = 0).
    const w1 = (p: Expression): Expression => first([order, p], 1) ?? zero;
    const v = (p: Expression): Expression => call(other, order, p);
    const v1 = (p: Expression): Expression => companion([order, p], 1) ?? zero;
    const w2 = (p: Expression): Expression => minus(times(-sign, v(p)), over(w1(p), p));
    const w3 = (p: Expression): Expression => plus(times(-sign, v1(p)), over(w1(p), square(p)), neg(over(w2(p), p)));
    return {
      polynomials: [[minus(pow(nu2, 2), times(4, nu2)), zero, zero, zero, lift(1)], [zero, middle], [zero, zero, neg(middle)], [zero, zero, zero, lift(2)], [zero, zero, zero, zero, lift(1)]],
      initial: [(p) => call(own, order, p), w1, w2, w3],
    };
  };

export const kelvinValue =
  (kind: KelvinKind): NonNullable<FunctionDescription['value']> =>
  (args) => {
    const order = orderOf(args);
    const x = argument(args, 1);
    if ('kind' in order || x.kind !== 'number' || !Q.isZero(x.value) || order.num < 0n) return null;
    if (kind === 'Ber') return lift(Q.isZero(order) ? 1 : 0);
    if (kind === 'Bei') return lift(0);
    return kind === 'Kei' && Q.isZero(order) ? times(q(-1, 4), pi) : null;
  };
