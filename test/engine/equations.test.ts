/** Which side of an equation is expanded, or both in place. Identities: DLMF 10.49.3 (spherical Bessel function), 4.35.9. */
import { describe, expect, it } from 'vitest';
import { ask } from '../fit/engine.ts';

async function answered(text: string, variable = 'x'): Promise<{ readonly text: string; readonly replaced: boolean }> {
  const answer = await ask({ ask: 'expand', language: 'latex', text, variable, terms: 2 });
  if (!answer.ok || !('text' in answer)) throw new Error(JSON.stringify(answer));
  return { text: answer.text, replaced: answer.replaced !== undefined };
}

describe('equations without derivatives', () => {
  it.each([
    ['\\mathsf{j}_1(x)=\\frac{\\sin x}{x^{2}}-\\frac{\\cos x}{x}', 'x/3 − x³/30 + O(x⁵)'],
    ['\\cosh 2x = 2\\cosh^2 x - 1', '1 + 2x² + O(x⁴)'],
    ['f(x) = \\frac{\\sin x}{x}', '1 − x²/6 + O(x⁴)'],
  ])('two ways to write one function: %s', async (text, expected) => expect(await answered(text)).toEqual({ text: expected, replaced: false }));
  it.each([
    ["y''(t+h)", 'h', "y″(t) + y‴(t)·h + O(h²)"],
    ["\\frac{f(x+h)-f(x-h)}{2h} = f'(x)", 'h', 'f′(x) + f‴(x)·h²/6 + O(h⁴)'],
    ["f'(x) \\approx \\frac{f(x+h)-f(x)}{h}", 'h', 'f′(x) + f″(x)·h/2 + O(h²)'],
    ["y(t+\\tau) = y(t) + \\tau y'(t)", '\\tau', 'y(t) + y′(t)·τ + O(τ²)'],
  ])('a difference formula: %s', async (text, variable, expected) => expect(await answered(text, variable)).toEqual({ text: expected, replaced: false }));
  it('the unknown that the text names before its equation is solved for', async () => expect(await answered('y:\\ \\tan y = 2 \\tan x')).toEqual({ text: '2x − 2x³ + O(x⁵)', replaced: false }));
  it.each(['y < x + y^2', 'y \\ge x + y^2', 'y \\ll x'])('an inequality has no root: %s', async (text) => {
    const answer = await ask({ ask: 'expand', language: 'latex', text, variable: 'x', unknown: 'y' });
    expect(answer.ok ? '' : answer.error.code).toBe('bad-request');
  });
  it.each(['\\tan x = 2 \\sin x', '\\sin x - x\\cos x = 0', '\\tan x = \\frac{v^2}{r g}'])('an equation to be simplified in place: %s', async (text) => expect((await answered(text)).replaced).toBe(true));
});
