/** Best-first refinement of pieces: sup |f - sum| over finite segments that do not touch the point of expansion. */
import { type Expression, substitute } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { type Model, modelArithmetic } from '../rigorous/index.ts';
import { logModelOf, middleModel, modelOf } from './local.ts';
import { exactNear } from './exactNear.ts';
import type { Numbers } from './numbers.ts';
import { isExactlyZero } from './region.ts';
import { supremumOfModel } from './supremum.ts';
import type { Measure } from './types.ts';

export interface PieceTask<T> {
  readonly x0: T;
  readonly x1: T;
  readonly expansion: Expansion;
  readonly sum: Expression;
  /** Ends of the interval at which f may have a branch point. */
  readonly touches: 'lower' | 'upper' | 'none';
  /** The exact numbers at the ends, where they are places of interest: what vanishes there can be proved to. */
  readonly lowerPlace?: Expression;
  readonly upperPlace?: Expression;
}

export interface Enclosed<T> {
  readonly upper: T | null;
  readonly lower: T;
  readonly pieces: number;
  /** A smallest piece on which no bound was found. */
  readonly trouble?: PieceTask<T>;
}

interface Piece<T> extends PieceTask<T> {
  readonly upper: T | null;
}

export interface PieceOptions {
  readonly variable: string;
  readonly measure: Measure;
  readonly slack: number;
  readonly most: number;
  readonly length: number;
  readonly check: () => void;
  /** log2 of the least positive distance from an end at which f is asked for; at the end itself its limit is, where it has one. Absent: any distance. */
  readonly nearest?: number;
}

/** The remainder (or its ratio to f) at one number; null where undefined. */
export function remainderAt<T>(x: T, task: { readonly expansion: Expansion; readonly sum: Expression }, n: Numbers<T>, options: { readonly variable: string; readonly measure: Measure }): T | null {
  const place = new Map([[options.variable, x]]);
  const [f, s] = [n.value(task.expansion.function, place), n.value(task.sum, place)];
  if (f === null || s === null) return null;
  const difference = n.r.subtract(f, s);
  return options.measure === 'absolute' ? difference : n.r.divide(difference, f);
}

