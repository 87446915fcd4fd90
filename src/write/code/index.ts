/** Code in each language: expressions, polynomials, functions, literals, comments. */
export { toCode } from './expression.ts';
export { LANGUAGES, codeLanguage, type CodeLanguage, type LanguageRow, parameterIn } from './languages.ts';
export type { Code, CodeOptions } from './options.ts';
export { commentLines, functionCode, type FunctionText, type Statement } from './function.ts';
export { polynomialCode, polynomialForm, polynomialTree, strided, type PolynomialForm, type PolynomialShape, type PolynomialTerm, type Step } from './polynomial.ts';
export { floatLiteral, type LiteralStyle } from './literal.ts';
export { hornerExpression } from './truncated.ts';
