/** The four operations, modulus and argument of complex rectangles over any real arithmetic, and what the functions of them share. */
import type { Rational } from '../expression/index.ts';
import type { RealArithmetic } from './arithmetic.ts';

export interface Rectangle<T> {
  readonly re: T;
  readonly im: T;
}

/** The operations; documented at `ComplexArithmetic` where they are public. */
export type ComplexField<T> = ReturnType<typeof complexField<T>>;

/** With `analytic`, null instead of two-sided results at cuts. */
export function complexField<T>(r: RealArithmetic<T>, analytic: boolean) {
  type Z = Rectangle<T>;
  const zero: Z = { re: r.zero, im: r.zero };
  const one: Z = { re: r.one, im: r.zero };
  const i: Z = { re: r.zero, im: r.one };
  const half: Rational = { num: 1n, den: 2n };
  const fromReal = (re: T): Z => ({ re, im: r.zero });
  const isReal = (z: Z): boolean => r.isZero(z.im);
  const pair = (re: T | null, im: T | null): Z | null => (re === null || im === null ? null : { re, im });
  const add = (a: Z, b: Z): Z => ({ re: r.add(a.re, b.re), im: r.add(a.im, b.im) });
  const subtract = (a: Z, b: Z): Z => ({ re: r.subtract(a.re, b.re), im: r.subtract(a.im, b.im) });
  const negate = (a: Z): Z => ({ re: r.negate(a.re), im: r.negate(a.im) });
  const conjugate = (a: Z): Z => ({ re: a.re, im: r.negate(a.im) });
  const timesI = (a: Z): Z => ({ re: r.negate(a.im), im: a.re });
  const overI = (a: Z): Z => ({ re: a.im, im: r.negate(a.re) });
  const multiply = (a: Z, b: Z): Z => {
    if (isReal(a)) return isReal(b) ? fromReal(r.multiply(a.re, b.re)) : { re: r.multiply(a.re, b.re), im: r.multiply(a.re, b.im) };
    if (isReal(b)) return { re: r.multiply(a.re, b.re), im: r.multiply(a.im, b.re) };
    return { re: r.subtract(r.multiply(a.re, b.re), r.multiply(a.im, b.im)), im: r.add(r.multiply(a.re, b.im), r.multiply(a.im, b.re)) };
  };
  const square = (a: Z): Z => {
    if (isReal(a)) return fromReal(r.square(a.re));
    const cross = r.multiply(a.re, a.im);
    return { re: r.subtract(r.square(a.re), r.square(a.im)), im: r.add(cross, cross) };
  };
  const norm = (z: Z): T => (isReal(z) ? r.square(z.re) : r.add(r.square(z.re), r.square(z.im)));
  const containsZero = (z: Z): boolean => r.containsZero(z.re) && r.containsZero(z.im);
  const midpoint = (z: Z): Z => ({ re: r.midpoint(z.re), im: r.midpoint(z.im) });
  const isPoint = (z: Z): boolean => r.isPoint(z.re) && r.isPoint(z.im);
  const union = (a: Z, b: Z): Z => ({ re: r.union(a.re, b.re), im: r.union(a.im, b.im) });
  const intersect = (a: Z, b: Z): Z => ({ re: r.intersect(a.re, b.re), im: r.intersect(a.im, b.im) });
  const divide = (a: Z, b: Z): Z | null => {
    if (isReal(b)) return pair(r.divide(a.re, b.re), r.isZero(a.im) ? (r.containsZero(b.re) ? null : r.zero) : r.divide(a.im, b.re));
    const size = norm(b);
    const inverse = pair(r.divide(b.re, size), r.divide(r.negate(b.im), size));
    return inverse === null ? null : multiply(a, inverse);
  };
  /** Square root of a set known to hold no negative number but for the slack of its enclosure. */
  const clippedRoot = (x: T): T => {
    const top = r.upperEnd(x);
    const high = r.isPositive(top) ? r.sqrt(top) : r.zero;
    if (r.isNonNegative(x)) return r.sqrt(x) ?? r.zero;
    return r.union(r.zero, high ?? r.zero);
  };
  const modulus = (z: Z): T => {
    if (isReal(z)) return r.absolute(z.re);
    if (r.isZero(z.re)) return r.absolute(z.im);
    return clippedRoot(norm(z));
  };

  /** Where the closed negative axis meets the rectangle. */
  const meetsNegativeAxis = (z: Z): boolean => r.containsZero(z.im) && !r.isPositive(z.re);
  const argument = (z: Z): T | null => {
    if (containsZero(z)) return null;
    if (!meetsNegativeAxis(z)) return r.atan2(z.im, z.re);
    if (analytic) return null;
    const pi = r.constant('pi');
    if (isReal(z)) return r.isNegative(z.re) ? pi : null;
    // Values from above run up to pi, those from below start at -pi.
    const from = r.isNegative(z.im) || !r.isNonNegative(z.im) ? r.negate(pi) : r.divide(pi, r.fromInteger(2));
    return from === null ? null : r.union(from, pi);
  };

  /** f over a rectangle as the intersection of the direct enclosure and f(mid) + f'(Z)(Z - mid), the second where f' exists on all of it. */
  const centred = (z: Z, direct: (z: Z) => Z | null, derivative: (z: Z) => Z | null): Z | null => {
    const wide = direct(z);
    if (isPoint(z) || wide === null) return wide;
    const slope = derivative(z);
    if (slope === null) return wide;
    const mid = midpoint(z);
    const value = direct(mid);
    return value === null ? wide : intersect(wide, add(value, multiply(slope, subtract(z, mid))));
  };

  return { r, analytic, zero, one, i, half, fromReal, isReal, pair, add, subtract, negate, conjugate, timesI, overI, multiply, square, norm, containsZero, midpoint, isPoint, union, intersect, divide, clippedRoot, modulus, meetsNegativeAxis, argument, centred };
}
