/** Where a branch of a root begins. */
import type { Expression } from '../../expression/index.ts';
import type { Multi } from '../../series/index.ts';

export interface Start {
  readonly value: Multi;
  readonly multiplicity: number;
  /** The value solves the equation as it stands. */
  readonly exact: boolean;
  /** An equivalent equation in which Newton's iteration improves the start. */
  readonly tree?: Expression;
}
