/** Door of the functions: one description per function of mathematics, and the ways to find it. */
export type { FormalSeries, FunctionDescription, FunctionNames, LocalForm, Place, Together } from './description.ts';
export { differentiate } from './differentiate.ts';
export { LANGUAGE_FAMILIES, type LanguageFamily, languageFamily } from './naming.ts';
export { acceptsArity, allFunctions, codeCall, codeWriting, describe, lookupCode, lookupLatex, lookupLatexLetter, lookupPlain, type LatexShape } from './registry.ts';
export { asInteger, asMultipleOfImaginaryPi, asMultipleOfPi, signedSquare } from './exactForms.ts';
export { isolateRoots, rootArguments, rootBall } from './algebraic/index.ts';
export { collected } from './linear.ts';
