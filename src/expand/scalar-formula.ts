/** Whether a formula is one in numbers, or holds vectors or operators. */
import type { Assumption, Expression } from '../expression/index.ts';
import { lettersOf } from './noncommuting/index.ts';
import { hasVectors, isVectorFormula } from './vectors/index.ts';

/** Names of the operators of a formula; none where its bold letters are vectors. */
export function operatorNames(f: Expression, assumptions: readonly Assumption[]): readonly string[] {
  if (hasVectors(f) && isVectorFormula(f)) return [];
  return [...(lettersOf(f, assumptions)?.operators.keys() ?? [])];
}

export const isScalarFormula = (f: Expression, assumptions: readonly Assumption[]): boolean => !hasVectors(f) && lettersOf(f, assumptions) === null;
