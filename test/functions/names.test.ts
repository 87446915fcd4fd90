import { describe, expect, it } from 'vitest';
import { build } from '../../src/expression/index.ts';
import { allFunctions, codeCall, codeWriting, describe as description, lookupCode, lookupLatex, lookupLatexLetter, lookupPlain } from '../../src/functions/index.ts';

const x = build.symbol('x');
const nu = build.symbol('nu');

describe('names of functions', () => {
  it('gives every description one id, one title and a numeric writing', () => {
    const ids = allFunctions().map((d) => d.id);
    expect(new Set(ids).size).toBe(ids.length);
    for (const d of allFunctions()) {
      const count = typeof d.arity === 'number' ? d.arity : d.arity[0];
      expect(d.title.length).toBeGreaterThan(2);
      expect(d.names.mpmath(Array.from({ length: count }, (_, i) => (d.id === 'hypergeometric' && i < 2 ? '0' : `a${i}`)))).toMatch(/^[^\s].*[)\]]$/);
      expect(description(d.id)).toBe(d);
    }
  });

  it('finds every library name in its own language', () => {
    for (const d of allFunctions()) {
      for (const [family, list] of Object.entries(d.names.code)) {
        for (const name of list) expect(lookupCode(family, name), `${family} ${name}`).not.toBeNull();
      }
    }
  });

  it('finds LaTeX names however they are set', () => {
    expect(lookupLatex('\\mathrm{erf}')?.id).toBe('erf');
    expect(lookupLatex('\\operatorname*{arsinh}')?.id).toBe('asinh');
    expect(lookupLatex('\\Gamma', { indices: 0, arguments: 1 })?.id).toBe('gamma');
    expect(lookupLatex('\\Gamma', { indices: 0, arguments: 2 })?.id).toBe('upperGamma');
    expect(lookupLatex('\\operatorname{Li}', { indices: 1, place: 'subscript', arguments: 1 })?.id).toBe('polylog');
    expect(lookupLatex('\\operatorname{Li}', { indices: 0, arguments: 1 })?.id).toBe('offsetLogIntegral');
    expect(lookupLatexLetter('K', { indices: 1, place: 'subscript', arguments: 1 })?.id).toBe('besselK');
    expect(lookupLatexLetter('K', { indices: 0, arguments: 1 })?.id).toBe('ellipticK');
    expect(lookupLatexLetter('Z', { indices: 0, arguments: 1 })).toBeNull();
    expect(lookupPlain('arctan')?.id).toBe('atan');
    expect(lookupPlain('nosuchfunction')).toBeNull();
  });

  // Argument orders: the libraries' own reference manuals; common practice.
  it('keeps the argument order of each library', () => {
    expect(codeCall('r', 'besselJ', [x, nu])).toMatchObject({ function: 'besselJ', args: [nu, x] });
    expect(codeCall('python', 'j0', [x])).toMatchObject({ function: 'besselJ', args: [build.number(0), x] });
    expect(codeCall('matlab', 'expint', [x])).toMatchObject({ function: 'expIntegralE', args: [build.number(1), x] });
    expect(codeCall('cpp', 'expint', [x])).toMatchObject({ function: 'expIntegralEi', args: [x] });
    expect(codeCall('typescript', 'log1p', [x])).toMatchObject({ function: 'log1p' });
    expect(codeCall('python', 'ellipk', [x])).toMatchObject({ function: 'ellipticKParameter' });
    expect(codeCall('cpp', 'comp_ellint_1', [x])).toMatchObject({ function: 'ellipticK' });
    expect(codeCall('python', 'hyp2f1', [x, x, x, x])).toMatchObject({ function: 'hypergeometric', args: [build.number(2), build.number(1), x, x, x, x] });
    expect(codeCall('python', 'sin', [x, x])).toBeNull();
    expect(codeCall('glsl', 'atan', [nu, x])).toMatchObject({ function: 'atan2' });
    expect(codeCall('glsl', 'atan', [x])).toMatchObject({ function: 'atan' });
    expect(codeWriting('r', 'besselJ', [nu, x])).toEqual({ name: 'besselJ', args: [x, nu] });
    expect(codeWriting('java', 'asinh', [x])).toBeNull();
    expect(codeWriting('rust', 'log', [x])).toEqual({ name: 'ln', args: [x] });
  });
});
