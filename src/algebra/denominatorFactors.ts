/** Denominators as products of factors that are coprime as far as seen. */
import type { KernelTable } from './kernel.ts';
import { divideExactly, isOnePolynomial, ONE_POLYNOMIAL, type Polynomial, polynomialKey } from './polynomial.ts';
import { gcdPolynomials } from './polynomialGcd.ts';
import { type Factor, NO_FACTORS } from './quotientParts.ts';

/** Divides common factors of numerator and denominator out. */
export function cancelFactors(table: KernelTable, numerator: Polynomial, denominator: readonly Factor[]): { numerator: Polynomial; denominator: readonly Factor[]; changed: boolean } {
  let n = numerator;
  let changed = false;
  const left: Factor[] = [];
  for (const factor of denominator) {
    let exponent = factor.exponent;
    while (exponent > 0) {
      const whole = divideExactly(n, factor.polynomial);
      if (!whole) break;
      n = whole;
      exponent -= 1;
      changed = true;
    }
    if (exponent === 0) continue;
    const common = factor.polynomial.length > 2 || n.length > 1 ? gcdPolynomials(n, factor.polynomial, table.check) : ONE_POLYNOMIAL;
    if (isOnePolynomial(common) || common.length < 2) {
      left.push(exponent === factor.exponent ? factor : { polynomial: factor.polynomial, exponent });
      continue;
    }
    changed = true;
    const other = divideExactly(factor.polynomial, common);
    if (!other) throw new RangeError('a gcd that does not divide');
    let inside = exponent;
    for (;;) {
      const quotient = inside > 0 ? divideExactly(n, common) : null;
      if (!quotient) break;
      n = quotient;
      inside -= 1;
    }
    if (inside > 0) left.push({ polynomial: common, exponent: inside });
    if (!isOnePolynomial(other)) left.push({ polynomial: other, exponent });
  }
  return { numerator: n, denominator: left, changed };
}

/** The list with polynomial^exponent multiplied in, factors kept coprime. The polynomial is primitive with positive leading coefficient and no monomial factor. */
export function insertFactor(table: KernelTable, factors: readonly Factor[], polynomial: Polynomial, exponent: number): readonly Factor[] {
  if (isOnePolynomial(polynomial)) return factors;
  for (let i = 0; i < factors.length; i += 1) {
    const f = factors[i] as Factor;
    const others = factors.filter((_, j) => j !== i);
    if (f.polynomial.length === polynomial.length && polynomialKey(f.polynomial) === polynomialKey(polynomial)) {
      return factors.map((x, j) => (j === i ? { polynomial: x.polynomial, exponent: x.exponent + exponent } : x));
    }
    if (isPlainlyIrreducible(f.polynomial) && isPlainlyIrreducible(polynomial)) continue;
    const common = gcdPolynomials(f.polynomial, polynomial, table.check);
    if (common.length < 2) continue;
    const a = divideExactly(f.polynomial, common);
    const b = divideExactly(polynomial, common);
    if (!a || !b) throw new RangeError('a gcd that does not divide');
    let list = insertFactor(table, others, common, f.exponent + exponent);
    list = insertFactor(table, list, a, f.exponent);
    return insertFactor(table, list, b, exponent);
  }
  return [...factors, { polynomial, exponent }];
}

/** The union of two factored denominators, with each one's exponents beside it. */
export function commonDenominator(table: KernelTable, a: readonly Factor[], b: readonly Factor[]): { readonly factors: readonly Factor[]; readonly left: readonly number[]; readonly right: readonly number[] } {
  let bases: readonly Factor[] = NO_FACTORS;
  for (const f of a) bases = insertFactor(table, bases, f.polynomial, 1);
  const known = new Map(a.map((f) => [polynomialKey(f.polynomial), f.exponent]));
  const other = new Map(b.map((f) => [polynomialKey(f.polynomial), f.exponent]));
  let refined = false;
  for (const f of b) {
    if (known.has(polynomialKey(f.polynomial))) continue;
    const before = bases.length;
    bases = insertFactor(table, bases, f.polynomial, 1);
    if (bases.length !== before + 1 || bases[before]?.polynomial !== f.polynomial) refined = true;
  }
  const exponentsOf = (list: readonly Factor[], direct: ReadonlyMap<string, number>): number[] =>
    bases.map((base) => {
      const hit = direct.get(polynomialKey(base.polynomial));
      if (hit !== undefined && !refined) return hit;
      if (!refined) return 0;
      let e = 0;
      for (const f of list) {
        let p = f.polynomial;
        for (let q = divideExactly(p, base.polynomial); q; q = divideExactly(p, base.polynomial)) {
          p = q;
          e += f.exponent;
        }
      }
      return e;
    });
  const left = exponentsOf(a, known);
  const right = exponentsOf(b, other);
  return { factors: bases.map((f, i) => ({ polynomial: f.polynomial, exponent: Math.max(left[i] as number, right[i] as number) })), left, right };
}

/** c K + rest with K alone in its term and absent from the rest: a primitive polynomial of this form has no factors. */
const isPlainlyIrreducible = (f: Polynomial): boolean =>
  f.length < 9 && f.some((t) => t.monomial.kernels.length === 1 && t.monomial.exponents[0] === 1 && f.every((u) => u === t || !u.monomial.kernels.includes(t.monomial.kernels[0] as number)));
