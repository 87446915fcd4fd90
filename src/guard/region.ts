/** The arguments of a guard as distances from the point, and proven bounds of a direct form over them, from far to near. */
import { type Expression, Q, type Rational } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import { binaryExponent, powerOfTwo } from '../write/index.ts';
import { interval } from '../rigorous/index.ts';
import { ExactOrders, type Piece, PieceModels, powerDenominator } from './pieces.ts';
import { type Machine, Roundoff } from './roundoff.ts';

/** Arguments x = point + direction * d with `from` < d <= `to` (distances); `to` null reaches to the largest float. With `from` zero d comes arbitrarily close to the point. */
export interface Side {
  readonly point: Rational;
  readonly direction: 1 | -1;
  readonly from: Rational;
  readonly to: Rational | null;
}

/** A bound for low <= d <= high; `high` null: without end. */
export interface Stretch {
  readonly low: Rational;
  readonly high: Rational | null;
  readonly bound: number;
}

export interface Scan {
  /** Contiguous, from the far end on. */
  readonly stretches: readonly Stretch[];
  /** The last one reaches to the near end of the side. */
  readonly complete: boolean;
}

const TWO = Q.rational(2);
/** Distances of one near piece: down to 2^-12 of its far end. */
const CHUNK = 12;
const DEEPEST_CUT = 4;
/** A form is given up towards the point where its bound is this many times the best one. */
const HOPELESS = 2 ** 12;

export class Scanner {
  readonly variable: string;
  readonly machine: Machine;
  readonly budget: Budget;
  readonly #unit: number;
  readonly orders: ExactOrders;
  readonly #models = new Map<string, PieceModels>();

  constructor(variable: string, machine: Machine, budget: Budget) {
    this.variable = variable;
    this.machine = machine;
    this.budget = budget;
    this.#unit = 2 ** -machine.format.precision;
    this.orders = new ExactOrders(variable);
  }

  /** Models are shared by the forms that are looked at on the same piece. */
  models(piece: Piece, denominator = 1): PieceModels {
    const key = `${pieceKey(piece)} ${denominator}`;
    let found = this.#models.get(key);
    if (!found) this.#models.set(key, (found = new PieceModels(this.variable, piece, this.orders, this.budget, { denominator })));
    return found;
  }

  /** Relative error on a piece; null where nothing could be proved. */
  bound(form: Expression, piece: Piece): number | null {
    this.budget.check();
    const own = this.#boundWith(form, piece, 1);
    const q = own === null && piece.kind !== 'plain' ? powerDenominator(form) : 1;
    return q > 1 ? this.#boundWith(form, piece, q) : own;
  }

