/** Zeros of irreducible polynomials as exact numbers: field laws, signs, and published decimals. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createField, type Element, type Field, rationalFactors } from '../../src/algebra/index.ts';
import { Q, type Rational } from '../../src/expression/index.ts';
import { isolateRoots, rootBall } from '../../src/functions/index.ts';
import { budget } from '../../src/outcome.ts';
import { complex, real } from '../../src/rigorous/index.ts';
import { text } from './write.ts';

const rationals = (p: readonly number[]): Rational[] => p.map((c) => Q.rational(c));
const fieldOf = (): Field => createField([], budget(20000));
const valueAt = (f: Field, p: readonly number[], x: Element): Element => p.reduceRight<Element>((sum, c) => f.add(f.multiply(sum, x), Q.rational(c)), Q.ZERO);

describe('one number in the field', () => {
  // Irreducible by Eisenstein's criterion or known as such: x^5 - x - 1 (Galois group S5), x^4 - 10x^2 + 1 is a quadratic in x^2 and left out.
  const polynomials = [[1, -4, 0, 1], [-1, -1, 0, 0, 0, 1], [1, -4, 0, 0, 2], [-2, 4, 0, 6, 0, 3], [2, 0, -6, 0, 0, 0, 1]];
  it.each(polynomials.map((p) => [p]))('%j: every zero solves it, and is real or not', (p) => {
    const f = fieldOf();
    const zeros = f.zeros(rationals(p)) ?? [];
    expect(zeros).toHaveLength(p.length - 1);
    for (const z of zeros) {
      expect(f.isZero(valueAt(f, p, z.value))).toBe('yes');
      expect(f.isReal(z.value)).toBe(z.real ? 'yes' : 'no');
      expect(f.isZero(z.value)).toBe('no');
      expect(f.equal(f.fromExpression(f.toExpression(z.value)), z.value)).toBe('yes');
    }
  });
  it('divides: a (b/a) = b for random polynomials in the number', () => {
    const coefficients = fc.array(fc.integer({ min: -9, max: 9 }), { minLength: 1, maxLength: 4 });
    fc.assert(
      fc.property(fc.constantFrom(...polynomials), coefficients, coefficients, (p, a, b) => {
        const f = fieldOf();
        const x = f.zeros(rationals(p))?.[0]?.value ?? Q.ZERO;
        const [u, v] = [valueAt(f, a, x), valueAt(f, b, x)];
        if (f.isZero(u) === 'yes') return a.every((c) => c === 0);
        return f.equal(f.multiply(u, f.divide(v, u)), v) === 'yes';
      }),
      { numRuns: 60 },
    );
  });
  it('the cubic of the regular enneagon is written by cosines: x^3 - 3x + 1 = 0 has 2 cos(2 pi/9) (Abramowitz & Stegun 4.3.27 with cos(2 pi/3) = -1/2)', () => {
    const f = fieldOf();
    const zeros = (f.zeros(rationals([1, -3, 0, 1])) ?? []).map((z) => text(f.toExpression(z.value)));
    expect(zeros).toContain('2*cos(2*pi/9)');
  });
});

describe('isolation', () => {
  // Decimals: plastic ratio OEIS A060006, x^5 - x - 1: OEIS A160155, Wallis's cubic x^3 - 2x - 5: OEIS A007493 (all from memory; 30 digits recomputed with mpmath 1.3.0).
  it.each([
    [[1, 0, -1, -1], 1, '1.32471795724474602596090885447'],
    [[1, 0, 0, 0, -1, -1], 1, '1.16730397826141868425604589985'],
    [[1, 0, -2, -5], 1, '2.09455148154232659148238654057'],
  ])('%j, zero %i', (p, index, digits) => {
    const ball = rootBall(p.map(BigInt), index as number, 120);
    if (!ball) throw new Error('no ball');
    const [whole = '', fraction = ''] = (digits as string).split('.');
    const published = Q.rational(BigInt(whole + fraction), 10n ** BigInt(fraction.length));
    const gap = real.absoluteUpper(real.subtract(ball.re, real.fromRational(published, 200), 200));
    expect(Q.compare(real.upper(gap), Q.rational(1n, 10n ** 29n))).toBe(-1);
    expect(complex.isReal(ball)).toBe(true);
  });
  it('finds every zero of Wilkinson\'s polynomial of degree 12 in its place', () => {
    let p = [1n];
    for (let k = 1n; k <= 12n; k += 1n) p = [...p, 0n].map((c, i) => c - k * (i > 0 ? (p[i - 1] as bigint) : 0n));
    const discs = isolateRoots(p) ?? [];
    expect(discs.every((d) => d.real)).toBe(true);
    discs.forEach((_, k) => {
      const ball = rootBall(p, k + 1, 100);
      expect(ball && real.contains(ball.re, Q.rational(k + 1))).toBe(true);
      expect(ball && real.exponentOf(real.radius(ball.re)) < -90).toBe(true);
    });
  });
  it('has no answer for repeated zeros', () => {
    expect(isolateRoots([1n, -2n, 1n])).toBeNull();
  });
  it('tells the two close zeros of x^6 - 2 (10^10 x - 1)^2 apart (Mignotte, Computer Algebra, 1983, from memory)', () => {
    const discs = isolateRoots([1n, 0n, 0n, 0n, -2n * 10n ** 20n, 4n * 10n ** 10n, -2n]) ?? [];
    expect(discs).toHaveLength(6);
    expect(discs.filter((d) => d.real)).toHaveLength(4);
  });
});

describe('factors over the rationals', () => {
  it('multiply to the polynomial and are the ones it was made of', () => {
    const irreducible = [[-1, 1], [1, 2], [-2, 0, 1], [1, 1, 1], [1, -4, 0, 1], [-1, -1, 0, 0, 0, 1]];
    const key = (p: readonly (bigint | number)[]): string => p.join(' ');
    fc.assert(
      fc.property(fc.array(fc.constantFrom(...irreducible), { minLength: 1, maxLength: 4 }), (parts) => {
        let p = [1];
        for (const q of parts) {
          const next = Array.from({ length: p.length + q.length - 1 }, () => 0);
          p.forEach((a, i) => q.forEach((b, j) => void (next[i + j] = (next[i + j] ?? 0) + a * b)));
          p = next;
        }
        const found = (rationalFactors(rationals(p), () => undefined) ?? []).flatMap((f) => Array.from({ length: f.multiplicity }, () => key(f.polynomial)));
        return JSON.stringify(found.sort()) === JSON.stringify(parts.map(key).sort());
      }),
      { numRuns: 60 },
    );
  });
  it('x^4 + 4 splits (Sophie Germain), x^4 + 1 does not', () => {
    expect(rationalFactors(rationals([4, 0, 0, 0, 1]), () => undefined)).toHaveLength(2);
    expect(rationalFactors(rationals([1, 0, 0, 0, 1]), () => undefined)).toHaveLength(1);
  });
});
