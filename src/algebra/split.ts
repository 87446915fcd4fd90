/** Taking elements apart: additive terms, rational multiples, real and imaginary parts. */
import { Q, type Rational } from '../expression/index.ts';
import { kernelElement, imaginaryKernel, type Context } from './context.ts';
import type { Exponent } from './exponent.ts';
import { exponentIn, UNIT, withoutKernel } from './monomial.ts';
import { isOnePolynomial, type Term } from './polynomial.ts';
import { addElements, multiplyElements } from './quotient.ts';
import { isQuotient, type Quotient } from './quotientParts.ts';
import { normalise } from './normalForm.ts';
import type { Element } from './types.ts';

/** The element as a sum of terms, each with the whole denominator. */
export function additiveTerms(ctx: Context, a: Element): readonly Element[] {
  if (!isQuotient(a)) return a.num === 0n ? [] : [a];
  if (a.numerator.length === 1) return [a];
  return a.numerator.map((t) => normalise(ctx.table, a.content, a.monomial, [t], a.denominator, true));
}

/** a = coefficient * unit with the unit's content 1; for a rational a the unit is 1. */
export function rationalMultiple(a: Element): { readonly coefficient: Rational; readonly unit: Element } {
  if (!isQuotient(a)) return { coefficient: a, unit: Q.ONE };
  return { coefficient: a.content, unit: { compound: 'quotient', content: Q.ONE, monomial: a.monomial, numerator: a.numerator, denominator: a.denominator } };
}

/** a = re + I im, by the power of I in the numerator (denominators are free of I); re and im need not be real where kernels are not. */
export function byImaginaryUnit(ctx: Context, a: Element): { readonly re: Element; readonly im: Element } {
  if (!isQuotient(a)) return { re: a, im: Q.ZERO };
  const i = imaginaryKernel(ctx).index;
  const re: Term[] = [];
  const im: Term[] = [];
  for (const t of a.numerator) {
    const e = exponentIn(t.monomial, i);
    if (e === 0) re.push(t);
    else if (e === 1) im.push({ monomial: withoutKernel(t.monomial, i), coefficient: t.coefficient });
    else return { re: a, im: Q.ZERO };
  }
  const outside = exponentIn(a.monomial, i);
  const monomial = withoutKernel(a.monomial, i);
  const build = (terms: readonly Term[], sign: bigint): Element => normalise(ctx.table, { num: a.content.num * sign, den: a.content.den }, monomial, terms, a.denominator, true);
  if (outside === 0) return { re: build(re, 1n), im: build(im, 1n) };
  if (outside === 1) return { re: build(im, -1n), im: build(re, 1n) };
  return { re: a, im: Q.ZERO };
}

/** The one kernel and exponent that make up a monomial element with content 1, else null. */
export function singleKernel(a: Element): { readonly kernel: number; readonly exponent: Exponent } | null {
  if (!isQuotient(a) || a.monomial.kernels.length !== 1 || !isOnePolynomial(a.numerator) || a.denominator.length > 0 || !Q.isOne(a.content)) return null;
  return { kernel: a.monomial.kernels[0] as number, exponent: a.monomial.exponents[0] as Exponent };
}

/** a with the part that is a rational multiple of the given kernel taken out: a = coefficient * kernel + rest. */
export function multipleOfKernel(ctx: Context, a: Element, kernel: number): { readonly coefficient: Rational; readonly rest: Element } {
  let coefficient = Q.ZERO;
  let rest: Element = Q.ZERO;
  for (const t of additiveTerms(ctx, a)) {
    const { coefficient: c, unit } = rationalMultiple(t);
    const single = singleKernel(unit);
    if (single && single.kernel === kernel && single.exponent === 1) coefficient = Q.add(coefficient, c);
    else rest = addElements(ctx.table, rest, t);
  }
  return { coefficient, rest };
}

/** One polynomial of the quotient as an element. */
export const asElement = (ctx: Context, f: Quotient['numerator']): Element => normalise(ctx.table, Q.ONE, UNIT, f, [], false);
export const timesI = (ctx: Context, a: Element): Element => multiplyElements(ctx.table, a, kernelElement(ctx, imaginaryKernel(ctx)));
