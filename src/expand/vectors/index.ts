/** The door of vectors/: formulas with bold letters, expanded through lengths and dot products. */
export { expandSmallVectors, expandVectors, hasVectors, isVectorFormula } from './expand-vectors.ts';
export { requireLinearInFunctions } from './functions.ts';
