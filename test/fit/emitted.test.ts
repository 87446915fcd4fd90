/** Emitted code, really compiled and run where the machine has the compiler, against the proven bound over samples of the interval. */
import { describe, expect, it } from 'vitest';
import { has, hasFma } from '../exhaustive/compile.ts';
import { overFloats } from '../exhaustive/everyFloat.ts';
import { CASES, fitOf, runOf } from '../exhaustive/programs.ts';
import { Q } from '../../src/expression/index.ts';
import { fitAnswer } from './engine.ts';
import { RUNNERS } from './runners.ts';

const gcc = has('gcc');

describe('emitted C over floats of the whole interval (every 200 003rd; test/exhaustive runs all)', () => {
  it.skipIf(!gcc).each(CASES.filter((_, k) => [0, 5, 9, 12].includes(k)))('$text in $measure', (c) => {
    const found = fitOf(c);
    const bound = Q.toDouble(found.error.total);
    const { worst, floats } = overFloats(runOf(c, found), 200_003, hasFma());
    expect(floats).toBeGreaterThan(30);
    expect(worst).toBeGreaterThan(0);
    expect(worst).toBeLessThanOrEqual(bound);
  });
});

const SAMPLES = Array.from({ length: 41 }, (_, k) => Math.fround(-0.75 + (1.5 * k) / 40));
describe('emitted code compiled and run', () => {
  for (const { language, ready, run } of RUNNERS) {
    const numpy = language !== 'python' || (ready && has('python3', '-c') === false);
    for (const format of ['binary64', 'binary32'] as const) {
      if (language === 'python' && format === 'binary32' && numpy) continue;
      it.skipIf(!ready)(`${language}, ${format}`, async () => {
        const answer = await fitAnswer({ text: 'sin(x)', interval: ['-3/4', '3/4'], degree: 7, format, emit: language, form: format === 'binary64' ? 'horner' : 'estrin' });
        const values = run(answer.code, SAMPLES);
        expect(values).toHaveLength(SAMPLES.length);
        // Doubles are exact enough beside an error of this size.
        const worst = Math.max(...values.map((v, k) => Math.abs(v - Math.sin(SAMPLES[k] ?? 0))));
        expect(worst).toBeLessThanOrEqual(Number(answer.bound.total));
        expect(worst).toBeGreaterThan(0.2 * Number(answer.bound.approximation));
      });
    }
  }
});
