/** Signs of algebraic numbers from their isolating discs. */
import { Q, type Rational } from '../expression/index.ts';
import { isolateRoots } from '../functions/index.ts';
import { real } from '../rigorous/index.ts';
import type { KernelShape } from './kernel.ts';

type AlgebraicShape = Extract<KernelShape, { kind: 'algebraic' }>;

/** The sign of the kernel, whose polynomial has a positive leading coefficient; zero is no value of it. */
export function signOfAlgebraic(shape: AlgebraicShape): 1 | -1 | 'complex' {
  const disc = isolateRoots(shape.coefficients)?.[shape.index - 1];
  if (!disc?.real) return 'complex';
  const { re } = disc.centre;
  // The disc reaches a quarter of the way to the next zero, and may hold 0: then the centre's own digits decide only if the polynomial changes sign between.
  const ball = real.withRadius(re, disc.radius);
  if (real.isPositive(ball)) return 1;
  if (real.isNegative(ball)) return -1;
  return signBetween(shape.coefficients, real.upper(ball));
}

/** The one real zero in a disc around 0: p(0) and p at the right end differ in sign exactly where it is positive. */
function signBetween(coefficients: readonly bigint[], right: Rational): 1 | -1 {
  const at = coefficients.reduce<Rational>((s, c) => Q.add(Q.multiply(s, right), Q.rational(c)), Q.ZERO);
  const last = Q.rational(coefficients[coefficients.length - 1] ?? 0n);
  return Q.signOf(at) * Q.signOf(last) < 0 ? 1 : -1;
}

export const isRealAlgebraicShape = (shape: AlgebraicShape): boolean => isolateRoots(shape.coefficients)?.[shape.index - 1]?.real === true;
