/** Samples of the error of a fitted polynomial over its interval, for drawing only: the coefficients as rounded, evaluated exactly; never part of a proof. */
import { Q, type Rational } from '../expression/index.ts';
import { type Fit, type FitProblem, ulpExponent } from '../fit/index.ts';
import { describe } from '../functions/index.ts';
import type { Budget } from '../outcome.ts';
import type { FitPlotAnswer } from '../protocol.ts';
import { encloseReal, real } from '../rigorous/index.ts';

const SAMPLES = 200;
const BITS = 160;

export function fitPlot(found: Fit, problem: FitProblem, budget: Budget): FitPlotAnswer {
  const x: number[] = [];
  const error: (number | null)[] = [];
  for (let k = 0; k <= SAMPLES; k += 1) {
    budget.check();
    const at = Q.add(problem.low, Q.multiply(Q.subtract(problem.high, problem.low), Q.rational(k, SAMPLES)));
    x.push(Q.toDouble(at));
    error.push(errorAt(found, problem, at));
  }
  return { x, error, bound: Q.toDouble(found.error.total), tolerance: problem.tolerance ? Q.toDouble(problem.tolerance) : null, measure: problem.measure };
}

type Ball = ReturnType<typeof real.fromRational>;

function errorAt(found: Fit, { function: f, variable, measure, format }: FitProblem, at: Rational): number | null {
  const value = encloseReal(f, new Map([[variable, real.fromRational(at, BITS)]]), BITS, describe);
  const piece = found.pieces?.find((p) => Q.compare(at, p.high) <= 0) ?? found;
  const offset = real.fromRational(Q.subtract(at, piece.centre), BITS);
  const top = horner(piece.terms, offset);
  const approximation = found.denominator ? real.divide(top, horner(found.denominator, offset), BITS) : top;
  if (!value || !approximation) return null;
  const difference = real.toDouble(real.subtract(approximation, value, BITS));
  const size = real.toDouble(value);
  // The sizes are far inside the range of doubles wherever a fit is made; a zero of the function has no relative error.
  const unit = measure === 'absolute' ? 1 : measure === 'relative' ? Math.abs(size) : format.kind === 'float' ? 2 ** ulpExponent(Q.fromDouble(size), format) : 1;
  const error = difference / unit;
  return Number.isFinite(error) ? error : null;
}

function horner(terms: Fit['terms'], u: Ball): Ball {
  let [sum, reached] = [real.ZERO, terms.reduce((most, t) => Math.max(most, t.power), 0)];
  const byPower = new Map<number, Rational>();
  // Two words of one coefficient are two terms of one power.
  for (const { power, value } of terms) byPower.set(power, Q.add(byPower.get(power) ?? Q.ZERO, value));
  for (; reached >= 0; reached -= 1) sum = real.add(real.multiply(sum, u, BITS), real.fromRational(byPower.get(reached) ?? Q.ZERO, BITS), BITS);
  return sum;
}
