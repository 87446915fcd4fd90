/** Local models over one arithmetic and domain. */
import type { Arithmetic, RealArithmetic } from './arithmetic.ts';
import { modelAlgebra } from './model-algebra.ts';
import { modelFunctions } from './model-functions.ts';
import { modelSolutions } from './model-solutions.ts';
import type { ModelArithmetic } from './model.types.ts';

/** `oneSided`: the domain is [0, 1], so that (s^v)^q = s^(vq). `real`: the same arithmetic where it is real; exponentials that vanish faster than every power are then enclosed as a mere tail. */
export function modelArithmetic<T>(a: Arithmetic<T>, domain: T, length: number, oneSided: boolean, real: RealArithmetic<T> | null = null): ModelArithmetic<T> {
  const algebra = modelAlgebra(a, domain, length, oneSided, real);
  const functions = modelFunctions(algebra, modelSolutions(algebra));
  const { constant, polynomial, add, subtract, negate, scale, multiply, divide, regular, polynomialPart, rangeOf, withRange } = algebra;
  const { powerInteger, powerRational, power, elementary, elementaryAtInfinity, integrate } = functions;
  return { a, domain, length, constant, polynomial, add, subtract, negate, scale, multiply, divide, powerInteger, powerRational, power, elementary, elementaryAtInfinity, integrate, regular, polynomialPart, rangeOf, withRange };
}
