/** Guards: proven bounds held by compiled code, forms found, switches, requests through the engine. */
import { describe, expect, it } from 'vitest';
import { has, hasFma } from '../exhaustive/compile.ts';
import { overFloats } from '../exhaustive/everyFloat.ts';
import { guardOf, guardRunOf, GUARDS } from '../exhaustive/guardPrograms.ts';
import { Q } from '../../src/expression/index.ts';
import { guard, polynomialReport } from '../../src/guard/index.ts';
import { formatByName } from '../../src/fit/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';
import type { GuardAnswer } from '../../src/protocol.ts';
import { ask } from '../fit/engine.ts';

const gcc = has('gcc');
if (!gcc) process.stderr.write('gcc is absent: emitted C is not run\n');

describe('emitted guards over floats of the whole interval (every 400 009th; test/exhaustive/guards.ts runs all)', () => {
  it.skipIf(!gcc).each(GUARDS.filter((_, k) => [0, 1, 4, 5, 7, 9, 11, 12, 13, 14, 15, 16, 17].includes(k)))('$text', (c) => {
    const found = guardOf(c);
    const { worst, floats } = overFloats(guardRunOf(c, found), 400_009, hasFma());
    expect(floats).toBeGreaterThan(30);
    expect(worst).toBeGreaterThan(0);
    expect(worst).toBeLessThanOrEqual(found.bound.whole);
  });
});

const answer = async (request: Readonly<Record<string, unknown>>): Promise<GuardAnswer> => {
  const found = await ask({ ask: 'guard', ...request });
  if (!found.ok) throw new Error(found.error.message);
  if (!('ranges' in found)) throw new Error('no guard');
  return found;
};
const formsOf = async (text: string, more: Readonly<Record<string, unknown>> = {}): Promise<string> => (await answer({ text, language: 'c', format: 'binary32', ...more })).forms.map((f) => f.text).join(' | ');

describe('exact forms (identities of DLMF 4.21, 4.35; conjugates)', () => {
  it.each([
    ['(1.0 - cos(x)) / (x*x)', 'sin(x/2)'],
    ['(exp(x) - 1.0)/x', 'expm1(x)/x'],
    ['exp(3*x) - exp(x)', 'expm1('],
    ['log(1 + x)/x', 'log1p(x)/x'],
    ['sqrt(1 + x) - 1', 'x/(sqrt(1 + x) + 1)'],
    ['cbrt(1 + x) - 1', 'cbrt(1 + x)'],
    ['cosh(x) - 1', 'sinh(x/2)^2'],
    ['pow(1 + x, 0.3) - 1', 'log1p(x)'],
    ['acos(1 - x)', '2*asin(sqrt(2*x)/2)'],
    ['acosh(1 + x)', 'log1p(x + sqrt(x)*sqrt(x + 2))'],
  ])('%s', async (text, part) => {
    expect(await formsOf(text)).toContain(part);
  });
  it('acos at its branch point 1 is as good as the library', async () => {
    const found = await answer({ text: 'acos(x)', language: 'c', point: '1', interval: ['1/2', '1'] });
    expect(Number(found.bound.whole)).toBeLessThan(4 * 2 ** -53);
  });
  it('sqrt(x+1) - sqrt(x) without end, by its conjugate', async () => {
    const found = await answer({ text: 'sqrt(x+1)-sqrt(x)', language: 'c', interval: ['0', 'inf'] });
    expect(found.code).toContain('1.0/(sqrt(x + 1.0) + sqrt(x))');
    expect(found.switch).toBeNull();
    expect(Number(found.bound.whole)).toBeLessThan(5e-16);
  });
  it('sin(1 + x) - sin(1) by a product', async () => {
    expect(await formsOf('sin(1 + x) - sin(1)')).toContain('sin(x/2)');
  });
});

