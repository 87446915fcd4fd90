/**
 * What the emitted code may save, estimated from its operations: costs in units of one multiplication of the format, operations taken one after the other.
 * A multiplication, an addition and a fused operation cost 1, a division or square root 4, a library call what its usual steps cost (reducing the argument, a table or
 * polynomial, undoing the reduction). The figures for calls are rounded medians of test/bench, which prints estimated and measured ratio side by side; no promise.
 */
import { type Expression, rationalOf } from '../expression/index.ts';
import { codeLanguage } from '../write/index.ts';
import { type Operations, countOperations, type Program } from './program.ts';

export interface Speed {
  readonly code: number;
  readonly call: number;
  readonly ratio: number;
}

const DIVISION = 4;
const OVERHEAD = 2;

/** Library calls in binary32 and binary64. */
const CALLS: Readonly<Record<string, readonly [number, number]>> = {
  exp: [10, 24], expm1: [22, 34], log: [14, 19], log1p: [24, 34], log10: [18, 32], log2: [12, 20], sin: [8, 34], cos: [8, 34], tan: [12, 50], cot: [16, 54], sec: [12, 38], csc: [12, 38],
  asin: [14, 17], acos: [14, 17], atan: [13, 40], sinh: [20, 40], cosh: [18, 36], tanh: [20, 38], asinh: [26, 50], acosh: [26, 50], atanh: [24, 44], erf: [14, 26], erfc: [24, 40],
  gamma: [60, 150], loggamma: [40, 110], cbrt: [26, 60], power: [22, 44], sqrt: [DIVISION, DIVISION], abs: [1, 1],
};
/** A function without a figure of its own: a special function by series or recurrence. */
const OTHER: readonly [number, number] = [80, 150];
/** Code is interpreted there: operations cost as much as calls do. */
const INTERPRETED: ReadonlySet<string> = new Set(['python', 'matlab', 'r']);

function callCost(e: Expression, width: 0 | 1): number {
  const below = (list: readonly Expression[]): number => list.reduce((sum, part) => sum + callCost(part, width), 0);
  const call = (name: string): number => (CALLS[name] ?? OTHER)[width];
  switch (e.kind) {
    case 'sum':
      return e.terms.length - 1 + below(e.terms);
    case 'product':
      return e.factors.length - 1 + below(e.factors);
    case 'quotient':
      return DIVISION + below([e.numerator, e.denominator]);
    case 'negation':
      return below([e.operand]);
    case 'power': {
      if (e.base.kind === 'constant' && e.base.name === 'e') return call('exp') + below([e.exponent]);
      const exponent = rationalOf(e.exponent);
      if (exponent && exponent.den === 1n && exponent.num >= 0n && exponent.num < 64n) return below([e.base]) + Math.max(0, exponent.num.toString(2).length - 1);
      if (exponent && exponent.den === 2n && exponent.num === 1n) return DIVISION + below([e.base]);
      return call('power') + below([e.base, e.exponent]);
    }
    case 'root': {
      const degree = rationalOf(e.degree);
      return (degree?.den === 1n && degree.num === 2n ? DIVISION : call(degree?.num === 3n ? 'cbrt' : 'power')) + below([e.radicand]);
    }
    case 'call':
      return call(e.function) + below(e.args);
    default:
      return 0;
  }
}

const divisions = (program: Program): number => {
  let count = 0;
  const visit = (e: Expression): void => {
    if (e.kind === 'quotient') {
      count += 1;
      visit(e.numerator);
      visit(e.denominator);
    } else if (e.kind === 'sum') e.terms.forEach(visit);
    else if (e.kind === 'product') e.factors.forEach(visit);
    else if (e.kind === 'negation') visit(e.operand);
    else if (e.kind === 'call') e.args.forEach(visit);
  };
  program.steps.forEach((s) => visit(s.value));
  visit(program.result);
  return count;
};

/** Null where the language is interpreted or where there is no call to save. */
export function estimatedSpeed(f: Expression, program: Program, format: string, language: string): Speed | null {
  if (INTERPRETED.has(codeLanguage(language)?.id ?? '')) return null;
  const operations: Operations = countOperations(program);
  const code = OVERHEAD + operations.multiplications + operations.additions + operations.fused + (DIVISION - 1) * divisions(program);
  const call = callCost(f, format === 'binary64' ? 1 : 0);
  return call > 0 ? { code, call: call + OVERHEAD, ratio: Number(((call + OVERHEAD) / code).toPrecision(2)) } : null;
}
