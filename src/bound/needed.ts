/** Ladder of terms against bound, the least number of terms for a tolerance, and how far from the point a tolerance can be kept. */
import { type Assumption, build, type Expression, freeSymbols, Q, type Rational, rationalOf } from '../expression/index.ts';
import { type Expansion, prefix } from '../expand/index.ts';
import { budget, type Budget, Declined, success } from '../outcome.ts';
import { type Ball, encloseReal, real } from '../rigorous/index.ts';
import { describe } from '../functions/index.ts';
import { isOnePiece } from './exactSum.ts';
import { fittedDegreeOf } from './fitted.ts';
import { isPowerSum, sumOf } from './local.ts';
import { ballNumbers } from './numbers.ts';
import { remainderAt } from './pieces.ts';
import { compareReal } from './region.ts';
import { bound, type ModelCache, variableName } from './remainder.ts';
import type { ClosedInterval, ExpansionWithTerms, LadderEntry, Measure, Reach, RemainderBound, TermsNeeded } from './types.ts';

export interface NeededProblem {
  readonly expansionWithTerms: ExpansionWithTerms;
  readonly interval: ClosedInterval;
  readonly measure: Measure;
  readonly assumptions: readonly Assumption[];
  readonly budget: Budget;
}

const MOST_TERMS = 1000;

/** Expansions with any number of terms, asked for in growing portions and cut down. */
function supply(expansionWithTerms: ExpansionWithTerms): (n: number) => Expansion {
  let have: Expansion | null = null;
  let asked = 0;
  return (n) => {
    if (have === null || (n > asked && !have.exact)) {
      asked = Math.max(n, Math.min(MOST_TERMS, n <= 8 ? 8 : 2 * n));
      const next = expansionWithTerms(asked);
      if (!next.ok) {
        asked = n;
        const exact = expansionWithTerms(n);
        if (!exact.ok) throw new Declined(exact.error.code, exact.error.message);
        have = exact.value;
      } else have = next.value;
    }
    return n >= have.terms.length ? have : prefix(have, n);
  };
}

function bounder(problem: NeededProblem, expansionOf: (n: number) => Expansion): (n: number, settled?: number) => RemainderBound {
  const cache: ModelCache = new Map();
  return (n, settled) => {
    const expansion = expansionOf(n);
    return bound({ expansion, interval: problem.interval, measure: problem.measure, assumptions: problem.assumptions, budget: problem.budget, ...(settled ? { settled } : {}) }, cache, 2 * n + 40);
  };
}

/** Ratios of upper to lower bound asked for in turn where the tolerance lies between the two. */
const SHARPER = [1 + 2 ** -16, 1 + 2 ** -24, 1 + 2 ** -32];

/** The bound, sharpened until the tolerance is not between its two sides or nothing is gained. */
function decided(boundOf: (n: number, settled?: number) => RemainderBound, n: number, tolerance: Rational): RemainderBound {
  let result = boundOf(n);
  for (const settled of SHARPER) {
    const { upperRational: upper, lowerRational: lower } = result;
    if (upper === null || lower === null || Q.compare(upper, tolerance) <= 0 || Q.compare(lower, tolerance) > 0) break;
    // Far apart: the method does not reach, and more of it will not either.
    if (Q.compare(upper, Q.multiply(lower, Q.rational(11, 10))) > 0) break;
    result = boundOf(n, settled);
  }
  return result;
}

/** Bounds for 1..n terms; stops where the sum is exact. */
export function ladderOf(problem: NeededProblem, n: number): readonly LadderEntry[] {
  const expansionOf = supply(problem.expansionWithTerms);
  const boundOf = bounder(problem, expansionOf);
  const rows: LadderEntry[] = [];
  for (let k = 1; k <= n; k += 1) {
    const expansion = expansionOf(k);
    rows.push({ terms: k, expansion, bound: boundOf(k) });
    if (expansion.exact) break;
  }
  return rows;
}

/**
 * The least number of terms, at least 1, whose proven bound is within the tolerance. Numbers whose error at an end of the interval exceeds the tolerance are refuted
 * by that one value; only the others are bounded on the whole interval.
 */
