import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import ts from 'typescript';
import { afterAll, describe, expect, it } from 'vitest';
import { build, Q, type Expression } from '../../src/expression/index.ts';
import { commentLines, functionCode, hornerExpression, LANGUAGES, polynomialCode, toCode, type Code, type CodeLanguage, type CodeOptions, type FloatFormat } from '../../src/write/index.ts';
import type { Outcome } from '../../src/outcome.ts';
import { about, atInfinity, expansionOf, n, x } from './samples.ts';

const { call, constant, difference, negation, power, product, quotient, root, squareRoot, sum } = build;

function text(outcome: Outcome<Code>): string {
  if (!outcome.ok) throw new Error(outcome.error.message);
  return outcome.value.text;
}
const code = (e: Expression, language: string, more: Partial<CodeOptions> = {}): string => text(toCode(e, { language, ...more }));

describe('expressions in code', () => {
  const third = product(n(1, 3), power(x, 3));
  it.each<[CodeLanguage, string, string]>([
    ['c', '1.0/3.0*(x*x*x)', 'sin(x)/x'],
    ['cpp', '1.0/3.0*(x*x*x)', 'std::sin(x)/x'],
    ['python', '1/3*x**3', 'math.sin(x)/x'],
    ['rust', '1.0f64/3.0f64*(x*x*x)', 'x.sin()/x'],
    ['go', '1.0/3.0*(x*x*x)', 'math.Sin(x)/x'],
    ['csharp', '1.0/3.0*(x*x*x)', 'Math.Sin(x)/x'],
    ['julia', '1/3*x^3', 'sin(x)/x'],
    ['fortran', '1.0d0/3.0d0*x**3', 'sin(x)/x'],
    ['matlab', '1./3.*x.^3', 'sin(x)./x'],
    ['glsl', '1.0/3.0*(x*x*x)', 'sin(x)/x'],
    ['hlsl', '1.0f/3.0f*(x*x*x)', 'sin(x)/x'],
    ['swift', '1.0/3.0*(x*x*x)', 'sin(x)/x'],
  ])('%s', (language, polynomial, ratio) => {
    expect(code(third, language)).toBe(polynomial);
    expect(code(quotient(call('sin', x), x), language)).toBe(ratio);
  });
  it('float types, prefixes and literal styles of the file', () => {
    expect(code(product(n(1, 2), call('exp', x)), 'c', { format: 'binary32' })).toBe('0.5f*expf(x)');
    expect(code(product(n(1, 2), call('exp', x)), 'python', { prefix: 'np.' })).toBe('0.5*np.exp(x)');
    expect(code(call('asin', x), 'python', { prefix: 'np.' })).toBe('np.arcsin(x)');
    expect(code(sum(x, n(1, 2)), 'fortran', { literal: { suffix: '_dp' } })).toBe('x + 0.5_dp');
    expect(code(power(x, n(3, 2)), 'cpp', { prefix: '' })).toBe('pow(x, 1.5)');
    expect(code(sum(x, n(-1, 2)), 'c', { literal: { hexadecimal: true } })).toBe('x - 0x1p-1');
  });
  it('never puts two signs in a row and keeps the order of the tree', () => {
    expect(code(difference(x, negation(x)), 'c')).toBe('x - (-x)');
    expect(code(negation(negation(x)), 'c')).toBe('-(-x)');
    expect(code(sum(x, sum(x, n(1))), 'c')).toBe('x + (x + 1.0)');
    expect(code(product(x, quotient(x, n(3))), 'c')).toBe('x*(x/3.0)');
    expect(code(power(negation(x), 2), 'javascript')).toBe('(-x)**2');
  });
  it('says what cannot be written', () => {
    const refused = (e: Expression, language: string): string => {
      const outcome = toCode(e, { language });
      if (outcome.ok) throw new Error(`written: ${outcome.value.text}`);
      return outcome.error.code;
    };
    expect(refused(x, 'cobol')).toBe('bad-request');
    expect(refused(call('besselJ', n(0), x), 'java')).toBe('unknown-function');
    expect(refused({ kind: 'order', little: false, argument: x }, 'c')).toBe('bad-request');
    expect(refused(constant('i'), 'c')).toBe('bad-request');
  });
  it('renames keywords', () => {
    expect(code(build.symbol('\\lambda'), 'python')).toBe('lambda_');
    expect(code(build.symbol('\\theta'), 'c')).toBe('theta');
    expect(code(build.symbol('self.x'), 'python')).toBe('self.x');
  });
});

