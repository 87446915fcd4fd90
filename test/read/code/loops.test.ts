/** Polynomials in loops: every program here is the same polynomial, 1 - x/2 + x^2/6 - x^3/24, or as said beside it. */
import { beforeAll, describe, expect, it } from 'vitest';
import { reader } from './reader.ts';

const EXPECTED = ['1', '-1/2', '1/6', '-1/24'];
const LIST = '1.0, -0.5, 1.0/6.0, -1.0/24.0';

beforeAll(async () => {
  for (const language of ['c', 'cpp', 'java', 'javascript', 'typescript', 'csharp', 'go', 'rust', 'python']) await reader.prepare(language);
});

const coefficients = (text: string, language: string): readonly string[] | null => {
  const found = reader.readPolynomials(text, language);
  const last = found.at(-1);
  return last ? last.coefficients.map((c) => (c.den === 1n ? `${c.num}` : `${c.num}/${c.den}`)) : null;
};

const PROGRAMS: readonly (readonly [language: string, text: string])[] = [
  ['c', `static const double C[] = {${LIST}};\ndouble f(double x) {\n  double r = 0.0;\n  for (int i = 3; i >= 0; i--) r = r * x + C[i];\n  return r;\n}`],
  ['c', `#define N 4\nstatic const double C[N] = {${LIST}};\ndouble f(double x) {\n  double r = C[N - 1];\n  for (int i = N - 2; i >= 0; --i) { r = r * x + C[i]; }\n  return r;\n}`],
  ['c', `static const double C[] = {${LIST}};\ndouble f(double x) {\n  double s = 0.0, p = 1.0;\n  for (size_t i = 0; i < sizeof(C) / sizeof(C[0]); ++i) { s += C[i] * p; p *= x; }\n  return s;\n}`],
  ['c', `static const double C[] = {${LIST}};\ndouble f(double x) {\n  double r = 0;\n  for (int i = 4; i-- > 0; ) r = fma(r, x, C[i]);\n  return r;\n}`],
  ['c', `double f(double x) {\n  double term = 1.0, s = 1.0;\n  for (int n = 1; n <= 3; n++) { term *= -x / (n + 1); s += term; }\n  return s;\n}`],
  ['cpp', `constexpr std::array<double, 4> C{${LIST}};\ndouble f(double x) {\n  double s = 0, p = 1;\n  for (auto c : C) { s += c * p; p *= x; }\n  return s;\n}`],
  ['cpp', `double f(double x) {\n  static const double c[4] = {${LIST}};\n  double r = c[3];\n  for (int i = 2; i >= 0; --i) r = std::fma(r, x, c[i]);\n  return r;\n}`],
  ['java', `class A { static final double[] C = {${LIST}};\n double f(double x) { double r = 0; for (int i = C.length - 1; i >= 0; i--) r = r * x + C[i]; return r; } }`],
  ['java', `class A { static final double[] C = {${LIST}};\n double f(double x) { double s = 0, p = 1; for (double c : C) { s += c * p; p *= x; } return s; } }`],
  ['javascript', `const C = [${LIST}];\nfunction f(x) { let r = 0; for (let i = C.length - 1; i >= 0; i--) r = r * x + C[i]; return r; }`],
  ['javascript', `const C = [${LIST}];\nfunction f(x) { let s = 0, p = 1; for (const c of C) { s += c * p; p *= x; } return s; }`],
  ['javascript', `const C = [${LIST}];\nconst f = (x) => C.reduceRight((r, c) => r * x + c, 0) + 0;`],
  ['typescript', `const C: readonly number[] = [${LIST}];\nfunction f(x: number): number { let r = 0; for (const c of [...C].reverse()) r = r * x + c; return r; }`],
  ['typescript', `const C: readonly number[] = [${LIST}];\nfunction f(x: number): number { let s = 0; for (let i = 0; i < C.length; i++) { s += C[i] * Math.pow(x, i); } return s; }`],
  ['csharp', `class A { static readonly double[] C = {${LIST}};\n double f(double x) { double r = 0; for (int i = C.Length - 1; i >= 0; i--) r = r * x + C[i]; return r; } }`],
  ['csharp', `class A { static readonly double[] C = {${LIST}};\n double f(double x) { double s = 0, p = 1; foreach (var c in C) { s += c * p; p *= x; } return s; } }`],
  ['go', `package p\nvar c = []float64{${LIST}}\nfunc f(x float64) float64 {\n\tr := 0.0\n\tfor i := len(c) - 1; i >= 0; i-- {\n\t\tr = r*x + c[i]\n\t}\n\treturn r\n}`],
  ['go', `package p\nvar c = [...]float64{${LIST}}\nfunc f(x float64) float64 {\n\ts, p := 0.0, 1.0\n\tfor _, a := range c {\n\t\ts += a * p\n\t\tp *= x\n\t}\n\treturn s\n}`],
  ['rust', `const C: [f64; 4] = [${LIST}];\nfn f(x: f64) -> f64 {\n  let mut r = 0.0;\n  for c in C.iter().rev() { r = r * x + c; }\n  r\n}`],
  ['rust', `const C: [f64; 4] = [${LIST}];\nfn f(x: f64) -> f64 {\n  let mut r = 0.0;\n  for &c in C.iter().rev() { r = r * x + c; }\n  r\n}`],
  ['rust', `const C: [f64; 4] = [${LIST}];\nfn f(x: f64) -> f64 {\n  let mut s = 0.0;\n  for i in (0..4).rev() { s = s * x + C[i]; }\n  s\n}`],
  ['rust', `const C: [f64; 4] = [${LIST}];\nfn f(x: f64) -> f64 { C.iter().rev().fold(0.0, |r, &c| r * x + c) }`],
  ['rust', `const C: [f64; 4] = [${LIST}];\nfn f(x: f64) -> f64 { C.iter().rfold(0.0, |r, c| r.mul_add(x, *c)) }`],
  ['python', `COEFFS = (${LIST})\ndef f(x):\n    r = 0.0\n    for c in reversed(COEFFS):\n        r = r * x + c\n    return r\n`],
  ['python', `COEFFS = [${LIST}]\ndef f(x):\n    r = 0.0\n    for c in COEFFS[::-1]:\n        r = r * x + c\n    return r\n`],
  ['python', `COEFFS = [${LIST}]\ndef f(x):\n    r = COEFFS[-1]\n    for i in range(len(COEFFS) - 2, -1, -1):\n        r = r * x + COEFFS[i]\n    return r\n`],
  ['python', `COEFFS = [${LIST}]\ndef f(x):\n    s = 0.0\n    for i, c in enumerate(COEFFS):\n        s += c * x**i\n    return s\n`],
  ['python', `from functools import reduce\nCOEFFS = [${LIST}]\ndef f(x):\n    return reduce(lambda r, c: r * x + c, reversed(COEFFS), 0.0)\n`],
  ['fortran', `function f(x) result(r)\n  real(8), intent(in) :: x\n  real(8) :: r\n  real(8), parameter :: c(4) = [1.0d0, -0.5d0, 1.0d0/6.0d0, -1.0d0/24.0d0]\n  integer :: i\n  r = 0.0d0\n  do i = 4, 1, -1\n    r = r * x + c(i)\n  end do\nend function`],
  ['fortran', `function f(x) result(r)\n  real(8), intent(in) :: x\n  real(8) :: r\n  real(8), parameter :: c(0:3) = (/ 1.0d0, -0.5d0, 1.0d0/6.0d0, -1.0d0/24.0d0 /)\n  integer :: i\n  r = c(3)\n  do i = 2, 0, -1\n    r = r * x + c(i)\n  enddo\nend function`],
  ['julia', `const C = [${LIST}]\nfunction f(x)\n    r = 0.0\n    for i in length(C):-1:1\n        r = r * x + C[i]\n    end\n    return r\nend`],
  ['julia', `const C = (${LIST})\nfunction f(x)\n    r = zero(x) + 0.0\n    r = 0.0\n    for c in reverse(C)\n        r = muladd(r, x, c)\n    end\n    return r\nend`],
  ['matlab', `function r = f(x)\n  c = [${LIST}];\n  r = 0;\n  for i = numel(c):-1:1\n    r = r * x + c(i);\n  end\nend`],
  ['r', `C <- c(${LIST})\nf <- function(x) {\n  r <- 0\n  for (a in rev(C)) {\n    r <- r * x + a\n  }\n  r\n}`],
  ['kotlin', `val C = doubleArrayOf(${LIST})\nfun f(x: Double): Double {\n  var r = 0.0\n  for (c in C.reversed()) {\n    r = r * x + c\n  }\n  return r\n}`],
  ['kotlin', `val C = listOf(${LIST})\nfun f(x: Double): Double {\n  var r = 0.0\n  for (i in 3 downTo 0) r = r * x + C[i]\n  return r\n}`],
  ['swift', `let C = [${LIST}]\nfunc f(x: Double) -> Double {\n  var r = 0.0\n  for c in C.reversed() {\n    r = r * x + c\n  }\n  return r\n}`],
  ['swift', `let C = [${LIST}]\nfunc f(x: Double) -> Double {\n  var r = 0.0\n  for i in stride(from: 3, through: 0, by: -1) { r = r * x + C[i] }\n  return r\n}`],
  ['glsl', `float f(float x) {\n  const float C[4] = float[](${LIST});\n  float r = 0.0;\n  for (int i = 3; i >= 0; i--) {\n    r = r * x + C[i];\n  }\n  return r;\n}`],
  ['hlsl', `static const float C[4] = {${LIST}};\nfloat f(float x) {\n  float r = 0.0;\n  for (int i = 3; i >= 0; i--) r = mad(r, x, C[i]);\n  return r;\n}`],
];

