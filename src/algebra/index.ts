/** Door of the coefficient field. */
export { createField } from './field.ts';
export type { CompoundElement, Element, Field, Sign, Truth } from './types.ts';
