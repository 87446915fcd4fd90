/** Everything on double intervals under one name: `interval.exp(x)`. */
export * from './interval.ts';
export { acos, acosh, asin, asinh, atan, atan2, atanh, cos, cosh, exp, expm1, log, log1p, LOG_TWO, PI, power, powerRational, root, sin, sinCos, sinh, tan, tanh } from './interval-functions.ts';
