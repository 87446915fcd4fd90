/** `fit`: replaced by the fit room as soon as its door exists. */
import { type Budget, failure, type Outcome } from '../outcome.ts';
import type { FitAnswer, FitRequest } from '../protocol.ts';
import type { EngineTools } from './resources.ts';

export function askFit(_request: FitRequest, _tools: EngineTools, _time: Budget): Promise<Outcome<FitAnswer>> {
  return Promise.resolve(failure('bad-request', 'This version answers expand and check; fits come with a later one.'));
}
