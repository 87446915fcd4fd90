/** Principal logarithms: products become sums, powers become factors, where the signs allow it. */
import { Q, type Rational } from '../expression/index.ts';
import { constantKernel, type Context, imaginaryKernel, isZeroRational, kernelElement, logKernel, minus, rationalOf, withSquaresJoined } from './context.ts';
import { compareExponents, type Exponent } from './exponent.ts';
import { splitBySigns } from './factorsBySign.ts';
import { factorInteger } from './integers.ts';
import { noteLogarithm } from './joinedLogarithms.ts';
import type { Kernel } from './kernel.ts';
import { absolute, divideElements, isNumericRadicand, plus, requireNonZero, times } from './powers.ts';
import { negateElement, scaleElement } from './quotient.ts';
import { isQuotient, partsOf } from './quotientParts.ts';
import { isNonNegative, isRealSet, POSITIVE } from './signs.ts';
import { byImaginaryUnit, rationalMultiple, singleKernel } from './split.ts';
import type { Element } from './types.ts';

/** log|c| for a rational c that is not zero. */
function logOfRational(ctx: Context, c: Rational): Element {
  let result: Element = Q.ZERO;
  const part = (n: bigint, sign: bigint): void => {
    for (const { base, exponent } of factorInteger(n < 0n ? -n : n)) {
      result = plus(ctx, result, scaleElement(kernelElement(ctx, logKernel(ctx, Q.rational(base))), { num: sign * BigInt(exponent), den: 1n }));
    }
  };
  part(c.num, 1n);
  part(c.den, -1n);
  return result;
}

const multiple = (a: Element, e: Exponent): Element => scaleElement(a, typeof e === 'number' ? Q.rational(e) : Q.rational(e.p, e.q));

/** log a, principal value: positive factors split off, the rest stays together. */
export function logarithm(ctx: Context, a: Element): Element {
  const value = splitLogarithm(ctx, withSquaresJoined(ctx, a));
  noteLogarithm(ctx, a, value);
  return value;
}

/** log a without square roots joined first. */
function splitLogarithm(ctx: Context, a: Element): Element {
  requireNonZero(ctx, a, 'argument of a logarithm');
  let result = logOfRational(ctx, partsOf(a).content);
  const add = (term: Element, e: Exponent): void => void (result = plus(ctx, result, multiple(term, e)));
  const { negative, open } = splitBySigns(ctx, a, {
    kernel: (kernel, e) => {
      const { shape } = kernel;
      switch (shape.kind) {
        case 'exp':
          return add(shape.unit, e);
        case 'power':
          return add(times(ctx, shape.unit, splitLogarithm(ctx, shape.base)), e);
        case 'integer':
          return add(logOfRational(ctx, Q.rational(shape.value)), e);
        case 'radicand':
          return add(splitLogarithm(ctx, shape.base), e);
        default:
          return add(kernelElement(ctx, logKernel(ctx, kernelElement(ctx, kernel))), e);
      }
    },
    positive: (u, e) => add(kernelElement(ctx, logKernel(ctx, u)), e),
    even: (u, e) => add(splitLogarithm(ctx, absolute(ctx, u)), e),
  });
  const iPi = times(ctx, kernelElement(ctx, imaginaryKernel(ctx)), kernelElement(ctx, constantKernel(ctx, 'pi')));
  if (!isQuotient(open)) return (open.num < 0n) !== negative ? plus(ctx, result, iPi) : result;
  const base = negative ? negateElement(open) : open;
  const single = singleKernel(open);
  const kernel = single ? (ctx.table.kernels[single.kernel] as Kernel) : null;
  if (single && kernel && kernel.shape.kind === 'imaginary') return plus(ctx, result, scaleElement(iPi, Q.rational(negative ? -1 : 1, 2)));
  if (single && kernel && !negative && kernel.shape.kind === 'exp') {
    // log exp(i t) = i t for -pi < t <= pi only; unknown otherwise.
    const im = byImaginaryUnit(ctx, multiple(kernel.shape.unit, single.exponent));
    const pi = kernelElement(ctx, constantKernel(ctx, 'pi'));
    if (isZeroRational(im.re) && isNonNegative(ctx.signs.of(minus(ctx, pi, im.im))) && ctx.signs.of(plus(ctx, pi, im.im)) === POSITIVE) return plus(ctx, result, multiple(kernel.shape.unit, single.exponent));
  }
  if (single && kernel && !negative && kernel.shape.kind !== 'exp' && kernel.shape.kind !== 'power' && compareExponents(single.exponent, -1) > 0 && compareExponents(single.exponent, 1) <= 0) {
    return plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, kernel.shape.kind === 'radicand' ? kernel.shape.base : kernelElement(ctx, kernel))), single.exponent));
  }
  return plus(ctx, result, logarithmOfNumber(ctx, base) ?? kernelElement(ctx, logKernel(ctx, base)));
}

/** log(x + i y) = log(x^2 + y^2)/2 + i atan2(y, x) for real algebraic numbers x and y, y not zero; else null. */
function logarithmOfNumber(ctx: Context, a: Element): Element | null {
  const { re, im } = byImaginaryUnit(ctx, a);
  if (isZeroRational(im) || !isRealAlgebraic(ctx, re) || !isRealAlgebraic(ctx, im)) return null;
  const i = kernelElement(ctx, imaginaryKernel(ctx));
  const pi = kernelElement(ctx, constantKernel(ctx, 'pi'));
  const size = scaleElement(logarithm(ctx, plus(ctx, times(ctx, re, re), times(ctx, im, im))), Q.HALF);
  const up = signOfReal(ctx, im);
  const right = isZeroRational(re) ? 0 : signOfReal(ctx, re);
  if (up === null || right === null) return null;
  if (right === 0) return plus(ctx, size, times(ctx, i, scaleElement(pi, Q.rational(up, 2))));
  const angle = ctx.call('atan', [divideElements(ctx, im, re)]);
  // Of other numbers the logarithm stays whole: the parts would bring nested roots.
  const familiar = (rationalOf(re) && rationalOf(im)) || isRationalMultipleOfPi(ctx, angle);
  if (!familiar) return null;
  return plus(ctx, size, times(ctx, i, right > 0 ? angle : plus(ctx, angle, scaleElement(pi, Q.rational(up)))));
}
const isRationalMultipleOfPi = (ctx: Context, a: Element): boolean => singleKernel(rationalMultiple(a).unit)?.kernel === constantKernel(ctx, 'pi').index;
const signOfReal = (ctx: Context, a: Element): -1 | 1 | null => (isQuotient(a) ? ctx.signOfNumber(a) : a.num > 0n ? 1 : -1);
const isRealAlgebraic = (ctx: Context, a: Element): boolean => !isQuotient(a) || (isRealSet(ctx.signs.of(a)) && isNumericRadicand(ctx, a) && a.monomial.kernels.every((k) => ctx.table.relations[k]?.numeric === true));
