/** How near upper and lower bound must come. */
import { Q } from '../expression/index.ts';
import type { Numbers } from './numbers.ts';
import type { BoundProblem } from './types.ts';

/** Upper over lower bound that counts as settled. */
const SETTLED = 1.001;

/** A bound problem with the ratio of upper to lower bound to stop at, where the usual one does not decide. */
export type SharpProblem = BoundProblem & { readonly settled?: number };
export const settledOf = (problem: SharpProblem): number => problem.settled ?? SETTLED;
/** Relative slack of suprema: the rest of what is allowed is left to tails and rounding. */
export const slackOf = (problem: SharpProblem): number => 0.4 * (settledOf(problem) - 1);
/** Upper bounds up to here are settled by that lower bound. */
export const limitOf = <T>(r: Numbers<T>['r'], lower: T, problem: SharpProblem): T => r.multiply(lower, r.fromRational(Q.fromDouble(1 + 0.9995 * (settledOf(problem) - 1))));
