/**
 * Best approximation by exchange (Remez 1934; several points at a time after Veidinger 1960; both cited from memory).
 * The error of a first polynomial is taken with all its digits; what is left of it is then levelled in doubles, in a Chebyshev basis, so that
 * nothing cancels. Nothing here is a proof: the certified error of the result is computed elsewhere.
 */
import type { Budget } from '../outcome.ts';
import { type Fixed, magnitude, toFixed } from './fixed.ts';
import { type Grid, inUnit, largestError, powerOf, type Residual, residualOf } from './grid.ts';

export interface ExchangeProblem {
  readonly grid: Grid;
  /** Exponents of the basis, ascending with one stride. */
  readonly powers: readonly number[];
}

export interface ExchangeResult {
  /** Coefficients of the basis, fixed point. */
  readonly coefficients: readonly Fixed[];
  readonly residual: Residual;
  /** Levelled weighted error: a lower bound of the best error on the grid up to rounding (de la Vallée Poussin). */
  readonly levelled: number;
  /** Largest weighted error, in the residual's unit: an estimate of the error of the result. */
  readonly largest: number;
}

const MAX_ROUNDS = 40;

/** Levelled best approximation; null where the exchange does not settle (basis degenerate on the interval). */
export function exchange({ grid, powers }: ExchangeProblem, budget: Budget): ExchangeResult | null {
  budget.check();
  const start = interpolation(grid, powers);
  return start && level(grid, powers, start, residualOf(grid, start, powers), budget);
}

/** Improves coefficients whose residual is known already. */
export function level(grid: Grid, powers: readonly number[], start: readonly Fixed[], residual: Residual, budget: Budget): ExchangeResult | null {
  const basis = chebyshevBasis(grid, powers);
  if (!basis) return null;
  const found = levelInDoubles(grid, basis, residual, budget);
  if (!found) return null;
  const step = monomials(basis, found.coefficients, residual, grid.bits);
  const coefficients = start.map((c, k) => c + (step[k] ?? 0n));
  const rest: Residual = { exponent: residual.exponent, values: residual.values.map((r, i) => r - valueAt(basis, found.coefficients, i)) };
  return { coefficients, residual: rest, levelled: found.levelled, largest: largestError(rest, grid) };
}

/** The polynomial through Chebyshev-like points of the grid, in fixed point; null where the matrix is singular to working precision. */
function interpolation(grid: Grid, powers: readonly number[]): Fixed[] | null {
  const { bits, points, target } = grid;
  const n = powers.length;
  const shift = BigInt(bits);
  const matrix = Array.from({ length: n }, (_, i) => {
    const at = Math.round(((2 * i + 1) * (points.length - 1)) / (2 * n));
    const x = points[at] ?? 0n;
    const row: Fixed[] = [];
    let [value, reached] = [1n << shift, 0];
    for (const k of powers) {
      for (; reached < k; reached += 1) value = (value * x) >> shift;
      row.push(value);
    }
    row.push(target[at] ?? 0n);
    return row;
  });
  return solveFixed(matrix, bits);
}

/** Gaussian elimination with row pivoting in fixed point, the right side as last column; null where a pivot vanishes. */
export function solveFixed(matrix: Fixed[][], bits: number): Fixed[] | null {
  const n = matrix.length;
  const shift = BigInt(bits);
  const entry = (r: number, c: number): Fixed => matrix[r]?.[c] ?? 0n;
  for (let column = 0; column < n; column += 1) {
    let pivot = column;
    for (let r = column + 1; r < n; r += 1) if (magnitude(entry(r, column)) > magnitude(entry(pivot, column))) pivot = r;
    const [top, other] = [matrix[pivot], matrix[column]];
    if (!top || !other) return null;
    matrix[column] = top;
    matrix[pivot] = other;
    const lead = top[column] ?? 0n;
    if (magnitude(lead) < 16n) return null;
    for (let r = column + 1; r < n; r += 1) {
      const row = matrix[r];
      if (!row) return null;
      const factor = ((row[column] ?? 0n) << shift) / lead;
      if (factor === 0n) continue;
      for (let j = column; j <= n; j += 1) row[j] = (row[j] ?? 0n) - ((factor * (top[j] ?? 0n)) >> shift);
    }
  }
  const x = new Array<Fixed>(n).fill(0n);
  for (let r = n - 1; r >= 0; r -= 1) {
    let rest = entry(r, n) << shift;
    for (let j = r + 1; j < n; j += 1) rest -= entry(r, j) * (x[j] ?? 0n);
    x[r] = rest / entry(r, r);
  }
  return x;
}

