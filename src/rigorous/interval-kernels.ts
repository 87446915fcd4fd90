/**
 * What the elementary functions of double intervals are made of. At a double each function is computed by argument reduction and a Taylor polynomial in plain doubles, whose
 * whole relative error (truncation, coefficients, Horner's rule: sum of (2i+1) u |a_i x^i|, reduced argument) is below 8 u, u = 2^-53; the result is widened by 16 u.
 * Intervals follow by monotone pieces. Nothing of Math but sqrt, floor, round and abs takes part in a result.
 */
import type { Interval } from './ball.types.ts';

const RELATIVE = 2 ** -49;
export const UNIT: Interval = { lo: -1, hi: 1 };

/** y (1 +- 16 u), and a subnormal step for results near zero. */
export function widen(y: number): Interval {
  const slack = Math.abs(y) * RELATIVE + 2 ** -1074;
  return { lo: y - slack, hi: y + slack };
}

const reciprocalFactorials: number[] = [];
{
  let f = 1;
  for (let k = 0; k <= 24; k += 1) {
    if (k > 0) f *= k;
    reciprocalFactorials.push(1 / f);
  }
}
export const inverseFactorial = (k: number): number => reciprocalFactorials[k] ?? 0;

/** sum over k of x^k / (first + k step)! up to `last`, Horner's rule. */
export function exponentialTail(x: number, first: number, last: number, step: number): number {
  let sum = inverseFactorial(last);
  for (let k = last - step; k >= first; k -= step) sum = sum * x + inverseFactorial(k);
  return sum;
}

export const increasing = (f: (x: number) => Interval | null, x: Interval): Interval | null => {
  const low = f(x.lo);
  if (x.lo === x.hi) return low;
  const high = f(x.hi);
  return low === null || high === null ? null : { lo: low.lo, hi: high.hi };
};
/** The ends decide, either way round. */
export const total = (f: (x: number) => Interval, x: Interval): Interval => {
  const low = f(x.lo);
  return x.lo === x.hi ? low : { lo: low.lo, hi: f(x.hi).hi };
};
