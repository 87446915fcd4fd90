import { describe, expect, it } from 'vitest';
import { has, hasFma } from '../exhaustive/compile.ts';
import { overFloats } from '../exhaustive/everyFloat.ts';
import { ask, fitAnswer } from './engine.ts';
import { RUNNERS } from './runners.ts';

describe('two words for the leading coefficient', () => {
  const cases = [
    { text: 'sin(pi*x)', interval: ['-1/4', '1/4'], degree: 9, contraction: 'fma', reference: 'sin(0x1.921fb54442d18p+1*x)', rounding: 0.4 },
    { text: 'exp(x + 1/3)', interval: ['-1/8', '1/8'], degree: 6, reference: 'exp(x + 1.0/3)', rounding: 0.4 },
  ];
  it.each(cases)('$text: rounding the coefficients costs less, and the bound holds', async ({ reference, rounding, ...request }) => {
    const asked = { ...request, measure: 'ulp', format: 'binary32', emit: 'c' };
    const [one, two] = [await fitAnswer({ ...asked, words: 1 }), await fitAnswer({ ...asked, words: 2 })];
    expect(Number(one.bound.rounding)).toBeGreaterThan(rounding);
    expect(Number(two.bound.rounding)).toBeLessThan(0.6 * Number(one.bound.rounding));
    expect(Number(two.bound.total)).toBeLessThan(Number(one.bound.total));
    const [high, low] = two.coefficients;
    expect(high?.power).toBe(low?.power);
    expect(Math.abs(Number(low?.value))).toBeLessThanOrEqual(Math.abs(Number(high?.value)) * 2 ** -24);
    if (!has('gcc')) return;
    const [start = '', end = ''] = request.interval;
    const seen = overFloats({ code: two.code, name: /(\w+)\(float x\)/.exec(two.code)?.[1] ?? '', reference, low: start, high: end, measure: 'ulp', marginBits: 48 }, 20_011, hasFma());
    expect(seen.floats).toBeGreaterThan(100);
    expect(seen.worst).toBeLessThanOrEqual(Number(two.bound.total));
  });
  it('are taken where one does not keep the tolerance', async () => {
    const asked = { text: 'sin(pi*x)', interval: ['-1/4', '1/4'], measure: 'ulp', format: 'binary32', emit: 'c', contraction: 'fma', tolerance: 1.3 };
    const answer = await fitAnswer(asked);
    expect(answer.coefficients.filter((c) => c.power === 1)).toHaveLength(2);
    expect(Number(answer.bound.total)).toBeLessThanOrEqual(1.3);
    expect((await ask({ ...asked, words: 1 })).ok).toBe(false);
  });
});

describe('an assertion of the range', () => {
  const request = { text: 'sin(x)', interval: ['-1/10', '1/3'], degree: 5, format: 'binary64', assertion: true };
  it.each([
    ['c', /assert\(x >= -0x1\.9999999999999p-4 && x <= 0x1\.5555555555555p-2\);/],
    ['cpp', /assert\(x >= .* && x <= .*\);/],
    ['rust', /debug_assert!\(x >= .*, "x outside \[-1\/10, 1\/3\]"\);/],
    ['python', /assert x >= .* and x <= .*, "x outside/],
    ['typescript', /if \(!\(x >= .* && x <= .*\)\) throw new RangeError/],
    ['java', /assert x >= .* && x <= .* : "x outside/],
    ['csharp', /System\.Diagnostics\.Debug\.Assert\(x >= /],
    ['go', /if !\(x >= .*\) \{\n\t\tpanic\("x outside/],
    ['julia', /@assert x >= .* && x <= .* "x outside/],
    ['fortran', /if \(\.not\. \(x >= .* \.and\. x <= .*\)\) error stop/],
    ['matlab', /assert\(x >= .*, 'x outside/],
    ['r', /stopifnot\(x >= .*, x <= .*\)/],
    ['kotlin', /require\(x >= .*\) \{ "x outside/],
    ['swift', /precondition\(x >= .*, "x outside/],
  ])('in %s: with ends that are floats inside the interval', async (emit, form) => {
    expect((await fitAnswer({ ...request, emit })).code).toMatch(form);
  });
  it('is declined where the language cannot stop', async () => {
    const answer = await ask({ ...request, format: 'binary32', emit: 'glsl' });
    expect(answer.ok ? '' : answer.error.message).toMatch(/GLSL has no assertions/);
  });
  it.each(RUNNERS.filter((r) => r.ready && ['c', 'cpp', 'java', 'python', 'javascript'].includes(r.language)))('compiles and lets the ends of the interval pass: $language', async ({ language, run }) => {
    const answer = await fitAnswer({ ...request, emit: language });
    expect(run(answer.code, [-0.099999, 0.3333])[1]).toBeCloseTo(Math.sin(0.3333), 5);
    if (language === 'java') return;
    expect(() => run(answer.code, [0.34])).toThrow();
  });
});

describe('degrees without use', () => {
  it.each([
    [{ text: 'exp(x)', degree: 200 }, /Degree 24 is already far below what binary64 can resolve/],
    [{ text: 'sin(x)', degree: 61, measure: 'relative' }, /already far below/],
    [{ text: '1/(1+25*x^2)', degree: 200 }, /up to degree 160/],
  ])('%o is declined early', async (request, says) => {
    const answer = await ask({ interval: ['-1', '1'], budget_ms: 20_000, ...request });
    expect(answer.ok ? '' : answer.error.message).toMatch(says);
  });
  it('Fortran: what a function uses is named inside it, and an assumed value is put in', async () => {
    const found = await fitAnswer({ text: 'sin(a*U)', variable: 'U', assume: ['a = 2'], interval: ['-1/4', '1/4'], degree: 5, contraction: 'fma', emit: 'fortran', format: 'binary64' });
    expect(found.code).toMatch(/function \w+\(x\) result\(value\)\n +use, intrinsic :: ieee_arithmetic, only: ieee_fma\n +double precision, intent\(in\) :: x/);
    expect(found.assumptions).toContain('a = 2');
  });
});
