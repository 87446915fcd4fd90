/** Polynomial gcd, square-free decomposition, integer factors. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { factorInteger } from '../../src/algebra/integers.ts';
import { linearFactors } from '../../src/algebra/linearFactors.ts';
import { collect, divideExactly, multiplyPolynomials, ONE_POLYNOMIAL, polynomialKey, powerOfPolynomial, primitivePart, type Polynomial } from '../../src/algebra/polynomial.ts';
import { gcdPolynomials } from '../../src/algebra/polynomialGcd.ts';
import { squareFreeFactors } from '../../src/algebra/squareFree.ts';
import { minimalPolynomialOfCosine } from '../../src/algebra/unitCircle.ts';

const free = (): void => undefined;

/** Polynomials in kernels 0, 1, 2, exponents a multiple of 1/step. */
const polynomials = (step: number): fc.Arbitrary<Polynomial> =>
  fc
    .array(fc.tuple(fc.bigInt({ min: -9n, max: 9n }), fc.tuple(fc.nat({ max: 2 }), fc.nat({ max: 2 }), fc.nat({ max: 2 }))), { minLength: 1, maxLength: 4 })
    .map((terms) =>
      collect(
        terms.map(([coefficient, powers]) => {
          const used = powers.map((p, k) => ({ p, k })).filter((x) => x.p !== 0);
          return { coefficient, monomial: { kernels: used.map((x) => x.k), exponents: used.map((x) => (x.p % step === 0 ? x.p / step : { p: x.p, q: step })) } };
        }),
      ),
    )
    .filter((f) => f.length > 0);

describe('gcd of polynomials', () => {
  it.each([1, 2])('divides both and is divided by every common factor (exponents in 1/%d)', (step) => {
    fc.assert(
      fc.property(polynomials(step), polynomials(step), polynomials(step), (f, g, h) => {
        const a = multiplyPolynomials(f, h);
        const b = multiplyPolynomials(g, h);
        const d = gcdPolynomials(a, b, free);
        expect(divideExactly(a, d)).not.toBeNull();
        expect(divideExactly(b, d)).not.toBeNull();
        expect(divideExactly(d, primitivePart(h))).not.toBeNull();
        const [x, y] = [divideExactly(a, d) as Polynomial, divideExactly(b, d) as Polynomial];
        expect(gcdPolynomials(x, y, free)).toEqual(ONE_POLYNOMIAL);
      }),
      { numRuns: 250 },
    );
  });
});

describe('square-free decomposition', () => {
  it('multiplies back, with every factor square-free', () => {
    fc.assert(
      fc.property(polynomials(1), polynomials(1), fc.integer({ min: 1, max: 3 }), (f, g, n) => {
        const positive = (p: Polynomial): Polynomial => primitivePart(p);
        const product = multiplyPolynomials(powerOfPolynomial(positive(f), n), positive(g));
        const common = product.every((t) => t.monomial.kernels.length > 0);
        if (common || product.length < 2) return;
        const factors = squareFreeFactors(product, free);
        const back = factors.reduce<Polynomial>((p, x) => multiplyPolynomials(p, powerOfPolynomial(x.polynomial, x.exponent)), ONE_POLYNOMIAL);
        expect(polynomialKey(back)).toBe(polynomialKey(product));
        for (const x of factors) expect(squareFreeFactors(x.polynomial, free).every((y) => y.exponent === 1)).toBe(true);
      }),
      { numRuns: 150 },
    );
  });
});

describe('linear factors', () => {
  it('splits the falling factorial of 15 and leaves what does not split', () => {
    const x = (c: bigint): Polynomial => collect([{ coefficient: 1n, monomial: { kernels: [0], exponents: [1] } }, { coefficient: c, monomial: { kernels: [], exponents: [] } }]);
    let f = ONE_POLYNOMIAL;
    for (let k = 1n; k <= 15n; k += 1n) f = multiplyPolynomials(f, x(-k));
    expect(linearFactors(f, () => true, true)?.length).toBe(15);
    const irreducible = collect([{ coefficient: 1n, monomial: { kernels: [0], exponents: [3] } }, { coefficient: 2n, monomial: { kernels: [], exponents: [] } }]);
    expect(linearFactors(irreducible, () => true, true)).toBeNull();
  });
});

describe('integers', () => {
  it('factors back to the number', () => {
    fc.assert(
      fc.property(fc.bigInt({ min: 1n, max: 1n << 90n }), (n) => {
        const factors = factorInteger(n);
        expect(factors.reduce((p, f) => p * f.base ** BigInt(f.exponent), 1n)).toBe(n);
      }),
      { numRuns: 30 },
    );
  });
  it('finds the factors of 2^64 + 1 = 274177 * 67280421310721 (Landry 1880) and of 10^18 - 1', () => {
    expect(factorInteger(2n ** 64n + 1n)).toEqual([
      { base: 274177n, exponent: 1 },
      { base: 67280421310721n, exponent: 1 },
    ]);
    expect(factorInteger(10n ** 18n - 1n).map((f) => [f.base, f.exponent])).toEqual([[3n, 4], [7n, 1], [11n, 1], [13n, 1], [19n, 1], [37n, 1], [52579n, 1], [333667n, 1]]);
  });
});

describe('minimal polynomials of 2 cos(2 pi/m)', () => {
  // OEIS A187360 (from memory): m = 7: x^3 + x^2 - 2x - 1; m = 9: x^3 - 3x + 1; m = 28: x^6 - 7x^4 + 14x^2 - 7.
  it.each([
    [7, [-1n, -2n, 1n, 1n]],
    [9, [1n, -3n, 0n, 1n]],
    [28, [-7n, 0n, 14n, 0n, -7n, 0n, 1n]],
  ])('%d', (m, coefficients) => {
    expect(minimalPolynomialOfCosine(m)).toEqual(coefficients);
    const c = 2 * Math.cos((2 * Math.PI) / m);
    expect(Math.abs(coefficients.reduce((s, a, i) => s + Number(a) * c ** i, 0))).toBeLessThan(1e-9);
  });
});
