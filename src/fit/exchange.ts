/**
 * Best approximation by exchange (Remez 1934; the multiple exchange of de la Vallée Poussin type, after Veidinger 1960; both cited from memory).
 * Arithmetic is fixed point on BigInt. Nothing here is a proof: the certified error of the result is computed elsewhere.
 */
import type { Rational } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import { evaluateFixed, type Fixed, magnitude, toFixed } from './fixed.ts';

export interface ExchangeProblem {
  readonly bits: number;
  readonly low: Rational;
  readonly high: Rational;
  /** Exponents of the basis x^k, ascending. */
  readonly powers: readonly number[];
  /** The function, and the weight of the error (1/|f| for a relative measure), as fixed-point numbers. The weight must be positive inside the interval. */
  readonly target: (x: Fixed) => Fixed;
  readonly weight: (x: Fixed) => Fixed;
}

export interface ExchangeResult {
  /** Coefficients of the basis, fixed point. */
  readonly coefficients: readonly Fixed[];
  /** Levelled weighted error of the last reference: a lower bound of the best error up to rounding (de la Vallée Poussin). */
  readonly levelled: Fixed;
  /** Largest weighted error found at the extrema: an estimate of the error of the result. */
  readonly largest: Fixed;
  readonly reference: readonly Fixed[];
}

const MAX_ROUNDS = 60;
/** Samples between two neighbouring reference points when extrema are located. */
const SAMPLES = 12n;

/** Points cos(pi i / n) on [low, high] from doubles: only a start for the iteration. */
function chebyshevReference(count: number, low: Fixed, high: Fixed): Fixed[] {
  const scale = 2 ** 50;
  const points: Fixed[] = [];
  for (let i = 0; i < count; i += 1) {
    const c = (1 - Math.cos((Math.PI * i) / (count - 1))) / 2;
    points.push(low + ((high - low) * BigInt(Math.round(c * scale))) / BigInt(scale));
  }
  points[count - 1] = high;
  return points;
}

/** Gaussian elimination with row pivoting in fixed point; null where the matrix is singular to working precision. */
function solve(matrix: Fixed[][], bits: number): Fixed[] | null {
  const n = matrix.length;
  const shift = BigInt(bits);
  for (let column = 0; column < n; column += 1) {
    let pivot = column;
    for (let r = column + 1; r < n; r += 1) if (magnitude((matrix[r] as Fixed[])[column] as Fixed) > magnitude((matrix[pivot] as Fixed[])[column] as Fixed)) pivot = r;
    [matrix[column], matrix[pivot]] = [matrix[pivot] as Fixed[], matrix[column] as Fixed[]];
    const top = matrix[column] as Fixed[];
    const lead = top[column] as Fixed;
    if (magnitude(lead) < 16n) return null;
    for (let r = column + 1; r < n; r += 1) {
      const row = matrix[r] as Fixed[];
      const factor = ((row[column] as Fixed) << shift) / lead;
      if (factor === 0n) continue;
      for (let j = column; j <= n; j += 1) row[j] = (row[j] as Fixed) - ((factor * (top[j] as Fixed)) >> shift);
    }
  }
  const x = new Array<Fixed>(n).fill(0n);
  for (let r = n - 1; r >= 0; r -= 1) {
    const row = matrix[r] as Fixed[];
    let rest = (row[n] as Fixed) << shift;
    for (let j = r + 1; j < n; j += 1) rest -= (row[j] as Fixed) * (x[j] as Fixed);
    x[r] = rest / (row[r] as Fixed);
  }
  return x;
}

/** The vertex of the parabola through three equidistant points, as an offset in units of the step from the middle one; clamped to one step. */
function vertexOffset(before: Fixed, middle: Fixed, after: Fixed, step: Fixed): Fixed {
  const curvature = before - 2n * middle + after;
  if (curvature === 0n) return 0n;
  const offset = (step * (before - after)) / (2n * curvature);
  return offset > step ? step : offset < -step ? -step : offset;
}

/**
 * Levelled best approximation. Throws Declined when the budget ends; returns null where the exchange does not settle (basis degenerate on the interval, or precision too low).
 */
