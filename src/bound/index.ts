/** Door of bound/: proven bounds of what an expansion leaves out, and what follows from them. */
import type { Assumption, Expression, Rational } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { attempt, type Budget, type Outcome, success } from '../outcome.ts';
import { type LeastTerm, leastTermAt } from './leastTerm.ts';
import { type IntegralValue, integralValue } from './integral.ts';
import { ladderOf, type NeededProblem, reachWith, termsNeededFor } from './needed.ts';
import { bound } from './remainder.ts';
import type { BoundProblem, ExpansionWithTerms, LadderEntry, Measure, RemainderBound, TermsNeeded, ValueAt } from './types.ts';
import { valueAtArgument } from './value.ts';

/** Bounds are computed in one symbol, also where the variable is a quantity such as v/c. */
const plain = (expansion: Expansion): Expansion => expansion.inOneSymbol ?? expansion;
const plainly = (expansionWithTerms: ExpansionWithTerms): ExpansionWithTerms => (n) => {
  const found = expansionWithTerms(n);
  return found.ok ? success(plain(found.value)) : found;
};
const plainProblem = (problem: NeededProblem): NeededProblem => ({ ...problem, expansionWithTerms: plainly(problem.expansionWithTerms) });

export type { BoundProblem, ClosedInterval, ExpansionWithTerms, LadderEntry, Measure, Reach, RemainderBound, TermsNeeded, ValueAt } from './types.ts';
export type { IntegralValue } from './integral.ts';
export type { NeededProblem } from './needed.ts';

/** sup |f - sum| (or relative to |f|) over a closed interval: a proven upper and lower bound. Fails with needs-assumption (a parameter without a range), undecided, over-budget, bad-request. */
export const boundRemainder = (problem: BoundProblem): Outcome<RemainderBound> => attempt(() => bound({ ...problem, expansion: plain(problem.expansion) }));

/** The least number of terms (at least 1) whose proven bound is within the tolerance; a reason, the best and the reach where there is none. */
export const termsNeeded = (problem: NeededProblem, tolerance: Rational): Outcome<TermsNeeded> => attempt(() => termsNeededFor(plainProblem(problem), tolerance));

/** Bounds for 1..n terms. */
export const ladder = (problem: NeededProblem, n: number): Outcome<readonly LadderEntry[]> => attempt(() => ladderOf(plainProblem(problem), n));

/** For one sum, the largest proven distance from the point within which the bound keeps the tolerance: a decimal rounded down, `inf`, or null where none was found. */
export const reachFor = (
  problem: { readonly expansion: Expansion; readonly measure: Measure; readonly assumptions: readonly Assumption[]; readonly budget: Budget },
  tolerance: Rational,
): Outcome<{ readonly distance: string } | null> => attempt(() => reachWith(problem, plain(problem.expansion), tolerance));

/** f, sum, f - sum and the percentage at an exact argument, each enclosed to about 10 digits. */
export const valueAt = (expansion: Expansion, argument: Expression, assumptions: readonly Assumption[], budget: Budget): Outcome<ValueAt> => attempt(() => valueAtArgument(plain(expansion), argument, assumptions, budget));
export { isExactOnSide } from './exactSide.ts';
export { boundDifference, type DifferenceBound, type DifferenceProblem, polynomialOf } from './difference.ts';

/** The value of an expression that holds definite integrals, enclosed to an absolute tolerance; singular and infinite ends included. Fails with bad-request where the integral diverges, undecided where it could not be enclosed. */
export const definiteIntegral = (expression: Expression, tolerance: Rational, assumptions: readonly Assumption[], budget: Budget): Outcome<IntegralValue> => attempt(() => integralValue(expression, tolerance, assumptions, budget));

/** For a divergent series: how many terms to keep at an exact argument, and the size of the first one to leave out, the least of all. */
export const leastTerm = (expansionWithTerms: ExpansionWithTerms, argument: Expression, assumptions: readonly Assumption[], budget: Budget): Outcome<LeastTerm | null> => attempt(() => leastTermAt(plainly(expansionWithTerms), argument, assumptions, budget));
