/** Reconstructions whose rounding differs along the interval: the bound stays near the worst error seen (test/exhaustive/reductions.ts says it for every float and function). */
import { describe, expect, it } from 'vitest';
import { has, hasFma } from '../exhaustive/compile.ts';
import { overFloats } from '../exhaustive/everyFloat.ts';
import { fitOf, runOf } from '../exhaustive/programs.ts';
import { REDUCED_CASES } from '../exhaustive/reducedCases.ts';
import { evaluationError } from '../../src/fit/evaluationError.ts';
import { formatByName } from '../../src/fit/index.ts';
import { build, Q } from '../../src/expression/index.ts';

const TIGHT = REDUCED_CASES.filter((c) => (c.text === 'log(x)' && c.measure === 'ulp') || (c.text === 'sin(x)' && c.measure === 'relative') || (c.text === 'atan(x)' && c.measure !== 'absolute') || (/asin|acos/.test(c.text) && c.measure === 'ulp'));

describe('bounds by range of the argument', () => {
  it.skipIf(!has('gcc')).each(TIGHT)('$text on [$low, $high] in $measure', (c) => {
    const found = fitOf(c);
    const { worst, floats } = overFloats(runOf(c, found), 20_011, hasFma());
    expect(floats).toBeGreaterThan(10_000);
    const bound = Q.toDouble(found.error.total);
    expect(worst).toBeLessThanOrEqual(bound);
    expect(bound / worst).toBeLessThan(2.5);
  });
});

describe('sums that need no rounding', () => {
  const binary32 = formatByName('binary32');
  if (binary32?.kind !== 'float') throw new Error('format');
  const arithmetic = { operations: binary32, result: binary32 };
  const errorOf = (constant: number, lo: number, hi: number): number => evaluationError({ steps: [], result: build.sum(build.symbol('x'), build.number(Q.fromDouble(constant))) }, 'x', { lo, hi }, arithmetic).absolute;
  it('where both are at least 2^e and the sum is below 2^(e+1)', () => {
    expect(errorOf(-1, 0.5, 1.75)).toBe(0);
    expect(errorOf(-1.25, 0.75, 0.8)).toBe(0);
  });
  it('not where the smaller one has lower digits', () => {
    expect(errorOf(-1, 0.25, 0.3)).toBeGreaterThan(0);
    expect(errorOf(1, 0.5, 1)).toBeGreaterThan(0);
    expect(errorOf(-1, 0, 0.5)).toBeGreaterThan(0);
  });
});