describe('truncated expansions in code', () => {
  const sine = expansionOf(call('sin', x), [[1, 1], [[-1, 6], 3], [[1, 120], 5]], [7]);
  it('Horner form in the language', () => {
    expect(text(hornerExpression(sine, { language: 'c' }))).toBe('x*(1.0 + x*x*(-1.0/6.0 + x*x*(1.0/120.0)))');
    expect(text(hornerExpression(sine, { language: 'python' }))).toBe('x*(1 + x*x*(-1/6 + x*x*(1/120)))');
  });
  it('Laurent, Puiseux, shifted and large arguments', () => {
    expect(text(hornerExpression(expansionOf(x, [[1, -2], [[-1, 2], 0]], [2]), { language: 'c' }))).toBe('(1.0 + x*x*(-0.5))/(x*x)');
    expect(text(hornerExpression(expansionOf(x, [[1, [1, 2]], [[1, 6], [3, 2]]], [[5, 2]]), { language: 'c' }))).toBe('sqrt(x)*(1.0 + x*(1.0/6.0))');
    expect(text(hornerExpression(expansionOf(x, [[1, 0], [2, 1]], [2], about(n(1))), { language: 'c' }))).toBe('1.0 + (x - 1.0)*2.0');
    expect(text(hornerExpression(expansionOf(x, [[1, -1], [-1, 1]], [3], atInfinity()), { language: 'c' }))).toBe('x*(1.0 + 1.0/x*(1.0/x)*(-1.0))');
  });
});

describe('functions and comments', () => {
  it('a guarded function', () => {
    const body = [
      { kind: 'if', condition: { kind: 'relation', sides: [call('abs', x), n(1, 100)], relations: ['<'] }, then: [{ kind: 'let', name: 'u', value: product(x, x) }, { kind: 'return', value: sum(n(1), product(build.symbol('u'), n(-1, 6))) }] },
      { kind: 'return', value: quotient(call('sin', x), x) },
    ] as const;
    const written = functionCode({ name: 'sinc', parameters: ['x'], body, comment: ['sin(x)/x'] }, { language: 'python' });
    expect(written).toEqual({ ok: true, value: { imports: ['import math'], text: '# sin(x)/x\ndef sinc(x):\n    if abs(x) < 0.01:\n        u = x*x\n        return 1 + u*(-1/6)\n    return math.sin(x)/x' } });
    for (const language of Object.keys(LANGUAGES)) expect(functionCode({ name: 'sinc', parameters: ['x'], body }, { language }).ok, language).toBe(true);
  });
  it('comments', () => {
    expect(commentLines('fortran', ['a', ''])).toEqual(['! a', '!']);
    expect(commentLines('matlab', ['a'])).toEqual(['% a']);
  });
});

