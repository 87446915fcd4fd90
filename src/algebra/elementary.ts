/** What the field itself knows of the elementary functions: one rule a function. */
import { Q } from '../expression/index.ts';
import { arcCosine, arcHyperbolicCosine, arcHyperbolicSine, arcHyperbolicTangent, arcSine, arcTangent } from './arcFunctions.ts';
import { cosine, hyperbolicCosine, hyperbolicSine, opaque, sine, sqrt, squared } from './circularFunctions.ts';
import { type Context, isZeroRational } from './context.ts';
import { exponential } from './exponentials.ts';
import { logarithm } from './logarithms.ts';
import { absolute, divideElements, plus } from './powers.ts';
import { isRealSet, NEGATIVE, NIL, POSITIVE } from './signs.ts';
import { byImaginaryUnit } from './split.ts';
import type { Element } from './types.ts';

function signum(ctx: Context, a: Element): Element {
  const s = ctx.signs.of(a);
  if (s === NIL) return Q.ZERO;
  if (s === POSITIVE) return Q.ONE;
  if (s === NEGATIVE) return Q.MINUS_ONE;
  if (isRealSet(s)) {
    const size = absolute(ctx, a);
    // sign(a) = |a|/a away from the zeros of a.
    return divideElements(ctx, size, a);
  }
  return opaque(ctx, 'sign', [a]);
}

const reciprocal = (ctx: Context, a: Element): Element => divideElements(ctx, Q.ONE, a);

type Rule = (ctx: Context, args: readonly [Element, ...Element[]]) => Element;

/** What the field itself knows. Functions that are not here come from their descriptions, or stay kernels. */
export const ELEMENTARY_RULES: Readonly<Record<string, Rule>> = {
  exp: (ctx, [a]) => exponential(ctx, a),
  log: (ctx, [a, b]) => (b ? divideElements(ctx, logarithm(ctx, a), logarithm(ctx, b)) : logarithm(ctx, a)),
  sqrt: (ctx, [a]) => sqrt(ctx, a),
  sin: (ctx, [a]) => sine(ctx, a),
  cos: (ctx, [a]) => cosine(ctx, a),
  tan: (ctx, [a]) => divideElements(ctx, sine(ctx, a), cosine(ctx, a)),
  cot: (ctx, [a]) => divideElements(ctx, cosine(ctx, a), sine(ctx, a)),
  sec: (ctx, [a]) => reciprocal(ctx, cosine(ctx, a)),
  csc: (ctx, [a]) => reciprocal(ctx, sine(ctx, a)),
  sinh: (ctx, [a]) => hyperbolicSine(ctx, a),
  cosh: (ctx, [a]) => hyperbolicCosine(ctx, a),
  tanh: (ctx, [a]) => divideElements(ctx, hyperbolicSine(ctx, a), hyperbolicCosine(ctx, a)),
  coth: (ctx, [a]) => divideElements(ctx, hyperbolicCosine(ctx, a), hyperbolicSine(ctx, a)),
  sech: (ctx, [a]) => reciprocal(ctx, hyperbolicCosine(ctx, a)),
  csch: (ctx, [a]) => reciprocal(ctx, hyperbolicSine(ctx, a)),
  asin: (ctx, [a]) => arcSine(ctx, a),
  acos: (ctx, [a]) => arcCosine(ctx, a),
  atan: (ctx, [a]) => arcTangent(ctx, a),
  asinh: (ctx, [a]) => arcHyperbolicSine(ctx, a),
  acosh: (ctx, [a]) => arcHyperbolicCosine(ctx, a),
  atanh: (ctx, [a]) => arcHyperbolicTangent(ctx, a),
  abs: (ctx, [a]) => modulus(ctx, a),
  sign: (ctx, [a]) => signum(ctx, a),
};

/** |a|, for complex a as sqrt(re^2 + im^2) where both parts are known to be real. */
function modulus(ctx: Context, a: Element): Element {
  if (isRealSet(ctx.signs.of(a))) return absolute(ctx, a);
  const { re, im } = byImaginaryUnit(ctx, a);
  if (!isZeroRational(im) && isRealSet(ctx.signs.of(re)) && isRealSet(ctx.signs.of(im))) return sqrt(ctx, plus(ctx, squared(ctx, re), squared(ctx, im)));
  return absolute(ctx, a);
}
