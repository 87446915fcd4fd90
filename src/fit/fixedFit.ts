/** Polynomials in fixed-point arithmetic: coefficients on the grid of the format, rounding of each product, no overflow anywhere, all proved. */
import { Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { interval } from '../rigorous/index.ts';
import type { PolynomialTerm } from '../write/index.ts';
import { roundCoefficients } from './coefficients.ts';
import { errorOf as errorInUnits } from './evaluationBound.ts';
import { fixedEvaluationError } from './evaluationError.ts';
import { fromFixed } from './fixed.ts';
import { type FixedFormat, isRepresentable, powerOfTwo } from './format.ts';
import { polynomialProgram, type Program } from './program.ts';
import { certifiedTerms, type ProofProblem, type ProvedError } from './proof.ts';
import { basisFor, bestOfDegree, type Found, leastDegree, leastWithin, nextDegree, type Search } from './search.ts';
import type { FitProblem } from './fit.ts';
import { prepareTarget } from './target.ts';

export interface FixedPointFit {
  readonly terms: readonly PolynomialTerm[];
  readonly degree: number;
  readonly program: Program;
  readonly error: ProvedError;
}

const WORKING_BITS = 320;
const PIECES = 64;

/** Measures: absolute, or ulp (units of 2^-n). Throws Declined as fitPolynomial does, also where a value can overflow. */
export function fitFixedPoint(problem: FitProblem, format: FixedFormat, budget: Budget): FixedPointFit {
  const { low, high, measure } = problem;
  if (measure === 'relative') throw new Declined('bad-request', 'Fixed-point numbers have an absolute unit; ask for the absolute measure or for ulp.');
  const limit = powerOfTwo(format.integerBits);
  if (Q.compare(Q.negate(limit), low) > 0 || Q.compare(high, limit) >= 0) throw new Declined('bad-request', `The interval does not fit into ${format.name}; take more bits before the point.`);
  const unit = powerOfTwo(-format.fractionBits);
  const tolerance = problem.tolerance && (measure === 'ulp' ? Q.multiply(problem.tolerance, unit) : problem.tolerance);
  const target = prepareTarget(problem.function, problem.variable, low, high, false, WORKING_BITS, budget);
  const search: Search = { target, relative: false, low, high, basis: basisFor(target, low, high, problem.basis) };
  const symmetric = search.basis !== 'all' && target.parity === search.basis && Q.equal(low, Q.negate(high));
  const inside = Q.compare(low, Q.ZERO) <= 0 && Q.compare(Q.ZERO, high) <= 0;
  // Only the certified supremum is taken from the float proof; its arithmetic plays no part in it.
  const proof: ProofProblem = { function: problem.function, variable: problem.variable, low, high, measure: 'absolute', arithmetic: ANY_ARITHMETIC, centre: Q.ZERO, through: inside, symmetric };
  const tryOne = (found: Found): FixedPointFit => {
    const rounded = roundCoefficients(found, format, false, budget);
    if (!rounded?.values.every((v) => isRepresentable(v, format))) throw new Declined('bad-request', `A coefficient does not fit into ${format.name}; take more bits before the point.`);
    const powers = found.problem.powers;
    const terms = rounded.values.map((value, k) => ({ power: (powers[k] ?? 0) + target.order, value }));
    const program = polynomialProgram(terms, problem.variable, Q.ZERO, { form: problem.form, fma: false, leadingApart: false });
    const polynomial = certifiedTerms(terms, proof, budget);
    const ideal = certifiedTerms(found.result.coefficients.map((c, k) => ({ power: (powers[k] ?? 0) + target.order, value: fromFixed(c, found.problem.grid.bits) })), proof, budget);
    const evaluation = errorInUnits(worst(program, problem, format, budget));
    const rounding = Q.subtract(polynomial.whole.upper, ideal.whole.upper);
    const scale = (q: Rational): Rational => (measure === 'ulp' ? Q.divide(q, unit) : q);
    return {
      terms,
      degree: found.degree,
      program,
      error: {
        approximation: scale(ideal.whole.upper),
        rounding: scale(rounding.num < 0n ? Q.ZERO : rounding),
        evaluation: scale(evaluation),
        total: scale(Q.add(polynomial.whole.upper, evaluation)),
        lower: scale(polynomial.whole.lower),
        subnormal: null,
      },
    };
  };
  if (problem.degree !== undefined) {
    const found = bestOfDegree(search, Math.max(problem.degree, leastDegree(search)), budget);
    if (!found) throw new Declined('undecided', 'No best polynomial of this degree was found on this interval; take a smaller interval or another degree.');
    return tryOne(found);
  }
  let found = tolerance ? leastWithin(search, tolerance, budget) : null;
  if (!found) throw new Declined('bad-request', 'No polynomial of degree up to 160 keeps this tolerance: the interval is too wide for it, or the function has a corner or a singular point there; take a smaller interval or a larger tolerance.');
  let best: FixedPointFit | null = null;
  for (let tries = 0; tries < 3 && found; tries += 1) {
    const next = tryOne(found);
    if (problem.tolerance && Q.compare(next.error.total, problem.tolerance) <= 0) return next;
    if (!best || Q.compare(next.error.total, best.error.total) < 0) best = next;
    found = bestOfDegree(search, nextDegree(search, found.degree), budget);
  }
  throw new Declined('bad-request', `Rounding in ${format.name} takes this tolerance away: the smallest proven error is ${Q.toDouble(best?.error.total ?? Q.ONE).toExponential(2)}; allow a larger tolerance or more bits behind the point.`);
}

const BINARY64 = { kind: 'float', name: 'binary64', precision: 53, emin: -1022, emax: 1023 } as const;
const ANY_ARITHMETIC = { operations: BINARY64, result: BINARY64 };

/** sup |computed - p| in the unit of errors. */
function worst(program: Program, { variable, low, high }: FitProblem, format: FixedFormat, budget: Budget): number {
  const [a, b] = [interval.fromRational(low).lo, interval.fromRational(high).hi];
  let most = 0;
  for (let k = 0; k < PIECES; k += 1) {
    budget.check();
    const piece = { lo: k === 0 ? a : a + ((b - a) * k) / PIECES, hi: k === PIECES - 1 ? b : a + ((b - a) * (k + 1)) / PIECES };
    most = Math.max(most, fixedEvaluationError(program, variable, piece, format).absolute);
  }
  return most;
}
