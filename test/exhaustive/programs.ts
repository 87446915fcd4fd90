/** Fits whose emitted C is compiled and run over every float of their interval, with a reference in wider precision. */
import { Q } from '../../src/expression/index.ts';
import { type Fit, fit, type FitProblem, formatByName } from '../../src/fit/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';
import type { FloatRun } from './everyFloat.ts';

export interface ExhaustiveCase {
  readonly text: string;
  readonly low: string;
  readonly high: string;
  readonly measure: 'absolute' | 'relative' | 'ulp';
  readonly tolerance?: string;
  readonly degree?: number;
  readonly form?: 'horner' | 'estrin';
  readonly contraction?: 'any' | 'fma';
  /** C expression of the reference in double `x`. */
  readonly reference: string;
}

export const CASES: readonly ExhaustiveCase[] = [
  { text: 'sin(x)', low: '-3/4', high: '3/4', measure: 'ulp', degree: 9, reference: 'sin(x)' },
  { text: 'sin(x)', low: '-3/4', high: '3/4', measure: 'relative', degree: 5, reference: 'sin(x)' },
  { text: 'cos(x)', low: '-3/4', high: '3/4', measure: 'ulp', degree: 8, reference: 'cos(x)' },
  { text: 'exp(x)', low: '-7/20', high: '7/20', measure: 'ulp', degree: 6, reference: 'exp(x)' },
  { text: 'exp(x)', low: '-1/2', high: '1/2', measure: 'absolute', degree: 3, form: 'estrin', reference: 'exp(x)' },
  { text: 'log(x)', low: '3/4', high: '3/2', measure: 'relative', degree: 6, reference: 'log(x)' },
  { text: 'log(1+x)', low: '-1/4', high: '1/4', measure: 'ulp', degree: 9, reference: 'log1p(x)' },
  { text: 'atan(x)', low: '-1/2', high: '1/2', measure: 'relative', degree: 9, reference: 'atan(x)' },
  { text: 'atan(x)/x', low: '-1', high: '1', measure: 'absolute', degree: 8, reference: 'x == 0 ? 1.0 : atan(x)/x' },
  { text: 'tan(x)', low: '-1/2', high: '1/2', measure: 'ulp', degree: 11, contraction: 'fma', reference: 'tan(x)' },
  { text: 'asin(x)', low: '-1/2', high: '1/2', measure: 'absolute', degree: 9, form: 'estrin', contraction: 'fma', reference: 'asin(x)' },
  { text: 'tanh(x)', low: '-1/2', high: '1/2', measure: 'relative', degree: 7, reference: 'tanh(x)' },
  { text: 'sqrt(x)', low: '1/2', high: '2', measure: 'ulp', degree: 7, reference: 'sqrt(x)' },
  { text: 'gamma(x)', low: '1', high: '2', measure: 'absolute', degree: 7, reference: 'tgamma(x)' },
  { text: 'erf(x)', low: '-1', high: '1', measure: 'relative', degree: 11, reference: 'erf(x)' },
  { text: 'exp(x) - 1', low: '-1/4', high: '1/4', measure: 'ulp', degree: 7, reference: 'expm1(x)' },
];

export function fitOf(c: ExhaustiveCase, format = 'binary32', language = 'c'): Fit {
  const number = formatByName(format);
  const [f, low, high] = [c.text, c.low, c.high].map((t) => {
    const read = readExact(t);
    if (!read.ok) throw new Error(`${t}: ${read.error.message}`);
    return read.value;
  });
  if (!number || !f || !low || !high) throw new Error('case');
  const end = (text: string) => {
    const [num, den = '1'] = text.split('/');
    return Q.rational(BigInt(num ?? 0), BigInt(den));
  };
  const problem: FitProblem = {
    function: f,
    variable: 'x',
    low: end(c.low),
    high: end(c.high),
    measure: c.measure,
    ...(c.tolerance ? { tolerance: Q.fromDecimal(c.tolerance) ?? Q.ZERO } : {}),
    ...(c.degree === undefined ? {} : { degree: c.degree }),
    format: number,
    language,
    form: c.form ?? 'horner',
    contraction: c.contraction ?? 'any',
    method: 'minimax',
    pieces: 1,
    intervalText: [c.low, c.high],
  };
  const result = fit(problem, budget(60_000));
  if (!result.ok) throw new Error(`${c.text}: ${result.error.message}`);
  return result.value;
}

export const runOf = (c: ExhaustiveCase, { code }: Fit): FloatRun => ({ code: code.code, name: /(\w+)\(float x\)/.exec(code.code)?.[1] ?? '', reference: c.reference, low: c.low, high: c.high, measure: c.measure, marginBits: 48 });
