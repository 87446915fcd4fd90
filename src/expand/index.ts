/** The door of expand/: from a tree to its expansion. */
export { expand } from './expand.ts';
export type { Expansion, ExpansionProblem, ExpansionRemainder, ExpansionTerm, RootProblem, SmallProblem, SmallQuantity } from './expansion.ts';
export { expandSmall } from './small.ts';
export { expandRoot } from './root/expand-root.ts';
export { type DifferentialStatement, differentialStatement, expandPerturbation, expandSolution, type InPlace, type InPlaceProblem, type PerturbationProblem, type Replaced, simplifyInPlace, type SolutionProblem, standsForUnknown } from './differential/index.ts';
export { partialSum, prefix, remainderScale } from './sum.ts';
export { isScalarFormula, operatorNames } from './scalar-formula.ts';
