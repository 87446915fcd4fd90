/** sup |f - p| (or |f - p|/|f|) for a given polynomial p: what a fitted polynomial owes its user. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../outcome.ts';
import { modelArithmetic, real } from '../rigorous/index.ts';
import { modelOf } from './local.ts';
import { ballNumbers, type Numbers } from './numbers.ts';
import { type PieceTask, refinePieces, remainderAt } from './pieces.ts';
import { supremumOfModel } from './supremum.ts';
import type { Measure } from './types.ts';

export interface DifferenceProblem {
  readonly function: Expression;
  /** A polynomial in the variable with rational coefficients. */
  readonly approximation: Expression;
  readonly variable: string;
  readonly low: Rational;
  readonly high: Rational;
  readonly measure: Measure;
  /** A zero of the function that the approximation shares, or a removable singularity: the pieces begin there. */
  readonly through?: Rational;
  /** Bits that cancel between function and approximation, roughly: -log2 of the error to be proved. Found by sampling where it is not given. */
  readonly cancelled?: number;
  /** Ratio of upper to lower bound to stop at; default 1.001. */
  readonly settled?: number;
  /** log2 of a positive distance: nearer to an end of the interval the function is not asked for, except at the end itself (by its limit). Floats have such a distance. */
  readonly nearest?: number;
  readonly budget: Budget;
}

export interface DifferenceBound {
  /** Exact rationals: lower <= sup <= upper. */
  readonly upper: Rational;
  readonly lower: Rational;
  readonly pieces: number;
  readonly precision: number;
}

const LENGTH = 24;
const MOST_PIECES = 600;
const SAMPLES = 64;
/** Halvings of the first piece beside a shared zero before it is given up. */
const MOST_CUTS = 40;
const MOST_UNKNOWN = 8;

/** Proven supremum over [low, high]. Fails with `undecided` where no finite bound is found (a singularity, a zero that is not shared in a relative measure). */
export const boundDifference = (problem: DifferenceProblem): Outcome<DifferenceBound> => attempt(() => difference(problem));

function difference(problem: DifferenceProblem): DifferenceBound {
  const precision = 72 + 2 * Math.max(0, Math.ceil(problem.cancelled ?? cancelledBits(problem)));
  const n = ballNumbers(precision, new Map());
  const { r } = n;
  const { through, low, high, measure, budget } = problem;
  const check = (): void => budget.check();
  const slack = (problem.settled ?? 1.001) - 1;
  // Pieces know their function through an expansion; nothing else of it is looked at away from its point.
  const expansion = { function: problem.function } as Expansion;
  const task = (x0: Rational, x1: Rational, touches: 'lower' | 'upper' | 'none'): PieceTask<ReturnType<typeof r.fromInteger>> => ({ x0: r.fromRational(x0), x1: r.fromRational(x1), expansion, sum: problem.approximation, touches });
  /** Both ends may be branch points of the function. */
  const bothEnds = (x0: Rational, x1: Rational): PieceTask<ReturnType<typeof r.fromInteger>>[] => {
    const middle = Q.divide(Q.add(x0, x1), Q.rational(2));
    return [task(x0, middle, 'lower'), task(middle, x1, 'upper')];
  };
  let lower = r.zero;
  let upper = r.zero;
  let pieces = 0;
  const tasks: PieceTask<ReturnType<typeof r.fromInteger>>[] = [];
  // Lower bounds at sampled arguments: what is below them elsewhere needs no refinement.
  for (let k = 0; k <= SAMPLES; k += 1) {
    const x = Q.add(low, Q.multiply(Q.subtract(high, low), Q.rational(k, SAMPLES)));
    const y = remainderAt(r.fromRational(x), { expansion, sum: problem.approximation }, n, { variable: problem.variable, measure });
    if (y !== null) lower = r.lowerEnd(r.maximum(lower, r.lowerEnd(r.absolute(y))));
  }
  const inside = through !== undefined && Q.compare(low, through) <= 0 && Q.compare(through, high) <= 0 ? through : null;
  if (inside === null) tasks.push(...bothEnds(low, high));
  else {
    for (const end of [low, high]) {
      if (Q.equal(end, inside)) continue;
      const near = besideZero(problem, inside, end, lower, n, check);
      pieces += 1;
      if (near === null) {
        tasks.push(...(Q.compare(inside, end) < 0 ? bothEnds(inside, end) : bothEnds(end, inside)));
        continue;
      }
      lower = r.lowerEnd(r.maximum(lower, near.lower));
      upper = r.upperEnd(r.maximum(upper, near.upper));
      if (!Q.equal(near.reached, end)) tasks.push(Q.compare(near.reached, end) < 0 ? task(near.reached, end, 'upper') : task(end, near.reached, 'lower'));
    }
  }
  if (tasks.length > 0) {
    const result = refinePieces(tasks, lower, n, { variable: problem.variable, measure, slack: slack / 2, most: MOST_PIECES, length: LENGTH, check, ...(problem.nearest === undefined ? {} : { nearest: problem.nearest }) });
    if (result.upper === null) throw new Declined('undecided', 'No bound of the error could be proved on this interval; the function may be singular there. Take a smaller interval.');
    lower = r.lowerEnd(r.maximum(lower, result.lower));
    upper = r.upperEnd(r.maximum(upper, result.upper));
    pieces += result.pieces;
  }
  return { upper: real.upper(upper), lower: real.lower(lower), pieces, precision };
}

