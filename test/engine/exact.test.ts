/** `exact` is true only where the sum is the function along the whole side. Elementary identities; Legendre and Chebyshev polynomials: DLMF 18.5 (tables of coefficients). */
import { describe, expect, it } from 'vitest';
import { ask } from '../fit/engine.ts';

async function answered(text: string, more: { readonly point?: string; readonly variable?: string; readonly terms?: number; readonly assume?: readonly string[] } = {}): Promise<{ readonly text: string; readonly exact: boolean; readonly near: boolean }> {
  const answer = await ask({ ask: 'expand', language: 'latex', text, variable: 'x', terms: 8, budget_ms: 20000, ...more });
  if (!answer.ok || !('text' in answer)) throw new Error(JSON.stringify(answer));
  return { text: answer.text, exact: answer.exact, near: answer.assumptions.some((a) => a.includes('further away it may differ')) };
}

describe('a sum without remainder', () => {
  it.each([
    ['|x-1|', '3', '2 + (x − 3)'],
    ['\\arcsin(\\sin x)', '0', 'x'],
    ['\\sqrt{x^2+2x+1}', '0', '1 + x'],
    ['\\sqrt{x^2-2x+1}', '0', '1 − x'],
    ['\\ln((x-1)^2)-2\\ln|x-1|', '3', '0'],
  ])('that holds near the point only says so: %s at %s', async (text, point, sum) => expect(await answered(text, { point })).toEqual({ text: sum, exact: false, near: true }));
  it.each([
    ['|x|', '0', 'x'],
    ['\\sqrt{x^2}', '0', 'x'],
    ['\\ln(x^2)', '0', '2ln(|x|)'],
    ['\\ln(e^x)', '1', '1 + (x − 1)'],
    ['\\max(x,0)', '0', 'x'],
    ['\\tan(\\arctan x)', '0', 'x'],
    ['\\int_0^x t^2\\,dt', '0', 'x³/3'],
    ['T_5(x)', '0', '5x − 20x³ + 16x⁵'],
    ['P_4(x)', '0', '3/8 − 15x²/4 + 35x⁴/8'],
    ['\\prod_{k=1}^{3}(1+kx)', '0', '1 + 6x + 11x² + 6x³'],
    ['\\frac{d}{dx}x^5', '1', '5 + 20(x − 1) + 30(x − 1)² + 20(x − 1)³ + 5(x − 1)⁴'],
    ['|x-1|', 'inf', 'x − 1'],
  ])('that is the function all along the side is exact: %s at %s', async (text, point, sum) => expect(await answered(text, { point })).toEqual({ text: sum, exact: true, near: false }));
});

describe('gamma functions whose arguments differ by whole numbers (DLMF 5.5.1) cancel', () => {
  it.each([
    ['\\frac{\\Gamma(x+1)}{\\Gamma(x)}', '0', 'x'],
    ['\\Gamma(x+1)-x\\Gamma(x)', 'inf', '0'],
    ['\\binom{x}{2}', '0', '−x/2 + x²/2'],
    ['\\binom{x}{x-2}', 'inf', 'x²/2 − x/2'],
    ['\\frac{(x+2)!}{x!}', 'inf', 'x² + 3x + 2'],
    ['(x)_4', '0', '6x + 11x² + 6x³ + x⁴'],
    ['(\\Gamma(a+1)-a\\Gamma(a))x+x^2', '0', 'x²'],
  ])('%s at %s', async (text, point, sum) => expect(await answered(text, { point })).toMatchObject({ text: sum, exact: true }));
});

describe('roots of perfect powers end', () => {
  it.each([
    ['\\sqrt{(1-x)^2}', 'inf', 'x − 1'],
    ['\\sqrt{x^2+2ax+a^2}-x', 'inf', 'a'],
    ['\\sqrt[3]{x^3-3x^2+3x-1}', '-inf', 'x − 1'],
  ])('%s at %s', async (text, point, sum) => expect(await answered(text, { point })).toMatchObject({ text: sum, exact: true }));
});
