/** Fits with a reduced argument: proven bounds against MPFR (gmp-wasm) at samples, extremes and borders between the cases, in every language that the machine can run. */
import { beforeAll, describe, expect, it } from 'vitest';
import { has, hasFma } from '../exhaustive/compile.ts';
import { overFloats } from '../exhaustive/everyFloat.ts';
import { fitOf, runOf } from '../exhaustive/programs.ts';
import { REDUCED_CASES } from '../exhaustive/reducedCases.ts';
import { judge, type UnaryName } from '../rigorous/mpfr.ts';
import { Q } from '../../src/expression/index.ts';
import { type Ball, real } from '../../src/rigorous/index.ts';
import { ask, fitAnswer } from './engine.ts';
import { RUNNERS } from './runners.ts';

let reference: Awaited<ReturnType<typeof judge>>;
beforeAll(async () => {
  reference = await judge(160);
});

const gcc = has('gcc');

describe('emitted C with a reduced argument over floats of the whole interval (every 50 021st; test/exhaustive/reductions.ts runs all)', () => {
  it.skipIf(!gcc).each(REDUCED_CASES.filter((_, k) => [8, 11, 23, 28, 33].includes(k)))('$text on [$low, $high] in $measure', (c) => {
    const found = fitOf(c);
    const { worst, floats, subnormal } = overFloats(runOf(c, found), 50_021, hasFma());
    expect(found.reduction?.kernels.length).toBeGreaterThan(0);
    expect(floats).toBeGreaterThan(2000);
    expect(worst).toBeLessThanOrEqual(Q.toDouble(found.error.total));
    expect(worst).toBeGreaterThan(0.2 * Q.toDouble(found.error.total));
    if (c.measure === 'relative') expect(subnormal).toBeLessThanOrEqual(Q.toDouble(found.error.subnormal ?? Q.ZERO));
  });
});

/** Arguments in equal steps of x or of its exponent, with what lies beside the ends and beside the borders between cases. */
function argumentsOf(low: number, high: number, borders: readonly number[], single: boolean): readonly number[] {
  const list: number[] = [low, high];
  for (let k = 0; k < 400; k += 1) {
    list.push(low + ((high - low) * k) / 399);
    list.push(low > 0 ? low * (high / low) ** (k / 399) : (k % 2 === 0 ? high : low) * 2 ** (-k / 8));
  }
  for (const b of borders) for (let n = -12; n <= 12; n += 1) for (const step of [-3e-16, -6e-8, 0, 6e-8, 3e-16]) list.push(b * n * (1 + step), b * 2 ** n * (1 + step));
  const rounded = single ? list.map(Math.fround) : list;
  return rounded.filter((x) => x >= low && x <= high);
}

interface Case {
  readonly text: string;
  readonly name: UnaryName;
  /** The reference takes the argument with this added. */
  readonly plus?: number;
  readonly low: string;
  readonly high: string;
  readonly borders: readonly number[];
  readonly measure: 'absolute' | 'relative';
  readonly tolerance: string;
  readonly format: 'binary32' | 'binary64';
}
const ten = (n: number): string => `${10n ** BigInt(n)}`;
const CASES: readonly Case[] = [
  { text: 'exp(x)', name: 'exp', low: '-740', high: '700', borders: [Math.LN2 / 2], measure: 'relative', tolerance: '1e-9', format: 'binary64' },
  { text: 'log(x)', name: 'ln', low: `1/${ten(40)}`, high: ten(30), borders: [181 / 128, 1], measure: 'relative', tolerance: '1e-6', format: 'binary32' },
  { text: 'sin(x)', name: 'sin', low: '-1000', high: '1000', borders: [Math.PI / 4], measure: 'absolute', tolerance: '1e-9', format: 'binary64' },
  { text: 'atan(x)', name: 'atan', low: `-${ten(30)}`, high: ten(30), borders: [53 / 128, 309 / 128], measure: 'absolute', tolerance: '1e-6', format: 'binary32' },
  { text: 'acos(x)', name: 'acos', low: '-1', high: '1', borders: [1 / 2], measure: 'absolute', tolerance: '1e-9', format: 'binary64' },
  { text: 'tanh(x)', name: 'tanh', low: '-50', high: '50', borders: [5 / 8, 43 / 2], measure: 'relative', tolerance: '1e-13', format: 'binary64' },
  { text: 'tan(x)', name: 'tan', low: '-3/2', high: '3/2', borders: [Math.PI / 4], measure: 'relative', tolerance: '1e-13', format: 'binary64' },
  { text: 'log(1+x)', name: 'ln', plus: 1, low: '-999/1000', high: ten(30), borders: [53 / 128, -75 / 256], measure: 'relative', tolerance: '1e-9', format: 'binary64' },
  { text: 'x^(1/3)', name: 'cbrt', low: `1/${ten(300)}`, high: ten(300), borders: [181 / 128, 1], measure: 'relative', tolerance: '1e-9', format: 'binary64' },
];

