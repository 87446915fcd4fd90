/** Division of numbers as a language computes it: exact, truncated, or as its surroundings decide. */
import { type Expression, Q, type Span } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import type { Environment, Meaning } from './environment.ts';
import { combine, floating, INTEGER } from './types.ts';

/** The exact value of an expression of integer literals; null otherwise. */
export function literalInteger(e: Expression): bigint | null {
  const all = (items: readonly Expression[], f: (a: bigint, b: bigint) => bigint, start: bigint): bigint | null => {
    let total = start;
    for (const item of items) {
      const value = literalInteger(item);
      if (value === null) return null;
      total = f(total, value);
    }
    return total;
  };
  switch (e.kind) {
    case 'number':
      return Q.isInteger(e.value) ? e.value.num : null;
    case 'negation': {
      const value = literalInteger(e.operand);
      return value === null ? null : -value;
    }
    case 'sum':
      return all(e.terms, (a, b) => a + b, 0n);
    case 'product':
      return all(e.factors, (a, b) => a * b, 1n);
    default:
      return null;
  }
}

const FAMILY_NAMES: Readonly<Record<string, string>> = { c: 'C', cpp: 'C++', csharp: 'C#', java: 'Java', go: 'Go', rust: 'Rust', fortran: 'Fortran', glsl: 'GLSL', hlsl: 'HLSL', kotlin: 'Kotlin', swift: 'Swift', python: 'Python', javascript: 'JavaScript', julia: 'Julia', matlab: 'MATLAB', r: 'R' };
export const languageName = (env: Environment): string => FAMILY_NAMES[env.language.family] ?? env.language.family;

/** a/b as the language computes it. */
export function divide(a: Meaning, b: Meaning, span: Span, env: Environment): Meaning {
  const quotient: Expression = { kind: 'quotient', numerator: a.expression, denominator: b.expression, span };
  if (a.type.kind !== 'integer' || b.type.kind !== 'integer') return { expression: quotient, type: combine(a.type, b.type) };
  const { integerQuotient } = env.language;
  if (integerQuotient === 'exact') return { expression: quotient, type: floating(env.language.literalFormat, 'language', true) };
  const [top, bottom] = [literalInteger(a.expression), literalInteger(b.expression)];
  if (integerQuotient === 'context' && a.type.flexible && b.type.flexible) return { expression: quotient, type: { ...INTEGER, flexible: true, pending: true } };
  if (top === null || bottom === null) throw new Declined('bad-request', `Both sides of this division are integers, so ${languageName(env)} drops the fraction; make one of them a floating-point number.`, span);
  if (bottom === 0n) throw new Declined('bad-request', 'This divides an integer by zero.', span);
  const whole = top / bottom;
  if (whole * bottom !== top) env.remark(span, `${top}/${bottom} divides integers: ${languageName(env)} makes it ${whole}. Write ${top}.0/${bottom} for the fraction.`);
  return { expression: { kind: 'number', value: Q.rational(whole), written: env.text.slice(span.start, span.end), span }, type: { ...INTEGER, flexible: true } };
}

export function floorDivide(a: Meaning, b: Meaning, span: Span): Meaning {
  const [top, bottom] = [literalInteger(a.expression), literalInteger(b.expression)];
  if (top === null || bottom === null || bottom === 0n) throw new Declined('unreadable', 'A floor division is not smooth; use a plain division.', span);
  return { expression: { kind: 'number', value: Q.rational(Q.floor(Q.rational(top, bottom))), span }, type: { ...INTEGER, flexible: true } };
}
