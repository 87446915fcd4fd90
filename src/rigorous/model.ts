/**
 * Local models: a function near s = 0 as g(s) = s^v (c_0 + c_1 s + ... + c_(m-1) s^(m-1) + s^m rho(s)), where rho(s) lies in `tail` for every s in the domain X.
 * X is [0, 1] or [-1, 1] or a complex set that contains the segment from 0 to each of its points; the caller scales its variable to it.
 * (Taylor models with relative remainder; Joldes, thesis ENS Lyon 2011, ch. 2.) The remainder is carried as a factor of s^(v+m), so what is divided out or
 * subtracted at s = 0 does not spoil it: removable singularities, poles and branch points need no other treatment than v.
 *
 * Tails of exp, log, powers, sine and so on come from the residual of the truncated series in the function's differential equation, solved exactly:
 * for y = e^P and its truncation Y, Y - e^P = e^P(s) int_0^s (Y' - P'Y) e^-P, and the integrand is s^(m-1) times a known polynomial. Cost O(m^2) each.
 */
import type { Rational } from '../expression/index.ts';
import type { Arithmetic, ElementaryName, RealArithmetic } from './arithmetic.ts';

export interface Model<T> {
  readonly valuation: number;
  readonly coefficients: readonly T[];
  /** Exactly zero for polynomials. */
  readonly tail: T;
  /** Encloses g(s)/s^v over X. */
  readonly range: T;
}

export interface ModelArithmetic<T> {
  readonly a: Arithmetic<T>;
  readonly domain: T;
  /** Coefficients kept per model. */
  readonly length: number;
  constant(value: T): Model<T>;
  /** sum of coefficients c_k s^(v+k), exactly. */
  polynomial(coefficients: readonly T[], valuation?: number): Model<T>;
  add(f: Model<T>, g: Model<T>): Model<T>;
  subtract(f: Model<T>, g: Model<T>): Model<T>;
  negate(f: Model<T>): Model<T>;
  scale(f: Model<T>, factor: T): Model<T>;
  multiply(f: Model<T>, g: Model<T>): Model<T>;
  /** Null where the divisor has, or may have, a zero in X other than the power of s that is divided out. */
  divide(f: Model<T>, g: Model<T>): Model<T> | null;
  powerInteger(f: Model<T>, n: number): Model<T> | null;
  /** f^q, principal; the leading coefficient must have a q-th power, and v q must be an integer. */
  powerRational(f: Model<T>, q: Rational): Model<T> | null;
  /** f^y with constant exponent y; v must be 0 unless y is an exact integer in disguise. */
  power(f: Model<T>, y: T): Model<T> | null;
  elementary(name: ElementaryName, f: Model<T>): Model<T> | null;
  /** atan, tanh of an argument that grows without bound with one sign (v < 0, real, s in [0, 1]); null for all others. */
  elementaryAtInfinity(name: ElementaryName, f: Model<T>): Model<T> | null;
  /** From f' along the model: f(u) with value f(u(0)) given and `slope` the model of f'(P), P the polynomial part of u; slopeRange encloses f' over the range of u. */
  integrate(u: Model<T>, start: T, slope: Model<T>, slopeRange: T | null): Model<T> | null;
  /** The same function with v = 0 (null where v < 0). */
  regular(f: Model<T>): Model<T> | null;
  /** The polynomial part of a regular model, as an exact polynomial. */
  polynomialPart(f: Model<T>): Model<T>;
  /** Enclosure of g over X where v >= 0. */
  rangeOf(f: Model<T>): T | null;
  /** Narrows the range by an enclosure known from elsewhere (v = 0 only). */
  withRange(f: Model<T>, range: T): Model<T>;
}

