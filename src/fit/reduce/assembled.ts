/** The whole error of a reconstruction, argument by argument: where the sum of a constant and a polynomial is small, so are most of its roundings. */
import { Q, type Rational } from '../../expression/index.ts';
import { type Interval, interval } from '../../rigorous/index.ts';
import { ERROR_BITS, evaluationError } from '../evaluationError.ts';
import { ulpExponentOf } from '../format.ts';
import type { Arithmetic, Program } from '../program.ts';
import type { FitMeasure } from '../proof.ts';

export interface Assembled {
  readonly program: Program;
  /** Its argument, which is a float. */
  readonly variable: string;
  readonly pieces: readonly Interval[];
  /** |exact value of the program - f| at most, on one piece. */
  readonly missing: (piece: Interval) => Rational;
}

const { up, down } = interval;
const SCALE = 2 ** ERROR_BITS;

/** [low, high] in `count` pieces that cover it. */
export function piecesOf(low: Rational, high: Rational, count: number): Interval[] {
  const [a, b] = [interval.fromRational(low).lo, interval.fromRational(high).hi];
  const place = (k: number): number => (k === 0 ? a : k === count ? b : a + ((b - a) * k) / count);
  return Array.from({ length: count }, (_, k) => ({ lo: place(k), hi: place(k + 1) }));
}

/**
 * sup |computed - f| in the measure; Infinity as null where a piece cannot be told from a zero of f. In ulp, where f and what is rounded last can lie in different
 * binades: a float lies between them, so that rounding moves by no more than the distance, and by no more than one ulp of f.
 */
export function assembledError({ program, variable, pieces, missing }: Assembled, measure: FitMeasure, arithmetic: Arithmetic): Rational | null {
  let worst = 0;
  for (const x of pieces) {
    const off = interval.fromRational(missing(x)).hi;
    const { exact, absolute, before } = evaluationError(program, variable, x, arithmetic);
    const [whole, unrounded] = [up(up(absolute / SCALE) + off), up(up(before / SCALE) + off)];
    if (measure === 'absolute') {
      worst = Math.max(worst, whole);
      continue;
    }
    const least = down(interval.leastSize(exact) - off);
    if (!(least > 0)) return null;
    if (measure === 'relative') {
      worst = Math.max(worst, up(whole / least));
      continue;
    }
    const unit = 2 ** ulpExponentOf(least, arithmetic.result);
    const moved = unrounded / unit;
    worst = Math.max(worst, Math.min(whole / unit, up(moved + Math.max(0.5, Math.min(1, moved)))));
  }
  return Q.fromDouble(worst);
}