/** -log2 of the largest difference at a few arguments, in the measure; only the working precision rests on it. */
function cancelledBits({ function: f, approximation, variable, low, high, measure }: DifferenceProblem): number {
  for (let precision = 192; precision <= 3072; precision *= 2) {
    const n = ballNumbers(precision, new Map());
    let largest = 0;
    let blurred = false;
    for (let k = 0; k <= 8; k += 1) {
      const x = Q.add(low, Q.multiply(Q.subtract(high, low), Q.rational(2 * k + 1, 19)));
      const y = remainderAt(n.r.fromRational(x), { expansion: { function: f } as Expansion, sum: approximation }, n, { variable, measure });
      if (y === null) continue;
      if (n.r.containsZero(y) && !n.r.isZero(y)) blurred = true;
      else largest = Math.max(largest, Math.abs(real.toDouble(y)));
    }
    if (largest > 0) return Math.max(8, -Math.log2(largest));
    if (!blurred) return 64;
  }
  return 1024;
}

/** A one-sided model that starts at the shared zero and reaches as far towards `end` as it can be proved tight; null where the function has none. */
function besideZero<T extends ReturnType<typeof real.fromInteger>>(problem: DifferenceProblem, zero: Rational, end: Rational, floor: T, n: Numbers<T>, check: () => void): { readonly upper: T; readonly lower: T; readonly reached: Rational } | null {
  const { r } = n;
  let reached = end;
  let unknown = 0;
  let fallback: { readonly upper: T; readonly lower: T; readonly reached: Rational } | null = null;
  for (let cut = 0; cut < MOST_CUTS; cut += 1) {
    check();
    const m = modelArithmetic(r, n.unitRight, LENGTH, true);
    const width = r.fromRational(Q.subtract(reached, zero));
    const leaf = m.withRange(m.polynomial([r.fromRational(zero), width]), r.union(r.fromRational(zero), r.fromRational(reached)));
    const f = modelOf(problem.function, n, m, problem.variable, leaf, undefined, check);
    const p = modelOf(problem.approximation, n, m, problem.variable, leaf, undefined, check);
    const difference = f && p && m.subtract(f, p);
    const g = f && difference && (problem.measure === 'absolute' ? difference : m.divide(difference, f));
    if (g && g.valuation >= 0) {
      const settled = problem.settled ?? 1.001;
      const result = supremumOfModel(r, g, { from: r.zero, to: r.one, floor, slack: (settled - 1) / 4, most: 120, check });
      const found = { upper: result.upper, lower: result.lower, reached };
      // Good when nothing is left to gain; else a shorter piece is tried.
      const known = r.maximum(result.lower, floor);
      if (!r.isPositive(r.subtract(result.upper, r.multiply(known, r.fromRational(Q.fromDouble(settled)))))) return found;
      fallback = found;
    } else if (fallback === null) {
      // No model at all: a branch point, for which pieces that touch the end serve.
      unknown += 1;
      if (unknown > MOST_UNKNOWN) return null;
    }
    reached = Q.divide(Q.add(zero, reached), Q.rational(2));
  }
  return fallback;
}

/** The polynomial as a tree for bounds: sum of c_k (x - z)^k. */
export function polynomialOf(coefficients: readonly { readonly power: number; readonly value: Rational }[], variable: string, centre: Rational): Expression {
  const x = build.symbol(variable);
  const u = Q.isZero(centre) ? x : build.sum(x, build.number(Q.negate(centre)));
  const terms = coefficients.filter((c) => !Q.isZero(c.value)).map((c) => (c.power === 0 ? build.number(c.value) : build.product(build.number(c.value), c.power === 1 ? u : build.power(u, c.power))));
  return build.sum(...terms);
}
