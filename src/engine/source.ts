/** The formula that a request is about, read from its text in whatever language it stands. */
import type { Assumption, Expression } from '../expression/index.ts';
import { failure, type Outcome, success } from '../outcome.ts';
import type { ConstantAnswer, ExpandRequest } from '../protocol.ts';
import { type Candidate, candidates, codeLanguage, type CodeReading, isTruncated, locate, macrosOf, type MacroTable, orderTerms, readFormula, readVariable, type Surroundings } from '../read/index.ts';
import type { EngineTools } from './resources.ts';

export interface SourceFormula {
  /** The whole chain of relations for a text that is one formula; the expression meant for a place in a document. */
  readonly expression: Expression;
  /** The whole chain that the expression stands in, where that is more. */
  readonly formula?: Expression;
  readonly conditions: readonly Expression[];
  /** Canonical name of the symbol to solve for, where the text says so (`y:\ y^3 + y = x`). */
  readonly unknown?: string;
  /** What stands around the formula and may tell its small quantity. */
  readonly surroundings: Surroundings;
  /** Reads a symbol or compound quantity written as in the text. */
  readonly readSymbol: (text: string) => Outcome<Expression>;
  /** Where the formula stands in the request's text, in UTF-16 code units. */
  readonly start: number;
  readonly end: number;
  /** What code around it says: format, scope, constants. */
  readonly code?: CodeReading;
  /** Constants defined beside it that stand in it, or were filled in. */
  readonly constants?: readonly ConstantAnswer[];
  /** Their values where they stay symbols: what is measured (a bound, a value) may use them. */
  readonly knownValues?: readonly Assumption[];
}

export type SourceRequest = Pick<ExpandRequest, 'text' | 'language' | 'selection' | 'variable' | 'unknown' | 'files'>;

export async function sourceFormula(request: SourceRequest, tools: EngineTools): Promise<Outcome<SourceFormula>> {
  const { text, language, selection } = request;
  if (text.trim() === '') return failure('unreadable', 'There is nothing to read; select an expression.', { start: 0, end: text.length });
  if (codeLanguage(language)) {
    try {
      await tools.code.prepare(language);
    } catch {
      // Without its grammar a language is still read by operator precedence.
    }
    if (!selection) return wholeCode(text, language, tools);
  }
  return selection ? placeInDocument(request, selection, tools) : wholeFormula(request);
}

const truncatedSides = (formula: Expression): readonly Expression[] => (formula.kind === 'relation' ? formula.sides.filter(isTruncated) : []);

/** Names of the request that the reader must take as quantities. */
const namedSymbols = ({ variable, unknown }: SourceRequest): string[] => [variable, unknown].filter((s): s is string => s !== undefined && /^\\?[A-Za-z]+\w*$/.test(s));

const macrosIn = ({ files }: SourceRequest): MacroTable => macrosOf((files ?? []).map((f) => f.text));

const symbolReader =
  (language: string, { code }: EngineTools) =>
  (name: string): Outcome<Expression> => {
    if (!codeLanguage(language)) return readVariable(name);
    const symbol = code.readCode(name, language);
    return symbol.ok ? success(symbol.value.expression) : symbol;
  };

function wholeCode(text: string, language: string, tools: EngineTools): Outcome<SourceFormula> {
  const read = tools.code.readCode(text, language);
  if (!read.ok) return read;
  const { expression, span } = read.value;
  return success({ expression, conditions: [], surroundings: {}, readSymbol: symbolReader(language, tools), start: span.start, end: span.end, code: read.value });
}

function placeInDocument(request: SourceRequest, selection: { readonly start: number; readonly end: number }, tools: EngineTools): Outcome<SourceFormula> {
  const { text, language } = request;
  const symbols = namedSymbols(request);
  const found = locate(text, language, selection, { codeReader: tools.code, macros: macrosIn(request), ...(symbols.length > 0 ? { symbols } : {}) });
  if (!found.ok) return found;
  const { expression, start, end, context } = found.value;
  return success({
    expression,
    formula: context.formula,
    conditions: context.conditions,
    ...(context.unknown === null ? {} : { unknown: context.unknown }),
    surroundings: { orders: context.orders, conditions: context.conditions, expansions: truncatedSides(context.formula), before: context.before, after: context.after },
    readSymbol: symbolReader(found.value.language, tools),
    start,
    end,
    ...(context.code ? { code: context.code } : {}),
  });
}

function wholeFormula(request: SourceRequest): Outcome<SourceFormula> {
  const { text, language } = request;
  const symbols = namedSymbols(request);
  const formula = readFormula(text, language === 'plain' ? 'plain' : 'latex', { symbols, macros: macrosIn(request) });
  if (!formula.ok) return formula;
  const { expression, conditions, unknown } = formula.value;
  return success({
    expression,
    conditions,
    ...(unknown === undefined ? {} : { unknown }),
    surroundings: { orders: orderTerms(expression), conditions, expansions: truncatedSides(expression) },
    readSymbol: (name) => readVariable(name),
    start: expression.span?.start ?? 0,
    end: expression.span?.end ?? text.length,
  });
}

/** The candidates for the small quantity of one expression of the source. */
export const candidatesOf = (source: SourceFormula, target: Expression): { readonly list: readonly Candidate[]; readonly found: ReturnType<typeof candidates>['found'] } => candidates(target, source.surroundings);
