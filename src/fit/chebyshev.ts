/** A fixed-point polynomial that stands for a smooth function while an approximation is searched: cheap to evaluate, close to all working bits. No proof rests on it. */
import type { Rational } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import { real } from '../rigorous/index.ts';
import { ballToFixed, type Fixed, toFixed } from './fixed.ts';

export interface ChebyshevProxy {
  readonly evaluate: (x: Fixed) => Fixed;
  readonly terms: number;
}

const FIRST = 24;
const MOST = 400;

/** cos(pi k / n) for k = 0..2n-1 as fixed-point numbers. */
function cosines(n: number, bits: number): Fixed[] {
  const pi = real.pi(bits + 16);
  const table: Fixed[] = [];
  for (let k = 0; k < 2 * n; k += 1) {
    const angle = real.divide(real.multiply(pi, real.fromInteger(k), bits + 16), real.fromInteger(n), bits + 16);
    const value = angle ? real.cos(angle, bits + 16) : real.ONE;
    table.push(ballToFixed(value, bits));
  }
  return table;
}

/**
 * Interpolates at the first-kind points until the last coefficients are below 2^-accuracy of the largest; null where more than 400 terms would be needed
 * (a singularity on or very near the interval). Cost: n evaluations and n^2 products.
 */
export function chebyshevProxy(f: (x: Fixed) => Fixed, low: Rational, high: Rational, bits: number, accuracy: number, budget: Budget): ChebyshevProxy | null {
  const [a, b] = [toFixed(low, bits), toFixed(high, bits)];
  const shift = BigInt(bits);
  const middle = (a + b) >> 1n;
  const half = (b - a) >> 1n;
  if (half === 0n) return null;
  for (let n = FIRST; n <= MOST; n = Math.ceil(n * 1.6)) {
    budget.check();
    // Points cos(pi (2j + 1) / (2n)), coefficients by the cosine sum over them.
    const table = cosines(2 * n, bits);
    const at = (k: number): Fixed => table[k % (4 * n)] as Fixed;
    const values = Array.from({ length: n }, (_, j) => f(middle + ((half * at(2 * j + 1)) >> shift)));
    const coefficients: Fixed[] = [];
    let largest = 0n;
    for (let k = 0; k < n; k += 1) {
      let sum = 0n;
      for (let j = 0; j < n; j += 1) sum += (values[j] as Fixed) * at(k * (2 * j + 1));
      const c = ((sum >> shift) * (k === 0 ? 1n : 2n)) / BigInt(n);
      coefficients.push(c);
      if (c > largest) largest = c;
      if (-c > largest) largest = -c;
    }
    budget.check();
    const negligible = largest >> BigInt(accuracy);
    const small = (c: Fixed | undefined): boolean => c === undefined || (c <= negligible && -c <= negligible);
    let end = n;
    while (end > 1 && small(coefficients[end - 1])) end -= 1;
    if (end <= n - 4) {
      const kept = coefficients.slice(0, end);
      return { terms: end, evaluate: (x) => clenshaw(kept, (((x - middle) << shift) / half) as Fixed, shift) };
    }
  }
  return null;
}

function clenshaw(c: readonly Fixed[], t: Fixed, shift: bigint): Fixed {
  let [b1, b2] = [0n, 0n];
  for (let k = c.length - 1; k >= 1; k -= 1) [b1, b2] = [(c[k] as Fixed) + ((2n * t * b1) >> shift) - b2, b1];
  return (c[0] as Fixed) + ((t * b1) >> shift) - b2;
}
