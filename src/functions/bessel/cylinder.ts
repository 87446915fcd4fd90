/** Bessel functions J, Y, I, K of x for a fixed order. Sources: DLMF 10.2, 10.8, 10.11, 10.17, 10.25, 10.31, 10.34, 10.40. */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { argument, bigO, call, cos, euler, exp, gamma, half, imaginary, lift, log, minus, neg, over, pi, plus, pow, q, scaled, sin, sqrt, square, times } from '../compose.ts';
import type { FormalSeries, FunctionDescription, LocalForm, Place } from '../description.ts';
import { asInteger } from '../exactForms.ts';
import { stirlingSeries } from '../gamma/gamma.ts';
import { F1, F2, F3, form, hypergeometricSeries, isAt, ratioSeries, series, terminationLength } from '../formal.ts';
import { factorial, harmonicNumber } from '../sequences.ts';

export type Order = Rational | Expression;
export const orderOf = (args: readonly Expression[]): Order => rationalOf(argument(args, 0)) ?? argument(args, 0);
const addRational = (order: Order, r: Rational): Order => ('kind' in order ? plus(order, r) : Q.add(order, r));
const negative = (order: Order): Order => ('kind' in order ? neg(order) : Q.negate(order));
const quarterSquare = (x: Expression): Expression => times(q(1, 4), square(x));

/** a_k(nu)/x^k, all k (DLMF 10.17.1): ratio (4 nu^2 - (2k+1)^2)/(8(k+1)). Ends for half-integers. */
export function hankelCoefficients(order: Order, x: Expression): FormalSeries {
  const length = terminationLength([addRational(order, Q.HALF), addRational(negative(order), Q.HALF)]);
  return ratioSeries(over(1, x), Q.ONE, (k) => hankelRatio(order, k), { divergent: length === null, ...(length === null ? {} : { length }) });
}
function hankelRatio(order: Order, k: number): Order {
  const bottom = Q.rational(8 * (k + 1));
  const odd = Q.rational((2 * k + 1) * (2 * k + 1));
  if (!('kind' in order)) return Q.divide(Q.subtract(Q.multiply(Q.rational(4), Q.multiply(order, order)), odd), bottom);
  return over(minus(times(4, square(order)), odd), bottom);
}
/** Even (parity 0) or odd members with signs (-1)^(k div 2): P and Q of DLMF 10.17.3, in 1/x. */
function hankelPart(order: Order, x: Expression, parity: 0 | 1): FormalSeries {
  const all = hankelCoefficients(order, x);
  return {
    ...all,
    coefficient: (k) => {
      if (k % 2 !== parity) return Q.ZERO;
      const sign = Math.floor(k / 2) % 2 === 0 ? Q.ONE : Q.MINUS_ONE;
      return scaled(sign, all.coefficient(k));
    },
  };
}
/** Members with signs (-1)^k, for I. */
function hankelAlternating(order: Order, x: Expression): FormalSeries {
  const all = hankelCoefficients(order, x);
  return { ...all, coefficient: (k) => scaled(k % 2 === 0 ? Q.ONE : Q.MINUS_ONE, all.coefficient(k)) };
}

/** sum of (sign x^2/4)^k/(k! (nu+1)_k): J or I without (x/2)^nu/Gamma(nu+1). */
const entirePart = (order: Order, x: Expression, sign: 1 | -1): FormalSeries => hypergeometricSeries(quarterSquare(x), [], [addRational(order, Q.ONE)], Q.rational(sign));
const leadingPower = (order: Order, x: Expression): Expression => over(pow(times(half, x), lift(order)), gamma(addRational(order, Q.ONE)));

/** Non-negative integer order n: the entire part of order n, the finite sum of negative powers and the harmonic sum of Y_n and K_n. */
function integerParts(n: number, x: Expression, sign: 1 | -1): readonly [FormalSeries, FormalSeries, FormalSeries] {
  const z = quarterSquare(x);
  const power = (k: number): bigint => (sign === -1 && k % 2 === 1 ? -1n : 1n);
  return [
    series(z, (k) => Q.rational(power(k), factorial(k) * factorial(n + k))),
    series(z, (k) => Q.rational(sign === 1 ? (k % 2 === 0 ? 1n : -1n) * factorial(n - k - 1) : factorial(n - k - 1), factorial(k)), { length: n }),
    series(z, (k) => Q.multiply(Q.add(harmonicNumber(k), harmonicNumber(n + k)), Q.rational(power(k), factorial(k) * factorial(n + k)))),
  ];
}

const phase = (order: Order, x: Expression): Expression => minus(minus(x, 'kind' in order ? times(half, order, pi) : times(Q.multiply(Q.HALF, order), pi)), times(q(1, 4), pi));

