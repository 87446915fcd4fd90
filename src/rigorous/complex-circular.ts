/** Circular functions and inverse functions of complex rectangles; the hyperbolic ones follow by z -> iz. Inverse functions by the cut-respecting formulas of Kahan, "Branch cuts for complex elementary functions" (1987). */
import type { ComplexExponentials } from './complex-exponential.ts';
import type { ComplexField, Rectangle } from './complex-field.ts';


export function complexCircular<T>(field: ComplexField<T>, exponentials: ComplexExponentials<T>) {
  type Z = Rectangle<T>;
  const { r, analytic, one, fromReal, isReal, pair, add, subtract, negate, conjugate, timesI, overI, multiply, square, containsZero, divide, meetsNegativeAxis, centred } = field;
  const { log, sqrt } = exponentials;

  const sinhCosh = (x: T): readonly [T, T] | null => {
    const s = r.sinh(x);
    const c = r.cosh(x);
    return s === null || c === null ? null : [s, c];
  };
  const sin = (z: Z): Z | null => {
    if (isReal(z)) return pair(r.sin(z.re), r.zero);
    const [s, c] = r.sinCos(z.re);
    const h = sinhCosh(z.im);
    return h === null ? null : { re: r.multiply(s, h[1]), im: r.multiply(c, h[0]) };
  };
  const cos = (z: Z): Z | null => {
    if (isReal(z)) return pair(r.cos(z.re), r.zero);
    const [s, c] = r.sinCos(z.re);
    const h = sinhCosh(z.im);
    return h === null ? null : { re: r.multiply(c, h[1]), im: r.negate(r.multiply(s, h[0])) };
  };
  const tangentDirect = (z: Z): Z | null => {
    if (isReal(z)) return pair(r.tan(z.re), r.zero);
    const [s, c] = r.sinCos(r.multiply(r.fromInteger(2), z.re));
    const h = sinhCosh(r.multiply(r.fromInteger(2), z.im));
    if (h !== null) {
      const denominator = r.add(c, h[1]);
      if (r.isPositive(denominator)) return pair(r.divide(s, denominator), r.divide(h[0], denominator));
    }
    const sine = sin(z);
    const cosine = cos(z);
    return sine === null || cosine === null ? null : divide(sine, cosine);
  };
  const tan = (z: Z): Z | null =>
    isReal(z)
      ? tangentDirect(z)
      : centred(z, tangentDirect, (y) => {
          const t = tangentDirect(y);
          return t === null ? null : add(one, square(t));
        });
  const through = (f: (z: Z) => Z | null, before: (z: Z) => Z, after: (z: Z) => Z) => (z: Z): Z | null => {
    const value = f(before(z));
    return value === null ? null : after(value);
  };
  const same = (z: Z): Z => z;

  const inverseSineDirect = (z: Z): Z | null => {
    const a = sqrt(subtract(one, z));
    const b = sqrt(add(one, z));
    if (a === null || b === null) return null;
    const re = r.atan2(z.re, multiply(a, b).re);
    return pair(re ?? angleOfHalfPlane(), r.asinh(multiply(conjugate(a), b).im));
  };
  /** Angles of points with x >= 0 when nothing more is known. */
  const angleOfHalfPlane = (): T => {
    const quarter = r.divideInteger(r.constant('pi'), 2);
    return r.union(r.negate(quarter), quarter);
  };
  const inverseSine = (z: Z): Z | null => {
    if (isReal(z)) {
      const value = r.asin(z.re);
      if (value !== null && !(analytic && meetsUnitEnds(z.re))) return fromReal(value);
      if (analytic) return null;
    }
    return centred(z, inverseSineDirect, (y) => reciprocalRootOf(subtract(one, square(y))));
  };
  const meetsUnitEnds = (x: T): boolean => !r.isPositive(r.subtract(r.one, r.absolute(x)));
  const reciprocalRootOf = (z: Z): Z | null => {
    if (containsZero(z) || meetsNegativeAxis(z)) return null;
    const root = sqrt(z);
    return root === null ? null : divide(one, root);
  };
  const inverseCosineDirect = (z: Z): Z | null => {
    const a = sqrt(subtract(one, z));
    const b = sqrt(add(one, z));
    if (a === null || b === null) return null;
    const angle = r.atan2(a.re, b.re) ?? angleOfQuadrant();
    return pair(r.add(angle, angle), r.asinh(multiply(conjugate(b), a).im));
  };
  const angleOfQuadrant = (): T => r.union(r.zero, r.divideInteger(r.constant('pi'), 2));
  const inverseCosine = (z: Z): Z | null => {
    if (isReal(z)) {
      const value = r.acos(z.re);
      if (value !== null && !(analytic && meetsUnitEnds(z.re))) return fromReal(value);
      if (analytic) return null;
    }
    return centred(z, inverseCosineDirect, (y) => {
      const slope = reciprocalRootOf(subtract(one, square(y)));
      return slope === null ? null : negate(slope);
    });
  };
  const inverseCoshDirect = (z: Z): Z | null => {
    const a = sqrt(subtract(z, one));
    const b = sqrt(add(z, one));
    if (a === null || b === null) return null;
    const angle = r.atan2(a.im, b.re) ?? angleOfHalfPlane();
    return pair(r.asinh(multiply(conjugate(a), b).re), r.add(angle, angle));
  };
  const inverseCosh = (z: Z): Z | null => {
    if (isReal(z)) {
      const value = r.acosh(z.re);
      if (value !== null && !(analytic && !r.isPositive(r.subtract(z.re, r.one)))) return fromReal(value);
      if (analytic) return null;
    }
    if (analytic && r.containsZero(z.im) && !r.isPositive(r.subtract(z.re, r.one))) return null;
    return centred(z, inverseCoshDirect, (y) => {
      const [a, b] = [reciprocalRootOf(subtract(y, one)), reciprocalRootOf(add(y, one))];
      return a === null || b === null ? null : multiply(a, b);
    });
  };
  const inverseTanhDirect = (z: Z): Z | null => {
    if (isReal(z)) {
      const value = r.atanh(z.re);
      if (value !== null) return fromReal(value);
      if (analytic) return null;
    }
    const [a, b] = [log(add(one, z)), log(subtract(one, z))];
    if (a === null || b === null) return null;
    const difference = subtract(a, b);
    return { re: r.divideInteger(difference.re, 2), im: r.divideInteger(difference.im, 2) };
  };
  /** A function that is real on the whole real line. */
  const realOnLine =
    (f: (x: T) => T | null, elsewhere: (z: Z) => Z | null) =>
    (z: Z): Z | null => {
      const value = isReal(z) ? f(z.re) : null;
      return value === null ? elsewhere(z) : fromReal(value);
    };
  const inverseTanh = (z: Z): Z | null => centred(z, inverseTanhDirect, (y) => (inverseTanhMeetsCut(y) ? null : divide(one, subtract(one, square(y)))));
  const inverseTanhMeetsCut = (z: Z): boolean => r.containsZero(z.im) && meetsUnitEnds(z.re);

  return {
    sin,
    cos,
    tan,
    sinh: through(sin, timesI, overI),
    cosh: through(cos, timesI, same),
    tanh: through(tan, timesI, overI),
    asin: inverseSine,
    acos: inverseCosine,
    atan: realOnLine(r.atan, through(inverseTanh, timesI, overI)),
    asinh: realOnLine(r.asinh, through(inverseSine, timesI, overI)),
    acosh: inverseCosh,
    atanh: inverseTanh,
  };
}
