/** Products of kernel powers: sparse vectors of exponents over kernel indices. */
import { addExponents, compareExponents, exponentKey, negateExponent, type Exponent } from './exponent.ts';

export interface Monomial {
  /** Kernel indices, strictly increasing. */
  readonly kernels: readonly number[];
  /** Exponents beside them, never zero. */
  readonly exponents: readonly Exponent[];
}

export const UNIT: Monomial = { kernels: [], exponents: [] };

export const monomialOf = (kernel: number, exponent: Exponent): Monomial => (exponent === 0 ? UNIT : { kernels: [kernel], exponents: [exponent] });
export const isUnit = (m: Monomial): boolean => m.kernels.length === 0;

export function multiplyMonomials(a: Monomial, b: Monomial): Monomial {
  const n = a.kernels.length;
  const m = b.kernels.length;
  if (n === 0) return b;
  if (m === 0) return a;
  const kernels: number[] = [];
  const exponents: Exponent[] = [];
  let i = 0;
  let j = 0;
  while (i < n && j < m) {
    const x = a.kernels[i] as number;
    const y = b.kernels[j] as number;
    if (x < y) {
      kernels.push(x);
      exponents.push(a.exponents[i] as Exponent);
      i += 1;
    } else if (x > y) {
      kernels.push(y);
      exponents.push(b.exponents[j] as Exponent);
      j += 1;
    } else {
      const e = addExponents(a.exponents[i] as Exponent, b.exponents[j] as Exponent);
      if (e !== 0) {
        kernels.push(x);
        exponents.push(e);
      }
      i += 1;
      j += 1;
    }
  }
  for (; i < n; i += 1) {
    kernels.push(a.kernels[i] as number);
    exponents.push(a.exponents[i] as Exponent);
  }
  for (; j < m; j += 1) {
    kernels.push(b.kernels[j] as number);
    exponents.push(b.exponents[j] as Exponent);
  }
  return { kernels, exponents };
}

export const invertMonomial = (a: Monomial): Monomial => (isUnit(a) ? a : { kernels: a.kernels, exponents: a.exponents.map(negateExponent) });

/** Lexicographic order: the smallest kernel index counts first, the higher exponent is the greater. */
export function compareMonomials(a: Monomial, b: Monomial): number {
  const n = Math.min(a.kernels.length, b.kernels.length);
  for (let i = 0; i < n; i += 1) {
    const x = a.kernels[i] as number;
    const y = b.kernels[i] as number;
    if (x < y) return compareExponents(a.exponents[i] as Exponent, 0);
    if (x > y) return compareExponents(0, b.exponents[i] as Exponent);
    const c = compareExponents(a.exponents[i] as Exponent, b.exponents[i] as Exponent);
    if (c !== 0) return c;
  }
  if (a.kernels.length > n) return compareExponents(a.exponents[n] as Exponent, 0);
  if (b.kernels.length > n) return compareExponents(0, b.exponents[n] as Exponent);
  return 0;
}

export const sameMonomial = (a: Monomial, b: Monomial): boolean => a === b || compareMonomials(a, b) === 0;

export function exponentIn(m: Monomial, kernel: number): Exponent {
  const at = m.kernels.indexOf(kernel);
  return at < 0 ? 0 : (m.exponents[at] as Exponent);
}

/** The monomial without one kernel. */
export function withoutKernel(m: Monomial, kernel: number): Monomial {
  const at = m.kernels.indexOf(kernel);
  if (at < 0) return m;
  return { kernels: m.kernels.filter((_, i) => i !== at), exponents: m.exponents.filter((_, i) => i !== at) };
}

/** Per kernel the smaller exponent, absent ones counting as zero. */
export function commonMonomial(a: Monomial, b: Monomial): Monomial {
  const kernels: number[] = [];
  const exponents: Exponent[] = [];
  const keep = (k: number, e: Exponent): void => {
    if (e !== 0) {
      kernels.push(k);
      exponents.push(e);
    }
  };
  const lower = (x: Exponent, y: Exponent): Exponent => (compareExponents(x, y) <= 0 ? x : y);
  let i = 0;
  let j = 0;
  while (i < a.kernels.length || j < b.kernels.length) {
    const x = a.kernels[i] ?? Infinity;
    const y = b.kernels[j] ?? Infinity;
    if (x < y) {
      keep(x, lower(a.exponents[i] as Exponent, 0));
      i += 1;
    } else if (x > y) {
      keep(y, lower(0, b.exponents[j] as Exponent));
      j += 1;
    } else {
      keep(x, lower(a.exponents[i] as Exponent, b.exponents[j] as Exponent));
      i += 1;
      j += 1;
    }
  }
  return kernels.length === 0 ? UNIT : { kernels, exponents };
}

export function monomialKey(m: Monomial): string {
  let key = '';
  for (let i = 0; i < m.kernels.length; i += 1) key += `${m.kernels[i]}^${exponentKey(m.exponents[i] as Exponent)} `;
  return key;
}
