/** Real and imaginary parts, with t and all scale elements real. */
import type { Element } from '../algebra/types.ts';
import { build, type Expression, mapChildren, Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { type Context, exactOf, isRational, type Multi, Series } from './multi.ts';
import { plainText } from './plain.ts';
import { mapStream } from './stream.ts';

/** The imaginary part of a constant; throws Declined('undecided') where it cannot be told apart exactly. */
export function imaginaryPart(c: Context, e: Element): Element {
  if (isRational(e) || c.field.isReal(e) === 'yes') return Q.ZERO;
  const { field } = c;
  // The conjugate by i -> -i is right if what is left over is provably real.
  const conjugate = field.fromExpression(conjugated(field.toExpression(e)));
  const part = field.divide(field.subtract(e, conjugate), field.multiply(field.rational(2), field.i));
  const real = field.subtract(e, field.multiply(field.i, part));
  const certain = (isRational(part) || field.isReal(part) === 'yes') && (isRational(real) || field.isReal(real) === 'yes');
  if (!certain) throw new Declined('undecided', `The imaginary part of ${plainText(field.toExpression(e))} could not be found; split it into real and imaginary parts.`, undefined, field.parameters(e));
  return part;
}

export const realPart = (c: Context, e: Element): Element => c.field.subtract(e, c.field.multiply(c.field.i, imaginaryPart(c, e)));

const conjugated = (e: Expression): Expression => (e.kind === 'constant' && e.name === 'i' ? build.negation(e) : mapChildren(e, conjugated));

/** Every constant of m replaced. The tree of the result is written out from its terms, and so exists for finite sums only. */
export function mapConstants(c: Context, m: Multi, f: (e: Element) => Element): Multi {
  if (!(m instanceof Series)) return f(m);
  const stream = mapStream(m.stream, (t) => (t.order ? t : { ...t, coefficient: mapConstants(c, t.coefficient, f) }));
  return new Series(m.element, stream, () => {
    const terms: Expression[] = [];
    for (let k = 0; ; k += 1) {
      const t = stream.at(k);
      if (!t) return build.sum(...terms);
      if (k > 60) throw new Declined('undecided', 'A part of a complex series has no closed form; split the formula into real and imaginary parts.');
      terms.push(build.product(exactOf(c, t.coefficient), build.power(m.element.expression, exactOf(c, t.exponent))));
    }
  });
}
