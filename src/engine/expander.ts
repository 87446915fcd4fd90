/** An expansion that can be asked for with another number of terms. */
import type { Expansion } from '../expand/index.ts';
import type { Outcome } from '../outcome.ts';

/** Finds the expansion with the number of terms asked for; also how to ask for another number. */
export interface Expander {
  readonly first: Expansion;
  readonly withTerms: (terms: number) => Outcome<Expansion>;
}
