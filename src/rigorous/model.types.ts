/**
 * Local models: a function near s = 0 as g(s) = s^v (c_0 + c_1 s + ... + c_(m-1) s^(m-1) + s^m rho(s)), where rho(s) lies in `tail` for every s in the domain X.
 * X is [0, 1] or [-1, 1] or a complex set that contains the segment from 0 to each of its points; the caller scales its variable to it.
 * (Taylor models with relative remainder; Joldes, thesis ENS Lyon 2011, ch. 2.) The remainder is carried as a factor of s^(v+m), so what is divided out or
 * subtracted at s = 0 does not spoil it: removable singularities, poles and branch points need no other treatment than v.
 */
import type { Rational } from '../expression/index.ts';
import type { Arithmetic, ElementaryName } from './arithmetic.ts';

export interface Model<T> {
  /** v. */
  readonly valuation: number;
  /** c_0 to c_(m-1); none at all, with a tail of zero, is the function zero. */
  readonly coefficients: readonly T[];
  /** Exactly zero for polynomials. */
  readonly tail: T;
  /** Encloses g(s)/s^v over X. */
  readonly range: T;
}

/** Every operation is null where it is not defined on the whole of X, or could not be proved to be. */
export interface ModelArithmetic<T> {
  readonly a: Arithmetic<T>;
  readonly domain: T;
  /** Coefficients kept per model. */
  readonly length: number;
  constant(value: T): Model<T>;
  /** sum of coefficients c_k s^(v+k), exactly. */
  polynomial(coefficients: readonly T[], valuation?: number): Model<T>;
  add(f: Model<T>, g: Model<T>): Model<T>;
  subtract(f: Model<T>, g: Model<T>): Model<T>;
  negate(f: Model<T>): Model<T>;
  scale(f: Model<T>, factor: T): Model<T>;
  multiply(f: Model<T>, g: Model<T>): Model<T>;
  /** Null where the divisor has, or may have, a zero in X other than the power of s that is divided out. */
  divide(f: Model<T>, g: Model<T>): Model<T> | null;
  powerInteger(f: Model<T>, n: number): Model<T> | null;
  /** f^q, principal; the leading coefficient must have a q-th power, and v q must be an integer. */
  powerRational(f: Model<T>, q: Rational): Model<T> | null;
  /** f^y with constant exponent y; v must be 0 unless y is an exact integer in disguise. */
  power(f: Model<T>, y: T): Model<T> | null;
  elementary(name: ElementaryName, f: Model<T>): Model<T> | null;
  /** atan, tanh of an argument that grows without bound with one sign (v < 0, real, s in [0, 1]); null for all others. */
  elementaryAtInfinity(name: ElementaryName, f: Model<T>): Model<T> | null;
  /** From f' along the model: f(u) with value f(u(0)) given and `slope` the model of f'(P), P the polynomial part of u; slopeRange encloses f' over the range of u. */
  integrate(u: Model<T>, start: T, slope: Model<T>, slopeRange: T | null): Model<T> | null;
  /** The same function with v = 0 (null where v < 0). */
  regular(f: Model<T>): Model<T> | null;
  /** The polynomial part of a regular model, as an exact polynomial. */
  polynomialPart(f: Model<T>): Model<T>;
  /** Enclosure of g over X where v >= 0. */
  rangeOf(f: Model<T>): T | null;
  /** Narrows the range by an enclosure known from elsewhere (v = 0 only). */
  withRange(f: Model<T>, range: T): Model<T>;
}
