/** Exponential, logarithm, roots and powers of complex rectangles; on cuts and at branch points as complex-arithmetic.ts says. */
import type { Rational } from '../expression/index.ts';
import type { ComplexField, Rectangle } from './complex-field.ts';


export type ComplexExponentials<T> = ReturnType<typeof complexExponentials<T>>;

export function complexExponentials<T>(field: ComplexField<T>) {
  type Z = Rectangle<T>;
  const { r, analytic, zero, one, fromReal, isReal, pair, add, multiply, square, norm, containsZero, divide, clippedRoot, modulus, meetsNegativeAxis, argument, centred } = field;

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

  return { exp, log, sqrt, powerInteger, power, powerRational, expm1, log1p };
}
