/** Differential equations: solutions in powers of the variable and of a small parameter, and equations simplified in place. */
export { expandSolution, type SolutionProblem } from './solve.ts';
export { type InPlace, type InPlaceProblem, type Replaced, simplifyInPlace } from './in-place.ts';
export { expandPerturbation, type PerturbationProblem } from './small-parameter.ts';
export { type DifferentialStatement, differentialStatement, standsForUnknown } from './statement.ts';
