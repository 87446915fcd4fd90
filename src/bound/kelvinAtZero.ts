/** Kelvin functions at zero: the power series of DLMF 10.65(i), (ii) with every second term together, so that each series is one in -(x/4)^4. */
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import type { Model, ModelArithmetic } from '../rigorous/index.ts';
import type { Numbers } from './numbers.ts';

const { call, constant, negation, number, power, product, quotient, sum } = build;
const HARMONIC_SERIES = 'Kelvin harmonic series at zero';
const pi = constant('pi');

type Kelvin = 'kelvinBer' | 'kelvinBei' | 'kelvinKer' | 'kelvinKei';

const factorial = (n: number): bigint => (n < 2 ? 1n : BigInt(n) * factorial(n - 1));

/** cos or sin of `angle` times pi; exact for quarter turns of half a right angle, so that what vanishes is zero. */
function turn(angle: Rational, which: 'cos' | 'sin'): Expression {
  const eighths = Q.multiply(Q.rational(4), which === 'cos' ? angle : Q.subtract(angle, Q.HALF));
  if (!Q.isInteger(eighths)) return call(which, product(number(angle), pi));
  const root = quotient(build.squareRoot(number(2)), number(2));
  return [number(1), root, number(0), negation(root), number(-1), negation(root), number(0), root][Number(((eighths.num % 8n) + 8n) % 8n)] ?? number(0);
}
const isZero = (e: Expression): boolean => e.kind === 'number' && Q.isZero(e.value);
/** The parts without those whose first factor is zero. */
function combined(...parts: readonly (readonly [Expression, Expression])[]): Expression {
  const kept = parts.filter(([factor]) => !isZero(factor)).map(([factor, value]) => product(factor, value));
  return kept.length > 0 ? sum(...kept) : number(0);
}

/** cos or sin of `angle` pi + k pi/2, summed with (x^2/4)^k/(k! Gamma(nu+k+1)): even and odd k apart, (x/2)^nu in front. */
function entire(nu: Rational, x: Expression, angle: Rational, which: 'cos' | 'sin'): Expression {
  const quarter = quotient(power(x, 2), number(4));
  const argument = negation(quotient(power(x, 4), number(256)));
  const half = (q: Rational): Expression => number(Q.multiply(q, Q.HALF));
  const up = (by: number): Rational => Q.add(nu, Q.rational(by));
  const series = (start: 1 | 3): Expression => call('hypergeometric', number(0), number(3), number(Q.rational(start, 2)), half(up(start === 1 ? 1 : 2)), half(up(start === 1 ? 2 : 3)), argument);
  const even = quotient(series(1), call('gamma', number(up(1))));
  const odd = quotient(product(quarter, series(3)), call('gamma', number(up(2))));
  const [c, s] = [turn(angle, 'cos'), turn(angle, 'sin')];
  const parts = which === 'cos' ? combined([c, even], [isZero(s) ? s : negation(s), odd]) : combined([s, even], [c, odd]);
  return product(power(quotient(x, number(2)), nu), parts);
}

