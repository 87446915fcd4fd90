/** Fits on parts of an interval, split at floats of the format. */
import { Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { type FloatFormat, roundTo } from './format.ts';
import { fitPolynomial, type PolynomialFit, type PolynomialProblem } from './polynomialFit.ts';

export interface Part {
  readonly low: Rational;
  readonly high: Rational;
  readonly found: PolynomialFit;
}

const MOST_PIECES = 64;
/** Degrees up to which `auto` leaves a piece whole: beyond, a branch costs less than the multiplications it saves (common practice). */
const COMFORTABLE: Readonly<Record<FloatFormat['name'], number>> = { binary16: 4, bfloat16: 3, binary32: 7, binary64: 12 };

/** The number of equal parts asked for, or halves of halves until each has a comfortable degree. Ascending. */
export function splitFit(problem: PolynomialProblem, pieces: number | 'auto', budget: Budget): readonly Part[] {
  if (pieces !== 'auto') {
    if (pieces > MOST_PIECES) throw new Declined('bad-request', `At most ${MOST_PIECES} pieces are fitted; ask for fewer.`);
    return equalParts(problem, pieces, budget);
  }
  return halves(problem, budget, 6);
}

function cutBetween(low: Rational, high: Rational, share: Rational, format: FloatFormat): Rational {
  const cut = roundTo(Q.add(low, Q.multiply(Q.subtract(high, low), share)), format);
  if (!cut || Q.compare(cut, low) <= 0 || Q.compare(cut, high) >= 0) throw new Declined('bad-request', 'The interval holds too few floats to be split; ask for fewer pieces.');
  return cut;
}

function equalParts(problem: PolynomialProblem, count: number, budget: Budget): Part[] {
  const { low, high, format } = problem;
  const ends = [low, ...Array.from({ length: count - 1 }, (_, k) => cutBetween(low, high, Q.rational(k + 1, count), format)), high];
  return ends.slice(1).map((end, k) => {
    const start = ends[k] ?? low;
    return { low: start, high: end, found: fitPolynomial({ ...problem, low: start, high: end }, budget) };
  });
}

function halves(problem: PolynomialProblem, budget: Budget, depth: number): Part[] {
  const { low, high, format } = problem;
  const attemptWhole = (): PolynomialFit | Declined => {
    try {
      return fitPolynomial(problem, budget);
    } catch (error) {
      // Running out of time is no reason to split.
      if (error instanceof Declined && error.failure.code !== 'over-budget' && error.failure.code !== 'needs-assumption') return error;
      throw error;
    }
  };
  const whole = attemptWhole();
  if (!(whole instanceof Declined) && (whole.degree <= COMFORTABLE[format.name] || problem.degree !== undefined || depth === 0)) return [{ low, high, found: whole }];
  if (depth === 0) throw whole;
  const middle = cutBetween(low, high, Q.HALF, format);
  return [...halves({ ...problem, high: middle }, budget, depth - 1), ...halves({ ...problem, low: middle }, budget, depth - 1)];
}
