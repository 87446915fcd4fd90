/** Whole documents: the expression at the cursor or selection, what surrounds it, comments, series branches, polynomial code. */
import { beforeAll, describe, expect, it } from 'vitest';
import { Q, structureKey } from '../../../src/expression/index.ts';
import { type CodeReading, documentOffset } from '../../../src/read/code/index.ts';
import { readPlain } from '../../../src/read/index.ts';
import { PROGRAMS } from './programs.ts';
import { keyOf, reader } from './reader.ts';

const plain = (text: string): string => {
  const read = readPlain(text);
  if (!read.ok) throw new Error(read.error.message);
  return structureKey(read.value);
};
const program = (language: string): string => PROGRAMS[language] ?? '';

/** The reading with the cursor just inside the first occurrence of `where`. */
function at(text: string, language: string, where: string): CodeReading | string {
  const start = text.indexOf(where) + 1;
  const read = reader.readCodeAt(text, language, { start, end: start });
  return read.ok ? read.value : read.error.message;
}
function selected(text: string, language: string, what: string): CodeReading {
  const start = text.indexOf(what);
  const read = reader.readCodeAt(text, language, { start, end: start + what.length });
  if (!read.ok) throw new Error(read.error.message);
  return read.value;
}
const textOf = (text: string, read: CodeReading | string): string => (typeof read === 'string' ? read : text.slice(read.span.start, read.span.end));

beforeAll(async () => {
  for (const language of Object.keys(PROGRAMS)) await reader.prepare(language);
});

describe('the expression at the cursor', () => {
  it('is the largest arithmetic one', () => {
    const c = program('c');
    expect(textOf(c, at(c, 'c', 'cosh(x) - 1.0)'))).toBe('(cosh(x) - 1.0) * g / (double)n + sinf(x)');
    const python = program('python');
    expect(textOf(python, at(python, 'python', 'np.sin(x)/x'))).toBe('np.sin(x)/x');
    const rust = program('rust');
    expect(textOf(rust, at(rust, 'rust', 'exp_m1'))).toBe('self.g * t.mul_add(2.0_f32, PI as f32).exp_m1()');
  });
  it('stops at the argument of an unknown function', () => {
    const text = 'void f(double x) { printf("%g", show(sin(x) / x) + 1); }';
    expect(textOf(text, at(text, 'c', 'sin('))).toBe('sin(x) / x');
  });
  it.each([
    ['c', 'for (int i = 0; i < 3; i++) y += i + 1;', 'i + 1'],
    ['python', 'for k in range(3):\n    y = k + 1\n', 'k + 1'],
    ['julia', 'y = k + 1\n', 'k + 1'],
  ])('is none in %s counting', (language, text, where) => {
    expect(typeof at(text, language, where)).toBe('string');
    const start = text.indexOf(where) + 1;
    expect(reader.readCodeAt(text, language, { start, end: start }, { plain: true })).toMatchObject({ ok: true });
  });
  it('works without a grammar in the same way', () => {
    for (const language of ['julia', 'fortran', 'matlab', 'kotlin', 'swift', 'r']) {
      const text = program(language);
      const start = text.indexOf('sin(x)') + 1;
      const read = reader.readCodeAt(text, language, { start, end: start });
      expect(read.ok, language).toBe(true);
    }
  });
});

describe('a selection', () => {
  it('is read as it stands', () => {
    const text = program('c');
    const read = selected(text, 'c', 'x2/2.0 + x2*x2/24.0');
    expect(structureKey(read.expression)).toBe(plain('y/2 + y*y/24').replaceAll('$y', '$x2'));
    expect(read.replaceable).toBe(true);
  });
  it('may be a run of terms; it can be replaced only after a plus sign', () => {
    const text = 'double f(double x) { return 1 + exp(x) + x - sin(x) + x; }';
    expect(selected(text, 'c', 'exp(x) + x').replaceable).toBe(true);
    expect(selected(text, 'c', 'sin(x) + x').replaceable).toBe(false);
    const product = 'double f(double a, double b) { return a * exp(b) + b; }';
    expect(selected(product, 'c', 'exp(b) + b').replaceable).toBe(false);
  });
  it('of a statement means its value', () => {
    const text = program('go');
    expect(textOf(text, selected(text, 'go', 'z := x*x'))).toBe('x*x');
  });
});

