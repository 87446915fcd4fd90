/** What a request about an equation means: a root, a solution, a solution in a small parameter, or the equation simplified in place. */
import { describe, expect, test } from 'vitest';
import { createEngine } from '../../src/engine.ts';
import type { ExpandAnswer, ExpandRequest } from '../../src/protocol.ts';

const engine = createEngine({ loadFile: () => Promise.reject(new Error('no files')) });

async function ask(text: string, fields: Partial<ExpandRequest> = {}): Promise<ExpandAnswer> {
  const answer = await engine.ask({ ask: 'expand', language: 'latex', text, budget_ms: 20000, ...fields });
  if (!answer.ok || !('terms' in answer) || !('exact' in answer)) throw new Error(`${text}: ${answer.ok ? 'another kind of answer' : answer.error.message}`);
  return answer;
}
async function refusal(text: string, fields: Partial<ExpandRequest> = {}): Promise<string> {
  const answer = await engine.ask({ ask: 'expand', language: 'latex', text, budget_ms: 20000, ...fields });
  return answer.ok ? '' : answer.error.message;
}

describe('the kinds', () => {
  const pendulum = '\\ddot\\theta + \\frac{g}{l}\\sin\\theta = 0';
  test('initial values: the solution in powers of the variable', async () => {
    const answer = await ask(`${pendulum}, \\theta(0)=\\theta_0, \\dot\\theta(0)=0`, { terms: 2 });
    expect(answer.latex).toBe('\\theta_0 - \\frac{g \\sin(\\theta_0) t^2}{2l} + O(t^4)');
    expect(answer.replaced).toBeUndefined();
  });
  test('initial values among the assumptions', async () => {
    const answer = await ask("y' = y^2", { unknown: 'y', assume: ['y(0) = 1'] });
    expect(answer.text).toBe('1 + x + x² + x³ + O(x⁴)');
  });
  test('unknown alone: free constants, named', async () => {
    const answer = await ask("y'' + x y = 0", { unknown: 'y' });
    expect(answer.assumptions).toContain('y_0 = y(0) is a free constant');
  });
  test('another variable with initial values: in that small parameter', async () => {
    const duffing = '\\ddot x + x + \\epsilon x^3 = 0, x(0)=1, \\dot x(0)=0';
    const answer = await ask(duffing, { variable: '\\epsilon', terms: 1 });
    expect(answer.text).toBe('cos(t) + O(ϵ)');
    expect((await ask(`${duffing}, \\quad \\epsilon \\ll 1`, { terms: 1 })).text).toBe('cos(t) + O(ϵ)');
  });
  test('the unknown as the variable: in place', async () => {
    const answer = await ask(pendulum, { variable: '\\theta' });
    expect(answer.latex).toBe('\\ddot{\\theta} + \\frac{g}{l} \\left(\\theta - \\frac{\\theta^3}{6} + O(\\theta^5)\\right) = 0');
    expect(answer.replaced).toEqual([{ from: '\\sin\\theta', to: '\\theta - \\frac{\\theta^3}{6} + O(\\theta^5)' }]);
    expect(answer.terms.map((t) => t.coefficient)).toEqual(['1', '-1/6']);
  });
  test('a root is still a root, a named formula still a formula, a transformation with a prime no equation of motion', async () => {
    expect((await ask('y^3 + y = x', { unknown: 'y', terms: 1 })).text).toBe('x + O(x³)');
    expect((await ask('f(x) = \\sin x', { variable: 'x' })).terms).toHaveLength(4);
    expect((await ask("x' = \\gamma(x - vt)", { variable: 'v' })).replaced).toBeUndefined();
  });
});

describe('in place', () => {
  test('relative error at an amplitude: 1 - (a - a^3/6)/sin a at a = 0.5 (hand calculator)', async () => {
    const [piece] = (await ask('\\ddot\\theta + \\frac{g}{l}\\sin\\theta = 0', { variable: '\\theta', at: '0.5' })).replaced ?? [];
    const wanted = 100 * Math.abs(1 - (0.5 - 0.125 / 6) / Math.sin(0.5));
    expect(Number(piece?.relativeError?.percent) / wanted).toBeCloseTo(1, 8);
  });
  test('its proven bound on an interval: |1 - a/sin a| is largest at the end', async () => {
    const [piece] = (await ask('\\ddot\\theta + \\frac{g}{l}\\sin\\theta = 0', { variable: '\\theta', terms: 1, interval: ['-1/2', '1/2'] })).replaced ?? [];
    const wanted = 0.5 / Math.sin(0.5) - 1;
    expect(Number(piece?.relativeError?.bound)).toBeGreaterThanOrEqual(wanted);
    expect(Number(piece?.relativeError?.bound) / wanted).toBeLessThan(1.001);
  });
  test('products of functions are one piece; others stay', async () => {
    const answer = await ask('l\\ddot\\theta - l\\dot\\phi^2\\sin\\theta\\cos\\theta + g\\sin\\theta = 0', { variable: '\\theta' });
    expect(answer.replaced?.map((r) => r.to)).toEqual(['\\theta - \\frac{2\\theta^3}{3} + O(\\theta^5)', '\\theta - \\frac{\\theta^3}{6} + O(\\theta^5)']);
    expect(answer.numeric.sum).toBe('l*ddot_theta - l*dot_phi**2*(theta - 2*theta**3/3) + g*(theta - theta**3/6)');
  });
  test('equations without derivatives, where no side is the formula of a name', async () => {
    expect((await ask('\\tan\\theta = \\frac{v^2}{r g}', { variable: '\\theta' })).latex).toBe('\\theta + \\frac{\\theta^3}{3} + O(\\theta^5) = \\frac{v^2}{r g}');
    expect((await ask('x = \\tan x', { variable: 'x' })).replaced).toHaveLength(1);
  });
  test('nothing to replace is said', async () => {
    expect(await refusal('\\ddot x + x = 0', { variable: 'x' })).toContain('no function of this quantity');
  });
});

describe('notations of initial values and systems', () => {
  test.each([
    "\\frac{d^2 y}{dx^2} = -y, y(0)=1, \\left.\\frac{dy}{dx}\\right|_{x=0}=0",
    "y'' = -y, y|_{x=0} = 1, y'|_{x=0} = 0",
    "y'' = -y, y(0)=1, \\frac{\\mathrm{d}y}{\\mathrm{d}x}\\bigg|_{x=0} = 0",
    "\\begin{cases} y'' + y = 0 \\\\ y(0)=1 \\\\ y'(0)=0 \\end{cases}",
  ])('%s', async (text) => {
    expect((await ask(text, { terms: 2 })).text).toBe('1 − x²/2 + O(x⁴)');
  });
  test.each(["\\begin{cases} \\dot x = y \\\\ \\dot y = -x \\\\ x(0)=1, y(0)=0\\end{cases}", '\\left\\{\\begin{aligned} \\dot x &= y, & x(0)&=1 \\\\ \\dot y &= -x, & y(0)&=0\\end{aligned}\\right.'])('%s', async (text) => {
    const answer = await ask(text, { terms: 2 });
    expect(answer.text).toBe('1 − t²/2 + O(t⁴)');
    expect(answer.components?.[1]?.expansion.text).toBe('−t + t³/6 + O(t⁵)');
  });
});
