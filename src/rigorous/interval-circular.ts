/** Circular functions of double intervals and their inverses. Null: not defined on the whole interval. */
import type { Interval } from './ball.types.ts';
import { increasing, inverseFactorial, UNIT, widen } from './interval-kernels.ts';
import { add, containsZero, divide, down, fromBall, fromDouble, intersect, multiply, negate, ONE, sqrt, subtract, union, up, WHOLE, ZERO } from './interval.ts';
import * as real from './real.ts';

/** pi/2 in two parts of 33 bits and a rest: products of the first two with |k| < 2^20 are exact. */
const HALF_PI_1 = 1.57079632673412561417;
const HALF_PI_2 = 6.07710050630396597660e-11;
const HALF_PI_REST: Interval = { lo: 2.0222662487959505e-21, hi: 2.0222662487959508e-21 };
const LARGEST_REDUCTION = 2 ** 19;

export const PI: Interval = fromBall(real.pi(80));
const HALF_PI: Interval = { lo: PI.lo / 2, hi: PI.hi / 2 };
const QUARTER_PI: Interval = { lo: PI.lo / 4, hi: PI.hi / 4 };

/** [sin, cos] at a double. */
function sineCosineAt(x: number): readonly [Interval, Interval] {
  if (x === 0) return [ZERO, ONE];
  const size = Math.abs(x);
  if (size < 0.78) return [sineKernel(x), cosineKernel(x)];
  const k = Math.round(x * 0.6366197723675814);
  if (!(Math.abs(k) < LARGEST_REDUCTION)) {
    if (!Number.isFinite(x)) return [UNIT, UNIT];
    const [s, c] = real.sinCos(real.fromDouble(x), 64);
    return [fromBall(s), fromBall(c)];
  }
  const r = subtract(subtract(subtract(fromDouble(x), fromDouble(k * HALF_PI_1)), fromDouble(k * HALF_PI_2)), multiply(fromDouble(k), HALF_PI_REST));
  // r is a few ulp wide; |sin'|, |cos'| <= 1.
  const middle = r.lo / 2 + r.hi / 2;
  const slack = up(r.hi - r.lo);
  const around = (y: Interval): Interval => intersect({ lo: down(y.lo - slack), hi: up(y.hi + slack) }, UNIT) ?? UNIT;
  const s = around(sineKernel(middle));
  const c = around(cosineKernel(middle));
  const turn = ((k % 4) + 4) % 4;
  return turn === 0 ? [s, c] : turn === 1 ? [c, negate(s)] : turn === 2 ? [negate(s), negate(c)] : [negate(c), s];
}
/** |x| <= 0.8. */
const sineKernel = (x: number): Interval => widen(x * exponentialAlternating(x * x, 1, 19));
const cosineKernel = (x: number): Interval => widen(exponentialAlternating(x * x, 0, 20));
function exponentialAlternating(x: number, first: number, last: number): number {
  let sum = inverseFactorial(last);
  for (let k = last - 2; k >= first; k -= 2) sum = inverseFactorial(k) - sum * x;
  return sum;
}

function atanAt(x: number): Interval {
  if (x < 0) return negate(atanAt(-x));
  if (x === 0) return ZERO;
  if (x === Infinity) return { lo: 1.57, hi: HALF_PI.hi };
  if (x > 2 ** 60) return subtract(HALF_PI, { lo: 0, hi: 2 ** -60 });
  if (x > 1) {
    const inverse = divide(ONE, fromDouble(x)) ?? ONE;
    return subtract(HALF_PI, { lo: atanAt(inverse.lo).lo, hi: atanAt(inverse.hi).hi });
  }
  if (x > 0.4143) return add(QUARTER_PI, widen(atanKernel((x - 1) / (x + 1))));
  return widen(atanKernel(x));
}
/** |x| < 0.415: the first term left out, x^49/49, is below 2^-66 of x. */
function atanKernel(x: number): number {
  const q = x * x;
  let sum = 1 / 47;
  for (let k = 45; k >= 1; k -= 2) sum = 1 / k - sum * q;
  return x * sum;
}
function asinAt(x: number): Interval | null {
  if (Math.abs(x) > 1) return null;
  if (Math.abs(x) === 1) return x > 0 ? HALF_PI : negate(HALF_PI);
  const y = fromDouble(x);
  const root = sqrt(multiply(subtract(ONE, y), add(ONE, y)));
  const quotient = root === null ? null : divide(y, root);
  return quotient === null ? null : atan(quotient);
}
function acosAt(x: number): Interval | null {
  if (Math.abs(x) > 1) return null;
  if (x === -1) return PI;
  const y = fromDouble(x);
  const quotient = divide(subtract(ONE, y), add(ONE, y));
  const root = quotient === null ? null : sqrt(quotient);
  if (root === null) return null;
  const angle = atan(root);
  return { lo: angle.lo * 2, hi: angle.hi * 2 };
}
export const atan = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -HALF_PI.hi : atanAt(x.lo).lo, hi: x.hi === Infinity ? HALF_PI.hi : atanAt(x.hi).hi });
export const asin = (x: Interval): Interval | null => increasing(asinAt, x);
export const acos = (x: Interval): Interval | null => {
  const high = acosAt(x.lo);
  const low = acosAt(x.hi);
  return high === null || low === null ? null : { lo: low.lo, hi: high.hi };
};

/** [sin, cos] over an interval. */
export function sinCos(x: Interval): readonly [Interval, Interval] {
  if (x.lo === x.hi) return sineCosineAt(x.lo);
  if (!(x.hi - x.lo < 6.3) || Math.abs(x.lo) > 1e15 || Math.abs(x.hi) > 1e15) return [UNIT, UNIT];
  const [lowSine, lowCosine] = sineCosineAt(x.lo);
  const [highSine, highCosine] = sineCosineAt(x.hi);
  let sine = union(lowSine, highSine);
  let cosine = union(lowCosine, highCosine);
  const turns = divide(x, HALF_PI) ?? WHOLE;
  for (let k = Math.ceil(turns.lo), n = 0; k <= Math.floor(turns.hi) && n < 8; k += 1, n += 1) {
    const turn = ((k % 4) + 4) % 4;
    if (turn === 0) cosine = { lo: cosine.lo, hi: 1 };
    else if (turn === 1) sine = { lo: sine.lo, hi: 1 };
    else if (turn === 2) cosine = { lo: -1, hi: cosine.hi };
    else sine = { lo: -1, hi: sine.hi };
  }
  return [intersect(sine, UNIT) ?? UNIT, intersect(cosine, UNIT) ?? UNIT];
}
export const sin = (x: Interval): Interval => sinCos(x)[0];
export const cos = (x: Interval): Interval => sinCos(x)[1];

/** Increasing between its poles; null where there is, or may be, one inside. */
export function tan(x: Interval): Interval | null {
  const tangentAt = (y: number): Interval | null => {
    const [s, c] = sineCosineAt(y);
    return divide(s, c);
  };
  return containsZero(cos(x)) ? null : increasing(tangentAt, x);
}

/** Angle of (x, y) in (-pi, pi]; null at the origin and where both sides of the negative x-axis are met. */
export function atan2(y: Interval, x: Interval): Interval | null {
  if (x.lo > 0) {
    const quotient = divide(y, x);
    return quotient === null ? null : atan(quotient);
  }
  if (y.lo > 0 || y.hi < 0) {
    const quotient = divide(x, y);
    if (quotient === null) return null;
    return subtract(y.lo > 0 ? HALF_PI : negate(HALF_PI), atan(quotient));
  }
  return y.lo === 0 && y.hi === 0 && x.hi < 0 ? PI : null;
}
