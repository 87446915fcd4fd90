/** Inverse circular and hyperbolic functions of multiseries: regular points by their derivative, branch points and infinity by exact identities. Principal values (DLMF 4.23, 4.37, from memory). */
import type { Element } from '../algebra/types.ts';
import { build, Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { alongDerivative } from './analytic.ts';
import { isEvenLead, isRealMulti, logarithm, noteSides, pi, power, reciprocal, withExact } from './exponential.ts';
import { decideSign, eventualSign, isZero, leading } from './leading.ts';
import { type Context, exactOf, isRational, type Multi, multiplyElements, Series } from './multi.ts';
import { add, multiply, negate, scaleBy, subtract } from './ring.ts';
import { split } from './split.ts';

export type InverseFunction = 'asin' | 'acos' | 'atan' | 'asinh' | 'acosh' | 'atanh';

const root = (c: Context, f: Multi): Multi => power(c, f, Q.HALF);
const halfPi = (c: Context): Element => multiplyElements(c, Q.HALF, pi(c));
const plus = (c: Context, f: Multi, constant: Element): Multi => add(c, f, constant);
const isReal = (c: Context, e: Element): boolean => isRational(e) || c.field.isReal(e) === 'yes';
/** c - value is zero, for a constant limit. */
const equals = (c: Context, limit: Element, value: Element): boolean => isZero(c, c.field.subtract(limit, value));

export function inverse(c: Context, id: InverseFunction, f: Multi): Multi {
  if (!(f instanceof Series)) return c.field.call(id, [f]);
  return withExact(table[id](c, f), () => build.call(id, exactOf(c, f)));
}

const table: Readonly<Record<InverseFunction, (c: Context, f: Series) => Multi>> = { asin, acos, atan, asinh, acosh, atanh };

function asin(c: Context, f: Series): Multi {
  const { large, constant } = split(c, f);
  if (!large) {
    if (equals(c, constant, Q.ONE)) return subtract(c, halfPi(c), acosNearOne(c, f));
    if (equals(c, constant, Q.MINUS_ONE)) return subtract(c, acosNearOne(c, negate(c, f)), halfPi(c));
    if (!approachesCut(c, f, constant, (square) => decideSign(c, c.field.subtract(square, Q.ONE)) === 1)) return alongDerivative(c, f, (at) => c.field.call('asin', [at]), (g) => reciprocal(c, root(c, subtract(c, Q.ONE, multiply(c, g, g)))));
  }
  // asin z = -i log(i z + sqrt(1 - z^2))
  const i = c.field.i;
  return scaleBy(c, logarithm(c, add(c, scaleBy(c, f, i), root(c, subtract(c, Q.ONE, multiply(c, f, f))))), c.field.negate(i));
}

/** Whether f is complex while its limit lies on the real cut: the side of the cut then decides, which the logarithms find out. */
function approachesCut(c: Context, f: Series, limit: Element, onCut: (square: Element) => boolean): boolean {
  return isReal(c, limit) && !isRealMulti(c, f) && onCut(c.field.multiply(limit, limit));
}

function acos(c: Context, f: Series): Multi {
  const { large, constant } = split(c, f);
  if (!large && equals(c, constant, Q.ONE)) return acosNearOne(c, f);
  if (!large && equals(c, constant, Q.MINUS_ONE)) return subtract(c, pi(c), acosNearOne(c, negate(c, f)));
  return subtract(c, halfPi(c), asin(c, f));
}

/** acos f = 2 asin sqrt((1 - f)/2), f -> 1. */
function acosNearOne(c: Context, f: Multi): Multi {
  return scaleBy(c, inverse(c, 'asin', root(c, scaleBy(c, subtract(c, Q.ONE, f), Q.HALF))), Q.rational(2));
}

function atan(c: Context, f: Series): Multi {
  const { large, constant } = split(c, f);
  if (large) {
    const sign = eventualSign(c, large);
    if (sign === 'complex' || sign === 0) throw new Declined('no-expansion', 'The inverse tangent of a complex quantity that grows without bound is not expanded; split it into real and imaginary parts.');
    const lead = leading(c, f);
    noteSides(c, lead !== null && isEvenLead(lead, f.element));
    return subtract(c, scaleBy(c, halfPi(c), Q.rational(sign)), inverse(c, 'atan', reciprocal(c, f)));
  }
  if (isReal(c, constant)) return alongDerivative(c, f, (at) => c.field.call('atan', [at]), (g) => reciprocal(c, plus(c, multiply(c, g, g), Q.ONE)));
  // atan z = (i/2) (log(1 - i z) - log(1 + i z))
  const rotated = scaleBy(c, f, c.field.i);
  return scaleBy(c, subtract(c, logarithm(c, subtract(c, Q.ONE, rotated)), logarithm(c, plus(c, rotated, Q.ONE))), c.field.multiply(c.field.i, Q.HALF));
}

function asinh(c: Context, f: Series): Multi {
  const { large, constant } = split(c, f);
  if (large) {
    const sign = eventualSign(c, large);
    if (sign === 'complex' || sign === 0) throw new Declined('no-expansion', 'The inverse hyperbolic sine of a complex quantity that grows without bound is not expanded; split it into real and imaginary parts.');
    c.notes.sided = true;
    if (sign === -1) return negate(c, asinh(c, negate(c, f) as Series));
    return logarithm(c, add(c, f, root(c, plus(c, multiply(c, f, f), Q.ONE))));
  }
  if (isReal(c, constant)) return alongDerivative(c, f, (at) => c.field.call('asinh', [at]), (g) => reciprocal(c, root(c, plus(c, multiply(c, g, g), Q.ONE))));
  // asinh z = -i asin(i z)
  return scaleBy(c, inverse(c, 'asin', scaleBy(c, f, c.field.i)), c.field.negate(c.field.i));
}

function acosh(c: Context, f: Series): Multi {
  const { large, constant } = split(c, f);
  if (large) return logarithm(c, add(c, f, multiply(c, root(c, plus(c, f, Q.ONE)), root(c, plus(c, f, Q.MINUS_ONE)))));
  if (equals(c, constant, Q.ONE)) return scaleBy(c, inverse(c, 'asinh', root(c, scaleBy(c, plus(c, f, Q.MINUS_ONE), Q.HALF))), Q.rational(2));
  if (isReal(c, constant)) {
    if (equals(c, constant, Q.MINUS_ONE) || (!isRealMulti(c, f) && decideSign(c, c.field.subtract(constant, Q.ONE)) === -1)) return logarithm(c, add(c, f, multiply(c, root(c, plus(c, f, Q.ONE)), root(c, plus(c, f, Q.MINUS_ONE)))));
    if (decideSign(c, c.field.subtract(c.field.multiply(constant, constant), Q.ONE)) === -1) return scaleBy(c, acos(c, f), c.field.i);
  }
  return alongDerivative(c, f, (at) => c.field.call('acosh', [at]), (g) => reciprocal(c, multiply(c, root(c, plus(c, g, Q.MINUS_ONE)), root(c, plus(c, g, Q.ONE)))));
}

function atanh(c: Context, f: Series): Multi {
  const { large, constant } = split(c, f);
  const inside = !large && isReal(c, constant) && decideSign(c, c.field.subtract(c.field.multiply(constant, constant), Q.ONE)) === -1;
  // atanh z = (log(1 + z) - log(1 - z))/2
  if (!inside) return scaleBy(c, subtract(c, logarithm(c, plus(c, f, Q.ONE)), logarithm(c, subtract(c, Q.ONE, f))), Q.HALF);
  return alongDerivative(c, f, (at) => c.field.call('atanh', [at]), (g) => reciprocal(c, subtract(c, Q.ONE, multiply(c, g, g))));
}

