/** Door of the coefficient field. */
export { createField } from './field.ts';
export { rationalFactors, type RationalFactor } from './rationalFactors.ts';
export type { CompoundElement, Element, Field, Sign, Truth } from './types.ts';
