/** Double intervals as an arithmetic. */
import type { FiniteConstant, RealArithmetic } from './arithmetic.ts';
import type { Interval } from './ball.types.ts';
import * as interval from './doubles.ts';
import * as real from './real.ts';

const constants = new Map<FiniteConstant, Interval>();
function constant(name: FiniteConstant): Interval {
  const known = constants.get(name);
  if (known) return known;
  const value = interval.fromBall(real[name](80));
  constants.set(name, value);
  return value;
}

/** A result with an unbounded end says nothing that a later step can use; it counts as undefined. */
const finite = (x: Interval | null): Interval | null => (x !== null && interval.isFinite(x) ? x : null);

export const intervalArithmetic: RealArithmetic<Interval> = {
  zero: interval.ZERO,
  one: interval.ONE,
  fromInteger: interval.fromInteger,
  fromRational: interval.fromRational,
  constant,
  add: interval.add,
  subtract: interval.subtract,
  negate: interval.negate,
  multiply: interval.multiply,
  square: interval.square,
  divide: interval.divide,
  divideInteger: (a, n) => interval.divide(a, interval.fromInteger(n)) ?? interval.WHOLE,
  powerInteger: interval.powerInteger,
  powerRational: interval.powerRational,
  power: interval.power,
  containsZero: interval.containsZero,
  isZero: interval.isZero,
  union: interval.union,
  intersect: (a, b) => interval.intersect(a, b) ?? a,
  midpoint: (x) => interval.fromDouble(interval.midpoint(x)),
  isPoint: interval.isPoint,
  absolute: interval.absolute,
  root: interval.root,
  sinCos: interval.sinCos,
  atan2: interval.atan2,
  maximum: interval.maximum,
  minimum: interval.minimum,
  isPositive: interval.isPositive,
  isNegative: interval.isNegative,
  isNonNegative: interval.isNonNegative,
  lowerEnd: (x) => interval.fromDouble(x.lo),
  upperEnd: (x) => interval.fromDouble(x.hi),
  floor: (x) => (interval.isFinite(x) && Math.floor(x.lo) === Math.floor(x.hi) ? BigInt(Math.floor(x.lo)) : null),
  toDouble: interval.midpoint,
  exp: (x) => finite(interval.exp(x)),
  expm1: (x) => finite(interval.expm1(x)),
  log: (x) => finite(interval.log(x)),
  log1p: (x) => finite(interval.log1p(x)),
  sqrt: interval.sqrt,
  sin: interval.sin,
  cos: interval.cos,
  tan: (x) => finite(interval.tan(x)),
  sinh: (x) => finite(interval.sinh(x)),
  cosh: (x) => finite(interval.cosh(x)),
  tanh: interval.tanh,
  asin: interval.asin,
  acos: interval.acos,
  atan: interval.atan,
  asinh: interval.asinh,
  acosh: interval.acosh,
  atanh: interval.atanh,
};
