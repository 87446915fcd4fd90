/** Antiderivatives of multiseries, term by term; no constant of integration is added. */
import type { Element } from '../algebra/types.ts';
import { Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { sumOfSeries } from './analytic.ts';
import { byLogarithm, theta } from './derivation.ts';
import { isShort, reciprocal } from './exponential.ts';
import { signOfExponent } from './exponent.ts';
import { isZero, leading } from './leading.ts';
import { isOscillating } from './oscillation.ts';
import { type Context, isLiteralZero, type Multi, type ScaleElement, Series, unnamed } from './multi.ts';
import { add, multiply, scaleBy, shift } from './ring.ts';
import { logarithmOf } from './scale.ts';
import { mapStream } from './stream.ts';
import { reciprocalElement } from './tail.ts';

/**
 * F with t F'(t) = f. Powers of t with polynomials in log t are finite; with negative powers of log t, and for most exponential scales, the series diverge.
 * Rejects oscillating coefficients and scales between log t and t.
 */
export function integrate(c: Context, f: Multi): Multi {
  return integrateIn(c, f, 0, c.scale.local);
}

/** F with D F = f where D is the derivation of the iterated logarithm of that depth (0: t d/dt). */
function integrateIn(c: Context, f: Multi, depth: number, own: ScaleElement): Multi {
  if (!(f instanceof Series)) {
    if (isOscillating(c, f)) throw refuseOscillation();
    return isLiteralZero(f) || isZero(c, f) ? Q.ZERO : scaleBy(c, logarithmOf(c, own), f);
  }
  if (f.element === own) {
    const stream = mapStream(f.stream, (term) => {
      if (term.order) return term;
      if (signOfExponent(c, term.exponent) === 0) return { exponent: term.exponent, coefficient: integrateSlower(c, term.coefficient, depth, own) };
      return { exponent: term.exponent, coefficient: solve(c, term.coefficient, term.exponent, (g) => derive(c, g, depth)) };
    });
    return new Series(f.element, stream, unnamed);
  }
  if (f.element.rank < own.rank) return integrateSlower(c, f, depth, own);
  if (f.element.kind !== 'exponential' || depth > 0) throw new Declined('no-expansion', 'The integral on this scale is not expanded; choose another point.');
  const speed = theta(c, f.element.logarithm as Multi);
  const stream = mapStream(f.stream, (term) => {
    if (term.order) return term;
    if (signOfExponent(c, term.exponent) === 0) return { exponent: term.exponent, coefficient: integrateIn(c, term.coefficient, depth, own) };
    return { exponent: term.exponent, coefficient: solveFast(c, term.coefficient, scaleBy(c, speed, term.exponent)) };
  });
  return new Series(f.element, stream, unnamed);
}

const derive = (c: Context, g: Multi, depth: number): Multi => (g instanceof Series && g.element.kind === 'logarithm' ? byLogarithm(c, g, depth + 1) : g instanceof Series ? theta(c, g) : Q.ZERO);

/** f in logarithms only: the integral in dl/l of the next logarithm, with l = 1/log(1/own) and D own = own, D l = l^2. */
function integrateSlower(c: Context, f: Multi, depth: number, own: ScaleElement): Multi {
  if (!(f instanceof Series)) return integrateIn(c, f, depth, own);
  logarithmOf(c, own);
  const next = c.scale.elements.find((e) => e.kind === 'logarithm' && e.depth === depth + 1);
  if (!next || f.element.kind !== 'logarithm') throw new Declined('no-expansion', 'The integral on this scale is not expanded; choose another point.');
  return integrateIn(c, shift(c, f, next, Q.MINUS_ONE), depth + 1, next);
}

const refuseOscillation = (): Declined => new Declined('no-expansion', 'The integral of an oscillating function is not expanded here; use the sine or cosine integral.');

/** G with (e + D) G = a for a constant e: the sum of (-D)^k a/e^(k+1). */
function solve(c: Context, a: Multi, e: Element, derivation: (g: Multi) => Multi): Multi {
  if (!(a instanceof Series) && isOscillating(c, a)) throw refuseOscillation();
  const inverse = reciprocalElement(c, e);
  const first = scaleBy(c, a, inverse);
  if (!(a instanceof Series)) return first;
  return neumann(c, first, (g) => scaleBy(c, derivation(g), c.field.negate(inverse)));
}

/** G with (s + theta) G = a for an unbounded s: the sum of (-theta/s)^k a/s. */
function solveFast(c: Context, a: Multi, s: Multi): Multi {
  if (!(a instanceof Series) && isOscillating(c, a)) throw refuseOscillation();
  const inverse = reciprocal(c, s);
  const back = scaleBy(c, inverse, Q.MINUS_ONE);
  return neumann(c, multiply(c, a, inverse), (g) => multiply(c, theta(c, g), back));
}

const MOST_FINITE_STEPS = 40;

/** first + step(first) + step(step(first)) + ...; finite where a step gives zero, else a divergent series. */
function neumann(c: Context, first: Multi, step: (g: Multi) => Multi): Multi {
  const parts: Multi[] = [first];
  let total = first;
  while (parts.length < MOST_FINITE_STEPS && isShort(parts[parts.length - 1] as Multi)) {
    const next = step(parts[parts.length - 1] as Multi);
    if (!(next instanceof Series) ? isZero(c, next) : isShort(next) && leading(c, next) === null) return total;
    parts.push(next);
    total = add(c, total, next);
    if (!shrinksToZero(parts)) break;
  }
  c.notes.divergent = true;
  const element = (first as Series).element;
  return sumOfSeries(c, element, (k) => {
    while (parts.length <= k) parts.push(step(parts[parts.length - 1] as Multi));
    return parts[k] as Multi;
  });
}

/** Only finite sums of non-negative integer powers of a logarithm or of 1/t can end; others are not followed further. */
function shrinksToZero(parts: readonly Multi[]): boolean {
  const last = parts[parts.length - 1];
  if (!(last instanceof Series)) return true;
  const term = last.stream.at(0);
  return term !== null && 'num' in term.exponent && term.exponent.den === 1n && term.exponent.num <= 0n;
}