describe('series branches', () => {
  it('the switch, the terms and the ranges of x - sin(x)', async () => {
    const found = await answer({ text: 'x - sin(x)', language: 'c', interval: ['-2', '2'] });
    expect(found.terms).toBeGreaterThan(4);
    expect(found.ranges[0]?.from).toBe('-2');
    expect(found.ranges.at(-1)?.to).toBe('2');
    expect(Number(found.bound.whole)).toBeLessThan(2e-15);
  });
  it('a tolerance takes fewer terms', async () => {
    const [loose, tight] = [await answer({ text: 'x - sin(x)', language: 'c', tolerance: '1e-6' }), await answer({ text: 'x - sin(x)', language: 'c' })];
    expect(Number(loose.bound.whole)).toBeLessThanOrEqual(1e-6);
    expect(loose.terms ?? 99).toBeLessThan(tight.terms ?? 0);
  });
  it('the derivative too', async () => {
    const found = await answer({ text: 'sin(x)/x', language: 'c', interval: ['-1', '1'], derivative: true });
    expect(Number(found.derivative?.bound.whole)).toBeLessThan(1e-13);
    expect(found.derivative?.code).toContain('guarded_derivative');
  });
  it('serves an interval that only comes near to the point', async () => {
    const found = await answer({ text: 'x - sin(x)', language: 'c', interval: ['1e-10', '1/10'] });
    expect(Number(found.bound.whole)).toBeLessThan(2e-15);
    expect(found.switch).toBe('0.1');
  });
  it('the derivative has a switch of its own where the shared one does not serve it, or the reason why it has none', async () => {
    const found = await answer({ text: '(1 - cos(x))/(x*x)', language: 'c', format: 'binary32', interval: ['-1', '1'], derivative: true });
    expect(Number(found.derivative?.bound.whole)).toBeLessThan(1e-6);
    expect((await answer({ text: '2*x', language: 'c', interval: ['-1', '1'], derivative: true })).assumptions.join()).toContain('no guard of the derivative: it is constant');
  });
  it('nothing is promised where the value is beyond half the largest number (1/x at the smallest arguments)', async () => {
    const found = await answer({ text: '1/x', language: 'c', interval: ['-1', '1'] });
    expect(found.assumptions.join()).toContain('beyond half the largest binary64 number');
    expect((await answer({ text: '1/x', language: 'c', interval: ['1/2', '1'] })).assumptions.join()).not.toContain('beyond half');
  });
  it('an assumption that gives a parameter its value is used and said', async () => {
    const found = await answer({ text: 'exp(a*x) - 1', assume: ['a = 2'], interval: ['-1', '1'] });
    expect(found.code).toContain('expm1');
    expect(found.assumptions).toContain('a = 2');
  });
  it('a larger library error is a larger bound', async () => {
    const [one, four] = [await answer({ text: '(exp(x)-1)/x', language: 'c' }), await answer({ text: '(exp(x)-1)/x', language: 'c', library: 4 })];
    expect(Number(four.bound.whole)).toBeGreaterThan(2 * Number(one.bound.whole));
    expect(four.assumptions.join()).toContain('4 ulp');
  });
});