export function termsNeededFor(problem: NeededProblem, tolerance: Rational): TermsNeeded {
  if (tolerance.num <= 0n) throw new Declined('bad-request', 'The tolerance must be greater than zero.');
  const expansionOf = supply(problem.expansionWithTerms);
  const boundOf = bounder(problem, expansionOf);
  const endError = endErrors(problem, tolerance);
  let best: { terms: number; bound: RemainderBound } | null = null;
  let smallest: { terms: number; size: number } = { terms: 1, size: Infinity };
  let refuted = true;
  let unbounded = 0;
  /** Numbers of terms that are neither proven to serve nor refuted. */
  const undecided: number[] = [];
  const sizes: number[] = [];
  const convergence = convergenceOn(problem, expansionOf(1));
  for (let n = 1; n <= MOST_TERMS; n += 1) {
    problem.budget.check();
    const expansion = expansionOf(n);
    const quick = endError(expansion);
    let size = quick === null ? Infinity : logarithm(quick);
    if (quick === null || Q.compare(quick, tolerance) <= 0) {
      const result = decided(boundOf, n, tolerance);
      if (result.upperRational === null) {
        if (isSingularForEverySum(expansion, result, problem.measure)) return { terms: null, reason: SINGULAR };
        unbounded += 1;
        // Poles at the point go away with as many terms as their order; elsewhere a few more terms are tried.
        if (!poleAtPoint(expansion) && unbounded >= MOST_UNBOUNDED) return { terms: null, reason: unboundedUpTo(n, problem.measure, undecided) };
        continue;
      }
      if (Q.compare(result.upperRational, tolerance) <= 0) return { terms: n, expansion, bound: result, minimal: n === 1 || refuted };
      refuted = result.lowerRational !== null && Q.compare(result.lowerRational, tolerance) > 0;
      if (!refuted) undecided.push(n);
      size = logarithm(result.upperRational);
      if (best === null || (best.bound.upperRational !== null && Q.compare(result.upperRational, best.bound.upperRational) < 0)) best = { terms: n, bound: result };
    } else refuted = true;
    sizes[n] = size;
    if (expansion.exact || (expansion.terms.length < n && expansion.remainder === null)) break;
    if (size < smallest.size) smallest = { terms: n, size };
    // Inside the disc of convergence the error falls in the end, however it grows at first.
    const limit = convergence === 'inside' ? Infinity : (convergence === 'unknown' ? 40 : expansion.divergent ? 4 : 6) + Math.floor(smallest.terms / (expansion.divergent ? 3 : 2));
    if (n - smallest.terms > limit) {
      return noNumber(problem, expansionOf, expansion, tolerance, bestOf(best, smallest.terms, boundOf), n, convergence, undecided);
    }
    if (n >= 60 && n % 30 === 0) {
      const more = furtherTerms(n, sizes, size - logarithm(tolerance));
      if (more !== null && n + more > 1.3 * MOST_TERMS) return { terms: null, reason: 'slow', estimate: Math.ceil(n + more) };
    }
  }
  if (smallest.terms >= MOST_TERMS - 5) return { terms: null, reason: 'slow', estimate: 2 * MOST_TERMS };
  const tried = sizes.length - 1;
  if (unbounded > 0 && tried < 1) return { terms: null, reason: unboundedUpTo(unbounded, problem.measure, undecided) };
  const last = bestOf(best, smallest.terms, boundOf);
  return { terms: null, reason: `${refutedUpTo(tried, undecided)} For more terms nothing is proved.`, ...(last.bound.value === null ? {} : { best: { terms: last.terms, bound: last.bound.value } }) };
}

/** The smaller of the bounds of two sums: of the best one bounded on the whole interval, and of the one whose error at an end is least. */
function bestOf(best: { terms: number; bound: RemainderBound } | null, other: number, boundOf: (n: number) => RemainderBound): { terms: number; bound: RemainderBound } {
  if (best?.terms === other) return best;
  const bound = boundOf(other);
  if (best?.bound.upperRational && (bound.upperRational === null || Q.compare(best.bound.upperRational, bound.upperRational) <= 0)) return best;
  return { terms: other, bound };
}

