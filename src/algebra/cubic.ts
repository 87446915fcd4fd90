/** Zeros of cubic polynomials over the rationals by Cardano's formula, DLMF 1.11(iii), where one zero is real: then its radicals are real. */
import { Q, type Rational } from '../expression/index.ts';
import { imaginaryKernel, kernelElement, type Context } from './context.ts';
import { divideElements, rationalPower } from './powers.ts';
import { addElements, multiplyElements, negateElement, scaleElement } from './quotient.ts';
import type { Element } from './types.ts';

export interface PolynomialZero {
  readonly value: Element;
  readonly real: boolean;
}

/**
 * The three zeros of c0 + c1 x + c2 x^2 + c3 x^3, the real one first; null where the discriminant is not negative: three real zeros without real radicals (casus irreducibilis),
 * or a repeated zero, which is rational.
 */
export function zerosOfCubic(ctx: Context, [c0, c1, c2, c3]: readonly [Rational, Rational, Rational, Rational]): readonly PolynomialZero[] | null {
  if (c3.num === 0n) return null;
  const [a, b, c] = [Q.divide(c2, c3), Q.divide(c1, c3), Q.divide(c0, c3)];
  const third = Q.rational(1, 3);
  // x = t - a/3 gives t^3 + p t + q.
  const shift = Q.multiply(a, third);
  const p = Q.subtract(b, Q.multiply(Q.multiply(a, a), third));
  const q = Q.add(Q.subtract(Q.multiply(Q.rational(2), Q.power(shift, 3)), Q.multiply(shift, b)), c);
  const halfQ = Q.multiply(q, Q.HALF);
  const d = Q.add(Q.multiply(halfQ, halfQ), Q.power(Q.multiply(p, third), 3));
  if (d.num <= 0n) return null;
  const root = rationalPower(ctx, d, Q.HALF);
  // Of -q/2 +- sqrt(d) the one without cancellation; its real cube root u gives v = -p/(3 u).
  const negative = halfQ.num > 0n;
  const size = addElements(ctx.table, Q.absolute(halfQ), root);
  const radical = rationalPower(ctx, size, third);
  const u = negative ? negateElement(radical) : radical;
  const v: Element = p.num === 0n ? Q.ZERO : divideElements(ctx, Q.multiply(Q.negate(p), third), u);
  const sum = addElements(ctx.table, u, v);
  const difference = addElements(ctx.table, u, negateElement(v));
  const centre = Q.negate(shift);
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