type Kind = 'J' | 'Y' | 'I' | 'K';

/** The form on the positive axis for large x; the formals are F1.. in order. */
function atInfinity(kind: Kind, order: Order, x: Expression): { readonly body: Expression; readonly formals: readonly FormalSeries[]; readonly source: string } {
  const amplitude = sqrt(over(2, times(pi, x)));
  const omega = phase(order, x);
  switch (kind) {
    case 'J':
      return { body: times(amplitude, minus(times(cos(omega), F1), times(sin(omega), F2))), formals: [hankelPart(order, x, 0), hankelPart(order, x, 1)], source: 'DLMF 10.17.3' };
    case 'Y':
      return { body: times(amplitude, plus(times(sin(omega), F1), times(cos(omega), F2))), formals: [hankelPart(order, x, 0), hankelPart(order, x, 1)], source: 'DLMF 10.17.4' };
    case 'K':
      return { body: times(sqrt(over(pi, times(2, x))), exp(neg(x)), F1), formals: [hankelCoefficients(order, x)], source: 'DLMF 10.40.2' };
    case 'I': {
      const growing = times(over(1, sqrt(times(2, pi, x))), exp(x), F1);
      if (!('kind' in order) && Q.isInteger(order)) return { body: growing, formals: [hankelAlternating(order, x)], source: 'DLMF 10.40.1' };
      const decaying = times(sin(times(lift(order), pi)), over(1, sqrt(times(2, pi, x))), exp(neg(x)), F2);
      return { body: minus(growing, decaying), formals: [hankelAlternating(order, x), hankelCoefficients(order, x)], source: 'DLMF 10.40.5, mean of both signs on the positive axis' };
    }
  }
}

/** Continuation from w > 0 to -w = w exp(i pi) in terms of the functions at w (DLMF 10.11.1, 10.11.2, 10.34.1, 10.34.2). */
function atMinusInfinity(kind: Kind, order: Order, x: Expression): LocalForm {
  const w = neg(x);
  const turn = (sign: 1 | -1): Expression => {
    if (!('kind' in order) && Q.isInteger(order)) return lift(order.num % 2n === 0n ? 1 : -1);
    return exp(times(sign, imaginary, pi, lift(order)));
  };
  const main = atInfinity(kind, order, w);
  if (kind === 'J' || kind === 'I') return form(times(turn(1), main.body), main.formals, `${main.source}, ${kind === 'J' ? '10.11.1' : '10.34.1'}`);
  if (kind === 'Y') {
    const first = atInfinity('J', order, w).body;
    return form(plus(times(turn(-1), main.body), times(2, imaginary, cos(times(lift(order), pi)), first)), main.formals, 'DLMF 10.17.4, 10.11.2');
  }
  const growing = over(times(exp(w), F2), sqrt(times(2, pi, w)));
  return form(minus(times(turn(-1), main.body), times(imaginary, pi, growing)), [...main.formals, hankelAlternating(order, w)], 'DLMF 10.40.2, 10.34.2', { subdominantDropped: true });
}

function atZero(kind: Kind, order: Order, x: Expression): LocalForm {
  if (kind === 'J' || kind === 'I') return form(times(leadingPower(order, x), F1), [entirePart(order, x, kind === 'J' ? -1 : 1)], kind === 'J' ? 'DLMF 10.2.2' : 'DLMF 10.25.2');
  const n = 'kind' in order || !Q.isInteger(order) ? null : Number(order.num);
  if (n === null) return secondSolution(kind, order, x);
  return integerSecondSolution(kind, n, x);
}

/** Y and K of an order that is not an integer, from J or I of both signs (DLMF 10.2.3, 10.27.4). */
function secondSolution(kind: 'Y' | 'K', order: Order, x: Expression): LocalForm {
  const angle = times(lift(order), pi);
  const sign = kind === 'Y' ? -1 : 1;
  const plusPart = times(leadingPower(order, x), F1);
  const minusPart = times(leadingPower(negative(order), x), F2);
  const body = kind === 'Y' ? over(minus(times(cos(angle), plusPart), minusPart), sin(angle)) : over(times(half, pi, minus(minusPart, plusPart)), sin(angle));
  return form(body, [entirePart(order, x, sign), entirePart(negative(order), x, sign)], kind === 'Y' ? 'DLMF 10.2.3' : 'DLMF 10.27.4');
}

