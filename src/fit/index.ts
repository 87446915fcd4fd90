/** Door of fit/: polynomials for machines with a proven error, and their code. */
export { fit, type Fit, type FitProblem, type KernelFit, type PieceFit, type SecondVariable } from './fit.ts';
export { formatByName, type FloatFormat, type FixedFormat, type NumberFormat, ulp, ulpExponent } from './format.ts';
export { countOperations, type Arithmetic, type Operations, type Program } from './program.ts';
export type { FitMeasure, ProvedError } from './proof.ts';
export { estimatedSpeed, type Speed } from './speed.ts';
export { parityOf } from './target.ts';
export { filledLines, wrapCode } from './wrap.ts';
