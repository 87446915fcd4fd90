/**
 * Taylor coefficients of an analytic function by Cauchy's integral over a circle, with the trapezoidal rule on |d| = R/2, whose error is B 2^-M/(1 - 2^-M) per (R/2)^k for M points and B = max |f| on |d| = R
 * (Trefethen & Weideman, SIAM Rev. 56 (2014), theorem 2.1).
 */
import { describe } from '../functions/index.ts';
import { type Ball, complex, type ComplexBall, interval, real } from '../rigorous/index.ts';

export interface CircleSeries {
  readonly radius: number;
  readonly coefficients: readonly Ball[];
  /** max |f| on the circle of that radius. */
  readonly bound: Ball;
}

const cache = new Map<string, CircleSeries | null>();
const CACHE_SIZE = 256;

/** The first `length` coefficients about `centre`, f analytic on |d| <= radius in argument `index`; null where f cannot be enclosed there. */
export function circleSeries(id: string, parameters: readonly ComplexBall[], index: number, centre: Ball, radius: number, precision: number, length: number, check?: () => void): CircleSeries | null {
  const key = `${id}|${index}|${parameters.map((z) => `${z.re.mid},${z.re.rad},${z.re.exp},${z.im.mid}`).join(';')}|${centre.mid},${centre.rad},${centre.exp}|${radius}|${precision}`;
  const known = cache.get(key);
  if (known !== undefined && (known === null || known.coefficients.length >= length)) return known && { ...known, coefficients: known.coefficients.slice(0, length) };
  const made = computeSeries(id, parameters, index, centre, radius, precision, length, check);
  if (cache.size >= CACHE_SIZE) cache.clear();
  cache.set(key, made);
  return made;
}

function computeSeries(id: string, parameters: readonly ComplexBall[], index: number, centre: Ball, radius: number, precision: number, length: number, check?: () => void): CircleSeries | null {
  const f = describe(id)?.enclose;
  if (!f) return null;
  const at = (z: ComplexBall, bits: number): ComplexBall | null => {
    const args = [...parameters];
    args.splice(index, 0, z);
    return f(args, bits, check);
  };
  const bound = majorant(id, parameters, index, centre, radius) ?? maximumOnCircle(at, centre, radius);
  if (bound === null) return null;
  // M points on half the radius; f is real on the real axis, so the lower half mirrors the upper.
  // More points than coefficients: those of M higher powers are then all that is added to one.
  const half = Math.max(precision <= 64 ? 28 : Math.ceil((precision + 12) / 2), Math.ceil((length + 1) / 2));
  const M = 2 * half;
  const work = precision + 16;
  const c = complex.arithmetic(work);
  const inner = real.fromDouble(radius / 2);
  const values: ComplexBall[] = [];
  const roots: ComplexBall[] = [];
  const pi = real.pi(work);
  for (let j = 0; j < M; j += 1) {
    const angle = real.divide(real.multiply(real.scaleByPowerOfTwo(pi, 1), real.fromInteger(j), work), real.fromInteger(M), work) ?? real.ZERO;
    const [s, co] = j === 0 ? [real.ZERO, real.ONE] : j === half ? [real.ZERO, real.fromInteger(-1)] : real.sinCos(angle, work);
    roots.push({ re: co, im: s });
  }
  for (let j = 0; j <= half; j += 1) {
    const root = roots[j] ?? complex.ONE;
    const z: ComplexBall = { re: real.add(centre, real.multiply(root.re, inner, work), work), im: real.multiply(root.im, inner, work) };
    const value = at(z, work);
    if (value === null) return null;
    values.push(value);
  }
  const alias = real.scaleByPowerOfTwo(real.upperEnd(bound), 1 - M);
  const coefficients: Ball[] = [];
  let scale: Ball = real.ONE;
  for (let k = 0; k < length; k += 1) {
    // Re of sum over the upper half, ends once and inner points twice.
    let sum = real.ZERO;
    for (let j = 0; j <= half; j += 1) {
      const root = roots[(j * k) % M] ?? complex.ONE;
      const value = values[j] ?? complex.ZERO;
      const part = c.real.add(c.real.multiply(value.re, root.re), c.real.multiply(value.im, root.im));
      sum = c.real.add(sum, j === 0 || j === half ? part : real.scaleByPowerOfTwo(part, 1));
    }
    const mean = real.withRadius(c.real.divideInteger(sum, M), alias);
    const coefficient = real.divide(mean, scale, work);
    if (coefficient === null) return null;
    coefficients.push(coefficient);
    scale = real.multiply(scale, inner, work);
  }
  // f(u0) itself is known better directly.
  const first = at(complex.fromReal(centre), work);
  if (first !== null && coefficients[0]) coefficients[0] = real.intersection(first.re, coefficients[0], work) ?? first.re;
  return { radius, coefficients, bound: real.upperEnd(bound) };
}

