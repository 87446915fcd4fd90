/** Complex balls (rectangles of real balls): `complex.log(z, precision)`. Conventions in complex-arithmetic.ts. */
import type { Rational } from '../expression/index.ts';
import type { ElementaryName } from './arithmetic.ts';
import { ballArithmetic } from './ball-arithmetic.ts';
import type { Ball, ComplexBall } from './ball.types.ts';
import { type ComplexArithmetic, complexArithmetic } from './complex-arithmetic.ts';
import * as real from './real.ts';

const cache = new Map<string, ComplexArithmetic<Ball>>();

/** All operations at one precision; with `analytic`, null instead of two-sided results at cuts. */
export function arithmetic(precision: number, analytic = false): ComplexArithmetic<Ball> {
  const key = `${precision}${analytic ? 'a' : ''}`;
  const known = cache.get(key);
  if (known) return known;
  const made = complexArithmetic(ballArithmetic(precision), analytic);
  if (cache.size > 64) cache.clear();
  cache.set(key, made);
  return made;
}

export const ZERO: ComplexBall = { re: real.ZERO, im: real.ZERO };
export const ONE: ComplexBall = { re: real.ONE, im: real.ZERO };
export const I: ComplexBall = { re: real.ZERO, im: real.ONE };

export const fromReal = (re: Ball): ComplexBall => ({ re, im: real.ZERO });
export const fromParts = (re: Ball, im: Ball): ComplexBall => ({ re, im });
export const fromInteger = (n: number | bigint): ComplexBall => fromReal(real.fromInteger(n));
export const fromRational = (q: Rational, precision: number): ComplexBall => fromReal(real.fromRational(q, precision));
export const add = (a: ComplexBall, b: ComplexBall, precision: number): ComplexBall => arithmetic(precision).add(a, b);
export const subtract = (a: ComplexBall, b: ComplexBall, precision: number): ComplexBall => arithmetic(precision).subtract(a, b);
export const multiply = (a: ComplexBall, b: ComplexBall, precision: number): ComplexBall => arithmetic(precision).multiply(a, b);
export const square = (a: ComplexBall, precision: number): ComplexBall => arithmetic(precision).square(a);
/** Null where b contains zero. */
export const divide = (a: ComplexBall, b: ComplexBall, precision: number): ComplexBall | null => arithmetic(precision).divide(a, b);
export const negate = (z: ComplexBall): ComplexBall => ({ re: real.negate(z.re), im: real.negate(z.im) });
export const conjugate = (z: ComplexBall): ComplexBall => ({ re: z.re, im: real.negate(z.im) });
export const union = (a: ComplexBall, b: ComplexBall, precision = 128): ComplexBall => ({ re: real.union(a.re, b.re, precision), im: real.union(a.im, b.im, precision) });
export const scaleByPowerOfTwo = (z: ComplexBall, n: number): ComplexBall => ({ re: real.scaleByPowerOfTwo(z.re, n), im: real.scaleByPowerOfTwo(z.im, n) });
export const round = (z: ComplexBall, precision: number): ComplexBall => ({ re: real.round(z.re, precision), im: real.round(z.im, precision) });
export const withRadius = (z: ComplexBall, extra: Ball): ComplexBall => ({ re: real.withRadius(z.re, extra), im: real.withRadius(z.im, extra) });
export const midpoint = (z: ComplexBall): ComplexBall => ({ re: real.midpoint(z.re), im: real.midpoint(z.im) });
export const containsZero = (z: ComplexBall): boolean => real.containsZero(z.re) && real.containsZero(z.im);
export const overlaps = (a: ComplexBall, b: ComplexBall): boolean => real.overlaps(a.re, b.re) && real.overlaps(a.im, b.im);
export const containsBall = (outer: ComplexBall, inner: ComplexBall): boolean => real.containsBall(outer.re, inner.re) && real.containsBall(outer.im, inner.im);
/** The imaginary part is exactly zero. */
export const isReal = (z: ComplexBall): boolean => z.im.mid === 0n && z.im.rad === 0n;
export const isExact = (z: ComplexBall): boolean => z.re.rad === 0n && z.im.rad === 0n;
/** |z| as a real ball. */
export const absolute = (z: ComplexBall, precision: number): Ball => arithmetic(precision).modulus(z);
export const argument = (z: ComplexBall, precision: number, analytic = false): Ball | null => arithmetic(precision, analytic).argument(z);
export const powerInteger = (z: ComplexBall, n: number | bigint, precision: number): ComplexBall | null => arithmetic(precision).powerInteger(z, n);
export const powerRational = (z: ComplexBall, q: Rational, precision: number, analytic = false): ComplexBall | null => arithmetic(precision, analytic).powerRational(z, q);
/** Principal a^b. */
export const power = (a: ComplexBall, b: ComplexBall, precision: number, analytic = false): ComplexBall | null => arithmetic(precision, analytic).power(a, b);

type ComplexFunction = (z: ComplexBall, precision: number, analytic?: boolean) => ComplexBall | null;
const lift = (name: ElementaryName): ComplexFunction => (z, precision, analytic = false) => arithmetic(precision, analytic)[name](z);
export const exp = lift('exp');
export const expm1 = lift('expm1');
export const log = lift('log');
export const log1p = lift('log1p');
export const sqrt = lift('sqrt');
export const sin = lift('sin');
export const cos = lift('cos');
export const tan = lift('tan');
export const sinh = lift('sinh');
export const cosh = lift('cosh');
export const tanh = lift('tanh');
export const asin = lift('asin');
export const acos = lift('acos');
export const atan = lift('atan');
export const asinh = lift('asinh');
export const acosh = lift('acosh');
export const atanh = lift('atanh');