  #boundWith(form: Expression, piece: Piece, denominator: number): number | null {
    const models = this.models(piece, denominator);
    const whole = models.of(form);
    // Nothing is promised where every value is below the smallest normal number.
    if (whole && models.size(whole).most < 2 ** this.machine.format.emin) return 0;
    const normal = this.#normalPart(form, piece, models, denominator);
    const value = new Roundoff(normal, this.machine).relativeError(form);
    return value !== null && Number.isFinite(value) ? value : null;
  }

  /** The least positive distance of a float from the point, as part of the reach: floats are multiples of the smallest subnormal number. 0 where the point is none of them. */
  #closest({ point, reach }: { readonly point: Rational; readonly reach: Rational }): number {
    const { emin, precision } = this.machine.format;
    const step = powerOfTwo(emin - precision + 1);
    if (Q.divide(point, step).den !== 1n) return 0;
    const part = Q.toDouble(Q.divide(step, reach));
    // Doubles below the smallest normal number are coarse.
    return part >= 2 ** -1022 ? part * (1 - 2 ** -50) : Math.max(0, part - 2 ** -1074);
  }

  /** The value grows beyond all floats at the point, or with the argument: nothing is promised beyond half the largest one. */
  grows = false;

  /** Where the value vanishes at the point or grows without limit there, only distances at which it can be a normal number are promised anything. */
  #normalPart(form: Expression, piece: Piece, models: PieceModels, denominator: number): PieceModels {
    if (piece.kind === 'plain' || (piece.kind === 'near' && piece.least > 0)) return models;
    const model = models.of(form);
    if (!model || model.valuation === 0) return models;
    const box = interval.fromBall(model.range);
    const [most, fewest] = [interval.size(box), interval.leastSize(box)];
    const { emin, emax, precision } = this.machine.format;
    const n = Math.abs(model.valuation);
    if (model.valuation > 0 ? !(most > 0 && most < Infinity) : !(fewest > 0)) return models;
    if (model.valuation < 0) this.grows = true;
    // range * s^valuation at the smallest normal number, or at half the largest one.
    const s = (model.valuation > 0 ? (2 ** emin * (precision < 20 ? 0.5 : 1 - 2 ** -10) / most) ** (1 / n) : fewest ** (1 / n) * 2 ** (-emax / n)) * (1 - 2 ** -30);
    const own = s ** denominator * (1 - 2 ** -30);
    const least = piece.kind === 'near' ? Math.max(own, this.#closest(piece)) : own;
    if (piece.kind === 'infinite') {
      if (!(least > 0 && least < 1)) return models;
      const farthest = Q.divide(piece.reach, Q.fromDouble(least));
      return Q.compare(farthest, piece.farthest) < 0 ? this.models({ ...piece, farthest }, denominator) : models;
    }
    return least > 0 && least < 1 ? this.models({ ...piece, least }, denominator) : models;
  }

  /** From the far end of the side towards the point, as far as the form keeps a bound of any use. */
  scan(form: Expression, side: Side): Scan {
    const stretches: Stretch[] = [];
    let best = Infinity;
    const add = (low: Rational, high: Rational | null, bound: number): void => {
      stretches.push({ low, high, bound });
      best = Math.min(best, bound);
    };
    const hopeless = (bound: number | null): boolean => bound === null || bound > HOPELESS * Math.max(best, this.#unit) || bound >= 1;
    const broken = (): Scan => ({ stretches, complete: false });
    let far: Rational;
    if (side.to === null) {
      const start = startOfTail(side);
      const { precision, emax } = this.machine.format;
      const largestFloat = Q.subtract(powerOfTwo(emax + 1), powerOfTwo(emax + 1 - precision));
      // The topmost piece is short, so that sizes there are tight against the largest float.
      const top = powerOfTwo(emax - 20);
      const bounds = [{ reach: top, farthest: largestFloat }, { reach: start, farthest: top }].map((p) => this.bound(form, { kind: 'infinite', direction: side.direction, ...p }));
      const [high, middle] = bounds;
      if (typeof high !== 'number' || typeof middle !== 'number' || hopeless(high) || hopeless(middle)) return broken();
      add(distanceOf(side, top), null, high);
      add(distanceOf(side, start), distanceOf(side, top), middle);
      far = distanceOf(side, start);
    } else far = side.to;
    const nearStart = nearZone(side, far);
    while (Q.compare(far, nearStart) > 0) {
      const low = Q.compare(side.from, quarterBelow(far)) > 0 ? side.from : quarterBelow(far);
      const pieces = this.#plain(form, side, low, far, 0);
      if (!pieces) return broken();
      for (const p of pieces) {
        if (hopeless(p.bound)) return broken();
        add(p.low, p.high, p.bound);
      }
      far = low;
      if (Q.compare(far, side.from) <= 0) return { stretches, complete: true };
    }
    if (Q.isZero(side.from)) {
      const whole = this.bound(form, near(side, far, 0));
      if (whole !== null && !hopeless(whole)) {
        // A smaller end piece may be proved tighter.
        add(Q.ZERO, far, whole);
        return { stretches, complete: true };
      }
    }
    const last = Q.compare(side.from, powerOfTwo(-this.machine.format.precision - 16)) > 0 ? side.from : Q.multiply(far, powerOfTwo(-this.machine.format.precision - 16));
    while (Q.compare(far, last) > 0) {
      const low = largest(last, Q.multiply(far, powerOfTwo(-CHUNK)));
      const bound = this.bound(form, near(side, far, ratio(low, far)));
      const known = Math.max(...stretches.map((s) => s.bound), this.#unit);
      if (bound !== null && bound <= 1.5 * known) {
        add(low, far, bound);
        far = low;
        continue;
      }
      while (Q.compare(far, low) > 0) {
        const next = largest(low, quarterBelow(far));
        const small = this.bound(form, near(side, far, ratio(next, far)));
        if (small === null || hopeless(small)) return broken();
        add(next, far, small);
        far = next;
      }
    }
    return { stretches, complete: Q.compare(far, side.from) <= 0 };
  }

  /** A piece away from the point, cut while that helps. */
  #plain(form: Expression, side: Side, low: Rational, high: Rational, depth: number): Stretch[] | null {
    const [a, b] = [Q.add(side.point, Q.multiply(low, Q.rational(side.direction))), Q.add(side.point, Q.multiply(high, Q.rational(side.direction)))];
    const bound = this.bound(form, side.direction > 0 ? { kind: 'plain', low: a, high: b } : { kind: 'plain', low: b, high: a });
    if (bound !== null && (bound <= 16 * this.#unit || depth >= 2)) return [{ low, high, bound }];
    if (depth >= DEEPEST_CUT) return null;
    const middle = Q.divide(Q.add(low, high), TWO);
    const far = this.#plain(form, side, middle, high, depth + 1);
    const close = far && this.#plain(form, side, low, middle, depth + 1);
    if (!far || !close) return bound === null ? null : [{ low, high, bound }];
    const cut = [...far, ...close];
    return bound !== null && Math.max(...cut.map((p) => p.bound)) > 0.9 * bound ? [{ low, high, bound }] : cut;
  }
}

export const near = (side: Side, reach: Rational, least: number): Piece => ({ kind: 'near', point: side.point, direction: side.direction, reach, least });

/** The worst bound over all distances beyond h; null where the scan does not reach down to it. */
export function worstBeyond({ stretches }: Scan, h: Rational): number | null {
  let worst = 0;
  for (const s of stretches) {
    if (s.high !== null && Q.compare(s.high, h) <= 0) return worst;
    worst = Math.max(worst, s.bound);
    if (Q.compare(s.low, h) <= 0) return worst;
  }
  return null;
}

const pieceKey = (p: Piece): string =>
  p.kind === 'plain' ? `${Q.toText(p.low)} ${Q.toText(p.high)}` : `${p.kind} ${p.kind === 'near' ? Q.toText(p.point) : ''} ${p.direction} ${Q.toText(p.reach)} ${p.kind === 'near' ? p.least : Q.toText(p.farthest)}`;

const largest = (a: Rational, b: Rational): Rational => (Q.compare(a, b) >= 0 ? a : b);
/** low/high as a double rounded down; both are short floats or their quotient is. */
const ratio = (low: Rational, high: Rational): number => {
  const x = Q.toDouble(Q.divide(low, high));
  return x * (1 - 2 ** -50);
};

/** The largest k 2^e below x, k = 4 .. 7. */
export function quarterBelow(x: Rational): Rational {
  const unit = powerOfTwo(binaryExponent(x) - 2);
  const k = Q.floor(Q.divide(x, unit));
  const value = Q.multiply(Q.rational(k), unit);
  if (!Q.equal(value, x)) return value;
  return k > 4n ? Q.multiply(Q.rational(k - 1n), unit) : Q.multiply(Q.rational(7n), Q.divide(unit, TWO));
}

/** Where pieces that begin at the point take over. */
function nearZone(side: Side, far: Rational): Rational {
  const scale = powerOfTwo(Math.min(0, binaryExponent(far)) - 3);
  return largest(scale, side.from);
}

/** The argument where the infinite piece begins: the next power of two beyond the near end and 1. */
function startOfTail({ from, point }: Side): Rational {
  const least = largest(Q.add(Q.absolute(point), from), Q.ONE);
  const e = binaryExponent(least);
  return Q.equal(powerOfTwo(e), least) ? least : powerOfTwo(e + 1);
}
const distanceOf = ({ point, direction }: Side, x: Rational): Rational => Q.subtract(x, Q.multiply(point, Q.rational(direction)));
