/**
 * Lambert's W at its branch point: W = -1 + y(p), p = +-sqrt(2 (1 + e x)), (y - 1) e^y = -1 + p^2/2, the positive root for W_0 and the negative one for W_(-1) (DLMF 4.13.5, 4.13.6).
 * With phi(y) = y sqrt(1F1(2; 3; y)) = p the rest of the series Y(p) of y is -(phi(Y) - p)/phi'(xi), xi between y and Y, phi' = e^y y/phi (mean value theorem).
 */
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import { type Ball, type Model, type ModelArithmetic, modelArithmetic, real } from '../rigorous/index.ts';
import { hypergeometricAtZero } from './holonomic.ts';
import { hornerWithTail } from './horner.ts';
import type { Numbers } from './numbers.ts';

const { call, constant, number, product, squareRoot, sum } = build;
const AT_BRANCH = 'Lambert W at its branch point';

/** W of an argument that tends to -1/e, for the branches 0 and -1; null elsewhere. */
export function lambertAtBranch<T>(args: readonly Expression[], u: Model<T>, n: Numbers<T>): Expression | null {
  const { r } = n;
  const [branch, x] = args;
  const lead = u.coefficients[0];
  const inverse = r.divide(r.one, r.constant('e'));
  const index = branch && rationalOf(branch);
  if (!x || !index || u.valuation !== 0 || lead === undefined || inverse === null || !r.containsZero(r.add(lead, inverse))) return null;
  if (index.den !== 1n || (index.num !== 0n && index.num !== -1n)) return null;
  const root = squareRoot(product(number(2), sum(number(1), product(constant('e'), x))));
  return sum(number(-1), call(AT_BRANCH, index.num === 0n ? root : build.negation(root)));
}

const series: Rational[] = [Q.ZERO, Q.ONE];
const exponential: Rational[] = [Q.ONE];
/** Coefficients of y by powers of p, from y y' e^y = p: with (y y')_n = (n+1) y_n + known terms for n >= 2. */
function coefficientsOf(count: number): readonly Rational[] {
  const product = (n: number): Rational => {
    let total = Q.ZERO;
    for (let i = 1; i <= n; i += 1) total = Q.add(total, Q.multiply(series[i] ?? Q.ZERO, Q.multiply(Q.rational(n + 1 - i), series[n + 1 - i] ?? Q.ZERO)));
    return total;
  };
  while (series.length < count) {
    const n = series.length;
    // e_k for k < n, from k e_k = sum j y_j e_(k-j).
    for (let k = exponential.length; k < n; k += 1) {
      let total = Q.ZERO;
      for (let j = 1; j <= k; j += 1) total = Q.add(total, Q.multiply(Q.multiply(Q.rational(j), series[j] ?? Q.ZERO), exponential[k - j] ?? Q.ZERO));
      exponential.push(Q.divide(total, Q.rational(k)));
    }
    let rest = product(n);
    for (let j = 1; j < n; j += 1) rest = Q.add(rest, Q.multiply(product(j), exponential[n - j] ?? Q.ZERO));
    series.push(Q.divide(Q.negate(rest), Q.rational(n + 1)));
  }
  return series.slice(0, count);
}

const PARAMETERS = [number(1), number(1), number(2), number(3), build.symbol('y')];

/** The model of y(p); null where it could not be enclosed all over the domain. */
export function lambertBranchModel<T>(id: string, models: readonly Model<T>[], n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const [p] = models;
  if (id !== AT_BRANCH || p === undefined || p.valuation <= 0) return null;
  const { r } = n;
  const range = m.rangeOf(p);
  if (range === null) return null;
  const count = Math.max(3, Math.ceil(m.length / p.valuation) + 1);
  const coefficients = coefficientsOf(count).map((c) => r.fromRational(c));
  // Models in p itself, on the values that p takes.
  const own = modelArithmetic(r, r.union(range, r.zero), count, false, r);
  const inner = own.polynomial([r.one], 1);
  const Y = own.polynomial(coefficients);
  const hull = own.rangeOf(Y);
  const values = hull && rangeOfY(range, n);
  const all = values && hull && r.union(r.union(values, hull), r.zero);
  const reach = all && n.toBall(r.upperEnd(r.absolute(all)));
  const confluent = reach && hypergeometricAtZero(PARAMETERS, reach, n.precision <= 53 ? 64 : n.precision, count);
  if (!all || !confluent) return null;
  const at = (y: Model<T>, arithmetic: ModelArithmetic<T>): Model<T> | null => hornerWithTail(confluent.coefficients.map((c) => n.fromBall(c)), n.fromBall(confluent.remainder), y, n, arithmetic);
  const squared = at(Y, own);
  const root = squared && own.powerRational(squared, Q.HALF);
  const defect = root && own.subtract(own.multiply(Y, root), inner);
  // phi' over all values between.
  const scale = scaleOver(confluent, all, n);
  const growth = r.exp(all);
  const slope = scale && growth && r.divide(growth, scale);
  if (!defect || !slope || !r.isPositive(slope)) return null;
  // Exact coefficients below p^count cancel; what is left is the tail.
  const skipped = count - defect.valuation;
  const after = defect.coefficients.slice(Math.max(0, skipped));
  let tail = defect.tail;
  for (let k = after.length - 1; k >= 0; k -= 1) tail = r.add(after[k] ?? r.zero, r.multiply(own.domain, tail));
  if (defect.valuation + defect.coefficients.length < count) return null;
  const rest = r.divide(r.negate(tail), slope);
  return rest && hornerWithTail(coefficients, rest, p, n, m);
}

/** W + 1 for every p of the range, by its values at the ends: W_0 grows with p > 0, W_(-1) with p < 0. */
function rangeOfY<T>(range: T, n: Numbers<T>): T | null {
  const { r } = n;
  const at = (p: T): T | null => {
    // x = (p^2/2 - 1)/e.
    const x = r.divide(r.subtract(r.divideInteger(r.square(p), 2), r.one), r.constant('e'));
    const branch = r.isPositive(p) ? 0 : -1;
    const value = x && n.value(call('lambertW', number(branch), build.symbol('argument')), new Map([['argument', x]]));
    return value && r.add(value, r.one);
  };
  const ends = [r.lowerEnd(range), r.upperEnd(range)].map((p) => (r.isZero(p) ? r.zero : at(p)));
  const [low, high] = ends;
  return low && high ? r.union(low, high) : null;
}

/** sqrt(1F1(2; 3; y)) over a set of y. */
function scaleOver<T>(confluent: { readonly coefficients: readonly Ball[]; readonly remainder: Ball }, set: T, n: Numbers<T>): T | null {
  const { r } = n;
  let total = n.fromBall(confluent.remainder);
  for (let k = confluent.coefficients.length - 1; k >= 0; k -= 1) total = r.add(n.fromBall(confluent.coefficients[k] ?? real.ZERO), r.multiply(set, total));
  return r.sqrt(total);
}
