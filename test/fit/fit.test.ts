import { describe, expect, it } from 'vitest';
import { ask, fitAnswer } from './engine.ts';

const value = (coefficients: readonly { readonly power: number; readonly value: string }[], u: number): number => coefficients.reduceRight((sum, c) => sum + Number(c.value) * u ** c.power, 0);

describe('fit', () => {
  it('finds the best line for exp on [0, 1]: error (2 - e - (1 - e) log(e - 1)) / 2 in closed form', async () => {
    // Chebyshev's linear best approximation: slope e - 1, tangent at log(e - 1).
    const { coefficients, bound } = await fitAnswer({ text: 'exp(x)', interval: ['0', '1'], degree: 1 });
    const slope = Math.E - 1;
    const error = (1 - slope + slope * Math.log(slope)) / 2;
    expect(Number(bound.approximation)).toBeGreaterThanOrEqual(error * (1 - 1e-9));
    expect(Number(bound.approximation)).toBeLessThan(error * 1.01);
    expect(Number(coefficients[1]?.value)).toBeCloseTo(slope, 4);
  });
  it('gives x^n its Chebyshev polynomial: error 2^(1 - n) below degree n', async () => {
    const { bound } = await fitAnswer({ text: 'x^6', interval: ['-1', '1'], degree: 5 });
    expect(Number(bound.approximation) / 2 ** -5).toBeGreaterThanOrEqual(1 - 1e-9);
    expect(Number(bound.approximation) / 2 ** -5).toBeLessThan(1.01);
  });
  it('gives 1/(x + 2) on [-1, 1] its best error (2 - sqrt(3))^n / 3 (Chebyshev, from memory)', async () => {
    const { bound } = await fitAnswer({ text: '1/(x+2)', interval: ['-1', '1'], degree: 5 });
    const best = (2 - Math.sqrt(3)) ** 5 / 3;
    expect(Number(bound.approximation) / best).toBeGreaterThanOrEqual(1 - 1e-9);
    expect(Number(bound.approximation) / best).toBeLessThan(1.01);
  });
  it('has coefficients that read back from decimal and hexadecimal alike', async () => {
    const { coefficients } = await fitAnswer({ text: 'cos(x)', interval: ['-1', '1'], degree: 8, format: 'binary32' });
    for (const { value: decimal, hex } of coefficients) {
      const [, sign = '', digits = '', exponent = '0'] = /^(-?)0x1\.?([0-9a-f]*)p([+-]\d+)$/.exec(hex) ?? [];
      const read = (sign ? -1 : 1) * (1 + (digits === '' ? 0 : parseInt(digits, 16) / 16 ** digits.length)) * 2 ** Number(exponent);
      expect(Math.fround(Number(decimal))).toBe(read);
    }
  });
  it('keeps the tolerance with the least degree, and one degree less does not', async () => {
    const within = await fitAnswer({ text: 'exp(x)', interval: ['-1/2', '1/2'], tolerance: 1e-6 });
    expect(Number(within.bound.total)).toBeLessThanOrEqual(1e-6);
    const less = await fitAnswer({ text: 'exp(x)', interval: ['-1/2', '1/2'], degree: within.degree - 1 });
    expect(Number(less.bound.approximation)).toBeGreaterThan(1e-6);
    expect(within.taylorDegree).toBeGreaterThanOrEqual(within.degree);
  });
  it('counts the degree of a truncated expansion also where it converges slowly, and none where no number up to a thousand terms serves', async () => {
    const asked = { text: 'atan(x)', interval: ['-1', '1'] };
    // |atan 1 - sum of n terms| is about 1/(4 n) (alternating series).
    expect((await fitAnswer({ ...asked, tolerance: 1e-2 })).taylorDegree).toBe(49);
    expect((await fitAnswer({ ...asked, tolerance: 1e-6 })).taylorDegree).toBeNull();
  });
  it('bounds what doubles see for truncated, economized and best polynomials, in this order', async () => {
    const errors: number[] = [];
    for (const method of ['taylor', 'economized', 'minimax']) {
      const { coefficients, bound } = await fitAnswer({ text: 'exp(x)', interval: ['-1', '1'], degree: 5, method });
      let worst = 0;
      for (let k = 0; k <= 2000; k += 1) worst = Math.max(worst, Math.abs(Math.exp(-1 + k / 1000) - value(coefficients, -1 + k / 1000)));
      expect(worst).toBeLessThanOrEqual(Number(bound.total));
      expect(Number(bound.total)).toBeLessThan(worst * 1.02);
      errors.push(Number(bound.total));
    }
    expect(errors[0]).toBeGreaterThan(errors[1] ?? 0);
    expect(errors[1]).toBeGreaterThan((errors[2] ?? 0) * 0.999);
  });
  it('factors out a zero that is a float, in x - centre', async () => {
    const answer = await fitAnswer({ text: 'log(x)', interval: ['3/4', '3/2'], measure: 'relative', tolerance: 1e-6, format: 'binary32' });
    expect(answer.centre).toBe('1');
    expect(answer.coefficients[0]?.power).toBe(1);
    expect(answer.code).toMatch(/x - 1\.0f/);
  });
  it('covers an end that is a branch point', async () => {
    const { bound, coefficients } = await fitAnswer({ text: 'sqrt(x)', interval: ['0', '1'], degree: 4 });
    expect(Math.abs(value(coefficients, 0))).toBeLessThanOrEqual(Number(bound.total));
  });
  it.each([
    [{ text: 'cos(x)', interval: ['0', '3'], measure: 'relative', tolerance: 1e-6 }, 'bad-request', /no float/],
    [{ text: 'sin(x)', interval: ['1', '1'], degree: 3 }, 'bad-request', /two different ends/],
    [{ text: 'sin(x)', interval: ['0', 'inf'], degree: 3 }, 'bad-request', /finite/],
    [{ text: 'sin(x)', interval: ['0', '1'] }, 'bad-request', /tolerance.*degree/],
    [{ text: 'sin(a*x)', variable: 'x', interval: ['0', '1'], degree: 3 }, 'needs-assumption', /value for a/],
    [{ text: '1/x', interval: ['-1', '1'], degree: 3 }, 'bad-request', /no value|singular|smaller/],
    [{ text: 'log(x)', interval: ['-2', '-1'], degree: 3 }, 'bad-request', /no real value/],
    [{ text: 'exp(x)', interval: ['-1', '1'], tolerance: 1e-9, format: 'binary32' }, 'bad-request', /wider format/],
    [{ text: 'exp(x)', interval: ['-1', '1'], degree: 3, emit: 'python', contraction: 'fma' }, 'bad-request', /fused/],
    [{ text: 'exp(x)', interval: ['-1', '1'], degree: 3, emit: 'cobol' }, 'bad-request', /language/],
    [{ text: 'exp(x)', interval: ['-1', '1'], degree: 3, format: 'binary8' }, 'bad-request', /format/],
  ])('declines %j', async (request, code, message) => {
    const answer = await ask(request);
    expect(answer.ok).toBe(false);
    if (!answer.ok) {
      expect(answer.error.code).toBe(code);
      expect(answer.error.message).toMatch(message);
    }
  });
});

