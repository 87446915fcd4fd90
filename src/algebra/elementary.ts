/** Elementary functions of field elements: special values, parity, shifts by quarter turns, compositions with inverses. */
import { Q, type Rational } from '../expression/index.ts';
import { callKernel, constantKernel, imaginaryKernel, isZeroRational, kernelElement, rationalOf, valueless, type Context } from './context.ts';
import type { Kernel } from './kernel.ts';
import { absolute, divideElements, exponential, logarithm, rationalPower } from './powers.ts';
import { addElements, isQuotient, multiplyElements, negateElement, scaleElement } from './quotient.ts';
import { isRealSet, NEGATIVE, NIL, POSITIVE } from './signs.ts';
import { additiveTerms, byImaginaryUnit, multipleOfKernel, rationalMultiple, singleKernel, timesI } from './split.ts';
import { cosineOfPi, sineOfPi } from './unitCircle.ts';
import type { Element } from './types.ts';

const plus = (ctx: Context, a: Element, b: Element): Element => addElements(ctx.table, a, b);
const times = (ctx: Context, a: Element, b: Element): Element => multiplyElements(ctx.table, a, b);
const pi = (ctx: Context): Element => kernelElement(ctx, constantKernel(ctx, 'pi'));
const sqrt = (ctx: Context, a: Element): Element => rationalPower(ctx, a, Q.HALF);
const squared = (ctx: Context, a: Element): Element => times(ctx, a, a);

export const opaque = (ctx: Context, id: string, args: readonly Element[]): Element => kernelElement(ctx, callKernel(ctx, id, args));

/** The sign that a canonical argument carries: that of its content. */
const isNegativeForm = (a: Element): boolean => (isQuotient(a) ? a.content.num < 0n : a.num < 0n);

