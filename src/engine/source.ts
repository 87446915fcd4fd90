/** The formula that a request is about, read from its text in whatever language it stands. */
import type { Expression } from '../expression/index.ts';
import { failure, type Outcome, success } from '../outcome.ts';
import type { ExpandRequest } from '../protocol.ts';
import { readFormula, readVariable } from '../read/index.ts';
import type { EngineResources } from './resources.ts';

export interface SourceFormula {
  readonly expression: Expression;
  readonly conditions: readonly Expression[];
  /** Canonical name of the symbol to solve for, where the text says so (`y:\ y^3 + y = x`). */
  readonly unknown?: string;
  /** Quantities that the text itself marks as small or large. */
  readonly likely: readonly Expression[];
  /** Reads a symbol or compound quantity written as in the text. */
  readonly readSymbol: (text: string) => Outcome<Expression>;
  readonly start: number;
  readonly end: number;
}

export async function sourceFormula(request: ExpandRequest, _resources: EngineResources): Promise<Outcome<SourceFormula>> {
  const { text, language } = request;
  if (text.trim() === '') return failure('unreadable', 'There is nothing to read; select an expression.', { start: 0, end: text.length });
  const notation = language === 'plain' ? 'plain' : 'latex';
  const symbols = [request.variable, request.unknown].filter((s): s is string => s !== undefined && /^\\?[A-Za-z]+\w*$/.test(s));
  const formula = readFormula(text, notation, { symbols });
  if (!formula.ok) return formula;
  const { expression, conditions, unknown } = formula.value;
  return success({
    expression,
    conditions,
    ...(unknown === undefined ? {} : { unknown }),
    likely: [],
    readSymbol: (name) => readVariable(name),
    start: 0,
    end: text.length,
  });
}
