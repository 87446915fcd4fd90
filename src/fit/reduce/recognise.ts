/** Functions whose argument can be reduced: one core function, times a constant factor, of an affine argument. */
import { build, dependsOn, type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { describe } from '../../functions/index.ts';
import { type Ball, encloseReal, real } from '../../rigorous/index.ts';
import type { Hyperbolic } from './hyperbolic.ts';

/** f = A g(c x + d), all constants; `exponential`: A e^(c x + d). */
export type Shape =
  | { readonly kind: 'exponential'; readonly rate: Expression }
  | { readonly kind: 'circular'; readonly rate: Expression; /** f a quarter period on: f(x + pi / (2 c)). */ readonly quarter: Expression }
  | { readonly kind: 'logarithm'; /** f = A log(c x), or A log(1 + x) where `plusOne`; natural logarithm. */ readonly factor: Expression; readonly plusOne: boolean }
  | ({ readonly kind: 'hyperbolic' } & Hyperbolic)
  | { readonly kind: 'tangent'; /** f = A tan(c x), c > 0. */ readonly factor: Expression; readonly rate: Expression }
  | { readonly kind: 'arctangent'; readonly factor: Expression }
  | { readonly kind: 'arc'; readonly of: 'asin' | 'acos'; readonly factor: Expression }
  | { readonly kind: 'power'; readonly exponent: Rational };

/** Bits of the constants of a reduction: more than any number of parts takes. */
export const CONSTANT_BITS = 256;
export const constantBall = (e: Expression): Ball | null => encloseReal(e, new Map(), CONSTANT_BITS, describe);

/** Null where the function is none of them. */
export function recognise(f: Expression, variable: string): Shape | null {
  return within(f, variable, build.number(1), (e) => e);
}

type Rebuild = (core: Expression) => Expression;

/** `factor` stands before e in the whole function, and `around` puts another expression in its place. */
function within(e: Expression, x: string, factor: Expression, around: Rebuild): Shape | null {
  if (e.kind === 'negation') return within(e.operand, x, build.negation(factor), (c) => around(build.negation(c)));
  if (e.kind === 'product') {
    const depending = e.factors.filter((f) => dependsOn(f, x));
    const [only] = depending;
    if (depending.length !== 1 || !only) return null;
    return within(only, x, build.product(factor, ...e.factors.filter((f) => f !== only)), (c) => around(build.product(...e.factors.map((f) => (f === only ? c : f)))));
  }
  if (e.kind === 'quotient') {
    if (!dependsOn(e.denominator, x)) return within(e.numerator, x, build.quotient(factor, e.denominator), (c) => around(build.quotient(c, e.denominator)));
    return dependsOn(e.numerator, x) ? null : reciprocal(e.denominator, x);
  }
  return core(e, x, factor, around);
}

/** 1/x^q and 1/e^x are of the same kinds. */
function reciprocal(e: Expression, x: string): Shape | null {
  const inner = within(e, x, build.number(1), (c) => c);
  if (inner?.kind === 'power') return { kind: 'power', exponent: Q.negate(inner.exponent) };
  return inner?.kind === 'exponential' ? { kind: 'exponential', rate: build.negation(inner.rate) } : null;
}

function core(e: Expression, x: string, factor: Expression, around: Rebuild): Shape | null {
  if (e.kind === 'power') {
    if (!dependsOn(e.base, x)) {
      const rate = slopeOf(e.exponent, x);
      if (!rate) return null;
      if (e.base.kind === 'constant' && e.base.name === 'e') return { kind: 'exponential', rate };
      const base = constantBall(e.base);
      return base && real.sign(base) === 1 ? { kind: 'exponential', rate: build.product(rate, build.call('log', e.base)) } : null;
    }
    const exponent = rationalOf(e.exponent);
    return exponent && !Q.isInteger(exponent) && scaled(e.base, x) ? { kind: 'power', exponent } : null;
  }
  if (e.kind === 'root') {
    const degree = rationalOf(e.degree);
    return degree && Q.signOf(degree) > 0 && scaled(e.radicand, x) ? { kind: 'power', exponent: Q.reciprocal(degree) } : null;
  }
  if (e.kind !== 'call' || e.args.length !== 1) return null;
  const [argument] = e.args;
  if (!argument) return null;
  switch (e.function) {
    case 'exp':
    case 'exp2':
    case 'exp10': {
      const rate = slopeOf(argument, x);
      const base = { exp: 0, exp2: 2, exp10: 10 }[e.function];
      return rate && { kind: 'exponential', rate: base === 0 ? rate : build.product(rate, build.call('log', build.number(base))) };
    }
    case 'log':
    case 'log2':
    case 'log10': {
      const base = { log: 0, log2: 2, log10: 10 }[e.function];
      const plusOne = isOnePlus(argument, x);
      return plusOne || scaled(argument, x) ? { kind: 'logarithm', plusOne, factor: base === 0 ? factor : build.quotient(factor, build.call('log', build.number(base))) } : null;
    }
    case 'log1p':
      return build.isSymbol(argument, x) ? { kind: 'logarithm', plusOne: true, factor } : null;
    case 'sqrt':
      return scaled(argument, x) ? { kind: 'power', exponent: Q.HALF } : null;
    case 'sin':
    case 'cos': {
      const rate = slopeOf(argument, x);
      const next = e.function === 'sin' ? build.call('cos', argument) : build.negation(build.call('sin', argument));
      return rate && { kind: 'circular', rate, quarter: around(next) };
    }
    case 'sinh':
    case 'cosh':
    case 'tanh':
    case 'tan': {
      const found = proportional(argument, x);
      if (!found) return null;
      const signed = found.negative && e.function !== 'cosh' ? build.negation(factor) : factor;
      return e.function === 'tan' ? { kind: 'tangent', factor: signed, rate: found.rate } : { kind: 'hyperbolic', of: e.function, factor: signed, rate: found.rate };
    }
    case 'asin':
    case 'acos':
      return build.isSymbol(argument, x) ? { kind: 'arc', of: e.function, factor } : null;
    case 'atan':
      return build.isSymbol(argument, x) ? { kind: 'arctangent', factor } : null;
    default:
      return null;
  }
}

function isOnePlus(e: Expression, x: string): boolean {
  return e.kind === 'sum' && e.terms.length === 2 && e.terms.some((t) => build.isSymbol(t, x)) && e.terms.some((t) => build.isOneNumber(t));
}

/** c of an argument c x + d with constants c, d; null for any other. */
function slopeOf(e: Expression, x: string): Expression | null {
  switch (e.kind) {
    case 'symbol':
      return e.name === x ? build.number(1) : null;
    case 'negation': {
      const inner = slopeOf(e.operand, x);
      return inner && build.negation(inner);
    }
    case 'sum': {
      const depending = e.terms.filter((t) => dependsOn(t, x));
      const [only] = depending;
      return only && depending.length === 1 ? slopeOf(only, x) : null;
    }
    case 'product': {
      const depending = e.factors.filter((f) => dependsOn(f, x));
      const [only] = depending;
      const inner = only && depending.length === 1 ? slopeOf(only, x) : null;
      return inner && build.product(inner, ...e.factors.filter((f) => f !== only));
    }
    case 'quotient': {
      const inner = dependsOn(e.denominator, x) ? null : slopeOf(e.numerator, x);
      return inner && build.quotient(inner, e.denominator);
    }
    default:
      return null;
  }
}

/** |c| and the sign of an argument c x; null for any other. */
function proportional(e: Expression, x: string): { readonly rate: Expression; readonly negative: boolean } | null {
  const slope = hasSum(e, x) ? null : slopeOf(e, x);
  const sign = slope && real.sign(constantBall(slope) ?? real.ZERO);
  return slope && (sign === 1 || sign === -1) ? { rate: sign === 1 ? slope : build.negation(slope), negative: sign === -1 } : null;
}

/** c of an argument c x, c > 0; null for any other. */
function scaled(e: Expression, x: string): Expression | null {
  if (e.kind === 'sum') return null;
  const slope = slopeOf(e, x);
  const value = slope && !hasSum(e, x) && constantBall(slope);
  return slope && value && real.sign(value) === 1 ? slope : null;
}

/** Whether a constant is added somewhere on the way to the variable. */
function hasSum(e: Expression, x: string): boolean {
  if (!dependsOn(e, x)) return false;
  if (e.kind === 'sum') return e.terms.length > 1;
  if (e.kind === 'negation') return hasSum(e.operand, x);
  if (e.kind === 'product') return e.factors.some((f) => hasSum(f, x));
  return e.kind === 'quotient' ? hasSum(e.numerator, x) : false;
}
