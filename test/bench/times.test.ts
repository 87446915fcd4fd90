import { describe, expect, it } from 'vitest';
import { CASES } from './cases.ts';
import { benchEngine, medianOf } from './measure.ts';

describe('engine time, warm', () => {
  it.each(CASES.map((c) => [c.name, c] as const))('%s within five times its aim (median of 20)', async (_, timed) => {
    const { median, ok } = await medianOf(await benchEngine(), timed);
    expect(ok).toBe(true);
    expect(median).toBeLessThan(5 * timed.aim);
  });
});
