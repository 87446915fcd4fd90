/** Powers and elementary functions of local models, and functions that are known by their derivative. */
import type { Rational } from '../expression/index.ts';
import type { ElementaryName } from './arithmetic.ts';
import type { ModelAlgebra } from './model-algebra.ts';
import type { ModelSolutions } from './model-solutions.ts';
import type { Model } from './model.types.ts';

export function modelFunctions<T>(algebra: ModelAlgebra<T>, solutions: ModelSolutions<T>) {
  type M = Model<T>;
  const { a, length, oneSided, real, zero, one, isZero, exact, at, times, make, isNothing, truncate, constant, negate, scale, add, subtract, multiply, square, divide, regular, polynomialPart, rangeOf, withRange, between, nothing } = algebra;
  const { flat, exponential, logarithm, powerSeries, pair } = solutions;

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
    let result = truncate(make(0, integral, integralTail, null), length);
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
        return byDerivative(f, 'atan', (u) => divide(constant(one), add(constant(one), square(u))));
      case 'atanh':
        return byDerivative(f, 'atanh', (u) => divide(constant(one), subtract(constant(one), square(u))));
      case 'asin':
        return byDerivative(f, 'asin', (u) => powerRational(subtract(constant(one), square(u)), rootPower));
      case 'acos':
        return byDerivative(f, 'acos', (u) => {
          const slope = powerRational(subtract(constant(one), square(u)), rootPower);
          return slope && negate(slope);
        });
      case 'asinh':
        return byDerivative(f, 'asinh', (u) => powerRational(add(constant(one), square(u)), rootPower));
      case 'acosh':
        return byDerivative(f, 'acosh', (u) => powerRational(subtract(square(u), constant(one)), rootPower));
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

  return { powerInteger, powerRational, power, integrate, elementary, elementaryAtInfinity };
}
