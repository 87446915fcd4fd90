/** The degree that a fitted polynomial needs where no truncated expansion keeps the tolerance: interpolation at Chebyshev points, its error proved on the whole interval. */
import { type Expression, Q, type Rational } from '../expression/index.ts';
import { budget, type Budget } from '../outcome.ts';
import { type Ball, encloseReal, real } from '../rigorous/index.ts';
import { describe } from '../functions/index.ts';
import { boundDifference, polynomialOf } from './difference.ts';
import type { Measure } from './types.ts';

export interface FittedProblem {
  readonly function: Expression;
  readonly variable: string;
  readonly low: Rational;
  readonly high: Rational;
  readonly measure: Measure;
  readonly budget: Budget;
}

const HIGHEST = 48;
const NODES = 64;
const SHARE = 0.4;

/** The least degree found whose interpolating polynomial has a proven error within the tolerance; null where none was proved. An upper bound of the least possible degree, at most one above it in all but rare cases. */
export function fittedDegreeOf(problem: FittedProblem, tolerance: Rational): number | null {
  const { low, high, measure, variable } = problem;
  const limit = budget(Math.max(1, Math.min(4000, problem.budget.remaining() * SHARE)));
  const bits = 96 + Math.max(0, Math.ceil(-Math.log2(Math.max(1e-300, Q.toDouble(tolerance)))));
  const [centre, half] = [Q.divide(Q.add(low, high), Q.rational(2)), Q.divide(Q.subtract(high, low), Q.rational(2))];
  // Doubles decide which degrees are tried; the proof decides which serve.
  const angles = Array.from({ length: NODES }, (_, j) => (Math.PI * (j + 0.5)) / NODES);
  const values: number[] = [];
  let size = Infinity;
  for (const angle of angles) {
    const y = valueAt(problem, Q.add(centre, Q.multiply(half, Q.fromDouble(Math.cos(angle)))), 64);
    if (y === null) return null;
    values.push(real.toDouble(y));
    size = Math.min(size, Math.abs(real.toDouble(y)));
  }
  const allowed = Q.toDouble(tolerance) * (measure === 'relative' ? size : 1);
  const coefficient = (k: number): number => (2 / NODES) * values.reduce((sum, y, j) => sum + y * Math.cos(k * (angles[j] ?? 0)), 0);
  let rest = 0;
  let start = NODES - 1;
  for (; start > 0; start -= 1) {
    rest += Math.abs(coefficient(start));
    if (rest > allowed) break;
  }
  if (start >= HIGHEST) return null;
  for (let degree = Math.max(0, start - 1); degree <= Math.min(HIGHEST, start + 3); degree += 1) {
    const p = interpolant(problem, degree, centre, half, bits);
    if (p === null) return null;
    const proved = boundDifference({ function: problem.function, approximation: polynomialOf(p, variable, centre), variable, low, high, measure, settled: 1.02, budget: limit });
    if (!proved.ok) return null;
    if (Q.compare(proved.value.upper, tolerance) <= 0) return degree;
  }
  return null;
}

function valueAt({ function: f, variable }: FittedProblem, x: Rational, bits: number): Ball | null {
  return encloseReal(f, new Map([[variable, real.fromRational(x, bits + 32)]]), bits, describe);
}

/** Coefficients in x - centre of the polynomial that agrees (to the bits given) with f at degree + 1 Chebyshev points, by Newton's divided differences. */
function interpolant(problem: FittedProblem, degree: number, centre: Rational, half: Rational, bits: number): readonly { readonly power: number; readonly value: Rational }[] | null {
  const nodes = Array.from({ length: degree + 1 }, (_, j) => Q.multiply(half, Q.fromDouble(Math.cos((Math.PI * (j + 0.5)) / (degree + 1)))));
  const work = bits + 4 * degree + 32;
  const point = (q: Rational): Ball => real.midpoint(real.fromRational(q, work));
  const divided: Ball[] = [];
  for (const node of nodes) {
    const y = valueAt(problem, Q.add(centre, node), bits);
    if (y === null) return null;
    divided.push(real.midpoint(y));
  }
  for (let level = 1; level <= degree; level += 1) {
    for (let j = degree; j >= level; j -= 1) {
      const [a, b, u, v] = [divided[j], divided[j - 1], nodes[j], nodes[j - level]];
      const quotient = a && b && u && v ? real.divide(real.subtract(a, b, work), point(Q.subtract(u, v)), work) : null;
      if (quotient === null) return null;
      divided[j] = real.midpoint(quotient);
    }
  }
  // Horner's rule in Newton's form, coefficients by rising power.
  let c: Ball[] = [];
  for (let j = degree; j >= 0; j -= 1) {
    const node = point(nodes[j] ?? Q.ZERO);
    const next = [real.ZERO, ...c];
    for (let k = 0; k < c.length; k += 1) next[k] = real.midpoint(real.subtract(next[k] ?? real.ZERO, real.multiply(node, c[k] ?? real.ZERO, work), work));
    next[0] = real.midpoint(real.add(next[0] ?? real.ZERO, divided[j] ?? real.ZERO, work));
    c = next;
  }
  return c.slice(0, degree + 1).map((value, power) => ({ power, value: real.upper(value) }));
}
