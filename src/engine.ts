/** The engine's door: one request in, one answer out. No I/O of its own, no global state, no editor, no DOM. */
import { askCheck } from './engine/check.ts';
import { askExpand } from './engine/expand.ts';
import { askFit } from './engine/fit.ts';
import { askGuard } from './engine/guard.ts';
import { type EngineResources, engineTools, type EngineTools } from './engine/resources.ts';
import { validateRequest } from './engine/validate.ts';
import { budget, Declined, failure, Interrupted, type Outcome } from './outcome.ts';
import type { Answer, Request } from './protocol.ts';

export type { EngineResources } from './engine/resources.ts';
export { libraryPrefix } from './engine/insertion.ts';

export interface Engine {
  /** Takes untrusted data: every field is validated. Never rejects. */
  ask(request: unknown): Promise<Answer>;
}

const DEFAULT_BUDGET_MS = 5000;

export function createEngine(resources: EngineResources): Engine {
  const tools = engineTools(resources);
  return {
    async ask(request) {
      const id = identifierOf(request);
      const tagged = (answer: Answer): Answer => (id === undefined ? answer : { id, ...answer });
      const valid = validateRequest(request);
      if (!valid.ok) return tagged(valid);
      const outcome = await guarded(() => dispatch(valid.value, tools, resources.interrupted));
      return tagged(outcome.ok ? outcome.value : outcome);
    },
  };
}

function identifierOf(request: unknown): string | number | undefined {
  if (typeof request !== 'object' || request === null || !('id' in request)) return undefined;
  return typeof request.id === 'string' || typeof request.id === 'number' ? request.id : undefined;
}

function dispatch(request: Request, tools: EngineTools, interrupted?: () => boolean): Promise<Outcome<Answer>> {
  const time = budget(request.budget_ms ?? DEFAULT_BUDGET_MS, undefined, interrupted);
  switch (request.ask) {
    case 'expand':
      return askExpand(request, tools, time);
    case 'fit':
      return askFit(request, tools, time);
    case 'guard':
      return askGuard(request, tools, time);
    case 'check':
      return askCheck(request, tools, time);
  }
}

/** Declined becomes its failure; an exhausted stack or number range becomes `over-budget`; anything else is a defect and said to be one. */
async function guarded(body: () => Promise<Outcome<Answer>>): Promise<Outcome<Answer>> {
  try {
    return await body();
  } catch (error) {
    if (error instanceof Declined) return { ok: false, error: error.failure };
    if (error instanceof Interrupted) return failure('over-budget', error.message);
    if (error instanceof RangeError) return failure('over-budget', `This expression is too large or too deeply nested to work on (${error.message}); take a part of it.`);
    return failure('undecided', `The engine met a defect of its own (${error instanceof Error ? error.message : String(error)}); please report the expression.`);
  }
}
