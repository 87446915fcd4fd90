import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { nearestPlane, reduceBasis } from '../../src/fit/lattice.ts';

const dot = (a: readonly bigint[], b: readonly bigint[]): bigint => a.reduce((s, x, i) => s + x * (b[i] ?? 0n), 0n);
function determinant(m: readonly (readonly bigint[])[]): bigint {
  if (m.length === 1) return m[0]?.[0] ?? 0n;
  return (m[0] ?? []).reduce((sum, x, j) => sum + (j % 2 === 0 ? x : -x) * determinant(m.slice(1).map((r) => r.filter((_, k) => k !== j))), 0n);
}
const magnitude = (x: bigint): bigint => (x < 0n ? -x : x);
const basis = fc.array(fc.array(fc.bigInt(-1000n, 1000n), { minLength: 4, maxLength: 4 }), { minLength: 4, maxLength: 4 }).filter((b) => determinant(b) !== 0n);

describe('lattice reduction', () => {
  it('keeps the lattice volume, and its first vector obeys the LLL bound |b1|^n <= 2^(n(n-1)/4) det (Lenstra, Lenstra, Lovász 1982, from memory)', () => {
    fc.assert(
      fc.property(basis, (b) => {
        const reduced = reduceBasis(b);
        const volume = magnitude(determinant(b));
        expect(magnitude(determinant(reduced))).toBe(volume);
        const first = reduced[0] ?? [];
        // n = 4, squared: |b1|^8 <= 2^6 det^2.
        expect(dot(first, first) ** 4n <= 64n * volume * volume).toBe(true);
      }),
    );
  });
  it('finds the short vector of a knapsack basis', () => {
    const reduced = reduceBasis([
      [1n, 0n, 0n, 1345n],
      [0n, 1n, 0n, 35n],
      [0n, 0n, 1n, 154n],
    ]);
    expect(reduced.every((v) => dot(v, v) < 400n)).toBe(true);
  });
  it('finds lattice vectors as near as half the sum of the orthogonalised basis (Babai 1986, from memory)', () => {
    fc.assert(
      fc.property(basis, fc.array(fc.bigInt(-100000n, 100000n), { minLength: 4, maxLength: 4 }), (b, target) => {
        const reduced = reduceBasis(b);
        const near = nearestPlane(reduced, target);
        const rest = target.map((x, i) => x - (near[i] ?? 0n));
        const bound = reduced.reduce((s, v) => s + dot(v, v), 0n);
        expect(4n * dot(rest, rest) <= bound).toBe(true);
      }),
    );
  });
});
