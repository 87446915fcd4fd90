/**
 * The coefficient field: exact values built from rationals, named constants, parameters and functions of them.
 * An element is a quotient of polynomials over Q in "kernels" (pi, sqrt 2, log 3, a, a^alpha, exp(a), Gamma(a), ...), in a normal form;
 * zero is decided by the normal form, non-zero by balls at rising precision, and "undecided" is an answer.
 */
import type { Expression, Rational } from '../expression/index.ts';
import type { Monomial } from './monomial.ts';
import type { Polynomial } from './polynomial.ts';

export type Truth = 'yes' | 'no' | 'undecided';
export type Sign = -1 | 0 | 1 | 'undecided' | 'complex';

/** Opaque, immutable. Plain rationals are represented by themselves so that the common case stays fast. */
export type Element = Rational | CompoundElement;
/** content * monomial * numerator / product of polynomial^exponent over `denominator`. The fields are the room's own affair: build and read elements through a Field. */
export interface CompoundElement {
  readonly compound: 'quotient';
  readonly content: Rational;
  readonly monomial: Monomial;
  readonly numerator: Polynomial;
  readonly denominator: readonly DenominatorFactor[];
}
export interface DenominatorFactor {
  readonly polynomial: Polynomial;
  /** At least 1. */
  readonly exponent: number;
}

/** All operations in one context of assumptions. Assumptions that a result rests on are collected in `needed`. */
export interface Field {
  readonly needed: ReadonlySet<string>;
  /** Throws Declined('unknown-function' | 'undecided' | 'needs-assumption') where the tree has no exact value in the field. */
  fromExpression(e: Expression): Element;
  /** As a person writes it: common factors out, log 2 not log(4)/2, sqrt(2)/2, parameters in the order first seen. */
  toExpression(a: Element): Expression;
  rational(value: Rational | bigint | number): Element;
  /** The imaginary unit. */
  readonly i: Element;
  asRational(a: Element): Rational | null;
  add(a: Element, b: Element): Element;
  subtract(a: Element, b: Element): Element;
  negate(a: Element): Element;
  multiply(a: Element, b: Element): Element;
  /** Throws Declined when b is zero or not provably non-zero. */
  divide(a: Element, b: Element): Element;
  /** a^exponent, principal value; exponent may be any element. */
  power(a: Element, exponent: Element): Element;
  exp(a: Element): Element;
  log(a: Element): Element;
  /** f(args) for any function of the registry: special values and identities where known, else a kernel. */
  call(id: string, args: readonly Element[]): Element;
  /**
   * All zeros of an irreducible polynomial of degree 3 to 24 with rational coefficients (lowest first), real ones first: by real radicals or cosines where cubics have them, else as numbers of their own. Of cubics with parameters or radicals in them where their discriminant is known to leave one real zero.
   * Null for any other polynomial; `rationalFactors` takes it apart.
   */
  zeros(coefficients: readonly Element[]): readonly { readonly value: Element; readonly real: boolean }[] | null;
  isZero(a: Element): Truth;
  /** Sign under the assumptions; 'complex' if provably not real. */
  sign(a: Element): Sign;
  isReal(a: Element): Truth;
  equal(a: Element, b: Element): Truth;
  /** Sign of a - b: used to order exponents. */
  compare(a: Element, b: Element): Sign;
  /** The factors of a product or quotient that are not known to differ from 0, each without number and sign in front: `-2 m c^2/I` gives m, c, I. Of them and nothing else a condition a != 0 speaks. */
  factorsThatMayVanish(a: Element): readonly Element[];
  /** Records that the result needs this (protocol notation, `a > 0`). */
  require(assumption: string): void;
  /** Names of free parameters. */
  parameters(a: Element): readonly string[];
  /** Structural key; equal keys imply equal values. */
  key(a: Element): string;
}
