/** Constants that code defines beside an expression: kept as symbols, listed, and filled in on request. Expected values: substitution by hand into the Maclaurin series (DLMF 4.2.19, 4.33.1, 4.33.2). */
import { describe, expect, it } from 'vitest';
import { ask } from '../fit/engine.ts';

const C = 'const double g = 9.81;\nconst double l = 2*g;\ndouble f(double t) { return exp(g*t)/l; }\n';
const at = (text: string, piece: string): { readonly text: string; readonly selection: { readonly start: number; readonly end: number } } => ({ text, selection: { start: text.indexOf(piece), end: text.indexOf(piece) + piece.length } });

async function expanded(request: Readonly<Record<string, unknown>>): Promise<{ readonly coefficients: readonly string[]; readonly constants: unknown; readonly assumptions: readonly string[] }> {
  const answer = await ask({ ask: 'expand', terms: 2, details: ['reading'], ...request });
  if (!answer.ok || !('terms' in answer) || !Array.isArray(answer.terms) || !('reading' in answer)) throw new Error(JSON.stringify(answer));
  return { coefficients: answer.terms.map((t) => t.coefficient), constants: answer.reading?.constants, assumptions: answer.assumptions };
}

describe('constants of the code around', () => {
  it('stay symbols and are listed', async () => {
    const found = await expanded({ language: 'c', variable: 't', ...at(C, 'exp(g*t)/l') });
    expect(found.coefficients).toEqual(['1/l', 'g/l']);
    expect(found.constants).toEqual([
      { name: 'g', value: '9.81', filled: false },
      { name: 'l', value: '981/50', filled: false },
    ]);
    expect(found.assumptions).toEqual([]);
  });
  it('are filled in exactly, one through the other, and stated', async () => {
    const found = await expanded({ language: 'c', constants: 'values', ...at(C, 'exp(g*t)/l') });
    // e^{gt}/(2g) = 1/(2g) + t/2 + ...; 1/19.62 = 50/981.
    expect(found.coefficients).toEqual(['50/981', '1/2']);
    expect(found.assumptions).toContain('g = 9.81');
  });
  it('never take the place of the quantity asked about', async () => {
    const text = 'x = 0.5\nk = 3\nprint(math.sinh(k*x))\n';
    expect((await expanded({ language: 'python', variable: 'x', constants: 'values', ...at(text, 'math.sinh(k*x)') })).coefficients).toEqual(['3', '9/2']);
  });
  it('leave a symbol where every one has a value', async () => {
    const text = 'x = 0.5\nprint(math.sinh(x))\n';
    expect((await expanded({ language: 'python', constants: 'values', ...at(text, 'math.sinh(x)') })).coefficients).toEqual(['1', '1/6']);
  });
  it('a variable that is assigned again is no constant', async () => {
    const text = 'double f(double t) { double g = 9.81; g = 2 * g; return exp(g*t); }\n';
    expect((await expanded({ language: 'c', variable: 't', constants: 'values', ...at(text, 'exp(g*t)') })).coefficients).toEqual(['1', 'g']);
  });
  it('a polynomial for a program takes the values', async () => {
    const answer = await ask({ language: 'c', interval: ['0', '1/10'], tolerance: '1e-4', ...at(C, 'exp(g*t)/l') });
    expect(answer).toMatchObject({ ok: true, assumptions: expect.arrayContaining(['g = 9.81']) as unknown });
  });
  it('are numbers in a bound, which says so', async () => {
    const answer = await ask({ ask: 'expand', variable: 't', terms: 2, interval: ['0', '1/100'], language: 'c', ...at(C, 'exp(g*t)/l') });
    // e^{gt} - 1 - gt is largest at the end: (e^{0.0981} - 1.0981)/19.62 = 2.5345e-4 (by hand).
    expect(answer).toMatchObject({ ok: true, assumptions: expect.arrayContaining(['g = 9.81 in the bounds and values']) as unknown, bound: { value: expect.stringMatching(/^0\.00025/) as unknown } });
  });
  it('cannot be anything else', async () => {
    expect(await ask({ ask: 'expand', constants: 'numbers', text: 'x' })).toMatchObject({ ok: false, error: { code: 'bad-request' } });
  });
});

describe('selections in code', () => {
  it.each(['*', 'xp(g*t)', 'exp(g*t)/l; '])('%s', async (piece) => {
    const answer = await ask({ ask: 'expand', variable: 't', language: 'c', ...at(C, piece) });
    if (piece.startsWith('exp')) expect(answer.ok).toBe(true);
    else expect(answer).toMatchObject({ ok: false, error: { code: 'unreadable' } });
  });
});

describe('pi in code that declares it nowhere', () => {
  const fitted = (request: Readonly<Record<string, unknown>>): ReturnType<typeof ask> => ask({ ask: 'fit', language: 'c', interval: ['-1/4', '1/4'], degree: 5, ...request });
  it('is the circle constant where numbers are needed, and the answer says so', async () => {
    const answer = await fitted({ text: 'sin(PI*x)' });
    if (!answer.ok || !('coefficients' in answer)) throw new Error('no fit');
    expect(Number(answer.coefficients[0]?.value)).toBeCloseTo(Math.PI, 3);
    expect(answer.assumptions?.[0]).toBe('PI is the circle constant 3.14159...: nothing in this text declares the name');
    const guarded = await ask({ ask: 'guard', language: 'c', text: 'pi/2 - acos(x)', interval: ['-1/2', '1/2'] });
    expect(guarded.ok && 'assumptions' in guarded ? guarded.assumptions?.[0] : '').toMatch(/^pi is the circle constant/);
  });
  it('stays a symbol where an expansion does not need its value, and where it is asked about', async () => {
    expect((await expanded({ language: 'c', variable: 'x', text: 'sin(pi*x)' })).coefficients[0]).toBe('pi');
    const alone = await fitted({ text: 'sin(pi)' });
    expect(alone.ok).toBe(true);
    expect((await fitted({ text: 'sin(pi*x)', variable: 'pi' })).ok).toBe(false);
  });
  it('is what the text declares it to be: a value, or a parameter without one', async () => {
    const defined = 'static const double pi = 3.0;\ndouble f(double x) { return sin(pi*x); }';
    const answer = await fitted(at(defined, 'sin(pi*x)'));
    expect(answer.ok && 'coefficients' in answer ? Number(answer.coefficients[0]?.value) : 0).toBeCloseTo(3, 2);
    expect((await fitted({ variable: 'x', ...at('double f(double x, double pi) { return sin(pi*x); }', 'sin(pi*x)') })).ok).toBe(false);
  });
});
