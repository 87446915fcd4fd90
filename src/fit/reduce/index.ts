/** Door of reduce/: fits on intervals wider than a polynomial should serve, by reducing the argument first. */
import { Q } from '../../expression/index.ts';
import { describe } from '../../functions/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { encloseReal, real } from '../../rigorous/index.ts';
import { reduceArc } from './arc.ts';
import { reduceArctangent } from './arctangent.ts';
import { reduceCircular } from './circular.ts';
import { reduceExponential } from './exponential.ts';
import { reduceHyperbolic } from './hyperbolic.ts';
import type { Reduced, ReductionProblem } from './kernel.ts';
import { reduceLogarithm } from './logarithm.ts';
import { reducePower } from './power.ts';
import { recognise, type Shape } from './recognise.ts';
import { reduceTangent } from './tangent.ts';

export { PAIR_LOCALS, recognisePair, reducePair } from './pair.ts';
export { LOCALS, type Kernel, type Reduced, type ReductionProblem } from './kernel.ts';

/** Degrees beyond this are served better by a reduction (protocol `reduction`: `auto`). */
const COMFORTABLE_DEGREE = 12;
const NODES = 40;

/** The kind of function, where its argument can be reduced for this request; null elsewhere. */
export const reducible = ({ whole }: ReductionProblem): Shape | null =>
  whole.method === 'minimax' && (whole.format.name === 'binary32' || whole.format.name === 'binary64') ? recognise(whole.function, whole.variable) : null;

export const notReducible = (): Declined =>
  new Declined('bad-request', 'Arguments are reduced for exp, log, log(1 + x), sin, cos, tan, sinh, cosh, tanh, asin, acos, atan and constant powers of one variable, in binary32 and binary64, by the method minimax; leave the reduction out.');

/** Whether a plain polynomial would need a degree above 12. By the Chebyshev coefficients of f in doubles: an estimate that only chooses the way. */
export function needsHighDegree({ whole }: ReductionProblem, budget: Budget): boolean {
  const { tolerance } = whole;
  if (!tolerance) return false;
  const [low, high] = [Q.toDouble(whole.low), Q.toDouble(whole.high)];
  const values = Array.from({ length: NODES }, (_, j) => {
    budget.check();
    const x = (low + high) / 2 + ((high - low) / 2) * Math.cos((Math.PI * (2 * j + 1)) / (2 * NODES));
    const value = encloseReal(whole.function, new Map([[whole.variable, real.fromDouble(x)]]), 80, describe);
    return value ? real.toDouble(value) : NaN;
  });
  if (!values.every(Number.isFinite)) return true;
  const tail = Array.from({ length: NODES - COMFORTABLE_DEGREE - 1 }, (_, i) => i + COMFORTABLE_DEGREE + 1).reduce(
    (sum, k) => sum + Math.abs((2 / NODES) * values.reduce((s, v, j) => s + v * Math.cos((Math.PI * k * (2 * j + 1)) / (2 * NODES)), 0)),
    0,
  );
  const sizes = values.map(Math.abs);
  const largest = Math.max(...sizes);
  const scale = whole.measure === 'absolute' ? 1 : whole.measure === 'ulp' ? 2 ** -whole.format.precision * Math.max(Math.min(...sizes), largest * 2 ** -20) : Math.max(Math.min(...sizes), largest * 2 ** -20);
  // Below the rounding of these doubles nothing can be told.
  return tail > Math.max(Q.toDouble(tolerance) * scale, largest * 2 ** -44);
}

export function reduce(problem: ReductionProblem, shape: Shape, budget: Budget): Reduced {
  switch (shape.kind) {
    case 'exponential':
      return reduceExponential(problem, shape.rate, budget);
    case 'circular':
      return reduceCircular(problem, shape.rate, shape.quarter, budget);
    case 'tangent':
      return reduceTangent(problem, shape.factor, shape.rate, budget);
    case 'hyperbolic':
      return reduceHyperbolic(problem, shape, budget);
    case 'logarithm':
      return reduceLogarithm(problem, shape.factor, shape.plusOne, budget);
    case 'arc':
      return reduceArc(problem, shape.of, shape.factor, budget);
    case 'arctangent':
      return reduceArctangent(problem, shape.factor, budget);
    case 'power':
      return reducePower(problem, shape.exponent, budget);
  }
}
