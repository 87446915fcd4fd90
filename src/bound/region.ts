/** The interval of the variable cut into segments, each with at most one special end: the point of expansion, or an infinite end. */
import { createField } from '../algebra/index.ts';
import { build, type Assumption, type Expression } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { describe } from '../functions/index.ts';
import { budget, Declined } from '../outcome.ts';
import { type Ball, encloseReal, real } from '../rigorous/index.ts';
import type { ClosedInterval } from './types.ts';

/** x0 < x1; `local` names the end that carries a local variable: x = x0 + t, x = x1 - t, x = 1/t or x = -1/t. */
export interface Segment {
  readonly lower: Expression | null;
  readonly upper: Expression | null;
  readonly local: 'lower' | 'upper' | 'none';
  /** The expansion that serves this segment, and whether its point is the local end. */
  readonly expansion: Expansion;
  readonly atPoint: boolean;
}

/** Three-valued comparisons of exact real numbers: balls at rising precision, then the field's zero test. */
export function compareReal(a: Expression, b: Expression, assumptions: readonly Assumption[]): -1 | 0 | 1 {
  for (const precision of [64, 256, 1024]) {
    const [x, y] = [encloseReal(a, new Map(), precision, describe), encloseReal(b, new Map(), precision, describe)];
    if (x === null || y === null) break;
    const order = real.compare(x, y);
    if (order !== null) return order;
  }
  if (isExactlyZero(build.difference(a, b), assumptions)) return 0;
  throw new Declined('undecided', 'The ends of the interval could not be compared with the point; write them as plain numbers.');
}

export function isExactlyZero(e: Expression, assumptions: readonly Assumption[]): boolean {
  try {
    const field = createField(assumptions, budget(200));
    return field.isZero(field.fromExpression(e)) === 'yes' && field.needed.size === 0;
  } catch (error) {
    if (error instanceof Declined) return false;
    throw error;
  }
}

/** The tree in the field's normal form for a variable of one sign; the tree itself where the field does not know it. */
export function normalForm(e: Expression, variable: string, sign: '>' | '<'): Expression {
  try {
    const field = createField([{ kind: 'relation', left: build.symbol(variable), relation: sign, right: build.number(0) }], budget(200));
    const value = field.toExpression(field.fromExpression(e));
    return field.needed.size === 0 ? value : e;
  } catch (error) {
    if (error instanceof Declined) return e;
    throw error;
  }
}

const isInfinity = (e: Expression): boolean => e.kind === 'constant' && e.name === 'infinity';
const endOf = (e: Expression): Expression | 'inf' | '-inf' => {
  if (isInfinity(e)) return 'inf';
  if (e.kind === 'negation' && isInfinity(e.operand)) return '-inf';
  return e;
};

export function segmentsOf(expansion: Expansion, interval: ClosedInterval, assumptions: readonly Assumption[]): readonly Segment[] {
  const [lower, upper] = [endOf(interval.lower), endOf(interval.upper)];
  if (lower === 'inf' || upper === '-inf') throw new Declined('bad-request', 'The interval must run from its smaller end to its larger one.');
  const low = lower === '-inf' ? null : lower;
  const high = upper === 'inf' ? null : upper;
  if (low && high) {
    const order = compareReal(low, high, assumptions);
    if (order > 0) throw new Declined('bad-request', 'The interval must run from its smaller end to its larger one.');
    if (order === 0) return [{ lower: low, upper: high, local: 'none', expansion, atPoint: false }];
  }
  const left = expansion.left ?? expansion;
  const point = expansion.point;
  if (point === 'inf' || point === '-inf') return cutEnds(low, high, expansion, point === 'inf' ? 'upper' : 'lower', assumptions);
  const fromPoint = low ? compareReal(low, point, assumptions) : -1;
  const toPoint = high ? compareReal(high, point, assumptions) : 1;
  if (!expansion.left && ((expansion.side === 'right' && fromPoint < 0) || (expansion.side === 'left' && toPoint > 0))) {
    throw new Declined('bad-request', `The expansion serves the ${expansion.side} side of the point only; choose an interval on that side.`);
  }
  const segments: Segment[] = [];
  if (fromPoint < 0) segments.push(...leftOf(low, toPoint >= 0 ? point : high, left, toPoint >= 0));
  if (toPoint > 0) segments.push(...rightOf(fromPoint <= 0 ? point : low, high, expansion, fromPoint <= 0));
  return segments;
}