/** What is shown of the numbers of terms that were tried. */
function refutedUpTo(tried: number, undecided: readonly number[]): string {
  if (undecided.length === 0) return `Every number of terms up to ${tried} is refuted by a proven lower bound of its error.`;
  const list = undecided.length > 6 ? `${undecided.slice(0, 6).join(', ')}, ...` : undecided.join(', ');
  return `Every number of terms up to ${tried} is refuted by a proven lower bound of its error, but for ${list}: of these neither a bound within the tolerance nor a refutation was found.`;
}

/** A proven lower bound of the error by its values at the finite ends of the interval; null where they are not defined. */
function endErrors(problem: Pick<NeededProblem, 'interval' | 'measure'>, tolerance: Rational): (expansion: Expansion) => Rational | null {
  const ends = [problem.interval.lower, problem.interval.upper];
  const precision = 80 + Math.max(0, Math.ceil(-Math.log2(Math.max(1e-300, Q.toDouble(tolerance)))));
  return (expansion) => {
    const variable = variableName(expansion);
    let largest: Rational | null = null;
    for (const end of ends) {
      const x = encloseReal(end, new Map(), precision, describe);
      if (x === null) continue;
      const point = expansion.point;
      const side = expansion.left && point !== 'inf' && point !== '-inf' && isLeft(x, point, precision) ? expansion.left : expansion;
      const value = remainderAt(x, { expansion: side, sum: sumOf(side) }, ballNumbers(precision, new Map()), { variable, measure: problem.measure });
      if (value === null) continue;
      const size = real.lower(real.absoluteLower(value));
      if (largest === null || Q.compare(size, largest) > 0) largest = size;
    }
    return largest;
  };
}
function isLeft(x: Ball, point: Expression, precision: number): boolean {
  const p = encloseReal(point, new Map(), precision, describe);
  return p !== null && real.compare(x, p) === -1;
}

const SINGULAR = 'The function has a singularity in the interval that no sum removes.';
const MOST_UNBOUNDED = 6;
const unboundedUpTo = (n: number, measure: Measure, undecided: readonly number[]): string =>
  undecided.length > 0
    ? refutedUpTo(n, undecided)
    : `${measure === 'relative' ? 'The relative error' : 'The remainder'} is unbounded on the interval for every number of terms up to ${n}${measure === 'relative' ? ' (the function has a zero there that the sum has not, or the sum outgrows it)' : ''}. For more terms nothing is proved.`;

/** f itself is unbounded near a place where every sum of this expansion is finite: then no number of terms serves. */
function isSingularForEverySum(expansion: Expansion, result: RemainderBound, measure: Measure): boolean {
  if (measure === 'relative' || !result.place || !isPowerSum(expansion)) return false;
  const place = encloseReal(result.place, new Map(), 96, describe);
  if (place === null) return false;
  if (expansion.point === 'inf' || expansion.point === '-inf') return !real.containsZero(place);
  const point = encloseReal(expansion.point, new Map(), 96, describe);
  return point !== null && !real.overlaps(place, point);
}
const poleAtPoint = (expansion: Expansion): boolean => {
  const power = expansion.remainder?.power;
  return power !== undefined && power !== null && ((power.kind === 'number' && power.value.num < 0n) || power.kind === 'negation');
};