/** x^first T_j(scale x^stride + shift) on the grid, j = 0..count-1. */
interface Basis {
  readonly first: number;
  readonly stride: number;
  readonly count: number;
  readonly scale: number;
  readonly shift: number;
  /** rows[i][j]. */
  readonly rows: readonly Float64Array[];
}

function chebyshevBasis(grid: Grid, powers: readonly number[]): Basis | null {
  const [first = 0, second = first + 1] = powers;
  const stride = second - first;
  if (!powers.every((p, k) => p === first + k * stride)) return null;
  const arguments_ = Array.from(grid.x, (x) => powerOf(x, stride));
  const [low, high] = [Math.min(...arguments_), Math.max(...arguments_)];
  const scale = 2 / (high - low);
  const shift = -(high + low) / (high - low);
  const count = powers.length;
  const rows = arguments_.map((v, i) => {
    const row = new Float64Array(count);
    const t = scale * v + shift;
    const front = powerOf(grid.x[i] ?? 0, first);
    let [before, here] = [front * t, front];
    for (let j = 0; j < count; j += 1) {
      row[j] = here;
      [before, here] = [here, 2 * t * here - before];
    }
    return row;
  });
  return { first, stride, count, scale, shift, rows };
}

function valueAt({ rows }: Basis, coefficients: Float64Array, i: number): number {
  const row = rows[i];
  let sum = 0;
  if (row) for (let j = 0; j < coefficients.length; j += 1) sum += (row[j] ?? 0) * (coefficients[j] ?? 0);
  return sum;
}

/** The combination of basis polynomials as coefficients of the powers, fixed point. */
function monomials({ count, scale, shift }: Basis, combination: Float64Array, unit: Residual, bits: number): Fixed[] {
  const places = BigInt(bits);
  const [a, b] = [toFixed(inUnit(scale, { ...unit, exponent: 0 }), bits), toFixed(inUnit(shift, { ...unit, exponent: 0 }), bits)];
  const one = 1n << places;
  const times = (p: readonly Fixed[]): Fixed[] => Array.from({ length: p.length + 1 }, (_, k) => (a * (p[k - 1] ?? 0n) + b * (p[k] ?? 0n)) >> places);
  let [before, here]: [Fixed[], Fixed[]] = [[], [one]];
  const sum = new Array<Fixed>(count).fill(0n);
  for (let j = 0; j < count; j += 1) {
    const c = toFixed(inUnit(combination[j] ?? 0, unit), bits);
    for (let k = 0; k < here.length; k += 1) sum[k] = (sum[k] ?? 0n) + ((c * (here[k] ?? 0n)) >> places);
    const up = times(here);
    const next = j === 0 ? up : up.map((c2, k) => 2n * c2 - (before[k] ?? 0n));
    [before, here] = [here, next];
  }
  return sum;
}

interface Levelled {
  readonly coefficients: Float64Array;
  readonly levelled: number;
}

function levelInDoubles(grid: Grid, basis: Basis, { values }: Residual, budget: Budget): Levelled | null {
  const size = values.length;
  const unknowns = basis.count + 1;
  if (unknowns > size) return null;
  const { weight } = grid;
  if (values.every((r) => r === 0)) return { coefficients: new Float64Array(basis.count), levelled: 0 };
  let reference = Array.from({ length: unknowns }, (_, k) => Math.round((k * (size - 1)) / (unknowns - 1)));
  // With a weight that is zero at an end, that end cannot belong to a reference.
  reference = reference.map((i, k) => (k === 0 && weight[i] === 0 ? i + 1 : i));
  let best: { readonly found: Levelled; readonly largest: number } | null = null;
  for (let round = 0; round < MAX_ROUNDS; round += 1) {
    budget.check();
    const solution = solveDoubles(reference.map((i, k) => {
      const w = weight[i] ?? 0;
      const row = new Float64Array(unknowns + 1);
      for (let j = 0; j < basis.count; j += 1) row[j] = w * (basis.rows[i]?.[j] ?? 0);
      row[unknowns - 1] = k % 2 === 0 ? 1 : -1;
      row[unknowns] = w * (values[i] ?? 0);
      return row;
    }));
    if (!solution) return best?.found ?? null;
    const found: Levelled = { coefficients: solution.subarray(0, basis.count), levelled: Math.abs(solution[unknowns - 1] ?? 0) };
    const errors = Float64Array.from(values, (r, i) => (weight[i] ?? 0) * (r - valueAt(basis, found.coefficients, i)));
    const largest = errors.reduce((most, e) => Math.max(most, Math.abs(e)), 0);
    if (!best || largest < best.largest) best = { found, largest };
    if (largest <= found.levelled * (1 + 1e-7)) return found;
    const next = alternation(errors, unknowns) ?? oneExchanged(reference, errors, round);
    if (next.every((i, k) => i === reference[k])) return best.found;
    reference = next;
  }
  return best?.found ?? null;
}

