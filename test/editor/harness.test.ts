/** The test harness is a C program that compiles and measures what it says, whatever language the expression stood in. */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import type { Consultation } from '../../src/editor/consultant.ts';
import { testHarness } from '../../src/editor/testHarness.ts';
import { createEngine } from '../../src/engine.ts';
import { createDesk } from '../../src/worker/desk/index.ts';
import type { ConsultAnswer, TranslationAnswer } from '../../src/worker/desk/types.ts';

const loadFile = (): Promise<never> => Promise.reject(new Error('no grammar here'));
const desk = createDesk({ engine: createEngine({ loadFile }), loadFile });

async function harness(language: string, text: string, interval: readonly [string, string]): Promise<string | null> {
  const selection = { start: 0, end: text.length };
  const told = (await desk.ask({ desk: 'consult', text, language, selection, chosen: { variable: 'x', point: '0', terms: 3, interval }, details: ['reading'] })) as ConsultAnswer;
  if (!told.answer.ok || !told.answer.reading) return null;
  const { code } = (await desk.ask({ desk: 'translation', latex: told.answer.reading.latex, language: 'c' })) as TranslationAnswer;
  const consultation: Consultation = { ...told, uri: 'file:///a', version: 1, selection, language };
  return testHarness(code, consultation);
}

const compiler = spawnSync('cc', ['--version']).status === 0;

describe('test harness', () => {
  it.each([
    ['latex', '\\frac{\\sin x}{x}'],
    ['julia', 'sin(x)/x'],
    ['fortran', 'sin(x)/x'],
  ])('of %s says the function in C', async (language, text) => {
    const program = await harness(language, text, ['1/4', '1/2']);
    expect(program).toMatch(/reference\(long double x\) \{ return sinl\(x\) ?\/ ?x; \}/);
  });

  it('is not written over an interval that C has no literals for', async () => expect(await harness('latex', '\\frac{\\sin x}{x}', ['0', '\\pi/4'])).toBeNull());
  it('is not written where the function has a parameter', async () => expect(await harness('latex', '\\sin(a x)', ['0', '1'])).toBeNull());

  // The sum leaves out x^6/5040 at first: at 1/2 that is 3.1e-6, and the series alternates (Leibniz).
  it.skipIf(!compiler)('measures the error that the next term predicts', async () => {
    const folder = mkdtempSync(path.join(tmpdir(), 'leading-order-harness-'));
    const program = await harness('latex', '\\frac{\\sin x}{x}', ['0.49', '1/2']);
    writeFileSync(path.join(folder, 'harness.c'), program ?? '');
    const built = spawnSync('cc', ['-O2', '-Wall', '-Werror', 'harness.c', '-lm', '-o', 'harness'], { cwd: folder, encoding: 'utf8' });
    expect(built.stderr).toBe('');
    const told = spawnSync(path.join(folder, 'harness'), { encoding: 'utf8' }).stdout;
    const [, error, where] = /largest error (\S+) at (\S+)/.exec(told) ?? [];
    expect(Number(where)).toBe(0.5);
    expect(Number(error)).toBeLessThan(0.5 ** 6 / 5040);
    expect(Number(error)).toBeGreaterThan(0.5 ** 6 / 5040 - 0.5 ** 8 / 362_880);
  });
});
