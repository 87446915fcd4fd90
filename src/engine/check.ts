/** `check`: replaced by the check room as soon as its door exists. */
import { type Budget, failure, type Outcome } from '../outcome.ts';
import type { CheckAnswer, CheckRequest } from '../protocol.ts';
import type { EngineTools } from './resources.ts';

export function askCheck(_request: CheckRequest, _tools: EngineTools, _time: Budget): Promise<Outcome<CheckAnswer>> {
  return Promise.resolve(failure('bad-request', 'This version answers expand; checks come with a later one.'));
}
