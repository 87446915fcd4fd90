/** Emitted code, really compiled and run where the machine has the compiler, against the proven bound over samples of the interval. */
import { execFileSync } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import esbuild from 'esbuild';
import { describe, expect, it } from 'vitest';
import { compileAndRun, has, hasFma, inFolder } from '../exhaustive/compile.ts';
import { overFloats } from '../exhaustive/everyFloat.ts';
import { CASES, fitOf, runOf } from '../exhaustive/programs.ts';
import { Q } from '../../src/expression/index.ts';
import { fitAnswer } from './engine.ts';

const gcc = has('gcc');
if (!gcc) console.warn('gcc is absent: emitted C is not run');

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
const list = SAMPLES.map((x) => x.toExponential(12)).join(', ');
const nameIn = (code: string): string => /(\w+)\(_? ?(?:float |double |final )*x/.exec(code.split('\n').filter((l) => !/^\s*(\/\/|#)/.test(l)).join('\n'))?.[1] ?? '';

interface Runner {
  readonly language: string;
  readonly ready: boolean;
  readonly run: (code: string, name: string, folder: string) => string;
}
const RUNNERS: readonly Runner[] = [
  { language: 'c', ready: gcc, run: (code, name) => compileAndRun('gcc', `${code}\n#include <stdio.h>\nint main(void) { const double xs[] = {${list}}; for (int i = 0; i < 41; i++) printf("%.17g ", (double)${name}(xs[i])); return 0; }`, ['-O2']) },
  { language: 'cpp', ready: has('g++'), run: (code, name) => compileAndRun('g++', `${code}\n#include <cstdio>\nint main() { const double xs[] = {${list}}; for (double x : xs) std::printf("%.17g ", (double)${name}(x)); }`, ['-O2', '-std=c++17']) },
  {
    language: 'rust',
    ready: has('rustc'),
    run: (code, name, folder) => {
      writeFileSync(join(folder, 'main.rs'), `${code}\nfn main() { for x in [${list}] { print!("{:e} ", ${name}(x)); } }`);
      execFileSync('rustc', ['-O', join(folder, 'main.rs'), '-o', join(folder, 'main')], { stdio: 'ignore' });
      return execFileSync(join(folder, 'main'), { encoding: 'utf8' });
    },
  },
  { language: 'python', ready: has('python3'), run: (code, name) => execFileSync('python3', ['-c', `${code}\nprint(*[repr(float(${name}(x))) for x in [${list}]])`], { encoding: 'utf8' }) },
  { language: 'javascript', ready: true, run: (code, name) => execFileSync(process.execPath, ['-e', `${code}\nconsole.log(...[${list}].map(${name}))`], { encoding: 'utf8' }) },
  { language: 'typescript', ready: true, run: (code, name) => execFileSync(process.execPath, ['-e', `${esbuild.transformSync(code, { loader: 'ts' }).code}\nconsole.log(...[${list}].map(${name}))`], { encoding: 'utf8' }) },
  {
    language: 'java',
    ready: has('javac', '-version'),
    run: (code, name, folder) => {
      writeFileSync(join(folder, 'Main.java'), `class Main {\n${code}\npublic static void main(String[] a) { for (double x : new double[] {${list}}) System.out.print(${name}(${/float x/.test(code) ? '(float) x' : 'x'}) + " "); } }`);
      execFileSync('javac', [join(folder, 'Main.java')], { stdio: 'ignore' });
      return execFileSync('java', ['-cp', folder, 'Main'], { encoding: 'utf8' });
    },
  },
];

describe('emitted code compiled and run', () => {
  for (const { language, ready, run } of RUNNERS) {
    const numpy = language !== 'python' || (ready && has('python3', '-c') === false);
    for (const format of ['binary64', 'binary32'] as const) {
      if (language === 'python' && format === 'binary32' && numpy) continue;
      it.skipIf(!ready)(`${language}, ${format}`, async () => {
        const answer = await fitAnswer({ text: 'sin(x)', interval: ['-3/4', '3/4'], degree: 7, format, emit: language, form: format === 'binary64' ? 'horner' : 'estrin' });
        const values = inFolder((folder) => run(answer.code, nameIn(answer.code), folder)).trim().split(/\s+/).map(Number);
        expect(values).toHaveLength(SAMPLES.length);
        // Doubles are exact enough beside an error of this size.
        const worst = Math.max(...values.map((v, k) => Math.abs(v - Math.sin(SAMPLES[k] ?? 0))));
        expect(worst).toBeLessThanOrEqual(Number(answer.bound.total));
        expect(worst).toBeGreaterThan(0.2 * Number(answer.bound.approximation));
      });
    }
  }
});
