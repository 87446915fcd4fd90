/**
 * Bounds, terms needed and values where the variable is a quantity such as v/c or theta(t): those of the function of one symbol.
 * Lagrange's form of the remainder of the sine (DLMF 1.4.37): x^5/120 (1 - x^2/42) <= |rest| <= x^5/120; Bernoulli numbers in the expansion of 1/(e^x - 1) (DLMF 24.2.1).
 */
import { describe, expect, it } from 'vitest';
import { ask } from '../fit/engine.ts';

async function answered(text: string, variable: string, more: object): Promise<Extract<Awaited<ReturnType<typeof ask>>, { ok: true }> & { text: string }> {
  const answer = await ask({ ask: 'expand', language: 'latex', text, variable, terms: 2, budget_ms: 20000, ...more });
  if (!answer.ok || !('text' in answer)) throw new Error(JSON.stringify(answer));
  return answer as never;
}

describe('a quantity made of symbols', () => {
  it.each([
    ['\\sin\\frac{v}{c}', '\\frac{v}{c}', 'v/c − v³/(6c³) + O(v⁵/c⁵)'],
    ['\\sin\\theta(t)', '\\theta(t)', 'θ(t) − θ(t)³/6 + O(θ(t)⁵)'],
  ])('%s has the bound of the sine', async (text, variable, shown) => {
    const answer = await answered(text, variable, { interval: ['-1/2', '1/2'], tolerance: '1e-5', at: '1/10' });
    expect(answer).toMatchObject({ text: shown, needed: { terms: 3, minimal: true } });
    const { bound, at } = answer as unknown as { bound: { value: string; lower: string }; at: { function: string } };
    const first = 0.5 ** 5 / 120;
    expect(Number(bound.value)).toBeLessThan(first * 1.0001);
    expect(Number(bound.lower)).toBeGreaterThan(first * (1 - 0.25 / 42) * 0.9999);
    expect(Number(at.function)).toBeCloseTo(Math.sin(0.1), 10);
  });
  it('Planck: 1/(e^x - 1) at x = 1/2', async () => {
    const answer = (await answered('\\frac{1}{\\exp\\left(\\frac{\\hbar\\omega}{k_B T}\\right)-1}', '\\frac{\\hbar\\omega}{k_B T}', { terms: 3, at: '1/2' })) as unknown as { at: { sum: string; function: string } };
    expect(Number(answer.at.sum)).toBeCloseTo(2 - 1 / 2 + 1 / 24, 9);
    expect(Number(answer.at.function)).toBeCloseTo(1 / Math.expm1(0.5), 9);
  });
  it('a pendulum keeps its parameters as a factor', async () => {
    const answer = await answered('mgl(1-\\cos\\theta(t))', '\\theta(t)', { interval: ['-1/2', '1/2'] });
    expect(answer).toMatchObject({ text: 'mgl·θ(t)²/2 − mgl·θ(t)⁴/24 + O(θ(t)⁶)', bound: { factor: 'abs(m)*(abs(g)*abs(l))' } });
  });
  it('the general term is in the quantity', async () => expect((await answered('\\ln\\phi(x)', '\\phi(x)', { point: '1' })) as object).toMatchObject({ general: '(-1)^k*(phi(x) - 1)^(k + 1)/(k + 1)' }));
  it('a factorial set equal', async () => expect((await answered('y!=x', 'x', { unknown: 'y', point: 'inf', near: 'inf' })).text).toMatch(/^\(ln\(x\)\/ln\(ln\(x\)\)\)/));
});
