export type { Assumption, AssumptionRelation } from './assumption.ts';
export * from './expression.ts';
export { markedName } from './derivativeMarks.ts';
export { BOLD, isVectorName, setBold } from './vectorNames.ts';
export { PLAIN_STYLE, type DocumentStyle, type OrderStyle } from './style.ts';
export * as build from './build.ts';
export * as Q from './rational.ts';
export type { Rational } from './rational.ts';
export { children, dependsOn, freeSymbols, mapChildren, sameExpression, structureKey, substitute, walk } from './traverse.ts';
