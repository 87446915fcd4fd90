/** Where the derivative of an exponent changes sign, for exponents whose derivatives are products of rational functions, sines and cosines of linear ones, and factors without zeros: the zeros are found exactly, and between them the exponent is monotone. */
import type { Element } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, Q, substitute } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { isZero } from '../../series/index.ts';
import { clearedOfDenominators } from '../root/rational.ts';
import { zerosOf } from '../root/zeros.ts';
import type { Evaluate, Session } from '../session.ts';
import { polynomialIn } from './polynomial.ts';
import { regularOn, type Range, signOn } from './monotone.ts';
import { powersOf } from './powers.ts';

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
    const zeros = zerosIn(s, range, slope, evaluate);
    if (zeros === null) return null;
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

/** All zeros of the slope inside the range, and perhaps some outside; null where they could not be found. */
function zerosIn(s: Session, range: Range, slope: Expression, evaluate: Evaluate): Element[] | null {
  const factors = slope.kind === 'product' ? slope.factors : slope.kind === 'negation' ? [slope.operand] : [slope];
  if (slope.kind !== 'product' && slope.kind !== 'negation') return ofWave(s, range, slope) ?? ofPolynomial(s, slope, range.variable, evaluate);
  const zeros: Element[] = [];
  for (const f of factors) {
    if (!dependsOn(f, range.variable) || signOn(range, f) !== null) continue;
    const own = zerosIn(s, range, f, evaluate);
    if (own === null) return null;
    for (const z of own) if (!zeros.some((other) => isZero(s.context, s.context.field.subtract(z, other)))) zeros.push(z);
  }
  return zeros;
}

function ofPolynomial(s: Session, slope: Expression, v: string, evaluate: Evaluate): Element[] | null {
  const { context: c } = s;
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
  return zeros;
}

/** Zeros that a sine or cosine may have in a range. */
const MOST_ZEROS = 64;

/** Of sin(a v + b) and cos(a v + b) over a finite range; null for others. */
function ofWave(s: Session, range: Range, e: Expression): Element[] | null {
  const { field } = s.context;
  const [argument] = e.kind === 'call' && (e.function === 'sin' || e.function === 'cos') ? e.args : [];
  if (!argument || e.kind !== 'call' || range.low === null || range.high === null) return null;
  const line = powersOf(field, argument, range.variable);
  if (!line || line.terms.some((t) => !Q.isOne(t.exponent) && !Q.isZero(t.exponent))) return null;
  const rate = line.terms.find((t) => Q.isOne(t.exponent))?.coefficient;
  if (!rate) return null;
  const start = line.terms.find((t) => Q.isZero(t.exponent))?.coefficient ?? Q.ZERO;
  const half = field.multiply(Q.HALF, field.fromExpression(build.constant('pi')));
  // Where the argument is k pi/2, k odd for the cosine.
  const at = (k: bigint): Element => field.divide(field.subtract(field.multiply(Q.rational(k), half), start), rate);
  const values = [range.low, range.high].map((end) => field.add(field.multiply(rate, field.fromExpression(end)), start)) as [Element, Element];
  const zeros: Element[] = [];
  for (let k = BigInt(-2 * MOST_ZEROS); k <= BigInt(2 * MOST_ZEROS); k += 1n) {
    if ((k % 2n === 0n) === (e.function === 'sin')) zeros.push(at(k));
  }
  const reach = field.multiply(Q.rational(BigInt(2 * MOST_ZEROS)), half);
  const bounded = values.every((x) => above(field.compare(reach, x)) && above(field.compare(x, field.negate(reach))));
  return bounded ? zeros : null;
}

/** Strictly greater; an open question is none of the answers. */
function above(sign: ReturnType<Session['context']['field']['compare']>): boolean {
  if (sign === 1 || sign === 0 || sign === -1) return sign === 1;
  throw new Declined('undecided', 'The order of two stationary points could not be decided.');
}
