/** One number type with what rigorous algorithms need: arithmetic at a working precision, bounds of size, and inflation by an error bound. Each algorithm is written once and runs on real and complex balls. */
import type { Rational } from '../../expression/index.ts';
import { type Arithmetic, type Ball, ballArithmetic, complex, type ComplexBall, real } from '../../rigorous/index.ts';

export interface Kit<T> {
  readonly precision: number;
  readonly a: Arithmetic<T>;
  readonly isReal: boolean;
  /** Called in long loops: throws where the time of the request is up. */
  readonly check: () => void;
  /** An exact ball not below |z| for any z of the set. */
  size(z: T): Ball;
  /** An exact ball not above |z| for any z of the set. */
  least(z: T): Ball;
  realPart(z: T): Ball;
  imaginaryPart(z: T): Ball;
  /** All numbers within `radius` of the set (of the set's real line, for real kits). */
  inflate(z: T, radius: Ball): T;
  fromReal(x: Ball): T;
}

const untimed = (): void => undefined;

export const realKit = (precision: number, check: () => void = untimed): Kit<Ball> => ({
  precision,
  a: ballArithmetic(precision),
  isReal: true,
  check,
  size: real.absoluteUpper,
  least: real.absoluteLower,
  realPart: (z) => z,
  imaginaryPart: () => real.ZERO,
  inflate: real.withRadius,
  fromReal: (x) => x,
});

/** `onLine`: all arguments are exactly real, so that logarithms and roots of negative numbers are their principal values, the limits from above; else a set that meets a cut has no value. */
export const complexKit = (precision: number, check: () => void = untimed, onLine = false): Kit<ComplexBall> => ({
  precision,
  a: complex.arithmetic(precision, !onLine),
  isReal: false,
  check,
  size: (z) => real.absoluteUpper(complex.absolute(z, BOUND_BITS)),
  least: (z) => real.absoluteLower(complex.absolute(z, BOUND_BITS)),
  realPart: (z) => z.re,
  imaginaryPart: (z) => z.im,
  inflate: (z, radius) => ({ re: real.withRadius(z.re, radius), im: real.withRadius(z.im, radius) }),
  fromReal: complex.fromReal,
});

/** Bits of the bound arithmetic below; every result is an upper bound. */
const BOUND_BITS = 40;
const up = real.absoluteUpper;

/** Upper bounds of non-negative quantities, rounded up at every step. */
export const bound = {
  zero: real.ZERO,
  one: real.ONE,
  integer: (n: number | bigint): Ball => up(real.fromInteger(n)),
  rational: (q: Rational): Ball => up(real.fromRational(q, BOUND_BITS)),
  add: (a: Ball, b: Ball): Ball => up(real.add(a, b, BOUND_BITS)),
  multiply: (a: Ball, b: Ball): Ball => up(real.multiply(a, b, BOUND_BITS)),
  /** a/b for a lower bound b of the divisor; null where b is zero. */
  divide: (a: Ball, b: Ball): Ball | null => {
    const value = real.divide(a, b, BOUND_BITS);
    return value && up(value);
  },
  power: (a: Ball, n: number): Ball => up(real.powerInteger(a, n, BOUND_BITS) ?? real.ZERO),
  exp: (a: Ball): Ball | null => {
    const value = real.exp(a, BOUND_BITS);
    return value && up(value);
  },
  twoTo: (n: number): Ball => ({ mid: 1n, rad: 0n, exp: n }),
  /** a < b for exact balls. */
  less: (a: Ball, b: Ball): boolean => real.compare(a, b) === -1,
  /** An integer n with value < 2^n. */
  exponent: real.exponentOf,
};

/** A parameter that is known exactly as a rational stays one: products by its numerator and denominator are cheap. */
export type Parameter<T> = Rational | { readonly set: T };
export const isRational = <T>(p: Parameter<T>): p is Rational => 'den' in p;
export const toSet = <T>(kit: Kit<T>, p: Parameter<T>): T => (isRational(p) ? kit.a.fromRational(p) : p.set);

/** The rational that an exact real ball of moderate length is; null for wide or long ones. */
export function exactRational(x: Ball): Rational | null {
  if (x.rad !== 0n || x.exp > 200 || x.exp < -20_000) return null;
  const value = real.lower(x);
  return value.den < LARGEST_PARAMETER && value.num < LARGEST_PARAMETER && value.num > -LARGEST_PARAMETER ? value : null;
}
const LARGEST_PARAMETER = 1n << 256n;
/** The integer that a ball is exactly; null otherwise. */
export function exactInteger(x: Ball, limit = 1_000_000): number | null {
  const value = exactRational(x);
  return value && value.den === 1n && value.num <= BigInt(limit) && value.num >= -BigInt(limit) ? Number(value.num) : null;
}
export const parameterOf = (x: Ball): Parameter<Ball> => exactRational(x) ?? { set: x };
