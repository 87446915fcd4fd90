export type { Ball, ComplexBall, Interval } from './ball.types.ts';
export type { Arithmetic, Elementary, ElementaryName, RealArithmetic } from './arithmetic.ts';
export { ELEMENTARY } from './arithmetic.ts';
/** Real balls. */
export * as real from './real.ts';
/** Complex balls. */
export * as complex from './complex.ts';
export { ballArithmetic } from './ball-arithmetic.ts';
export { type ComplexArithmetic, complexArithmetic } from './complex-arithmetic.ts';
export type { Rectangle } from './complex-field.ts';
/** Double intervals with outward rounding. */
export * as interval from './doubles.ts';
export { intervalArithmetic } from './interval-arithmetic.ts';
export {
  complexBallTrees, type Describe, type EnclosableFunction, enclose, encloseInterval, encloseReal, encloseRectangle, evaluateTree, intervalTrees, isElementaryName, realBallTrees, rectangleTrees, type TreeArithmetic,
} from './enclose.ts';
/** Local models: truncated series with a proven remainder factor. */
export type { Model, ModelArithmetic } from './model.types.ts';
export { modelArithmetic } from './model.ts';
export { type LogModel, logRange } from './log-model.ts';
export { logModelOfTree, type ModellableFunction, modelOfTree, type ModelTreeContext } from './model-tree.ts';
