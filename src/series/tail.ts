/**
 * Elementary functions of a stream e whose exponents are all positive, by the recurrences that follow from the derivation t d/dt taken formally in one scale element
 * (coefficients are constants of that derivation). O(n) multiplications a term. Source: Knuth, TAOCP 2, 4.7 (from memory).
 */
import type { Element } from '../algebra/types.ts';
import { Q } from '../expression/index.ts';
import { addElements, type Context, isRational, type Multi, multiplyElements, negateElement, Stream } from './multi.ts';
import { ringOf, scaleBy } from './ring.ts';
import { dropTerms, mapStream, prepend, productStream, sumStream } from './stream.ts';

const one = { exponent: Q.ZERO, coefficient: Q.ONE } as const;

export const reciprocalElement = (c: Context, e: Element): Element => (isRational(e) && e.num !== 0n ? Q.reciprocal(e) : c.field.divide(Q.ONE, e));

/** Each coefficient times its exponent. */
export const weigh = (c: Context, s: Stream): Stream => mapStream(s, (t) => (t.order ? t : { ...t, coefficient: scaleBy(c, t.coefficient, t.exponent) }));
/** Each coefficient divided by its exponent, which must not be zero. */
export const unweigh = (c: Context, s: Stream): Stream => mapStream(s, (t) => (t.order ? t : { ...t, coefficient: scaleBy(c, t.coefficient, reciprocalElement(c, t.exponent)) }));
const negateStream = (c: Context, s: Stream): Stream => mapStream(s, (t) => (t.order ? t : { ...t, coefficient: scaleBy(c, t.coefficient, Q.MINUS_ONE) }));

/** A stream defined through itself. */
function fixedPoint(define: (self: Stream) => Stream): Stream {
  let definition: Stream | null = null;
  const self: Stream = new Stream((k) => (definition ??= define(self)).at(k));
  return self;
}

/** exp(e): g = 1 + integral of e' g. */
export function expTail(c: Context, e: Stream): Stream {
  const slope = weigh(c, e);
  return fixedPoint((g) => prepend(one, unweigh(c, productStream(c, ringOf(c), slope, g))));
}

/** 1/(1 + e): g = 1 - e g. */
export function inverseTail(c: Context, e: Stream): Stream {
  return fixedPoint((g) => prepend(one, negateStream(c, productStream(c, ringOf(c), e, g))));
}

/** (1 + e)^power: q g_q = sum over p of ((power + 1) p - q) e_p g_(q-p). */
export function powerTail(c: Context, e: Stream, power: Element): Stream {
  const weight = (p: Element, r: Element): Element => addElements(c, multiplyElements(c, power, p), negateElement(c, r));
  return fixedPoint((g) => prepend(one, unweigh(c, productStream(c, ringOf(c), e, g, weight))));
}

/** log(1 + e): q l_q = q e_q - sum over p of (q - p) l_(q-p) e_p. */
export function logTail(c: Context, e: Stream): Stream {
  return fixedPoint((l) => {
    const rest = sumStream(c, ringOf(c), dropTerms(e, 1), negateStream(c, unweigh(c, productStream(c, ringOf(c), e, l, (_, r) => r))));
    return new Stream((k) => (k === 0 ? e.at(0) : rest.at(k - 1)));
  });
}

/** sin(e) and cos(e), or sinh and cosh with sign = 1. */
export function sineCosineTail(c: Context, e: Stream, sign: 1 | -1): { readonly sine: Stream; readonly cosine: Stream } {
  const slope = weigh(c, e);
  let sine: Stream | null = null;
  const cosine: Stream = fixedPoint(() => {
    const rest = unweigh(c, productStream(c, ringOf(c), slope, sine as Stream));
    return prepend(one, sign === 1 ? rest : negateStream(c, rest));
  });
  sine = unweigh(c, productStream(c, ringOf(c), slope, cosine));
  return { sine, cosine };
}

/** constant + integral of e' d, where e' d has positive exponents only: a function with derivative d along e. */
export function integralTail(c: Context, constant: Multi, e: Stream, derivative: Stream): Stream {
  return prepend({ exponent: Q.ZERO, coefficient: constant }, unweigh(c, productStream(c, ringOf(c), weigh(c, e), derivative)));
}

/**
 * sum of coefficient(k) y^k by nested multiplication, each level built when its first term is asked for; y has positive exponents.
 * A null coefficient ends the sum.
 */
export function composeTail(c: Context, coefficient: (k: number) => Multi | null, y: Stream): Stream {
  const level = (k: number): Stream => {
    const first = coefficient(k);
    if (first === null) return new Stream(() => null);
    let rest: Stream | null = null;
    return new Stream((n) => {
      if (n === 0) return { exponent: Q.ZERO, coefficient: first };
      rest ??= productStream(c, ringOf(c), y, level(k + 1));
      return rest.at(n - 1);
    });
  };
  return level(0);
}
