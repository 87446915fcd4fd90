/**
 * Complex rectangles over any real arithmetic, with principal values and DLMF's cuts (4.2.1, 4.23(vii), 4.37(ii)); on a cut the value from the side that DLMF names.
 * A rectangle that meets a cut gets a result containing both sides; with `analytic` it gets null instead, so that a non-null result proves f analytic on the rectangle.
 */
import type { Arithmetic, RealArithmetic } from './arithmetic.ts';
import { complexCircular } from './complex-circular.ts';
import { complexExponentials } from './complex-exponential.ts';
import { complexField, type Rectangle } from './complex-field.ts';

export interface ComplexArithmetic<T> extends Arithmetic<Rectangle<T>> {
  readonly real: RealArithmetic<T>;
  readonly i: Rectangle<T>;
  fromReal(re: T): Rectangle<T>;
  conjugate(z: Rectangle<T>): Rectangle<T>;
  /** |z| as a real set. */
  modulus(z: Rectangle<T>): T;
  /** Principal argument; both sides where the rectangle meets the negative axis (null where analytic), null where it contains zero. */
  argument(z: Rectangle<T>): T | null;
}

export function complexArithmetic<T>(r: RealArithmetic<T>, analytic = false): ComplexArithmetic<T> {
  const field = complexField(r, analytic);
  const exponentials = complexExponentials(field);
  const { zero, one, i, half, fromReal, isReal, pair, add, subtract, negate, conjugate, multiply, square, containsZero, midpoint, isPoint, union, intersect, divide, modulus, argument } = field;
  const { exp, log, powerInteger, power, powerRational, expm1, log1p } = exponentials;
  return {
    real: r,
    zero,
    one,
    i,
    fromReal,
    conjugate,
    modulus,
    argument,
    fromInteger: (n) => fromReal(r.fromInteger(n)),
    fromRational: (q) => fromReal(r.fromRational(q)),
    constant: (name) => fromReal(r.constant(name)),
    add,
    subtract,
    negate,
    multiply,
    square,
    divide,
    divideInteger: (a, n) => ({ re: r.divideInteger(a.re, n), im: isReal(a) ? r.zero : r.divideInteger(a.im, n) }),
    powerInteger,
    powerRational,
    power: (a, b) => (isReal(b) && isReal(a) && r.isPositive(a.re) ? pair(r.power(a.re, b.re), r.zero) : power(a, b)),
    containsZero,
    isZero: (z) => r.isZero(z.re) && r.isZero(z.im),
    union,
    intersect,
    midpoint,
    isPoint,
    exp,
    expm1,
    log,
    log1p,
    sqrt: (z) => (r.isZero(z.re) && isReal(z) && analytic ? null : powerRational(z, half)),
    ...complexCircular(field, exponentials),
  };
}
