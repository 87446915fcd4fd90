/** Guarded code compiled and run in each language, against x - sin x by its series (DLMF 4.19.1) in doubles, which does not cancel. */
import { describe, expect, it } from 'vitest';
import { has } from '../exhaustive/compile.ts';
import { ask } from '../fit/engine.ts';
import { RUNNERS } from '../fit/runners.ts';

const SAMPLES = [-1, -0.6875, -0.25, -0.0078125, -7.62939453125e-6, 0, 9.313225746154785e-10, 0.001953125, 0.125, 0.5, 0.875, 1];
const exact = (x: number): number => {
  let [sum, term] = [0, (x * x * x) / 6];
  for (let k = 3; Math.abs(term) > Math.abs(sum) * 2 ** -60; k += 2) {
    sum += term;
    term *= -(x * x) / ((k + 1) * (k + 2));
  }
  return sum;
};

describe('guards in every language', () => {
  for (const { language, ready, run } of RUNNERS) {
    for (const format of ['binary64', 'binary32'] as const) {
      if (language === 'python' && format === 'binary32' && (!ready || !has('python3', '-c'))) continue;
      it.skipIf(!ready)(`x - sin(x) in ${language}, ${format}`, async () => {
        const answer = await ask({ ask: 'guard', text: 'x - sin(x)', interval: ['-1', '1'], emit: language, format });
        if (!answer.ok || !('ranges' in answer)) throw new Error(answer.ok ? 'no guard' : answer.error.message);
        const values = run(`${(answer.imports ?? []).join('\n')}\n${answer.code}`, SAMPLES);
        expect(values).toHaveLength(SAMPLES.length);
        const bound = Number(answer.bound.whole) + 2 ** -50;
        values.forEach((value, k) => {
          const f = exact(SAMPLES[k] ?? 0);
          expect(Math.abs(value - f)).toBeLessThanOrEqual(bound * Math.abs(f));
        });
      });
    }
  }
});
