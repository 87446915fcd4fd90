import { describe, expect, it } from 'vitest';
import { ask, fitAnswer } from './engine.ts';

/** Runs emitted JavaScript; integers in, integers out. */
function compiled(code: string): (x: number) => number {
  const name = /function (\w+)\(x\)/.exec(code)?.[1] ?? '';
  return new Function(`${code}\nreturn ${name};`)() as (x: number) => number;
}

describe('fixed point', () => {
  it.each([
    { text: 'sin(x)', f: Math.sin, interval: ['-1', '1'], bits: 12, format: 'fixed:2.12', degree: 5 },
    { text: 'exp(x)', f: Math.exp, interval: ['0', '1'], bits: 14, format: 'fixed:2.14', degree: 4 },
    { text: 'cos(x)', f: Math.cos, interval: ['-3/2', '3/2'], bits: 16, format: 'fixed:3.16', degree: 6 },
    { text: 'sqrt(x)', f: Math.sqrt, interval: ['1/4', '1'], bits: 15, format: 'fixed:4.15', degree: 3 },
  ])('$text in $format: the bound holds for every number and is not far above the worst', async ({ text, f, interval, bits, format, degree }) => {
    const answer = await fitAnswer({ text, interval, degree, format, emit: 'javascript' });
    const run = compiled(answer.code);
    const unit = 2 ** -bits;
    const end = (t: string): number => {
      const [a = '0', b = '1'] = t.split('/');
      return Number(a) / Number(b);
    };
    let worst = 0;
    for (let x = Math.ceil(end(interval[0] ?? '') / unit); x <= Math.floor(end(interval[1] ?? '') / unit); x += 1) worst = Math.max(worst, Math.abs(run(x) * unit - f(x * unit)));
    expect(worst).toBeLessThanOrEqual(Number(answer.bound.total));
    expect(Number(answer.bound.total) / worst).toBeLessThan(2.5);
  });
  it.each([
    [{ text: 'exp(x)', interval: ['0', '1'], degree: 4, format: 'fixed:1.14' }, /overflow/],
    [{ text: 'exp(x)', interval: ['0', '9'], degree: 4, format: 'fixed:3.12' }, /does not fit/],
    [{ text: 'sin(x)', interval: ['0', '1'], degree: 4, format: 'fixed:8.40' }, /bits/],
    [{ text: 'sin(x)', interval: ['0', '1'], degree: 4, format: 'fixed:4.20', measure: 'relative' }, /absolute/],
    [{ text: 'sin(x)', interval: ['0', '1'], degree: 4, format: 'fixed:4.20', emit: 'glsl' }, /GLSL/],
  ])('declines %j', async (request, message) => {
    const answer = await ask(request);
    expect(answer.ok ? '' : answer.error.message).toMatch(message);
  });
});