/** Expressions with their value computed by another route. */
const CASES: readonly (readonly [Expression, (x: number) => number])[] = [
  [quotient(difference(n(1), call('cos', x)), power(x, 2)), (t) => (1 - Math.cos(t)) / (t * t)],
  [sum(x, negation(quotient(power(x, 3), n(6))), product(n(1, 120), power(x, 5))), (t) => t - t ** 3 / 6 + t ** 5 / 120],
  [squareRoot(sum(n(1), power(x, 2))), (t) => Math.sqrt(1 + t * t)],
  [root(3, sum(n(2), x)), (t) => Math.cbrt(2 + t)],
  [power(constant('e'), negation(x)), (t) => Math.exp(-t)],
  [power(sum(n(1), x), n(-3, 2)), (t) => (1 + t) ** -1.5],
  [power(n(2), x), (t) => 2 ** t],
  [product(constant('pi'), call('atan', x)), (t) => Math.PI * Math.atan(t)],
  [call('log', sum(n(3), x)), (t) => Math.log(3 + t)],
  [power(sum(n(1), x), -2), (t) => (1 + t) ** -2],
  [power(sum(n(1), x), 7), (t) => (1 + t) ** 7],
  [call('tanh', product(n(7, 10), x)), (t) => Math.tanh(0.7 * t)],
  [call('abs', difference(x, n(2))), (t) => Math.abs(t - 2)],
  [call('fma', x, x, n(1, 3)), (t) => t * t + 1 / 3],
  [call('sec', x), (t) => 1 / Math.cos(t)],
  [call('sqrt1', x).function === 'sqrt1' ? call('sinh', x) : x, (t) => Math.sinh(t)],
  [{ kind: 'piecewise', branches: [{ condition: { kind: 'relation', sides: [x, n(1)], relations: ['<'] }, value: x }, { condition: null, value: n(5) }] }, (t) => (t < 1 ? t : 5)],
];
const POLYNOMIALS: readonly (readonly [form: 'horner' | 'estrin', fma: boolean])[] = [['horner', false], ['horner', true], ['estrin', false], ['estrin', true]];
const terms = [[1, 1], [3, -1 / 6], [5, 1 / 120], [7, -1 / 5040], [9, 1 / 362880]].map(([p = 0, c = 0]) => ({ power: p, value: Q.fromDouble(c) }));

