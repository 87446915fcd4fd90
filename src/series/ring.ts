/** Sums and products of multiseries. Every result keeps the function it stands for, so that zero can be decided exactly. */
import type { Element } from '../algebra/types.ts';
import { build, type Expression, Q } from '../expression/index.ts';
import { addElements, type Context, exactOf, isLiteralOne, isLiteralZero, type Multi, multiplyElements, negateElement, type ScaleElement, Series, type Stream } from './multi.ts';
import { compareMonomials, monomialOf } from './leading.ts';
import { allTerms, type CoefficientRing, finiteStream, mapStream, productStream, sumStream } from './stream.ts';

const rings = new WeakMap<Context, CoefficientRing>();

export function ringOf(c: Context): CoefficientRing {
  let ring = rings.get(c);
  if (!ring) {
    ring = {
      add: (a, b) => add(c, a, b),
      multiply: (a, b) => multiply(c, a, b),
      scale: (a, by) => scaleBy(c, a, by),
      envelope: (a, b) => envelope(c, a, b),
    };
    rings.set(c, ring);
  }
  return ring;
}

/** The terms of m as a series in the element, which must be at least as fast as m's own. */
export function streamIn(m: Multi, element: ScaleElement): Stream {
  if (m instanceof Series && m.element === element) return m.stream;
  return finiteStream(isLiteralZero(m) ? [] : [{ exponent: Q.ZERO, coefficient: m }]);
}

export const fasterElement = (a: Multi, b: Multi): ScaleElement | null => {
  const x = a instanceof Series ? a.element : null;
  const y = b instanceof Series ? b.element : null;
  return x && y ? (x.rank >= y.rank ? x : y) : (x ?? y);
};

export function add(c: Context, a: Multi, b: Multi): Multi {
  if (!(a instanceof Series) && !(b instanceof Series)) return addElements(c, a, b);
  if (isLiteralZero(a)) return b;
  if (isLiteralZero(b)) return a;
  const element = fasterElement(a, b) as ScaleElement;
  const [x, y] = [streamIn(a, element), streamIn(b, element)];
  const exact = () => build.sum(exactOf(c, a), exactOf(c, b));
  const sum = sumStream(c, ringOf(c), x, y);
  return (x.knownLength ?? LONG) + (y.knownLength ?? LONG) <= MOST_AT_ONCE ? finite(element, sum, exact) : new Series(element, sum, exact);
}

/** Finite results up to this many terms are worked out at once, so that what cancels by form is gone. */
const MOST_AT_ONCE = 24;
const LONG = Infinity;

/** The finite series; a constant where nothing else is left of it. */
function finite(element: ScaleElement, stream: Stream, exact: () => Expression): Multi {
  const terms = allTerms(stream);
  const [first] = terms;
  if (!first) return Q.ZERO;
  if (terms.length === 1 && !first.order && isLiteralZero(first.exponent)) return first.coefficient;
  return new Series(element, finiteStream(terms), exact);
}

export function scaleBy(c: Context, a: Multi, by: Element): Multi {
  if (!(a instanceof Series)) return multiplyElements(c, a, by);
  if (isLiteralZero(by)) return Q.ZERO;
  if (isLiteralOne(by)) return a;
  const stream = mapStream(a.stream, (t) => (t.order ? t : { ...t, coefficient: scaleBy(c, t.coefficient, by) }));
  return new Series(a.element, stream, () => build.product(exactOf(c, by), a.exact()));
}

export const negate = (c: Context, a: Multi): Multi => (a instanceof Series ? scaleBy(c, a, Q.MINUS_ONE) : negateElement(c, a));
export const subtract = (c: Context, a: Multi, b: Multi): Multi => add(c, a, negate(c, b));

export function multiply(c: Context, a: Multi, b: Multi): Multi {
  if (!(a instanceof Series)) return scaleBy(c, b, a);
  if (!(b instanceof Series)) return scaleBy(c, a, b);
  const exact = () => build.product(a.exact(), b.exact());
  const element = a.element.rank >= b.element.rank ? a.element : b.element;
  if (a.element !== b.element) {
    const [fast, slow] = a.element === element ? [a, b] : [b, a];
    return new Series(element, mapStream(fast.stream, (t) => ({ ...t, coefficient: multiply(c, t.coefficient, slow) })), exact);
  }
  const product = productStream(c, ringOf(c), a.stream, b.stream);
  return (a.stream.knownLength ?? LONG) * (b.stream.knownLength ?? LONG) <= MOST_AT_ONCE ? finite(element, product, exact) : new Series(element, product, exact);
}

/** The same series times element^exponent; the element must be at least as fast as m's own. */
export function shift(c: Context, m: Multi, element: ScaleElement, exponent: Element): Multi {
  if (isLiteralZero(m) || isLiteralZero(exponent)) return m;
  const stream = mapStream(streamIn(m, element), (t) => ({ ...t, exponent: addElements(c, t.exponent, exponent) }));
  return new Series(element, stream, () => build.product(exactOf(c, m), build.power(element.expression, exactOf(c, exponent))));
}

/** element^exponent alone. */
export const monomial = (c: Context, element: ScaleElement, exponent: Element): Multi => shift(c, Q.ONE, element, exponent);

/** A multiseries at least as large as both, up to a constant factor; for the scale of an O-term. */
function envelope(c: Context, a: Multi, b: Multi): Multi {
  const x = monomialOf(c, a);
  const y = monomialOf(c, b);
  if (!x) return b;
  if (!y) return a;
  return compareMonomials(c, x, y) >= 0 ? a : b;
}

export function sumOf(c: Context, parts: readonly Multi[]): Multi {
  return parts.reduce<Multi>((total, part) => add(c, total, part), Q.ZERO);
}
