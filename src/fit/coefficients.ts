/** Coefficients of a machine format: rounded one by one, one after the other with the rest fitted again, and together on a lattice; the best is kept. */
import { Q, type Rational } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import { level } from './exchange.ts';
import { evaluateFixed, type Fixed, fromFixed, toFixed } from './fixed.ts';
import { type NumberFormat, powerOfTwo, roundTo, ulpExponent } from './format.ts';
import { largestError, type Residual, shiftedResidual } from './grid.ts';
import { nearestPlane, reduceBasis } from './lattice.ts';
import type { Found } from './search.ts';

export interface RoundedCoefficients {
  readonly values: readonly Rational[];
  /** Largest weighted error on the grid, in the residual's unit: an estimate for choosing, no bound. */
  readonly estimate: number;
}

/** The least unit in which a coefficient of about this size can be stepped. */
const unitExponent = (c: Rational, format: NumberFormat): number => (format.kind === 'float' ? ulpExponent(c, format) : -format.fractionBits);

/** Null where a coefficient overflows the format. With `nearest` each coefficient is only rounded. */
export function roundCoefficients(found: Found, format: NumberFormat, nearest: boolean, budget: Budget): RoundedCoefficients | null {
  const { grid, powers } = found.problem;
  const exact = found.result.coefficients.map((c) => fromFixed(c, grid.bits));
  const residualAt = (values: readonly Rational[]): Residual =>
    values.reduce((residual, v, k) => shiftedResidual(residual, grid, powers[k] ?? 0, Q.subtract(v, exact[k] ?? Q.ZERO)), found.result.residual);
  const candidates = [() => oneByOne(exact, format), ...(nearest ? [] : [() => inTurn(found, format, budget), () => together(found, format)])];
  let best: RoundedCoefficients | null = null;
  for (const make of candidates) {
    budget.check();
    const values = make();
    if (!values) continue;
    const estimate = largestError(residualAt(values), grid);
    if (!best || estimate < best.estimate) best = { values, estimate };
    // Rounding that costs less than a thousandth is not improved on.
    if (best.estimate <= found.result.largest * 1.001) break;
  }
  return best;
}

function oneByOne(exact: readonly Rational[], format: NumberFormat): Rational[] | null {
  const rounded = exact.map((c) => roundTo(c, format));
  return rounded.every((r): r is Rational => r !== null) ? rounded : null;
}

/** Rounds the coefficient of the lowest power, fits the others again, and so on. */
function inTurn({ problem: { grid, powers }, result }: Found, format: NumberFormat, budget: Budget): Rational[] | null {
  const fixed: Rational[] = [];
  let free: readonly Fixed[] = result.coefficients;
  let { residual } = result;
  for (let k = 0; k < powers.length; k += 1) {
    const exact = fromFixed(free[0] ?? 0n, grid.bits);
    const rounded = roundTo(exact, format);
    if (!rounded) return null;
    fixed.push(rounded);
    residual = shiftedResidual(residual, grid, powers[k] ?? 0, Q.subtract(rounded, exact));
    free = free.slice(1);
    if (free.length === 0) break;
    const rest = level(grid, powers.slice(k + 1), free, residual, budget);
    // An exchange that does not settle leaves the rest as it was.
    if (rest) {
      free = rest.coefficients;
      ({ residual } = rest);
    }
  }
  return fixed;
}

/** Closest lattice point: columns 2^e_j x_i^j at points x_i, target the unrounded polynomial there (Brisebarre & Chevillard, ARITH 18, 2007). */
function together({ problem: { grid, powers }, result: { coefficients } }: Found, format: NumberFormat): Rational[] | null {
  const { bits } = grid;
  const shift = BigInt(bits);
  const n = powers.length;
  const count = 2 * n + 1;
  const chosen = Array.from({ length: count }, (_, i) => Math.round(((2 * i + 1) * (grid.points.length - 1)) / (2 * count)));
  const points = chosen.map((i) => grid.points[i] ?? 0n);
  const weights = chosen.map((i) => toFixed(Q.fromDouble(grid.weight[i] ?? 0), bits));
  const units = coefficients.map((c) => unitExponent(fromFixed(c, bits), format));
  // Integers: sample entries scaled up far above the coordinates that are carried along to read the coefficients off.
  const precision = format.kind === 'float' ? format.precision : format.integerBits + format.fractionBits;
  const lift = BigInt(precision + 40);
  const least = Math.min(...units);
  const entry = (value: Fixed, exponent: number): bigint => (value << (lift + BigInt(exponent - least))) >> shift;
  const power = (x: Fixed, k: number): Fixed => {
    let value = 1n << shift;
    for (let i = 0; i < k; i += 1) value = (value * x) >> shift;
    return value;
  };
  const basis = units.map((e, j) => [...points.map((x, i) => entry(((weights[i] ?? 0n) * power(x, powers[j] ?? 0)) >> shift, e)), ...units.map((_, k) => (k === j ? 1n : 0n))]);
  // The target in the same unit 2^least.
  const target = points.map((x, i) => {
    const value = ((weights[i] ?? 0n) * evaluateFixed(coefficients, powers, x, bits)) >> shift;
    return least <= 0 ? (value << (lift + BigInt(-least))) >> shift : ((value << lift) >> shift) >> BigInt(least);
  });
  let reduced: bigint[][];
  try {
    reduced = reduceBasis(basis);
  } catch {
    return null;
  }
  const near = nearestPlane(reduced, [...target, ...units.map(() => 0n)]);
  const values = units.map((e, j) => Q.multiply(Q.rational(near[count + j] ?? 0n), powerOfTwo(e)));
  return values.every((v) => {
    const rounded = roundTo(v, format);
    return rounded !== null && Q.equal(rounded, v);
  })
    ? values
    : null;
}

