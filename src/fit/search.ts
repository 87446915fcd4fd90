/** Best polynomials of a target: basis, weight, least degree. Numerical search only; proofs come after it. */
import { Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { exchange, type ExchangeProblem, type ExchangeResult } from './exchange.ts';
import { type Fixed, fromFixed, magnitude, toFixed } from './fixed.ts';
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
function powersOf({ target, basis }: Search, degree: number): number[] {
  const powers: number[] = [];
  for (let k = target.order; k <= degree; k += 1) if (basis === 'all' || (k % 2 === 1) === (basis === 'odd')) powers.push(k - target.order);
  return powers;
}

export const leastDegree = ({ target, basis }: Search): number => {
  let k = target.order;
  while (basis !== 'all' && (k % 2 === 1) !== (basis === 'odd')) k += 1;
  return k;
};
const stepOf = (search: Search): number => (search.basis === 'all' ? 1 : 2);

/** Best approximation of this degree; null where the exchange does not settle. */
export function bestOfDegree(search: Search, degree: number, budget: Budget): Found | null {
  const { target, relative } = search;
  const { bits } = target;
  const shift = BigInt(bits);
  const one = 1n << shift;
  const powers = powersOf(search, degree);
  if (powers.length === 0) return null;
  // A function of known parity on a symmetric interval is fitted on its right half.
  const half = search.basis !== 'all' && Q.equal(search.low, Q.negate(search.high));
  const order = BigInt(target.order);
  const power = (u: Fixed): Fixed => {
    let value = one;
    for (let k = 0n; k < order; k += 1n) value = (value * u) >> shift;
    return value;
  };
  const weight = relative
    ? (u: Fixed): Fixed => {
        const g = magnitude(target.quotient(u));
        if (g === 0n) throw new Declined('bad-request', 'The function is zero where no relative error can be kept; ask for the absolute measure or another interval.');
        return (one << shift) / g;
      }
    : target.order === 0
      ? (): Fixed => one
      : (u: Fixed): Fixed => magnitude(power(u));
  const problem: ExchangeProblem = { bits, low: half ? Q.ZERO : search.low, high: search.high, powers, target: target.quotient, weight };
  const result = exchange(problem, budget);
  return result && { problem, result, degree };
}

const MOST_DEGREE = 120;

/** The least degree whose best error is within `goal` (fixed point); null where none up to 120 is. */
export function leastWithin(search: Search, goal: Fixed, budget: Budget): Found | null {
  for (let degree = leastDegree(search); degree <= MOST_DEGREE; degree += stepOf(search)) {
    budget.check();
    const found = bestOfDegree(search, degree, budget);
    if (found && found.result.largest <= goal) return found;
  }
  return null;
}

/** The next larger polynomial of the same kind. */
export const nextDegree = (search: Search, degree: number): number => degree + stepOf(search);

export const errorOf = (found: Found): Rational => fromFixed(found.result.largest, found.problem.bits);
export const goalOf = (tolerance: Rational, bits: number): Fixed => toFixed(tolerance, bits);
