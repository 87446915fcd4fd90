/** Short constructors for trees that are computed rather than read. They build exactly what is asked, except that sums and products of one member are that member. */
import type { CallNode, ConstantName, Expression } from './expression.ts';
import { isInteger, isOne, type Rational, rational } from './rational.ts';

export const number = (value: Rational | bigint | number): Expression => ({
  kind: 'number',
  value: typeof value === 'object' ? value : rational(value),
});
export const constant = (name: ConstantName): Expression => ({ kind: 'constant', name });
export const symbol = (name: string): Expression => ({ kind: 'symbol', name });

export function sum(...terms: readonly Expression[]): Expression {
  if (terms.length === 0) return number(0);
  const [only] = terms;
  return terms.length === 1 && only ? only : { kind: 'sum', terms };
}
export function product(...factors: readonly Expression[]): Expression {
  if (factors.length === 0) return number(1);
  const [only] = factors;
  return factors.length === 1 && only ? only : { kind: 'product', factors };
}
export const quotient = (numerator: Expression, denominator: Expression): Expression => ({ kind: 'quotient', numerator, denominator });
export const negation = (operand: Expression): Expression => ({ kind: 'negation', operand });
export const difference = (a: Expression, b: Expression): Expression => sum(a, negation(b));
export const power = (base: Expression, exponent: Expression | Rational | number | bigint): Expression => ({
  kind: 'power',
  base,
  exponent: typeof exponent === 'object' && 'kind' in exponent ? exponent : number(exponent),
});
export const squareRoot = (radicand: Expression): Expression => power(radicand, rational(1, 2));
export const root = (degree: number, radicand: Expression): Expression => ({ kind: 'root', degree: number(degree), radicand });
export const call = (name: string, ...args: readonly Expression[]): CallNode => ({ kind: 'call', function: name, args });

export const isNumber = (e: Expression): e is Extract<Expression, { kind: 'number' }> => e.kind === 'number';
export const isIntegerNumber = (e: Expression): boolean => e.kind === 'number' && isInteger(e.value);
export const isOneNumber = (e: Expression): boolean => e.kind === 'number' && isOne(e.value);
export const isSymbol = (e: Expression, name?: string): boolean => e.kind === 'symbol' && (name === undefined || e.name === name);
