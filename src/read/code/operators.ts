/** Operators by what they do, whatever their spelling in a language. */
import type { Relation } from '../../expression/index.ts';
import type { CodeLanguage } from './languages/language.ts';

export type OperatorMeaning = 'add' | 'subtract' | 'multiply' | 'divide' | 'left divide' | 'exact ratio' | 'floor divide' | 'power' | 'and' | 'or' | 'not' | Relation | 'remainder' | 'exclusive or' | 'bits' | 'matrix product' | 'other';

const COMMON: Readonly<Record<string, OperatorMeaning>> = {
  '+': 'add',
  '.+': 'add',
  '&+': 'add',
  '-': 'subtract',
  '−': 'subtract',
  '.-': 'subtract',
  '*': 'multiply',
  '.*': 'multiply',
  '⋅': 'multiply',
  '×': 'multiply',
  juxtaposed: 'multiply',
  '/': 'divide',
  './': 'divide',
  '\\': 'left divide',
  '.\\': 'left divide',
  '**': 'power',
  '.^': 'power',
  '.**': 'power',
  '%': 'remainder',
  '%%': 'remainder',
  '@': 'matrix product',
  '%*%': 'matrix product',
  '&&': 'and',
  and: 'and',
  '.and.': 'and',
  '||': 'or',
  or: 'or',
  '.or.': 'or',
  '!': 'not',
  not: 'not',
  '.not.': 'not',
  '<': '<',
  '.lt.': '<',
  '.<': '<',
  '<=': '<=',
  '≤': '<=',
  '.le.': '<=',
  '.<=': '<=',
  '>': '>',
  '.gt.': '>',
  '.>': '>',
  '>=': '>=',
  '≥': '>=',
  '.ge.': '>=',
  '.>=': '>=',
  '==': '=',
  '===': '=',
  '.eq.': '=',
  '.==': '=',
  is: '=',
  '!=': '!=',
  '!==': '!=',
  '~=': '!=',
  '/=': '!=',
  '≠': '!=',
  '.ne.': '!=',
  '|': 'bits',
  '&': 'bits',
  '<<': 'bits',
  '>>': 'bits',
  '>>>': 'bits',
  '~': 'bits',
};

export function operatorMeaning(operator: string, language: CodeLanguage): OperatorMeaning {
  const key = operator.toLowerCase();
  if (key === '^') return language.caret === 'power' ? 'power' : 'exclusive or';
  if (key === '//') return language.family === 'python' ? 'floor divide' : language.family === 'julia' ? 'exact ratio' : 'other';
  if (key === '%/%' || key === '÷') return 'floor divide';
  // In MATLAB and R a single & or | joins conditions too.
  if ((key === '&' || key === '|') && (language.family === 'matlab' || language.family === 'r')) return key === '&' ? 'and' : 'or';
  if (key === '~' && language.family === 'matlab') return 'not';
  return COMMON[key] ?? 'other';
}

const RELATIONS: ReadonlySet<string> = new Set(['<', '<=', '>', '>=', '=', '!=']);
export const isComparison = (meaning: OperatorMeaning): meaning is '<' | '<=' | '>' | '>=' | '=' | '!=' => RELATIONS.has(meaning);
