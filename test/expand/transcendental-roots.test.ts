/**
 * Roots of transcendental equations: all real ones where Lambert's W gives them (DLMF 4.13), one where the equation is monotone, else with the statement that there may be more.
 * Wien's displacement constant x = 5(1 - e^(-x)): 4.965114231744276 (CODATA, b = hc/(k x)). Inverse gamma function: Gamma(y) by Stirling's formula (DLMF 5.11.1).
 */
import { describe, expect, it } from 'vitest';
import { describe as describeFunction } from '../../src/functions/index.ts';
import { encloseReal, real } from '../../src/rigorous/index.ts';
import { ask } from '../fit/engine.ts';
import { plain } from './tools.ts';

const OTHERS = 'other real roots may exist';

async function roots(text: string, unknown: string, variable: string, more: object = {}): Promise<{ readonly texts: readonly string[]; readonly constants: readonly string[]; readonly open: boolean }> {
  const answer = await ask({ ask: 'expand', language: 'latex', text, unknown, variable, terms: 2, budget_ms: 20000, ...more });
  if (!answer.ok || !('text' in answer)) throw new Error(JSON.stringify(answer));
  const all = answer.branches ?? [answer];
  return { texts: all.map((b) => b.text), constants: all.map((b) => b.terms[0]?.coefficient ?? ''), open: all.every((b) => b.assumptions.some((a) => a.includes(OTHERS))) };
}

const numberOf = (text: string): number => {
  const ball = encloseReal(plain(text), new Map(), 80, describeFunction);
  if (!ball) throw new Error(text);
  return real.toDouble(ball);
};

describe('roots by Lambert W', () => {
  it('x = 5(1 - e^-x) + epsilon has two real roots', async () => {
    const found = await roots('x=5(1-e^{-x})+\\epsilon', 'x', '\\epsilon');
    expect(found.texts[0]).toBe('−ϵ/4 + 5ϵ²/128 + O(ϵ³)');
    expect(numberOf(found.constants[1] ?? '')).toBeCloseTo(4.965114231744276, 12);
    expect(found).toMatchObject({ open: false });
    expect(found.texts).toHaveLength(2);
  });
  it.each([
    // e^y = 3y at 0.6190612867359451 and 1.5121345516578425 (both put back into the equation below).
    ['e^{y}=3y+\\epsilon', 2],
    ['y e^{y}=1+\\epsilon', 1],
    ['2y+3e^{y}=1+\\epsilon', 1],
    ['(y+1)e^{2y}=3e^{y}+\\epsilon', 1],
  ])('%s: %i real', async (text, count) => {
    const found = await roots(text, 'y', '\\epsilon');
    expect(found.texts).toHaveLength(count);
    expect(found.open).toBe(false);
  });
  it('the two roots of e^y = 3y satisfy it', async () => {
    const { constants } = await roots('e^{y}=3y+\\epsilon', 'y', '\\epsilon');
    for (const c of constants) expect(Math.exp(numberOf(c)) - 3 * numberOf(c)).toBeCloseTo(0, 12);
  });
  it('a double root: e^y = e y', async () => expect((await roots('e^{y}=ey+\\epsilon', 'y', '\\epsilon')).texts).toEqual(['1 − √(2ϵ)·e^(−1/2) + O(ϵ)', '1 + √(2ϵ)·e^(−1/2) + O(ϵ)']));
});

describe('whether there may be more', () => {
  it.each(['x\\tan x=\\epsilon', '\\tan x = 2 x + \\epsilon'])('%s says so', async (text) => expect((await roots(text, 'x', '\\epsilon')).open).toBe(true));
  it.each(['x-\\sin x=\\epsilon', 'xe^{x^2}=\\epsilon', 'x+x^3+\\sinh x=\\epsilon'])('%s is monotone', async (text) => expect((await roots(text, 'x', '\\epsilon', { side: 'right' })).open).toBe(false));
  it('y ln y = x has both factors as limits', async () => expect((await roots('y\\ln y=x', 'y', 'x', { side: 'left' })).texts).toHaveLength(2));
});

describe('the inverse gamma function', () => {
  it('ln Gamma(y) = x', async () =>
    expect((await roots('\\ln\\Gamma(y)=x', 'y', 'x', { point: 'inf', near: 'inf', terms: 3 })).texts).toEqual(['x/ln(x) + x·ln(ln(x))/ln²(x) + x/ln²(x) + O(x·ln²(ln(x))/ln³(x))']));
  it('Gamma(y) = x also near the pole at 0', async () => expect((await roots('\\Gamma(y)=x', 'y', 'x', { point: 'inf', near: '0' })).texts).toEqual(['1/x − γ/x² + O(x⁻³)']));
  it('y! = x', async () => expect((await roots('y! = x', 'y', 'x', { point: 'inf', near: 'inf' })).texts[0]).toMatch(/^\(ln\(x\)\/ln\(ln\(x\)\)\)/));
});

