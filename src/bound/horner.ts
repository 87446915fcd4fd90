/** Models of power series in a model. */
import type { Model, ModelArithmetic } from '../rigorous/index.ts';
import type { Numbers } from './numbers.ts';

/** The model without its value at s = 0. */
export function withoutConstant<T>(m: ModelArithmetic<T>, u: Model<T>): Model<T> {
  const rest = m.polynomial([m.a.zero, ...u.coefficients.slice(1)]);
  return m.a.isZero(u.tail) ? rest : m.add(rest, { valuation: u.coefficients.length, coefficients: [], tail: u.tail, range: u.tail });
}
/** sum a_k d^k + remainder d^K, by Horner's rule. */
export function hornerWithTail<T>(coefficients: readonly T[], remainder: T, offset: Model<T>, n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const K = coefficients.length;
  let sum: Model<T> = m.constant(n.r.zero);
  for (let k = K - 1; k >= 0; k -= 1) sum = m.add(m.constant(coefficients[k] ?? n.r.zero), m.multiply(sum, offset));
  const last = m.powerInteger({ valuation: offset.valuation, coefficients: [], tail: offset.range, range: offset.range }, K);
  if (last === null) return null;
  const tail = n.r.multiply(last.range, remainder);
  return m.add(sum, { valuation: offset.valuation * K, coefficients: [], tail, range: tail });
}
