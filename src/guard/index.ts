/** Door of guard/: accurate replacements for expressions that cancel or are 0/0 near a point, with their proof and code. */
import { attempt, type Budget, type Outcome } from '../outcome.ts';
import { guarded } from './guard.ts';
import { type PolynomialQuestion, type PolynomialReport, reportPolynomial } from './recognise.ts';
import type { Guarded, GuardProblem } from './types.ts';

export type { Guarded, GuardProblem, GuardRange } from './types.ts';
export type { PolynomialQuestion, PolynomialReport } from './recognise.ts';
export { decimal } from './words.ts';

/** Fails with needs-assumption (free parameters), bad-request, undecided (no form could be proved on the interval), over-budget. */
export const guard = (problem: GuardProblem, budget: Budget): Outcome<Guarded> => attempt(() => guarded(problem, budget));

/** Which function a polynomial of a program approximates, Taylor or fitted, and its largest error, proved; judges a stated error. Fails with undecided, bad-request, over-budget. */
export const polynomialReport = (question: PolynomialQuestion, budget: Budget): Outcome<PolynomialReport> => attempt(() => reportPolynomial(question, budget));