/** Number of further terms until the error falls by `missing` (in logarithms), from log error = a - b n - c log n through the last three marks; null where it does not fall. */
function furtherTerms(n: number, sizes: readonly number[], missing: number): number | null {
  const step = Math.floor(n / 3);
  const [first, second, now] = [sizes[n - 2 * step], sizes[n - step], sizes[n]];
  if (step < 4 || first === undefined || second === undefined || now === undefined) return null;
  const [d1, d2] = [first - second, second - now];
  const [l1, l2] = [Math.log((n - step) / (n - 2 * step)), Math.log(n / (n - step))];
  if (!(d2 > 0)) return null;
  const slope = (d1 - d2) / (l1 - l2);
  const rate = (d2 - slope * l2) / step;
  // A rate that has done nothing yet is noise of the fit: the error then falls like a power of n.
  const algebraic = rate * n < 1;
  const b = algebraic ? 0 : rate;
  const c = algebraic ? d2 / l2 : slope;
  let low = 0;
  let high = 1e7;
  const fall = (m: number): number => b * m + c * Math.log((n + m) / n);
  if (b < 0 || !(fall(high) > missing)) return b < -1e-3 ? null : high;
  for (let k = 0; k < 60; k += 1) {
    const middle = (low + high) / 2;
    if (fall(middle) > missing) high = middle;
    else low = middle;
  }
  return high;
}
const logarithm = (q: Rational): number => {
  const value = Q.toDouble(q);
  return value > 0 ? Math.log(value) : -745;
};

type Convergence = 'inside' | 'beyond' | 'divergent' | 'unknown';

/** Where the interval lies against the proven radius of convergence: within the closed disc, or reaching beyond it. */
function convergenceOn(problem: NeededProblem, expansion: Expansion): Convergence {
  if (expansion.divergent) return 'divergent';
  const radius = expansion.radius;
  if (radius === undefined) return 'unknown';
  if (radius.value === null) return 'inside';
  const R = encloseReal(radius.value, new Map(), 96, describe);
  const infinite = expansion.point === 'inf' || expansion.point === '-inf';
  const centre = typeof expansion.point === 'object' ? encloseReal(expansion.point, new Map(), 96, describe) : real.ZERO;
  if (R === null || centre === null) return 'unknown';
  let result: Convergence = 'inside';
  for (const end of [problem.interval.lower, problem.interval.upper]) {
    const x = encloseReal(end, new Map(), 96, describe);
    // An infinite end is the point itself, or as far from it as can be.
    const t = x === null ? (infinite ? real.ZERO : null) : infinite ? real.divide(real.ONE, real.absolute(x), 96) : real.absolute(real.subtract(x, centre, 96));
    const order = t === null ? (x === null && isInfinite(end) ? 1 : null) : real.compare(t, R);
    if (order === 1) return 'beyond';
    if (order === null && t !== null && !real.overlaps(t, R)) result = 'unknown';
    if (t === null && order === null) result = 'unknown';
  }
  return result;
}
const isInfinite = (e: Expression): boolean => (e.kind === 'constant' && e.name === 'infinity') || (e.kind === 'negation' && isInfinite(e.operand));

/**
 * Why no number of terms was found, and no more than is proved. Beyond the radius of convergence the terms a_n t^n are unbounded (Cauchy-Hadamard). A term is the difference of two neighbouring
 * sums, so that |a_n t^n| <= E_n + E_(n-1): the errors E_n are unbounded too, though a single one among them may be small.
 */
