/** Local models with powers of log s: their arithmetic, and the elementary functions of them. */
import type { Rational } from '../expression/index.ts';
import type { ElementaryName, RealArithmetic } from './arithmetic.ts';
import type { Model, ModelArithmetic } from './model.types.ts';

/** sum over j of (log s)^j times model j, on (0, 1]. */
export type LogModel<T> = readonly Model<T>[];

/** Results are null where a component is not defined, where logarithms do not vanish fast enough, or beyond the most powers of log s. */
export interface LogArithmetic<T> {
  add(f: LogModel<T>, g: LogModel<T>): LogModel<T>;
  multiply(f: LogModel<T>, g: LogModel<T>): LogModel<T> | null;
  each(f: LogModel<T>, map: (g: Model<T>) => Model<T> | null): LogModel<T> | null;
  power(f: LogModel<T>, q: Rational): LogModel<T> | null;
  elementary(name: ElementaryName, f: LogModel<T>): LogModel<T> | null;
}

/** Beyond this power of log s a model is refused. */
const MOST_LOGS = 24;

/** Enclosure of s^v (log s)^j on (0, 1]: the extreme is (j/(v e))^j, with the sign of (-1)^j; null for v <= 0 < j. */
function logPowerRange<T>(r: RealArithmetic<T>, v: number, j: number): T | null {
  if (j === 0) return v === 0 ? r.one : v > 0 ? r.union(r.zero, r.one) : null;
  if (v <= 0) return null;
  const base = r.divide(r.fromInteger(j), r.multiply(r.fromInteger(v), r.constant('e')));
  const extreme = base === null ? null : r.powerInteger(base, j);
  if (extreme === null) return null;
  return r.union(r.zero, j % 2 === 0 ? extreme : r.negate(extreme));
}

/** Enclosure of the whole model over (0, 1]; null where a component does not vanish fast enough to tame its logarithm. */
export function logRange<T>(r: RealArithmetic<T>, f: LogModel<T>): T | null {
  let total = r.zero;
  for (const [j, g] of f.entries()) {
    if (g.coefficients.length === 0 && r.isZero(g.tail)) continue;
    const weight = logPowerRange(r, g.valuation, j);
    if (weight === null) return null;
    total = r.add(total, r.multiply(weight, g.range));
  }
  return total;
}

