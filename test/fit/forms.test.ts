import { describe, expect, it } from 'vitest';
import { fitAnswer } from './engine.ts';

/** Emitted JavaScript as a function of doubles. */
function compiled(code: string): (x: number) => number {
  const name = /function (\w+)\(x\)/.exec(code)?.[1] ?? '';
  return new Function(`${code}\nreturn ${name};`)() as (x: number) => number;
}

function worstOf(code: string, f: (x: number) => number, low: number, high: number, relative: boolean): number {
  const run = compiled(code);
  let worst = 0;
  for (let k = 0; k <= 20_000; k += 1) {
    const x = low + ((high - low) * k) / 20_000;
    const error = Math.abs(run(x) - f(x));
    if (f(x) !== 0) worst = Math.max(worst, relative ? error / Math.abs(f(x)) : error);
  }
  return worst;
}

describe('rational forms', () => {
  it.each([
    { text: 'tan(x)', f: Math.tan, interval: ['-1', '1'], degree: 7, measure: 'relative' },
    { text: 'exp(x)', f: Math.exp, interval: ['-1', '1'], degree: 5, measure: 'absolute' },
    { text: 'atan(x)', f: Math.atan, interval: ['-1', '1'], degree: 9, measure: 'relative' },
    { text: 'log(1+x)', f: Math.log1p, interval: ['0', '1'], degree: 6, measure: 'relative' },
    { text: 'sqrt(x)', f: Math.sqrt, interval: ['1/4', '1'], degree: 4, measure: 'relative' },
  ])('$text: bound holds, is tight, and beats the polynomial of as many coefficients', async ({ text, f, interval, degree, measure }) => {
    const shared = { text, interval, degree, measure, emit: 'javascript' };
    const answer = await fitAnswer({ ...shared, method: 'rational' });
    const [low = 0, high = 0] = interval.map((t) => t.split('/').map(Number).reduce((a, b) => a / b));
    const worst = worstOf(answer.code, f, low, high, measure === 'relative');
    expect(worst).toBeLessThanOrEqual(Number(answer.bound.total));
    expect(Number(answer.bound.total)).toBeLessThan(worst * 1.1);
    expect(answer.denominator?.[0]?.value).toBe('1');
    const polynomial = await fitAnswer(shared);
    if (text !== 'exp(x)') expect(Number(answer.bound.total)).toBeLessThan(Number(polynomial.bound.total));
  });
});

describe('split intervals', () => {
  it('keeps the tolerance on every piece with a lower degree', async () => {
    const shared = { text: 'cos(x)', interval: ['0', '3'], tolerance: 1e-12, emit: 'javascript' };
    const [whole, split] = [await fitAnswer(shared), await fitAnswer({ ...shared, pieces: 4 })];
    expect(split.degree).toBeLessThan(whole.degree);
    expect(split.pieces).toHaveLength(4);
    const worst = worstOf(split.code, Math.cos, 0, 3, false);
    expect(worst).toBeLessThanOrEqual(Number(split.bound.total));
    expect(Number(split.bound.total)).toBeLessThanOrEqual(1e-12);
    expect(split.pieces?.map((p) => p.to).at(-1)).toBe('3');
  });
  it('splits by itself where the degree is high', async () => {
    const answer = await fitAnswer({ text: 'exp(x)', interval: ['-3', '3'], tolerance: 1e-6, measure: 'relative', format: 'binary32', pieces: 'auto', emit: 'javascript' });
    expect(answer.pieces?.length).toBeGreaterThan(1);
    expect(answer.degree).toBeLessThanOrEqual(7);
    expect(Number(answer.bound.total)).toBeLessThanOrEqual(1e-6);
    expect(worstOf(answer.code, Math.exp, -3, 3, true)).toBeLessThanOrEqual(Number(answer.bound.total) * 1.0001);
  });
});

describe('rounding error in ulp', () => {
  it('of a leading term that is added last stays below one ulp down to the subnormal numbers', async () => {
    const answer = await fitAnswer({ text: 'sin(x)', interval: ['-3/4', '3/4'], tolerance: 0.8, measure: 'ulp' });
    expect(Number(answer.bound.total)).toBeLessThan(0.8);
    // One multiplication and one addition more than Horner's rule.
    expect(answer.code).toMatch(/return x \+ x\*u\*/);
  });
});

describe('rounding error relative to a function with a zero', () => {
  it.each(['binary32', 'binary64'])('log beside 1 in %s: the bound reaches the floats next to the zero', async (format) => {
    const answer = await fitAnswer({ text: 'log(x)', interval: ['3/4', '3/2'], measure: 'relative', degree: 18, format, emit: 'javascript' });
    expect(answer.centre).toBe('1');
    expect(Number(answer.bound.evaluation)).toBeLessThan(format === 'binary64' ? 1e-15 : 3e-7);
  });
});

describe('formats that are only stored', () => {
  it.each(['binary16', 'bfloat16'])('%s: coefficients of the format, operations in binary32, one rounding at the end', async (format) => {
    const answer = await fitAnswer({ text: 'sin(x)', interval: ['-1', '1'], degree: 5, measure: 'ulp', format, emit: 'c' });
    expect(answer.code).toMatch(/float sin_approximation\(float x\)/);
    expect(Number(answer.bound.evaluation)).toBeGreaterThanOrEqual(0.5);
    expect(Number(answer.bound.total)).toBeLessThan(0.6);
    const bits = format === 'binary16' ? 11 : 8;
    // The decimal is the shortest that reads back in the format; the hexadecimal text is the value itself.
    for (const { hex } of answer.coefficients) {
      const digits = /0x1\.?([0-9a-f]*)p/.exec(hex)?.[1] ?? '';
      const significand = (1 + (digits === '' ? 0 : parseInt(digits, 16) / 16 ** digits.length)) * 2 ** (bits - 1);
      expect(significand).toBe(Math.round(significand));
    }
  });
});
