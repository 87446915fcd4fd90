/** Text -> expression, with source positions: LaTeX, Markdown, plain notation, code, notes. */
import type { Expression } from '../expression/index.ts';
import type { Outcome } from '../outcome.ts';
import { readExpression, type ReadOptions } from './math/read.ts';

export { type Formula, readExpression, readFormula, type ReadOptions } from './math/read.ts';
export { collectMacros, type Macro, macrosOf, type MacroTable, NO_MACROS } from './math/macros.ts';
export { type Assumption, type Property, readAssumption, readExact, readSmall, readVariable, type SmallQuantity } from './exact.ts';

/** One LaTeX formula or chain of relations. Spans are UTF-16 offsets of `text`, also through macro expansion. */
export const readLatex = (text: string, options: ReadOptions = {}): Outcome<Expression> => readExpression(text, 'latex', options);
/** One formula in plain notation: `pi/2`, `sin x`, `x^2/2 + O(x^3)`, `√x`, `x²`. */
export const readPlain = (text: string, options: ReadOptions = {}): Outcome<Expression> => readExpression(text, 'plain', options);
export { type CommentSyntax, isKnownLanguage, type Language, languageOf, LANGUAGES, type StringRule } from './languages.ts';
export { type Comment, type DocumentContent, findComments, type FormulaPlace, readDocument, type Region } from './document/index.ts';
export { isEquation, isWorthExpanding, locate, type Located, type LocatedContext, type LocateOptions, mapSpans, orderMacroIn } from './locate.ts';
export { candidates, type Candidate, type Candidates, type Found, ratiosOf, type Surroundings } from './candidates.ts';
export { isBareName, isTruncated, orderTerms, principalSide } from './truncated.ts';
export {
  CODE_LANGUAGES, type CodeLanguage, codeLanguage, CodeReader, type CodeReading, type Coefficients, type CommentStyle, type CommentText, documentOffset, type EnclosingFunction, type FloatFormat,
  type FormatEvidence, type FoundFormat, type GrammarHost, type NearbyConstant, type Piece, type PolynomialCode, type ReadOptions as CodeReadOptions, type Remark, type SeriesBranch,
} from './code/index.ts';
export { type Note, readNotes, type Settings, settingsAt } from './notes.ts';
export { type DocumentStyle, documentStyle } from './style.ts';
