/** Coefficients of a machine format: rounded one by one, one after the other with the rest fitted again, and together on a lattice; the best is kept. */
import { Q, type Rational } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import { exchange, type ExchangeProblem } from './exchange.ts';
import { evaluateFixed, type Fixed, fromFixed, magnitude, toFixed } from './fixed.ts';
import { type NumberFormat, powerOfTwo, roundTo, ulpExponent } from './format.ts';
import { nearestPlane, reduceBasis } from './lattice.ts';

export interface RoundedCoefficients {
  readonly values: readonly Rational[];
  /** Largest weighted error on the sample: an estimate for choosing, no bound. */
  readonly estimate: Fixed;
}

/** The least unit in which a coefficient of about this size can be stepped. */
const unitExponent = (c: Rational, format: NumberFormat): number => (format.kind === 'float' ? ulpExponent(c, format) : -format.fractionBits);

/** Largest weighted error of a polynomial on a grid of the interval and the extrema of the unrounded fit. */
function sampledError(values: readonly Rational[], problem: ExchangeProblem, grid: readonly Fixed[]): Fixed {
  const { bits, powers } = problem;
  const fixed = values.map((v) => toFixed(v, bits));
  return grid.reduce((most, x) => {
    const error = magnitude((problem.weight(x) * (problem.target(x) - evaluateFixed(fixed, powers, x, bits))) >> BigInt(bits));
    return error > most ? error : most;
  }, 0n);
}

/** Null where a coefficient overflows the format. */
export function roundCoefficients(coefficients: readonly Fixed[], problem: ExchangeProblem, reference: readonly Fixed[], format: NumberFormat, budget: Budget): RoundedCoefficients | null {
  const grid = sampleGrid(problem, reference);
  const candidates = [oneByOne(coefficients, problem, format), inTurn(coefficients, problem, format, budget), together(coefficients, problem, format)];
  let best: RoundedCoefficients | null = null;
  for (const values of candidates) {
    budget.check();
    if (!values) continue;
    const estimate = sampledError(values, problem, grid);
    if (!best || estimate < best.estimate) best = { values, estimate };
  }
  return best;
}

function sampleGrid({ low, high, bits }: ExchangeProblem, reference: readonly Fixed[]): readonly Fixed[] {
  const [a, b] = [toFixed(low, bits), toFixed(high, bits)];
  const count = Math.max(64, reference.length * 12);
  return [...reference, ...Array.from({ length: count + 1 }, (_, k) => a + ((b - a) * BigInt(k)) / BigInt(count))];
}

function oneByOne(coefficients: readonly Fixed[], { bits }: ExchangeProblem, format: NumberFormat): Rational[] | null {
  const rounded = coefficients.map((c) => roundTo(fromFixed(c, bits), format));
  return rounded.every((r): r is Rational => r !== null) ? rounded : null;
}

/** Rounds the coefficient of the lowest power, fits the others again, and so on. */
function inTurn(coefficients: readonly Fixed[], problem: ExchangeProblem, format: NumberFormat, budget: Budget): Rational[] | null {
  const { bits, powers } = problem;
  const fixed: Rational[] = [];
  let free: readonly Fixed[] = coefficients;
  for (let k = 0; k < powers.length; k += 1) {
    const rounded = roundTo(fromFixed(free[0] ?? 0n, bits), format);
    if (!rounded) return null;
    fixed.push(rounded);
    if (k + 1 === powers.length) break;
    const known = fixed.map((v) => toFixed(v, bits));
    const rest = exchange({ ...problem, powers: powers.slice(k + 1), target: (x) => problem.target(x) - evaluateFixed(known, powers.slice(0, k + 1), x, bits) }, budget);
    // An exchange that does not settle leaves the unrounded rest as it was.
    free = rest ? rest.coefficients : free.slice(1);
  }
  return fixed;
}

/** Closest lattice point: columns 2^e_j x_i^j at points x_i, target the unrounded polynomial there (Brisebarre & Chevillard, ARITH 18, 2007). */
function together(coefficients: readonly Fixed[], problem: ExchangeProblem, format: NumberFormat): Rational[] | null {
  const { bits, powers, weight } = problem;
  const shift = BigInt(bits);
  const n = powers.length;
  const [a, b] = [toFixed(problem.low, bits), toFixed(problem.high, bits)];
  const count = 2 * n + 1;
  const points = Array.from({ length: count }, (_, i) => a + ((b - a) * BigInt(Math.round((1 - Math.cos((Math.PI * (2 * i + 1)) / (2 * count))) * 2 ** 40))) / BigInt(2 ** 41));
  const units = coefficients.map((c) => unitExponent(fromFixed(c, bits), format));
  // Integers: sample entries scaled up far above the coordinates that are carried along to read the coefficients off.
  const precision = format.kind === 'float' ? format.precision : format.integerBits + format.fractionBits;
  const lift = BigInt(precision + 40);
  const least = Math.min(...units);
  const entry = (value: Fixed, exponent: number): bigint => {
    const by = lift + BigInt(exponent - least);
    return (value << by) >> shift;
  };
  const power = (x: Fixed, k: number): Fixed => {
    let value = 1n << shift;
    for (let i = 0; i < k; i += 1) value = (value * x) >> shift;
    return value;
  };
  const basis = units.map((e, j) => [...points.map((x) => entry((weight(x) * power(x, powers[j] ?? 0)) >> shift, e)), ...units.map((_, k) => (k === j ? 1n : 0n))]);
  // The target in the same unit 2^least.
  const target = points.map((x) => {
    const value = (weight(x) * evaluateFixed(coefficients, powers, x, bits)) >> shift;
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
