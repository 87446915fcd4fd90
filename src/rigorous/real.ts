/** Everything on real balls under one name: `real.exp(x, precision)`. */
export * from './ball.ts';
export * from './ball-operations.ts';
export * from './ball-sets.ts';
export * from './ball-exponential.ts';
export * from './ball-powers.ts';
export * from './ball-circular.ts';
export * from './ball-hyperbolic.ts';
export { bernoulliNumber, catalan, e, eulerGamma, glaisher, zeta } from './ball-constants.ts';
export { rationalToDecimal, toDecimalDown, toDecimalUp } from './decimal.ts';
