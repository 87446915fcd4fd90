/** Exact zeros of a polynomial with constant coefficients, by rationals and radicals, or as algebraic numbers where they are rational polynomials' zeros. */
import { rationalFactors } from '../../algebra/index.ts';
import type { Element } from '../../algebra/types.ts';
import { Q, type Rational } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { type Context, decideSign, isRational, isZero } from '../../series/index.ts';

export interface Zero {
  readonly value: Element;
  readonly multiplicity: number;
  readonly real: boolean;
}

/** All zeros other than 0 (those that are not real may be left out unless `complex`); throws Declined where they cannot be written exactly. Lowest coefficient first. */
export function zerosOf(c: Context, polynomial: readonly Element[], complex: boolean): Zero[] {
  let p = [...polynomial];
  while (p.length > 0 && isZero(c, p[p.length - 1] as Element)) p.pop();
  while (p.length > 0 && isZero(c, p[0] as Element)) p.shift();
  if (isRadical(c, p)) return radicalZeros(c, p);
  const zeros: Zero[] = [];
  const rationals = p.every(isRational) ? rationalZeros(p as Rational[]) : [];
  for (const value of rationals) {
    let multiplicity = 0;
    for (;;) {
      const { quotient, rest } = divideLinear(c, p, value);
      if (!isZero(c, rest)) break;
      p = quotient;
      multiplicity += 1;
    }
    if (multiplicity > 0) zeros.push({ value, multiplicity, real: true });
  }
  if (p.length <= 1) return zeros;
  if (!complex && !isRadical(c, p) && p.every(isRational) && countRealZeros(p as Rational[]) === 0) return zeros;
  return [...zeros, ...remainingZeros(c, p)];
}

/** By the irreducible factors over the rationals, where the coefficients are rational. */
function remainingZeros(c: Context, p: readonly Element[]): Zero[] {
  const factors = p.length > 3 && p.every(isRational) && !isRadical(c, p) ? rationalFactors(p as Rational[], () => c.budget.check()) : null;
  if (!factors) return radicalZeros(c, p);
  return factors.flatMap((f) => {
    const own = f.polynomial.map((a) => Q.rational(a));
    const numbers = isRadical(c, own) || own.length < 4 ? null : c.field.zeros(own);
    return numbers ? numbers.map((z) => ({ ...z, multiplicity: f.multiplicity })) : radicalZeros(c, own).map((z) => ({ ...z, multiplicity: z.multiplicity * f.multiplicity }));
  });
}

/** a + b z^g or a + b z^g + c z^(2g). */
function isRadical(c: Context, p: readonly Element[]): boolean {
  const present = p.flatMap((a, k) => (isZero(c, a) ? [] : [k]));
  const [, second = 0, third] = present;
  return present.length === 2 || (present.length === 3 && third === 2 * second);
}

/** Number of different real zeros, by Sturm's theorem. */
function countRealZeros(p: readonly Rational[]): number {
  const trim = (q: Rational[]): Rational[] => {
    while (q.length > 0 && Q.isZero(q[q.length - 1] as Rational)) q.pop();
    return q;
  };
  const chain: Rational[][] = [trim([...p]), trim(p.slice(1).map((a, k) => Q.multiply(a, Q.rational(k + 1))))];
  for (;;) {
    const a = [...(chain[chain.length - 2] as Rational[])];
    const b = chain[chain.length - 1] as Rational[];
    if (b.length === 0) break;
    while (a.length >= b.length) {
      const factor = Q.divide(a[a.length - 1] as Rational, b[b.length - 1] as Rational);
      const shift = a.length - b.length;
      b.forEach((x, k) => {
        a[k + shift] = Q.subtract(a[k + shift] as Rational, Q.multiply(factor, x));
      });
      a.pop();
      trim(a);
    }
    chain.push(a.map(Q.negate));
    if (a.length === 0) break;
  }
  const changes = (at: 1 | -1): number => {
    const signs = chain.filter((q) => q.length > 0).map((q) => Q.signOf(q[q.length - 1] as Rational) * (at === -1 && q.length % 2 === 0 ? -1 : 1));
    return signs.filter((x, k) => k > 0 && x !== signs[k - 1]).length;
  };
  return changes(-1) - changes(1);
}

