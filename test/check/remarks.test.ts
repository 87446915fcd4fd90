import { describe, expect, it } from 'vitest';
import { check } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';
import { CodeReader } from '../../src/read/index.ts';

/** Verdict, what is underlined, what the fix puts there. */
function found(text: string, language: string): readonly (readonly [string, string, string | null])[] {
  const outcome = check({ text, language, code: new CodeReader(null) }, budget(30_000));
  if (!outcome.ok) throw new Error(outcome.error.message);
  return outcome.value.findings.map((f) => [f.verdict, text.slice(f.start, f.end), f.fix && f.fix.text]);
}

/** Abramowitz & Stegun 4.4.49 (coefficients from memory): states 1e-5 on [-1, 1]; measured 1.2e-5 with these floats. */
const ATAN = 'x*(0.9998660f + y*(-0.3302995f + y*(0.1801410f + y*(-0.0851330f + y*0.0208351f))))';

describe('accuracy promised beside a polynomial', () => {
  it.each([
    [`// atan(x) on [-1, 1], max error 1e-4\nfloat f(float x) { float y = x*x; return ${ATAN}; }\n`, 'c', 'holds', '1e-4', null],
    [`// atan(x) on [-1, 1], max error 1e-5\nfloat f(float x) { float y = x*x; return ${ATAN}; }\n`, 'c', 'fails', '1e-5', '1.2e-5'],
    [`// arctangent, |eps(x)| <= 1e-6 for -1 <= x <= 1\nfloat f(float x) { float y = x*x; return ${ATAN}; }\n`, 'c', 'fails', '1e-6', '1.2e-5'],
    ['/* Fast sine, relative error < 1e-3 for |x| <= 0.5 */\nstatic double fast_sin(double x) {\n  return x - x*x*x/6.0;\n}\n', 'c', 'holds', '1e-3', null],
    ['/* Fast sine, relative error < 1e-5 for |x| <= 0.5 */\nstatic double fast_sin(double x) {\n  return x - x*x*x/6.0;\n}\n', 'c', 'fails', '1e-5', '0.00054'],
    ['# exp(x) for |x| <= 0.1, accurate to 1e-6\ndef exp_small(x):\n    return 1 + x*(1 + x*(0.5 + x*(1/6 + x/24)))\n', 'python', 'holds', '1e-6', null],
    ['# exp(x) for |x| <= 0.1, accurate to 1e-8\ndef exp_small(x):\n    return 1 + x*(1 + x*(0.5 + x*(1/6 + x/24)))\n', 'python', 'fails', '1e-8', '8.5e-8'],
    ['/// cos approximation, |error| <= 2 * 10^-5 on [-0.5, 0.5]\nfn cos_poly(x: f64) -> f64 {\n    let x2 = x * x;\n    1.0 - x2 / 2.0 + x2 * x2 / 24.0\n}\n', 'rust', 'fails', '2 * 10^-5', '2.2e-5'],
    ['# log(1+x) on [0, 1], max error 2e-5\ndef p(x):\n    return np.polyval([0.03215845, -0.13606275, 0.28947478, -0.49190896, 0.99949556, 0.0], x)\n', 'python', 'holds', '2e-5', null],
    ['// cos(x) for |x| < 0.1, good to 1 ulp\nfloat c(float x) { return 1.0f - x*x*(0.5f - x*x*(1.0f/24.0f)); }\n', 'c', 'holds', '1 ulp', null],
    ['// cos(x) for |x| < 1, good to 1 ulp\nfloat c(float x) { return 1.0f - x*x*(0.5f - x*x*(1.0f/24.0f)); }\n', 'c', 'fails', '1 ulp', expect.stringMatching(/ ulp$/)],
    ['// sin(x), accurate to 0.1 % on [0, 0.5]\ndouble s(double x) { return x - x*x*x/6.0; }\n', 'c', 'holds', '0.1 %', null],
  ])('%s', (text, language, verdict, under, fixed) => {
    const [first] = found(text, language);
    expect(first).toEqual([verdict, under, fixed]);
  });
  it('a note to the tool is a question, no promise', () => {
    expect(found('double stretch(double s) {\n  // leading-order: small s, on |s| <= 0.2, within 1e-7\n  return 1.0 + s * s / 2.0;\n}\n', 'c')).toEqual([]);
  });
  it('nothing fails where interval, function or variable are not said', () => {
    for (const text of [
      '// max error 1e-9\ndouble s(double x) { return x - x*x*x/6.0; }\n',
      '// sin(x), max error 1e-9\ndouble s(double x) { return x - x*x*x/6.0; }\n',
      '// exp(x), max error 1e-9 on [-80, 80]\ndouble e(double x) { double r = x - round(x); double p = 1.0 + r*(1.0 + r*0.5); return ldexp(p, (int) round(x)); }\n',
      '// read at most 1e-9 of the file, within 3 retries\ndouble s(double x) { return x - x*x*x/6.0; }\n',
    ]) expect(found(text, 'c').map(([v]) => v), text).not.toContain('fails');
  });
  it('the other branch names the function, the condition the interval', () => {
    expect(found('fun sinc(x: Double): Double {\n    // error below 1e-9\n    return if (abs(x) < 1e-2) 1.0 - x * x / 6.0 else sin(x) / x\n}\n', 'kotlin').map(([v]) => v)).toEqual(['holds', 'holds']);
    expect(found('fun sinc(x: Double): Double {\n    // error below 1e-15\n    return if (abs(x) < 1e-2) 1.0 - x * x / 6.0 else sin(x) / x\n}\n', 'kotlin')).toContainEqual(['fails', '1e-15', '8.4e-11']);
  });
});
