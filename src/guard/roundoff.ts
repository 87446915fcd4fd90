/**
 * What rounding does to one evaluation of an expression in a float format, for every argument of a piece.
 * A computed value is exact * (1 + d) + a with |d| <= relative and |a| <= tiny (digits lost to underflow), and |computed - exact| <= absolute.
 * Relative errors go through a node by the condition of the node, enclosed by local models: a sum passes the error of an operand on times |operand / sum|,
 * a call times |x f'(x) / f(x)| (Higham, Accuracy and Stability of Numerical Algorithms, ch. 1 and 3, cited from memory), both exact in the power of the distance
 * from the point, so that 0/0 and what cancels exactly there do not spoil them.
 * A sum with a product in it may be contracted to one fused operation: that drops a rounding whose bound stays in the sum.
 */
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import type { FloatFormat } from '../fit/index.ts';
import { describe } from '../functions/index.ts';
import { interval } from '../rigorous/index.ts';
import { binaryExponent, isRepresentable, powerOfTwo } from '../write/index.ts';
import type { BallModel, PieceModels } from './pieces.ts';

export interface Computed {
  readonly model: BallModel;
  readonly relative: number;
  readonly tiny: number;
  readonly absolute: number;
}

export interface Machine {
  readonly format: FloatFormat;
  /** Assumed error of a library call, in ulp. */
  readonly library: number;
}

const { up, down } = interval;
const plus = (a: number, b: number): number => (a === 0 ? b : b === 0 ? a : up(a + b));
const times = (a: number, b: number): number => (a === 0 || b === 0 ? 0 : up(a * b));
const over = (a: number, b: number): number => (a === 0 ? 0 : b > 0 ? up(a / b) : Infinity);
/** (1 + a)(1 + b) - 1. */
const compound = (a: number, b: number): number => plus(plus(a, b), times(a, b));

/** Largest exponent of a power that code writes as repeated products. */
const MOST_PRODUCTS = 64;

export class Roundoff {
  readonly models: PieceModels;
  readonly #machine: Machine;
  readonly #unit: number;
  readonly #halfTiny: number;
  readonly #normal: number;
  readonly #largest: number;
  /** Where rounding to nearest overflows. */
  readonly #limit: Rational;
  readonly #known = new Map<Expression, Computed | null>();

  constructor(models: PieceModels, machine: Machine) {
    const { precision, emin, emax } = machine.format;
    this.models = models;
    this.#machine = machine;
    this.#unit = 2 ** -precision;
    this.#halfTiny = Math.max(2 ** (emin - precision), Number.MIN_VALUE);
    this.#normal = 2 ** emin;
    this.#limit = Q.subtract(powerOfTwo(emax + 1), powerOfTwo(emax - precision));
    this.#largest = 2 ** emax * (2 - 2 ** (1 - precision));
  }

