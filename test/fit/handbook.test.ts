/**
 * Published approximations (Abramowitz & Stegun; sources in the data). Of those that are polynomials in their variable, or in a quotient that stands for it: as many coefficients give an
 * error no larger than the published one (measured with mpmath 1.3.0) and within 1 % of the best possible; rounding costs at most 5 % in binary64 and a factor of 2 in binary32.
 * `bestError` was levelled by an exchange of its own in mpmath at 40 digits. Rows of Bessel functions out to x = 100 take some ten seconds each and run with ALL_ROWS=1.
 */
import { describe, expect, it } from 'vitest';
import data from './data/handbook.json' with { type: 'json' };
import { fitAnswer } from './engine.ts';

interface Row {
  readonly id: string;
  readonly source: string;
  /** What the form is instead. */
  readonly notPolynomial?: string;
  readonly text?: string;
  readonly variable?: string;
  readonly degree?: number;
  readonly basis?: string;
  /** Leading coefficients that the form keeps exact. */
  readonly exact?: number;
  readonly interval?: readonly string[];
  readonly coefficients?: number;
  readonly publishedError?: string;
  readonly bestError?: string;
  /** max |f|, about. */
  readonly size?: number;
  readonly substitution?: string;
  readonly slow?: boolean;
}
const rows: readonly Row[] = data;
const polynomials = rows.filter((r) => r.notPolynomial === undefined);
const all = process.env['ALL_ROWS'] === '1';
const requestOf = ({ text, variable, interval, degree, basis, exact }: Row): Readonly<Record<string, unknown>> => ({ text, variable, interval, degree, ...(basis ? { basis } : {}), ...(exact ? { exact } : {}) });

describe('handbook approximations', () => {
  it('are polynomials, or the data say what else', () => {
    expect(rows).toHaveLength(36);
    expect(polynomials).toHaveLength(23);
  });
  it.each(polynomials.filter((r) => all || !r.slow))('$id: $text on [$interval.0, $interval.1]', async (row) => {
    const { coefficients, bound } = await fitAnswer(requestOf(row));
    expect(coefficients.filter((c) => Number(c.value) !== 0).length).toBeLessThanOrEqual(row.coefficients ?? 0);
    const [best, approximation] = [Number(row.bestError), Number(bound.approximation)];
    expect(Number(bound.total)).toBeLessThanOrEqual(Number(row.publishedError));
    expect(approximation).toBeGreaterThan(best * 0.999);
    expect(approximation).toBeLessThan(best * 1.01);
    expect(approximation + Number(bound.rounding)).toBeLessThan(best * 1.05);
  });
  it.each(polynomials.filter((r) => !r.slow && Number(r.bestError) >= 16 * 2 ** -24 * (r.size ?? 1)))('$id in binary32', async (row) => {
    const { bound } = await fitAnswer({ ...requestOf(row), format: 'binary32' });
    expect(Number(bound.approximation) + Number(bound.rounding)).toBeLessThan(Number(row.bestError) * 2);
  });
});