/** All of them where they are quick to run; elsewhere those that read and set exponents, or take a square root. */
const casesFor = (language: string): readonly Case[] => (language === 'c' ? CASES : CASES.filter((c) => (c.name === 'exp' || (c.name === 'ln' && !c.plus) || (c.name === 'acos' && (language === 'rust' || language === 'javascript'))) && (language !== 'python' || c.format === 'binary64')));

describe('every language that runs here', () => {
  for (const { language, ready, run } of RUNNERS) {
    it.skipIf(!ready).each(casesFor(language))(`${language}: $text in $format on [$low, $high]`, ({ name, plus = 0, borders, format, ...c }) => {
      const { measure } = c;
      const { error, reduction, code } = fitOf({ ...c, reference: '' }, format, language);
      expect(reduction?.method).toBeTruthy();
      const [low = 0, high = 0] = [c.low, c.high].map((t) => t.split('/').map(Number).reduce((p, q) => p / q));
      const xs = argumentsOf(low, high, borders, format === 'binary32');
      const values = run(code.code, xs);
      expect(values).toHaveLength(xs.length);
      const smallest = format === 'binary32' ? 2 ** -126 : 2 ** -1022;
      let [worst, below] = [0, 0];
      xs.forEach((x, k) => {
        const exact = reference(name, real.addExact(real.fromDouble(x), real.fromInteger(plus)));
        if (!exact) throw new Error(`no value at ${x}`);
        const error = real.toDouble(real.absolute(real.subtract(real.fromDouble(values[k] ?? NaN), exact, 160)));
        const size = Math.abs(real.toDouble(exact));
        if (measure === 'absolute') worst = Math.max(worst, error);
        else if (size >= smallest) worst = Math.max(worst, error / size);
        else below = Math.max(below, error);
      });
      expect(worst).toBeLessThanOrEqual(Q.toDouble(error.total));
      expect(worst).toBeGreaterThan(0.05 * Q.toDouble(error.total));
      expect(below).toBeLessThanOrEqual(Q.toDouble(error.subnormal ?? Q.ZERO));
    });
  }
});

describe('two variables', () => {
  // A corner of every octant, sizes far apart, equal sizes, zeros, the smallest and the largest floats.
  const sizes = [0, 1e-45, 1e-38, 3e-20, 0.25, 0.41421, 0.4142136, 0.41422, 0.6, 0.99999994, 1, 1.0000001, 1.7, 2.414, 1e10, 1e37].map(Math.fround);
  const signed = [...sizes, ...sizes.map((x) => -x)];
  const random = Array.from({ length: 400 }, (_, k) => Math.fround(Math.sin(k * 12.9898) * 2 ** (20 * Math.sin(k * 78.233))));
  const pairs = [...signed.flatMap((a) => signed.map((b) => [a, b] as const)), ...random.map((a, k) => [a, random[(k * 7 + 3) % random.length] ?? 1] as const)].filter(([a, b]) => a !== 0 || b !== 0);
  const bits = 160;
  const exact = (x: number): Ball => real.fromDouble(x);

  const hypotenuse = (a: number, b: number): Ball | null => reference('sqrt', real.addExact(real.multiply(exact(a), exact(a), 1200), real.multiply(exact(b), exact(b), 1200)));
  function angle(y: number, x: number): Ball | null {
    if (x === 0) return real.scaleByPowerOfTwo(y < 0 ? real.negate(real.pi(bits)) : real.pi(bits), -1);
    const quotient = real.divide(exact(y), exact(x), bits);
    const value = quotient && (y === 0 ? real.ZERO : reference('atan', quotient));
    return value && (x > 0 ? value : y < 0 ? real.subtract(value, real.pi(bits), bits) : real.add(value, real.pi(bits), bits));
  }

  it.each([
    { text: 'hypot(a, k)', of: hypotenuse, measure: 'relative', tolerance: 5e-7, languages: ['c', 'javascript', 'java'] },
    { text: 'sqrt(a^2 + k^2)', of: hypotenuse, measure: 'ulp', tolerance: 6, languages: ['c'] },
    { text: 'atan2(a, k)', of: angle, measure: 'absolute', tolerance: 1e-6, languages: ['c', 'cpp', 'rust', 'typescript'] },
    { text: 'atan2(a, k)', of: angle, measure: 'relative', tolerance: 1e-6, languages: ['c'] },
  ])('$text, $measure: the bound holds in $languages', async ({ text, of, measure, tolerance, languages }) => {
    const list = pairs;
    for (const { run } of RUNNERS.filter((r) => r.ready && languages.includes(r.language))) {
      const language = RUNNERS.find((r) => r.run === run)?.language ?? '';
      const answer = await fitAnswer({ text, intervals: { a: ['-1e38', '1e38'], k: ['-1e38', '1e38'] }, measure, tolerance, format: 'binary32', emit: language });
      const values = run(answer.code, list.map(([a]) => a), list.map(([, b]) => b));
      let [worst, below] = [0, 0];
      list.forEach(([a, b], k) => {
        const value = of(a, b);
        if (!value) throw new Error(`no value at ${a}, ${b}`);
        const error = real.toDouble(real.absolute(real.subtract(exact(values[k] ?? NaN), value, bits)));
        const size = Math.abs(real.toDouble(value));
        const unit = measure === 'absolute' ? 1 : measure === 'relative' ? size : 2 ** (Math.max(Math.floor(Math.log2(size)), -126) - 23);
        if (measure === 'relative' && size < 2 ** -126) below = Math.max(below, error);
        else if (size > 0) worst = Math.max(worst, error / unit);
        else expect(error).toBe(0);
      });
      expect(worst).toBeLessThanOrEqual(Number(answer.bound.total));
      expect(worst).toBeGreaterThan(0.2 * Number(answer.bound.total));
      expect(below).toBeLessThanOrEqual(Number(answer.bound.subnormal ?? 0));
    }
  });
  it('the answer names its variables in the order in which the code takes them', async () => {
    for (const [text, intervals, parameters] of [
      ['atan2(v, w)', { w: ['1', '2'], v: ['0', '1'] }, 'v, w'],
      ['hypot(by, ax)', { ax: ['0', '1'], by: ['0', '2'] }, null],
      // These two are names of the function's own: its parameters are called y and x.
      ['atan2(k, a)', { a: ['1', '2'], k: ['0', '1'] }, 'k, a'],
    ] as const) {
      const answer = await ask({ text, intervals, tolerance: 1e-3 });
      if (!answer.ok || !('arguments' in answer)) throw new Error('no fit');
      const [, first, second] = /approximation\(double (\w+), double (\w+)\)/.exec(answer.code) ?? [];
      expect(answer.arguments?.join(', ')).toBe(parameters ?? `${first}, ${second}`);
    }
  });
  it('other functions of two variables are declined', async () => {
    const answer = await ask({ text: 'sin(x*y)', intervals: { x: ['0', '1'], y: ['0', '1'] }, tolerance: 1e-3 });
    expect(answer.ok ? '' : answer.error.message).toMatch(/hypot\(x, y\)/);
  });
});

