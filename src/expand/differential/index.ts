/** Differential equations: solutions in powers of the variable and of a small parameter, and equations simplified in place. */
export { expandSolution, type SolutionProblem } from './solve.ts';
export { type DifferentialStatement, differentialStatement } from './statement.ts';