/** `oneSided`: the domain is [0, 1], so that (s^v)^q = s^(vq). `real`: the same arithmetic where it is real; exponentials that vanish faster than every power are then enclosed as a mere tail. */
export function modelArithmetic<T>(a: Arithmetic<T>, domain: T, length: number, oneSided: boolean, real: RealArithmetic<T> | null = null): ModelArithmetic<T> {
  type M = Model<T>;
  const { zero, one } = a;
  const isZero = (x: T): boolean => a.isZero(x);
  const exact = (f: M): boolean => isZero(f.tail);
  const at = (c: readonly T[], k: number): T => c[k] ?? zero;
  const times = (x: T, y: T): T => (isZero(x) || isZero(y) ? zero : a.multiply(x, y));
  const plus = (x: T, y: T): T => (isZero(x) ? y : isZero(y) ? x : a.add(x, y));
  const minus = (x: T, y: T): T => (isZero(y) ? x : a.subtract(x, y));

  /** c_from + X (c_(from+1) + ... + X rest). */
  const horner = (c: readonly T[], from: number, rest: T): T => {
    let r = rest;
    for (let k = c.length - 1; k >= from; k -= 1) r = plus(at(c, k), times(domain, r));
    return r;
  };
  const domainPower = (n: number): T => (n === 0 ? one : (a.powerInteger(domain, n) ?? domain));

  /** Strips exact leading zeros and recomputes the range; `natural` is an enclosure of g/s^v known before stripping. */
  const make = (valuation: number, c: readonly T[], tail: T, natural: T | null): M => {
    let strip = 0;
    while (strip < c.length && isZero(at(c, strip))) strip += 1;
    let end = c.length;
    if (isZero(tail)) while (end > strip && isZero(at(c, end - 1))) end -= 1;
    if (strip === c.length && isZero(tail)) return { valuation: 0, coefficients: [], tail: zero, range: zero };
    const coefficients = strip === 0 && end === c.length ? c : c.slice(strip, end);
    const spread = horner(coefficients, 0, tail);
    return { valuation: valuation + strip, coefficients, tail, range: strip === 0 && natural !== null ? a.intersect(spread, natural) : spread };
  };

  const constant = (value: T): M => (isZero(value) ? nothing : { valuation: 0, coefficients: [value], tail: zero, range: value });
  const nothing: M = { valuation: 0, coefficients: [], tail: zero, range: zero };
  const polynomial = (c: readonly T[], valuation = 0): M => truncate(make(valuation, c, zero, null), length);

  /** At most n coefficients; the rest joins the tail. */
  function truncate(f: M, n: number): M {
    if (f.coefficients.length <= n) return f;
    return { ...f, coefficients: f.coefficients.slice(0, n), tail: horner(f.coefficients, n, f.tail) };
  }

  const negate = (f: M): M => ({ valuation: f.valuation, coefficients: f.coefficients.map((c) => a.negate(c)), tail: a.negate(f.tail), range: a.negate(f.range) });
  const scale = (f: M, factor: T): M => make(f.valuation, f.coefficients.map((c) => times(c, factor)), times(f.tail, factor), times(f.range, factor));

  const isNothing = (f: M): boolean => f.coefficients.length === 0 && isZero(f.tail);
  const add = (f: M, g: M): M => {
    if (isNothing(f)) return g;
    if (isNothing(g)) return f;
    const v = Math.min(f.valuation, g.valuation);
    const endOf = (m: M): number => m.valuation + m.coefficients.length;
    const order = (m: M): number => (exact(m) ? Infinity : endOf(m));
    const end = Math.min(order(f), order(g), v + length, Math.max(endOf(f), endOf(g)));
    const c: T[] = [];
    for (let k = v; k < end; k += 1) c.push(plus(at(f.coefficients, k - f.valuation), at(g.coefficients, k - g.valuation)));
    const beyond = (m: M): T => {
      // What of m has degree `end` or more, over s^end.
      const from = end - m.valuation;
      if (from <= 0) return times(domainPower(-from), m.range);
      if (from >= m.coefficients.length) return times(domainPower(m.coefficients.length - from), m.tail);
      return horner(m.coefficients, from, m.tail);
    };
    const natural = plus(times(domainPower(f.valuation - v), f.range), times(domainPower(g.valuation - v), g.range));
    return make(v, c, plus(beyond(f), beyond(g)), natural);
  };
  const subtract = (f: M, g: M): M => add(f, negate(g));

  /** Coefficients from..to (exclusive) of the product of two coefficient lists. */
  const convolve = (x: readonly T[], y: readonly T[], from: number, to: number): T[] => {
    const result: T[] = [];
    for (let k = from; k < to; k += 1) {
      let sum = zero;
      for (let i = Math.max(0, k - y.length + 1); i <= k && i < x.length; i += 1) sum = plus(sum, times(at(x, i), at(y, k - i)));
      result.push(sum);
    }
    return result;
  };

  const multiply = (f: M, g: M): M => {
    if (isNothing(f) || isNothing(g)) return nothing;
    const [p, q] = [f.coefficients, g.coefficients];
    const full = p.length + q.length - 1;
    const n = Math.max(0, Math.min(length, exact(f) ? Infinity : p.length, exact(g) ? Infinity : q.length, exact(f) && exact(g) ? full : Infinity));
    const c = convolve(p, q, 0, n);
    let tail = full > n ? horner(convolve(p, q, n, full), 0, zero) : zero;
    // (P + s^i rho)(Q + s^j sigma) = PQ + s^i rho g + s^j sigma P.
    if (!exact(f)) tail = plus(tail, times(times(f.tail, g.range), domainPower(p.length - n)));
    if (!exact(g)) tail = plus(tail, times(times(g.tail, horner(p, 0, zero)), domainPower(q.length - n)));
    return make(f.valuation + g.valuation, c, tail, times(f.range, g.range));
  };
  const square = (f: M): M => {
    const product = multiply(f, f);
    return isNothing(product) ? product : { ...product, range: a.intersect(product.range, a.square(f.range)) };
  };

  const divide = (f: M, g: M): M | null => {
    const lead = g.coefficients[0];
    if (lead === undefined || a.containsZero(lead) || a.containsZero(g.range)) return null;
    if (isNothing(f)) return nothing;
    if (g.coefficients.length === 1 && exact(g)) {
      const inverse = a.divide(one, lead);
      return inverse === null ? null : { ...scale(f, inverse), valuation: f.valuation - g.valuation };
    }
    const [p, d] = [f.coefficients, g.coefficients];
    const n = Math.min(length, exact(f) ? Infinity : p.length, exact(g) ? Infinity : d.length);
    const q: T[] = [];
    for (let k = 0; k < n; k += 1) {
      let sum = at(p, k);
      for (let j = Math.max(1, k - q.length + 1); j <= k && j < d.length; j += 1) sum = minus(sum, times(at(d, j), at(q, k - j)));
      const value = a.divide(sum, lead);
      if (value === null) return null;
      q.push(value);
    }
    // f - q g has no term below s^n.
    const rest = convolve(q, d, n, n + d.length - 1).map((x, k) => minus(at(p, n + k), x));
    for (let k = n + rest.length; k < p.length; k += 1) rest.push(at(p, k));
    let remainder = horner(rest, 0, zero);
    if (!exact(f)) remainder = plus(remainder, times(f.tail, domainPower(p.length - n)));
    if (!exact(g)) remainder = minus(remainder, times(times(horner(q, 0, zero), g.tail), domainPower(d.length - n)));
    const tail = a.divide(remainder, g.range);
    const natural = a.divide(f.range, g.range);
    return tail === null ? null : make(f.valuation - g.valuation, q, tail, natural);
  };

  const regular = (f: M): M | null => {
    if (f.valuation < 0) return null;
    if (f.valuation === 0) return f;
    const padded = [...Array.from({ length: Math.min(f.valuation, length) }, () => zero), ...f.coefficients];
    const range = times(domainPower(f.valuation), f.range);
    if (f.valuation > length) return { valuation: 0, coefficients: padded.slice(0, length), tail: times(domainPower(f.valuation - length), f.range), range };
    return truncate({ valuation: 0, coefficients: padded, tail: f.tail, range }, length);
  };
  const polynomialPart = (f: M): M => ({ valuation: f.valuation, coefficients: f.coefficients, tail: zero, range: exact(f) ? f.range : horner(f.coefficients, 0, zero) });
  const rangeOf = (f: M): T | null => (f.valuation < 0 ? null : times(domainPower(f.valuation), f.range));
  const withRange = (f: M, range: T): M => (f.valuation === 0 ? { ...f, range: a.intersect(f.range, range) } : f);
  /** Holds every number between P(s) and u(s): where mean values of f' between the two are taken. */
  const between = (u: M): T => (exact(u) ? u.range : a.union(u.range, polynomialPart(u).range));
  /** Result with v = 0 that must keep its leading zero coefficients visible to `make`. */
  const finish = (c: readonly T[], tail: T, natural: T | null): M => make(0, c, tail, natural);

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
    return finish(y, tail, start === undefined ? natural : null);
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
    return finish(y, tail, natural);
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
    return finish(y, tail, natural);
  };

  const powerInteger = (f: M, n: number): M | null => {
    if (n === 0) return constant(one);
    if (isNothing(f)) return n > 0 ? nothing : null;
    if (n < 0 || (n > 8 && f.coefficients[0] !== undefined && !a.containsZero(f.coefficients[0]) && !a.containsZero(f.range))) {
      const lead = f.coefficients[0];
      if (lead === undefined || a.containsZero(lead) || a.containsZero(f.range)) return null;
      if (n === -1) return divide(constant(one), f);
      const stripped: M = { ...f, valuation: 0 };
      const raised = powerSeries(stripped, a.fromInteger(n), (x) => a.powerInteger(x, n));
      return raised === null ? null : { ...raised, valuation: raised.valuation + f.valuation * n };
    }
    let result: M | null = null;
    let base = f;
    for (let k = n; ; ) {
      if (k % 2 === 1) result = result === null ? base : multiply(result, base);
      k = Math.floor(k / 2);
      if (k === 0) return result;
      base = square(base);
    }
  };
  const powerRational = (f: M, q: Rational): M | null => {
    if (q.den === 1n) return powerInteger(f, Number(q.num));
    if (isNothing(f)) return q.num > 0n ? nothing : null;
    const shift = Number(q.num) * f.valuation;
    const den = Number(q.den);
    if (shift % den !== 0 || (shift !== 0 && !oneSided)) return null;
    const raised = powerSeries({ ...f, valuation: 0 }, a.fromRational(q), (x) => a.powerRational(x, q));
    return raised === null ? null : { ...raised, valuation: raised.valuation + shift / den };
  };
  const power = (f: M, y: T): M | null => (f.valuation !== 0 || isNothing(f) ? null : powerSeries(f, y, (x) => a.power(x, y)));

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
    return [finish(S, sTail, sRange), finish(C, cTail, cRange)];
  };

  const integrate = (f: M, start: T, slope: M, slopeRange: T | null): M | null => {
    const u = regular(f);
    if (u === null) return null;
    const rate = make(0, u.coefficients.slice(1).map((c, k) => (isZero(c) ? zero : times(a.fromInteger(k + 1), c))), zero, null);
    const product = multiply(rate, slope);
    const { valuation: v, coefficients: c, tail } = product;
    if (v < 0) return null;
    const n = v + c.length;
    const integral: T[] = [start];
    for (let k = 0; k < n; k += 1) {
      const value = at(c, k - v);
      integral.push(k < v || isZero(value) ? zero : a.divideInteger(value, k + 1));
    }
    // int_0^s sigma^n rho = s^(n+1) times an average of rho over n+1.
    const integralTail = isZero(tail) ? zero : a.divideInteger(tail, n + 1);
    let result = truncate(finish(integral, integralTail, null), length);
    if (!exact(u)) {
      if (slopeRange === null) return null;
      result = add(result, { valuation: u.coefficients.length, coefficients: [], tail: times(u.tail, slopeRange), range: times(u.tail, slopeRange) });
    }
    return result;
  };

  /** f by its derivative: f' = d(u). */
  const byDerivative = (f: M, name: ElementaryName, derivative: (u: M) => M | null): M | null => {
    const u = regular(f);
    if (u === null) return null;
    const start = a[name](at(u.coefficients, 0));
    if (start === null) return null;
    const slope = derivative(polynomialPart(u));
    if (slope === null) return null;
    const whole = exact(u) ? null : derivative(constantRange(between(u)));
    const value = integrate(u, start, slope, whole === null ? null : rangeOf(whole));
    const natural = a[name](u.range);
    return value === null ? null : natural === null ? value : withRange(value, natural);
  };
  /** A set as a constant: every function value over it is enclosed by the same rules. */
  const constantRange = (range: T): M => ({ valuation: 0, coefficients: [range], tail: zero, range });
  const squareOf = (u: M): M => square(u);
  const rootPower = { num: -1n, den: 2n };

  const elementary = (name: ElementaryName, f: M): M | null => {
    switch (name) {
      case 'exp':
        return exponential(f);
      case 'expm1': {
        const u = regular(f);
        const start = u === null ? null : a.expm1(at(u.coefficients, 0));
        return start === null ? null : exponential(f, start);
      }
      case 'log':
        return logarithm(f);
      case 'log1p':
        return byDerivative(f, 'log1p', (u) => divide(constant(one), add(constant(one), u)));
      case 'sqrt':
        return powerRational(f, { num: 1n, den: 2n });
      case 'sin':
        return pair(f, -1)?.[0] ?? null;
      case 'cos':
        return pair(f, -1)?.[1] ?? null;
      case 'sinh':
        return pair(f, 1)?.[0] ?? null;
      case 'cosh':
        return pair(f, 1)?.[1] ?? null;
      case 'tan': {
        const both = pair(f, -1);
        return both && quotientWithRange(both[0], both[1], f, 'tan');
      }
      case 'tanh': {
        const both = pair(f, 1);
        return both && quotientWithRange(both[0], both[1], f, 'tanh');
      }
      case 'atan':
        return byDerivative(f, 'atan', (u) => divide(constant(one), add(constant(one), squareOf(u))));
      case 'atanh':
        return byDerivative(f, 'atanh', (u) => divide(constant(one), subtract(constant(one), squareOf(u))));
      case 'asin':
        return byDerivative(f, 'asin', (u) => powerRational(subtract(constant(one), squareOf(u)), rootPower));
      case 'acos':
        return byDerivative(f, 'acos', (u) => {
          const slope = powerRational(subtract(constant(one), squareOf(u)), rootPower);
          return slope && negate(slope);
        });
      case 'asinh':
        return byDerivative(f, 'asinh', (u) => powerRational(add(constant(one), squareOf(u)), rootPower));
      case 'acosh':
        return byDerivative(f, 'acosh', (u) => powerRational(subtract(squareOf(u), constant(one)), rootPower));
    }
  };
  const elementaryAtInfinity = (name: ElementaryName, f: M): M | null => {
    if (real === null || !oneSided || f.valuation >= 0 || (name !== 'atan' && name !== 'tanh')) return null;
    const negative = real.isNegative(f.range);
    if (!negative && !real.isPositive(f.range)) return null;
    const u = negative ? negate(f) : f;
    if (name === 'atan') {
      const inverse = divide(constant(one), u);
      const rest = inverse && elementary('atan', inverse);
      const value = rest && subtract(constant(a.divideInteger(a.constant('pi'), 2)), rest);
      return value && negative ? negate(value) : value;
    }
    // tanh u = 1 - 2E/(1 + E), E = e^(-2u).
    const e = flat(scale(u, a.fromInteger(-2)));
    const rest = e && divide(scale(e, a.fromInteger(2)), add(constant(one), e));
    const value = rest && subtract(constant(one), rest);
    return value && negative ? negate(value) : value;
  };
  const quotientWithRange = (numerator: M, denominator: M, f: M, name: 'tan' | 'tanh'): M | null => {
    const value = divide(numerator, denominator);
    const u = value === null ? null : regular(f);
    const natural = u === null ? null : a[name](u.range);
    return value === null || natural === null ? value : withRange(value, natural);
  };

  return { a, domain, length, constant, polynomial, add, subtract, negate, scale, multiply, divide, powerInteger, powerRational, power, elementary, elementaryAtInfinity, integrate, regular, polynomialPart, rangeOf, withRange };
}