  /** Bound of |computed - f| / |f| where |f| is at least the smallest normal number; null where the expression may overflow, or could not be enclosed. */
  relativeError(e: Expression): number | null {
    const value = this.of(e);
    if (!value) return null;
    const { least } = this.models.size(value.model);
    return Math.min(plus(value.relative, over(value.tiny, Math.max(least, this.#normal))), over(value.absolute, least));
  }

  of(e: Expression): Computed | null {
    const seen = this.#known.get(e);
    if (seen !== undefined) return seen;
    const value = this.#compute(e);
    this.#known.set(e, value);
    return value;
  }

  #compute(e: Expression): Computed | null {
    switch (e.kind) {
      case 'symbol': {
        const model = this.models.of(e);
        return model && exactly(model);
      }
      case 'number':
      case 'constant': {
        const model = this.models.of(e);
        if (!model) return null;
        if (e.kind === 'number' && isRepresentable(e.value, this.#machine.format.name)) return exactly(model);
        return this.#rounded(model, 0, 0, 0, this.#unit);
      }
      case 'negation': {
        const inner = this.of(e.operand);
        return inner && { ...inner, model: this.models.m.negate(inner.model) };
      }
      case 'sum':
        return this.#fold(e.terms, (a, b) => this.#sum(a, b));
      case 'product':
        return this.#product(e.factors);
      case 'quotient': {
        const divisor = rationalOf(e.denominator);
        const [a, b] = [this.of(e.numerator), this.of(e.denominator)];
        if (!a || !b) return null;
        return this.#quotient(a, b, divisor !== null && isPowerOfTwo(divisor));
      }
      case 'power':
        return this.#power(e.base, e.exponent, e);
      case 'root': {
        const [a, degree] = [this.of(e.radicand), rationalOf(e.degree)];
        const model = this.models.of(e);
        if (!a || !model || !degree) return null;
        return this.#root(a, model, Number(degree.num), this.#libraryUnits());
      }
      case 'call':
        return this.#call(e.function, e.args, e);
      default:
        return null;
    }
  }

  #fold(parts: readonly Expression[], join: (a: Computed, b: Computed) => Computed | null): Computed | null {
    let total: Computed | null = null;
    for (const part of parts) {
      const value = this.of(part);
      if (!value) return null;
      total = total ? join(total, value) : value;
      if (!total) return null;
    }
    return total;
  }

  readonly #libraryUnits = (): number => times(2 * this.#unit, this.#machine.library);

  /** Rounding of a result whose operation is exact to `relative`, `tiny`, `absolute` before it; `unit` is the relative rounding error (0: exact but for underflow). */
  #rounded(model: BallModel, relative: number, tiny: number, absolute: number, unit: number): Computed | null {
    const { least, most } = this.models.size(model);
    const highest = Math.min(plus(times(most, 1 + relative), tiny), plus(most, absolute));
    if (!(highest <= this.#largest) && !this.models.staysBelow(model, relative, tiny, this.#limit)) return null;
    const lowest = Math.max(0, down(down(least * down(1 - Math.min(1, relative))) - tiny), down(least - absolute));
    const e = lowest > 0 ? exponentOf(lowest) : null;
    // Inside one binade half an ulp is at most u 2^e / |y|.
    const own = e !== null && highest < 2 ** (e + 1) && lowest >= this.#normal ? Math.min(unit, up((unit * 2 ** e) / lowest)) : unit;
    // Just below the smallest normal number half a subnormal step is still no more than u times the value, nearly.
    const brink = lowest < this.#normal && lowest >= this.#normal * (1 - 2 ** -9);
    const flush = lowest >= this.#normal || brink ? 0 : up(this.#halfTiny * Math.max(1, unit / this.#unit));
    let whole = compound(relative, brink ? times(Math.max(own, this.#unit), 1 + 2 ** -8) : own);
    let lost = plus(times(tiny, 1 + own), flush);
    // Lost digits that are nothing beside the value join its relative error.
    if (lost > 0 && over(lost, least) <= this.#unit * 2 ** -10) {
      whole = plus(whole, over(lost, least));
      lost = 0;
    }
    return { model, relative: whole, tiny: lost, absolute: Math.min(plus(times(whole, most), lost), plus(plus(absolute, times(own, highest)), flush)) };
  }

  #sum(a: Computed, b: Computed): Computed | null {
    const { models } = this;
    const model = models.m.add(a.model, b.model);
    if (isExact(a) && isExact(b) && this.#sterbenz(a.model, b.model)) return exactly(model);
    const { least } = models.size(model);
    let [relative, tiny] = [0, 0];
    for (const part of [a, b]) {
      const passed = part.relative === 0 ? 0 : times(part.relative, models.ratio(part.model, model));
      const direct = over(part.absolute, least);
      if (passed <= direct || !Number.isFinite(direct)) {
        relative = plus(relative, passed);
        tiny = plus(tiny, part.tiny);
      } else relative = plus(relative, direct);
    }
    return this.#rounded(model, relative, tiny, plus(a.absolute, b.absolute), this.#unit);
  }

  /** a + b is exact where both are floats of opposite sign and |b|/2 <= |a| <= 2|b| (Sterbenz, Floating-Point Computation, 1974, cited from memory). */
  #sterbenz(a: BallModel, b: BallModel): boolean {
    const quotient = this.models.m.divide(a, b);
    if (!quotient || quotient.valuation !== 0) return false;
    const box = interval.fromBall(quotient.range);
    return box.lo >= -2 && box.hi <= -0.5;
  }

  #product(factors: readonly Expression[]): Computed | null {
    const [first, ...rest] = factors;
    let total = first ? this.of(first) : null;
    let scaling: Scaling = first ? scalingBy(first) : 'other';
    for (const factor of rest) {
      const value = this.of(factor);
      if (!total || !value) return null;
      total = this.#times(total, value, scaling === 'other' ? scalingBy(factor) : scaling);
      scaling = 'other';
    }
    return total;
  }

  #times(a: Computed, b: Computed, byPowerOfTwo: Scaling): Computed | null {
    const { models } = this;
    const model = models.m.multiply(a.model, b.model);
    const [x, y] = [models.size(a.model), models.size(b.model)];
    const tiny = plus(plus(times(times(a.tiny, y.most), 1 + b.relative), times(times(b.tiny, x.most), 1 + a.relative)), times(a.tiny, b.tiny));
    const absolute = plus(plus(times(a.absolute, y.most), times(b.absolute, x.most)), times(a.absolute, b.absolute));
    const rounded = this.#rounded(model, compound(a.relative, b.relative), tiny, absolute, byPowerOfTwo === 'other' ? this.#unit : 0);
    // Unless it overflows, a multiple by 1, 2, 4, ... is a float, subnormal or not.
    return rounded && byPowerOfTwo === 'whole' ? { model, relative: compound(a.relative, b.relative), tiny, absolute } : rounded;
  }

  #quotient(a: Computed, b: Computed, byPowerOfTwo: boolean): Computed | null {
    const { models } = this;
    const model = models.m.divide(a.model, b.model);
    if (!model) return null;
    const { least } = models.size(b.model);
    const divisor = plus(b.relative, over(b.tiny, least));
    const left = down(1 - divisor);
    const relative = left > 0 ? over(plus(a.relative, divisor), left) : Infinity;
    const tiny = left > 0 ? over(a.tiny, down(least * left)) : a.tiny === 0 ? 0 : Infinity;
    const absolute = over(plus(a.absolute, times(models.size(model).most, b.absolute)), down(least - b.absolute));
    if (!Number.isFinite(relative) && !Number.isFinite(absolute)) return null;
    return this.#rounded(model, relative, tiny, absolute, byPowerOfTwo ? 0 : this.#unit);
  }

  #power(base: Expression, exponent: Expression, node: Expression): Computed | null {
    if (base.kind === 'constant' && base.name === 'e') return this.#call('exp', [exponent], node);
    const q = rationalOf(exponent);
    const a = this.of(base);
    const model = this.models.of(node);
    if (!q || !a || !model) return null;
    if (Q.equal(q, Q.HALF)) return this.#root(a, model, 2, this.#unit);
    if (Q.equal(q, Q.negate(Q.HALF))) {
      const below = this.of(build.squareRoot(base));
      return below && this.#quotient(exactly(this.models.m.constant(this.models.r.one)), below, false);
    }
    const solid = this.#withoutTiny(a);
    if (q.den !== 1n) return this.#rounded(model, inverseRise(solid.relative, Math.abs(Q.toDouble(q))), solid.tiny === 0 ? 0 : Infinity, Infinity, this.#libraryUnits());
    const n = Number(q.num < 0n ? -q.num : q.num);
    if (n > MOST_PRODUCTS) return null;
    let product: Computed | null = a;
    for (let k = 1; k < n && product; k += 1) product = this.#times(product, a, 'other');
    if (!product) return null;
    // A language may hand the power to its library instead.
    const viaLibrary = n > 2 ? this.#rounded(product.model, inverseRise(solid.relative, n), product.tiny, Infinity, this.#libraryUnits()) : null;
    const worst = viaLibrary ? { model: product.model, relative: Math.max(product.relative, viaLibrary.relative), tiny: Math.max(product.tiny, viaLibrary.tiny), absolute: Math.max(product.absolute, viaLibrary.absolute) } : product;
    return q.num > 0n ? worst : this.#quotient(exactly(this.models.m.constant(this.models.r.one)), worst, false);
  }

  /** Digits lost to underflow made part of the relative error where the quantity stays away from zero. */
  #withoutTiny(a: Computed): Computed {
    if (a.tiny === 0) return a;
    const { least } = this.models.size(a.model);
    return least > 0 ? { ...a, relative: plus(a.relative, over(a.tiny, least)), tiny: 0 } : a;
  }

  #root(a: Computed, model: BallModel, degree: number, unit: number): Computed | null {
    const solid = this.#withoutTiny(a);
    const relative = inverseRise(solid.relative, 1 / degree);
    const tiny = solid.tiny === 0 ? 0 : up(up(solid.tiny ** (1 / degree)) * (1 + 2 ** -40));
    return this.#rounded(model, relative, tiny, Infinity, unit);
  }

  #call(id: string, args: readonly Expression[], node: Expression): Computed | null {
    const model = this.models.of(node);
    const values = args.map((a) => this.of(a));
    if (!model || !values.every((v): v is Computed => v !== null)) return null;
    const [first, second] = values;
    if (!first) return null;
    if (id === 'abs') return { ...first, model };
    if (id === 'sqrt') return this.#root(first, model, 2, this.#unit);
    if (id === 'hypot' && second) return this.#rounded(model, Math.max(first.relative, second.relative), plus(first.tiny, second.tiny), plus(first.absolute, second.absolute), this.#libraryUnits());
    if (id === 'fma') return null;
    if (values.every(isExact)) return this.#rounded(model, 0, 0, 0, this.#libraryUnits());
    if (id === 'exp' && first.absolute <= 0.5) return this.#rounded(model, plus(first.absolute, times(first.absolute, first.absolute)), 0, Infinity, this.#libraryUnits());
    if (id === 'log') {
      const solid = this.#withoutTiny(first);
      const absolute = solid.tiny === 0 && solid.relative < 0.5 ? over(solid.relative, down(1 - solid.relative)) : Infinity;
      const inverse = this.models.m.divide(this.models.m.constant(this.models.r.one), model);
      return this.#rounded(model, inverse ? times(absolute, this.models.size(inverse).most) : Infinity, 0, absolute, this.#libraryUnits());
    }
    return this.#general(id, values, model);
  }

