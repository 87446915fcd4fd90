/** Door of the readers of source code. */
export { CodeReader, type CodeReading, type EnclosingFunction, type FoundFormat, type ReadOptions } from './reader.ts';
export type { GrammarHost } from './grammar/loader.ts';
export { CODE_LANGUAGES, codeLanguage, type CodeLanguage, type CommentStyle, type FloatFormat } from './languages/index.ts';
export type { NearbyConstant } from './scope.ts';
export type { Remark } from './environment.ts';
export type { FormatEvidence } from './types.ts';
export { type CommentText, documentOffset, type Piece } from './comments.ts';
export type { PolynomialCode, SeriesBranch } from './series-code.ts';
export type { Coefficients } from './polynomial.ts';
