/** What every judgement rests on: variable, point, assumptions, time. */
import type { Assumption, Expression } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';

export interface Setting {
  readonly variable: string;
  readonly point: Expression | 'inf' | '-inf';
  readonly side: 'both' | 'right' | 'left';
  readonly assumptions: readonly Assumption[];
  readonly budget: Budget;
}
