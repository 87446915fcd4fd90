/** Everything on real balls under one name: `real.exp(x, precision)`. */
export * from './ball.ts';
export * from './ball-functions.ts';
export { bernoulliNumber, catalan, e, eulerGamma, glaisher, zeta } from './ball-constants.ts';
export { rationalToDecimal, toDecimalDown, toDecimalUp } from './decimal.ts';
