/** Operations on local models that know the order of the real numbers: real roots, signs, absolute values, extremes, angles. */
import type { Rational } from '../expression/index.ts';
import type { RealArithmetic } from './arithmetic.ts';
import type { Model, ModelArithmetic } from './model.types.ts';

export interface RealModelOperations<T> {
  root(radicand: Model<T>, degree: number): Model<T> | null;
  signed(id: 'abs' | 'sign', f: Model<T>): Model<T> | null;
  extreme(id: 'max' | 'min', models: readonly Model<T>[]): Model<T> | null;
  /** Angle of the point (x, y) in (-pi, pi]. */
  angle(y: Model<T>, x: Model<T>): Model<T> | null;
}

/** `r`: the same arithmetic where it is real. Null where a sign changes, or may change, on the domain; without `r` everything but principal roots is null. */
export function realOperations<T>(m: ModelArithmetic<T>, r: RealArithmetic<T> | null): RealModelOperations<T> {
  const { a } = m;
  /** Real n-th root, n >= 1; principal where the leading coefficient is not a negative number, or n is even. */
  const root = (radicand: Model<T>, degree: number): Model<T> | null => {
    const q: Rational = { num: 1n, den: BigInt(degree) };
    const lead = radicand.coefficients[0];
    if (r && degree % 2 === 1 && lead !== undefined && r.isNegative(lead)) {
      // The real root: on the left half line -(-u)^(1/n). A power of s that is not a whole multiple of n leaves no such form on both sides.
      const value = m.powerRational(m.negate(radicand), q);
      return value && m.negate(value);
    }
    return m.powerRational(radicand, q);
  };
  /** The one sign of f on the whole domain but for s = 0; null where there is none or it is not known. */
  const signOnDomain = (f: Model<T>): 1 | -1 | null => {
    if (r === null || f.coefficients.length === 0) return null;
    // s^v keeps its sign for even v, and on [0, 1] for every v.
    if (f.valuation % 2 !== 0 && !r.isNonNegative(m.domain)) return null;
    return r.isPositive(f.range) ? 1 : r.isNegative(f.range) ? -1 : null;
  };
  const signed = (id: 'abs' | 'sign', f: Model<T>): Model<T> | null => {
    const sign = signOnDomain(f);
    if (sign === null) return null;
    if (id === 'sign') return m.constant(a.fromInteger(sign));
    return sign > 0 ? f : m.negate(f);
  };
  const extreme = (id: 'max' | 'min', models: readonly Model<T>[]): Model<T> | null => {
    let best: Model<T> | null = null;
    for (const candidate of models) {
      if (best === null) {
        best = candidate;
        continue;
      }
      const sign = signOnDomain(m.subtract(candidate, best));
      if (sign === null) return null;
      if (sign > 0 === (id === 'max')) best = candidate;
    }
    return best;
  };
  const angle = (y: Model<T>, x: Model<T>): Model<T> | null => {
    // In the right half plane atan(y/x); elsewhere the quarter turns are added where y keeps its sign.
    if (signOnDomain(x) === 1) {
      const quotient = m.divide(y, x);
      return quotient && m.elementary('atan', quotient);
    }
    const sign = signOnDomain(y);
    const quotient = sign === null ? null : m.divide(x, y);
    const value = quotient === null ? null : m.elementary('atan', quotient);
    return sign === null || value === null ? null : m.subtract(m.constant(a.multiply(a.fromInteger(sign), a.divideInteger(a.constant('pi'), 2))), value);
  };
  return { root, signed, extreme, angle };
}
