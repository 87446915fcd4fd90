/**
 * Operator precedence per language; a higher level binds tighter. Sources: Fortran 2023 table 10.1; MATLAB "Operator Precedence";
 * Julia manual "Operator Precedence and Associativity"; R Language Definition 3.1.4 and ?Syntax; GLSL 4.60 section 5.1; Kotlin grammar
 * "Expressions"; Swift standard library precedence groups.
 */
import type { CodeLanguage } from '../languages/index.ts';

export const LEVEL = { choice: 10, or: 20, and: 30, not: 35, comparison: 40, range: 45, bits: 50, shift: 52, sum: 55, product: 60, percent: 62, tightRange: 63, ratio: 65, unary: 70, coefficient: 75, power: 80 } as const;

const BASE: Readonly<Record<string, number>> = {
  '??': LEVEL.choice,
  '?:': LEVEL.choice,
  '||': LEVEL.or,
  or: LEVEL.or,
  '.or.': LEVEL.or,
  '&&': LEVEL.and,
  and: LEVEL.and,
  '.and.': LEVEL.and,
  '<': LEVEL.comparison,
  '<=': LEVEL.comparison,
  '>': LEVEL.comparison,
  '>=': LEVEL.comparison,
  '==': LEVEL.comparison,
  '===': LEVEL.comparison,
  '!=': LEVEL.comparison,
  '!==': LEVEL.comparison,
  '~=': LEVEL.comparison,
  '/=': LEVEL.comparison,
  '≤': LEVEL.comparison,
  '≥': LEVEL.comparison,
  '≠': LEVEL.comparison,
  '.<': LEVEL.comparison,
  '.>': LEVEL.comparison,
  '.lt.': LEVEL.comparison,
  '.le.': LEVEL.comparison,
  '.gt.': LEVEL.comparison,
  '.ge.': LEVEL.comparison,
  '.eq.': LEVEL.comparison,
  '.ne.': LEVEL.comparison,
  '..': LEVEL.range,
  '...': LEVEL.range,
  '..<': LEVEL.range,
  '|': LEVEL.bits,
  '&': LEVEL.bits,
  '<<': LEVEL.shift,
  '>>': LEVEL.shift,
  '>>>': LEVEL.shift,
  '+': LEVEL.sum,
  '-': LEVEL.sum,
  '−': LEVEL.sum,
  '.+': LEVEL.sum,
  '.-': LEVEL.sum,
  '*': LEVEL.product,
  '/': LEVEL.product,
  '%': LEVEL.product,
  '.*': LEVEL.product,
  './': LEVEL.product,
  '\\': LEVEL.product,
  '.\\': LEVEL.product,
  '⋅': LEVEL.product,
  '×': LEVEL.product,
  '÷': LEVEL.product,
  '%%': LEVEL.percent,
  '%/%': LEVEL.percent,
  '%*%': LEVEL.percent,
  '%in%': LEVEL.percent,
};

/** The level of a binary operator; null where the language has none of this spelling. Powers are not among them. */
export function binaryLevel(operator: string, language: CodeLanguage): number | null {
  const { family } = language;
  const key = operator.toLowerCase();
  switch (key) {
    case ':':
      return family === 'r' ? LEVEL.tightRange : family === 'julia' || family === 'matlab' ? LEVEL.range : null;
    case '//':
      return family === 'julia' ? LEVEL.ratio : family === 'python' ? LEVEL.product : null;
    case '^':
      return language.caret === 'power' ? null : LEVEL.bits;
    case '%':
      // In Fortran it selects a component, in Julia and MATLAB it is a remainder and a comment.
      return family === 'fortran' ? null : LEVEL.product;
    case '&':
    case '|':
      return family === 'matlab' || family === 'r' ? (key === '&' ? LEVEL.and : LEVEL.or) : LEVEL.bits;
    case 'and':
    case 'or':
      return family === 'python' ? (key === 'and' ? LEVEL.and : LEVEL.or) : null;
    case '\\':
      return family === 'matlab' || family === 'julia' ? LEVEL.product : null;
    case '/=':
      return family === 'fortran' ? LEVEL.comparison : null;
    default:
      return Object.hasOwn(BASE, key) ? (BASE[key] ?? null) : null;
  }
}

export function isPower(operator: string, language: CodeLanguage): boolean {
  return operator === '**' || operator === '.^' || operator === '.**' || (operator === '^' && language.caret === 'power');
}

/** How tightly a sign in front holds its operand. */
export function signLevel(language: CodeLanguage): number {
  switch (language.family) {
    case 'fortran':
      return LEVEL.product;
    case 'matlab':
    case 'r':
    case 'python':
    case 'javascript':
      return LEVEL.power;
    case 'julia':
      return LEVEL.coefficient;
    default:
      return LEVEL.power;
  }
}

/** How tightly a "not" in front holds its operand. */
export const notLevel = (operator: string, language: CodeLanguage): number =>
  operator === '.not.' || operator === 'not' || language.family === 'r' ? LEVEL.not : LEVEL.power;
