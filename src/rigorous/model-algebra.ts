/** The algebra of local models: sums, products, quotients, and the helpers on coefficient lists that the functions of models share. */
import type { Arithmetic, RealArithmetic } from './arithmetic.ts';
import type { Model } from './model.types.ts';

/** The operations; documented at `ModelArithmetic` where they are public. */
export type ModelAlgebra<T> = ReturnType<typeof modelAlgebra<T>>;

export function modelAlgebra<T>(a: Arithmetic<T>, domain: T, length: number, oneSided: boolean, real: RealArithmetic<T> | null) {
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

  return { a, domain, length, oneSided, real, zero, one, isZero, exact, at, times, plus, minus, horner, domainPower, make, nothing, isNothing, truncate, constant, polynomial, negate, scale, add, subtract, convolve, multiply, square, divide, regular, polynomialPart, rangeOf, withRange, between };
}
