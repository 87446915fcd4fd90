/** Algebraic numbers as they are written: the zero itself, where the field calculates with a_n times it. */
import { Q } from '../expression/index.ts';
import type { Context } from './context.ts';
import type { Kernel } from './kernel.ts';
import { exponentIn, monomialOf, multiplyMonomials, UNIT, withoutKernel } from './monomial.ts';
import type { Polynomial } from './polynomial.ts';
import { addElements, elementFromMonomial, multiplyElements } from './quotient.ts';
import { isQuotient, type Quotient } from './quotientParts.ts';
import { normalise } from './normalForm.ts';
import { kernelsOf } from './kernelsOf.ts';
import type { Element } from './types.ts';

/** The number itself in place of a_n times it, with a kernel free of relations: for writing only. Null where there is no such number. */
export function withNumbersWritten(ctx: Context, a: Quotient): Element | null {
  const own = [...kernelsOf(a)].map((k) => ctx.table.kernels[k] as Kernel).filter((k) => k.shape.kind === 'algebraic');
  if (own.length === 0) return null;
  const replaced = own.map((k) => {
    const { shape } = k;
    const [lead = 1n, ...rest] = shape.kind === 'algebraic' ? shape.coefficients : [];
    const args = shape.kind === 'algebraic' ? [Q.rational(shape.index), Q.rational(lead), ...rest.map((c) => Q.rational(c))] : [];
    const call = ctx.table.intern(`written ${k.key}`, () => ({ shape: { kind: 'call', id: 'polynomialRoot', args } }));
    return { kernel: k.index, lead, call: call.index };
  });
  const write = (f: Polynomial): Element =>
    f.reduce<Element>((sum, t) => {
      let { monomial, coefficient } = t;
      for (const r of replaced) {
        const e = exponentIn(monomial, r.kernel);
        if (typeof e !== 'number' || e <= 0) continue;
        coefficient *= r.lead ** BigInt(e);
        monomial = multiplyMonomials(withoutKernel(monomial, r.kernel), monomialOf(r.call, e));
      }
      return addElements(ctx.table, sum, elementFromMonomial(ctx.table, monomial, Q.rational(coefficient)));
    }, Q.ZERO);
  const numerator = write(a.numerator);
  const outside = write([{ monomial: a.monomial, coefficient: 1n }]);
  const rest = normalise(ctx.table, a.content, UNIT, [{ monomial: UNIT, coefficient: 1n }], a.denominator, false);
  const result = multiplyElements(ctx.table, multiplyElements(ctx.table, numerator, outside), rest);
  return isQuotient(result) ? result : null;
}