describe('loops over coefficients', () => {
  it.each(PROGRAMS.map(([language, text], i) => [`${i} ${language}`, language, text] as const))('%s', (_name, language, text) => {
    expect(coefficients(text, language)).toEqual(EXPECTED);
  });
});

describe('loops that cannot be followed give no polynomial', () => {
  it.each([
    ['unknown length', 'c', `double f(double x, const double *c, int n) { double r = 0; for (int i = n - 1; i >= 0; i--) r = r * x + c[i]; return r + x * 0; }`],
    ['an entry changed', 'c', `double f(double x) { double c[] = {1, 2, 3}; c[1] = x; double r = 0; for (int i = 2; i >= 0; i--) r = r * x + c[i]; return r; }`],
    ['left early', 'c', `static const double c[] = {1, 2, 3};\ndouble f(double x) { double r = 0; for (int i = 2; i >= 0; i--) { if (x > 2) break; r = r * x + c[i]; } return r; }`],
    ['beyond the list', 'c', `static const double c[] = {1, 2, 3};\ndouble f(double x) { double r = 0; for (int i = 3; i >= 0; i--) r = r * x + c[i]; return r; }`],
    ['a list that grows', 'python', 'c = [1.0, 2.0, 3.0]\ndef f(x):\n    c.append(x)\n    r = 0.0\n    for a in reversed(c):\n        r = r * x + a\n    return r\n'],
    ['a counter changed', 'c', `static const double c[] = {1, 2, 3};\ndouble f(double x) { double r = 0; for (int i = 2; i >= 0; i--) { r = r * x + c[i]; i = i - 1; } return r; }`],
    ['names of properties', 'javascript', 'const c = [1, 2, 3];\nfunction f(x) { let r = 0; for (const k in c) r = r * x + k; return r; }'],
    ['while', 'julia', 'function f(x)\n    r = 0.0\n    while r < 3\n        r = r * x * x + x\n    end\n    return r + 0\nend'],
    ['too many rounds', 'c', `double f(double x) { double r = 0; for (int i = 0; i < 100000000; i++) r = r * x + 1; return r; }`],
  ])('%s', (_name, language, text) => {
    expect(coefficients(text, language)).toBeNull();
  });

  it('an integer division inside is the language\'s', () => {
    // In C, 1/(n+1) is 0 for n > 0.
    expect(coefficients('double f(double x) { double s = 1.0, p = 1.0; for (int n = 1; n <= 3; n++) { p *= x; s += p * (1 / (n + 1)); } return s; }', 'c')).toBeNull();
  });
});