function integerSecondSolution(kind: 'Y' | 'K', n: number, x: Expression): LocalForm {
  const m = Math.abs(n);
  const flip = n < 0 && kind === 'Y' && m % 2 === 1 ? -1 : 1;
  const [entire, finite, harmonic] = integerParts(m, x, kind === 'Y' ? -1 : 1);
  const up = pow(times(half, x), m);
  const down = m === 0 ? lift(0) : times(pow(times(half, x), -m), F2);
  const logarithm = plus(log(times(half, x)), euler);
  if (kind === 'Y') {
    const body = over(minus(minus(times(2, logarithm, up, F1), down), times(up, F3)), pi);
    return form(times(flip, body), [entire, finite, harmonic], 'DLMF 10.8.1');
  }
  const sign = m % 2 === 0 ? 1 : -1;
  const body = plus(times(half, down), times(-sign, logarithm, up, F1), times(half, sign, up, F3));
  return form(body, [entire, finite, harmonic], 'DLMF 10.31.1');
}

/** Terms of the convergent series in 1/(nu+1)_k that are written before the O-term. */
const LARGE_ORDER_TERMS = 16;
/** Large order, fixed argument: J and I by their power series, whose terms fall by 1/nu each (DLMF 10.19.1); K and Y by I and J of order -nu, the rest being smaller by nu^-2nu (10.19.2, 10.41). */
function largeOrder(kind: Kind, x: Expression, place: Place): LocalForm | null {
  if (place.kind !== 'infinite' || place.direction !== 1) return null;
  const nu = place.argument;
  const z = times(kind === 'J' || kind === 'Y' ? q(-1, 4) : q(1, 4), square(x));
  const upper = kind === 'J' || kind === 'I';
  let term: Expression = lift(1);
  const terms: Expression[] = [];
  for (let k = 0; k < LARGE_ORDER_TERMS; k++) {
    terms.push(term);
    term = over(times(term, z), times(k + 1, upper ? plus(nu, k + 1) : minus(k + 1, nu)));
  }
  const sum = plus(...terms, bigO(pow(nu, -LARGE_ORDER_TERMS)));
  // Gamma(nu) by Stirling's formula in one exponent with (x/2)^nu: beside nu log nu the sign of log(x/2) does not matter.
  const exponent = minus(times(nu, log(times(half, x))), minus(times(nu, log(nu)), nu));
  if (upper) return form(times(over(exp(exponent), sqrt(times(2, pi, nu))), exp(neg(F1)), sum), [stirlingSeries(nu)], 'DLMF 10.2.2, 10.25.2, 10.19.1, 5.11.1');
  const lead = times(sqrt(over(times(2, pi), nu)), exp(neg(exponent)), exp(F1));
  return form(times(kind === 'K' ? half : neg(over(1, pi)), lead, sum), [stirlingSeries(nu)], 'DLMF 10.2.3, 10.27.4, 10.19.2', { subdominantDropped: true });
}

function cylinderLocal(kind: Kind): NonNullable<FunctionDescription['local']> {
  return (args, index, place: Place) => {
    if (index === 0) return largeOrder(kind, argument(args, 1), place);
    const order = orderOf(args);
    if (place.kind === 'infinite') {
      if (place.direction === -1) return atMinusInfinity(kind, order, place.argument);
      if (place.direction !== 1) return null;
      const { body, formals, source } = atInfinity(kind, order, place.argument);
      return form(body, formals, source);
    }
    if (!isAt(place, 0)) return null;
    if (!('kind' in order) && Q.isInteger(order) && order.num < 0n && (kind === 'J' || kind === 'I')) {
      const flip = kind === 'J' && order.num % 2n !== 0n ? -1 : 1;
      const positive = atZero(kind, Q.negate(order), place.offset);
      return { ...positive, body: times(flip, positive.body) };
    }
    return atZero(kind, order, place.offset);
  };
}
export const besselJLocal = cylinderLocal('J');
export const besselYLocal = cylinderLocal('Y');
export const besselILocal = cylinderLocal('I');
export const besselKLocal = cylinderLocal('K');

/** f_nu' by the neighbouring order (DLMF 10.6.2, 10.29.2). */
export const cylinderDerivative =
  (id: string, sign: 1 | -1): NonNullable<FunctionDescription['derivative']> =>
  (args, index) => {
    if (index !== 1) return null;
    const order = orderOf(args);
    const x = argument(args, 1);
    if (!('kind' in order) && Q.isZero(order)) return times(id === 'besselI' ? 1 : -1, call(id, 1, x));
    return minus(times(sign, call(id, lift(addRational(order, Q.MINUS_ONE)), x)), times(lift(order), over(call(id, lift(order), x), x)));
  };