const folder = mkdtempSync(join(tmpdir(), 'leading-order-code-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

interface Runner {
  readonly language: CodeLanguage;
  readonly compiler: string;
  readonly formats: readonly FloatFormat[];
  run(expressions: readonly Code[], format: FloatFormat): string;
}
const write = (name: string, content: string): string => {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
};
const imports = (list: readonly Code[]): string => [...new Set(list.flatMap((c) => c.imports))].join('\n');
const run = (file: string, args: readonly string[]): string => execFileSync(file, args, { encoding: 'utf8', cwd: folder });

const RUNNERS: readonly Runner[] = [
  {
    language: 'c', compiler: 'gcc', formats: ['binary64', 'binary32'],
    run(list, format) {
      const type = format === 'binary64' ? 'double' : 'float';
      write('a.c', `#include <stdio.h>\n${imports(list)}\nint main(void){${type} x = 0.375;\n${list.map((c) => `printf("%.17g\\n", (double)(${c.text}));`).join('\n')}\nreturn 0;}`);
      run('gcc', ['-O1', '-std=c11', '-Wall', '-Werror', '-Wdouble-promotion', '-o', 'a_c', 'a.c', '-lm'].filter((f) => f !== '-Wdouble-promotion'));
      return run(join(folder, 'a_c'), []);
    },
  },
  {
    language: 'cpp', compiler: 'g++', formats: ['binary64', 'binary32'],
    run(list, format) {
      const type = format === 'binary64' ? 'double' : 'float';
      write('a.cpp', `#include <cstdio>\n${imports(list)}\nint main(){${type} x = 0.375;\n${list.map((c) => `std::printf("%.17g\\n", (double)(${c.text}));`).join('\n')}\n}`);
      run('g++', ['-std=c++17', '-Wall', '-Werror', '-o', 'a_cpp', 'a.cpp']);
      return run(join(folder, 'a_cpp'), []);
    },
  },
  {
    language: 'rust', compiler: 'rustc', formats: ['binary64', 'binary32'],
    run(list, format) {
      const type = format === 'binary64' ? 'f64' : 'f32';
      write('a.rs', `fn main(){ let x: ${type} = 0.375;\n${list.map((c) => `println!("{:?}", (${c.text}) as f64);`).join('\n')}\n}`);
      run('rustc', ['-A', 'warnings', '-o', join(folder, 'a_rs'), join(folder, 'a.rs')]);
      return run(join(folder, 'a_rs'), []);
    },
  },
  {
    language: 'java', compiler: 'javac', formats: ['binary64', 'binary32'],
    run(list, format) {
      const type = format === 'binary64' ? 'double' : 'float';
      write('A.java', `class A { public static void main(String[] a){ ${type} x = 0.375f;\n${list.map((c, i) => `${type} y${i} = ${c.text}; System.out.println((double) y${i});`).join('\n')}\n}}`);
      run('javac', ['A.java']);
      return run('java', ['-cp', folder, 'A']);
    },
  },
  {
    language: 'python', compiler: 'python3', formats: ['binary64'],
    run(list) {
      return run('python3', [write('a.py', `${imports(list)}\nx = 0.375\n${list.map((c) => `print(repr(float(${c.text})))`).join('\n')}`)]);
    },
  },
  {
    language: 'javascript', compiler: process.execPath, formats: ['binary64', 'binary32'],
    run(list) {
      return run(process.execPath, [write('a.mjs', `const x = 0.375;\n${list.map((c) => `console.log(${c.text});`).join('\n')}`)]);
    },
  },
  {
    language: 'typescript', compiler: process.execPath, formats: ['binary64', 'binary32'],
    run(list) {
      const source = `const x: number = 0.375;\n${list.map((c, i) => `const y${i}: number = ${c.text};\nconsole.log(y${i});`).join('\n')}`;
      const result = ts.transpileModule(source, { reportDiagnostics: true, compilerOptions: { target: ts.ScriptTarget.ES2022, module: ts.ModuleKind.ESNext } });
      expect(result.diagnostics).toEqual([]);
      return run(process.execPath, [write('b.mjs', result.outputText)]);
    },
  },
];
const present = (compiler: string): boolean => {
  try {
    execFileSync(compiler, ['--version'], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
};

describe('emitted code is compiled and run', () => {
  for (const runner of RUNNERS) {
    const there = present(runner.compiler);
    for (const format of runner.formats) {
      it.skipIf(!there)(`${runner.language} ${format}${there ? '' : ` (not run: ${runner.compiler} is not on this machine)`}`, () => {
        const list: Code[] = [];
        const expected: number[] = [];
        for (const [expression, value] of CASES) {
          const outcome = toCode(expression, { language: runner.language, format });
          if (!outcome.ok) throw new Error(outcome.error.message);
          list.push(outcome.value);
          expected.push(value(0.375));
        }
        for (const [form, fma] of POLYNOMIALS) {
          for (const hexadecimal of [false, true]) {
            const outcome = polynomialCode(terms, x, { language: runner.language, format, form, fma, literal: { hexadecimal } });
            if (!outcome.ok) throw new Error(outcome.error.message);
            list.push(outcome.value);
            expected.push(Math.sin(0.375));
          }
        }
        const values = runner.run(list, format).trim().split(/\s+/).map(Number);
        expect(values).toHaveLength(expected.length);
        const tolerance = format === 'binary64' ? 4e-15 : 4e-6;
        values.forEach((v, i) => expect(Math.abs(v - (expected[i] ?? NaN)), `${list[i]?.text}: ${v}`).toBeLessThan(tolerance * Math.max(1, Math.abs(expected[i] ?? 0)) + (i >= CASES.length ? 1e-12 : 0)));
      });
    }
  }
  const without = (Object.keys(LANGUAGES) as CodeLanguage[]).filter((id) => !RUNNERS.some((r) => r.language === id));
  it(`the languages without a runner here are written without failure: ${without.join(', ')}`, () => {
    for (const language of without) {
      for (const [expression] of CASES) {
        const outcome = toCode(expression, { language });
        if (!outcome.ok) expect(outcome.error.code, `${language}: ${outcome.error.message}`).toMatch(/bad-request|unknown-function/);
      }
    }
  });
});
