/**
 * Best rational approximations by exchange: on a reference the levelled error is found by solving linear equations with the denominator of the
 * round before (Cody, Fraser, Hart, Numer. Math. 12 (1968), from memory). Numerical search only; proofs come after it.
 */
import { Q, type Rational } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import { alternation, solveFixed } from './exchange.ts';
import { evaluateFixed, type Fixed, fromFixed, toFixed } from './fixed.ts';
import type { Grid } from './grid.ts';

export interface RationalApproximation {
  readonly numerator: readonly Fixed[];
  /** The first coefficient, of the power 0, is one. */
  readonly denominator: readonly Fixed[];
  /** Largest weighted error on the grid: an estimate. */
  readonly largest: Rational;
}

const ROUNDS = 24;
const INNER = 8;

/** Null where the exchange does not settle or the denominator changes sign. */
export function bestRational(grid: Grid, top: readonly number[], bottom: readonly number[], budget: Budget): RationalApproximation | null {
  const { bits, points, target } = grid;
  const shift = BigInt(bits);
  const one = 1n << shift;
  const unknowns = top.length + bottom.length;
  // Inverse weights: an error of E in the measure is E / weight in the function.
  const inverse = Array.from(grid.weight, (w) => (w > 0 ? toFixed(Q.divide(Q.ONE, Q.fromDouble(w)), bits) : 0n));
  let reference = Array.from({ length: unknowns }, (_, k) => Math.round((k * (points.length - 1)) / (unknowns - 1)));
  let denominator: Fixed[] = bottom.map((_, k) => (k === 0 ? one : 0n));
  let best: RationalApproximation | null = null;
  for (let round = 0; round < ROUNDS; round += 1) {
    let numerator: Fixed[] = [];
    for (let inner = 0; inner < INNER; inner += 1) {
      budget.check();
      const rows = reference.map((i, k) => {
        const x = points[i] ?? 0n;
        const f = target[i] ?? 0n;
        const known = (evaluateFixed(denominator, bottom, x, bits) * (inverse[i] ?? 0n)) >> shift;
        return [...powersAt(x, top, bits), ...powersAt(x, bottom.slice(1), bits).map((p) => -((f * p) >> shift)), k % 2 === 0 ? known : -known, f];
      });
      const solution = solveFixed(rows, bits);
      if (!solution) return best;
      numerator = solution.slice(0, top.length);
      const next = [one, ...solution.slice(top.length, -1)];
      const moved = next.some((c, k) => near(c, denominator[k] ?? 0n) > 1e-9);
      denominator = next;
      if (!moved) break;
    }
    const errors: number[] = [];
    let largest = 0n;
    for (let i = 0; i < points.length; i += 1) {
      const x = points[i] ?? 0n;
      const q = evaluateFixed(denominator, bottom, x, bits);
      if (q <= 0n) return best;
      const e = (target[i] ?? 0n) - (evaluateFixed(numerator, top, x, bits) << shift) / q;
      const weighted = Q.toDouble(fromFixed(e, bits)) * (grid.weight[i] ?? 0);
      errors.push(weighted);
      const size = toFixed(Q.fromDouble(Math.abs(weighted)), bits);
      if (size > largest) largest = size;
    }
    const current = fromFixed(largest, bits);
    if (!best || Q.compare(current, best.largest) < 0) best = { numerator, denominator, largest: current };
    const next = alternation(Float64Array.from(errors), unknowns);
    if (!next) return best;
    const sizes = next.map((i) => Math.abs(errors[i] ?? 0));
    if (Math.max(...sizes) <= Math.min(...sizes) * 1.002 || next.every((i, k) => i === reference[k])) return best;
    reference = next;
  }
  return best;
}

const near = (a: Fixed, b: Fixed): number => {
  const scale = a > b ? a - b : b - a;
  const size = a > 0n ? a : -a;
  return size === 0n ? (scale === 0n ? 0 : 1) : Number((scale << 40n) / size) / 2 ** 40;
};

function powersAt(x: Fixed, powers: readonly number[], bits: number): Fixed[] {
  const shift = BigInt(bits);
  let [value, reached] = [1n << shift, 0];
  return powers.map((p) => {
    for (; reached < p; reached += 1) value = (value * x) >> shift;
    return value;
  });
}
