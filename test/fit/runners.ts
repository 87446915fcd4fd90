/** Emitted functions of one or two numbers, compiled or interpreted by what the machine has, at given arguments. */
import { execFileSync } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import esbuild from 'esbuild';
import { compileAndRun, has, inFolder } from '../exhaustive/compile.ts';

export interface Runner {
  readonly language: string;
  readonly ready: boolean;
  /** Values at the arguments; at pairs of them where the function takes two. */
  readonly run: (code: string, xs: readonly number[], ys?: readonly number[]) => readonly number[];
}

/** The function's name: what stands before the bracket with its parameters. */
const nameIn = (code: string): string => /(\w+)\((?:_? ?(?:float |double |final )*[a-z]\b(?:: ?\w+)?(?:, )?){1,2}\)/.exec(code.split('\n').filter((l) => !/^\s*(\/\/|#)/.test(l)).join('\n'))?.[1] ?? '';
const written = (list: readonly number[]): string => list.map((x) => (Number.isInteger(x) && Math.abs(x) < 1e6 ? `${x}.0` : x.toExponential(17))).join(',\n');

interface Call {
  readonly code: string;
  readonly name: string;
  readonly folder: string;
  readonly xs: string;
  readonly ys: string;
  readonly two: boolean;
  readonly count: number;
}
const runner = (language: string, ready: boolean, run: (call: Call) => string): Runner => ({
  language,
  ready,
  run: (code, xs, ys) => {
    const text = inFolder((folder) => run({ code, name: nameIn(code), folder, xs: written(xs), ys: written(ys ?? []), two: ys !== undefined, count: xs.length }));
    return text.trim().split(/\s+/).map(Number);
  },
});

export const RUNNERS: readonly Runner[] = [
  runner('c', has('gcc'), ({ code, name, xs, ys, two, count }) => compileAndRun('gcc', `${code}\n#include <stdio.h>\nint main(void) { static const double xs[] = {${xs}}${two ? `, ys[] = {${ys}}` : ''}; for (int i = 0; i < ${count}; i++) printf("%.17g ", (double)${name}(xs[i]${two ? ', ys[i]' : ''})); return 0; }`, ['-O2'])),
  runner('cpp', has('g++'), ({ code, name, xs, ys, two, count }) => compileAndRun('g++', `${code}\n#include <cstdio>\nint main() { static const double xs[] = {${xs}}${two ? `, ys[] = {${ys}}` : ''}; for (int i = 0; i < ${count}; i++) std::printf("%.17g ", (double)${name}(xs[i]${two ? ', ys[i]' : ''})); }`, ['-O2', '-std=c++17'])),
  runner('rust', has('rustc'), ({ code, name, folder, xs, ys, two, count }) => {
    const type = /-> (f32|f64)/.exec(code)?.[1] ?? 'f64';
    writeFileSync(join(folder, 'main.rs'), `${code}\nfn main() { let xs: [f64; ${count}] = [${xs}]; ${two ? `let ys: [f64; ${count}] = [${ys}];` : ''} for i in 0..${count} { print!("{:e} ", ${name}(xs[i] as ${type}${two ? `, ys[i] as ${type}` : ''})); } }`);
    execFileSync('rustc', ['-O', join(folder, 'main.rs'), '-o', join(folder, 'main')], { stdio: ['ignore', 'ignore', 'ignore'] });
    return execFileSync(join(folder, 'main'), { encoding: 'utf8' });
  }),
  runner('python', has('python3'), ({ code, name, folder, xs, ys, two }) => {
    writeFileSync(join(folder, 'run.py'), `${code}\nprint(*[repr(float(${name}(*z))) for z in ${two ? `zip([${xs}], [${ys}])` : `zip([${xs}])`}])`);
    return execFileSync('python3', [join(folder, 'run.py')], { encoding: 'utf8' });
  }),
  runner('javascript', true, ({ code, name, folder, xs, ys, two }) => inNode(folder, code, name, xs, two ? ys : null)),
  runner('typescript', true, ({ code, name, folder, xs, ys, two }) => inNode(folder, esbuild.transformSync(code, { loader: 'ts' }).code, name, xs, two ? ys : null)),
  runner('java', has('javac', '-version'), ({ code, name, folder, xs, ys, two, count }) => {
    const cast = /static float/.test(code) ? '(float) ' : '';
    writeFileSync(join(folder, 'Main.java'), `class Main {\n${code}\nstatic double[] xs() { return new double[] {${xs}}; }\nstatic double[] ys() { return new double[] {${ys}}; }\npublic static void main(String[] a) { double[] xs = xs(), ys = ys(); for (int i = 0; i < ${count}; i++) System.out.print((double) ${name}(${cast}xs[i]${two ? `, ${cast}ys[i]` : ''}) + " "); } }`);
    execFileSync('javac', [join(folder, 'Main.java')], { stdio: 'ignore' });
    return execFileSync('java', ['-cp', folder, 'Main'], { encoding: 'utf8' });
  }),
];

function inNode(folder: string, code: string, name: string, xs: string, ys: string | null): string {
  writeFileSync(join(folder, 'run.cjs'), `${code}\nconst ys = [${ys ?? ''}];\nconsole.log(...[${xs}].map((x, i) => ${name}(x, ys[i])))`);
  return execFileSync(process.execPath, [join(folder, 'run.cjs')], { encoding: 'utf8' });
}