describe('when the argument is reduced', () => {
  it('only where a polynomial would need a high degree, unless asked', async () => {
    const narrow = { text: 'exp(x)', interval: ['-1', '1'], tolerance: 1e-5, format: 'binary32', measure: 'relative' };
    expect((await fitAnswer(narrow)).reduction).toBeUndefined();
    expect((await fitAnswer({ ...narrow, reduction: 'always' })).reduction?.kernels).toHaveLength(1);
    expect((await fitAnswer({ ...narrow, interval: ['-6', '6'], tolerance: 1e-3, measure: 'absolute', reduction: 'none' })).reduction).toBeUndefined();
  });
  it.each([
    { text: 'sin(x)', interval: ['-1e9', '1e9'], format: 'binary32', tolerance: 1e-6, says: /Beyond \|x\| about/ },
    { text: 'exp(x)', interval: ['-10', '100'], format: 'binary32', tolerance: 1e-6, measure: 'relative', says: /beyond the largest binary32 number/ },
    { text: 'exp(x)', interval: ['-80', '80'], format: 'binary32', tolerance: 1e-6, measure: 'relative', emit: 'r', says: /R has no binary32 type/ },
    { text: 'exp(x)', interval: ['-80', '80'], format: 'binary64', tolerance: 1e-6, measure: 'relative', emit: 'r', says: /R has no exact way/ },
    { text: 'x^(17/19)', interval: ['1', '1000'], format: 'binary64', tolerance: 1e-9, measure: 'relative', says: /round the exponent/ },
    { text: 'tan(x)', interval: ['0', '2'], format: 'binary32', tolerance: 1e-6, says: /pole near 1\.57/ },
    { text: 'tan(x)', interval: ['2', '4'], format: 'binary32', tolerance: 1e-6, measure: 'relative', says: /zero near 3\.14/ },
    { text: 'log(1+x)', interval: ['-1', '4'], format: 'binary32', tolerance: 1e-6, says: /no real value at an end/ },
    { text: 'sinh(x)', interval: ['-90', '90'], format: 'binary32', tolerance: 1e-6, measure: 'relative', says: /beyond the largest binary32 number/ },
    { text: 'gamma(x)', interval: ['1', '2'], format: 'binary64', tolerance: 1e-6, says: /exp, log, log\(1 \+ x\), sin, cos, tan, sinh, cosh, tanh, asin, acos, atan/ },
  ])('$text on $interval in $format is declined with the reason', async ({ says, ...request }) => {
    const answer = await ask({ ...request, reduction: 'always' });
    expect(answer.ok ? '' : answer.error.message).toMatch(says);
  });
});
