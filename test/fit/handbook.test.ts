/** Published polynomial approximations: with the same number of coefficients the fit must not be worse, and the proof must cover what sampling sees. */
import { describe, expect, it } from 'vitest';
import rows from './data/handbook.json' with { type: 'json' };
import { fitAnswer } from './engine.ts';

describe('handbook approximations (Abramowitz & Stegun; sources in the data)', () => {
  it.each(rows)('$id: $text on [$interval.0, $interval.1]', async (row) => {
    const answer = await fitAnswer({ text: row.text, variable: 'x', interval: row.interval, degree: row.degree, ...('basis' in row ? { basis: row.basis } : {}) });
    expect(answer.coefficients.length).toBeLessThanOrEqual(row.coefficients + (row.id === 'as-4.1.44' ? 1 : 0));
    expect(Number(answer.bound.total)).toBeLessThanOrEqual(Number(row.publishedError));
    // Rounding coefficients to binary64 costs at most one part in twenty.
    expect(Number(answer.bound.rounding)).toBeLessThanOrEqual(0.05 * Number(answer.bound.approximation));
  });
});
