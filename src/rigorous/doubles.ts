/** Everything on double intervals under one name: `interval.exp(x)`. */
export * from './interval.ts';
export { acos, asin, atan, atan2, cos, PI, sin, sinCos, tan } from './interval-circular.ts';
export { acosh, asinh, atanh, cosh, sinh, tanh } from './interval-hyperbolic.ts';
export { exp, expm1, log, log1p, LOG_TWO, power, powerRational, root } from './interval-exponential.ts';
