/** Radicals of integers and of polynomials as kernel powers. */
import { Q, type Rational } from '../expression/index.ts';
import { integerKernel, kernelElement, powerKernel, undecided, type Context } from './context.ts';
import { exponentFromRational, type Exponent } from './exponent.ts';
import { factorInteger } from './integers.ts';
import { monomialOf, multiplyMonomials } from './monomial.ts';
import { kernelsIn } from './polynomial.ts';
import { elementFromMonomial, elementKey, multiplyElements } from './quotient.ts';
import { partsOf } from './quotientParts.ts';
import type { Element } from './types.ts';

/** |c|^r for a rational c that is not zero. */
export function positiveRationalPower(ctx: Context, c: Rational, r: Rational): Element {
  const p = r.num;
  if (p > 100000n || p < -100000n || r.den > 100000n) throw undecided('A rational power here has an exponent too large to be worked out exactly.');
  let result: Element = Q.ONE;
  const part = (n: bigint, sign: bigint): void => {
    for (const { base, exponent } of factorInteger(n < 0n ? -n : n)) {
      const e = Q.multiply(r, { num: sign * BigInt(exponent), den: 1n });
      result = multiplyElements(ctx.table, result, e.den === 1n ? Q.power({ num: base, den: 1n }, e.num) : elementFromMonomial(ctx.table, monomialOf(integerKernel(ctx, base).index, exponentFromRational(e))));
    }
  };
  part(c.num, 1n);
  part(c.den, -1n);
  return result;
}

/** base^exponent as a power of the radicand kernel; the base is a polynomial (no denominator, whole exponents). */
export function radicandPower(ctx: Context, base: Element, exponent: Exponent): Element {
  const parts = partsOf(base);
  const value = parts.numerator.map((t) => ({ monomial: multiplyMonomials(t.monomial, parts.monomial), coefficient: t.coefficient * parts.content.num }));
  if (parts.content.den !== 1n || parts.denominator.length > 0) return kernelElement(ctx, powerKernel(ctx, base, Q.ONE), exponent);
  const numeric = [...kernelsIn(value)].every((k) => ctx.table.relations[k]?.numeric === true);
  const kernel = ctx.table.intern(`radicand ${elementKey(base)}`, () => ({ shape: { kind: 'radicand', base }, relation: { period: 1, value, pure: true, numeric } }));
  return kernelElement(ctx, kernel, exponent);
}