/** Extremal points with alternating signs, `count` of them, the largest kept; null where there are fewer. */
export function alternation(errors: Float64Array, count: number): number[] | null {
  const runs: number[] = [];
  for (let i = 0; i < errors.length; i += 1) {
    const e = errors[i] ?? 0;
    if (e === 0) continue;
    const last = runs.at(-1);
    const here = last === undefined ? 0 : (errors[last] ?? 0);
    if (last === undefined || e > 0 !== here > 0) runs.push(i);
    else if (Math.abs(e) > Math.abs(here)) runs[runs.length - 1] = i;
  }
  const size = (k: number): number => Math.abs(errors[runs[k] ?? 0] ?? 0);
  while (runs.length > count) {
    if (runs.length === count + 1) {
      if (size(0) < size(runs.length - 1)) runs.shift();
      else runs.pop();
      continue;
    }
    // The smallest goes with a neighbour, so that signs keep alternating; at an end it goes alone.
    let least = 0;
    for (let k = 1; k < runs.length; k += 1) if (size(k) < size(least)) least = k;
    if (least === 0) runs.shift();
    else if (least === runs.length - 1) runs.pop();
    else runs.splice(size(least - 1) < size(least + 1) ? least - 1 : least, 2);
  }
  return runs.length === count ? runs : null;
}

/** Puts the largest error in the place of its nearest reference point: a way out of a levelled error of zero. */
function oneExchanged(reference: readonly number[], errors: Float64Array, round: number): number[] {
  let worst = 0;
  for (let i = 1; i < errors.length; i += 1) if (Math.abs(errors[i] ?? 0) > Math.abs(errors[worst] ?? 0)) worst = i;
  const nearest = reference.reduce((best, i, k) => (Math.abs(i - worst) < Math.abs((reference[best] ?? 0) - worst) ? k : best), 0);
  const moved = reference.map((i, k) => (k === nearest ? worst : i));
  // Also shift the others a little, differently in each round, to leave a symmetric reference.
  return moved.map((i, k) => {
    const free = Math.min((moved[k + 1] ?? errors.length) - i, i - (moved[k - 1] ?? -1)) - 1;
    return k === nearest ? i : i + Math.min(Math.max(0, free), (round * 3 + k) % 3);
  });
}

/** Gaussian elimination with row pivoting; null where a pivot vanishes. */
function solveDoubles(matrix: Float64Array[]): Float64Array | null {
  const n = matrix.length;
  const entry = (r: number, c: number): number => matrix[r]?.[c] ?? 0;
  for (let column = 0; column < n; column += 1) {
    let pivot = column;
    for (let r = column + 1; r < n; r += 1) if (Math.abs(entry(r, column)) > Math.abs(entry(pivot, column))) pivot = r;
    const [top, other] = [matrix[pivot], matrix[column]];
    if (!top || !other || !(Math.abs(top[column] ?? 0) > 1e-300)) return null;
    matrix[column] = top;
    matrix[pivot] = other;
    for (let r = column + 1; r < n; r += 1) {
      const row = matrix[r];
      if (!row) return null;
      const factor = (row[column] ?? 0) / (top[column] ?? 1);
      if (factor === 0) continue;
      for (let j = column; j <= n; j += 1) row[j] = (row[j] ?? 0) - factor * (top[j] ?? 0);
    }
  }
  const x = new Float64Array(n);
  for (let r = n - 1; r >= 0; r -= 1) {
    let rest = entry(r, n);
    for (let j = r + 1; j < n; j += 1) rest -= entry(r, j) * (x[j] ?? 0);
    x[r] = rest / entry(r, r);
  }
  return x.every(Number.isFinite) ? x : null;
}
