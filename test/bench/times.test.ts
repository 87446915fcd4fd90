import { describe, expect, it } from 'vitest';
import { processorTime } from '../setup.ts';
import { CASES } from './cases.ts';
import { has } from '../exhaustive/compile.ts';
import { emittedSpeeds } from './emitted.ts';
import { benchEngine, medianOf } from './measure.ts';

describe('engine time, warm', () => {
  it.each(CASES.map((c) => [c.name, c] as const))('%s within five times its aim (median of 20)', async (_, timed) => {
    const { median, ok } = await medianOf(await benchEngine(), timed, 20, processorTime);
    expect(ok).toBe(true);
    expect(median).toBeLessThan(5 * timed.aim);
  });
});

describe('estimated speed of emitted code', () => {
  it.skipIf(!has('gcc'))('within a factor of ten of what is measured', async () => {
    const rows = await emittedSpeeds(2);
    expect(rows).toHaveLength(4);
    for (const { estimated, measured } of rows) {
      expect(measured).toBeGreaterThan(estimated / 10);
      expect(measured).toBeLessThan(estimated * 10);
    }
  });
});
