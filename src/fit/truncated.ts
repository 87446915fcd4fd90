/** Truncated and economized expansions as candidates beside the best polynomial: what a series alone would give. */
import { expand } from '../expand/index.ts';
import { build, Q, type Rational, rationalOf } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { encloseReal, real } from '../rigorous/index.ts';
import { ballToFixed, type Fixed, toFixed } from './fixed.ts';
import { inUnit, largestError, residualOf } from './grid.ts';
import { type Found, gridFor, leastDegree, powersOf, type Search } from './search.ts';

/** Coefficients of (x - z)^k / (x - z)^s for k = s..degree about the centre z of the target; throws Declined where the expansion is no Taylor series. */
function taylorCoefficients({ target }: Search, degree: number, budget: Budget): Fixed[] {
  const { bits, variable, zero, order } = target;
  const result = expand({ function: target.function, variable: build.symbol(variable), point: build.number(zero), side: 'both', order: Q.rational(degree + 1), assumptions: [] }, budget);
  if (!result.ok) throw new Declined(result.error.code, result.error.message);
  const list = new Array<Fixed>(degree - order + 1).fill(0n);
  for (const term of result.value.terms) {
    const power = rationalOf(term.power);
    const value = encloseReal(term.coefficient, new Map(), bits + 64, describe);
    if (result.value.prefactor || result.value.left || term.log !== 0 || term.scale || !power || power.den !== 1n || power.num < BigInt(order) || !value || real.relativeAccuracy(value) < bits / 2)
      throw new Declined('bad-request', 'The expansion about this point is no power series; take the method minimax.');
    list[Number(power.num) - order] = ballToFixed(value, bits);
  }
  return list;
}

function foundFrom(search: Search, coefficients: readonly Fixed[], degree: number, budget: Budget): Found {
  const { target } = search;
  const powers = powersOf(search, degree);
  const grid = gridFor(search, degree, budget);
  const kept = powers.map((p) => coefficients[p] ?? 0n);
  const residual = residualOf(grid, kept, powers);
  const largest = largestError(residual, grid);
  return { problem: { grid, powers }, result: { coefficients: kept, residual, levelled: 0, largest }, degree: Math.max(degree, target.order) };
}

export const taylorOfDegree = (search: Search, degree: number, budget: Budget): Found => foundFrom(search, taylorCoefficients(search, degree, budget), degree, budget);

const MOST_TAYLOR = 200;

/** The truncated expansion of least degree whose error on the samples is within the goal, at least of degree `from`; null where none up to 200 is. */
export function taylorWithin(search: Search, goal: Rational, from: number, budget: Budget): Found | null {
  const step = search.basis === 'all' ? 1 : 2;
  let first = Math.max(from, leastDegree(search));
  for (let most = Math.max(16, first + 8); first <= MOST_TAYLOR; most = Math.min(2 * most, MOST_TAYLOR)) {
    const coefficients = taylorCoefficients(search, most, budget);
    for (; first <= most; first += step) {
      budget.check();
      const found = foundFrom(search, coefficients, first, budget);
      if (Q.compare(inUnit(found.result.largest, found.result.residual), goal) <= 0) return found;
    }
    if (most === MOST_TAYLOR) return null;
  }
  return null;
}

/** A truncated expansion of a higher degree, brought down to `degree` by dropping its last Chebyshev polynomials on the interval (Lanczos, from memory). */
export function economizedOfDegree(search: Search, degree: number, budget: Budget): Found {
  const { target, low, high } = search;
  const { bits } = target;
  const goal = foundFrom(search, taylorCoefficients(search, degree, budget), degree, budget);
  const far = taylorWithin(search, Q.divide(inUnit(goal.result.largest, goal.result.residual), Q.rational(1n << 40n)), degree, budget) ?? taylorOfDegree(search, Math.min(MOST_TAYLOR, 2 * degree + 12), budget);
  const full = new Array<Fixed>(far.degree - target.order + 1).fill(0n);
  far.problem.powers.forEach((p, k) => (full[p] = far.result.coefficients[k] ?? 0n));
  const [a, b] = [toFixed(low, bits), toFixed(high, bits)];
  const inChebyshev = toChebyshev(affine(full, (a + b) / 2n, (b - a) / 2n, bits));
  const cut = inChebyshev.slice(0, degree - target.order + 1);
  const scale = toFixed(Q.divide(Q.rational(2), Q.subtract(high, low)), bits);
  const shift = toFixed(Q.divide(Q.negate(Q.add(low, high)), Q.subtract(high, low)), bits);
  return foundFrom(search, affine(fromChebyshev(cut), shift, scale, bits), degree, budget);
}

/** p(shift + scale t) as a polynomial in t. */
function affine(p: readonly Fixed[], shift: Fixed, scale: Fixed, bits: number): Fixed[] {
  const places = BigInt(bits);
  let result: Fixed[] = [];
  for (let k = p.length - 1; k >= 0; k -= 1) {
    result = Array.from({ length: Math.min(result.length + 1, p.length) }, (_, j) => (shift * (result[j] ?? 0n) + scale * (result[j - 1] ?? 0n)) >> places);
    result[0] = (result[0] ?? 0n) + (p[k] ?? 0n);
  }
  return result;
}

/** Powers to Chebyshev polynomials: by Horner's rule with t T_k = (T_(k-1) + T_(k+1)) / 2. */
function toChebyshev(p: readonly Fixed[]): Fixed[] {
  let c: Fixed[] = [];
  for (let k = p.length - 1; k >= 0; k -= 1) {
    const next = new Array<Fixed>(Math.min(c.length + 1, p.length)).fill(0n);
    c.forEach((value, j) => {
      if (j === 0) next[1] = (next[1] ?? 0n) + value;
      else {
        next[j - 1] = (next[j - 1] ?? 0n) + value / 2n;
        next[j + 1] = (next[j + 1] ?? 0n) + value / 2n;
      }
    });
    next[0] = (next[0] ?? 0n) + (p[k] ?? 0n);
    c = next;
  }
  return c;
}

function fromChebyshev(c: readonly Fixed[]): Fixed[] {
  const sum = new Array<Fixed>(c.length).fill(0n);
  let [before, here]: [bigint[], bigint[]] = [[], [1n]];
  for (let k = 0; k < c.length; k += 1) {
    here.forEach((t, j) => (sum[j] = (sum[j] ?? 0n) + t * (c[k] ?? 0n)));
    const next = Array.from({ length: here.length + 1 }, (_, j) => (k === 0 ? 1n : 2n) * (here[j - 1] ?? 0n) - (before[j] ?? 0n));
    [before, here] = [here, next];
  }
  return sum;
}
