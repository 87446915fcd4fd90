/** Where an argument may lie, and local models of every node of a tree there. */
import { expand } from '../expand/index.ts';
import { build, type Expression, Q, type Rational, rationalOf, structureKey, walk } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import type { Budget } from '../outcome.ts';
import { type Ball, ballArithmetic, encloseReal, interval, isElementaryName, type Model, type ModelArithmetic, modelArithmetic, modelOfTree, real, type RealArithmetic, realBallTrees } from '../rigorous/index.ts';

export type BallModel = Model<Ball>;

/**
 * A set of arguments.
 * `near`: x = point + direction * reach * s, s in [least, 1], least may be 0. `infinite`: x = direction * reach / s up to |x| = farthest.
 * `plain`: low <= x <= high.
 */
export type Piece =
  | { readonly kind: 'near'; readonly point: Rational; readonly direction: 1 | -1; readonly reach: Rational; readonly least: number }
  | { readonly kind: 'infinite'; readonly direction: 1 | -1; readonly reach: Rational; readonly farthest: Rational }
  | { readonly kind: 'plain'; readonly low: Rational; readonly high: Rational };

/** Least and largest size of a quantity, doubles rounded outward. */
export interface Size {
  readonly least: number;
  readonly most: number;
}

const UNIT_RIGHT: Ball = { mid: 1n, rad: 1n, exp: -1 };
const UNIT_BOTH: Ball = { mid: 0n, rad: 1n, exp: 0 };
export const PRECISION = 160;
const LENGTH = 10;
const { up, down } = interval;

/** s^n for s in [least, 1], outward. */
function powerSize(least: number, n: number): Size {
  if (n === 0) return { least: 1, most: 1 };
  let value = 1;
  for (let k = 0; k < Math.abs(n); k += 1) value = Math.max(0, down(value * least));
  return n > 0 ? { least: value, most: 1 } : { least: 1, most: value > 0 ? up(1 / value) : Infinity };
}

/** Models of the nodes of one or several trees on one piece; each node is modelled once. */
export class PieceModels {
  readonly piece: Piece;
  readonly m: ModelArithmetic<Ball>;
  readonly r: RealArithmetic<Ball>;
  readonly leaf: BallModel;
  readonly #variable: string;
  readonly #least: number;
  readonly #denominator: number;
  readonly #exact: ExactOrders;
  readonly #budget: Budget;
  readonly #known = new Map<Expression, BallModel | null>();
  readonly #byKey = new Map<string, BallModel | null>();

