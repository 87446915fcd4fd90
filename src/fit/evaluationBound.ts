/** The rounding error of an evaluation form over an interval, in the measure of a fit: a sum of pieces, each with its own binades. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import type { Budget } from '../outcome.ts';
import { encloseInterval, type Interval, interval } from '../rigorous/index.ts';
import { evaluationError } from './evaluationError.ts';
import type { FloatFormat } from './format.ts';

export interface EvaluationBound {
  /** sup |computed - p|. */
  readonly absolute: number;
  /** sup |computed - p| / |p| over arguments with |p| not below the smallest normal numbers; Infinity where no such bound is known. */
  readonly relative: number;
}

const PIECES = 96;
/** Halvings towards a zero of the polynomial: beyond, the relative bound of the last product serves. */
const HALVINGS = 40;

/** Pieces that grow with the distance from `centre` where it lies inside, so that each piece sees one or two binades. */
function pieces(low: number, high: number, centre: number): Interval[] {
  const list: Interval[] = [];
  const cut = (a: number, b: number, count: number): void => {
    for (let k = 0; k < count; k += 1) list.push({ lo: k === 0 ? a : a + ((b - a) * k) / count, hi: k === count - 1 ? b : a + ((b - a) * (k + 1)) / count });
  };
  if (centre < low || centre > high) cut(low, high, PIECES);
  else {
    for (const end of [low, high]) {
      if (end === centre) continue;
      let far = end;
      for (let k = 0; k < HALVINGS; k += 1) {
        const near = k === HALVINGS - 1 ? centre : centre + (far - centre) / 2;
        cut(Math.min(near, far), Math.max(near, far), k === 0 ? PIECES / 2 : k < 3 ? PIECES / 4 : 6);
        far = near;
      }
    }
  }
  return list;
}

/** Sound for every float argument in [low, high]; throws Declined where the evaluation can overflow or divide by zero. */
export function evaluationBound(tree: Expression, variable: string, low: Rational, high: Rational, centre: Rational, format: FloatFormat, budget: Budget): EvaluationBound {
  let absolute = 0;
  let relative = 0;
  // Outward: the pieces cover the whole interval.
  const [a, b] = [interval.fromRational(low).lo, interval.fromRational(high).hi];
  for (const piece of pieces(a, b, Q.toDouble(centre))) {
    budget.check();
    const bound = evaluationError(tree, variable, piece, format);
    absolute = Math.max(absolute, bound.absolute);
    // A sharper enclosure of the value makes the relative bound of a piece sharper.
    const value = encloseInterval(tree.kind === 'call' ? build.sum(tree) : tree, new Map([[variable, piece]]), describe);
    const least = Math.max(interval.leastSize(bound.exact), value ? interval.leastSize(value) : 0);
    relative = Math.max(relative, Math.min(bound.relative, least > 0 ? interval.up(bound.absolute / least) : Infinity));
  }
  return { absolute, relative };
}
