/**
 * Taylor series with proven remainders for functions with a linear differential equation sum p_j(x) y^(j) = 0 of order r, about regular points of the equation.
 * Coefficients by the recurrence that the equation gives; the remainder from the residual of the truncated series: d = y - Y has d(c) = ... = d^(r-1)(c) = 0 and
 * d^(r) = -sum (p_j/p_r) d^(j) - residual/p_r, so |d| is at most the solution of v^(r) = sum A_j v^(j) + rho |s|^(K-r) with the same start, A_j = max |p_j/p_r|
 * (comparison of Volterra equations with nonnegative kernels). Also the hypergeometric series at zero with the rest bounded by the ratio of its terms.
 */
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Ball, encloseReal, real } from '../rigorous/index.ts';

export interface RealSeries {
  readonly coefficients: readonly Ball[];
  /** Encloses the factor of d^K in the rest of the series, K the number of coefficients, for every |d| <= the reach asked for. */
  readonly remainder: Ball;
}

type Equation = NonNullable<ReturnType<NonNullable<NonNullable<ReturnType<typeof describe>>['equation']>>>;
const HIGHEST_ORDER = 4;
const MAJORANT_BITS = 64;
const MOST_MAJORANT_TERMS = 2000;

const { number } = build;
const lift = (n: number): Expression => number(n);

/** Equations of functions whose descriptions give another way to their coefficients. Dawson: F' = 1 - 2xF differentiated (DLMF 7.2.5). */
function equationOf(id: string, args: readonly Expression[], index: number): Equation | null {
  if (id === 'dawson') {
    const f = (p: Expression): Expression => build.call('dawson', p);
    return { polynomials: [[lift(2)], [lift(0), lift(2)], [lift(1)]], initial: [f, (p) => build.difference(lift(1), build.product(lift(2), p, f(p)))] };
  }
  return describe(id)?.equation?.(args, index) ?? null;
}

export const hasEquation = (id: string, args: readonly Expression[], index: number): boolean => equationOf(id, args, index) !== null;

interface Start {
  /** p_j(c + s) by powers of s. */
  readonly shifted: readonly (readonly Ball[])[];
  readonly coefficients: Ball[];
}
const cache = new Map<string, Start | null>();
const CACHE_SIZE = 512;

function startOf(equation: Equation, centre: Ball, environment: ReadonlyMap<string, Ball>, work: number): Start | null {
  const order = equation.polynomials.length - 1;
  if (order < 1 || order > HIGHEST_ORDER || equation.initial.length < order) return null;
  const shifted: Ball[][] = [];
  for (const polynomial of equation.polynomials) {
    const p: Ball[] = [];
    for (const coefficient of polynomial) {
      const value = encloseReal(coefficient, environment, work, describe);
      if (value === null) return null;
      p.push(value);
    }
    // Taylor shift by repeated synthetic division.
    for (let i = 0; i < p.length; i += 1) for (let k = p.length - 2; k >= i; k -= 1) p[k] = real.add(p[k] ?? real.ZERO, real.multiply(centre, p[k + 1] ?? real.ZERO, work), work);
    shifted.push(p);
  }
  const place = 'point of the series';
  const own = new Map([...environment, [place, centre] as const]);
  const coefficients: Ball[] = [];
  let factorial = 1n;
  for (let k = 0; k < order; k += 1) {
    if (k > 1) factorial *= BigInt(k);
    const tree = equation.initial[k];
    const value = tree ? encloseReal(tree(build.symbol(place)), own, work, describe) : null;
    const divided = value && real.divide(value, real.fromInteger(factorial), work);
    if (!divided) return null;
    coefficients.push(divided);
  }
  return { shifted, coefficients };
}

/** n (n-1) ... (n-j+1). */
const falling = (n: number, j: number): bigint => {
  let product = 1n;
  for (let i = 0; i < j; i += 1) product *= BigInt(n - i);
  return product;
};

/** Coefficient of s^k in sum p_j(c + s) Y^(j)(s), without the one term (order r, constant part of p_r) where `open`. */
function residualAt(shifted: readonly (readonly Ball[])[], y: readonly Ball[], k: number, open: boolean, work: number): Ball {
  let sum = real.ZERO;
  const order = shifted.length - 1;
  for (const [j, p] of shifted.entries()) {
    for (const [i, q] of p.entries()) {
      const m = k - i + j;
      if (i > k || m < j || (open && j === order && i === 0)) continue;
      const value = y[m];
      if (value === undefined || (q.mid === 0n && q.rad === 0n)) continue;
      sum = real.add(sum, real.multiply(q, real.multiply(value, real.fromInteger(falling(m, j)), work), work), work);
    }
  }
  return sum;
}

