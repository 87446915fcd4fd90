/** Bernoulli and Euler numbers and polynomials as functions of an explicit degree. Source: DLMF 24.2. */
import { type Expression, Q } from '../../expression/index.ts';
import { argument, call, lift, plus, pow, times } from '../compose.ts';
import { asInteger } from '../exactForms.ts';
import { bernoulli, binomial, eulerNumber } from '../sequences.ts';

const degree = (args: readonly Expression[]): number | null => {
  const n = asInteger(argument(args, 0), 1000);
  return n !== null && n >= 0 ? n : null;
};
export const bernoulliNumberValue = (args: readonly Expression[]): Expression | null => {
  const n = degree(args);
  return n === null ? null : lift(bernoulli(n));
};
export const eulerNumberValue = (args: readonly Expression[]): Expression | null => {
  const n = degree(args);
  return n === null ? null : lift(eulerNumber(n));
};
/** B_n(x) = sum of binomial(n, k) B_k x^(n-k) (DLMF 24.2.5). */
export const bernoulliPolynomialValue = (args: readonly Expression[]): Expression | null => {
  const n = degree(args);
  if (n === null || n > 200) return null;
  const x = argument(args, 1);
  return plus(...Array.from({ length: n + 1 }, (_, k) => times(Q.multiply(Q.rational(binomial(n, k)), bernoulli(k)), pow(x, n - k))));
};
export const bernoulliPolynomialDerivative = (args: readonly Expression[], index: number): Expression | null => {
  const n = argument(args, 0);
  return index === 1 ? times(n, call('bernoulliPolynomial', plus(n, -1), argument(args, 1))) : null;
};
