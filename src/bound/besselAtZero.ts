/** Bessel functions at zero: the power series of DLMF 10.2.2, 10.25.2 and, for whole orders, 10.8.1 and 10.31.1, with the rest of each series bounded by the ratio of its terms. */
import { build, type Expression, Q, rationalOf } from '../expression/index.ts';
import { type Model, type ModelArithmetic } from '../rigorous/index.ts';
import type { Numbers } from './numbers.ts';

const { call, constant, number, power, product, quotient, sum } = build;
const SERIES = 'Bessel series at zero';
const LOG_SERIES = 'Bessel logarithmic series at zero';

/** J, Y, I, K of an argument that tends to zero, by (x/2)^nu times series in +-x^2/4; null for orders that are not plain rationals. */
export function besselAtZero(id: string, args: readonly Expression[], x: Expression): Expression | null {
  const order = args[0] && rationalOf(args[0]);
  if (!order || Q.toDouble(Q.absolute(order)) > 60) return null;
  const half = quotient(x, number(2));
  const z = power(half, 2);
  const minus = id === 'besselJ' || id === 'besselY';
  const first = (nu: Q.Rational): Expression => product(power(half, nu), call(SERIES, number(nu), minus ? build.negation(z) : z));
  const whole = Q.isInteger(order);
  if (id === 'besselJ' || id === 'besselI') {
    if (!whole || order.num >= 0n) return first(order);
    const positive = first(Q.negate(order));
    return minus && order.num % 2n !== 0n ? build.negation(positive) : positive;
  }
  if (!whole) {
    const pi = constant('pi');
    const angle = product(number(order), pi);
    if (id === 'besselK') return quotient(product(pi, build.difference(first(Q.negate(order)), first(order))), product(number(2), call('sin', angle)));
    return quotient(build.difference(product(first(order), call('cos', angle)), first(Q.negate(order))), call('sin', angle));
  }
  if (order.num < 0n) return null;
  const n = Number(order.num);
  const finite: Expression[] = [];
  let weight = Q.ONE;
  for (let k = 2; k < n; k += 1) weight = Q.multiply(weight, Q.rational(k));
  for (let k = 0; k < n; k += 1) {
    // (n-k-1)!/k!, alternating for K.
    const signed = id === 'besselK' && k % 2 === 1 ? Q.negate(weight) : weight;
    finite.push(product(number(signed), power(half, 2 * k - n)));
    if (k + 1 < n) weight = Q.divide(weight, Q.rational(BigInt(n - k - 1) * BigInt(k + 1)));
  }
  const logarithm = call('log', half);
  const series = product(power(half, n), call(LOG_SERIES, number(n), minus ? build.negation(z) : z));
  const oneHalf = number({ num: 1n, den: 2n });
  if (id === 'besselK') {
    const sign = n % 2 === 0 ? 1 : -1;
    return sum(product(oneHalf, finite.length > 0 ? sum(...finite) : number(0)), product(number(-sign), logarithm, first(order)), product(number(sign), oneHalf, series));
  }
  const pi = constant('pi');
  return sum(build.negation(quotient(finite.length > 0 ? sum(...finite) : number(0), pi)), quotient(product(number(2), logarithm, first(order)), pi), build.negation(quotient(series, pi)));
}

/** The models of the two series: sum z^k/(k! Gamma(nu+k+1)) and sum (psi(k+1) + psi(n+k+1)) z^k/(k! (n+k)!). */
export function besselSeriesModel<T>(id: string, args: readonly Expression[], models: readonly Model<T>[], n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  if (id !== SERIES && id !== LOG_SERIES) return null;
  const { r } = n;
  const order = args[0] && rationalOf(args[0]);
  const z = models[1];
  if (!order || z === undefined || z.valuation <= 0) return null;
  const nu = r.fromRational(order);
  const gamma = n.value(call('gamma', sum(number(order), number(1))));
  const count = Math.max(2, Math.ceil(m.length / z.valuation) + 1);
  const size = r.upperEnd(r.absolute(m.rangeOf(z) ?? r.zero));
  const coefficients: T[] = [];
  let base = gamma === null ? null : r.divide(r.one, gamma);
  if (base === null) return null;
  // psi(k+1) = -gamma + H_k.
  let harmonics = r.negate(r.multiply(r.fromInteger(2), r.constant('eulerGamma')));
  if (id === LOG_SERIES) for (let j = 1n; j <= order.num; j += 1n) harmonics = r.add(harmonics, r.divideInteger(r.one, Number(j)));
  // Enough terms that the ratio bound below is small.
  const most = count + Math.min(200, Math.ceil(Math.sqrt(2 * Math.max(0, r.toDouble(size)))) + 2);
  for (let k = 0; k <= most; k += 1) {
    coefficients.push(id === SERIES ? base : r.multiply(base, harmonics));
    const next = r.multiply(r.fromInteger(k + 1), r.add(nu, r.fromInteger(k + 1)));
    base = r.divide(base, next) ?? r.zero;
    if (id === LOG_SERIES) harmonics = r.add(harmonics, r.add(r.divideInteger(r.one, k + 1), r.divideInteger(r.one, k + 1 + Number(order.num))));
  }
  // |c_(k+1)/c_k| <= 2/((k+1)(k+1+nu)) from here on: psi(k+2)/psi(k+1) < 2 for k >= 3.
  const last = coefficients[most] ?? r.zero;
  const ratio = r.divide(r.multiply(r.fromInteger(2), size), r.multiply(r.fromInteger(most + 1), r.add(nu, r.fromInteger(most + 1))));
  const gap = ratio && r.subtract(r.one, r.upperEnd(ratio));
  if (gap === null || !r.isPositive(gap) || most < 4) return null;
  const factor = r.divide(r.upperEnd(r.absolute(last)), gap);
  if (factor === null) return null;
  const bound = r.upperEnd(factor);
  let total: Model<T> = m.constant(r.zero);
  for (let k = most - 1; k >= 0; k -= 1) total = m.add(m.constant(coefficients[k] ?? r.zero), m.multiply(total, z));
  const raised = m.powerInteger({ valuation: z.valuation, coefficients: [], tail: z.range, range: z.range }, most);
  if (raised === null) return null;
  const tail = r.multiply(raised.range, r.union(r.negate(bound), bound));
  return m.add(total, { valuation: z.valuation * most, coefficients: [], tail, range: tail });
}