function divideLinear(c: Context, p: readonly Element[], at: Element): { quotient: Element[]; rest: Element } {
  const quotient: Element[] = [];
  let carry: Element = Q.ZERO;
  for (let k = p.length - 1; k >= 0; k -= 1) {
    carry = c.field.add(p[k] as Element, c.field.multiply(carry, at));
    if (k > 0) quotient[k - 1] = carry;
  }
  return { quotient, rest: carry };
}

/** Candidates by the rational root theorem; empty where the end coefficients are too large to be factored by trial. */
function rationalZeros(p: readonly Rational[]): Rational[] {
  let common = 1n;
  for (const q of p) common = (common / Q.gcd(common, q.den)) * q.den;
  const integers = p.map((q) => q.num * (common / q.den));
  const low = divisors(integers[0] ?? 0n);
  const high = divisors(integers[integers.length - 1] ?? 0n);
  const seen = new Map<string, Rational>();
  for (const a of low) {
    for (const b of high) {
      for (const s of [1n, -1n]) {
        const q = Q.rational(s * a, b);
        let value = Q.ZERO;
        for (let k = p.length - 1; k >= 0; k -= 1) value = Q.add(p[k] as Rational, Q.multiply(value, q));
        if (Q.isZero(value)) seen.set(Q.toText(q), q);
      }
    }
  }
  return [...seen.values()];
}

function divisors(n: bigint): bigint[] {
  const size = n < 0n ? -n : n;
  if (size === 0n || size > 1000000n) return [];
  const found: bigint[] = [];
  for (let d = 1n; d * d <= size; d += 1n) {
    if (size % d !== 0n) continue;
    found.push(d);
    if (d * d !== size) found.push(size / d);
  }
  return found;
}

/** a + b z^g, or a quadratic in z^g. */
function radicalZeros(c: Context, p: readonly Element[]): Zero[] {
  const present = p.flatMap((a, k) => (isZero(c, a) ? [] : [k]));
  const step = present.reduce((g, k) => Number(Q.gcd(BigInt(g), BigInt(k))), 0);
  const reduced = p.filter((_, k) => k % step === 0);
  const f = c.field;
  if (reduced.length === 2) return rootsOf(c, f.negate(f.divide(reduced[0] as Element, reduced[1] as Element)), step, 1);
  if (reduced.length === 3) {
    const [a0, a1, a2] = reduced as [Element, Element, Element];
    const half = f.divide(f.negate(a1), f.multiply(Q.rational(2), a2));
    const discriminant = f.subtract(f.multiply(half, half), f.divide(a0, a2));
    if (isZero(c, discriminant)) return rootsOf(c, half, step, 2);
    const root = f.power(discriminant, Q.HALF);
    return [...rootsOf(c, f.subtract(half, root), step, 1), ...rootsOf(c, f.add(half, root), step, 1)];
  }
  if (reduced.length === 4) {
    const numbers = f.zeros(reduced);
    if (numbers) return numbers.flatMap((z) => rootsOf(c, z.value, step, 1));
  }
  throw new Declined('no-expansion', 'The leading coefficients of the roots solve an equation of degree three or more with parameters or radicals in its coefficients; give the parameters values, assume signs under which a cubic has one real root (a > 0 in x^3 + a x + 1), or name the value of the root.');
}

/** All n-th roots of a value other than zero: the real ones first, the others by powers of exp(2 pi i/n). */
function rootsOf(c: Context, value: Element, n: number, multiplicity: number): Zero[] {
  const f = c.field;
  const isReal = isRational(value) || f.isReal(value) === 'yes';
  if (n === 1) return [{ value, multiplicity, real: isReal }];
  const exponent = Q.rational(1, n);
  const turn = (base: Element, k: number): Element => f.multiply(base, f.power(f.rational(-1), Q.rational(2 * k, n)));
  if (!isReal) return Array.from({ length: n }, (_, k) => ({ value: turn(f.power(value, exponent), k), multiplicity, real: false }));
  const sign = decideSign(c, value);
  const size = f.power(sign === -1 ? f.negate(value) : value, exponent);
  if (sign === 1 || n % 2 === 1) {
    const first = sign === -1 ? f.negate(size) : size;
    return Array.from({ length: n }, (_, k) => {
      const real = k === 0 || 2 * k === n;
      return { value: 2 * k === n ? f.negate(first) : k === 0 ? first : turn(first, k), multiplicity, real };
    });
  }
  const principal = f.multiply(size, f.power(f.rational(-1), exponent));
  return Array.from({ length: n }, (_, k) => ({ value: turn(principal, k), multiplicity, real: false }));
}
