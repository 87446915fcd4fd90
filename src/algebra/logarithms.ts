/** Principal logarithms: products become sums, powers become factors, where the signs allow it. */
import { Q, type Rational } from '../expression/index.ts';
import { constantKernel, type Context, imaginaryKernel, isZeroRational, kernelElement, logKernel, minus, rationalOf, withSquaresJoined } from './context.ts';
import { compareExponents, type Exponent, isWhole } from './exponent.ts';
import { factorInteger } from './integers.ts';
import { noteLogarithm } from './joinedLogarithms.ts';
import type { Kernel } from './kernel.ts';
import { isOnePolynomial, type Polynomial, scalePolynomial } from './polynomial.ts';
import { absolute, divideElements, isNumericRadicand, plus, requireNonZero, times } from './powers.ts';
import { elementFromPolynomial, negateElement, scaleElement, wholePower } from './quotient.ts';
import { isQuotient, partsOf } from './quotientParts.ts';
import { isNonNegative, isRealSet, NEGATIVE, NIL, POSITIVE } from './signs.ts';
import { asElement, byImaginaryUnit, rationalMultiple, singleKernel } from './split.ts';
import { squareFreeFactors } from './squareFree.ts';
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

function splitLogarithm(ctx: Context, a: Element): Element {
  requireNonZero(ctx, a, 'argument of a logarithm');
  const parts = partsOf(a);
  let result = logOfRational(ctx, parts.content);
  let negative = parts.content.num < 0n;
  let open: Element = Q.ONE;
  const take = (factor: Element): void => void (open = times(ctx, open, factor));
  parts.monomial.kernels.forEach((index, j) => {
    const kernel = ctx.table.kernels[index] as Kernel;
    const e = parts.monomial.exponents[j] as Exponent;
    const sign = ctx.signs.ofKernel(kernel);
    const shape = kernel.shape;
    if (shape.kind === 'exp' && isNonNegative(sign)) result = plus(ctx, result, multiple(shape.unit, e));
    else if (shape.kind === 'power' && isNonNegative(sign)) result = plus(ctx, result, multiple(times(ctx, shape.unit, splitLogarithm(ctx, shape.base)), e));
    else if (shape.kind === 'integer') result = plus(ctx, result, multiple(logOfRational(ctx, Q.rational(shape.value)), e));
    else if (shape.kind === 'radicand' && isNonNegative(sign)) result = plus(ctx, result, multiple(splitLogarithm(ctx, shape.base), e));
    else if (isNonNegative(sign)) result = plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, kernelElement(ctx, kernel))), e));
    else if (isWhole(e) && (sign & ~(NEGATIVE | NIL)) === 0) {
      result = plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, negateElement(kernelElement(ctx, kernel)))), e));
      if (e % 2 !== 0) negative = !negative;
    } else if (isWhole(e) && isRealSet(sign) && shape.kind !== 'exp' && shape.kind !== 'power') {
      const even = e % 2 === 0 ? e : e - 1;
      if (even !== 0) result = plus(ctx, result, multiple(splitLogarithm(ctx, absolute(ctx, kernelElement(ctx, kernel))), even));
      if (even !== e) take(kernelElement(ctx, kernel));
    } else take(kernelElement(ctx, kernel, e));
  });
  const polynomial = (f: Polynomial, power: number): void => {
    if (isOnePolynomial(f)) return;
    for (const factor of squareFreeFactors(f, ctx.table.check)) {
      const e = factor.exponent * power;
      const u = asElement(ctx, factor.polynomial);
      const sign = ctx.signs.of(u);
      if (isNonNegative(sign)) result = plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, u)), e));
      else if ((sign & ~(NEGATIVE | NIL)) === 0) {
        result = plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, elementFromPolynomial(ctx.table, scalePolynomial(factor.polynomial, -1n)))), e));
        if (e % 2 !== 0) negative = !negative;
      } else if (isRealSet(sign)) {
        const even = e % 2 === 0 ? e : e - 1;
        if (even !== 0) result = plus(ctx, result, multiple(splitLogarithm(ctx, absolute(ctx, u)), even));
        if (even !== e) take(u);
      } else take(wholePower(ctx.table, u, e));
    }
  };
  polynomial(parts.numerator, 1);
  for (const f of parts.denominator) polynomial(f.polynomial, -f.exponent);
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
