/** Rational exponents of kernels: whole numbers are plain numbers, so that the common case costs one addition. */
import { Declined } from '../outcome.ts';
import type { Rational } from '../expression/index.ts';

/** A whole number, or a fraction in lowest terms with `q` at least 2. */
export type Exponent = number | { readonly p: number; readonly q: number };

const gcd = (a: number, b: number): number => {
  let x = Math.abs(a);
  let y = Math.abs(b);
  while (y !== 0) [x, y] = [y, x % y];
  return x;
};
export const lcm = (a: number, b: number): number => (a / gcd(a, b)) * b;

const tooLarge = (): never => {
  throw new Declined('undecided', 'An exponent here is beyond 15 digits; use a smaller one.');
};

export function fraction(p: number, q: number): Exponent {
  if (!Number.isSafeInteger(p) || !Number.isSafeInteger(q)) return tooLarge();
  const common = gcd(p, q);
  const n = q < 0 ? -p / common : p / common;
  const d = Math.abs(q) / common;
  return d === 1 ? n + 0 : { p: n, q: d };
}

export const numeratorOf = (e: Exponent): number => (typeof e === 'number' ? e : e.p);
export const denominatorOf = (e: Exponent): number => (typeof e === 'number' ? 1 : e.q);
export const isWhole = (e: Exponent): e is number => typeof e === 'number';

export function addExponents(a: Exponent, b: Exponent): Exponent {
  if (typeof a === 'number' && typeof b === 'number') {
    const s = a + b;
    return Number.isSafeInteger(s) ? s : tooLarge();
  }
  const q = lcm(denominatorOf(a), denominatorOf(b));
  return fraction(numeratorOf(a) * (q / denominatorOf(a)) + numeratorOf(b) * (q / denominatorOf(b)), q);
}
export const negateExponent = (a: Exponent): Exponent => (typeof a === 'number' ? 0 - a : { p: -a.p, q: a.q });
export const subtractExponents = (a: Exponent, b: Exponent): Exponent => addExponents(a, negateExponent(b));
export function multiplyExponents(a: Exponent, b: Exponent): Exponent {
  if (typeof a === 'number' && typeof b === 'number') {
    const s = a * b;
    return Number.isSafeInteger(s) ? s + 0 : tooLarge();
  }
  return fraction(numeratorOf(a) * numeratorOf(b), denominatorOf(a) * denominatorOf(b));
}

/** Sign of a - b. */
export function compareExponents(a: Exponent, b: Exponent): number {
  if (typeof a === 'number' && typeof b === 'number') return a - b;
  return numeratorOf(a) * denominatorOf(b) - numeratorOf(b) * denominatorOf(a);
}

/** The largest whole multiple of `period` not above e, as a count of periods. */
export const periodsIn = (e: Exponent, period: number): number => Math.floor(numeratorOf(e) / (denominatorOf(e) * period));

export function exponentFromRational(r: Rational): Exponent {
  const p = Number(r.num);
  const q = Number(r.den);
  return fraction(p, q);
}
export const exponentToRational = (e: Exponent): Rational => ({ num: BigInt(numeratorOf(e)), den: BigInt(denominatorOf(e)) });
export const exponentKey = (e: Exponent): string => (typeof e === 'number' ? `${e}` : `${e.p}/${e.q}`);
