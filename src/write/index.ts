/** Trees and expansions -> text. Everything here is total and pure: any tree can be written. */
export { toLatex } from './latex.ts';
export { toUnicode } from './unicode.ts';
export { NumericSymbols, toMpmath } from './mpmath.ts';
export { toPlain } from './plain.ts';
export { continuationLatex, equationLatex, expansionLatex, expansionNumeric, expansionText, remainderLatex, remainderText } from './expansion.ts';
export { expansionTree, remainderArgument, termsTree, termTree } from './expansionTree.ts';
export { binaryExponent, FLOAT_FORMATS, hexFloat, isRepresentable, powerOfTwo, roundToFormat, shortestDecimal, type FloatFormat, type FloatParameters } from './float.ts';
export * from './code/index.ts';
