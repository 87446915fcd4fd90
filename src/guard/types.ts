/** What is asked of a guard and what is answered. */
import type { Expression, Rational } from '../expression/index.ts';
import type { FloatFormat } from '../fit/index.ts';

export interface GuardProblem {
  readonly function: Expression;
  readonly variable: string;
  /** A rational point (a float of the format where a series branch is wanted), or an infinite one. */
  readonly point: Rational | 'inf' | '-inf';
  /** Closed; null: no finite end on that side. Absent: one is proposed. */
  readonly interval?: { readonly low: Rational | null; readonly high: Rational | null };
  /** The ends as they were written, for comments. */
  readonly intervalText?: readonly [string, string];
  readonly format: FloatFormat;
  readonly language: string;
  /** Relative; the least number of terms that keeps it. */
  readonly tolerance?: Rational;
  /** Assumed error of a library call in ulp. */
  readonly library: number;
  /** How the file calls its library (`np.`). */
  readonly prefix?: string;
  /** Also a guard of the derivative. */
  readonly derivative?: boolean;
  /** The switch to be used, where another guard has set it. */
  readonly switch?: Rational;
  /** Words of the function's name; `guarded` by default. */
  readonly name?: readonly string[];
}

export interface GuardRange {
  readonly from: string;
  readonly to: string;
  readonly form: string;
  /** Relative error, rounded up. */
  readonly bound: number;
}

export interface Guarded {
  readonly forms: readonly { readonly tree: Expression; readonly text: string; readonly bound: number; readonly identities: readonly string[] }[];
  readonly ranges: readonly GuardRange[];
  /** Distance from the point below which the series serves: a float. */
  readonly switch: Rational | null;
  readonly terms: number | null;
  readonly bound: { readonly series: number | null; readonly direct: number | null; readonly whole: number };
  readonly code: string;
  readonly imports: readonly string[];
  readonly assumptions: readonly string[];
  readonly interval: readonly [string, string];
  /** The guard of the derivative, with the same switch where there is one; null where it has none that could be proved. */
  readonly derivative?: Guarded | null;
}