export function exchange(problem: ExchangeProblem, budget: Budget): ExchangeResult | null {
  const { bits, powers, target, weight } = problem;
  const shift = BigInt(bits);
  const low = toFixed(problem.low, bits);
  const high = toFixed(problem.high, bits);
  const unknowns = powers.length + 1;
  let reference = chebyshevReference(unknowns, low, high);
  const cache = new Map<Fixed, readonly [Fixed, Fixed]>();
  const sample = (x: Fixed): readonly [Fixed, Fixed] => {
    const known = cache.get(x);
    if (known) return known;
    const value = [target(x), weight(x)] as const;
    cache.set(x, value);
    return value;
  };
  for (let round = 0; round < MAX_ROUNDS; round += 1) {
    budget.check();
    const matrix = reference.map((x, i) => {
      const [f, w] = sample(x);
      const row: Fixed[] = [];
      let value = 1n << shift;
      let at = 0;
      for (const k of powers) {
        for (; at < k; at += 1) value = (value * x) >> shift;
        row.push((w * value) >> shift);
      }
      row.push(i % 2 === 0 ? 1n << shift : -(1n << shift), (w * f) >> shift);
      return row;
    });
    const solution = solve(matrix, bits);
    if (!solution) return null;
    const coefficients = solution.slice(0, -1);
    const levelled = magnitude(solution[unknowns - 1] as Fixed);
    const error = (x: Fixed): Fixed => {
      const [f, w] = sample(x);
      return (w * (f - evaluateFixed(coefficients, powers, x, bits))) >> shift;
    };
    const found = alternatingExtrema(reference, low, high, error, unknowns, budget);
    if (!found) return null;
    const largest = found.reduce((m, p) => (magnitude(p.error) > m ? magnitude(p.error) : m), 0n);
    reference = found.map((p) => p.x);
    // Settled: the largest error is within a millionth of the levelled one (quadratic convergence makes the last step count).
    if ((largest - levelled) * 1_000_000n <= levelled) return { coefficients, levelled, largest, reference };
    if (levelled === 0n && largest <= 16n) return { coefficients, levelled, largest, reference };
  }
  return null;
}

interface Extremum {
  readonly x: Fixed;
  readonly error: Fixed;
}

/** Local extrema of the error with alternating signs, `count` of them, the largest kept. */
function alternatingExtrema(reference: readonly Fixed[], low: Fixed, high: Fixed, error: (x: Fixed) => Fixed, count: number, budget: Budget): Extremum[] | null {
  const nodes = [low, ...reference.filter((x) => x > low && x < high), high];
  const grid: Extremum[] = [];
  for (let i = 0; i + 1 < nodes.length; i += 1) {
    const [a, b] = [nodes[i] as Fixed, nodes[i + 1] as Fixed];
    for (let k = 0n; k < SAMPLES; k += 1n) {
      const x = a + ((b - a) * k) / SAMPLES;
      grid.push({ x, error: error(x) });
    }
    budget.check();
  }
  grid.push({ x: high, error: error(high) });
  const candidates: Extremum[] = [];
  for (let i = 0; i < grid.length; i += 1) {
    const here = grid[i] as Extremum;
    const size = magnitude(here.error);
    const before = grid[i - 1];
    const after = grid[i + 1];
    const peaksBefore = !before || Math.sign(Number(before.error)) !== Math.sign(Number(here.error)) || magnitude(before.error) <= size;
    const peaksAfter = !after || Math.sign(Number(after.error)) !== Math.sign(Number(here.error)) || magnitude(after.error) < size;
    if (!peaksBefore || !peaksAfter || here.error === 0n) continue;
    candidates.push(before && after ? refine(here, after.x - here.x < here.x - before.x ? after.x - here.x : here.x - before.x, error) : here);
  }
  // One extremum per run of equal signs: the largest.
  const runs: Extremum[] = [];
  for (const c of candidates) {
    const last = runs[runs.length - 1];
    if (last && last.error > 0n === c.error > 0n) {
      if (magnitude(c.error) > magnitude(last.error)) runs[runs.length - 1] = c;
    } else runs.push(c);
  }
  // Drop from the ends until the right number is left; the smaller end goes first.
  while (runs.length > count) {
    const [first, last] = [runs[0] as Extremum, runs[runs.length - 1] as Extremum];
    if (runs.length === count + 1 || magnitude(first.error) !== magnitude(last.error)) {
      if (magnitude(first.error) <= magnitude(last.error)) runs.shift();
      else runs.pop();
    } else runs.shift();
  }
  return runs.length === count ? runs : null;
}

/** A few steps of parabolic interpolation around a sampled extremum. */
function refine(start: Extremum, width: Fixed, error: (x: Fixed) => Fixed): Extremum {
  let best = start;
  let step = width / 2n;
  for (let i = 0; i < 6 && step > 1n; i += 1) {
    const before = error(best.x - step);
    const after = error(best.x + step);
    const offset = vertexOffset(before, best.error, after, step);
    const x = best.x + offset;
    for (const candidate of [
      { x: best.x - step, error: before },
      { x: best.x + step, error: after },
      { x, error: error(x) },
    ])
      if (magnitude(candidate.error) > magnitude(best.error) && candidate.error > 0n === start.error > 0n) best = candidate;
    step /= 8n;
  }
  return best;
}