describe('what surrounds an expression', () => {
  it('gives function, statement, names, constants, imports and indentation', () => {
    const text = program('c');
    const read = selected(text, 'c', '(cosh(x) - 1.0)');
    expect(read.enclosing).toMatchObject({ name: 'sag', parameters: ['x', 'n'] });
    expect(text.slice(read.statement?.start, read.statement?.end)).toMatch(/^return .*;$/);
    expect(read.indentation).toBe('  ');
    expect(read.imports.map((i) => i.path)).toEqual(['math.h']);
    expect(read.names).toEqual(expect.arrayContaining(['EPS', 'g', 'sag', 'x', 'n', 'x2']));
    expect(read.constants.map((c) => [c.name, structureKey(c.value)])).toEqual([
      ['EPS', '1/1000'],
      ['g', '981/100'],
    ]);
  });
  it.each([
    ['python', 'np.sin(x)/x', 'G', '981/100'],
    ['typescript', 'Math.sin(x)/x', 'G', '981/100'],
    ['rust', 'x.sin() / x', 'G', '981/100'],
    ['java', 'Math.sin(x)/x', 'G', '981/100'],
    ['csharp', 'Math.Sin(x)/x', 'G', '981/100'],
    ['go', 'm.Sin(x)/x', 'A', '1/1'],
    ['julia', 'sin(x)/x', 'g', '981/100'],
    ['fortran', 'sin(x)/x', 'g', '981/100'],
    ['r', 'sin(x)/x', 'g', '981/100'],
    ['kotlin', 'sin(x) / x', 'G', '981/100'],
    ['swift', 'sin(x) / x', 'g', '981/100'],
    ['hlsl', 'sin(x) * rcp(x)', 'g', '981/100'],
    ['glsl', 'fma(r, x, c0)', 'PI', '62831853/20000000'],
  ])('%s: the constant beside %s', (language, what, name, value) => {
    const read = selected(program(language), language, what);
    expect(read.constants.map((c) => [c.name, structureKey(c.value)])).toContainEqual([name, value]);
  });
  it('a local function hides the library', () => {
    const read = selected('static double sin(double x) { return x; }\ndouble f(double x) { return sin(x)/x; }', 'c', 'sin(x)/x');
    expect(structureKey(read.expression)).toBe('quotient(@sin[0]($x),$x)');
    expect(read.localFunctions).toContain('sin');
  });
  it('a local variable hides a constant', () => {
    expect(structureKey(selected('def f(pi): return pi*2.5', 'python', 'pi*2.5').expression)).toBe('product($pi,5/2)');
  });
  it('imports bring names in', () => {
    expect(structureKey(selected('from math import e, sin as s\ny = s(x) + e\n', 'python', 's(x) + e').expression)).toBe('sum(sin($x),#e)');
    expect(structureKey(selected('import numpy as n\ny = n.exp(x)\n', 'python', 'n.exp(x)').expression)).toBe('exp($x)');
    expect(structureKey(selected('use std::f64::consts::E;\nfn f(x: f64) -> f64 { E * x }', 'rust', 'E * x').expression)).toBe('product(#e,$x)');
    expect(structureKey(selected('fn f(x: f64) -> f64 { E * x }', 'rust', 'E * x').expression)).toBe('product($E,$x)');
  });
});

describe('integer types', () => {
  it.each([
    ['c', 'double f(int n) { return n/2; }', 'n/2'],
    ['go', 'package p\nfunc f(x float64) float64 { n := 3; return float64(n/2)*x }', 'n/2'],
    ['java', 'class A { double f(int n) { return n/2; } }', 'n/2'],
    ['cpp', 'double f() { auto n = 3; return n/2; }', 'n/2'],
    ['fortran', 'real function f(x)\n integer :: n\n f = n/2*x\nend function', 'n/2'],
    ['fortran', 'f = n/2\n', 'n/2'],
  ])('%s divides them with truncation: declined', (language, text, what) => {
    const start = text.indexOf(what);
    expect(reader.readCodeAt(text, language, { start, end: start + what.length })).toMatchObject({ ok: false, error: { code: 'bad-request' } });
  });
  it('literal quotients are computed and remarked', () => {
    const read = selected('double f(double x) { return 1/2*x; }', 'c', '1/2*x');
    expect(read.remarks[0]?.message).toContain('C makes it 0');
    expect(selected('y = 1/2*x', 'python', '1/2*x').remarks).toEqual([]);
  });
});