function noNumber(problem: NeededProblem, expansionOf: (n: number) => Expansion, expansion: Expansion, tolerance: Rational, best: { terms: number; bound: RemainderBound }, tried: number, convergence: Convergence, undecided: readonly number[]): TermsNeeded {
  const radius = expansion.radius?.value;
  const shownSoFar = refutedUpTo(tried, undecided);
  const unboundedTerms = convergence === 'beyond' && problem.measure === 'absolute' && isPowerSeries(expansion);
  const more = unboundedTerms
    ? `The interval reaches beyond the radius of convergence${radius ? ` (nearest singularity at distance ${shown(radius)})` : ''}: there the terms, and with them the errors of longer sums, are unbounded; that each longer sum fails is not proved.`
    : convergence === 'divergent'
      ? 'The series diverges; for more terms nothing is proved.'
      : convergence === 'beyond'
        ? `The interval reaches beyond the radius of convergence${radius ? ` (nearest singularity at distance ${shown(radius)})` : ''}; for more terms nothing is proved.`
        : convergence === 'inside'
          ? 'The interval lies within the radius of convergence; for more terms than were tried nothing is proved.'
          : expansion.radius === undefined
            ? 'Whether the series converges on the interval was not examined; for more terms nothing is proved.'
            : 'The radius of convergence is not known; for more terms nothing is proved.';
  const reach = reachOf(problem, expansionOf, expansion, tolerance, best.terms, convergence);
  const reachAnswer = reach ? { reach } : {};
  if (best.bound.value === null) return { terms: null, reason: isSingularForEverySum(expansion, best.bound, problem.measure) ? SINGULAR : `${shownSoFar} ${more}`, ...reachAnswer };
  return { terms: null, reason: `${shownSoFar} ${more}`, best: { terms: best.terms, bound: best.bound.value }, ...reachAnswer, ...fittedAnswer(problem, expansion, tolerance) };
}
/** Whole powers without logarithms: a Taylor or Laurent series. */
const isPowerSeries = (expansion: Expansion): boolean => isPowerSum(expansion) && expansion.terms.every((term) => term.log === 0 && rationalOf(term.power)?.den === 1n);
const shown = (e: Expression): string => {
  const value = encloseReal(e, new Map(), 64, describe);
  return value === null ? '?' : real.toDecimalDown(value, 7);
};

/** The degree of a fitted polynomial, on a finite interval of a function without parameters. */
function fittedAnswer(problem: NeededProblem, expansion: Expansion, tolerance: Rational): { readonly fittedDegree?: number } {
  const variable = variableName(expansion);
  const [low, high] = [problem.interval.lower, problem.interval.upper].map((end) => encloseReal(end, new Map(), 96, describe));
  if (!low || !high || expansion.left || freeSymbols(expansion.function).some((name) => name !== variable)) return {};
  try {
    const degree = fittedDegreeOf({ function: expansion.function, variable, low: real.lower(low), high: real.upper(high), measure: problem.measure, budget: problem.budget }, tolerance);
    return degree === null ? {} : { fittedDegree: degree };
  } catch (error) {
    // A guide beside the answer, not a part that it waits for.
    if (error instanceof Declined) return {};
    throw error;
  }
}

const REACH_SHARE = 0.5;
const FEW_TERMS = 8;

/** How far from the point, on the sides that the interval has, the tolerance can be kept by some number of terms. */
function reachOf(problem: NeededProblem, expansionOf: (n: number) => Expansion, expansion: Expansion, tolerance: Rational, around: number, convergence: Convergence): Reach | null {
  // What more terms can do is not known.
  if (convergence === 'unknown') return null;
  const limited = { ...problem, budget: budget(Math.max(1, problem.budget.remaining() * REACH_SHARE)) };
  let best: { distance: string; size: Rational } | null = null;
  let worse = 0;
  const last = convergence === 'divergent' ? around * 4 + 20 : FEW_TERMS;
  try {
    for (let n = 1; n <= last && worse < 4; n += 1) {
      const found = reachWith(limited, expansionOf(n), tolerance, problem.interval);
      if (found !== null && (best === null || Q.compare(found.size, best.size) > 0)) {
        best = found;
        worse = 0;
      } else if (best !== null) worse += 1;
    }
  } catch (error) {
    if (!(error instanceof Declined) || problem.budget.remaining() <= 0) throw error;
  }
  const radius = convergence === 'beyond' && expansion.radius?.value ? encloseReal(expansion.radius.value, new Map(), 96, describe) : null;
  const found: Reach | null = best === null ? null : { distance: best.distance, closed: true };
  // A sum of few terms may serve beyond the disc where the tolerance is wide.
  if (radius === null || (best !== null && Q.compare(best.size, real.upper(radius)) > 0)) return found;
  // Within the disc the sums converge uniformly on every closed interval; their relative error does where f has no other zero.
  if (problem.measure === 'relative' && !isBoundedWithin(limited, expansionOf(1))) return found;
  const closed = atRadius(limited, expansionOf, expansion, tolerance);
  return { distance: real.toDecimalDown(radius, 12), ...(closed === null ? {} : { closed }) };
}

