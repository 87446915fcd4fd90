/**
 * Solutions of differential equations by local models: e^f, log f, f^p, and pairs such as sine and cosine. The tail comes from the residual of the truncated series in the
 * function's differential equation, solved exactly: for y = e^P and its truncation Y, Y - e^P = e^P(s) int_0^s (Y' - P'Y) e^-P, and the integrand is s^(m-1) times a known
 * polynomial. Cost O(m^2) each.
 */
import type { ModelAlgebra } from './model-algebra.ts';
import type { Model } from './model.types.ts';

/** `pair` is [sin, cos] or [sinh, cosh]; `flat` an exponential that vanishes faster than every power. Each is null where it is not defined on the whole domain. */
export type ModelSolutions<T> = ReturnType<typeof modelSolutions<T>>;

export function modelSolutions<T>(algebra: ModelAlgebra<T>) {
  type M = Model<T>;
  const { a, length, oneSided, real, zero, one, isZero, exact, at, times, plus, minus, horner, make, convolve, regular, polynomialPart, between } = algebra;

  /** -(1/n) x, for the weight 1/n of int_0^1 tau^(n-1). */
  const share = (x: T, n: number): T => a.divideInteger(a.negate(x), n);

  /** j u_j: coefficients of u' shifted by one. */
  const derivativeWeights = (u: readonly T[]): T[] => u.map((c, j) => (j === 0 || isZero(c) ? zero : times(a.fromInteger(j), c)));
  /** Terms of degree n-1 and more of -u' y over s^(n-1), as coefficients; w are the derivative weights of u. */
  const overflow = (w: readonly T[], y: readonly T[], n: number): T[] => convolve(w, y, n, w.length + y.length - 1);
  const orderOf = (u: M): number => (exact(u) ? length : Math.min(length, u.coefficients.length));

  /**
   * e^f for f = -w s^-k with w > 0 (k > 0) plus a regular part: e^-y <= m!/y^m for y > 0, so the value is s^(km) times a number in [0, m!/w^m].
   * Only on [0, 1] and only where the leading part tends to minus infinity.
   */
  const flat = (f: M): M | null => {
    if (real === null || !oneSided || f.valuation >= 0 || !real.isNegative(f.range)) return null;
    const k = -f.valuation;
    // m!/y^m is least near m = y; at the far end of the domain that is nearly e^-y itself.
    const m = Math.max(Math.ceil(length / k) + 1, Math.min(600, Math.floor(real.toDouble(real.lowerEnd(real.negate(f.range))))));
    let factor: T | null = one;
    for (let j = 1; j <= m && factor !== null; j += 1) factor = a.divide(times(factor, a.fromInteger(j)), a.negate(f.range));
    if (factor === null) return null;
    const tail = a.union(zero, real.upperEnd(factor));
    return { valuation: k * m, coefficients: [], tail, range: tail };
  };

  const exponential = (f: M, start?: T): M | null => {
    if (f.valuation < 0) return start === undefined ? flat(f) : null;
    const u = regular(f);
    if (u === null) return null;
    const c = u.coefficients;
    const u0 = at(c, 0);
    const y0 = a.exp(u0);
    const natural = a.exp(u.range);
    if (y0 === null || natural === null) return null;
    const n = orderOf(u);
    if (n === 0) return null;
    const w = derivativeWeights(c);
    const y: T[] = [y0];
    for (let k = 1; k < n; k += 1) {
      let sum = zero;
      for (let j = 1; j <= k && j < w.length; j += 1) sum = plus(sum, times(at(w, j), at(y, k - j)));
      y.push(isZero(sum) ? zero : a.divideInteger(sum, k));
    }
    const rest = overflow(w, y, n);
    let tail = zero;
    if (rest.some((x) => !isZero(x))) {
      const spread = polynomialPart(u).range;
      const factor = a.exp(a.subtract(spread, spread));
      if (factor === null) return null;
      // The residual Y' - u'Y is -rest.
      tail = a.negate(share(times(horner(rest, 0, zero), factor), n));
    }
    if (!exact(u)) {
      const slope = a.exp(between(u));
      if (slope === null) return null;
      tail = plus(tail, times(u.tail, slope));
    }
    if (start !== undefined) y[0] = start;
    return make(0, y, tail, start === undefined ? natural : null);
  };

  const logarithm = (f: M): M | null => {
    if (f.valuation !== 0) return null;
    const c = f.coefficients;
    const u0 = c[0];
    if (u0 === undefined) return null;
    const y0 = a.log(u0);
    const natural = a.log(f.range);
    const P = polynomialPart(f);
    const inverse = a.divide(one, P.range);
    if (y0 === null || natural === null || inverse === null || a.log(P.range) === null) return null;
    const n = orderOf(f);
    const y: T[] = [y0];
    // k u_0 y_k = k u_k - sum_(0<j<k) j y_j u_(k-j).
    const weighted: T[] = [zero];
    for (let k = 1; k < n; k += 1) {
      let sum = isZero(at(c, k)) ? zero : times(a.fromInteger(k), at(c, k));
      for (let j = Math.max(1, k - c.length + 1); j < k; j += 1) sum = minus(sum, times(at(weighted, j), at(c, k - j)));
      const value = isZero(sum) ? zero : a.divide(sum, u0);
      if (value === null) return null;
      weighted.push(value);
      y.push(isZero(value) ? zero : a.divideInteger(value, k));
    }
    // Residual u Y' - u' over s^(n-1).
    const product = convolve(weighted, c, n, weighted.length + c.length - 1);
    const rest = product.map((x, k) => minus(x, n + k < c.length ? times(a.fromInteger(n + k), at(c, n + k)) : zero));
    for (let k = n + rest.length; k < c.length; k += 1) rest.push(a.negate(times(a.fromInteger(k), at(c, k))));
    let tail = share(times(horner(rest, 0, zero), inverse), n);
    if (!exact(f)) {
      const slope = a.divide(one, between(f));
      if (slope === null) return null;
      tail = plus(tail, times(f.tail, slope));
    }
    return make(0, y, tail, natural);
  };

  /** u^p for v = 0 with the functions x -> x^p, x^(-p-1), x^(p-1) given. */
  const powerSeries = (f: M, p: T, raise: (x: T) => T | null): M | null => {
    const c = f.coefficients;
    const u0 = c[0];
    if (u0 === undefined) return null;
    const y0 = raise(u0);
    const natural = raise(f.range);
    if (y0 === null || natural === null) return null;
    const n = orderOf(f);
    const y: T[] = [y0];
    for (let k = 1; k < n; k += 1) {
      let sum = zero;
      for (let j = 1; j <= k && j < c.length; j += 1) {
        if (isZero(at(c, j)) || isZero(at(y, k - j))) continue;
        const weight = minus(times(p, a.fromInteger(j)), a.fromInteger(k - j));
        sum = plus(sum, times(weight, times(at(c, j), at(y, k - j))));
      }
      const value = isZero(sum) ? zero : a.divide(a.divideInteger(sum, k), u0);
      if (value === null) return null;
      y.push(value);
    }
    // Residual u Y' - p u' Y over s^(n-1): sum over i + j = m of (i - p j) y_i u_j.
    const rest: T[] = [];
    for (let m = n; m <= n - 1 + c.length - 1; m += 1) {
      let sum = zero;
      for (let j = Math.max(0, m - n + 1); j < c.length; j += 1) {
        const i = m - j;
        if (i < 0 || i >= n || isZero(at(c, j)) || isZero(at(y, i))) continue;
        sum = plus(sum, times(minus(a.fromInteger(i), times(p, a.fromInteger(j))), times(at(y, i), at(c, j))));
      }
      rest.push(sum);
    }
    let tail = zero;
    if (rest.some((x) => !isZero(x))) {
      const P = polynomialPart(f).range;
      const raised = raise(P);
      const inverse = raised === null ? null : a.divide(one, times(raised, P));
      if (raised === null || inverse === null) return null;
      tail = share(times(horner(rest, 0, zero), times(raised, inverse)), n);
    }
    if (!exact(f)) {
      const hull = between(f);
      const raised = raise(hull);
      const slope = raised === null ? null : a.divide(times(p, raised), hull);
      if (slope === null) return null;
      tail = plus(tail, times(f.tail, slope));
    }
    return make(0, y, tail, natural);
  };

  /** [sin, cos] (sign -1) or [sinh, cosh] (sign 1) of a model. */
  const pair = (f: M, sign: 1 | -1): readonly [M, M] | null => {
    const u = regular(f);
    if (u === null) return null;
    const c = u.coefficients;
    const n = orderOf(u);
    if (n === 0) return null;
    const first = sign < 0 ? a.sin : a.sinh;
    const second = sign < 0 ? a.cos : a.cosh;
    const [s0, c0, sRange, cRange] = [first(at(c, 0)), second(at(c, 0)), first(u.range), second(u.range)];
    if (s0 === null || c0 === null || sRange === null || cRange === null) return null;
    const w = derivativeWeights(c);
    const S: T[] = [s0];
    const C: T[] = [c0];
    const signed = (x: T): T => (sign < 0 ? a.negate(x) : x);
    for (let k = 1; k < n; k += 1) {
      let [s, t] = [zero, zero];
      for (let j = 1; j <= k && j < w.length; j += 1) {
        s = plus(s, times(at(w, j), at(C, k - j)));
        t = plus(t, times(at(w, j), at(S, k - j)));
      }
      S.push(isZero(s) ? zero : a.divideInteger(s, k));
      C.push(isZero(t) ? zero : signed(a.divideInteger(t, k)));
    }
    const r1 = a.negate(horner(overflow(w, C, n), 0, zero));
    const r2 = a.negate(signed(horner(overflow(w, S, n), 0, zero)));
    let [sTail, cTail] = [zero, zero];
    if (!isZero(r1) || !isZero(r2)) {
      const spread = polynomialPart(u).range;
      const gap = a.subtract(spread, spread);
      const [sGap, cGap] = [first(gap), second(gap)];
      if (sGap === null || cGap === null) return null;
      sTail = share(plus(times(cGap, r1), times(sGap, r2)), n);
      cTail = share(plus(signed(times(sGap, r1)), times(cGap, r2)), n);
    }
    if (!exact(u)) {
      const hull = between(u);
      const [sHull, cHull] = [first(hull), second(hull)];
      if (sHull === null || cHull === null) return null;
      sTail = plus(sTail, times(u.tail, cHull));
      cTail = plus(cTail, times(u.tail, signed(sHull)));
    }
    return [make(0, S, sTail, sRange), make(0, C, cTail, cRange)];
  };

  return { flat, exponential, logarithm, powerSeries, pair };
}