describe('what a page shows beside the answer', () => {
  it('samples of the error in ulp, below the proven bound and above a third of the approximation error', async () => {
    const answer = await fitAnswer({ text: 'exp(x)', interval: ['-7/20', '7/20'], degree: 4, format: 'binary32', measure: 'ulp', details: ['plot'] });
    const { plot } = answer;
    if (!plot) throw new Error('no plot');
    const largest = Math.max(...plot.error.map((e) => Math.abs(e ?? 0)));
    expect(plot.x).toHaveLength(plot.error.length);
    expect([plot.x[0], plot.x.at(-1), plot.measure, plot.tolerance]).toEqual([-0.35, 0.35, 'ulp', null]);
    expect(largest).toBeLessThanOrEqual(plot.bound);
    expect(largest).toBeGreaterThan(Number(answer.bound.approximation) / 3);
  });
  it('an estimate of the speed: more operations cost more; none for interpreted languages', async () => {
    const [short, long] = [await fitAnswer({ text: 'sin(x)', interval: ['-1', '1'], degree: 3 }), await fitAnswer({ text: 'sin(x)', interval: ['-1', '1'], degree: 13 })];
    expect(short.speed?.ratio ?? 0).toBeGreaterThan(long.speed?.ratio ?? Infinity);
    expect(short.speed?.call).toBe(long.speed?.call);
    expect((await fitAnswer({ text: 'sin(x)', interval: ['-1', '1'], degree: 3, emit: 'python' })).speed).toBeUndefined();
    expect(short.plot).toBeUndefined();
  });
});

describe('leading coefficients kept exact', () => {
  it.each([
    ['exp(x)', 2, 5, 'relative', ['1', '1']],
    ['cos(x)', 1, 6, 'absolute', ['1']],
    ['1/(1-x/2)', 2, 6, 'relative', ['1', '0.5']],
  ] as const)('%s, %i of them', async (text, exact, degree, measure, leading) => {
    const request = { text, interval: ['-1/2', '1/2'], degree, measure };
    const [kept, free] = [await fitAnswer({ ...request, exact }), await fitAnswer(request)];
    expect(kept.coefficients.slice(0, leading.length).map((c) => Number(c.value))).toEqual(leading.map(Number));
    expect(kept.coefficients.length).toBe(free.coefficients.length);
    expect(Number(kept.bound.approximation)).toBeGreaterThan(Number(free.bound.approximation));
    expect(Number(kept.bound.approximation)).toBeLessThan(20 * Number(free.bound.approximation));
  });
  it('declines a coefficient that is no float', async () => {
    const answer = await ask({ text: 'cos(x+1)', interval: ['-1/2', '1/2'], degree: 4, exact: 1 });
    expect(answer.ok ? '' : answer.error.message).toContain('no number of the format');
  });
});
