/** The supremum of |g| for a local model g = s^v (c_0 + c_1 s + ...) + s^e rho over a segment of its domain, from above and below. */
import type { Model, RealArithmetic } from '../rigorous/index.ts';

export interface Supremum<T> {
  /** An exact upper bound. */
  readonly upper: T;
  /** An exact lower bound, attained up to enclosure at `where`. */
  readonly lower: T;
  readonly where: T;
  /** Segments looked at. */
  readonly segments: number;
  /** The part of `upper` that stems from the unknown tail. */
  readonly tail: T;
}

export interface SupremumOptions<T> {
  readonly from: T;
  readonly to: T;
  /** Segments whose upper bound is at most this are not divided (the supremum elsewhere is known to be at least this). */
  readonly floor?: T;
  readonly slack?: number;
  readonly most?: number;
  readonly check?: () => void;
}

/** Needs v >= 0. Monotone segments are decided by their ends; the others are halved until upper <= lower (1 + slack). */
export function supremumOfModel<T>(r: RealArithmetic<T>, g: Model<T>, options: SupremumOptions<T>): Supremum<T> {
  const v = g.valuation;
  const c = g.coefficients;
  const below = (x: T, y: T): boolean => !r.isPositive(r.subtract(x, y));
  const absUpper = (x: T): T => r.upperEnd(r.absolute(x));
  const absLower = (x: T): T => r.lowerEnd(r.absolute(x));
  const polynomial = (list: readonly T[], s: T): T => {
    let sum = r.zero;
    for (let k = list.length - 1; k >= 0; k -= 1) sum = r.add(list[k] ?? r.zero, r.multiply(s, sum));
    return sum;
  };
  const power = (s: T, n: number): T => (n === 0 ? r.one : (r.powerInteger(s, n) ?? r.one));
  const value = (s: T): T => r.multiply(power(s, v), polynomial(c, s));
  // g' = s^(v-1) (v c_0 + (v+1) c_1 s + ...) for v > 0; c_1 + 2 c_2 s + ... for v = 0.
  const slope: T[] = v > 0 ? c.map((x, k) => r.multiply(r.fromInteger(v + k), x)) : c.slice(1).map((x, k) => r.multiply(r.fromInteger(k + 1), x));
  const slopeOver = (box: T): T => {
    const factor = polynomial(slope, box);
    return v > 1 ? r.multiply(power(box, v - 1), factor) : factor;
  };
  const slopeSign = (box: T): boolean => {
    if (v > 0 || slope.length === 0) return slope.length === 0 || !r.containsZero(polynomial(slope, box));
    return !r.containsZero(polynomial(slope, box));
  };

  const slack = r.fromRational({ num: BigInt(Math.round((options.slack ?? 1e-4) * 2 ** 40)), den: 1n << 40n });
  const [from, to] = [r.lowerEnd(options.from), r.upperEnd(options.to)];
  const tailSize = r.isZero(g.tail) ? r.zero : absUpper(r.multiply(g.tail, power(r.maximum(r.absolute(from), r.absolute(to)), v + c.length)));
  let lower = r.zero;
  let where = to;
  const offer = (s: T, y: T): void => {
    const size = absLower(y);
    if (!below(size, lower)) {
      lower = size;
      where = s;
    }
  };
  interface Segment {
    readonly a: T;
    readonly b: T;
    readonly fa: T;
    readonly fb: T;
  }
  const first: Segment = { a: from, b: to, fa: value(from), fb: value(to) };
  offer(from, first.fa);
  offer(to, first.fb);
  let upper = r.maximum(absUpper(first.fa), absUpper(first.fb));
  const queue: Segment[] = [first];
  let segments = 0;
  const most = options.most ?? 400;
  const floor = options.floor ?? r.zero;
  for (let segment = queue.pop(); segment !== undefined; segment = queue.pop()) {
    segments += 1;
    options.check?.();
    const { a, b, fa, fb } = segment;
    const box = r.union(a, b);
    if (slopeSign(box)) continue;
    const middle = r.midpoint(box);
    const fm = value(middle);
    offer(middle, fm);
    const half = r.divideInteger(r.subtract(b, a), 2);
    const byMean = r.add(absUpper(fm), r.multiply(absUpper(slopeOver(box)), absUpper(half)));
    const direct = absUpper(r.multiply(power(box, v), polynomial(c, box)));
    const bound = r.upperEnd(r.minimum(byMean, direct));
    const target = r.maximum(r.upperEnd(r.add(lower, r.multiply(lower, slack))), floor);
    if (below(bound, target) || segments >= most || below(absUpper(half), r.zero)) {
      upper = r.maximum(upper, bound);
      continue;
    }
    // The end with the larger value last, so that it is looked at first.
    const left: Segment = { a, b: middle, fa, fb: fm };
    const right: Segment = { a: middle, b, fa: fm, fb };
    upper = r.maximum(upper, absUpper(fm));
    if (below(absUpper(fa), absUpper(fb))) queue.push(left, right);
    else queue.push(right, left);
  }
  const reduced = r.lowerEnd(r.subtract(lower, tailSize));
  return { upper: r.upperEnd(r.add(upper, tailSize)), lower: r.isPositive(reduced) ? reduced : r.zero, where, segments, tail: tailSize };
}
