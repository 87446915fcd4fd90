/** Non-zero by inversion: W(z) = c means z = c exp(c), so that W(z) - c is not zero where z - c exp(c) is proven not to be. */
import { Q } from '../expression/index.ts';
import { isZeroRational, minus, type Context } from './context.ts';
import type { Kernel } from './kernel.ts';
import { exponentIn, UNIT, withoutKernel } from './monomial.ts';
import { kernelsIn, type Term } from './polynomial.ts';
import { divideElements } from './powers.ts';
import { exponential } from './exponentials.ts';
import { isQuotient } from './quotientParts.ts';
import { normalise } from './normalForm.ts';
import { multiplyElements, negateElement } from './quotient.ts';
import type { Element } from './types.ts';

/** True if the numerator is q W + p with W a Lambert function, p and q free of it, and z differs from c exp(c) for c = -p/q (DLMF 4.13.1). */
export function refutedByInverse(ctx: Context, a: Element): boolean {
  if (!isQuotient(a)) return false;
  const build = (terms: readonly Term[]): Element => normalise(ctx.table, Q.ONE, UNIT, terms, [], false);
  for (const index of kernelsIn(a.numerator)) {
    const { shape } = ctx.table.kernels[index] as Kernel;
    if (shape.kind !== 'call' || shape.id !== 'lambertW') continue;
    const z = shape.args[1];
    if (z === undefined || a.numerator.some((t) => ![0, 1].includes(exponentIn(t.monomial, index) as number))) continue;
    const q = build(a.numerator.filter((t) => exponentIn(t.monomial, index) === 1).map((t) => ({ monomial: withoutKernel(t.monomial, index), coefficient: t.coefficient })));
    const p = build(a.numerator.filter((t) => exponentIn(t.monomial, index) === 0));
    if (isZeroRational(q) || ctx.isZero(q) !== 'no') continue;
    const c = negateElement(divideElements(ctx, p, q));
    if (ctx.isZero(minus(ctx, z, multiplyElements(ctx.table, c, exponential(ctx, c)))) === 'no') return true;
  }
  return false;
}