describe('float format', () => {
  it.each([
    ['c', 'double f(float x) { return (1.0f - cosf(x)) / x; }', '(1.0f - cosf(x)) / x', 'binary32'],
    ['c', 'double f(float x) { return (1.0 - cosf(x)) / x; }', '(1.0 - cosf(x)) / x', 'binary64'],
    ['c', 'float f(float x) { return x*x; }', 'x*x', 'binary32'],
    ['cpp', 'float f(float x) { return std::sin(x)/x; }', 'std::sin(x)/x', 'binary32'],
    ['rust', 'fn f(x: f32) -> f32 { x.sin() / x + 1.0 }', 'x.sin() / x + 1.0', 'binary32'],
    ['java', 'class A { float f(float x) { return (float) Math.sin(x) * 2f; } }', '(float) Math.sin(x) * 2f', 'binary32'],
    ['csharp', 'class A { float F(float x) => MathF.Sin(x)/x; }', 'MathF.Sin(x)/x', 'binary32'],
    ['go', 'package p\nfunc f(x float32) float32 { return x*x }', 'x*x', 'binary32'],
    ['python', 'y = np.sin(x)/x', 'np.sin(x)/x', 'binary64'],
    ['glsl', 'float f(float x) { return sin(x)/x; }', 'sin(x)/x', 'binary32'],
    ['fortran', 'real(8) function f(x)\n real(8), intent(in) :: x\n f = sin(x)/x\nend function', 'sin(x)/x', 'binary64'],
    ['fortran', 'y = 1.0/(1.0 + x)', '1.0/(1.0 + x)', 'binary32'],
    ['kotlin', 'fun f(x: Float): Float = x*1.5f', 'x*1.5f', 'binary32'],
    ['swift', 'func f(x: Float) -> Float { return x*1.5 }', 'x*1.5', 'binary32'],
    ['hlsl', 'half f(half x) { return x*x; }', 'x*x', 'binary16'],
  ])('%s: %s', (language, text, what, format) => {
    expect(selected(text, language, what).format.format).toBe(format);
  });
});

describe('comments', () => {
  it.each([
    ['c', 'cable sag: s = h*(cosh(x) - 1)', 'square'],
    ['python', 'sin(x)/x = 1 - x^2/6 + O(x^4).', 'near zero'],
    ['julia', '1 - x^2/6', 'direct'],
    ['fortran', 'comment x^2', 'goes on'],
    ['matlab', 'comment', 'block'],
    ['r', 'doc', 'comment'],
    ['rust', 'sin(x)/x', 'sin(x)/x'],
    ['kotlin', 'sq', 'a /* nested */ b'],
  ])('%s: %s', (language, first, second) => {
    const text = program(language);
    const comments = reader.readComments(text, language);
    for (const part of [first, second]) {
      const comment = comments.find((c) => c.text.includes(part));
      expect(comment, part).toBeDefined();
      if (!comment) continue;
      const i = comment.text.indexOf(part);
      const start = documentOffset(comment, i);
      expect(text.slice(start, start + part.length)).toBe(part);
    }
  });
  it('keeps offsets through line marks and stars', () => {
    const text = '/**\n * a = 1\n * b = 2\n */\nint x; // c\n       // d\n';
    const comments = reader.readComments(text, 'c');
    expect(comments.map((c) => c.text)).toEqual(['\na = 1\nb = 2\n', 'c\nd']);
    expect(comments.map((c) => c.doc)).toEqual([true, false]);
    const [first, second] = comments;
    if (!first || !second) throw new Error('two comments');
    expect(text.slice(documentOffset(first, first.text.indexOf('b')), documentOffset(first, first.text.indexOf('b')) + 5)).toBe('b = 2');
    expect(text[documentOffset(second, 2)]).toBe('d');
    expect(text.slice(second.beside?.start, second.beside?.end)).toBe('int x;');
  });
});

describe('series beside a direct form', () => {
  const direct = plain('sin(x)/x');
  it.each([
    ['cpp', plain('1 - x*x/6'), direct],
    ['python', plain('1 - x^2/6'), direct],
    ['javascript', plain('1 - x*x/6'), direct],
    ['typescript', plain('1 - x*x/6'), direct],
    ['rust', plain('1 - (x*x)/6').replace('quotient(product($x,$x),6/1)', 'quotient(product($x,$x),6/1)'), direct],
    ['csharp', plain('1 - x*x/6'), direct],
    ['go', plain('1 - x*x/6'), null],
    ['julia', plain('1 - x^2/6'), direct],
    ['matlab', null, direct],
    ['r', plain('1 - x^2/6'), direct],
    ['swift', plain('1 - x*x/6'), null],
    ['fortran', plain('1 - x^2/6 + x^4/120'), null],
  ])('%s', (language, series, whole) => {
    const branches = reader.readBranches(program(language), language);
    expect(branches.length).toBeGreaterThan(0);
    const [first] = branches;
    expect(first?.condition?.kind).toBe('relation');
    expect(first?.negated).toBe(false);
    if (series !== null) expect(structureKey(first?.series ?? { kind: 'dots' })).toBe(series);
    if (whole !== null) expect(structureKey(first?.direct ?? { kind: 'dots' })).toBe(whole);
  });
  it('sees a reversed choice', () => {
    const [branch] = reader.readBranches('double f(double x) { return fabs(x) > 1e-3 ? sin(x)/x : 1 - x*x/6; }', 'c');
    expect(branch?.negated).toBe(true);
    expect(structureKey(branch?.direct ?? { kind: 'dots' })).toBe(direct);
  });
});

