/** Inverse circular and hyperbolic functions: known values, cuts, and sines and tangents undone. */
import { Q, type Rational } from '../expression/index.ts';
import { argumentOf, cosine, isNegativeForm, opaque, pi, sine, sqrt, squared } from './circularFunctions.ts';
import { constantKernel, type Context, imaginaryKernel, isZeroRational, kernelElement, rationalOf, valueless } from './context.ts';
import type { Kernel } from './kernel.ts';
import { logarithm } from './logarithms.ts';
import { divideElements, plus, times } from './powers.ts';
import { negateElement, scaleElement } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { isRealSet, POSITIVE } from './signs.ts';
import { byImaginaryUnit, multipleOfKernel } from './split.ts';
import type { Element } from './types.ts';
import { cosineOfPi, sineOfPi } from './unitCircle.ts';

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

export function arcSine(ctx: Context, a: Element): Element {
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
export function arcCosine(ctx: Context, a: Element): Element {
  const sine = arcSine(ctx, a);
  const half = scaleElement(pi(ctx), Q.HALF);
  const { coefficient, rest } = multipleOfKernel(ctx, sine, constantKernel(ctx, 'pi').index);
  if (isZeroRational(rest)) return plus(ctx, half, scaleElement(pi(ctx), Q.negate(coefficient)));
  const undone = undoneSine(ctx, a) ?? undoneSine(ctx, negateElement(a));
  if (undone) return plus(ctx, half, negateElement(sine));
  return opaque(ctx, 'acos', [a]);
}
export function arcTangent(ctx: Context, a: Element): Element {
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
export function arcHyperbolicSine(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ZERO;
  if (isNegativeForm(a) && !mayLieOnCut(ctx, a, 'imaginary')) return negateElement(arcHyperbolicSine(ctx, negateElement(a)));
  if (isNumber(ctx, a)) return logarithm(ctx, plus(ctx, a, sqrt(ctx, plus(ctx, squared(ctx, a), Q.ONE))));
  return opaque(ctx, 'asinh', [a]);
}
export function arcHyperbolicCosine(ctx: Context, a: Element): Element {
  const root = (shift: Rational): Element => sqrt(ctx, plus(ctx, a, shift));
  // i acos(a) between -1 and 1: purely imaginary by its form. An imaginary a has 1 - a^2 > 0, too.
  if (isNumber(ctx, a) && isRealSet(ctx.signs.of(a)) && ctx.signs.of(plus(ctx, Q.ONE, negateElement(squared(ctx, a)))) === POSITIVE) return times(ctx, kernelElement(ctx, imaginaryKernel(ctx)), arcCosine(ctx, a));
  if (isNumber(ctx, a)) return logarithm(ctx, plus(ctx, a, times(ctx, root(Q.MINUS_ONE), root(Q.ONE))));
  return opaque(ctx, 'acosh', [a]);
}
export function arcHyperbolicTangent(ctx: Context, a: Element): Element {
  if (isZeroRational(a)) return Q.ZERO;
  if (isNegativeForm(a)) return negateElement(arcHyperbolicTangent(ctx, negateElement(a)));
  if (isNumber(ctx, a)) {
    const log = (x: Element): Element => logarithm(ctx, plus(ctx, Q.ONE, x));
    return scaleElement(plus(ctx, log(a), negateElement(log(negateElement(a)))), Q.HALF);
  }
  return opaque(ctx, 'atanh', [a]);
}
