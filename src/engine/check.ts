/** `check`: every printed expansion of a document, or one claim, judged. */
import { check, checkInSteps, type CheckParts } from '../check/index.ts';
import { type Budget, type Outcome, success } from '../outcome.ts';
import type { CheckAnswer, CheckRequest } from '../protocol.ts';
import { codeLanguage } from '../read/index.ts';
import { readAllAssumptions } from './assumptions.ts';
import type { EngineTools } from './resources.ts';

export async function askCheck(request: CheckRequest, tools: EngineTools, time: Budget): Promise<Outcome<CheckAnswer>> {
  const assumptions = readAllAssumptions(request.assume);
  if (!assumptions.ok) return assumptions;
  const { text, language, variable, point, side, of, files } = request;
  if (codeLanguage(language)) {
    try {
      await tools.code.prepare(language);
    } catch {
      // Without its grammar a language is still read by operator precedence.
    }
  }
  const parts: CheckParts = {
    text,
    language,
    code: tools.code,
    memory: tools.memory,
    assumptions: assumptions.value,
    ...(variable === undefined ? {} : { variable }),
    ...(point === undefined ? {} : { point }),
    ...(side === undefined ? {} : { side }),
    ...(of === undefined ? {} : { of }),
    ...(files === undefined ? {} : { files }),
  };
  await tools.pause?.();
  const checked = tools.pause ? await checkInSteps(parts, time, tools.pause) : check(parts, time);
  return checked.ok ? success({ ok: true, ...checked.value }) : checked;
}
