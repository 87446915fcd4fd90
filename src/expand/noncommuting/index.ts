/** The door of noncommuting/: formulas whose letters do not commute. */
export { expandOperators, expandSmallOperators } from './expand-operators.ts';
export { commutingCapitals, type Letters, lettersOf } from './letters.ts';