  /** By the mean value theorem: f' is enclosed on every argument between the exact and the computed one. */
  #general(id: string, values: readonly Computed[], model: BallModel): Computed | null {
    const { models } = this;
    const names = values.map((_, k) => build.symbol(`argument ${k}`));
    let [relative, absolute] = [0, 0];
    const solid = values.map((v) => this.#withoutTiny(v));
    for (const [k, value] of solid.entries()) {
      if (isExact(value)) continue;
      const slope = describe(id)?.derivative?.(names, k);
      if (!slope) return null;
      const along = (widen: (v: Computed) => BallModel): BallModel | null => models.tree(slope, new Map(solid.map((v, j) => [`argument ${j}`, widen(v)] as const)));
      if (value.tiny === 0 && solid.every((v) => v.tiny === 0 && v.relative < 0.5)) {
        const d = along((v) => models.widened(v.model, v.relative));
        const condition = d && models.m.divide(models.m.multiply(d, value.model), model);
        relative = plus(relative, condition ? times(models.size(condition).most, value.relative) : Infinity);
      } else relative = Infinity;
      const flat = solid.every((v) => Number.isFinite(v.absolute) && v.model.valuation >= 0) ? along((v) => models.shifted(v.model, v.absolute)) : null;
      absolute = plus(absolute, flat ? times(models.size(flat).most, value.absolute) : Infinity);
    }
    if (!Number.isFinite(relative) && !Number.isFinite(absolute)) return null;
    return this.#rounded(model, relative, 0, absolute, this.#libraryUnits());
  }
}

