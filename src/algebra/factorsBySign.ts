/** Elements taken apart by what is known of the signs of their factors: what roots and logarithms do before they act on each piece. */
import { Q } from '../expression/index.ts';
import { kernelElement, type Context } from './context.ts';
import { type Exponent, isWhole } from './exponent.ts';
import type { Kernel } from './kernel.ts';
import { isOnePolynomial, type Polynomial } from './polynomial.ts';
import { multiplyElements, negateElement, wholePower } from './quotient.ts';
import { partsOf } from './quotientParts.ts';
import { isNonNegative, isRealSet, NEGATIVE, NIL, type SignSet } from './signs.ts';
import { asElement } from './split.ts';
import { squareFreeFactors } from './squareFree.ts';
import type { Element } from './types.ts';

/** What is told of each piece, in the order of the factors. */
export interface PieceHandlers {
  /** kernel^e, the kernel not negative. */
  readonly kernel: (kernel: Kernel, e: Exponent) => void;
  /** u^e, u not negative. */
  readonly positive: (u: Element, e: number) => void;
  /** u^e for an even e, u real and of unknown sign: |u|^e. */
  readonly even: (u: Element, e: number) => void;
}

/** What is left when the pieces are gone: the sign of the content and of factors known to be negative, and the product of factors of unknown sign. */
export interface OpenRest {
  readonly negative: boolean;
  readonly open: Element;
}

/**
 * a = |content| * (pieces told to the handlers) * (negative ? -1 : 1) * open, where a is not zero; the content is not told.
 * Cost: the square-free factorisation of numerator and denominator, and a sign of each factor.
 */
export function splitBySigns(ctx: Context, a: Element, told: PieceHandlers): OpenRest {
  const parts = partsOf(a);
  let negative = parts.content.num < 0n;
  let open: Element = Q.ONE;
  const take = (factor: Element): void => void (open = multiplyElements(ctx.table, open, factor));
  /** u^e for a whole e, u not known to be positive; false where nothing is known that would take it apart. */
  const split = (u: Element, e: number, sign: SignSet, principal: boolean): boolean => {
    if ((sign & ~(NEGATIVE | NIL)) === 0) {
      told.positive(negateElement(u), e);
      if (e % 2 !== 0) negative = !negative;
      return true;
    }
    if (!isRealSet(sign) || !principal) return false;
    const even = e % 2 === 0 ? e : e - 1;
    if (even !== 0) told.even(u, even);
    if (even !== e) take(u);
    return true;
  };
  parts.monomial.kernels.forEach((index, i) => {
    const kernel = ctx.table.kernels[index] as Kernel;
    const e = parts.monomial.exponents[i] as Exponent;
    const sign = ctx.signs.ofKernel(kernel);
    if (isNonNegative(sign)) told.kernel(kernel, e);
    else if (!isWhole(e) || !split(kernelElement(ctx, kernel), e, sign, kernel.shape.kind !== 'exp' && kernel.shape.kind !== 'power')) take(kernelElement(ctx, kernel, e));
  });
  const polynomial = (f: Polynomial, power: number): void => {
    if (isOnePolynomial(f)) return;
    for (const factor of squareFreeFactors(f, ctx.table.check)) {
      const e = factor.exponent * power;
      const u = asElement(ctx, factor.polynomial);
      const sign = ctx.signs.of(u);
      if (isNonNegative(sign)) told.positive(u, e);
      else if (!split(u, e, sign, true)) take(wholePower(ctx.table, u, e));
    }
  };
  polynomial(parts.numerator, 1);
  for (const f of parts.denominator) polynomial(f.polynomial, -f.exponent);
  return { negative, open };
}