/** The relative error is proven finite as far as the radius. */
function isBoundedWithin(problem: NeededProblem, expansion: Expansion): boolean {
  const radius = expansion.radius?.value;
  if (!radius) return false;
  try {
    return bound({ expansion, interval: within(expansion, radius, problem.interval), measure: problem.measure, assumptions: problem.assumptions, budget: problem.budget }).upperRational !== null;
  } catch (error) {
    if (error instanceof Declined) return false;
    throw error;
  }
}

/** Whether some number of terms keeps the tolerance as far as the radius itself, the end included: proven, disproved, or null where neither. */
function atRadius(problem: NeededProblem, expansionOf: (n: number) => Expansion, expansion: Expansion, tolerance: Rational): boolean | null {
  const radius = expansion.radius?.value;
  if (!radius) return null;
  try {
    const interval = within(expansion, radius, problem.interval);
    const first = expansionOf(1);
    const start = bound({ expansion: first, interval, measure: problem.measure, assumptions: problem.assumptions, budget: problem.budget });
    if (start.upperRational === null && isSingularForEverySum(first, start, problem.measure)) return false;
    return termsNeededFor({ ...problem, interval, expansionWithTerms: (n) => success(expansionOf(n)) }, tolerance).terms === null ? null : true;
  } catch (error) {
    if (error instanceof Declined) return null;
    throw error;
  }
}

/** For one sum: the largest proven distance from the point (1/|x| at infinity) within which the bound keeps the tolerance, on the sides that `sides` has (else those that the expansion serves); null where none was found. */
export function reachWith(problem: Omit<NeededProblem, 'expansionWithTerms' | 'interval'>, expansion: Expansion, tolerance: Rational, sides?: ClosedInterval): { readonly distance: string; readonly size: Rational } | null {
  if (expansion.exact && !expansion.left) return isOnePiece(expansion.function, variableName(expansion)) ? { distance: 'inf', size: Q.rational(10n ** 30n) } : null;
  const intervalOf = (distance: Rational): ClosedInterval => within(expansion, build.number(distance), sides);
  const errorAt = (distance: Rational): Rational | null => endErrors({ ...problem, interval: intervalOf(distance) }, tolerance)(expansion);
  /** A value at an end refutes at little cost. */
  const refuted = (distance: Rational): boolean => {
    const error = errorAt(distance);
    return error !== null && Q.compare(error, tolerance) > 0;
  };
  // What lacks a parameter's range or a function's formula lacks it at every distance.
  let hopeless = false;
  const keeps = (distance: Rational): boolean => {
    problem.budget.check();
    if (hopeless || refuted(distance)) return false;
    try {
      const result = bound({ ...problem, expansion, interval: intervalOf(distance) });
      return result.upperRational !== null && Q.compare(result.upperRational, tolerance) <= 0;
    } catch (error) {
      if (!(error instanceof Declined) || error.failure.code === 'over-budget') throw error;
      hopeless = error.failure.code === 'needs-assumption' || error.failure.code === 'unknown-function';
      return false;
    }
  };
  // The values at the ends, which are the worst places as a rule, say where to prove.
  const likely = crossing(errorAt, tolerance, () => problem.budget.check());
  if (likely !== null && keeps(likely)) return { distance: real.rationalToDecimal(likely, 7, -1), size: likely };
  // A power of two that keeps it while its double does not.
  const two = Q.rational(2n);
  let low: Rational = Q.ONE;
  if (keeps(low)) {
    while (keeps(Q.multiply(low, two))) {
      low = Q.multiply(low, two);
      if (low.num > 1n << 200n) return { distance: 'inf', size: low };
    }
  } else {
    for (let k = 0; ; k += 1) {
      low = Q.divide(low, two);
      if (keeps(low)) break;
      if (hopeless || k > 200) return null;
    }
  }
  // Halving to 8 digits: by values at the ends, which are the worst places as a rule, and one proof; where that fails, by proofs.
  for (const holds of [(distance: Rational): boolean => !refuted(distance), keeps]) {
    let [from, to] = [low, Q.multiply(low, two)];
    for (let k = 0; k < 24; k += 1) {
      const middle = Q.divide(Q.add(from, to), two);
      if (holds(middle)) from = middle;
      else to = middle;
    }
    // The printed number itself must keep it: rounding down may only shrink the interval.
    if (holds === keeps || keeps(from)) return { distance: real.rationalToDecimal(from, 7, -1), size: from };
  }
  return null;
}

