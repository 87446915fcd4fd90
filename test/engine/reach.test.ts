/** A tolerance without an interval: how far from the point the terms asked for keep it. Distances by hand from alternating series (the first omitted term bounds the error) and closed forms. */
import { describe, expect, it } from 'vitest';
import { ask } from '../fit/engine.ts';

const question = (text: string, more: object): ReturnType<typeof ask> => ask({ ask: 'expand', language: 'latex', text, variable: 'x', budget_ms: 20_000, ...more });
const reachOf = async (text: string, more: object): Promise<readonly unknown[]> => {
  const answer = await question(text, more);
  if (!answer.ok || !('reach' in answer) || !answer.reach) throw new Error(JSON.stringify(answer).slice(0, 300));
  return answer.reach;
};

describe('terms and tolerance without an interval', () => {
  it('e^x with two terms within 1/100: e^d - 1 - d = 1/100', async () => {
    const [row] = await reachOf('e^x', { terms: 2, tolerance: 0.01 });
    expect(row).toMatchObject({ terms: 2 });
    const d = Number((row as { readonly distance: string }).distance);
    expect(Math.exp(d) - 1 - d).toBeLessThanOrEqual(0.01 + 1e-12);
    expect(Math.exp(d + 1e-6) - 1 - (d + 1e-6)).toBeGreaterThan(0.01);
  });
  it('1/(1-x) relative: |x|^3 = 1/1000 at 1/10', async () => expect(await reachOf('\\frac{1}{1-x}', { terms: 3, tolerance: '1e-3', measure: 'relative' })).toEqual([{ terms: 3, order: 'O(x³)', distance: expect.stringMatching(/^0\.(1|0999999)/) }]));
  it('at infinity the distance is that of 1/x', async () => {
    const [row] = await reachOf('\\frac{1}{x-1}', { terms: 2, point: 'inf', tolerance: 0.001 });
    // 1/(x - 1) - 1/x - 1/x^2 = 1/(x^2 (x - 1)).
    const x = 1 / Number((row as { readonly distance: string }).distance);
    expect(1 / (x * x * (x - 1))).toBeLessThanOrEqual(0.001 + 1e-12);
    expect(1 / ((x - 1e-4) ** 2 * (x - 1e-4 - 1))).toBeGreaterThan(0.001);
  });
  it('a sum without remainder keeps it everywhere', async () => expect(await reachOf('x^2+1', { terms: 4, tolerance: 0.001 })).toEqual([{ terms: 2, order: 'exact', distance: 'inf' }]));
  it('details leave it to the caller, and an interval asks for the terms needed instead', async () => {
    expect(await question('e^x', { terms: 2, tolerance: 0.01, details: ['reading'] })).not.toHaveProperty('reach');
    expect(await question('e^x', { terms: 2, tolerance: 0.01, interval: ['0', '1'] })).toMatchObject({ needed: { terms: 5 } });
  });
});
