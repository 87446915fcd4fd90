/** Where the derivative of an exponent changes sign, for exponents with rational derivatives: the zeros are found exactly, and between them the exponent is monotone. */
import type { Element } from '../../algebra/types.ts';
import { type Expression, Q, substitute } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { isZero } from '../../series/index.ts';
import { clearedOfDenominators } from '../root/rational.ts';
import { zerosOf } from '../root/zeros.ts';
import type { Evaluate, Session } from '../session.ts';
import { polynomialIn } from './polynomial.ts';
import { regularOn, type Range } from './monotone.ts';

export interface Piece {
  readonly low: Expression | null;
  readonly high: Expression | null;
  readonly direction: 1 | -1;
}

/** The pieces of the range on which phi is monotone, in order; null where that could not be proven. */
export function monotonePieces(s: Session, range: Range, phi: Expression, evaluate: Evaluate): readonly Piece[] | null {
  const { context: c } = s;
  const { field } = c;
  const v = range.variable;
  if (!regularOn(range, phi)) return null;
  try {
    const slope = differentiate(phi, v);
    if (!slope) return null;
    const numerator = clearedOfDenominators(slope, v)?.numerator ?? slope;
    const coefficients: Element[] = [];
    for (const t of polynomialIn(s, numerator, v, evaluate)) {
      while (coefficients.length < Number(t.power)) coefficients.push(Q.ZERO);
      coefficients[Number(t.power)] = t.coefficient;
    }
    if (coefficients.length === 0) return null;
    const zeros = coefficients.length > 1 ? zerosOf(c, coefficients, false).filter((z) => z.real).map((z) => z.value) : [];
    const [constant] = coefficients;
    if (constant !== undefined && isZero(c, constant)) zeros.push(Q.ZERO);
    const [low, high] = [range.low, range.high].map((e) => (e === null ? null : field.fromExpression(e)));
    const inside = zeros.filter((z) => (low === null || low === undefined || above(field.compare(z, low))) && (high === null || high === undefined || above(field.compare(high, z))));
    const sorted = [...inside].sort((a, b) => (field.compare(a, b) === 1 ? 1 : -1));
    const ends: (Element | null)[] = [low ?? null, ...sorted, high ?? null];
    const pieces: Piece[] = [];
    for (let k = 0; k + 1 < ends.length; k += 1) {
      const [from, to] = [ends[k] ?? null, ends[k + 1] ?? null];
      const between = from === null ? (to === null ? Q.ZERO : field.subtract(to, Q.ONE)) : to === null ? field.add(from, Q.ONE) : field.multiply(field.add(from, to), Q.HALF);
      const sign = field.sign(field.fromExpression(substitute(slope, v, field.toExpression(between))));
      if (sign !== 1 && sign !== -1) return null;
      pieces.push({ low: from === null ? null : field.toExpression(from), high: to === null ? null : field.toExpression(to), direction: sign });
    }
    return pieces;
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}

/** Strictly greater; an open question is none of the answers. */
function above(sign: ReturnType<Session['context']['field']['compare']>): boolean {
  if (sign === 1 || sign === 0 || sign === -1) return sign === 1;
  throw new Declined('undecided', 'The order of two stationary points could not be decided.');
}
