/** Inverse circular functions of square roots as the inverse circular function that has no root in it. */
import { build, type Expression, type Rational, Q, walk } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { type Context, eventualSign, isRealMulti, type Multi, Series } from '../series/index.ts';

/** Nodes of an argument that is looked into. */
const LARGEST = 60;

const isHalf = (q: Rational): boolean => q.den !== 1n;
const hasRoot = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'root' || (n.kind === 'call' && (n.function === 'sqrt' || n.function === 'abs')) || (n.kind === 'power' && n.exponent.kind === 'number' && isHalf(n.exponent.value)));

/** u with arctan z = arcsin u on the side, where z is real and z^2/(1 + z^2) = u^2 for a u without roots: arctan(x/sqrt(1 - x^2)) (DLMF 4.24.16 with 4.24.17 turned round). `z` is the value of the tree there. Null where there is none. */
export function sineOfArctangent(c: Context, tree: Expression, z: Multi): Expression | null {
  if (!(z instanceof Series) || [...walk(tree)].length > LARGEST || !hasRoot(tree) || !isRealMulti(c, z)) return null;
  const { field } = c;
  try {
    const value = field.fromExpression(tree);
    const square = field.multiply(value, value);
    const size = field.toExpression(field.power(field.divide(square, field.add(Q.ONE, square)), Q.HALF));
    const sign = hasRoot(size) ? 0 : eventualSign(c, z);
    return sign === 1 ? size : sign === -1 ? build.negation(size) : null;
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}