/** The series of f about `centre` in its argument `index`, for distances up to `reach`; null where there is no equation or the centre is too near to one of its singular points. `environment` holds the parameters. */
export function equationSeries(id: string, args: readonly Expression[], index: number, centre: Ball, reach: Ball, environment: ReadonlyMap<string, Ball>, key: string, precision: number, length: number): RealSeries | null {
  const work = precision + 24;
  const full = `${key}|${centre.mid},${centre.rad},${centre.exp}|${precision}`;
  let start = cache.get(full);
  if (start === undefined) {
    const equation = equationOf(id, args, index);
    start = equation && startOf(equation, centre, environment, work);
    if (cache.size >= CACHE_SIZE) cache.clear();
    cache.set(full, start);
  }
  if (start === null) return null;
  const { shifted, coefficients: y } = start;
  const order = shifted.length - 1;
  const box: Ball = real.union(real.negate(reach), reach, MAJORANT_BITS);
  const over = (p: readonly Ball[]): Ball => p.reduceRight((sum, c) => real.add(c, real.multiply(box, sum, MAJORANT_BITS), MAJORANT_BITS), real.ZERO);
  const lead = over(shifted[order] ?? []);
  const constant = shifted[order]?.[0];
  if (constant === undefined || real.containsZero(lead)) return null;
  const least = real.lowerEnd(real.absoluteLower(lead));
  const K = Math.max(length, order);
  for (let k = y.length - order; y.length < K; k += 1) {
    const value = real.divide(real.negate(residualAt(shifted, y, k, true, work)), real.multiply(constant, real.fromInteger(falling(k + order, order)), work), work);
    if (value === null) return null;
    y.push(value);
  }
  const kept = y.slice(0, K);
  const up = (x: Ball): Ball => real.upperEnd(real.absolute(x));
  const degree = Math.max(...shifted.map((p, j) => p.length - 1 - j));
  let rho = real.ZERO;
  for (let k = K - 1 + degree; k >= K - order; k -= 1) rho = real.add(up(residualAt(shifted, kept, k, false, MAJORANT_BITS)), real.multiply(reach, rho, MAJORANT_BITS), MAJORANT_BITS);
  const scaled = real.divide(up(rho), least, MAJORANT_BITS);
  const sizes = shifted.slice(0, order).map((p) => real.divide(up(over(p)), least, MAJORANT_BITS));
  if (scaled === null) return null;
  const A: Ball[] = [];
  for (const size of sizes) {
    if (size === null) return null;
    A.push(up(size));
  }
  const factor = majorant(A, up(scaled), reach, K, order);
  return factor && { coefficients: kept, remainder: real.union(real.negate(factor), factor, MAJORANT_BITS) };
}

/** V with v(s) <= V |s|^K for |s| <= reach. */
function majorant(A: readonly Ball[], rho: Ball, reach: Ball, K: number, order: number): Ball | null {
  const bits = MAJORANT_BITS;
  const first = real.divide(rho, real.fromInteger(falling(K, order)), bits);
  if (first === null) return null;
  // w_i = v_(K+i) reach^i.
  const w: Ball[] = [real.upperEnd(first)];
  let total = w[0] ?? real.ZERO;
  const powers = Array.from({ length: order + 1 }, (_, i) => real.upperEnd(real.powerInteger(reach, i, bits) ?? real.ZERO));
  const weight = (k: number, j: number): Ball | null => real.divide(real.multiply(A[j] ?? real.ZERO, powers[order - j] ?? real.ONE, bits), real.fromInteger(falling(k, order - j)), bits);
  for (let i = 1; i < MOST_MAJORANT_TERMS; i += 1) {
    const k = K + i;
    let value = real.ZERO;
    let theta = real.ZERO;
    for (let j = 0; j < order; j += 1) {
      const factor = weight(k, j);
      if (factor === null) return null;
      theta = real.add(theta, factor, bits);
      const previous = w[i - (order - j)];
      if (previous) value = real.add(value, real.multiply(factor, previous, bits), bits);
    }
    const next = real.upperEnd(value);
    w.push(next);
    total = real.upperEnd(real.add(total, next, bits));
    // From here on each term is at most theta times the largest of the r before it, and theta falls.
    if (i >= order && real.compare(real.upperEnd(theta), real.fromDouble(0.5)) === -1) {
      const last = w.slice(-order).reduce((a, b) => real.maximum(a, b));
      if (real.compare(last, real.multiply(total, real.fromDouble(2 ** -12), bits)) === -1 || (last.mid === 0n && last.rad === 0n)) {
        // sum over the rest <= r last (theta + theta^2 + ...) <= 2 r theta last.
        return real.upperEnd(real.add(total, real.multiply(real.fromInteger(2 * order), real.multiply(real.upperEnd(theta), last, bits), bits), bits));
      }
    }
  }
  return null;
}