  /** `denominator` q: the distance is reach * s^q, so that powers that are multiples of 1/q are powers of s. */
  constructor(variable: string, piece: Piece, exact: ExactOrders, budget: Budget, { length = LENGTH, precision = PRECISION, denominator = 1 } = {}) {
    this.piece = piece;
    this.#exact = exact;
    this.#denominator = piece.kind === 'plain' ? 1 : denominator;
    this.#variable = variable;
    this.#budget = budget;
    this.r = ballArithmetic(precision);
    const { r } = this;
    this.#least = piece.kind === 'plain' ? 1 : rootDown(piece.kind === 'near' ? piece.least : Q.toDouble(Q.divide(piece.reach, piece.farthest)) * (1 - 2 ** -50), this.#denominator);
    this.m = modelArithmetic(r, piece.kind === 'plain' ? UNIT_BOTH : UNIT_RIGHT, length, piece.kind !== 'plain', r);
    if (piece.kind === 'plain') {
      const middle = Q.divide(Q.add(piece.low, piece.high), Q.rational(2));
      this.leaf = this.m.polynomial([r.fromRational(middle), r.fromRational(Q.subtract(piece.high, middle))]);
    } else {
      const reach = r.fromRational(Q.multiply(piece.reach, Q.rational(piece.direction)));
      const gap = Array.from({ length: this.#denominator - 1 }, () => r.zero);
      this.leaf = piece.kind === 'near' ? this.m.polynomial([r.fromRational(piece.point), ...gap, reach]) : this.m.polynomial([reach], -this.#denominator);
    }
  }

  /** The model of a tree, null where it could not be enclosed on the whole piece. */
  of(e: Expression): BallModel | null {
    const seen = this.#known.get(e);
    if (seen !== undefined) return seen;
    const key = structureKey(e);
    let value = this.#byKey.get(key);
    if (value === undefined) {
      this.#budget.check();
      value = this.#settled(e, this.#compute(e));
      this.#byKey.set(key, value);
    }
    this.#known.set(e, value);
    return value;
  }

  #compute(e: Expression): BallModel | null {
    const { m } = this;
    switch (e.kind) {
      case 'symbol':
        return e.name === this.#variable ? this.leaf : null;
      case 'number':
        return m.constant(this.r.fromRational(e.value));
      case 'negation': {
        const inner = this.of(e.operand);
        return inner && m.negate(inner);
      }
      case 'sum':
        return this.#fold(e.terms, (a, b) => m.add(a, b));
      case 'product':
        return this.#fold(e.factors, (a, b) => m.multiply(a, b));
      case 'quotient': {
        const [a, b] = [this.of(e.numerator), this.of(e.denominator)];
        return a && b && m.divide(a, b);
      }
      case 'power': {
        const base = this.of(e.base);
        const exponent = rationalOf(e.exponent);
        if (base && exponent && exponent.den === 1n && exponent.num >= -64n && exponent.num <= 64n) return m.powerInteger(base, Number(exponent.num));
        return base && exponent ? m.powerRational(base, exponent) : this.tree(e, new Map([[this.#variable, this.leaf]]));
      }
      case 'call': {
        const models = e.args.map((a) => this.of(a));
        if (!models.every((x): x is BallModel => x !== null)) return null;
        return this.call(e.function, models) ?? (isElementaryName(e.function) ? null : this.#described(e));
      }
      default:
        return this.tree(e, new Map([[this.#variable, this.leaf]]));
    }
  }

  /** A function that models do not reach, by its enclosure over a plain piece. */
  #described(e: Expression): BallModel | null {
    if (this.piece.kind !== 'plain') return null;
    const x = real.fromEnds(this.r.fromRational(this.piece.low), this.r.fromRational(this.piece.high), PRECISION);
    const value = encloseReal(e, new Map([[this.#variable, x]]), PRECISION, describe);
    return value && this.m.constant(value);
  }

  #fold(parts: readonly Expression[], join: (a: BallModel, b: BallModel) => BallModel): BallModel | null {
    let total: BallModel | null = null;
    for (const part of parts) {
      const value = this.of(part);
      if (!value) return null;
      total = total ? join(total, value) : value;
    }
    return total;
  }

  /** f at arguments given as models. */
  call(id: string, args: readonly BallModel[]): BallModel | null {
    const names = args.map((_, k) => `argument ${k}`);
    return this.tree(build.call(id, ...names.map((n) => build.symbol(n))), new Map(names.map((n, k) => [n, args[k] ?? this.leaf])));
  }

  tree(e: Expression, environment: ReadonlyMap<string, BallModel>): BallModel | null {
    return modelOfTree(e, { m: this.m, trees: realBallTrees(PRECISION), real: this.r, describe, environment, check: () => this.#budget.check() });
  }

  /** Leading coefficients that only seem to vanish are dropped where the exact expansion has no term there. */
  #settled(e: Expression, value: BallModel | null): BallModel | null {
    const { piece, r, m } = this;
    const lead = value?.coefficients[0];
    if (!value || lead === undefined || piece.kind === 'plain' || r.isZero(lead) || !r.containsZero(lead)) return value;
    const order = this.#exact.at(e, piece, this.#budget);
    if (!order) return value;
    const power = Q.multiply(order, Q.rational(this.#denominator));
    const drop = power.den === 1n ? Number(power.num) - value.valuation : 0;
    if (drop <= 0 || drop > value.coefficients.length) return value;
    const rest = m.polynomial(value.coefficients.slice(drop), value.valuation + drop);
    const end = value.valuation + value.coefficients.length;
    return r.isZero(value.tail) ? rest : m.add(rest, { valuation: end, coefficients: [], tail: value.tail, range: value.tail });
  }

  /** Size of a modelled quantity over the piece. */
  size(model: BallModel): Size {
    const box = interval.fromBall(model.range);
    const power = powerSize(this.#least, model.valuation);
    const [least, most] = [interval.leastSize(box), interval.size(box)];
    return { least: Math.max(0, down(least * power.least)), most: most === 0 ? 0 : up(most * power.most) };
  }

  /** Whether the quantity, changed by the factor 1 + relative and by `tiny`, stays below the limit: in balls, for what comes close to the largest float. */
  staysBelow(model: BallModel, relative: number, tiny: number, limit: Rational): boolean {
    const { r, piece } = this;
    if (!Number.isFinite(relative) || !Number.isFinite(tiny)) return false;
    let most: Ball | null = real.upperEnd(real.absolute(model.range));
    if (piece.kind !== 'plain' && model.valuation < 0) {
      if (this.#least === 0) return false;
      const farthest = piece.kind === 'infinite' ? r.fromRational(Q.divide(piece.farthest, piece.reach)) : r.divide(r.one, real.fromDouble(piece.least));
      const growth = farthest && r.powerRational(farthest, Q.rational(-model.valuation, this.#denominator));
      most = growth && r.multiply(most, growth);
    }
    if (!most) return false;
    const changed = r.add(r.multiply(most, r.add(r.one, real.fromDouble(relative))), real.fromDouble(tiny));
    return r.isNegative(r.subtract(changed, r.fromRational(limit)));
  }

  /** Largest size of a/b; infinite where b may vanish without a. */
  ratio(a: BallModel, b: BallModel): number {
    const quotient = this.m.divide(a, b);
    return quotient ? this.size(quotient).most : Infinity;
  }

  /** The quantity times 1 + d for every |d| <= relative. */
  widened(model: BallModel, relative: number): BallModel {
    if (relative === 0) return model;
    const d = real.fromDouble(up(relative));
    return this.m.scale(model, real.withRadius(real.ONE, d));
  }

  /** The quantity plus d for every |d| <= absolute. */
  shifted(model: BallModel, absolute: number): BallModel {
    return absolute === 0 ? model : this.m.add(model, this.m.constant(real.withRadius(real.ZERO, real.fromDouble(up(absolute)))));
  }
}

/** x^(1/q), rounded down. */
function rootDown(x: number, q: number): number {
  return q === 1 || x === 0 ? x : down(x ** (1 / q) * (1 - 2 ** -40));
}

/** Leading powers at a point, from exact expansions; each is found once. */
export class ExactOrders {
  readonly #variable: string;
  readonly #known = new Map<string, Rational | null>();

  constructor(variable: string) {
    this.#variable = variable;
  }

  /** The power of the distance (of 1/x at infinity) that the tree begins with on that side; null where it is none. */
  at(e: Expression, piece: Exclude<Piece, { readonly kind: 'plain' }>, budget: Budget): Rational | null {
    const key = `${piece.kind === 'near' ? Q.toText(piece.point) : 'inf'} ${piece.direction} ${structureKey(e)}`;
    let found = this.#known.get(key);
    if (found === undefined) {
      const point = piece.kind === 'near' ? build.number(piece.point) : piece.direction > 0 ? 'inf' : '-inf';
      const result = expand({ function: e, variable: build.symbol(this.#variable), point, side: piece.kind === 'infinite' ? 'both' : piece.direction > 0 ? 'right' : 'left', terms: 1, assumptions: [] }, budget);
      const [term] = result.ok && !result.value.prefactor ? result.value.terms : [];
      found = term && term.log === 0 && !term.scale ? rationalOf(term.power) : null;
      this.#known.set(key, found);
    }
    return found;
  }
}

/** Functions that end in a square root at their branch points. */
const SQUARE_ROOT_BRANCH: ReadonlySet<string> = new Set(['sqrt', 'asin', 'acos', 'acosh']);

/** The least common denominator of the powers in a tree. */
export function powerDenominator(e: Expression): number {
  let q = 1n;
  for (const node of walk(e)) {
    const den = node.kind === 'power' && node.exponent.kind === 'number' ? node.exponent.value.den : node.kind === 'root' && node.degree.kind === 'number' ? node.degree.value.num : node.kind === 'call' && SQUARE_ROOT_BRANCH.has(node.function) ? 2n : 1n;
    if (den > 1n) q = (q * den) / Q.gcd(q, den);
  }
  return q > 12n ? 1 : Number(q);
}
