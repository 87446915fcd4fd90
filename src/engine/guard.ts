/** `guard`: replaced by the fit room as soon as its door exists. */
import { type Budget, failure, type Outcome } from '../outcome.ts';
import type { GuardAnswer, GuardRequest } from '../protocol.ts';
import type { EngineTools } from './resources.ts';

export function askGuard(_request: GuardRequest, _tools: EngineTools, _time: Budget): Promise<Outcome<GuardAnswer>> {
  return Promise.resolve(failure('bad-request', 'This version answers expand and check; guarded forms come with a later one.'));
}