/** x^2 f'' + x f' + (sign x^2 - nu^2) f = 0 (DLMF 10.2.1 with sign 1, 10.25.1 with sign -1). */
export const cylinderEquation =
  (id: string, sign: 1 | -1): NonNullable<FunctionDescription['equation']> =>
  (args, index) => {
    if (index !== 1) return null;
    const order = orderOf(args);
    const tree = lift(order);
    const derivative = cylinderDerivative(id, id === 'besselK' ? -1 : 1);
    return {
      polynomials: [
        [neg(square(tree)), lift(0), lift(sign)],
        [lift(0), lift(1)],
        [lift(0), lift(0), lift(1)],
      ],
      initial: [(point) => call(id, tree, point), (point) => derivative([tree, point], 1) ?? lift(0)],
    };
  };

/** Half-integer orders are elementary (DLMF 10.16.1, 10.39): by recurrence from 1/2 and -1/2. Negative integer orders are reflected. J_n(0), I_n(0). */
export function cylinderValue(kind: Kind): NonNullable<FunctionDescription['value']> {
  const id = `bessel${kind}`;
  return (args) => {
    const order = rationalOf(argument(args, 0));
    const x = argument(args, 1);
    if (!order || Q.compare(Q.absolute(order), Q.rational(40)) > 0) return null;
    const at = rationalOf(x);
    if (at && Q.isZero(at)) {
      if (kind === 'Y' || kind === 'K' || order.num < 0n) return null;
      return lift(Q.isZero(order) ? 1 : 0);
    }
    if (kind === 'K' && order.num < 0n) return call(id, Q.negate(order), x);
    const n = asInteger(argument(args, 0));
    if (n !== null) {
      if (n >= 0) return null;
      const flip = kind !== 'I' && n % 2 !== 0 ? -1 : 1;
      return times(flip, call(id, -n, x));
    }
    if (order.den !== 2n) return null;
    return halfInteger(kind, Number((order.num - 1n) / 2n), x);
  };
}

/** Order m + 1/2. */
function halfInteger(kind: Kind, m: number, x: Expression): Expression {
  if (kind === 'Y') return times(m % 2 === 0 ? -1 : 1, halfInteger('J', -m - 1, x));
  const amplitude = kind === 'K' ? sqrt(over(pi, times(2, x))) : sqrt(over(2, times(pi, x)));
  if (kind === 'K') {
    const terms: Expression[] = [];
    const size = m >= 0 ? m : -m - 1;
    for (let k = 0; k <= size; k++) terms.push(times(Q.rational(factorial(size + k), factorial(k) * factorial(size - k) * 2n ** BigInt(k)), pow(x, -k)));
    return times(amplitude, exp(neg(x)), plus(...terms));
  }
  // f_(m+1/2) = amplitude * (A sin-like + B cos-like) with A, B polynomials in 1/x.
  const sign = kind === 'J' ? 1 : -1;
  let above: readonly [Map<number, Rational>, Map<number, Rational>] = [new Map([[0, Q.ONE]]), new Map()];
  let below: readonly [Map<number, Rational>, Map<number, Rational>] = [new Map(), new Map([[0, Q.ONE]])];
  const combine = (a: Map<number, Rational>, scale: Rational, b: Map<number, Rational>, other: Rational): Map<number, Rational> => {
    const out = new Map<number, Rational>();
    for (const [k, c] of a) out.set(k + 1, Q.multiply(c, scale));
    for (const [k, c] of b) out.set(k, Q.add(out.get(k) ?? Q.ZERO, Q.multiply(c, other)));
    return out;
  };
  // J: f_(nu+1) = (2nu/x) f_nu - f_(nu-1); I: f_(nu+1) = f_(nu-1) - (2nu/x) f_nu.
  let index = 0;
  while (index < m) {
    const twoNu = Q.rational(sign * (2 * index + 1));
    const next: typeof above = [combine(above[0], twoNu, below[0], Q.rational(-sign)), combine(above[1], twoNu, below[1], Q.rational(-sign))];
    below = above;
    above = next;
    index += 1;
  }
  // J: f_(nu-1) = (2nu/x) f_nu - f_(nu+1); I: f_(nu-1) = f_(nu+1) + (2nu/x) f_nu. Here below = f_(index-1/2).
  while (index > m) {
    const twoNu = Q.rational(2 * index - 1);
    const next: typeof above = [combine(below[0], twoNu, above[0], Q.rational(-sign)), combine(below[1], twoNu, above[1], Q.rational(-sign))];
    above = below;
    below = next;
    index -= 1;
  }
  const tree = (p: Map<number, Rational>): Expression => plus(...[...p].map(([k, c]) => times(c, pow(x, -k))));
  const first = call(kind === 'J' ? 'sin' : 'sinh', x);
  const second = call(kind === 'J' ? 'cos' : 'cosh', x);
  return times(amplitude, plus(times(tree(above[0]), first), times(tree(above[1]), second)));
}
