/** Fixed-point reals for searching: a real x is the integer nearest x * 2^bits. Nothing computed with them is a proof. */
import { Q, type Rational } from '../expression/index.ts';
import type { Ball } from '../rigorous/index.ts';

export type Fixed = bigint;

export const toFixed = (q: Rational, bits: number): Fixed => (q.num << BigInt(bits)) / q.den;
export const fromFixed = (x: Fixed, bits: number): Rational => Q.rational(x, 1n << BigInt(bits));
export const ballToFixed = (x: Ball, bits: number): Fixed => {
  const shift = x.exp + bits;
  return shift >= 0 ? x.mid << BigInt(shift) : x.mid >> BigInt(-shift);
};
export const magnitude = (x: Fixed): Fixed => (x < 0n ? -x : x);

/** sum c_k x^(powers[k]) by Horner's rule over the gaps of the ascending exponents. */
export function evaluateFixed(coefficients: readonly Fixed[], powers: readonly number[], x: Fixed, bits: number): Fixed {
  const shift = BigInt(bits);
  let value = 0n;
  for (let k = powers.length - 1; k >= 0; k -= 1) {
    value += coefficients[k] ?? 0n;
    const gap = (powers[k] ?? 0) - (k > 0 ? (powers[k - 1] ?? 0) : 0);
    for (let i = 0; i < gap; i += 1) value = (value * x) >> shift;
  }
  return value;
}
