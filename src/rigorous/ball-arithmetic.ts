/** Real balls at one fixed precision as an arithmetic. */
import type { RealArithmetic } from './arithmetic.ts';
import type { Ball } from './ball.types.ts';
import * as real from './real.ts';

const cache = new Map<number, RealArithmetic<Ball>>();

export function ballArithmetic(precision: number): RealArithmetic<Ball> {
  const known = cache.get(precision);
  if (known) return known;
  const p = precision;
  const made: RealArithmetic<Ball> = {
    zero: real.ZERO,
    one: real.ONE,
    fromInteger: real.fromInteger,
    fromRational: (q) => real.fromRational(q, p),
    constant: (name) => real[name](p),
    add: (a, b) => real.add(a, b, p),
    subtract: (a, b) => real.subtract(a, b, p),
    negate: real.negate,
    multiply: (a, b) => real.multiply(a, b, p),
    square: (a) => real.square(a, p),
    divide: (a, b) => real.divide(a, b, p),
    divideInteger: (a, n) => real.divide(a, real.fromInteger(n), p) ?? real.ZERO,
    powerInteger: (a, n) => real.powerInteger(a, n, p),
    powerRational: (a, q) => real.powerRational(a, q, p),
    power: (a, b) => real.power(a, b, p),
    containsZero: real.containsZero,
    isZero: (a) => a.mid === 0n && a.rad === 0n,
    union: (a, b) => real.union(a, b, p),
    intersect: (a, b) => real.intersection(a, b, p) ?? a,
    midpoint: real.midpoint,
    isPoint: real.isExact,
    absolute: real.absolute,
    root: (a, n) => real.root(a, n, p),
    sinCos: (a) => real.sinCos(a, p),
    atan2: (y, x) => real.atan2(y, x, p),
    maximum: (a, b) => real.maximum(a, b, p),
    minimum: (a, b) => real.minimum(a, b, p),
    isPositive: real.isPositive,
    isNegative: real.isNegative,
    isNonNegative: real.isNonNegative,
    lowerEnd: real.lowerEnd,
    upperEnd: real.upperEnd,
    floor: real.floorOf,
    toDouble: real.toDouble,
    exp: (x) => real.exp(x, p),
    expm1: (x) => real.expm1(x, p),
    log: (x) => real.log(x, p),
    log1p: (x) => real.log1p(x, p),
    sqrt: (x) => real.sqrt(x, p),
    sin: (x) => real.sin(x, p),
    cos: (x) => real.cos(x, p),
    tan: (x) => real.tan(x, p),
    sinh: (x) => real.sinh(x, p),
    cosh: (x) => real.cosh(x, p),
    tanh: (x) => real.tanh(x, p),
    asin: (x) => real.asin(x, p),
    acos: (x) => real.acos(x, p),
    atan: (x) => real.atan(x, p),
    asinh: (x) => real.asinh(x, p),
    acosh: (x) => real.acosh(x, p),
    atanh: (x) => real.atanh(x, p),
  };
  if (cache.size > 64) cache.clear();
  cache.set(precision, made);
  return made;
}