const exactly = (model: BallModel): Computed => ({ model, relative: 0, tiny: 0, absolute: 0 });
const isExact = (a: Computed): boolean => a.relative === 0 && a.tiny === 0;
/** (1 - d)^-q - 1, the largest change of y^q where y changes by the factor 1 +- d. */
function inverseRise(d: number, q: number): number {
  if (d === 0) return 0;
  if (!(d < 0.5)) return Infinity;
  // -log(1 - d) <= d + d^2; e^z - 1 <= z + z^2 for z <= 1.
  const z = times(plus(d, times(d, d)), up(q));
  return z <= 1 ? plus(z, times(z, z)) : Infinity;
}

function exponentOf(x: number): number {
  let e = Math.floor(Math.log2(x));
  while (2 ** (e + 1) <= x) e += 1;
  while (2 ** e > x) e -= 1;
  return e;
}
const isPowerOfTwo = (q: Q.Rational): boolean => !Q.isZero(q) && Q.equal(Q.absolute(q), powerOfTwo(binaryExponent(q)));
/** What a constant factor does to the digits: nothing (1, 2, 4, ...), only underflow (1/2, ...), or rounding. */
type Scaling = 'whole' | 'part' | 'other';
const scalingBy = (e: Expression): Scaling => {
  const q = rationalOf(e);
  return q === null || !isPowerOfTwo(q) ? 'other' : q.den === 1n ? 'whole' : 'part';
};
