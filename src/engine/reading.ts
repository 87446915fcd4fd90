/** What was understood of a request, for the first line of a hover and the controls of the page. */
import type { Expression } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import type { ExpandRequest, ReadingAnswer } from '../protocol.ts';
import { toLatex, toPlain } from '../write/index.ts';
import { candidatesOf, type SourceFormula } from './source.ts';

export function readingAnswer(request: ExpandRequest, source: SourceFormula, expansion: Expansion): ReadingAnswer {
  const { point, variable } = expansion;
  const pointText = (write: (e: Expression) => string, infinity: string): string => (point === 'inf' ? infinity : point === '-inf' ? `-${infinity}` : write(point));
  return {
    latex: toLatex(expansion.function),
    start: source.start,
    end: source.end,
    variable: request.variable ?? toPlain(variable),
    variableLatex: toLatex(variable),
    point: pointText(toPlain, 'inf'),
    pointLatex: pointText(toLatex, '\\infty'),
    side: expansion.side,
    candidates: candidatesOf(source, expansion.function).list.map((c) => c.name),
    ...(source.constants ? { constants: source.constants } : {}),
  };
}