/** Doublings from 1 in each direction that are looked through for a change of sides. */
const MOST_DOUBLINGS = 40;
/** Relative width of the bracket that is enough for 7 digits. */
const NARROW = 2 ** -25;

/** A distance at which the error is still within the tolerance while a very little farther it is not; null where the values do not show one. Errors grow like powers of the distance: found by the secant of their logarithms. */
function crossing(errorAt: (distance: Rational) => Rational | null, tolerance: Rational, check: () => void): Rational | null {
  /** Logarithm of the error over the tolerance: positive where it is refuted; null where there is no value. */
  const excess = (distance: Rational): number | null => {
    check();
    const error = errorAt(distance);
    if (error === null) return null;
    const compared = Q.compare(error, tolerance);
    const size = logarithm(Q.divide(error, tolerance));
    return compared > 0 ? Math.max(size, Number.MIN_VALUE) : Math.min(size, 0);
  };
  const powerOfTwo = (k: number): Rational => (k >= 0 ? Q.rational(1n << BigInt(k)) : Q.rational(1n, 1n << BigInt(-k)));
  let k = 0;
  let here = excess(powerOfTwo(0));
  if (here === null) return null;
  const step = here > 0 ? -1 : 1;
  let [from, to, below, above] = [Q.ONE, Q.ONE, here, here];
  for (;;) {
    k += step;
    const next = excess(powerOfTwo(k));
    if (next === null || Math.abs(k) > MOST_DOUBLINGS) return null;
    if (next > 0 !== here > 0) {
      [from, below, to, above] = step > 0 ? [powerOfTwo(k - 1), here, powerOfTwo(k), next] : [powerOfTwo(k), next, powerOfTwo(k + 1), here];
      break;
    }
    here = next;
  }
  let up = true;
  for (let tries = 0; tries < 40; tries += 1) {
    const [a, b] = [Q.toDouble(from), Q.toDouble(to)];
    const width = b / a - 1;
    if (width <= NARROW) return from;
    const secant = a * Math.exp((Math.log(b / a) * below) / (below - above));
    // A little beyond the secant's zero, on the side that has not moved, so that both ends come near; where it leads nowhere, halfway.
    const guess = tries % 8 < 6 && Number.isFinite(below) ? secant * (up ? 1 + NARROW / 4 : 1 - NARROW / 4) : Math.sqrt(a * b);
    const inside = Math.min(Math.max(guess, a * (1 + NARROW / 8)), b * (1 - NARROW / 8));
    const middle = Q.fromDouble(inside);
    const value = excess(middle);
    if (value === null) return null;
    if (value > 0) [to, above, up] = [middle, value, false];
    else [from, below, up] = [middle, value, true];
  }
  return null;
}

/** All x within the distance, on the sides that the expansion serves and the interval has. */
function within(expansion: Expansion, size: Expression, sides?: ClosedInterval): ClosedInterval {
  const infinity = build.constant('infinity');
  const one = build.number(1);
  if (expansion.point === 'inf') return { lower: build.quotient(one, size), upper: infinity };
  if (expansion.point === '-inf') return { lower: build.negation(infinity), upper: build.negation(build.quotient(one, size)) };
  const point: Expression = expansion.point;
  const onePoint = expansion.side !== 'both' && !expansion.left;
  const notLeft = sides !== undefined && compareReal(sides.lower, point, []) >= 0;
  const notRight = sides !== undefined && compareReal(sides.upper, point, []) <= 0;
  return {
    lower: (onePoint && expansion.side === 'right') || notLeft ? point : build.difference(point, size),
    upper: (onePoint && expansion.side === 'left') || notRight ? point : build.sum(point, size),
  };
}
