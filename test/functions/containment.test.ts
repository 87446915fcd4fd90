/** Enclosures against MPFR (gmp-wasm) at random points, and against values stored with their origin in referenceValues.ts. */
import { describe, expect, it } from 'vitest';
import { Q } from '../../src/expression/index.ts';
import { describe as description } from '../../src/functions/index.ts';
import { type Ball, real } from '../../src/rigorous/index.ts';
import { judge, type UnaryName } from '../rigorous/mpfr.ts';
import { REFERENCE_VALUES } from './referenceValues.ts';
import { ball, functionAt, rational } from './support.ts';

/** Park & Miller's generator: the points are the same on every run. */
function generator(seed: number): () => number {
  let state = seed;
  return () => (state = (state * 48271) % 2147483647) / 2147483647;
}

interface Case {
  readonly id: string;
  readonly fixed?: readonly number[];
  readonly mpfr: UnaryName;
  readonly points: (u: number) => number;
}
const CASES: readonly Case[] = [
  { id: 'gamma', mpfr: 'gamma', points: (u) => 60 * u - 20 },
  { id: 'gamma', mpfr: 'gamma', points: (u) => 10 ** (-9 * u) },
  { id: 'logGamma', mpfr: 'lngamma', points: (u) => 10 ** (8 * u - 4) },
  { id: 'digamma', mpfr: 'digamma', points: (u) => 80 * u - 20 },
  { id: 'zeta', mpfr: 'zeta', points: (u) => 60 * u - 25 },
  { id: 'erf', mpfr: 'erf', points: (u) => 16 * u - 8 },
  { id: 'erfc', mpfr: 'erfc', points: (u) => 40 * u - 8 },
  { id: 'expIntegralEi', mpfr: 'eint', points: (u) => 10 ** (5 * u - 3) },
  { id: 'besselJ', fixed: [0], mpfr: 'j0', points: (u) => 120 * u },
  { id: 'besselJ', fixed: [1], mpfr: 'j1', points: (u) => 120 * u - 60 },
  { id: 'besselY', fixed: [0], mpfr: 'y0', points: (u) => 90 * u + 0.001 },
  { id: 'besselY', fixed: [1], mpfr: 'y1', points: (u) => 90 * u + 0.001 },
  { id: 'airyAi', mpfr: 'ai', points: (u) => 40 * u - 20 },
  { id: 'polylog', fixed: [2], mpfr: 'li2', points: (u) => 21 * u - 20 },
];

describe('enclosures contain the truth', () => {
  it('holds for MPFR at random points, narrow and wide', async () => {
    const truth = await judge(160);
    const random = generator(20261201);
    for (const { id, fixed = [], mpfr, points } of CASES) {
      for (let i = 0; i < 24; i++) {
        const x = real.fromDouble(points(random()));
        const wide = i % 3 === 0 ? real.withRadius(x, { mid: 1n, rad: 0n, exp: real.exponentOf(x) - 4 - (i % 20) }) : x;
        const args = [...fixed.map((n) => real.fromInteger(n)), wide];
        const precision = i % 2 === 0 ? 64 : 110;
        const value = description(id)?.encloseReal?.(args, precision) ?? null;
        const reference = truth(mpfr, x);
        const label = `${id} at ${real.toDouble(x)}, radius ${real.toDouble(real.radius(wide))}`;
        if (wide.rad === 0n) {
          if (!reference) continue;
          expect(value, label).not.toBeNull();
          if (value) expect(real.relativeAccuracy(value), `accuracy of ${label}`).toBeGreaterThan(precision - 4);
        }
        if (!value || !reference) continue;
        expect(real.overlaps(value, reference), label).toBe(true);
        if (wide.rad === 0n) continue;
        for (const end of [real.lowerEnd(wide), real.upperEnd(wide)]) {
          const there = truth(mpfr, end);
          if (there) expect(real.overlaps(value, there), `end of ${label}`).toBe(true);
        }
      }
    }
  });

  it('holds for stored values, to the precision asked for', () => {
    for (const [id, args, text] of REFERENCE_VALUES) {
      // Arguments such as 7/3 are balls themselves: 280 bits leave what cancels to spare.
      const value = functionAt(id, args.map(rational), 280);
      const label = `${id}(${args.join(', ')})`;
      expect(value, label).not.toBeNull();
      if (!value) continue;
      const stored = ball(rational(text), 220);
      // 60 printed digits.
      const reference = real.withRadius(stored, real.scaleByPowerOfTwo(real.absoluteUpper(stored), -195));
      expect(real.overlaps(value, reference), label).toBe(true);
      expect(real.relativeAccuracy(value), `accuracy of ${label}`).toBeGreaterThan(140);
    }
  });

  it('widens with the argument and never past a pole', () => {
    const at = (id: string, low: string, high: string, ...fixed: readonly string[]): Ball | null => {
      const x = real.fromEnds(ball(rational(low), 80), ball(rational(high), 80), 80);
      return description(id)?.encloseReal?.([...fixed.map((f) => ball(rational(f), 80)), x], 64) ?? null;
    };
    expect(at('gamma', '-1/10', '1/10')).toBeNull();
    expect(at('digamma', '-21/10', '-19/10')).toBeNull();
    expect(at('zeta', '9/10', '11/10')).toBeNull();
    expect(at('besselK', '-1', '1', '0')).toBeNull();
    expect(at('besselK', '0', '0', '0')).toBeNull();
    expect(at('besselY', '0', '0', '2')).toBeNull();
    expect(at('ellipticKParameter', '9/10', '11/10')).toBeNull();
    expect(at('lambertW', '-1/2', '0', '0')).toBeNull();
    expect(at('expIntegralEi', '-1', '1')).toBeNull();
    const onInterval = at('gamma', '1', '2');
    // The minimum 0.8856 of Gamma on [1, 2]: DLMF 5.4.20.
    expect(onInterval && real.contains(onInterval, Q.rational(8857, 10000)) && real.contains(onInterval, Q.ONE)).toBe(true);
  });
});
