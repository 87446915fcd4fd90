/** Bernoulli numbers. */
import { Q, type Rational } from '../../expression/index.ts';

/** B_0, ..., B_n with B_1 = -1/2, from sum of binomial(m+1, k) B_k = 0. */
export function bernoulliNumbers(n: number): readonly Rational[] {
  const b = [Q.ONE];
  for (let m = 1; m <= n; m += 1) {
    let total = Q.ZERO;
    let binomial = 1n;
    for (let k = 0; k < m; k += 1) {
      total = Q.add(total, Q.multiply(Q.rational(binomial), b[k] ?? Q.ZERO));
      binomial = (binomial * BigInt(m + 1 - k)) / BigInt(k + 1);
    }
    b.push(Q.divide(Q.negate(total), Q.rational(m + 1)));
  }
  return b;
}

