/** Sine, cosine and their hyperbolic kin: known angles, turns, imaginary arguments, and inverse functions undone. */
import { Q, type Rational } from '../expression/index.ts';
import { callKernel, constantKernel, type Context, imaginaryKernel, isZeroRational, kernelElement } from './context.ts';
import { exponential } from './exponentials.ts';
import type { Kernel } from './kernel.ts';
import { divideElements, plus, rationalPower, times } from './powers.ts';
import { negateElement, scaleElement } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { additiveTerms, byImaginaryUnit, multipleOfKernel, rationalMultiple, singleKernel, timesI } from './split.ts';
import type { Element } from './types.ts';
import { cosineOfPi, sineOfPi } from './unitCircle.ts';

export const pi = (ctx: Context): Element => kernelElement(ctx, constantKernel(ctx, 'pi'));
export const sqrt = (ctx: Context, a: Element): Element => rationalPower(ctx, a, Q.HALF);
export const squared = (ctx: Context, a: Element): Element => times(ctx, a, a);

export const opaque = (ctx: Context, id: string, args: readonly Element[]): Element => kernelElement(ctx, callKernel(ctx, id, args));

/** The sign that a canonical argument carries: that of its content. */
export const isNegativeForm = (a: Element): boolean => (isQuotient(a) ? a.content.num < 0n : a.num < 0n);

/** The argument x where a is the kernel `id`(x), else null. */
export function argumentOf(ctx: Context, a: Element, id: string): Element | null {
  const single = singleKernel(a);
  if (!single || single.exponent !== 1) return null;
  const { shape } = ctx.table.kernels[single.kernel] as Kernel;
  return shape.kind === 'call' && shape.id === id ? (shape.args[0] ?? null) : null;
}

/** i*b with b real, b; else null. */
function imaginaryArgument(ctx: Context, a: Element): Element | null {
  if (!isQuotient(a) || !a.monomial.kernels.includes(imaginaryKernel(ctx).index)) return null;
  const { re, im } = byImaginaryUnit(ctx, a);
  return isZeroRational(re) ? im : null;
}

export function sine(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ZERO;
  if (isNegativeForm(a)) return negateElement(sine(ctx, negateElement(a)));
  const b = imaginaryArgument(ctx, a);
  if (b) return timesI(ctx, hyperbolicSine(ctx, b));
  const { coefficient, rest } = multipleOfKernel(ctx, a, constantKernel(ctx, 'pi').index);
  if (isZeroRational(rest)) return sineOfPi(ctx, coefficient);
  const quarters = quarterTurns(coefficient);
  if (quarters !== null && quarters !== 0) {
    const inner = quarters % 2 === 0 ? sine(ctx, rest) : cosine(ctx, rest);
    return quarters >= 2 ? negateElement(inner) : inner;
  }
  const y = argumentOf(ctx, a, 'asin');
  if (y) return y;
  const c = argumentOf(ctx, a, 'acos');
  if (c) return sqrt(ctx, plus(ctx, Q.ONE, negateElement(squared(ctx, c))));
  const t = argumentOf(ctx, a, 'atan');
  if (t) return divideElements(ctx, t, sqrt(ctx, plus(ctx, Q.ONE, squared(ctx, t))));
  const half = halfTurns(ctx, a);
  if (half) return times(ctx, half.sign, sine(ctx, half.rest));
  return opaque(ctx, 'sin', [a]);
}

export function cosine(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ONE;
  if (isNegativeForm(a)) return cosine(ctx, negateElement(a));
  const b = imaginaryArgument(ctx, a);
  if (b) return hyperbolicCosine(ctx, b);
  const { coefficient, rest } = multipleOfKernel(ctx, a, constantKernel(ctx, 'pi').index);
  if (isZeroRational(rest)) return cosineOfPi(ctx, coefficient);
  const quarters = quarterTurns(coefficient);
  if (quarters !== null && quarters !== 0) {
    const inner = quarters % 2 === 0 ? cosine(ctx, rest) : sine(ctx, rest);
    return quarters === 1 || quarters === 2 ? negateElement(inner) : inner;
  }
  const y = argumentOf(ctx, a, 'acos');
  if (y) return y;
  const s = argumentOf(ctx, a, 'asin');
  if (s) return sqrt(ctx, plus(ctx, Q.ONE, negateElement(squared(ctx, s))));
  const t = argumentOf(ctx, a, 'atan');
  if (t) return divideElements(ctx, Q.ONE, sqrt(ctx, plus(ctx, Q.ONE, squared(ctx, t))));
  const half = halfTurns(ctx, a);
  if (half) return times(ctx, half.sign, cosine(ctx, half.rest));
  return opaque(ctx, 'cos', [a]);
}