export function refinePieces<T>(tasks: readonly PieceTask<T>[], floor: T, n: Numbers<T>, options: PieceOptions): Enclosed<T> {
  const { r } = n;
  const absLower = (x: T): T => r.lowerEnd(r.absolute(x));
  const absUpper = (x: T): T => r.upperEnd(r.absolute(x));
  let lower = floor;
  const offer = (y: T | null): void => {
    if (y !== null) lower = r.lowerEnd(r.maximum(lower, absLower(y)));
  };
  const bound = (task: PieceTask<T>): T | null => {
    options.check();
    offer(remainderAt(r.midpoint(r.union(task.x0, task.x1)), task, n, options));
    const models = middleModel(task.expansion, task.sum, task.x0, task.x1, n, options.variable, options.length, options.check);
    const g = models === null ? null : options.measure === 'absolute' ? models.remainder : models.m.divide(models.remainder, models.f);
    if (g !== null && g.valuation >= 0) {
      const result = supremumOfModel(r, g, { from: r.negate(r.one), to: r.one, floor: lower, slack: options.slack / 4, most: 60, check: options.check });
      lower = r.lowerEnd(r.maximum(lower, result.lower));
      return result.upper;
    }
    return endBound(task) ?? rangeBound(task);
  };
  /** A branch point at an end of the interval: one-sided model in the root of the distance. */
  const endBound = (task: PieceTask<T>): T | null => {
    const side = task.lowerPlace ? 'lower' : task.upperPlace ? 'upper' : task.touches;
    if (side === 'none') return null;
    const place = side === 'lower' ? task.lowerPlace : task.upperPlace;
    const vanishes = place ? (e: Expression): boolean => isExactlyZero(substitute(e, options.variable, place), []) : undefined;
    for (const q of [1, 2, 3]) {
      const m = modelArithmetic(r, n.unitRight, options.length, true, r);
      const end = side === 'lower' ? task.x0 : task.x1;
      const width = r.upperEnd(r.absolute(r.subtract(task.x1, task.x0)));
      const zeros = Array.from({ length: q - 1 }, () => r.zero);
      const leaf = m.withRange(m.polynomial([end, ...zeros, side === 'lower' ? width : r.negate(width)]), r.union(task.x0, task.x1));
      const s = modelOf(task.sum, n, m, options.variable, leaf, vanishes, options.check);
      const logs = s && logModelOf(task.expansion.function, n, m, options.variable, leaf, vanishes, options.check);
      const [f] = logs ?? [];
      if (s === null || !logs || !f) continue;
      const beside = logs.length === 1 ? r.zero : logarithmicPart(logs.slice(1), width);
      if (beside === null || (logs.length > 1 && options.measure !== 'absolute')) continue;
      const remainder: Model<T> = m.subtract(f, s);
      const g = options.measure === 'absolute' ? remainder : m.divide(remainder, f);
      if (g === null || g.valuation < 0) continue;
      const result = supremumOfModel(r, g, { from: r.zero, to: r.one, floor: lower, slack: options.slack / 4, most: 60, check: options.check });
      lower = r.lowerEnd(r.maximum(lower, r.lowerEnd(r.subtract(result.lower, beside))));
      return r.upperEnd(r.add(result.upper, beside));
    }
    return null;
  };
  /**
   * sup |sum of g_j(s) log(s)^j, j >= 1| over the distances asked for: logarithms that cancel leave models whose coefficients are zero up to the working precision.
   * With a finite limit at the end the constant terms of all g_j are zero exactly, so that the part without logarithms has the same limit.
   */
  const logarithmicPart = (parts: readonly Model<T>[], width: T): T | null => {
    if (options.nearest === undefined) return null;
    const most = r.fromInteger(BigInt(Math.max(1, Math.ceil(Math.log2(r.toDouble(width))) + 1 - options.nearest)));
    let sum = r.zero;
    for (const [k, g] of parts.entries()) {
      if (g.valuation < 0) return null;
      // |log s| <= log2(1/s), and s >= 2^-most.
      const { upper } = supremumOfModel(r, g, { from: r.zero, to: r.one, slack: 1, most: 20, check: options.check });
      sum = r.add(sum, r.multiply(upper, r.powerInteger(most, k + 1) ?? r.one));
    }
    return r.upperEnd(sum);
  };
  /** Nothing but ranges: coarse, but it needs no derivative. */
  const rangeBound = (task: PieceTask<T>): T | null => {
    const value = remainderAt(r.union(task.x0, task.x1), task, n, options);
    return value === null ? null : absUpper(value);
  };

  for (const task of tasks) {
    offer(remainderAt(r.lowerEnd(task.x0), task, n, options));
    offer(remainderAt(r.upperEnd(task.x1), task, n, options));
  }
  let undefinedPieces = 0;
  const open: Piece<T>[] = tasks.map((task) => ({ ...task, upper: bound(task) }));
  const larger = (a: T | null, b: T | null): boolean => (a === null ? b !== null : b !== null && r.isPositive(r.subtract(a, b)));
  let pieces = open.length;
  for (;;) {
    let worst = 0;
    for (let k = 1; k < open.length; k += 1) if (larger(open[k]?.upper ?? null, open[worst]?.upper ?? null)) worst = k;
    const piece = open[worst];
    if (piece === undefined) return { upper: lower, lower, pieces };
    const target = r.multiply(lower, r.fromRational({ num: BigInt(Math.round((1 + options.slack) * 2 ** 30)), den: 1n << 30n }));
    if (piece.upper !== null && !r.isPositive(r.subtract(piece.upper, target))) return { upper: r.upperEnd(r.maximum(piece.upper, lower)), lower, pieces };
    const middle = r.midpoint(r.union(piece.x0, piece.x1));
    // Where f cannot be enclosed, thirty halvings have come within 1e-9 of what is in the way.
    if (piece.upper === null) undefinedPieces += 1;
    if (piece.upper === null && undefinedPieces % 8 === 0) {
      const sides = dividedAtPlace(piece, n);
      if (sides !== null) {
        const [first, ...others] = sides.map((task) => ({ ...task, upper: bound(task) }));
        if (first) open[worst] = first;
        open.push(...others);
        pieces += others.length;
        continue;
      }
    }
    const exhausted = pieces >= options.most || undefinedPieces > 44 || !r.isPositive(r.subtract(middle, r.lowerEnd(piece.x0))) || !r.isPositive(r.subtract(r.upperEnd(piece.x1), middle));
    if (exhausted) return piece.upper === null ? { upper: null, lower, pieces, trouble: piece } : { upper: piece.upper, lower, pieces };
    const left: PieceTask<T> = { ...piece, x1: middle, upperPlace: undefined, touches: piece.touches === 'upper' ? 'none' : piece.touches };
    const right: PieceTask<T> = { ...piece, x0: middle, lowerPlace: undefined, touches: piece.touches === 'lower' ? 'none' : piece.touches };
    open[worst] = { ...left, upper: bound(left) };
    open.push({ ...right, upper: bound(right) });
    pieces += 1;
  }
}

/** The piece cut at an exact number inside it, the simplest of the usual shapes: a removable singularity then is an end. Null where that is done already. */
function dividedAtPlace<T>(piece: PieceTask<T>, n: Numbers<T>): readonly PieceTask<T>[] | null {
  const { r } = n;
  const [a, b] = [r.toDouble(piece.x0), r.toDouble(piece.x1)];
  if (piece.lowerPlace && piece.upperPlace) return null;
  for (const place of exactNear((a + b) / 2, (b - a) * 0.5 * (1 + 1e-12))) {
    const p = n.value(place);
    if (p === null) continue;
    const [above, below] = [r.subtract(p, piece.x0), r.subtract(piece.x1, p)];
    if (r.isNegative(above) || r.isNegative(below)) continue;
    const known = r.isZero(above) ? piece.lowerPlace : r.isZero(below) ? piece.upperPlace : undefined;
    if (known) continue;
    const parts: PieceTask<T>[] = [];
    if (!r.isZero(above)) parts.push({ ...piece, x1: p, upperPlace: place, touches: piece.touches === 'upper' ? 'none' : piece.touches });
    if (!r.isZero(below)) parts.push({ ...piece, x0: p, lowerPlace: place, touches: piece.touches === 'lower' ? 'none' : piece.touches });
    return parts;
  }
  return null;
}
