/** t d/dt of multiseries on every scale. */
import { Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { isOscillating } from './oscillation.ts';
import { type Context, addElements, isLiteralZero, type Multi, type ScaleElement, Series, unnamed } from './multi.ts';
import { add, monomial, multiply, scaleBy } from './ring.ts';
import { mapStream } from './stream.ts';

/** t f'(t). */
export function theta(c: Context, f: Multi): Multi {
  if (!(f instanceof Series)) {
    if (isOscillating(c, f)) throw new Declined('no-expansion', 'The derivative of an oscillating coefficient is not expanded; differentiate the formula first.');
    return Q.ZERO;
  }
  if (f.element.kind === 'logarithm') return byLogarithm(c, f, 1);
  const speed = logarithmicSpeed(c, f.element);
  const stream = mapStream(f.stream, (t) =>
    t.order ? refuseOrder() : { exponent: t.exponent, coefficient: add(c, theta(c, t.coefficient), multiply(c, scaleBy(c, t.coefficient, t.exponent), speed)) },
  );
  return new Series(f.element, stream, unnamed);
}

/** t d/dt log of the element, in slower elements. */
function logarithmicSpeed(c: Context, element: ScaleElement): Multi {
  if (element.kind === 'local') return Q.ONE;
  const speed = theta(c, element.logarithm as Multi);
  if (speed instanceof Series && speed.element.rank >= element.rank) throw new Declined('no-expansion', 'The derivative on this iterated logarithmic scale is not expanded; differentiate the formula first.');
  return speed;
}

/**
 * theta(f) / (l_1 ... l_(depth-1)) for f in iterated logarithms of depth at least `depth`, with l_d = 1/log(...(1/t)):
 * theta l_d = l_1 ... l_d * l_d.
 */
export function byLogarithm(c: Context, f: Multi, depth: number): Multi {
  if (!(f instanceof Series) || isLiteralZero(f)) return theta(c, f);
  if (f.element.kind !== 'logarithm') throw new Declined('no-expansion', 'The derivative on this mixed scale is not expanded; differentiate the formula first.');
  const own = f.element.depth;
  const stream = mapStream(f.stream, (t) =>
    t.order ? refuseOrder() : { exponent: addElements(c, t.exponent, Q.ONE), coefficient: add(c, scaleBy(c, t.coefficient, t.exponent), byLogarithm(c, t.coefficient, own + 1)) },
  );
  let result: Multi = new Series(f.element, stream, unnamed);
  for (let d = depth; d < own; d += 1) {
    const between = c.scale.elements.find((e) => e.kind === 'logarithm' && e.depth === d);
    if (!between) throw new Error('an iterated logarithm without the ones before it');
    result = multiply(c, result, monomial(c, between, Q.ONE));
  }
  return result;
}

function refuseOrder(): never {
  throw new Declined('no-expansion', 'An O-term may not be differentiated unless its remainder is known to be analytic; differentiate the formula first.');
}