/** a = pi m + rest with m an integer by the assumptions, not zero: (-1)^m and the rest; else null. */
function halfTurns(ctx: Context, a: Element): { readonly sign: Element; readonly rest: Element } | null {
  const piIndex = constantKernel(ctx, 'pi').index;
  let turns: Element = Q.ZERO;
  let rest: Element = Q.ZERO;
  for (const t of additiveTerms(ctx, a)) {
    const { coefficient, unit } = rationalMultiple(t);
    const whole =
      isQuotient(unit) &&
      coefficient.den === 1n &&
      unit.denominator.length === 0 &&
      unit.numerator.length === 1 &&
      unit.monomial.kernels.includes(piIndex) &&
      unit.monomial.kernels.every((k, i) => {
        const e = unit.monomial.exponents[i];
        if (k === piIndex) return e === 1;
        const { shape } = ctx.table.kernels[k] as Kernel;
        return shape.kind === 'parameter' && ctx.isInteger(shape.name) && typeof e === 'number' && e > 0;
      });
    if (whole) turns = plus(ctx, turns, t);
    else rest = plus(ctx, rest, t);
  }
  return isZeroRational(turns) ? null : { sign: exponential(ctx, timesI(ctx, turns)), rest };
}

/** 2q modulo 4 where q is a multiple of 1/2, else null: how many quarter turns pi*q is. */
function quarterTurns(q: Rational): number | null {
  if (q.den > 2n) return null;
  const doubled = q.den === 1n ? q.num * 2n : q.num;
  return Number(((doubled % 4n) + 4n) % 4n);
}

export function hyperbolicSine(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ZERO;
  if (isNegativeForm(a)) return negateElement(hyperbolicSine(ctx, negateElement(a)));
  const b = imaginaryArgument(ctx, a);
  if (b) return timesI(ctx, sine(ctx, b));
  const y = argumentOf(ctx, a, 'asinh');
  if (y) return y;
  if (isLogarithmic(ctx, a)) return scaleElement(plus(ctx, exponential(ctx, a), negateElement(exponential(ctx, negateElement(a)))), Q.HALF);
  const c = argumentOf(ctx, a, 'acosh');
  if (c) return times(ctx, sqrt(ctx, plus(ctx, c, Q.MINUS_ONE)), sqrt(ctx, plus(ctx, c, Q.ONE)));
  const t = argumentOf(ctx, a, 'atanh');
  if (t) return divideElements(ctx, t, rootsAroundOne(ctx, t));
  return opaque(ctx, 'sinh', [a]);
}
export function hyperbolicCosine(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ONE;
  if (isNegativeForm(a)) return hyperbolicCosine(ctx, negateElement(a));
  const b = imaginaryArgument(ctx, a);
  if (b) return cosine(ctx, b);
  const y = argumentOf(ctx, a, 'acosh');
  if (y) return y;
  if (isLogarithmic(ctx, a)) return scaleElement(plus(ctx, exponential(ctx, a), exponential(ctx, negateElement(a))), Q.HALF);
  const s = argumentOf(ctx, a, 'asinh');
  if (s) return sqrt(ctx, plus(ctx, Q.ONE, squared(ctx, s)));
  const t = argumentOf(ctx, a, 'atanh');
  if (t) return divideElements(ctx, Q.ONE, rootsAroundOne(ctx, t));
  return opaque(ctx, 'cosh', [a]);
}
/** sqrt(1 + t) sqrt(1 - t) = 1/cosh(artanh t) for all t, from DLMF 4.37.24. */
const rootsAroundOne = (ctx: Context, t: Element): Element => times(ctx, sqrt(ctx, plus(ctx, Q.ONE, t)), sqrt(ctx, plus(ctx, Q.ONE, negateElement(t))));

/** Whether a is a sum of rational multiples of logarithms, so that exp(a) is algebraic. */
function isLogarithmic(ctx: Context, a: Element): boolean {
  if (!isQuotient(a) || a.denominator.length > 0) return false;
  return a.numerator.every((t) => {
    const kernels = [...t.monomial.kernels, ...a.monomial.kernels];
    const shape = kernels.length === 1 ? ctx.table.kernels[kernels[0] as number]?.shape : undefined;
    return shape?.kind === 'log' && [...t.monomial.exponents, ...a.monomial.exponents].every((e) => e === 1);
  });
}
