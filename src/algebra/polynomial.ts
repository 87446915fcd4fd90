/** Sparse multivariate polynomials with integer coefficients, as free polynomials in their kernels (relations between kernels are applied in quotient.ts). */
import { Q } from '../expression/index.ts';
import { compareExponents } from './exponent.ts';
import { commonMonomial, compareMonomials, invertMonomial, isUnit, monomialKey, multiplyMonomials, UNIT, type Monomial } from './monomial.ts';

export interface Term {
  readonly monomial: Monomial;
  /** Never zero. */
  readonly coefficient: bigint;
}
/** Terms in strictly decreasing lexicographic order; the empty list is zero. */
export type Polynomial = readonly Term[];

export const ONE_POLYNOMIAL: Polynomial = [{ monomial: UNIT, coefficient: 1n }];
export const isOnePolynomial = (p: Polynomial): boolean => p.length === 1 && p[0] !== undefined && p[0].coefficient === 1n && isUnit(p[0].monomial);
export const constantPolynomial = (c: bigint): Polynomial => (c === 0n ? [] : [{ monomial: UNIT, coefficient: c }]);
/** The value of a constant polynomial, else null. */
export const constantOf = (p: Polynomial): bigint | null => (p.length === 0 ? 0n : p.length === 1 && p[0] && isUnit(p[0].monomial) ? p[0].coefficient : null);

/** a*f + b*g for whole numbers a and b. */
export function combine(f: Polynomial, a: bigint, g: Polynomial, b: bigint): Polynomial {
  const result: Term[] = [];
  let i = 0;
  let j = 0;
  while (i < f.length && j < g.length) {
    const x = f[i] as Term;
    const y = g[j] as Term;
    const c = compareMonomials(x.monomial, y.monomial);
    if (c > 0) {
      result.push(a === 1n ? x : { monomial: x.monomial, coefficient: a * x.coefficient });
      i += 1;
    } else if (c < 0) {
      result.push(b === 1n ? y : { monomial: y.monomial, coefficient: b * y.coefficient });
      j += 1;
    } else {
      const s = a * x.coefficient + b * y.coefficient;
      if (s !== 0n) result.push({ monomial: x.monomial, coefficient: s });
      i += 1;
      j += 1;
    }
  }
  for (; i < f.length; i += 1) {
    const x = f[i] as Term;
    result.push(a === 1n ? x : { monomial: x.monomial, coefficient: a * x.coefficient });
  }
  for (; j < g.length; j += 1) {
    const y = g[j] as Term;
    result.push(b === 1n ? y : { monomial: y.monomial, coefficient: b * y.coefficient });
  }
  return result;
}
export const addPolynomials = (f: Polynomial, g: Polynomial): Polynomial => (f.length === 0 ? g : g.length === 0 ? f : combine(f, 1n, g, 1n));
export const subtractPolynomials = (f: Polynomial, g: Polynomial): Polynomial => combine(f, 1n, g, -1n);
export const scalePolynomial = (f: Polynomial, c: bigint): Polynomial =>
  c === 1n ? f : c === 0n ? [] : f.map((t) => ({ monomial: t.monomial, coefficient: t.coefficient * c }));
/** Multiplying by a monomial keeps the order of terms. */
export const shiftPolynomial = (f: Polynomial, m: Monomial): Polynomial =>
  isUnit(m) ? f : f.map((t) => ({ monomial: multiplyMonomials(t.monomial, m), coefficient: t.coefficient }));

/** Sums equal monomials and sorts. */
export function collect(terms: Iterable<Term>): Polynomial {
  const sums = new Map<string, { monomial: Monomial; coefficient: bigint }>();
  for (const t of terms) {
    const key = monomialKey(t.monomial);
    const known = sums.get(key);
    if (known) known.coefficient += t.coefficient;
    else sums.set(key, { monomial: t.monomial, coefficient: t.coefficient });
  }
  return [...sums.values()].filter((t) => t.coefficient !== 0n).sort((a, b) => compareMonomials(b.monomial, a.monomial));
}

