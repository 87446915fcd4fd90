/**
 * A sum that equals its function near the point need not equal it on a whole interval: |x - 1| is x - 1 near 3, arcsin(sin x) is x near 0.
 * By the identity theorem it does wherever the function is analytic along the way.
 */
import type { Expansion } from '../expand/index.ts';
import { build, children, dependsOn, type Expression, isFieldOperation, mapChildren } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Ball, complex, type ComplexBall, enclose, encloseReal, real } from '../rigorous/index.ts';
import type { ClosedInterval } from './types.ts';

/** Meromorphic in the whole plane: one formula serves everywhere. */
const MEROMORPHIC = new Set(['exp', 'sin', 'cos', 'tan', 'cot', 'sec', 'csc', 'sinh', 'cosh', 'tanh', 'coth', 'sech', 'csch', 'gamma', 'erf', 'erfc', 'factorial']);
const BITS = 64;
const DEEPEST = 7;

/** Whether the tree is made of parts that have no branches, so that equality near one point is equality everywhere. */
export function isOnePiece(e: Expression, variable: string): boolean {
  if (!dependsOn(e, variable)) return true;
  const inner = (part: Expression): boolean => isOnePiece(part, variable);
  if (isFieldOperation(e)) return children(e).every(inner);
  switch (e.kind) {
    case 'symbol':
      return true;
    case 'power': {
      if (!dependsOn(e.base, variable)) return inner(e.exponent);
      const { exponent } = e;
      const whole = exponent.kind === 'negation' ? exponent.operand : exponent;
      // A power of the variable itself serves its own side.
      return (whole.kind === 'number' && whole.value.den === 1n && inner(e.base)) || (e.base.kind === 'symbol' && !dependsOn(exponent, variable));
    }
    case 'call':
      return (MEROMORPHIC.has(e.function) && e.args.every(inner)) || ((e.function === 'log' || e.function === 'sqrt') && e.args.length === 1 && e.args[0]?.kind === 'symbol');
    default:
      return false;
  }
}

/** Whether a sum that is exact near the point is proved to be exact on the whole interval: no branches, or analytic on a neighbourhood of all of it and the point. */
export function isExactOn(expansion: Expansion, interval: ClosedInterval, variable: string, parameters: ReadonlyMap<string, Ball>): boolean {
  if (isOnePiece(expansion.function, variable)) return true;
  const { point } = expansion;
  if (point === 'inf' || point === '-inf') return false;
  const ends = [interval.lower, interval.upper, point].map((e) => encloseReal(e, parameters, BITS, describe));
  const [first, ...rest] = ends;
  if (!first || rest.some((b) => b === null)) return false;
  const hull = rest.reduce<Ball>((all, b) => (b ? real.union(all, b, BITS) : all), first);
  // On the hull f is what its extremes and absolute values are there.
  const whole = decided(expansion.function, new Map([...parameters, [variable, hull]]));
  if (isOnePiece(whole, variable)) return true;
  const environment = new Map<string, ComplexBall>([...parameters].map(([name, b]) => [name, complex.fromReal(b)]));
  const analytic = (part: Ball, depth: number): boolean => {
    // A little wider than the piece, so that neighbouring pieces overlap in an open set.
    const width = real.scaleByPowerOfTwo(real.union(real.ZERO, real.absolute(real.subtract(hull, real.midpoint(hull), BITS)), BITS), -10);
    const symmetric = real.union(width, real.negate(width), BITS);
    const box = complex.fromParts(real.add(part, symmetric, BITS), symmetric);
    if (enclose(whole, new Map(environment).set(variable, box), BITS, describe, true)) return true;
    if (depth === 0) return false;
    const middle = real.midpoint(part);
    const [low, high] = [real.fromRational(real.lower(part), BITS), real.fromRational(real.upper(part), BITS)];
    return analytic(real.union(low, middle, BITS), depth - 1) && analytic(real.union(middle, high, BITS), depth - 1);
  };
  return analytic(hull, DEEPEST);
}

/** The tree with each extreme and absolute value of two sides whose order is the same on all of the sets written as the side that it is. */
function decided(e: Expression, sets: ReadonlyMap<string, Ball>): Expression {
  const tree = mapChildren(e, (part) => decided(part, sets));
  if (tree.kind !== 'call') return tree;
  const signOf = (part: Expression): 1 | -1 | 0 => {
    const value = encloseReal(part, sets, BITS, describe);
    return value === null ? 0 : real.isNonNegative(value) ? 1 : real.isNonNegative(real.negate(value)) ? -1 : 0;
  };
  const [first, ...rest] = tree.args;
  if (!first) return tree;
  if (tree.function === 'abs' && rest.length === 0) {
    const sign = signOf(first);
    return sign > 0 ? first : sign < 0 ? build.negation(first) : tree;
  }
  if (tree.function !== 'max' && tree.function !== 'min') return tree;
  let winner = first;
  for (const next of rest) {
    const sign = signOf(build.difference(next, winner));
    if (sign === 0) return tree;
    if (sign > 0 === (tree.function === 'max')) winner = next;
  }
  return winner;
}
