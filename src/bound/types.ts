/** What bound/ is asked and what it answers. */
import type { Assumption, Expression, Rational } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import type { Budget, Outcome } from '../outcome.ts';

export type Measure = 'absolute' | 'relative';

/** A closed interval of the variable; ends are exact expressions, `infinity` (or its negation) included. */
export interface ClosedInterval {
  readonly lower: Expression;
  readonly upper: Expression;
}

export interface BoundProblem {
  readonly expansion: Expansion;
  readonly interval: ClosedInterval;
  readonly measure: Measure;
  readonly assumptions: readonly Assumption[];
  readonly budget: Budget;
}

/** sup |f - sum| (or |f - sum|/|f|) over the interval. */
export interface RemainderBound {
  /** Decimal rounded up; null where the remainder is unbounded, with `place`. */
  readonly value: string | null;
  /** A proven lower bound of the supremum, rounded down; null where value is null. */
  readonly lower: string | null;
  /** The exact rationals behind the two decimals. */
  readonly upperRational: Rational | null;
  readonly lowerRational: Rational | null;
  readonly method: string;
  /** Steps of the proof, in words and numbers that can be checked again. */
  readonly proof: readonly string[];
  /** With free parameters the bound is value * factor. */
  readonly factor?: Expression;
  readonly place?: Expression;
}

export interface LadderEntry {
  readonly terms: number;
  readonly expansion: Expansion;
  readonly bound: RemainderBound;
}

export interface TermsNeeded {
  readonly terms: number | null;
  readonly expansion?: Expansion;
  readonly bound?: RemainderBound;
  /** One term fewer is refuted by a proven lower bound (true for terms = 1). */
  readonly minimal?: boolean;
  readonly reason?: string;
  readonly estimate?: number;
  readonly best?: { readonly terms: number; readonly bound: string };
  readonly reach?: Reach;
  /** Degree of a polynomial fitted on the interval, proven to keep the tolerance; set where no truncated expansion does. */
  readonly fittedDegree?: number;
}

/** `distance` is a decimal rounded down, in the variable's unit (|x - a|, or 1/|x| at infinity); `inf` where there is no limit. */
export interface Reach {
  readonly distance: string;
  /** Whether the tolerance is kept at the distance itself (true) or only at every smaller one (false), each proven; absent where it is only known for every smaller one. */
  readonly closed?: boolean;
}

export interface ValueAt {
  readonly value: { readonly low: string; readonly high: string };
  readonly sum: { readonly low: string; readonly high: string };
  /** f - sum. */
  readonly error: { readonly low: string; readonly high: string };
  /** 100 |f - sum| / |f|; null where f is (or may be) zero. */
  readonly percentage: { readonly low: string; readonly high: string } | null;
}

export type ExpansionWithTerms = (terms: number) => Outcome<Expansion>;