describe('languages and errors', () => {
  it('Fortran tells no capitals apart: no two names of a function are one (Fortran 2018, 6.1.2, from memory)', async () => {
    expect((await answer({ text: 'Value - sin(Value)', language: 'fortran', interval: ['-1', '1'] })).code).toContain('function guarded(value_) result(value)');
    expect((await answer({ text: 'U - sin(U)', language: 'fortran', interval: ['-1', '1'] })).code).toContain('function guarded(x) result(value)');
  });
  it('Rust methods and numpy calls', async () => {
    expect((await answer({ text: '(x.exp() - 1.0) / x', language: 'rust' })).code).toContain('x.exp_m1()/x');
    const numpy = await answer({ text: 'np.sqrt(1 + x**2) - 1', language: 'python' });
    expect(numpy.code).toContain('np.sqrt(');
    expect(numpy.imports).toEqual(['import numpy as np']);
  });
  it.each([
    [{ text: 'exp(a*x) - 1', variable: 'x' }, 'needs-assumption'],
    [{ text: '1 - cos(x)', point: 'pi/2' }, 'bad-request'],
    [{ text: '1 - cos(x)', interval: ['1', '0'] }, 'bad-request'],
    [{ text: '1 - cos(x)', format: 'decimal32' }, 'bad-request'],
    [{ text: '1 - cos(x)', emit: 'cobol' }, 'bad-request'],
    [{ text: '' }, 'unreadable'],
  ])('%o', async (request, code) => {
    const found = await ask({ ask: 'guard', ...request });
    expect(found.ok ? 'ok' : found.error.code).toBe(code);
  });
  it.each([
    [{ text: '1/(x-1)-1/sin(x)', interval: ['-1', '2'] }, 'near x = 1 in binary64'],
    [{ text: 'tan(x) - x', interval: ['-2', '2'] }, 'near x = 1.5707'],
    [{ text: 'exp(x^2) - 1', interval: ['-30', '30'] }, 'beyond the largest binary64 number near x = 26.'],
    [{ text: '(sin(x) - x)/x^3', interval: ['0', 'inf'] }, 'with a finite end'],
    [{ text: 'sin(x)/x', interval: ['1', '1.00000001'], format: 'binary32' }, 'only one binary32 number'],
    [{ text: 'sin(x)/x', interval: ['1.000000011', '1.000000012'], format: 'binary32' }, 'only one binary32 number'],
  ])('the reason names the place: %o', async (request, says) => {
    const found = await ask({ ask: 'guard', ...request });
    expect(found.ok ? 'ok' : found.error.message).toContain(says);
  });
  it('the budget is kept', () => {
    const read = readExact('(1 - cos(x))/x^2');
    const format = formatByName('binary64');
    if (!read.ok || format?.kind !== 'float') throw new Error('case');
    const found = guard({ function: read.value, variable: 'x', point: Q.ZERO, format, language: 'c', library: 1 }, budget(0));
    expect(found.ok ? 'ok' : found.error.code).toBe('over-budget');
  });
});

describe('polynomials that programs hold', () => {
  const rationals = (...list: readonly string[]): Q.Rational[] => list.map((t) => Q.fromDecimal(t) ?? Q.ZERO);
  const report = (coefficients: readonly Q.Rational[], more: object = {}): ReturnType<typeof polynomialReport> => polynomialReport({ coefficients, variable: 'x', ...more }, budget(60_000));
  it('the parabola (1.27323954 x) - (0.405284735 x^2) is a sine on [0, pi], not better than 0.056', () => {
    const found = report(rationals('0', '1.27323954', '-0.405284735'), { stated: Q.fromDecimal('0.001') });
    if (!found.ok) throw new Error(found.error.message);
    expect(found.value.function).toMatchObject({ kind: 'call', function: 'sin' });
    expect(found.value.kind).toBe('fitted');
    expect(Q.toDouble(found.value.error.upper)).toBeCloseTo(0.056, 3);
    expect(found.value.verdict).toBe('fails');
  });
  it('x - x^3/6 for a named sine is its expansion, within 2.6e-4 of it on [-1/2, 1/2] (next term: x^5/120)', () => {
    const read = readExact('sin(x)');
    if (!read.ok) throw new Error('case');
    const found = report([Q.ZERO, Q.ONE, Q.ZERO, Q.rational(-1, 6)], { named: read.value, interval: { low: Q.rational(-1, 2), high: Q.HALF }, stated: Q.fromDecimal('3e-4') });
    if (!found.ok) throw new Error(found.error.message);
    expect(found.value.kind).toBe('taylor');
    expect(Q.toDouble(found.value.error.upper)).toBeCloseTo(0.5 ** 5 / 120, 5);
    expect(found.value.verdict).toBe('holds');
  });
});
