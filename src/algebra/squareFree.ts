/** Square-free decomposition (Musser): multiplicities without factoring. */
import { exponentToRational, denominatorOf, lcm } from './exponent.ts';
import { exponentIn } from './monomial.ts';
import { divideExactly, isOnePolynomial, kernelsIn, type Polynomial, type Term } from './polynomial.ts';
import { gcdPolynomials } from './polynomialGcd.ts';

export interface Multiple {
  readonly polynomial: Polynomial;
  readonly exponent: number;
}

/** Polynomials, pairwise coprime and square-free, whose powers multiply to f. f is primitive, with positive leading coefficient and no monomial factor. */
export function squareFreeFactors(f: Polynomial, check: () => void): readonly Multiple[] {
  // x df/dx for every kernel x: an irreducible factor of f divides all of them exactly one time fewer than f.
  let repeated: Polynomial = f;
  for (const k of kernelsIn(f)) {
    let scale = 1;
    for (const t of f) scale = lcm(scale, denominatorOf(exponentIn(t.monomial, k)));
    const derivative: Term[] = [];
    for (const t of f) {
      const e = exponentToRational(exponentIn(t.monomial, k));
      const factor = (e.num * BigInt(scale)) / e.den;
      if (factor !== 0n) derivative.push({ monomial: t.monomial, coefficient: t.coefficient * factor });
    }
    if (derivative.length > 0) repeated = gcdPolynomials(repeated, derivative, check);
    if (repeated.length === 1) return [{ polynomial: f, exponent: 1 }];
  }
  const divide = (a: Polynomial, b: Polynomial): Polynomial => {
    const q = divideExactly(a, b);
    if (!q) throw new RangeError('a gcd that does not divide');
    return q;
  };
  const result: Multiple[] = [];
  let radical = divide(f, repeated);
  let rest = repeated;
  for (let multiplicity = 1; !isOnePolynomial(radical); multiplicity += 1) {
    const deeper = rest.length <= 1 ? [] : gcdPolynomials(radical, rest, check);
    if (deeper.length <= 1) {
      result.push({ polynomial: radical, exponent: multiplicity });
      break;
    }
    const here = divide(radical, deeper);
    if (!isOnePolynomial(here)) result.push({ polynomial: here, exponent: multiplicity });
    radical = deeper;
    rest = divide(rest, deeper);
  }
  return result;
}
