/** Door of fit/: polynomials for machines with a proven error, and their code. */
export { fit, type Fit, type FitProblem, type PieceFit } from './fit.ts';
export { formatByName, type FloatFormat, type FixedFormat, type NumberFormat } from './format.ts';
export { countOperations, type Arithmetic, type Operations, type Program } from './program.ts';
export type { FitMeasure, ProvedError } from './proof.ts';
export { parityOf } from './target.ts';
export { wrapCode } from './wrap.ts';