describe('polynomial code', () => {
  const coefficients = (text: string, language: string): readonly (readonly string[])[] => reader.readPolynomials(text, language).map((p) => p.coefficients.map(Q.toText));
  it.each([
    ['c', 'double p(double x) { return 1.0 + x*(0.5 + x*(0.25 + x*0.125)); }', ['1', '1/2', '1/4', '1/8']],
    ['c', 'double p(double x) { double x2 = x*x; return x - x*x2/6.0; }', ['0', '1', '0', '-1/6']],
    ['c', 'float p(float x) { float r = 0.5f; r = fmaf(r, x, 0.25f); r = fmaf(r, x, 1.0f); return r; }', ['1', '1/4', '1/2']],
    ['rust', 'fn p(x: f64) -> f64 { x.mul_add(x.mul_add(0.5, 0.25), 1.0) }', ['1', '1/4', '1/2']],
    ['python', 'def p(x):\n    y = np.polyval([0.5, 0.25, 1], x)\n    return y\n', ['1', '1/4', '1/2']],
    ['hlsl', 'float p(float x) { return mad(mad(0.5, x, 0.25), x, 1); }', ['1', '1/4', '1/2']],
    ['glsl', 'float p(float x) { float r = -0.5; r = r * x + 0.25; r *= x; r -= 1.0; return r; }', ['-1', '1/4', '-1/2']],
    ['julia', 'p(x) = evalpoly(x, (1.0, 0.25, 0.5))', ['1', '1/4', '1/2']],
    ['fortran', 'real function p(x)\n p = 1.0 + x*(0.25 + 0.5*x)\nend function', ['1', '1/4', '1/2']],
    ['c', 'static const float c[] = {1.0f, 0.25f, 0.5f};\nfloat p(float x) { return c[0] + x*(c[1] + x*c[2]); }', ['1', '1/4', '1/2']],
    ['c', '#define A 0.25\nstatic const double b = -1.0/2;\ndouble p(double x) { return 1.0 + x*(A + x*b); }', ['1', '1/4', '-1/2']],
    ['python', 'c = [0.5, 0.25, 1]\ndef p(x):\n    return np.polyval(c, x)\n', ['1', '1/4', '1/2']],
    ['c', '(1.27323954f * x) - (0.405284735f * x * x)', ['0', '63661977/50000000', '-81056947/200000000']],
  ])('%s: %s', (language, text, expected) => {
    expect(coefficients(text, language)).toEqual([expected]);
  });
  it('passes over counting and several variables', () => {
    expect(coefficients('int f(int i) { return i*i + i + 1; }', 'c')).toEqual([]);
    expect(coefficients('double f(double a, double x) { return a*x*x + x; }', 'c')).toEqual([]);
  });
  it('is found in loops', () => {
    expect(coefficients('void f(double *x, double *y) { for (int i = 0; i < 9; i++) { double t = x[i]; y[i] = t - t*t*t/6; } }', 'c')).toEqual([['0', '1', '0', '-1/6']]);
  });
});

describe('very long sums', () => {
  it.each(['c', 'python', 'rust', 'javascript', 'julia'])('%s', (language) => {
    const read = reader.readCode(`${'x + '.repeat(3_000)}x`, language);
    expect(read.ok && read.value.expression.kind === 'sum' && read.value.expression.terms.length).toBe(3_001);
  });
});

describe('a text of several statements', () => {
  it('is the value it gives, locals filled in', () => {
    const read = reader.readCode('double f(double x) { double x2 = x*x; double s = sin(x2); return s / x2; }', 'c');
    expect(read.ok && structureKey(read.value.expression)).toBe(plain('sin(x*x)/(x*x)'));
  });
  it('does not fill in what a loop changes', () => {
    expect(reader.readCode('double f(double x, int n) { double s = 0; for (int i = 0; i < n; i++) s += x; return s / x; }', 'c')).toMatchObject({ ok: false });
    expect(reader.readCode('double f(double x) { double s = 0; while (s < 3) s += x; return s / x; }', 'c')).toMatchObject({ ok: false });
  });
  it('carries out a loop whose rounds are known', () => {
    expect(keyOf('double f(double x) { double s = 0; for (int i = 0; i < 3; i++) s += x; return s / x; }', 'c')).toBe(keyOf('double f(double x) { return (((0 + x) + x) + x) / x; }', 'c'));
  });
});
