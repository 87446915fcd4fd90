/** Where an argument may lie, and local models of every node of a tree there. */
import { createField } from '../algebra/index.ts';
import { build, type Expression, Q, type Rational, structureKey, substitute } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, budget as budgetOf, Declined } from '../outcome.ts';
import { type Ball, ballArithmetic, encloseReal, interval, isElementaryName, type Model, type ModelArithmetic, modelArithmetic, modelOfTree, rationalOf, real, type RealArithmetic, realBallTrees } from '../rigorous/index.ts';

export type BallModel = Model<Ball>;

/**
 * A set of arguments.
 * `near`: x = point + direction * reach * s; `infinite`: x = direction * reach / s; s in [least, 1], least may be 0.
 * `plain`: low <= x <= high.
 */
export type Piece =
  | { readonly kind: 'near'; readonly point: Rational; readonly direction: 1 | -1; readonly reach: Rational; readonly least: number }
  | { readonly kind: 'infinite'; readonly direction: 1 | -1; readonly reach: Rational; readonly least: number }
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
  readonly #budget: Budget;
  readonly #known = new Map<Expression, BallModel | null>();
  readonly #byKey = new Map<string, BallModel | null>();

  constructor(variable: string, piece: Piece, budget: Budget, length = LENGTH, precision = PRECISION) {
    this.piece = piece;
    this.#variable = variable;
    this.#budget = budget;
    this.r = ballArithmetic(precision);
    const { r } = this;
    this.#least = piece.kind === 'plain' ? 1 : piece.least;
    this.m = modelArithmetic(r, piece.kind === 'plain' ? UNIT_BOTH : UNIT_RIGHT, length, piece.kind !== 'plain', r);
    if (piece.kind === 'plain') {
      const middle = Q.divide(Q.add(piece.low, piece.high), Q.rational(2));
      this.leaf = this.m.polynomial([r.fromRational(middle), r.fromRational(Q.subtract(piece.high, middle))]);
    } else {
      const reach = r.fromRational(Q.multiply(piece.reach, Q.rational(piece.direction)));
      this.leaf = piece.kind === 'near' ? this.m.polynomial([r.fromRational(piece.point), reach]) : this.m.polynomial([reach], -1);
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

  /** A leading coefficient that only seems to vanish at the point is settled by the exact zero test. */
  #settled(e: Expression, value: BallModel | null): BallModel | null {
    const { piece, r, m } = this;
    const lead = value?.coefficients[0];
    if (!value || lead === undefined || piece.kind !== 'near' || value.valuation !== 0 || r.isZero(lead) || !r.containsZero(lead)) return value;
    if (!isExactlyZero(substitute(e, this.#variable, build.number(piece.point)))) return value;
    const rest = m.polynomial([r.zero, ...value.coefficients.slice(1)]);
    const length = value.coefficients.length;
    return r.isZero(value.tail) ? rest : m.add(rest, { valuation: length, coefficients: [], tail: value.tail, range: value.tail });
  }

  /** Size of a modelled quantity over the piece. */
  size(model: BallModel): Size {
    const box = interval.fromBall(model.range);
    const power = powerSize(this.#least, model.valuation);
    const [least, most] = [interval.leastSize(box), interval.size(box)];
    return { least: Math.max(0, down(least * power.least)), most: most === 0 ? 0 : up(most * power.most) };
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

export function isExactlyZero(e: Expression): boolean {
  try {
    const field = createField([], budgetOf(200));
    return field.isZero(field.fromExpression(e)) === 'yes' && field.needed.size === 0;
  } catch (error) {
    if (error instanceof Declined) return false;
    throw error;
  }
}
