/** Fits on wide intervals, whose argument is reduced; references in double `x` as in programs.ts. */
import type { ExhaustiveCase } from './programs.ts';

export const REDUCED_CASES: readonly ExhaustiveCase[] = [
  { text: 'exp(x)', low: '-87', high: '88', measure: 'relative', tolerance: '3e-7', reference: 'exp(x)' },
  { text: 'exp(x)', low: '-104', high: '88', measure: 'ulp', tolerance: '1.8', reference: 'exp(x)' },
  { text: 'exp(-x)', low: '0', high: '1000', measure: 'relative', tolerance: '1e-5', reference: 'exp(-x)' },
  { text: '3*2^x', low: '-20', high: '20', measure: 'absolute', tolerance: '1', reference: '3*exp2(x)' },
  { text: '2^x', low: '-100', high: '100', measure: 'ulp', tolerance: '1.5', reference: 'exp2(x)' },
  { text: '10^(x/20)', low: '-60', high: '60', measure: 'relative', tolerance: '4e-7', reference: 'exp(x*0.115129254649702284200899572734)' },
  { text: 'log(x)', low: '1/1000000', high: '1000000', measure: 'ulp', tolerance: '4', reference: 'log(x)' },
  { text: 'log(x)', low: '1/1000', high: '1000', measure: 'absolute', tolerance: '1e-6', reference: 'log(x)' },
  { text: 'log(x)', low: '1/1000000000000000000000000000000000000000000', high: '1000', measure: 'relative', tolerance: '4e-7', reference: 'log(x)' },
  { text: 'log(x)/log(2)', low: '1/16', high: '4096', measure: 'relative', tolerance: '1e-6', reference: 'log2(x)' },
  { text: 'sin(x)', low: '-1000', high: '1000', measure: 'absolute', tolerance: '2e-7', reference: 'sin(x)' },
  { text: 'sin(x)', low: '-30000', high: '30000', measure: 'absolute', tolerance: '1e-5', reference: 'sin(x)' },
  { text: 'sin(x)', low: '-3', high: '3', measure: 'relative', tolerance: '1e-6', reference: 'sin(x)' },
  { text: 'cos(x)', low: '-100', high: '100', measure: 'absolute', tolerance: '2e-7', reference: 'cos(x)' },
  { text: 'cos(2*x + 1)', low: '-10', high: '10', measure: 'absolute', tolerance: '1e-6', reference: 'cos(2*x + 1)' },
  { text: 'atan(x)', low: '-1000000', high: '1000000', measure: 'absolute', tolerance: '3e-7', reference: 'atan(x)' },
  { text: 'atan(x)', low: '-100', high: '100', measure: 'ulp', tolerance: '6', reference: 'atan(x)' },
  { text: 'atan(x)', low: '0', high: '50', measure: 'relative', tolerance: '1e-6', reference: 'atan(x)' },
  { text: 'x^(12/5)', low: '0', high: '1', measure: 'relative', tolerance: '1e-6', reference: 'pow(x, 2.4)' },
  { text: 'x^(1/3)', low: '1/1000', high: '1000', measure: 'relative', tolerance: '5e-7', reference: 'cbrt(x)' },
  { text: '1/sqrt(x)', low: '1/10000', high: '10000', measure: 'relative', tolerance: '5e-7', reference: '1/sqrt(x)' },
  { text: 'x^(5/12)', low: '0', high: '1', measure: 'absolute', tolerance: '1e-6', reference: 'pow(x, 5.0/12)' },
];
