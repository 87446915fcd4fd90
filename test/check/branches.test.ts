import { describe, expect, it } from 'vitest';
import { check } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';
import { CodeReader } from '../../src/read/index.ts';

/** Without grammars the operator-precedence reader is used: Kotlin and Swift are always read so. */
function found(text: string, language: string): readonly (readonly [string, string, string | null])[] {
  const outcome = check({ text, language, code: new CodeReader(null) }, budget(10_000));
  if (!outcome.ok) throw new Error(outcome.error.message);
  return outcome.value.findings.map((f) => [f.verdict, f.verdict === 'fails' ? text.slice(f.start, f.end) : '', f.fix ? text.slice(0, f.fix.start) + f.fix.text + text.slice(f.fix.end) : null]);
}

describe('series branches beside the direct form', () => {
  it.each([
    ['func sinc(_ x: Double) -> Double {\n    return abs(x) < 1e-4 ? 1.0 - x * x / 6.0 : sin(x) / x\n}\n', 'swift', 'holds', '', null],
    ['func sinc(_ x: Double) -> Double {\n    return abs(x) < 1e-4 ? 1.0 - x * x / 5.0 : sin(x) / x\n}\n', 'swift', 'fails', '5.0', 'func sinc(_ x: Double) -> Double {\n    return abs(x) < 1e-4 ? 1.0 - x * x / 6.0 : sin(x) / x\n}\n'],
    ['fun f(x: Double): Double {\n    return if (abs(x) < 1e-3) 0.5 - x * x / 24.0 else (1.0 - cos(x)) / (x * x)\n}\n', 'kotlin', 'holds', '', null],
    ['fun f(x: Double): Double {\n    return if (abs(x) < 1e-3) 0.5 + x * x / 24.0 else (1.0 - cos(x)) / (x * x)\n}\n', 'kotlin', 'fails', '+', 'fun f(x: Double): Double {\n    return if (abs(x) < 1e-3) 0.5 - x * x / 24.0 else (1.0 - cos(x)) / (x * x)\n}\n'],
  ])('%s', (text, language, verdict, under, fixed) => {
    expect(found(text, language)).toEqual([[verdict, under, fixed]]);
  });
});
