/** Kernels: the generators of the coefficient field, numbered in the order first seen within one field. */
import type { ConstantName, Rational } from '../expression/index.ts';
import type { Element } from './types.ts';
import type { Polynomial } from './polynomial.ts';

/** What a kernel stands for; K^e denotes the principal power unless stated otherwise. */
export type KernelShape =
  | { readonly kind: 'parameter'; readonly name: string }
  | { readonly kind: 'constant'; readonly name: Exclude<ConstantName, 'e' | 'i' | 'infinity'> }
  | { readonly kind: 'imaginary' }
  /** A positive integer that is no perfect power (a prime unless it is too large to factor); occurs with exponents in [0, 1). */
  | { readonly kind: 'integer'; readonly value: bigint }
  /** A polynomial under a root; occurs with exponents in [0, 1). */
  | { readonly kind: 'radicand'; readonly base: Element }
  /** K^r denotes exp(r * unit), which is the principal power only for a real unit. */
  | { readonly kind: 'exp'; readonly unit: Element }
  /** K^r denotes base^(r * unit) = exp(r * unit * log base). */
  | { readonly kind: 'power'; readonly base: Element; readonly unit: Element }
  | { readonly kind: 'log'; readonly argument: Element }
  /** |argument|, argument real; occurs with exponents in [0, 2). */
  | { readonly kind: 'abs'; readonly argument: Element }
  /** 2 cos(pi * angle) with 0 < angle < 1/2: an algebraic integer. */
  | { readonly kind: 'cosine'; readonly angle: Rational }
  /** a_n times a zero of an irreducible polynomial of degree 3 or more: an algebraic integer. Coefficients highest first, index from 1 as in polynomialRoot. */
  | { readonly kind: 'algebraic'; readonly coefficients: readonly bigint[]; readonly index: number }
  | { readonly kind: 'call'; readonly id: string; readonly args: readonly Element[] }
  /** An unspecified function or one of its derivatives: real for real arguments, free of relations. */
  | { readonly kind: 'apply'; readonly name: string; readonly derivatives: readonly number[]; readonly args: readonly Element[] };

export interface Relation {
  /** kernel^period = value; exponents are kept in [0, period). */
  readonly period: number;
  /** Integer coefficients. For a pure relation free of the kernel itself; otherwise of lower degree in it. */
  readonly value: Polynomial;
  readonly pure: boolean;
  /** True where the kernel is an algebraic number, so that it is cleared from denominators. */
  readonly numeric: boolean;
}

export interface Kernel {
  readonly index: number;
  readonly key: string;
  readonly shape: KernelShape;
  readonly relation: Relation | null;
}

/** Grows while a field is used; indices stay valid. */
/** sine^2 = constant + factor * cosine^2: sin^2 = 1 - cos^2, cosh^2 = 1 + sinh^2. */
export interface Circle {
  readonly sine: number;
  readonly cosine: number;
  readonly factor: 1n | -1n;
}

export interface KernelTable {
  readonly kernels: readonly Kernel[];
  /** Relations by kernel index, for the inner loops. */
  readonly relations: readonly (Relation | null)[];
  /** Quadratic relations between two kernels; applied where they shorten a sum, and in full by the zero test. */
  readonly circles: Circle[];
  /** The kernel of this key, made on first use. */
  intern(key: string, make: () => { readonly shape: KernelShape; readonly relation?: Relation | null }): Kernel;
  find(key: string): Kernel | undefined;
  readonly check: () => void;
}

export function createKernelTable(check: () => void): KernelTable {
  const kernels: Kernel[] = [];
  const relations: (Relation | null)[] = [];
  const byKey = new Map<string, Kernel>();
  return {
    kernels,
    relations,
    circles: [],
    check,
    find: (key) => byKey.get(key),
    intern(key, make) {
      const known = byKey.get(key);
      if (known) return known;
      const made = make();
      const relation = made.relation ?? null;
      const kernel: Kernel = { index: kernels.length, key, shape: made.shape, relation };
      kernels.push(kernel);
      relations.push(relation);
      byKey.set(key, kernel);
      return kernel;
    },
  };
}