/**
 * pFq at zero for arguments up to `reach` in absolute value: coefficients of x^k and the factor of x^K in the rest. For k >= K, with b_j + K > 0:
 * |(a_i+k)/(b_i+k)| <= 1 + |a_i - b_i|/(b_i+K) and 1/(b_j+k) <= 1/(b_j+K). Null where the ratio of terms is not below one, or a parameter is not a plain rational.
 */
export function hypergeometricAtZero(args: readonly Expression[], reach: Ball, precision: number, length: number): RealSeries | null {
  const values = args.slice(0, -1).map(rationalOf);
  const [p, q] = values;
  if (!p || !q || p.den !== 1n || q.den !== 1n || values.length !== 2 + Number(p.num) + Number(q.num)) return null;
  const list: Rational[] = [];
  for (const value of values.slice(2)) {
    if (value === null) return null;
    list.push(value);
  }
  const tops = list.slice(0, Number(p.num));
  const bottoms = [...list.slice(Number(p.num)), Q.ONE];
  if (tops.length > bottoms.length || bottoms.some((b) => b.den === 1n && b.num <= 0n)) return null;
  const bits = MAJORANT_BITS;
  let term: Rational = Q.ONE;
  const exact: Rational[] = [];
  for (let k = 0; k <= length; k += 1) {
    exact.push(term);
    const shift = Q.rational(k);
    for (const a of tops) term = Q.multiply(term, Q.add(a, shift));
    for (const b of bottoms) term = Q.divide(term, Q.add(b, shift));
  }
  const coefficients = exact.slice(0, length).map((c) => real.fromRational(c, precision + 8));
  const last = exact[length] ?? Q.ZERO;
  if (Q.isZero(last)) return { coefficients, remainder: real.ZERO };
  let ratio = reach;
  for (const [i, b] of bottoms.entries()) {
    const shifted = Q.add(b, Q.rational(length));
    if (shifted.num <= 0n) return null;
    const top = tops[i];
    const factor = top ? Q.add(Q.ONE, Q.divide(Q.absolute(Q.subtract(top, b)), shifted)) : Q.reciprocal(shifted);
    ratio = real.multiply(ratio, real.fromRational(factor, bits), bits);
  }
  const gap = real.lowerEnd(real.subtract(real.ONE, real.upperEnd(ratio), bits));
  const size = real.isPositive(gap) ? real.divide(real.absolute(real.fromRational(last, bits)), gap, bits) : null;
  return size && { coefficients, remainder: real.union(real.negate(real.upperEnd(size)), real.upperEnd(size), bits) };
}

/** Li_s at zero for whole s >= 0: sum x^k/k^s (DLMF 25.12.10), the coefficients after the K-th none greater than K^-s. Null where the reach is not below 1. */
export function polylogAtZero(args: readonly Expression[], reach: Ball, precision: number, length: number): RealSeries | null {
  const order = args[0] && rationalOf(args[0]);
  if (!order || order.den !== 1n || order.num < 0n || order.num > 200n) return null;
  const coefficients = Array.from({ length }, (_, k) => (k === 0 ? real.ZERO : real.fromRational({ num: 1n, den: BigInt(k) ** order.num }, precision + 8)));
  const gap = real.lowerEnd(real.subtract(real.ONE, real.upperEnd(reach), MAJORANT_BITS));
  const size = real.isPositive(gap) ? real.divide(real.fromRational({ num: 1n, den: BigInt(length) ** order.num }, MAJORANT_BITS), gap, MAJORANT_BITS) : null;
  return size && { coefficients, remainder: real.union(real.negate(real.upperEnd(size)), real.upperEnd(size), MAJORANT_BITS) };
}
