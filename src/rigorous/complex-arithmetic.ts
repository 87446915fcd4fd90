/**
 * Complex rectangles over any real arithmetic, with principal values and DLMF's cuts (4.2.1, 4.23(vii), 4.37(ii)); on a cut the value from the side that DLMF names.
 * A rectangle that meets a cut gets a result containing both sides; with `analytic` it gets null instead, so that a non-null result proves f analytic on the rectangle.
 * Inverse functions by the cut-respecting formulas of Kahan, "Branch cuts for complex elementary functions" (1987).
 */
import type { Rational } from '../expression/index.ts';
import type { Arithmetic, RealArithmetic } from './arithmetic.ts';

export interface Rectangle<T> {
  readonly re: T;
  readonly im: T;
}

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

  const exp = (z: Z): Z | null => {
    const size = r.exp(z.re);
    if (size === null) return null;
    if (isReal(z)) return fromReal(size);
    const [s, c] = r.sinCos(z.im);
    return { re: r.multiply(size, c), im: r.multiply(size, s) };
  };
  const log = (z: Z): Z | null => {
    if (isReal(z) && r.isPositive(z.re)) return pair(r.log(z.re), r.zero);
    if (containsZero(z)) return null;
    const angle = argument(z);
    const size = r.log(isReal(z) ? r.absolute(z.re) : norm(z));
    if (angle === null || size === null) return null;
    return { re: isReal(z) ? size : r.divideInteger(size, 2), im: angle };
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

  const squareRootDirect = (z: Z): Z | null => {
    if (isReal(z)) {
      if (r.isNonNegative(z.re)) return pair(r.sqrt(z.re), r.zero);
      if (analytic) return null;
      if (r.isNonNegative(r.negate(z.re))) return pair(r.zero, r.sqrt(r.negate(z.re)));
    }
    if (meetsNegativeAxis(z) && analytic) return null;
    const size = modulus(z);
    const parts = (sign: 1 | -1): T => {
      const sum = r.divideInteger(sign > 0 ? r.add(size, z.re) : r.subtract(size, z.re), 2);
      return clippedRoot(sum);
    };
    const two = r.fromInteger(2);
    if (r.isPositive(z.re)) {
      const re = parts(1);
      return pair(re, r.divide(z.im, r.multiply(two, re)));
    }
    const im = parts(-1);
    if (r.isNonNegative(z.im)) {
      const re = r.isPositive(im) ? r.divide(z.im, r.multiply(two, im)) : parts(1);
      return pair(re, im);
    }
    if (r.isNonNegative(r.negate(z.im))) {
      // Strictly below the axis, or touching it from below: then the value on the axis itself is from above.
      const re = r.isPositive(im) ? r.divide(r.negate(z.im), r.multiply(two, im)) : parts(1);
      return pair(re, r.isNegative(z.im) ? r.negate(im) : r.union(im, r.negate(im)));
    }
    return pair(parts(1), r.union(im, r.negate(im)));
  };
  const sqrt = (z: Z): Z | null => {
    if (isReal(z) || meetsNegativeAxis(z)) return squareRootDirect(z);
    return centred(z, squareRootDirect, (y) => {
      const root = squareRootDirect(y);
      return root === null ? null : divide(one, { re: r.multiply(r.fromInteger(2), root.re), im: r.multiply(r.fromInteger(2), root.im) });
    });
  };

  const powerInteger = (z: Z, n: number | bigint): Z | null => {
    if (isReal(z)) return pair(r.powerInteger(z.re, n), r.zero);
    let exponent = BigInt(n);
    if (exponent < 0n) {
      const positive = powerInteger(z, -exponent);
      return positive === null ? null : divide(one, positive);
    }
    let base = z;
    let result = one;
    while (exponent > 0n) {
      if (exponent & 1n) result = multiply(result, base);
      exponent >>= 1n;
      if (exponent > 0n) base = square(base);
    }
    return result;
  };
  const power = (a: Z, b: Z): Z | null => {
    if (r.isZero(a.re) && isReal(a)) return r.isPositive(b.re) ? zero : null;
    const logarithm = log(a);
    return logarithm === null ? null : exp(multiply(b, logarithm));
  };
  const powerRational = (z: Z, q: Rational): Z | null => {
    if (q.den === 1n) return powerInteger(z, q.num);
    if (isReal(z) && (r.isPositive(z.re) || (q.num > 0n && r.isNonNegative(z.re) && !analytic))) return pair(r.powerRational(z.re, q), r.zero);
    if (q.den === 2n) {
      const root = sqrt(z);
      return root === null ? null : powerInteger(root, q.num);
    }
    const direct = power(z, fromReal(r.fromRational(q)));
    if (direct !== null) return direct;
    // A rectangle around zero: every value has modulus at most |z|^q.
    if (q.num > 0n && !analytic) {
      const size = r.powerRational(r.upperEnd(modulus(z)), q);
      const disc = size === null ? null : r.union(r.negate(size), size);
      return pair(disc, disc);
    }
    return null;
  };

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
  const expm1 = (z: Z): Z | null => {
    if (isReal(z)) return pair(r.expm1(z.re), r.zero);
    // e^z - 1 = (e^x - 1) cos y - 2 sin^2(y/2) + i e^x sin y.
    const [e, m] = [r.exp(z.re), r.expm1(z.re)];
    if (e === null || m === null) return null;
    const [s, c] = r.sinCos(z.im);
    const halfSine = r.square(r.sinCos(r.divideInteger(z.im, 2))[0]);
    return { re: r.subtract(r.multiply(m, c), r.add(halfSine, halfSine)), im: r.multiply(e, s) };
  };
  const log1p = (z: Z): Z | null => {
    if (isReal(z)) {
      const value = r.log1p(z.re);
      if (value !== null) return fromReal(value);
    }
    // |1+z|^2 - 1 = x(2 + x) + y^2 keeps small arguments accurate.
    const shifted = add(one, z);
    const angle = containsZero(shifted) ? null : argument(shifted);
    const size = r.log1p(r.add(r.multiply(z.re, r.add(r.fromInteger(2), z.re)), r.square(z.im)));
    return angle === null || size === null ? log(shifted) : { re: r.divideInteger(size, 2), im: angle };
  };

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
