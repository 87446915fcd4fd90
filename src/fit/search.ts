/** Best polynomials of a target: basis, weight, least degree. Numerical search only; proofs come after it. */
import { Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { exchange, type ExchangeProblem, type ExchangeResult } from './exchange.ts';
import { type Fixed, magnitude, toFixed } from './fixed.ts';
import { type Grid, inUnit, sampleGrid } from './grid.ts';
import type { FitTarget } from './target.ts';

export type Basis = 'even' | 'odd' | 'all';

export interface Search {
  readonly target: FitTarget;
  readonly relative: boolean;
  /** Interval of u = x - zero. */
  readonly low: Rational;
  readonly high: Rational;
  readonly basis: Basis;
}

export interface Found {
  readonly problem: ExchangeProblem;
  readonly result: ExchangeResult;
  /** Degree of (x - z)^s q. */
  readonly degree: number;
}

/** The basis asked for, or the one that the parity of the function and the symmetry of the interval give. */
export function basisFor(target: FitTarget, low: Rational, high: Rational, asked: Basis | undefined): Basis {
  if (asked) return asked;
  const symmetric = Q.equal(low, Q.negate(high));
  return target.parity && symmetric && Q.isZero(target.zero) ? target.parity : 'all';
}

/** Powers of q(u) up to a degree of the whole polynomial u^s q(u). */
export function powersOf({ target, basis }: Pick<Search, 'target' | 'basis'>, degree: number): number[] {
  const powers: number[] = [];
  for (let k = target.order; k <= degree; k += 1) if (basis === 'all' || (k % 2 === 1) === (basis === 'odd')) powers.push(k - target.order);
  return powers;
}

export const leastDegree = ({ target, basis }: Pick<Search, 'target' | 'basis'>): number => {
  let k = target.order;
  while (basis !== 'all' && (k % 2 === 1) !== (basis === 'odd')) k += 1;
  return k;
};
const stepOf = (search: Search): number => (search.basis === 'all' ? 1 : 2);

/** Samples for one coefficient, at least: the extrema of the error are found to a thousandth of their size. */
const SAMPLES_EACH = 28;
const FEWEST_SAMPLES = 384;

const grids = new WeakMap<Search, Grid>();

export function gridFor(search: Search, degree: number, budget: Budget): Grid {
  const count = Math.max(FEWEST_SAMPLES, SAMPLES_EACH * (Math.floor(degree / stepOf(search)) + 3));
  const known = grids.get(search);
  if (known && known.points.length >= count) return known;
  const grid = sampledGrid(search, Math.ceil(count * 1.25), budget);
  grids.set(search, grid);
  return grid;
}

function sampledGrid({ target, relative, low, high, basis }: Search, count: number, budget: Budget): Grid {
  const { bits } = target;
  const shift = BigInt(bits);
  const one = 1n << shift;
  // A function of known parity on a symmetric interval is fitted on its right half.
  const half = basis !== 'all' && Q.equal(low, Q.negate(high));
  const power = (u: Fixed): Fixed => {
    let value = one;
    for (let k = 0; k < target.order; k += 1) value = (value * u) >> shift;
    return value;
  };
  /** |u^s / f| with the kept terms in f, both without the lowest power of f. */
  const weightBeside = (u: Fixed, g: Fixed): Fixed => {
    const lowest = target.kept[0]?.power ?? 0;
    const to = (value: Fixed, n: number): Fixed => {
      let product = value;
      for (let k = 0; k < n; k += 1) product = (product * u) >> shift;
      return product;
    };
    const f = target.kept.reduce((sum, { power: k, value }) => sum + to(toFixed(value, bits), k - lowest), to(g, target.order - lowest));
    if (f === 0n) throw new Declined('bad-request', 'The function is zero where no relative error can be kept; ask for the absolute measure or another interval.');
    return magnitude((to(one, target.order - lowest) << shift) / f);
  };
  const weight = (u: Fixed, g: Fixed): Fixed => {
    if (!relative) return target.order === 0 ? one : magnitude(power(u));
    if (target.kept.length > 0) return weightBeside(u, g);
    if (g === 0n) throw new Declined('bad-request', 'The function is zero where no relative error can be kept; ask for the absolute measure or another interval.');
    return (one << shift) / magnitude(g);
  };
  return sampleGrid({ bits, low: half ? Q.ZERO : low, high, squared: half, target: target.quotient, weight }, count, budget);
}

/** Best approximation of this degree; null where the exchange does not settle. */
export function bestOfDegree(search: Search, degree: number, budget: Budget): Found | null {
  const powers = powersOf(search, degree);
  if (powers.length === 0) return null;
  const problem: ExchangeProblem = { grid: gridFor(search, degree, budget), powers };
  const result = exchange(problem, budget);
  return result && { problem, result, degree };
}

export const MOST_DEGREE = 160;

/** The least degree whose best error is within `goal`; null where none up to 160 is. Steps double until one is, then halve. */
export function leastWithin(search: Search, goal: Rational, budget: Budget): Found | null {
  const step = stepOf(search);
  const first = leastDegree(search);
  const tried = new Map<number, Found | null>();
  const within = (k: number): Found | null => {
    const known = tried.get(k);
    if (known !== undefined) return known;
    budget.check();
    const found = bestOfDegree(search, first + k * step, budget);
    const good = found && Q.compare(errorOf(found), goal) <= 0 ? found : null;
    tried.set(k, good);
    return good;
  };
  const most = Math.floor((MOST_DEGREE - first) / step);
  let [failed, good] = [-1, 3];
  while (!within(good)) {
    if (good >= most) return null;
    failed = good;
    good = Math.min(most, good * 2);
  }
  while (good - failed > 1) {
    const middle = (good + failed) >> 1;
    if (within(middle)) good = middle;
    else failed = middle;
  }
  return within(good);
}

/** The next larger polynomial of the same kind. */
export const nextDegree = (search: Search, degree: number): number => degree + stepOf(search);

export const errorOf = (found: Found): Rational => inUnit(found.result.largest, found.result.residual);