/** ber, bei, ker, kei of an argument that tends to zero (from the right where the order is not whole, or for ker and kei); null for orders that are not plain rationals, or negative and whole. */
export function kelvinAtZero(id: Kelvin, args: readonly Expression[], x: Expression, sign: number): Expression | null {
  const order = args[0] && rationalOf(args[0]);
  if (!order || Q.toDouble(Q.absolute(order)) > 40) return null;
  const whole = Q.isInteger(order);
  if (whole ? order.num < 0n : sign <= 0) return null;
  const angle = Q.multiply(Q.rational(3, 4), order);
  const [ber, bei] = [entire(order, x, angle, 'cos'), entire(order, x, angle, 'sin')];
  if (id === 'kelvinBer') return ber;
  if (id === 'kelvinBei') return bei;
  const which = id === 'kelvinKer' ? 'cos' : 'sin';
  if (!whole) {
    // exp(-nu pi i/2) K_nu(x exp(pi i/4)) with K_nu by both I (DLMF 10.61.2, 10.27.4).
    const down = entire(Q.negate(order), x, Q.negate(angle), which);
    const up = entire(order, x, Q.negate(Q.multiply(Q.rational(1, 4), order)), which);
    return quotient(product(pi, build.difference(down, up)), product(number(2), call('sin', product(number(order), pi))));
  }
  const n = Number(order.num);
  const half = quotient(x, number(2));
  const z = quotient(power(x, 2), number(4));
  const turned = (k: number): Expression => turn(Q.add(angle, Q.rational(k, 2)), which);
  const finite = Array.from({ length: n }, (_, k) => product(number(Q.rational(factorial(n - k - 1), 2n * factorial(k))), turned(k), power(half, 2 * k - n)));
  const harmonic = (start: 0 | 1): Expression => call(HARMONIC_SERIES, number(n), number(start), negation(power(z, 2)));
  const series = combined([turned(0), harmonic(0)], [turned(1), product(z, harmonic(1))]);
  const logarithm = sum(call('log', half), constant('eulerGamma'));
  const [own, other] = id === 'kelvinKer' ? [ber, bei] : [bei, negation(ber)];
  const signed = id === 'kelvinKer' ? finite : finite.map(negation);
  return sum(...signed, negation(product(logarithm, own)), product(quotient(pi, number(4)), other), product(number(Q.HALF), power(half, n), series));
}

/** sum over j of (H_k + H_(n+k))/(k! (n+k)!) w^j, k = 2j + start. */
export function kelvinSeriesModel<T>(id: string, args: readonly Expression[], models: readonly Model<T>[], numbers: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  if (id !== HARMONIC_SERIES) return null;
  const { r } = numbers;
  const [order, first] = args.map(rationalOf);
  const w = models[2];
  const range = w && m.rangeOf(w);
  if (!order || !first || w === undefined || !range || w.valuation <= 0) return null;
  const [n, start] = [Number(order.num), Number(first.num)];
  const size = r.upperEnd(r.absolute(range));
  const count = Math.max(3, Math.ceil(m.length / w.valuation) + 1 + Math.min(100, Math.ceil(Math.sqrt(Math.sqrt(Math.max(0, r.toDouble(size)))))));
  let [k, weight, harmonics] = [0, Q.rational(1n, factorial(n)), Q.ZERO];
  for (let j = 1; j <= n; j += 1) harmonics = Q.add(harmonics, Q.rational(1, j));
  const coefficients: Rational[] = [];
  while (coefficients.length <= count) {
    if (k % 2 === start) coefficients.push(Q.multiply(weight, harmonics));
    k += 1;
    weight = Q.divide(weight, Q.rational(BigInt(k) * BigInt(n + k)));
    harmonics = Q.add(harmonics, Q.add(Q.rational(1, k), Q.rational(1, n + k)));
  }
  // The sum of harmonic numbers at most doubles from k to k + 1 for k >= 1, so that a coefficient is at most 4/((k+1)(k+2)(n+k+1)(n+k+2)) times the one before.
  const from = 2 * count + start;
  const ratio = r.multiply(size, r.fromRational(Q.rational(4n, BigInt(from + 1) * BigInt(from + 2) * BigInt(n + from + 1) * BigInt(n + from + 2))));
  const gap = r.subtract(r.one, r.upperEnd(ratio));
  const factor = r.isPositive(gap) ? r.divide(r.fromRational(coefficients[count] ?? Q.ZERO), gap) : null;
  const raised = m.powerInteger({ valuation: w.valuation, coefficients: [], tail: w.range, range: w.range }, count);
  if (factor === null || raised === null) return null;
  const bound = r.upperEnd(factor);
  let total: Model<T> = m.constant(r.zero);
  for (let j = count - 1; j >= 0; j -= 1) total = m.add(m.constant(r.fromRational(coefficients[j] ?? Q.ZERO)), m.multiply(total, w));
  const tail = r.multiply(raised.range, r.union(r.negate(bound), bound));
  return m.add(total, { valuation: w.valuation * count, coefficients: [], tail, range: tail });
}
