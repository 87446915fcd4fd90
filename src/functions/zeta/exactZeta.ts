/** Exact values of zeta at integers. Sources: DLMF 25.6.1 to 25.6.4. */
import { type Expression, Q, type Rational } from '../../expression/index.ts';
import { call, lift, pi, pow, times } from '../compose.ts';
import { bernoulli, factorial } from '../sequences.ts';

/** zeta(n) for an integer n other than 1: a rational for n <= 0, a rational times pi^n for even n > 0, the call itself for odd n > 1. */
export function zetaAtInteger(n: number): Rational | Expression {
  if (n <= 0) return n === 0 ? Q.rational(-1, 2) : Q.divide(Q.negate(bernoulli(1 - n)), Q.rational(1 - n));
  if (n % 2 === 1) return call('zeta', n);
  const scale = Q.divide(Q.multiply(Q.absolute(bernoulli(n)), Q.rational(2n ** BigInt(n - 1))), Q.rational(factorial(n)));
  return times(scale, pow(pi, n));
}

/** eta(n) = sum of (-1)^(k-1) k^-n = (1 - 2^(1-n)) zeta(n); eta(1) = log 2. */
export function etaAtInteger(n: number): Rational | Expression {
  if (n === 1) return call('log', 2);
  const factor = Q.subtract(Q.ONE, Q.power(Q.rational(2), 1 - n));
  const zeta = zetaAtInteger(n);
  return 'kind' in zeta ? times(factor, zeta) : Q.multiply(factor, zeta);
}
export const zetaValueTree = (n: number): Expression => lift(zetaAtInteger(n));
