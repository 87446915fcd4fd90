/** Door of bound/: proven bounds of what an expansion leaves out. */
import { attempt, type Outcome } from '../outcome.ts';
import { bound } from './remainder.ts';
import type { BoundProblem, RemainderBound } from './types.ts';

export type { BoundProblem, ClosedInterval, ExpansionWithTerms, LadderEntry, Measure, Reach, RemainderBound, TermsNeeded, ValueAt } from './types.ts';

/** sup |f - sum| (or relative to |f|) over a closed interval: a proven upper and lower bound. Fails with needs-assumption (a parameter without a range), undecided, over-budget, bad-request. */
export const boundRemainder = (problem: BoundProblem): Outcome<RemainderBound> => attempt(() => bound(problem));
