/** The rounding error of a program over an interval: a list of pieces, each with its own binades, and what follows from them in each measure. */
import { Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { type Interval, interval } from '../rigorous/index.ts';
import { approximateValue, ERROR_BITS, evaluationError } from './evaluationError.ts';
import { powerOfTwo, ulpExponent, ulpExponentOf } from './format.ts';
import type { Arithmetic, Program } from './program.ts';

export interface ErrorPiece {
  readonly x: Interval;
  /** Range of the exact value of the program on the piece. */
  readonly value: Interval;
  /** |computed - exact| on the piece in units of 2^-ERROR_BITS, and its part before the last rounding. */
  readonly error: number;
  readonly before: number;
}

const PIECES = 64;

/** Arguments nearer to the centre than this are the centre itself. */
function nearest(centre: Rational, { operations }: Arithmetic): number {
  return Q.isZero(centre) ? 2 ** operations.emin : 2 ** (ulpExponent(centre, operations) - 1);
}

/** Pieces that grow with the distance from `centre` where it lies inside, so that each sees one or two binades. */
function arguments_(low: number, high: number, centre: number, least: number): Interval[] {
  const list: Interval[] = [];
  const cut = (a: number, b: number, count: number): void => {
    for (let k = 0; k < count; k += 1) list.push({ lo: k === 0 ? a : a + ((b - a) * k) / count, hi: k === count - 1 ? b : a + ((b - a) * (k + 1)) / count });
  };
  if (centre < low || centre > high) {
    cut(low, high, PIECES);
    return list;
  }
  for (const end of [low, high]) {
    let far = end;
    for (let k = 0; Math.abs(far - centre) > least; k += 1) {
      const near = centre + (far - centre) / 2;
      if (near === centre || near === far) {
        // No double lies between: the last float by itself, so that the centre stays out.
        list.push({ lo: far, hi: far });
        break;
      }
      cut(Math.min(near, far), Math.max(near, far), k === 0 ? PIECES / 2 : k < 3 ? PIECES / 4 : k < 8 ? 6 : k < 24 ? 2 : 1);
      far = near;
    }
    if (far !== centre && Q.isZero(Q.fromDouble(centre))) list.push({ lo: Math.min(centre, far), hi: Math.max(centre, far) });
  }
  return list.sort((a, b) => a.lo - b.lo);
}

export interface PieceOptions {
  readonly low: Rational;
  readonly high: Rational;
  /** The zero of the function that the program keeps, or a place that lies outside. */
  readonly centre: Rational;
  /** Also cut where the value passes a power of two, on both sides of it by this part of the value; 0: do not. */
  readonly sliver: number;
}

/** Sound for every float argument in [low, high]; throws Declined where the evaluation can overflow or divide by zero. */
export function errorPieces(program: Program, variable: string, arithmetic: Arithmetic, options: PieceOptions, budget: Budget): ErrorPiece[] {
  // Outward: the pieces cover the whole interval.
  const [a, b] = [interval.fromRational(options.low).lo, interval.fromRational(options.high).hi];
  const list: ErrorPiece[] = [];
  const add = (x: Interval): void => {
    budget.check();
    const { exact, absolute, before } = evaluationError(program, variable, x, arithmetic);
    list.push({ x, value: exact, error: absolute, before });
  };
  const value = (x: number): number => Math.abs(approximateValue(program, variable, x));
  for (const x of arguments_(a, b, Q.toDouble(options.centre), nearest(options.centre, arithmetic))) {
    const cuts = options.sliver > 0 ? binadeCuts(value, x, arithmetic.result.emin, Math.max(SLIVER, options.sliver)) : [];
    const ends = [x.lo, ...cuts, x.hi];
    for (let k = 0; k + 1 < ends.length; k += 1) add({ lo: ends[k] ?? x.lo, hi: ends[k + 1] ?? x.hi });
  }
  return list;
}

/** Least relative width of the sliver that is cut out around a power of two: above the uncertainty of double arithmetic. */
const SLIVER = 2 ** -44;

/** Arguments just before and after the one where the value passes a power of two; only places to cut, no proof rests on them. */
function binadeCuts(value: (x: number) => number, { lo, hi }: Interval, emin: number, sliver: number): number[] {
  const [from, to] = [value(lo), value(hi)];
  const [small, large] = from < to ? [from, to] : [to, from];
  if (!(large < Infinity) || large < 2 ** emin) return [];
  const cuts: number[] = [];
  const locate = (level: number): number => {
    let [x, y, fx, fy] = [lo, hi, from - level, to - level];
    for (let k = 0; k < 40; k += 1) {
      // Regula falsi, its stale end halved in weight (Illinois variant).
      const next = x + (y - x) * (fx / (fx - fy));
      if (!(next > x && next < y)) break;
      const f = value(next) - level;
      if (Math.abs(f) < level * 2 ** -50) return next;
      if (f > 0 === fx > 0) [x, fx, fy] = [next, f, fy / 2];
      else [y, fy, fx] = [next, f, fx / 2];
    }
    return x / 2 + y / 2;
  };
  const first = Math.max(Math.floor(Math.log2(Math.max(small, 2 ** (emin - 1)))), emin);
  for (let k = first; 2 ** k <= large && k < first + 64; k += 1) {
    const level = 2 ** k;
    for (const target of [level * (1 - sliver), level * (1 + sliver)]) if (small < target && target < large) cuts.push(locate(target));
  }
  return [...new Set(cuts)].filter((x) => lo < x && x < hi).sort((p, q) => p - q);
}

/** A bound in the unit of errors as a number. */
export const errorOf = (error: number): Rational => Q.multiply(Q.fromDouble(error), powerOfTwo(-ERROR_BITS));
const finite = (error: number): number => {
  if (!(error < Infinity)) throw new Declined('undecided', 'The rounding error could not be bounded on this interval; take a smaller one.');
  return error;
};

/** sup |computed - p|. */
export const absoluteError = (pieces: readonly ErrorPiece[]): Rational => errorOf(finite(pieces.reduce((most, p) => Math.max(most, p.error), 0)));

export interface RelativeError {
  /** sup |computed - p| / |p| where |f| is at least the smallest normal number; Infinity where no bound is known. */
  readonly relative: number;
  /** sup |computed - p| where |f| can be below it; null where it cannot. */
  readonly subnormal: Rational | null;
}

/** With |p - f| <= r |f|: the smallest normal number as a limit for |f| is (1 - r) times that for |p|. */
export function relativeError(pieces: readonly ErrorPiece[], r: number, { result }: Arithmetic): RelativeError {
  const normal = 2 ** result.emin;
  const least = interval.down(normal * Math.max(0, interval.down(1 - r)));
  let relative = 0;
  let subnormal: number | null = null;
  for (const { value, error } of pieces) {
    if (interval.leastSize(value) < interval.up(normal * interval.up(1 + r))) subnormal = Math.max(subnormal ?? 0, error);
    if (interval.size(value) < least) continue;
    const size = Math.max(interval.leastSize(value), least);
    relative = Math.max(relative, error === 0 ? 0 : size > 0 ? interval.up(interval.up(error / size) / 2 ** ERROR_BITS) : Infinity);
  }
  return { relative, subnormal: subnormal === null ? null : errorOf(finite(subnormal)) };
}

/** Consecutive pieces on which one ulp of f is at least 2^exponent. */
export interface BinadeRun {
  readonly low: number;
  readonly high: number;
  readonly exponent: number;
  /** sup |computed - p| (in units of 2^-ERROR_BITS) and sup |p| there. */
  readonly error: number;
  readonly size: number;
}

/** With |p - f| <= r |f|, r < 1: |f| >= |p| / (1 + r). */
export function binadeRuns(pieces: readonly ErrorPiece[], r: number, { result }: Arithmetic): BinadeRun[] {
  const runs: BinadeRun[] = [];
  const add = (x: Interval, exponent: number, error: number, size: number): void => {
    for (let k = runs.length - 1; k >= Math.max(0, runs.length - 4); k -= 1) {
      const last = runs[k];
      if (!last || last.exponent !== exponent || (last.high !== x.lo && last.high !== x.hi)) continue;
      runs[k] = { ...last, high: x.hi, error: Math.max(last.error, error), size: Math.max(last.size, size) };
      return;
    }
    runs.push({ low: x.lo, high: x.hi, exponent, error, size });
  };
  for (const { x, value, error, before } of pieces) {
    const size = interval.size(value);
    const least = Math.max(0, interval.down(interval.leastSize(value) / interval.up(1 + r)));
    const most = interval.up(size / interval.down(1 - r));
    const exponent = ulpExponentOf(least, result);
    const higher = ulpExponentOf(most, result);
    const level = 2 ** (higher + result.precision - 1);
    if (higher !== exponent + 1 || most > level * (1 + 2 ** -12)) {
      add(x, exponent, error, size);
      continue;
    }
    // A sliver around a power of two: where |f| is below it, what is rounded last is less than this beyond it (a float), and rounds by no more than that.
    const beyond = interval.up(interval.up(r * (level * 2 ** ERROR_BITS)) + before);
    add(x, exponent, interval.up(before + Math.min(2 ** (exponent + ERROR_BITS), Math.max(2 ** (exponent - 1 + ERROR_BITS), beyond))), size);
    add(x, higher, error, size);
  }
  return runs;
}
