/** The formula that a request is about, read from its text in whatever language it stands. */
import type { Expression } from '../expression/index.ts';
import { failure, type Outcome, success } from '../outcome.ts';
import type { ExpandRequest } from '../protocol.ts';
import { type CodeReading, codeLanguage } from '../read/code/index.ts';
import { readFormula, readVariable } from '../read/index.ts';
import type { EngineTools } from './resources.ts';

export interface SourceFormula {
  readonly expression: Expression;
  readonly conditions: readonly Expression[];
  /** Canonical name of the symbol to solve for, where the text says so (`y:\ y^3 + y = x`). */
  readonly unknown?: string;
  /** Quantities that the text itself marks as small or large. */
  readonly likely: readonly Expression[];
  /** Reads a symbol or compound quantity written as in the text. */
  readonly readSymbol: (text: string) => Outcome<Expression>;
  /** Where the formula stands in the request's text, in UTF-16 code units. */
  readonly start: number;
  readonly end: number;
  /** What code around it says: format, scope, constants. */
  readonly code?: CodeReading;
}

export async function sourceFormula(request: Pick<ExpandRequest, 'text' | 'language' | 'selection' | 'variable' | 'unknown'>, tools: EngineTools): Promise<Outcome<SourceFormula>> {
  const { text, language } = request;
  if (text.trim() === '') return failure('unreadable', 'There is nothing to read; select an expression.', { start: 0, end: text.length });
  return codeLanguage(language) ? codeFormula(request, tools) : proseFormula(request);
}

async function codeFormula({ text, language, selection }: Pick<ExpandRequest, 'text' | 'language' | 'selection'>, { code }: EngineTools): Promise<Outcome<SourceFormula>> {
  try {
    await code.prepare(language);
  } catch {
    // Without its grammar a language is still read by operator precedence.
  }
  const read = selection ? code.readCodeAt(text, language, selection) : code.readCode(text, language);
  if (!read.ok) return read;
  const { expression, span } = read.value;
  const readSymbol = (name: string): Outcome<Expression> => {
    const symbol = code.readCode(name, language);
    return symbol.ok ? success(symbol.value.expression) : symbol;
  };
  return success({ expression, conditions: [], likely: [], readSymbol, start: span.start, end: span.end, code: read.value });
}

function proseFormula({ text, language, variable, unknown }: Pick<ExpandRequest, 'text' | 'language' | 'variable' | 'unknown'>): Outcome<SourceFormula> {
  const notation = language === 'plain' ? 'plain' : 'latex';
  const symbols = [variable, unknown].filter((s): s is string => s !== undefined && /^\\?[A-Za-z]+\w*$/.test(s));
  const formula = readFormula(text, notation, { symbols });
  if (!formula.ok) return formula;
  const { expression, conditions, unknown: marked } = formula.value;
  return success({
    expression,
    conditions,
    ...(marked === undefined ? {} : { unknown: marked }),
    likely: [],
    readSymbol: (name) => readVariable(name),
    start: 0,
    end: text.length,
  });
}