/** `r`: the same arithmetic where it is real; null refuses everything that needs a logarithm to vanish. */
export function logArithmetic<T>(m: ModelArithmetic<T>, r: RealArithmetic<T> | null): LogArithmetic<T> {
  const { a } = m;
  const zeroModel = m.constant(a.zero);
  const isNothing = (f: Model<T>): boolean => f.coefficients.length === 0 && a.isZero(f.tail);
  const trim = (f: Model<T>[]): LogModel<T> => {
    while (f.length > 1 && isNothing(f[f.length - 1] ?? zeroModel)) f.pop();
    return f;
  };
  const at = (f: LogModel<T>, j: number): Model<T> => f[j] ?? zeroModel;
  const add = (f: LogModel<T>, g: LogModel<T>): LogModel<T> => trim(Array.from({ length: Math.max(f.length, g.length) }, (_, j) => m.add(at(f, j), at(g, j))));
  const multiply = (f: LogModel<T>, g: LogModel<T>): LogModel<T> | null => {
    if (f.length === 1 && g.length === 1) return [m.multiply(at(f, 0), at(g, 0))];
    if (f.length + g.length > MOST_LOGS) return null;
    const result: Model<T>[] = Array.from({ length: f.length + g.length - 1 }, () => zeroModel);
    for (let i = 0; i < f.length; i += 1) for (let j = 0; j < g.length; j += 1) result[i + j] = m.add(result[i + j] ?? zeroModel, m.multiply(at(f, i), at(g, j)));
    return trim(result);
  };
  const each = (f: LogModel<T>, map: (g: Model<T>) => Model<T> | null): LogModel<T> | null => {
    const result: Model<T>[] = [];
    for (const g of f) {
      const value = isNothing(g) ? zeroModel : map(g);
      if (value === null) return null;
      result.push(value);
    }
    return trim(result);
  };

  /**
   * phi(g + d) = sum_(k<K) phi_k(g) d^k + phi_K(xi) d^K, phi_k = phi^(k)/k!, for d with logarithms that tends to zero: K makes the last part smaller than every coefficient kept.
   * `derivative(k, x)` gives phi_k at a model, `range(k, x)` over a set.
   */
  const compose = (g: Model<T>, d: LogModel<T>, derivative: (k: number) => Model<T> | null, range: (k: number, over: T) => T | null): LogModel<T> | null => {
    if (r === null) return null;
    const least = Math.min(...d.filter((f) => !isNothing(f)).map((f) => f.valuation));
    const base = m.rangeOf(g);
    const spread = logRange(r, d);
    if (!(least > 0) || base === null || spread === null) return null;
    const count = Math.min(12, Math.max(2, Math.ceil(m.length / least)));
    let total: LogModel<T> = [zeroModel];
    let power: LogModel<T> = [m.constant(a.one)];
    for (let k = 0; k < count; k += 1) {
      const factor = derivative(k);
      const term = factor && multiply([factor], power);
      const next = multiply(power, d);
      if (term === null || next === null) return null;
      total = add(total, term);
      power = next;
    }
    const last = range(count, a.union(base, a.add(base, spread)));
    if (last === null) return null;
    return add(total, power.map((f) => (isNothing(f) ? f : { valuation: f.valuation, coefficients: [], tail: a.multiply(last, f.range), range: a.multiply(last, f.range) })));
  };
  const split = (f: LogModel<T>): readonly [Model<T>, LogModel<T>] => [at(f, 0), [zeroModel, ...f.slice(1)]];
  const factorial = (k: number): number => {
    let value = 1;
    for (let i = 2; i <= k; i += 1) value *= i;
    return value;
  };
  const over = (x: T | null, n: number): T | null => (x === null ? null : a.divideInteger(x, n));
  const shift = (f: Model<T>, by: number): Model<T> => (isNothing(f) ? f : { ...f, valuation: f.valuation + by });

  const power = (f: LogModel<T>, q: Rational): LogModel<T> | null => {
    if (f.length === 1) {
      const value = m.powerRational(at(f, 0), q);
      return value === null ? null : [value];
    }
    if (q.den === 1n && q.num > 0n && q.num <= 8n) {
      let result: LogModel<T> | null = f;
      for (let k = 1n; k < q.num && result !== null; k += 1n) result = multiply(result, f);
      return result;
    }
    const [g, d] = split(f);
    const v = g.valuation;
    const lead = Number(q.num) * v;
    if (isNothing(g) || lead % Number(q.den) !== 0) return null;
    const [g0, d0] = [shift(g, -v), d.map((x) => shift(x, -v))];
    const exponent = a.fromRational(q);
    let binomial = a.one;
    const binomials: T[] = [binomial];
    for (let k = 1; k <= MOST_LOGS; k += 1) {
      binomial = a.divideInteger(a.multiply(binomial, a.subtract(exponent, a.fromInteger(k - 1))), k);
      binomials.push(binomial);
    }
    const lowered = (k: number): Rational => ({ num: q.num - BigInt(k) * q.den, den: q.den });
    const value = compose(
      g0,
      d0,
      (k) => {
        const raised = m.powerRational(g0, lowered(k));
        return raised && m.scale(raised, binomials[k] ?? a.zero);
      },
      (k, x) => {
        const raised = a.powerRational(x, lowered(k));
        return raised === null ? null : a.multiply(raised, binomials[k] ?? a.zero);
      },
    );
    return value && value.map((x) => shift(x, lead / Number(q.den)));
  };

  /** The integer c of a term c log s without further factor: e^(c log s) = s^c. */
  const wholePower = (f: LogModel<T>): number => {
    const term = at(f, 1);
    const lead = term.coefficients[0];
    if (r === null || isNothing(term) || term.valuation !== 0 || lead === undefined) return 0;
    const floor = r.floor(r.midpoint(lead));
    return floor !== null && a.isZero(a.subtract(lead, a.fromInteger(floor))) ? Number(floor) : 0;
  };
  /** asinh, acosh and log1p of an argument that grows without bound: by the logarithm. */
  const logarithmic = (name: ElementaryName, f: Model<T>): LogModel<T> | null => {
    if (r === null || !r.isNonNegative(m.domain)) return null;
    if (name === 'log1p') return elementary('log', [m.add(m.constant(a.one), f)]);
    const negative = r.isNegative(f.range);
    if (!negative && !r.isPositive(f.range)) return null;
    if (name !== 'asinh' && (name !== 'acosh' || negative)) return null;
    const u = negative ? m.negate(f) : f;
    const square = m.multiply(u, u);
    const root = m.powerRational(m.add(square, m.constant(a.fromInteger(name === 'asinh' ? 1 : -1))), { num: 1n, den: 2n });
    const value = root && elementary('log', [m.add(u, root)]);
    return value && negative ? value.map((x) => m.negate(x)) : value;
  };
  const elementary = (name: ElementaryName, f: LogModel<T>): LogModel<T> | null => {
    if (f.length === 1) {
      const only = at(f, 0);
      if (name === 'log' && only.valuation !== 0) {
        // log(s^v g) = v log s + log g, s in (0, 1].
        if (r === null || !r.isNonNegative(m.domain)) return null;
        const rest = m.elementary('log', shift(only, -only.valuation));
        return rest && [rest, m.constant(a.fromInteger(only.valuation))];
      }
      const value = m.elementary(name, only) ?? m.elementaryAtInfinity(name, only);
      if (value !== null) return [value];
      return only.valuation < 0 ? logarithmic(name, only) : null;
    }
    const whole = name === 'exp' ? wholePower(f) : 0;
    if (whole !== 0) {
      const value = elementary('exp', add(f, [zeroModel, m.constant(a.fromInteger(-whole))]));
      return value && value.map((x) => shift(x, whole));
    }
    const [g, d] = split(f);
    switch (name) {
      case 'exp':
      case 'expm1': {
        const e = m.elementary('exp', g);
        const value = e && compose(g, d, (k) => m.scale(e, a.divideInteger(a.one, factorial(k))), (k, x) => over(a.exp(x), factorial(k)));
        return value && name === 'expm1' ? add(value, [m.constant(a.fromInteger(-1))]) : value;
      }
      case 'log': {
        const v = g.valuation;
        if (isNothing(g)) return null;
        const [g0, d0] = [shift(g, -v), d.map((x) => shift(x, -v))];
        const inverse = m.powerInteger(g0, -1);
        const value = compose(
          g0,
          d0,
          (k) => {
            if (k === 0) return m.elementary('log', g0);
            const raised = inverse && m.powerInteger(inverse, k);
            return raised && m.scale(raised, a.divideInteger(a.fromInteger(k % 2 === 1 ? 1 : -1), k));
          },
          (k, x) => {
            const raised = a.powerInteger(x, -k);
            return raised === null ? null : a.divideInteger(k % 2 === 1 ? raised : a.negate(raised), k);
          },
        );
        return value && (v === 0 ? value : add(value, [zeroModel, m.constant(a.fromInteger(v))]));
      }
      case 'sqrt':
        return power(f, { num: 1n, den: 2n });
      case 'sin':
      case 'cos': {
        // Derivatives run through sin, cos, -sin, -cos.
        const [s, c] = [m.elementary('sin', g), m.elementary('cos', g)];
        if (s === null || c === null) return null;
        const start = name === 'sin' ? 0 : 1;
        const cycle = [s, c, m.negate(s), m.negate(c)];
        const ranges = (x: T): readonly (T | null)[] => {
          const [u, w] = [a.sin(x), a.cos(x)];
          return [u, w, u === null ? null : a.negate(u), w === null ? null : a.negate(w)];
        };
        return compose(
          g,
          d,
          (k) => m.scale(cycle[(start + k) % 4] ?? s, a.divideInteger(a.one, factorial(k))),
          (k, x) => over(ranges(x)[(start + k) % 4] ?? null, factorial(k)),
        );
      }
      case 'tan': {
        const [s, c] = [elementary('sin', f), elementary('cos', f)];
        const inverse = c && power(c, { num: -1n, den: 1n });
        return s && inverse && multiply(s, inverse);
      }
      case 'sinh':
      case 'cosh':
      case 'tanh': {
        const e = elementary('exp', f);
        const back = elementary('exp', f.map((x) => m.negate(x)));
        const half = a.divideInteger(a.one, 2);
        if (e === null || back === null) return null;
        const s = add(e, back.map((x) => m.negate(x))).map((x) => m.scale(x, half));
        const c = add(e, back).map((x) => m.scale(x, half));
        if (name !== 'tanh') return name === 'sinh' ? s : c;
        const inverse = power(c, { num: -1n, den: 1n });
        return inverse && multiply(s, inverse);
      }
      case 'log1p':
        return elementary('log', add([m.constant(a.one)], f));
      default:
        return null;
    }
  };
  return { add, multiply, each, power, elementary };
}
