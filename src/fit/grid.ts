/** Samples on which approximations are searched: the function with all its digits, the error of a polynomial as scaled doubles. No proof rests on them. */
import { Q, type Rational } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import { evaluateFixed, type Fixed, fromFixed, magnitude, toFixed } from './fixed.ts';

/** Arguments in ascending order with the function and the weight of the error there. */
export interface Grid {
  readonly bits: number;
  readonly points: readonly Fixed[];
  readonly x: Float64Array;
  readonly target: readonly Fixed[];
  readonly weight: Float64Array;
}

/** What a polynomial leaves over, times 2^-exponent. */
export interface Residual {
  readonly values: Float64Array;
  readonly exponent: number;
}

export interface GridProblem {
  readonly bits: number;
  readonly low: Rational;
  readonly high: Rational;
  /** The basis is in x^2 on [0, high]: points are dense at the far end only. */
  readonly squared: boolean;
  readonly target: (x: Fixed) => Fixed;
  /** Positive inside the interval. */
  readonly weight: (x: Fixed, target: Fixed) => Fixed;
}

export function sampleGrid({ bits, low, high, squared, target, weight }: GridProblem, count: number, budget: Budget): Grid {
  const [a, b] = [toFixed(low, bits), toFixed(high, bits)];
  const unit = 2 ** 50;
  const points: Fixed[] = [];
  for (let k = 0; k < count; k += 1) {
    const angle = (Math.PI * k) / (count - 1);
    const place = squared ? Math.sin(angle / 2) : (1 - Math.cos(angle)) / 2;
    points.push(k === count - 1 ? b : a + ((b - a) * BigInt(Math.round(place * unit))) / BigInt(unit));
  }
  const values = points.map((x) => {
    budget.check();
    return target(x);
  });
  return {
    bits,
    points,
    x: Float64Array.from(points, (x) => Q.toDouble(fromFixed(x, bits))),
    target: values,
    weight: Float64Array.from(points, (x, k) => Q.toDouble(fromFixed(weight(x, values[k] ?? 0n), bits))),
  };
}

const bitLength = (x: Fixed): number => {
  const hex = x.toString(16);
  return x === 0n ? 0 : hex.length * 4;
};

/** target - sum c_k x^(powers[k]) on the grid. */
export function residualOf(grid: Grid, coefficients: readonly Fixed[], powers: readonly number[]): Residual {
  const { bits, points, target } = grid;
  const rest = points.map((x, k) => (target[k] ?? 0n) - evaluateFixed(coefficients, powers, x, bits));
  const largest = rest.reduce((most, r) => (magnitude(r) > most ? magnitude(r) : most), 0n);
  // Keep 64 bits of the largest.
  const cut = Math.max(0, bitLength(largest) - 64);
  const exponent = cut + 64 - bits;
  return { values: Float64Array.from(rest, (r) => Number(r >> BigInt(cut)) * 2 ** -64), exponent };
}

/** x^n in doubles. */
export function powerOf(x: number, n: number): number {
  let value = 1;
  for (let k = 0; k < n; k += 1) value *= x;
  return value;
}

/** The residual after the coefficient of x^power has grown by `step`. */
export function shiftedResidual({ values, exponent }: Residual, grid: Grid, power: number, step: Rational): Residual {
  const scaled = Q.toDouble(exponent > 0 ? Q.divide(step, Q.rational(1n << BigInt(exponent))) : Q.multiply(step, Q.rational(1n << BigInt(-exponent))));
  return { exponent, values: values.map((r, k) => r - scaled * powerOf(grid.x[k] ?? 0, power)) };
}

/** Largest weighted error on the grid, peaks between samples estimated by parabolas; in the residual's unit. */
export function largestError({ values }: Residual, { weight }: Grid): number {
  const size = (k: number): number => Math.abs((values[k] ?? 0) * (weight[k] ?? 0));
  let most = Math.max(size(0), size(values.length - 1));
  for (let k = 1; k + 1 < values.length; k += 1) {
    const [a, b, c] = [size(k - 1), size(k), size(k + 1)];
    if (b < a || b < c) continue;
    const curvature = 2 * b - a - c;
    most = Math.max(most, curvature > 0 ? b + (a - c) ** 2 / (8 * curvature) : b);
  }
  return most;
}

/** A number in a residual's unit as a rational. */
export const inUnit = (value: number, { exponent }: Residual): Rational =>
  exponent >= 0 ? Q.multiply(Q.fromDouble(value), Q.rational(1n << BigInt(exponent))) : Q.divide(Q.fromDouble(value), Q.rational(1n << BigInt(-exponent)));