export function multiplyPolynomials(f: Polynomial, g: Polynomial): Polynomial {
  if (f.length === 0 || g.length === 0) return [];
  const [first] = f;
  const [other] = g;
  if (f.length === 1 && first) return shiftPolynomial(scalePolynomial(g, first.coefficient), first.monomial);
  if (g.length === 1 && other) return shiftPolynomial(scalePolynomial(f, other.coefficient), other.monomial);
  const sums = new Map<string, { monomial: Monomial; coefficient: bigint }>();
  for (const a of f) {
    for (const b of g) {
      const monomial = multiplyMonomials(a.monomial, b.monomial);
      const key = monomialKey(monomial);
      const known = sums.get(key);
      if (known) known.coefficient += a.coefficient * b.coefficient;
      else sums.set(key, { monomial, coefficient: a.coefficient * b.coefficient });
    }
  }
  return [...sums.values()].filter((t) => t.coefficient !== 0n).sort((a, b) => compareMonomials(b.monomial, a.monomial));
}

export function powerOfPolynomial(f: Polynomial, n: number): Polynomial {
  let result = ONE_POLYNOMIAL;
  let base = f;
  for (let k = n; k > 0; k = Math.floor(k / 2)) {
    if (k % 2 === 1) result = multiplyPolynomials(result, base);
    if (k > 1) base = multiplyPolynomials(base, base);
  }
  return result;
}

/** Greatest common divisor of the coefficients, with the sign of the leading one. */
export function contentOf(f: Polynomial): bigint {
  let g = 0n;
  for (const t of f) {
    g = Q.gcd(g, t.coefficient);
    if (g === 1n) break;
  }
  return f[0] && f[0].coefficient < 0n ? -g : g;
}
export const divideByInteger = (f: Polynomial, c: bigint): Polynomial => (c === 1n ? f : f.map((t) => ({ monomial: t.monomial, coefficient: t.coefficient / c })));
export const primitivePart = (f: Polynomial): Polynomial => (f.length === 0 ? f : divideByInteger(f, contentOf(f)));

/** The largest monomial that divides every term, exponents of absent kernels counting as zero. */
export function monomialContent(f: Polynomial): Monomial {
  let common = f[0]?.monomial ?? UNIT;
  for (let i = 1; i < f.length; i += 1) {
    common = commonMonomial(common, (f[i] as Term).monomial);
    if (isUnit(common) && f.every((t) => t.monomial.exponents.every((e) => compareExponents(e, 0) > 0))) break;
  }
  return common;
}

const hasNegative = (m: Monomial): boolean => m.exponents.some((e) => compareExponents(e, 0) < 0);

/** f/g where g divides f in the polynomial ring over the integers, else null. Exponents are not negative. */
export function divideExactly(f: Polynomial, g: Polynomial): Polynomial | null {
  const lead = g[0];
  if (!lead) return null;
  if (g.length === 1) {
    const inverse = invertMonomial(lead.monomial);
    const result: Term[] = [];
    for (const t of f) {
      if (t.coefficient % lead.coefficient !== 0n) return null;
      const monomial = multiplyMonomials(t.monomial, inverse);
      if (hasNegative(monomial)) return null;
      result.push({ monomial, coefficient: t.coefficient / lead.coefficient });
    }
    return result;
  }
  const tail = g[g.length - 1] as Term;
  const last = f[f.length - 1];
  if (last && (last.coefficient % tail.coefficient !== 0n || hasNegative(multiplyMonomials(last.monomial, invertMonomial(tail.monomial))))) return null;
  const inverse = invertMonomial(lead.monomial);
  const quotient: Term[] = [];
  let rest = f;
  while (rest.length > 0) {
    const top = rest[0] as Term;
    if (top.coefficient % lead.coefficient !== 0n) return null;
    const monomial = multiplyMonomials(top.monomial, inverse);
    if (hasNegative(monomial)) return null;
    const coefficient = top.coefficient / lead.coefficient;
    quotient.push({ monomial, coefficient });
    rest = combine(rest, 1n, shiftPolynomial(g, monomial), -coefficient);
  }
  return quotient;
}

export function kernelsIn(f: Polynomial): ReadonlySet<number> {
  const found = new Set<number>();
  for (const t of f) for (const k of t.monomial.kernels) found.add(k);
  return found;
}

export function samePolynomial(f: Polynomial, g: Polynomial): boolean {
  if (f === g) return true;
  if (f.length !== g.length) return false;
  return f.every((t, i) => {
    const u = g[i] as Term;
    return t.coefficient === u.coefficient && compareMonomials(t.monomial, u.monomial) === 0;
  });
}

const keys = new WeakMap<Polynomial, string>();

/** Equal keys exactly for equal polynomials of one field. Kept with the polynomial. */
export function polynomialKey(f: Polynomial): string {
  let key = keys.get(f);
  if (key === undefined) {
    key = f.map((t) => `${t.coefficient}*${monomialKey(t.monomial)}`).join('+');
    keys.set(f, key);
  }
  return key;
}
