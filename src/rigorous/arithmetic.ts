/**
 * What complex numbers, local models and enclosures of trees need of a number type, so that each is written once and runs on balls and on double intervals.
 * Every operation returns a set that contains the true result for all choices inside the arguments; `null` means not defined on the whole of them.
 */
import type { ConstantName, Rational } from '../expression/index.ts';

export const ELEMENTARY = ['exp', 'expm1', 'log', 'log1p', 'sqrt', 'sin', 'cos', 'tan', 'sinh', 'cosh', 'tanh', 'asin', 'acos', 'atan', 'asinh', 'acosh', 'atanh'] as const;
export type ElementaryName = (typeof ELEMENTARY)[number];
export type Elementary<T> = { readonly [name in ElementaryName]: (x: T) => T | null };
export type FiniteConstant = Exclude<ConstantName, 'i' | 'infinity'>;

export interface Arithmetic<T> extends Elementary<T> {
  readonly zero: T;
  readonly one: T;
  fromInteger(n: number | bigint): T;
  fromRational(q: Rational): T;
  constant(name: FiniteConstant): T;
  add(a: T, b: T): T;
  subtract(a: T, b: T): T;
  negate(a: T): T;
  multiply(a: T, b: T): T;
  square(a: T): T;
  divide(a: T, b: T): T | null;
  /** a/n for a small integer n other than zero. */
  divideInteger(a: T, n: number): T;
  powerInteger(a: T, n: number | bigint): T | null;
  /** Principal a^q. */
  powerRational(a: T, q: Rational): T | null;
  /** Principal a^b = exp(b log a). */
  power(a: T, b: T): T | null;
  containsZero(a: T): boolean;
  /** The exact number zero. */
  isZero(a: T): boolean;
  union(a: T, b: T): T;
  /** A set inside both; where they do not meet (which no two enclosures of one number do) the first. */
  intersect(a: T, b: T): T;
  /** One number of the set. */
  midpoint(a: T): T;
  isPoint(a: T): boolean;
}

export interface RealArithmetic<T> extends Arithmetic<T> {
  absolute(a: T): T;
  /** Real n-th root for odd n, of numbers at least zero for even n. */
  root(a: T, n: number): T | null;
  /** [sin, cos] at the price of one. */
  sinCos(a: T): readonly [T, T];
  /** Angle of the point (x, y) in (-pi, pi]; null where the set contains the origin or meets the negative x-axis from both sides. */
  atan2(y: T, x: T): T | null;
  maximum(a: T, b: T): T;
  minimum(a: T, b: T): T;
  isPositive(a: T): boolean;
  isNegative(a: T): boolean;
  isNonNegative(a: T): boolean;
  lowerEnd(a: T): T;
  upperEnd(a: T): T;
  /** floor where it is one integer on the whole set. */
  floor(a: T): bigint | null;
  /** A double near the middle, for choices only. */
  toDouble(a: T): number;
}
