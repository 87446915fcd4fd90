/** Hyperbolic functions of double intervals and their inverses. Null: not defined on the whole interval. */
import type { Interval } from './ball.types.ts';
import { expAt, expm1At, LOG_TWO, log1p, logAt } from './interval-exponential.ts';
import { exponentialTail, increasing, UNIT, widen } from './interval-kernels.ts';
import { absolute, add, divide, fromDouble, intersect, multiply, negate, ONE, sqrt, square, subtract, WHOLE, ZERO } from './interval.ts';

function sinhAt(x: number): Interval {
  if (x === 0) return ZERO;
  if (Math.abs(x) < 1) return widen(x * exponentialTail(x * x, 1, 21, 2));
  const difference = subtract(expAt(x), expAt(-x));
  return { lo: difference.lo / 2, hi: difference.hi / 2 };
}
function coshAt(x: number): Interval {
  const sum = add(expAt(x), expAt(-x));
  return { lo: Math.max(1, sum.lo / 2), hi: sum.hi / 2 };
}
function tanhAt(x: number): Interval {
  if (x < 0) return negate(tanhAt(-x));
  if (x === 0) return ZERO;
  const m = expm1At(-2 * x);
  return intersect(divide(negate(m), add(fromDouble(2), m)) ?? UNIT, UNIT) ?? UNIT;
}
function asinhAt(x: number): Interval {
  if (x < 0) return negate(asinhAt(-x));
  if (x === 0) return ZERO;
  const y = fromDouble(x);
  if (x > 2 ** 500) return add(add(logAt(x), LOG_TWO), { lo: 0, hi: 2 ** -900 });
  const squared = square(y);
  const root = sqrt(add(ONE, squared)) ?? ONE;
  return log1p(add(y, divide(squared, add(ONE, root)) ?? ZERO)) ?? WHOLE;
}
function acoshAt(x: number): Interval | null {
  if (x < 1) return null;
  if (x === 1) return ZERO;
  if (x > 2 ** 500) return add(add(logAt(x), LOG_TWO), { lo: -(2 ** -900), hi: 0 });
  const t = subtract(fromDouble(x), ONE);
  const root = sqrt(multiply(t, add(t, fromDouble(2))));
  return root === null ? null : log1p(add(t, root));
}
function atanhAt(x: number): Interval | null {
  if (x < 0) {
    const positive = atanhAt(-x);
    return positive === null ? null : negate(positive);
  }
  if (x >= 1) return null;
  if (x === 0) return ZERO;
  const quotient = divide(fromDouble(2 * x), subtract(ONE, fromDouble(x)));
  const value = quotient === null ? null : log1p(quotient);
  return value === null ? null : { lo: value.lo / 2, hi: value.hi / 2 };
}
export const sinh = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -Infinity : sinhAt(x.lo).lo, hi: x.hi === Infinity ? Infinity : sinhAt(x.hi).hi });
export const cosh = (x: Interval): Interval => {
  const y = absolute(x);
  return { lo: coshAt(Math.min(y.lo, 711)).lo, hi: y.hi === Infinity ? Infinity : coshAt(y.hi).hi };
};
export const tanh = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -1 : tanhAt(x.lo).lo, hi: x.hi === Infinity ? 1 : tanhAt(x.hi).hi });
export const asinh = (x: Interval): Interval => ({ lo: x.lo === -Infinity ? -Infinity : asinhAt(x.lo).lo, hi: x.hi === Infinity ? Infinity : asinhAt(x.hi).hi });
export const acosh = (x: Interval): Interval | null => (x.hi === Infinity ? (x.lo >= 1 ? { lo: (acoshAt(x.lo) ?? ZERO).lo, hi: Infinity } : null) : increasing(acoshAt, x));
export const atanh = (x: Interval): Interval | null => increasing(atanhAt, x);
