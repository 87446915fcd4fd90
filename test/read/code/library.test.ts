/**
 * The library names of each language, as its standard documentation lists them, are read as calls of the functions they are.
 * Lists copied by hand, from memory of the named documents: C: ISO/IEC 9899:2024, 7.12.4 to 7.12.8. Python: docs.python.org, module math. JavaScript: ECMA-262, 21.3.2.
 * Rust: documentation of f64. Java: java.lang.Math. .NET: System.Math. Go: package math. Fortran: ISO/IEC 1539-1, 16.7. Julia: manual, "Mathematical Operations and
 * Elementary Functions". MATLAB: "Elementary Math". R: ?Trig, ?Hyperbolic, ?MathFun, ?log. GLSL: 4.60, 8.1 and 8.2. HLSL: "Intrinsic Functions". Kotlin: kotlin.math. Swift: Foundation.
 */
import { beforeAll, describe, expect, it } from 'vitest';
import { walk } from '../../../src/expression/index.ts';
import { reader } from './reader.ts';

const ONE_ARGUMENT: Readonly<Record<string, { readonly write: (name: string) => string; readonly names: string }>> = {
  c: { write: (n) => `${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp exp2 expm1 log log2 log10 log1p sqrt cbrt fabs erf erfc tgamma lgamma sinf expf logf sqrtf tanhf sinl exp10 sinpi cospi' },
  cpp: { write: (n) => `std::${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp exp2 expm1 log log2 log10 log1p sqrt cbrt abs fabs erf erfc tgamma lgamma' },
  python: { write: (n) => `math.${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp exp2 expm1 log log2 log10 log1p sqrt cbrt fabs erf erfc gamma lgamma radians degrees' },
  javascript: { write: (n) => `Math.${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp expm1 log log2 log10 log1p sqrt cbrt abs' },
  rust: { write: (n) => `x.${n}()`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp exp2 exp_m1 ln log2 log10 ln_1p sqrt cbrt abs recip to_radians to_degrees' },
  java: { write: (n) => `Math.${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh exp expm1 log log10 log1p sqrt cbrt abs toRadians toDegrees' },
  csharp: { write: (n) => `Math.${n}(x)`, names: 'Sin Cos Tan Asin Acos Atan Sinh Cosh Tanh Asinh Acosh Atanh Exp Log Log2 Log10 Sqrt Cbrt Abs' },
  go: { write: (n) => `math.${n}(x)`, names: 'Sin Cos Tan Asin Acos Atan Sinh Cosh Tanh Asinh Acosh Atanh Exp Exp2 Expm1 Log Log2 Log10 Log1p Sqrt Cbrt Abs Erf Erfc Gamma J0 J1 Y0 Y1' },
  fortran: { write: (n) => `${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp log log10 sqrt abs erf erfc gamma log_gamma bessel_j0 bessel_j1 bessel_y0 bessel_y1 dsin dcos dexp dlog dsqrt SIN' },
  julia: { write: (n) => `${n}(x)`, names: 'sin cos tan cot sec csc asin acos atan sinh cosh tanh asinh acosh atanh exp exp2 exp10 expm1 log log2 log10 log1p sqrt cbrt abs sinpi cospi' },
  matlab: { write: (n) => `${n}(x)`, names: 'sin cos tan cot sec csc asin acos atan sinh cosh tanh asinh acosh atanh exp expm1 log log2 log10 log1p sqrt abs erf erfc gamma gammaln' },
  r: { write: (n) => `${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp expm1 log log2 log10 log1p sqrt abs gamma lgamma digamma trigamma sinpi cospi tanpi' },
  glsl: { write: (n) => `${n}(x)`, names: 'radians degrees sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp log exp2 log2 sqrt inversesqrt abs' },
  hlsl: { write: (n) => `${n}(x)`, names: 'radians degrees sin cos tan asin acos atan sinh cosh tanh exp log exp2 log2 log10 sqrt rsqrt rcp abs' },
  kotlin: { write: (n) => `${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp expm1 ln log2 log10 ln1p sqrt cbrt abs' },
  swift: { write: (n) => `${n}(x)`, names: 'sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh exp exp2 expm1 log log2 log10 log1p sqrt cbrt abs fabs erf erfc tgamma' },
};
const TWO_ARGUMENTS: Readonly<Record<string, readonly string[]>> = {
  c: ['pow(x, y)', 'powf(x, y)', 'atan2(y, x)', 'hypot(x, y)', 'ldexp(x, 2)'],
  cpp: ['std::pow(x, y)', 'std::atan2(y, x)', 'std::hypot(x, y)', 'std::cyl_bessel_j(0, x)'],
  python: ['math.pow(x, y)', 'np.arctan2(y, x)', 'math.hypot(x, y)', 'scipy.special.jv(0, x)'],
  javascript: ['Math.pow(x, y)', 'Math.atan2(y, x)', 'Math.hypot(x, y)'],
  rust: ['x.powf(y)', 'x.powi(2)', 'y.atan2(x)', 'x.hypot(y)', 'x.log(2.0)'],
  java: ['Math.pow(x, y)', 'Math.atan2(y, x)', 'Math.hypot(x, y)'],
  csharp: ['Math.Pow(x, y)', 'Math.Atan2(y, x)', 'Math.Log(x, 2)'],
  go: ['math.Pow(x, y)', 'math.Atan2(y, x)', 'math.Hypot(x, y)', 'math.Jn(2, x)'],
  fortran: ['atan2(y, x)', 'hypot(x, y)', 'bessel_jn(2, x)'],
  julia: ['atan(y, x)', 'hypot(x, y)', 'log(2, x)', 'besselj(0, x)'],
  matlab: ['atan2(y, x)', 'hypot(x, y)', 'besselj(0, x)', 'power(x, 2)'],
  r: ['atan2(y, x)', 'besselJ(x, 0)', 'log(x, 2)'],
  glsl: ['pow(x, y)', 'atan(y, x)'],
  hlsl: ['pow(x, y)', 'atan2(y, x)'],
  kotlin: ['x.pow(y)', 'atan2(y, x)', 'hypot(x, y)', 'log(x, 2.0)'],
  swift: ['pow(x, y)', 'atan2(y, x)', 'hypot(x, y)'],
};

describe.each(Object.keys(ONE_ARGUMENT))('%s', (language) => {
  beforeAll(() => reader.prepare(language));
  it('knows its library', () => {
    const table = ONE_ARGUMENT[language];
    const calls = [...(table ? table.names.split(' ').map(table.write) : []), ...(TWO_ARGUMENTS[language] ?? [])];
    const unknown = calls.filter((text) => {
      const read = reader.readCode(text, language);
      return !read.ok || [...walk(read.value.expression)].some((e) => e.kind === 'apply');
    });
    expect(unknown).toEqual([]);
  });
});