/**
 * max |f| on the circle from one real value, where a bound by a positive function is known: J and I of integer order by I at |z| (power series), K by K at Re z (DLMF 10.32.9),
 * Ai and Bi by Bi at |z| (power series), zeta by zeta at Re s > 1, polylog and K(m) by themselves at |z| < 1 (positive coefficients).
 */
function majorant(id: string, parameters: readonly ComplexBall[], index: number, centre: Ball, radius: number): Ball | null {
  const real1 = (name: string, x: Ball): Ball | null => {
    const args = parameters.map((z) => z.re);
    args.splice(index, 0, x);
    const value = describe(name)?.encloseReal?.(args, 64) ?? null;
    return value === null ? null : real.upperEnd(real.absolute(value));
  };
  const size = real.upperEnd(real.add(real.absolute(centre), real.fromDouble(radius), 64));
  const left = real.lowerEnd(real.subtract(centre, real.fromDouble(radius), 64));
  const inUnit = real.compare(size, real.ONE) === -1;
  switch (id) {
    case 'besselJ':
    case 'besselI': {
      const [order] = parameters;
      return order && real.isExact(order.re) && real.floorOf(order.re) !== null && real.isNonNegative(order.re) && real.compare(order.re, real.fromInteger(real.floorOf(order.re) ?? -1n)) === 0 ? real1('besselI', size) : null;
    }
    case 'besselK':
      return real.isPositive(left) ? real1('besselK', left) : null;
    case 'airyAi':
    case 'airyBi':
      return real1('airyBi', size);
    case 'zeta':
      return real.compare(left, real.ONE) === 1 ? real1('zeta', left) : null;
    case 'polylog':
    case 'ellipticKParameter':
      return inUnit ? real1(id, size) : null;
    default:
      return null;
  }
}

/** An upper bound of |f| on |z - centre| = radius by rectangles over arcs of the upper half. */
function maximumOnCircle(at: (z: ComplexBall, bits: number) => ComplexBall | null, centre: Ball, radius: number): Ball | null {
  for (const arcs of [12, 32, 96]) {
    let largest: Ball | null = real.ZERO;
    for (let j = 0; j < arcs && largest !== null; j += 1) {
      const angles = interval.multiply(interval.PI, interval.fromEnds(j / arcs, (j + 1) / arcs));
      const widened = interval.fromEnds(interval.down(angles.lo), interval.up(angles.hi));
      const [s, c] = interval.sinCos(widened);
      const size = interval.fromDouble(radius);
      const [x, y] = [interval.toBall(interval.multiply(c, size)), interval.toBall(interval.multiply(s, size))];
      const value: ComplexBall | null = x === null || y === null ? null : at({ re: real.add(centre, x, 64), im: y }, 64);
      largest = value === null ? null : real.upperEnd(real.maximum(largest, complex.absolute(value, 64)));
    }
    if (largest !== null && real.exponentOf(largest) < 4000) return largest;
  }
  return null;
}
