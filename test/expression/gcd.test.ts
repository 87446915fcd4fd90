/** Greatest common divisors of long integers: against Euclid's own remainders and the properties that define a gcd. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Q } from '../../src/expression/index.ts';

function euclid(a: bigint, b: bigint): bigint {
  let x = a < 0n ? -a : a;
  let y = b < 0n ? -b : b;
  while (y > 0n) [x, y] = [y, x % y];
  return x;
}
const long = (bits: number): fc.Arbitrary<bigint> => fc.bigInt({ min: -(1n << BigInt(bits)), max: 1n << BigInt(bits) });

describe('gcd', () => {
  it.each([40, 120, 200, 600, 3000, 9000])('agrees with Euclid at %d bits', (bits) => {
    fc.assert(
      fc.property(long(bits), long(bits), long(Math.floor(bits / 3)), (a, b, g) => {
        expect(Q.gcd(a * g, b * g)).toBe(euclid(a * g, b * g));
      }),
      { numRuns: bits > 1000 ? 20 : 150 },
    );
  });
  it('handles zero, equal, divisible, sparse and neighbouring numbers', () => {
    const big = 3n ** 500n;
    expect(Q.gcd(0n, 0n)).toBe(0n);
    expect(Q.gcd(0n, -big)).toBe(big);
    expect(Q.gcd(big, big)).toBe(big);
    expect(Q.gcd(big * 7n, -big)).toBe(big);
    expect(Q.gcd(big, big + 1n)).toBe(1n);
    expect(Q.gcd(1n << 9000n, (1n << 5000n) * 3n)).toBe(1n << 5000n);
    expect(Q.gcd((1n << 4999n) - 1n, (1n << 4243n) - 1n)).toBe((1n << 1n) - 1n);
    expect(Q.gcd((1n << 6000n) - 1n, (1n << 4500n) - 1n)).toBe((1n << 1500n) - 1n);
  });
  it('takes the longest way of Euclid, Fibonacci numbers (Lame 1844), with F(m), F(n) -> F(gcd(m, n))', () => {
    const fibonacci = (n: number): bigint => {
      let [a, b] = [0n, 1n];
      for (let i = 0; i < n; i += 1) [a, b] = [b, a + b];
      return a;
    };
    expect(Q.gcd(fibonacci(9001), fibonacci(9000))).toBe(1n);
    expect(Q.gcd(fibonacci(6000), fibonacci(4500))).toBe(fibonacci(1500));
  });
});
