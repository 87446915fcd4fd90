/** Exponentials, and powers with any exponent. */
import { Q } from '../expression/index.ts';
import { constantKernel, type Context, expKernel, imaginaryKernel, isZeroRational, kernelElement, powerKernel, rationalOf, undecided } from './context.ts';
import { exponentFromRational, isWhole } from './exponent.ts';
import type { Kernel } from './kernel.ts';
import { logarithm } from './logarithms.ts';
import { type Monomial, UNIT } from './monomial.ts';
import { isOnePolynomial } from './polynomial.ts';
import { divideElements, plus, rationalPower, rootOfUnity, times } from './powers.ts';
import { elementKey, negateElement, wholePower } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { isNonNegative, isNonZero, isRealSet, POSITIVE } from './signs.ts';
import { additiveTerms, rationalMultiple } from './split.ts';
import type { Element } from './types.ts';

/** exp(a): sums become products, logarithms become powers, multiples of i pi roots of unity. */
export function exponential(ctx: Context, a: Element): Element {
  let result: Element = Q.ONE;
  for (const term of additiveTerms(ctx, a)) result = times(ctx, result, exponentialOfTerm(ctx, term));
  return result;
}

function exponentialOfTerm(ctx: Context, term: Element): Element {
  const { coefficient, unit } = rationalMultiple(term);
  if (!isQuotient(unit)) return kernelElement(ctx, expKernel(ctx, Q.ONE), exponentFromRational(coefficient));
  const pi = constantKernel(ctx, 'pi').index;
  const i = imaginaryKernel(ctx).index;
  const plain = isOnePolynomial(unit.numerator) && unit.denominator.length === 0;
  if (plain) {
    const { kernels, exponents } = unit.monomial;
    if (kernels.length === 2 && kernels.includes(pi) && kernels.includes(i) && exponents.every((e) => e === 1)) return rootOfUnity(ctx, coefficient);
  }
  // A factor log(x) turns the rest into an exponent of x.
  for (let j = 0; j < unit.monomial.kernels.length; j += 1) {
    const kernel = ctx.table.kernels[unit.monomial.kernels[j] as number] as Kernel;
    if (kernel.shape.kind !== 'log' || unit.monomial.exponents[j] !== 1) continue;
    const rest = times(ctx, unit, kernelElement(ctx, kernel, -1));
    const base = kernel.shape.argument;
    if (!isQuotient(rest)) return rationalPower(ctx, base, Q.multiply(coefficient, rest));
    return kernelElement(ctx, powerKernel(ctx, base, rest), exponentFromRational(coefficient));
  }
  if (plain && coefficient.den === 1n) {
    const inverse = exponentialOfInverse(ctx, unit.monomial, i);
    if (inverse) return wholePower(ctx.table, inverse, Number(coefficient.num));
  }
  if (plain && unit.monomial.kernels.includes(pi) && unit.monomial.kernels.includes(i)) {
    const others = unit.monomial.kernels.filter((k) => k !== pi && k !== i).map((k) => ctx.table.kernels[k] as Kernel);
    const whole = others.every((k) => k.shape.kind === 'parameter' && ctx.isInteger(k.shape.name)) && unit.monomial.exponents.every((e) => isWhole(e) && e > 0);
    if (whole && unit.monomial.exponents[unit.monomial.kernels.indexOf(pi)] === 1) {
      const kernel = ctx.table.intern(`exp ${elementKey(unit)}`, () => ({
        shape: { kind: 'exp', unit },
        relation: { period: 2, value: [{ monomial: UNIT, coefficient: 1n }], pure: true, numeric: false },
      }));
      return kernelElement(ctx, kernel, exponentFromRational(coefficient));
    }
  }
  return kernelElement(ctx, expKernel(ctx, unit), exponentFromRational(coefficient));
}

/** exp(i asin x), exp(i acos x), exp(i atan x), exp(asinh x), exp(acosh x), exp(atanh x) without the inverse function (DLMF 4.23(iv), 4.37(iv)), and exp(W(z)) = z/W(z) for z other than 0 (DLMF 4.13.1); null for anything else. */
function exponentialOfInverse(ctx: Context, m: Monomial, i: number): Element | null {
  const circular = m.kernels.length === 2 && m.kernels.includes(i);
  if ((!circular && m.kernels.length !== 1) || m.exponents.some((e) => e !== 1)) return null;
  const index = m.kernels.find((k) => k !== i);
  const shape = index === undefined ? undefined : (ctx.table.kernels[index] as Kernel).shape;
  const x = shape?.kind === 'call' ? shape.args[0] : undefined;
  if (shape?.kind !== 'call' || x === undefined) return null;
  const [, z] = shape.args;
  if (shape.id === 'lambertW' && !circular && index !== undefined && z !== undefined && isNonZero(ctx.signs.of(z))) return divideElements(ctx, z, kernelElement(ctx, ctx.table.kernels[index] as Kernel));
  const unit = kernelElement(ctx, imaginaryKernel(ctx));
  const root = (a: Element): Element => rationalPower(ctx, a, Q.HALF);
  const square = times(ctx, x, x);
  const one = (a: Element): Element => plus(ctx, Q.ONE, a);
  switch (`${circular ? 'i ' : ''}${shape.id}`) {
    case 'i asin':
      return plus(ctx, root(one(negateElement(square))), times(ctx, unit, x));
    case 'i acos':
      return plus(ctx, x, times(ctx, unit, root(one(negateElement(square)))));
    case 'i atan':
      return isRealSet(ctx.signs.of(x)) ? divideElements(ctx, one(times(ctx, unit, x)), root(one(square))) : null;
    case 'asinh':
      return plus(ctx, x, root(one(square)));
    case 'acosh':
      return plus(ctx, x, times(ctx, root(plus(ctx, x, Q.MINUS_ONE)), root(one(x))));
    case 'atanh':
      return isNonNegative(ctx.signs.of(one(negateElement(square)))) ? divideElements(ctx, one(x), root(one(negateElement(square)))) : null;
    default:
      return null;
  }
}

/** a^b, principal value, for any exponent. */
export function generalPower(ctx: Context, a: Element, b: Element): Element {
  const r = rationalOf(b);
  if (r) return rationalPower(ctx, a, r);
  if (isZeroRational(a)) {
    if (ctx.signs.of(b) === POSITIVE) return Q.ZERO;
    throw undecided('A power of zero with this exponent has no settled value; state that the exponent is positive.');
  }
  return exponential(ctx, times(ctx, b, logarithm(ctx, a)));
}