/** [x0, x1] right of (or from) the point; an infinite end is cut off at twice the way. */
function rightOf(x0: Expression | null, x1: Expression | null, expansion: Expansion, atPoint: boolean): Segment[] {
  if (x0 === null) return [];
  if (x1 !== null) return [{ lower: x0, upper: x1, local: atPoint ? 'lower' : 'none', expansion, atPoint }];
  const cut = build.sum(build.call('abs', x0), build.number(1));
  return [
    { lower: x0, upper: cut, local: atPoint ? 'lower' : 'none', expansion, atPoint },
    { lower: cut, upper: null, local: 'upper', expansion, atPoint: false },
  ];
}
function leftOf(x0: Expression | null, x1: Expression | null, expansion: Expansion, atPoint: boolean): Segment[] {
  if (x1 === null) return [];
  if (x0 !== null) return [{ lower: x0, upper: x1, local: atPoint ? 'upper' : 'none', expansion, atPoint }];
  const cut = build.negation(build.sum(build.call('abs', x1), build.number(1)));
  return [
    { lower: cut, upper: x1, local: atPoint ? 'upper' : 'none', expansion, atPoint },
    { lower: null, upper: cut, local: 'lower', expansion, atPoint: false },
  ];
}

/** The point is infinite: the part on its side of zero has it as local end. */
function cutEnds(low: Expression | null, high: Expression | null, expansion: Expansion, side: 'lower' | 'upper', assumptions: readonly Assumption[]): readonly Segment[] {
  const zero = build.number(0);
  const one = build.number(1);
  if (side === 'upper') {
    if (low && compareReal(low, zero, assumptions) > 0) return [{ lower: low, upper: high, local: 'upper', expansion, atPoint: true }];
    if (high && compareReal(high, one, assumptions) <= 0) return leftOrWhole(low, high, expansion);
    return [...leftOrWhole(low, one, expansion), { lower: one, upper: high, local: 'upper', expansion, atPoint: true }];
  }
  if (high && compareReal(high, zero, assumptions) < 0) return [{ lower: low, upper: high, local: 'lower', expansion, atPoint: true }];
  const minusOne = build.number(-1);
  if (low && compareReal(low, minusOne, assumptions) >= 0) return rightOrWhole(low, high, expansion);
  return [{ lower: low, upper: minusOne, local: 'lower', expansion, atPoint: true }, ...rightOrWhole(minusOne, high, expansion)];
}
const leftOrWhole = (low: Expression | null, high: Expression, expansion: Expansion): Segment[] => leftOf(low, high, expansion, false);
const rightOrWhole = (low: Expression, high: Expression | null, expansion: Expansion): Segment[] => rightOf(low, high, expansion, false);

/** Interval assumptions on parameters (`0.9 <= c <= 1.1`) as balls; others are left to the field. */
export function parameterBalls(names: readonly string[], assumptions: readonly Assumption[]): ReadonlyMap<string, Ball> {
  const result = new Map<string, Ball>();
  for (const name of names) {
    let low: Ball | null = null;
    let high: Ball | null = null;
    for (const a of assumptions) {
      if (a.kind !== 'relation') continue;
      const nameLeft = a.left.kind === 'symbol' && a.left.name === name;
      const nameRight = a.right.kind === 'symbol' && a.right.name === name;
      if (!nameLeft && !nameRight) continue;
      const value = encloseReal(nameLeft ? a.right : a.left, new Map(), 128, describe);
      if (value === null) continue;
      if (a.relation === '=') {
        low = value;
        high = value;
      } else if ((a.relation === '<' || a.relation === '<=') === nameLeft) high = high === null ? value : real.minimum(high, value);
      else if (a.relation !== '!=') low = low === null ? value : real.maximum(low, value);
    }
    if (low && high) result.set(name, real.fromEnds(low, high, 128));
  }
  return result;
}
