/** Zeros of cubic polynomials by Cardano's formula, DLMF 1.11(iii), where one zero is real: then its radicals are real. */
import { Q } from '../expression/index.ts';
import { imaginaryKernel, kernelElement, type Context } from './context.ts';
import { divideElements, rationalPower } from './powers.ts';
import { addElements, multiplyElements, negateElement, scaleElement, wholePower } from './quotient.ts';
import { NEGATIVE, NIL, POSITIVE } from './signs.ts';
import type { Element } from './types.ts';

export interface PolynomialZero {
  readonly value: Element;
  readonly real: boolean;
}

/** Coefficients, lowest first. */
export type Cubic = readonly [Element, Element, Element, Element];

/** q^2/4 + p^3/27 of t^3 + p t + q, x = t + centre: positive exactly where one zero is real and the others are not. */
export function depressedCubic(ctx: Context, [c0, c1, c2, c3]: Cubic): { readonly centre: Element; readonly p: Element; readonly halfQ: Element; readonly discriminant: Element } {
  const plus = (a: Element, b: Element): Element => addElements(ctx.table, a, b);
  const times = (a: Element, b: Element): Element => multiplyElements(ctx.table, a, b);
  const [a, b, c] = [divideElements(ctx, c2, c3), divideElements(ctx, c1, c3), divideElements(ctx, c0, c3)];
  const third = Q.rational(1, 3);
  const shift = scaleElement(a, third);
  const p = plus(b, negateElement(scaleElement(times(a, a), third)));
  const q = plus(plus(scaleElement(wholePower(ctx.table, shift, 3), Q.rational(2)), negateElement(times(shift, b))), c);
  const halfQ = scaleElement(q, Q.HALF);
  const discriminant = plus(times(halfQ, halfQ), wholePower(ctx.table, scaleElement(p, third), 3));
  return { centre: negateElement(shift), p, halfQ, discriminant };
}

/**
 * The three zeros of c0 + c1 x + c2 x^2 + c3 x^3, the real one first; null where the discriminant is not known to be positive (three real zeros without real radicals, casus irreducibilis, or a repeated zero),
 * or the sign of the constant in the reduced form is not known.
 */
export function zerosOfCubic(ctx: Context, cubic: Cubic): readonly PolynomialZero[] | null {
  const { centre, p, halfQ, discriminant } = depressedCubic(ctx, cubic);
  if (ctx.signs.of(discriminant) !== POSITIVE) return null;
  const side = ctx.signs.of(halfQ);
  const negative = (side & ~(POSITIVE | NIL)) === 0;
  if (!negative && (side & ~(NEGATIVE | NIL)) !== 0) return null;
  const root = rationalPower(ctx, discriminant, Q.HALF);
  // Of -q/2 +- sqrt(d) the one without cancellation; its real cube root u gives v = -p/(3 u).
  const size = addElements(ctx.table, negative ? halfQ : negateElement(halfQ), root);
  const radical = rationalPower(ctx, size, Q.rational(1, 3));
  const u = negative ? negateElement(radical) : radical;
  const v = divideElements(ctx, scaleElement(p, Q.rational(-1, 3)), u);
  const sum = addElements(ctx.table, u, v);
  const difference = addElements(ctx.table, u, negateElement(v));
  const real = addElements(ctx.table, centre, sum);
  // -(u + v)/2 +- i sqrt(3)/2 (u - v).
  const middle = addElements(ctx.table, centre, scaleElement(sum, Q.rational(-1, 2)));
  const turn = multiplyElements(ctx.table, kernelElement(ctx, imaginaryKernel(ctx)), rationalPower(ctx, Q.rational(3, 4), Q.HALF));
  const imaginary = multiplyElements(ctx.table, turn, difference);
  return [
    { value: real, real: true },
    { value: addElements(ctx.table, middle, imaginary), real: false },
    { value: addElements(ctx.table, middle, negateElement(imaginary)), real: false },
  ];
}
