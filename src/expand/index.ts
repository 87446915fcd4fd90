/** The door of expand/: from a tree to its expansion. */
export { expand } from './expand.ts';
export type { Expansion, ExpansionProblem, ExpansionRemainder, ExpansionTerm } from './expansion.ts';
export { partialSum, prefix, remainderScale } from './sum.ts';