/** The argument x where a is the kernel `id`(x), else null. */
function argumentOf(ctx: Context, a: Element, id: string): Element | null {
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

function sine(ctx: Context, a: Element): Element {
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

function cosine(ctx: Context, a: Element): Element {
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

function hyperbolicSine(ctx: Context, a: Element): Element {
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
function hyperbolicCosine(ctx: Context, a: Element): Element {
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

/** Angles in (0, 1/2) whose sine or tangent a person knows; the table of values is computed, not stored. */
const KNOWN_DENOMINATORS = [3, 4, 5, 6, 8, 10, 12] as const;

function angleWith(ctx: Context, value: Element, f: (r: Rational) => Element): Rational | null {
  for (const den of KNOWN_DENOMINATORS) {
    for (let num = 1; num * 2 < den; num += 1) {
      const r = Q.rational(num, den);
      if (Number(r.den) === den && isZeroRational(plus(ctx, f(r), negateElement(value)))) return r;
    }
  }
  return null;
}
/** Only algebraic numbers can be sines of rational angles. */
const isNumericAlgebraic = (ctx: Context, a: Element): boolean =>
  isQuotient(a) && a.denominator.length === 0 && [...a.monomial.kernels, ...a.numerator.flatMap((t) => t.monomial.kernels)].every((k) => ctx.table.relations[k]?.numeric === true);

/** Numbers with |a| > 1 on the axis of the cut: there a function takes the value from one side, which need not be odd. */
function mayLieOnCut(ctx: Context, a: Element, axis: 'real' | 'imaginary'): boolean {
  if (!isNumber(ctx, a)) return false;
  const { re, im } = byImaginaryUnit(ctx, a);
  if (!isZeroRational(axis === 'real' ? im : re)) return false;
  return ctx.signOfNumber(plus(ctx, Q.ONE, negateElement(squared(ctx, axis === 'real' ? re : im)))) !== 1;
}

function arcSine(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ZERO;
  const r = rationalOf(a);
  if (r && Q.isOne(r)) return scaleElement(pi(ctx), Q.HALF);
  if (r && Q.equal(r, Q.HALF)) return scaleElement(pi(ctx), Q.rational(1, 6));
  if (isNumericAlgebraic(ctx, a)) {
    const angle = angleWith(ctx, a, (q) => sineOfPi(ctx, q));
    if (angle) return scaleElement(pi(ctx), angle);
    const mirrored = angleWith(ctx, negateElement(a), (q) => sineOfPi(ctx, q));
    if (mirrored) return scaleElement(pi(ctx), Q.negate(mirrored));
  }
  if (isNegativeForm(a) && !mayLieOnCut(ctx, a, 'real')) return negateElement(arcSine(ctx, negateElement(a)));
  return undoneSine(ctx, a) ?? opaque(ctx, 'asin', [a]);
}

/** asin(sin b) and asin(cos b) = asin(sin(pi/2 - b)) for a real number b: its distance from the nearest multiple of pi, with the sign of that; else null. */
function undoneSine(ctx: Context, a: Element): Element | null {
  const b = argumentOf(ctx, a, 'sin');
  const c = b ? null : argumentOf(ctx, a, 'cos');
  const angle = b ?? (c ? plus(ctx, scaleElement(pi(ctx), Q.HALF), negateElement(c)) : null);
  const turn = angle && nearestTurn(ctx, angle);
  if (!turn) return null;
  return turn.count % 2n === 0n ? turn.rest : negateElement(turn.rest);
}

/** angle = count * pi + rest with |rest| < pi/2 proven by balls; null where the angle is no real number or lies at the border. */
function nearestTurn(ctx: Context, angle: Element): { readonly count: bigint; readonly rest: Element } | null {
  const sign = (x: Element): -1 | 1 | null => (isQuotient(x) ? ctx.signOfNumber(x) : x.num > 0n ? 1 : -1);
  const half = scaleElement(pi(ctx), Q.HALF);
  const above = (count: bigint): -1 | 1 | null => sign(plus(ctx, plus(ctx, angle, scaleElement(pi(ctx), Q.rational(-count))), half));
  if (above(0n) === null) return null;
  // above(n) is 1 for n up to the count that is looked for, and -1 beyond.
  let low = 0n;
  let high = 0n;
  for (let step = 1n; above(low) === -1; step *= 2n) {
    if (step > LARGEST_TURN) return null;
    low -= step;
  }
  for (let step = 1n; above(high) === 1; step *= 2n) {
    if (step > LARGEST_TURN) return null;
    high += step;
  }
  while (high - low > 1n) {
    const middle = (low + high) / 2n;
    const side = above(middle);
    if (side === null) return null;
    if (side === 1) low = middle;
    else high = middle;
  }
  if (above(low) !== 1 || above(high) !== -1) return null;
  return { count: low, rest: plus(ctx, angle, scaleElement(pi(ctx), Q.rational(-low))) };
}
const LARGEST_TURN = 1n << 40n;
function arcCosine(ctx: Context, a: Element): Element {
  const sine = arcSine(ctx, a);
  const half = scaleElement(pi(ctx), Q.HALF);
  const { coefficient, rest } = multipleOfKernel(ctx, sine, constantKernel(ctx, 'pi').index);
  if (isZeroRational(rest)) return plus(ctx, half, scaleElement(pi(ctx), Q.negate(coefficient)));
  const undone = undoneSine(ctx, a) ?? undoneSine(ctx, negateElement(a));
  if (undone) return plus(ctx, half, negateElement(sine));
  return opaque(ctx, 'acos', [a]);
}
function arcTangent(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ZERO;
  const r = rationalOf(a);
  if (r && Q.isOne(r)) return scaleElement(pi(ctx), Q.rational(1, 4));
  if (isZeroRational(plus(ctx, Q.ONE, squared(ctx, a)))) throw valueless('The inverse tangent has no value at i and -i; choose another point or parameter.');
  if (isNumericAlgebraic(ctx, a) && isRealSet(ctx.signs.of(a))) {
    const tangent = (q: Rational): Element => divideElements(ctx, sineOfPi(ctx, q), cosineOfPi(ctx, q));
    const angle = angleWith(ctx, a, tangent);
    if (angle) return scaleElement(pi(ctx), angle);
    const mirrored = angleWith(ctx, negateElement(a), tangent);
    if (mirrored) return scaleElement(pi(ctx), Q.negate(mirrored));
  }
  if (isNegativeForm(a) && !mayLieOnCut(ctx, a, 'imaginary')) return negateElement(arcTangent(ctx, negateElement(a)));
  const angle = argumentOfTangent(ctx, a);
  const turn = angle && nearestTurn(ctx, angle);
  if (turn) return turn.rest;
  return opaque(ctx, 'atan', [a]);
}

/** b where a = sin(b)/cos(b); else null. */
function argumentOfTangent(ctx: Context, a: Element): Element | null {
  if (!isQuotient(a) || a.monomial.kernels.length !== 2) return null;
  for (const index of a.monomial.kernels) {
    const { shape } = ctx.table.kernels[index] as Kernel;
    const b = shape.kind === 'call' && shape.id === 'sin' ? shape.args[0] : undefined;
    if (b !== undefined && isZeroRational(plus(ctx, a, negateElement(divideElements(ctx, sine(ctx, b), cosine(ctx, b)))))) return b;
  }
  return null;
}

/** Inverse hyperbolic functions of numbers are logarithms; of anything else they stay as written. */
const isNumber = (ctx: Context, a: Element): boolean => rationalOf(a) !== null || isNumericAlgebraic(ctx, a);
function arcHyperbolicSine(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ZERO;
  if (isNegativeForm(a) && !mayLieOnCut(ctx, a, 'imaginary')) return negateElement(arcHyperbolicSine(ctx, negateElement(a)));
  if (isNumber(ctx, a)) return logarithm(ctx, plus(ctx, a, sqrt(ctx, plus(ctx, squared(ctx, a), Q.ONE))));
  return opaque(ctx, 'asinh', [a]);
}
function arcHyperbolicCosine(ctx: Context, a: Element): Element {
  const root = (shift: Rational): Element => sqrt(ctx, plus(ctx, a, shift));
  // i acos(a) between -1 and 1: purely imaginary by its form. An imaginary a has 1 - a^2 > 0, too.
  if (isNumber(ctx, a) && isRealSet(ctx.signs.of(a)) && ctx.signs.of(plus(ctx, Q.ONE, negateElement(squared(ctx, a)))) === POSITIVE) return times(ctx, kernelElement(ctx, imaginaryKernel(ctx)), arcCosine(ctx, a));
  if (isNumber(ctx, a)) return logarithm(ctx, plus(ctx, a, times(ctx, root(Q.MINUS_ONE), root(Q.ONE))));
  return opaque(ctx, 'acosh', [a]);
}
function arcHyperbolicTangent(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ZERO;
  if (isNegativeForm(a)) return negateElement(arcHyperbolicTangent(ctx, negateElement(a)));
  if (isNumber(ctx, a)) {
    const log = (x: Element): Element => logarithm(ctx, plus(ctx, Q.ONE, x));
    return scaleElement(plus(ctx, log(a), negateElement(log(negateElement(a)))), Q.HALF);
  }
  return opaque(ctx, 'atanh', [a]);
}

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
