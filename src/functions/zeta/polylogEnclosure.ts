/** Rigorous enclosures of polylogarithms and of the functions made of them: Clausen, inverse tangent integral, Debye. */
import { Q } from '../../expression/index.ts';
import { type Ball, type ComplexBall, complex, real } from '../../rigorous/index.ts';
import { bound, complexKit, exactInteger, type Kit, realKit } from '../enclosure/kit.ts';
import { geometricTail } from '../enclosure/series.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { gamma } from '../gamma/enclosure.ts';
import { bernoulli, factorial } from '../sequences.ts';
import { hurwitzZeta, TWO_PI, zeta } from './enclosure.ts';

/** Li_s(x). Direct sum for |x| <= 3/4, in powers of log x for |log x| < 6, inversion beyond. */
export function polylog<T>(kit: Kit<T>, s: T, x: T): T | null {
  const { a } = kit;
  const size = kit.size(x);
  if (bound.less(size, bound.rational(Q.rational(3, 4)))) return polylogSum(kit, s, x);
  const order = exactInteger(kit.realPart(s), 1000);
  const isInteger = order !== null && a.isZero(kit.fromReal(kit.imaginaryPart(s)));
  if (isInteger && order <= 0 && order >= -60) return eulerianPolylog(kit, -order, x);
  if (kit.isReal) {
    // On x < 1 through complex balls where log x is complex.
    const value = kit.realPart(x);
    if (!real.isNegative(real.subtract(value, real.ONE, kit.precision))) return null;
    if (real.isPositive(value)) return polylogLogarithmic(kit, s, x, isInteger ? order : null);
    if (!real.isNegative(value)) return null;
    const accelerated = alternatingPolylog(kit.precision, kit.realPart(s), value);
    if (accelerated !== null) return kit.fromReal(accelerated);
    const c = complexKit(kit.precision, kit.check);
    if (!isInteger) {
      const far = jonquiere(c, kit.realPart(s), value);
      return far === null ? null : kit.fromReal(far);
    }
    const z = complex.fromReal(value);
    const wholeOrder = complex.fromReal(kit.realPart(s));
    const far = polylogComplex(c, wholeOrder, z, order, negativeLog(c, value));
    return far === null ? null : kit.fromReal(far.re);
  }
  const logarithm = a.log(x);
  return logarithm === null ? null : polylogGeneral(kit, s, x, isInteger ? order : null, logarithm);
}
/** Li_-n(x) = x A_n(x)/(1-x)^(n+1) with Eulerian numbers (DLMF 26.14). */
function eulerianPolylog<T>(kit: Kit<T>, n: number, x: T): T | null {
  const { a } = kit;
  let row = [1n];
  for (let m = 2; m <= n; m++) row = Array.from({ length: m }, (_, j) => BigInt(j + 1) * (row[j] ?? 0n) + BigInt(m - j) * (row[j - 1] ?? 0n));
  const top = row.reduceRight<T>((sum, c) => a.add(a.multiply(sum, x), a.fromInteger(c)), a.zero);
  const bottom = a.powerInteger(a.subtract(a.one, x), n + 1);
  return bottom === null ? null : a.divide(a.multiply(x, top), bottom);
}

/** For x < 0 and s no integer: 2 Gamma(1-s)/(2pi)^(1-s) Re(i^(1-s) zeta(1-s, 1/2 - i log(-x)/(2pi))), from DLMF 25.12.13. */
function jonquiere(kit: Kit<ComplexBall>, s: Ball, x: Ball): Ball | null {
  const { a, precision } = kit;
  const line = realKit(precision, kit.check);
  const t = line.a.subtract(real.ONE, s);
  const g = gamma(line, t);
  const logarithm = real.log(real.negate(x), precision);
  const twoPi = real.scaleByPowerOfTwo(real.pi(precision), 1);
  if (g === null || logarithm === null) return null;
  const ratio = real.divide(logarithm, twoPi, precision);
  const power = real.power(twoPi, t, precision);
  if (ratio === null || power === null) return null;
  const value = hurwitzZeta(kit, complex.fromReal(t), { re: real.scaleByPowerOfTwo(real.ONE, -1), im: real.negate(ratio) });
  const angle = real.multiply(t, real.scaleByPowerOfTwo(real.pi(precision), -1), precision);
  const turn: ComplexBall = { re: real.cos(angle, precision), im: real.sin(angle, precision) };
  const scale = real.divide(real.scaleByPowerOfTwo(g, 1), power, precision);
  return value === null || scale === null ? null : real.multiply(a.multiply(turn, value).re, scale, precision);
}

/**
 * Li_s(x) for -1 <= x < 0 and s > 0 by Chebyshev weights: |x|^k/k^s are moments of a positive measure on [0, 1], so n terms leave at most 2/(3 + sqrt 8)^n of the sum.
 * Source: Cohen, Rodriguez Villegas, Zagier, "Convergence acceleration of alternating series", Experiment. Math. 9 (2000), algorithm 1 (from memory).
 */
function alternatingPolylog(precision: number, s: Ball, x: Ball): Ball | null {
  if (!real.isPositive(s) || bound.less(bound.one, real.absoluteUpper(x))) return null;
  const kit = realKit(precision + 8);
  const { a } = kit;
  const n = Math.ceil((precision + 4) / 2.54) + 2;
  // T_n(3) by its recurrence: d is half of (3+sqrt 8)^n + (3-sqrt 8)^n.
  let [before, d] = [1n, 3n];
  for (let k = 1; k < n; k++) [before, d] = [d, 6n * d - before];
  const y = real.negate(x);
  const whole = exactInteger(s, 1000);
  let b = -1n;
  let c = -d;
  let power = y;
  let sum = a.zero;
  for (let k = 0; k < n; k++) {
    c = b - c;
    const weight = whole === null ? weightOf(kit, k + 1, s) : a.powerInteger(a.fromInteger(k + 1), -whole);
    if (weight === null) return null;
    sum = a.add(sum, a.multiply(a.multiply(power, weight), a.fromInteger(c)));
    power = a.multiply(power, y);
    b = (b * BigInt(k + n) * BigInt(k - n) * 2n) / (BigInt(2 * k + 1) * BigInt(k + 1));
  }
  const value = a.divide(sum, a.fromInteger(d));
  if (value === null) return null;
  // The sum lies between 0 and |x|, its first term.
  const error = bound.divide(bound.multiply(bound.integer(2), real.absoluteUpper(y)), real.absoluteLower(a.fromInteger(d)));
  return error && real.negate(real.withRadius(value, error));
}
/** log x for x < 0 from above: log|x| + i pi. */
const negativeLog = (kit: Kit<ComplexBall>, x: Ball): ComplexBall | null => {
  const size = real.log(real.negate(x), kit.precision);
  return size && { re: size, im: real.pi(kit.precision) };
};
function polylogComplex(kit: Kit<ComplexBall>, s: ComplexBall, x: ComplexBall, order: number | null, mu: ComplexBall | null): ComplexBall | null {
  return mu === null ? null : polylogGeneral(kit, s, x, order, mu);
}
function polylogGeneral<T>(kit: Kit<T>, s: T, x: T, order: number | null, mu: T): T | null {
  const { a } = kit;
  const inverse = order === null || order < 1 ? null : a.divide(a.one, x);
  const near = inverse === null || !bound.less(kit.size(inverse), bound.rational(Q.rational(3, 4)));
  if (near) return bound.less(kit.size(mu), bound.rational(Q.rational(23, 4))) ? aroundOne(kit, s, mu, order) : null;
  // Li_n(x) = -2 sum eta(2k) w^(n-2k)/(n-2k)! - (-1)^n Li_n(1/x), w = log(-x).
  const inner = polylogSum(kit, s, inverse);
  const w = a.log(a.negate(x));
  if (inner === null || w === null || order === null) return null;
  let total = order % 2 === 0 ? a.negate(inner) : inner;
  for (let k = 0; 2 * k <= order; k++) {
    kit.check();
    const power = a.powerInteger(w, order - 2 * k);
    if (power === null) return null;
    const eta = k === 0 ? real.scaleByPowerOfTwo(real.ONE, -1) : real.multiply(real.fromRational(Q.subtract(Q.ONE, Q.power(Q.rational(2), 1 - 2 * k)), kit.precision), real.zeta(2 * k, kit.precision), kit.precision);
    total = a.subtract(total, a.multiply(a.multiply(power, kit.fromReal(eta)), a.fromRational(Q.rational(2n, factorial(order - 2 * k)))));
  }
  return total;
}
function polylogLogarithmic<T>(kit: Kit<T>, s: T, x: T, order: number | null): T | null {
  const mu = kit.a.log(x);
  return mu === null ? null : aroundOne(kit, s, mu, order);
}

/** sum of x^k/k^s; the ratio of terms from k on is at most |x| max(1, ((k+1)/k)^-Re s). */
function polylogSum<T>(kit: Kit<T>, s: T, x: T): T | null {
  const { a, precision } = kit;
  const n = exactInteger(kit.realPart(s), 1000);
  const integer = n !== null && a.isZero(kit.fromReal(kit.imaginaryPart(s)));
  const size = kit.size(x);
  let power = x;
  let sum = a.zero;
  const growth = Math.max(0, Math.ceil(-real.toDouble(real.lowerEnd(kit.realPart(s)))));
  for (let k = 1; k < 100_000; k++) {
    kit.check();
    const weight = integer ? a.powerInteger(a.fromInteger(k), -n) : weightOf(kit, k, s);
    if (weight === null) return null;
    const term = a.multiply(power, weight);
    if (k > 1 && bound.exponent(kit.size(term)) < bound.exponent(kit.size(sum)) - precision) {
      const ratio = bound.multiply(size, bound.power(bound.rational(Q.rational(k + 1, k)), growth));
      const tail = geometricTail(kit.size(term), ratio);
      if (tail !== null) return kit.inflate(sum, tail);
    }
    sum = a.add(sum, term);
    power = a.multiply(power, x);
    if (a.isZero(power)) return sum;
  }
  return null;
}
const weightOf = <T>(kit: Kit<T>, k: number, s: T): T | null => {
  if (k === 1) return kit.a.one;
  const logarithm = kit.a.log(kit.a.fromInteger(k));
  return logarithm === null ? null : kit.a.exp(kit.a.negate(kit.a.multiply(s, logarithm)));
};

/**
 * DLMF 25.12.12 in powers of mu = log x, |mu| < 2 pi.
 * Tail: for t = Re(1 - s) + k >= 2, |zeta(s-k)| <= 2 (2pi)^-t e^(pi|Im s|/2) Gamma(t) zeta(2) (DLMF 25.4.1), and Gamma(t)/k! <= (k+1)^max(0, -Re s) for such t.
 */
function aroundOne<T>(kit: Kit<T>, s: T, mu: T, order: number | null): T | null {
  const { a, precision } = kit;
  let sum = a.zero;
  let power = a.one;
  const size = kit.size(mu);
  const sigma = real.toDouble(real.lowerEnd(kit.realPart(s)));
  const top = real.toDouble(real.upperEnd(kit.realPart(s)));
  if (!a.isZero(kit.fromReal(kit.imaginaryPart(s))) || !(Math.abs(sigma) < 1000)) return null;
  const growth = Math.max(0, Math.ceil(-sigma) + 1);
  for (let k = 0; k < 20_000; k++) {
    kit.check();
    if (!(order !== null && order - k === 1)) {
      const value = zeta(kit, a.subtract(s, a.fromInteger(k)));
      if (value === null) return null;
      sum = a.add(sum, a.multiply(power, value));
    }
    power = a.divideInteger(a.multiply(power, mu), k + 1);
    if (k > top + 2 && k % 4 === 0) {
      const tail = logarithmicTail(size, k + 1, top, growth);
      if (tail !== null && bound.exponent(tail) < Math.max(bound.exponent(kit.size(sum)), -precision) - precision) {
        const lead = leadingTerm(kit, s, mu, order);
        return lead === null ? null : a.add(kit.inflate(sum, tail), lead);
      }
    }
  }
  return null;
}
/** sum over k >= n of 4 (2pi)^(top-1) (k+1)^growth (|mu|/2pi)^k. */
function logarithmicTail(size: Ball, n: number, top: number, growth: number): Ball | null {
  const ratio = bound.divide(size, real.absoluteLower(TWO_PI));
  if (ratio === null) return null;
  const step = bound.multiply(ratio, bound.power(bound.rational(Q.rational(n + 2, n + 1)), growth));
  const scale = bound.multiply(bound.integer(4), bound.power(bound.rational(Q.rational(7)), Math.max(0, Math.ceil(top))));
  const first = bound.multiply(scale, bound.multiply(bound.power(ratio, n), bound.power(bound.integer(n + 1), growth)));
  return geometricTail(first, step);
}
function leadingTerm<T>(kit: Kit<T>, s: T, mu: T, order: number | null): T | null {
  const { a } = kit;
  const logarithm = a.log(a.negate(mu));
  if (order !== null && order >= 1) {
    const power = order === 1 ? a.one : a.powerInteger(mu, order - 1);
    if (logarithm === null || power === null) return null;
    let harmonic = Q.ZERO;
    for (let j = 1; j < order; j++) harmonic = Q.add(harmonic, Q.rational(1, j));
    return a.multiply(a.divide(power, a.fromInteger(factorial(order - 1))) ?? a.zero, a.subtract(a.fromRational(harmonic), logarithm));
  }
  const g = gamma(kit, a.subtract(a.one, s));
  if (order !== null) {
    const power = a.powerInteger(a.negate(mu), order - 1);
    return power === null || g === null ? null : a.multiply(g, power);
  }
  const power = logarithm === null ? null : a.exp(a.multiply(a.subtract(s, a.one), logarithm));
  return power === null || g === null ? null : a.multiply(g, power);
}

/** Cl_2 reduced to |t| <= pi: t - t log|t| + sum of |B_2k| t^(2k+1)/(2k (2k+1)!), terms below 4 (t/2pi)^2k t (DLMF 25.12.9; A&S 27.8.2). */
function clausen(kit: Kit<Ball>, t: Ball): Ball | null {
  const { a, precision } = kit;
  const period = real.multiply(real.fromInteger(2), real.pi(precision + 8), precision + 8);
  const turns = a.divide(t, period);
  if (turns === null) return null;
  const n = real.nearestInteger(real.midpoint(turns));
  const u = n === 0n ? t : a.subtract(t, a.multiply(period, a.fromInteger(n)));
  if (a.isZero(u)) return a.zero;
  if (real.toDouble(real.absoluteUpper(u)) > 4) return null;
  const logarithm = a.log(real.absolute(u));
  if (logarithm === null) return real.withRadius(real.ZERO, nearZeroClausen(u));
  const square = a.square(u);
  let power = a.multiply(u, square);
  let sum = a.subtract(u, a.multiply(u, logarithm));
  const ratio = bound.power(bound.divide(real.absoluteUpper(u), real.absoluteLower(TWO_PI)) ?? bound.one, 2);
  for (let k = 1; k < 20_000; k++) {
    kit.check();
    sum = a.add(sum, a.multiply(power, a.fromRational(Q.divide(Q.absolute(bernoulli(2 * k)), Q.rational(BigInt(2 * k) * factorial(2 * k + 1))))));
    power = a.multiply(power, square);
    const tail = geometricTail(bound.multiply(bound.multiply(bound.integer(4), real.absoluteUpper(u)), bound.power(ratio, k + 1)), ratio);
    if (tail !== null && bound.exponent(tail) < real.exponentOf(u) - precision) return real.withRadius(sum, tail);
  }
  return null;
}
/** |Cl_2(u)| <= |u| (1 + |log|u|| + u^2) <= 2 sqrt|u| for |u| <= 1/4, and below 2 always. */
function nearZeroClausen(u: Ball): Ball {
  const size = real.absoluteUpper(u);
  if (!bound.less(size, bound.twoTo(-2))) return bound.integer(2);
  return real.absoluteUpper(real.multiply(real.fromInteger(2), real.sqrt(size, 40) ?? real.ONE, 40));
}
/** Im Li_2(ix). */
function inverseTangentIntegral(kit: Kit<Ball>, x: Ball): Ball | null {
  const c = complexKit(kit.precision, kit.check);
  const value = polylog(c, complex.fromInteger(2), { re: real.ZERO, im: x });
  return value && value.im;
}

/** Debye: n! zeta(n+1) n/x^n - n sum over j of n!/(n-j)! x^-j Li_(j+1)(e^-x); near 0 the Bernoulli series, |x| < 2 pi. */
function debye(kit: Kit<Ball>, n: number, x: Ball): Ball | null {
  const { a, precision } = kit;
  if (n < 1 || n > 60) return null;
  const size = real.absoluteUpper(x);
  if (bound.less(size, bound.integer(4))) {
    const ratio = bound.divide(size, real.absoluteLower(TWO_PI));
    if (ratio === null) return null;
    let power = a.one;
    let sum = a.zero;
    for (let k = 0; k < 20_000; k++) {
      kit.check();
      const c = Q.multiply(Q.rational(n, n + k), Q.divide(bernoulli(k), Q.rational(factorial(k))));
      if (c.num !== 0n) sum = a.add(sum, a.multiply(power, a.fromRational(c)));
      power = a.multiply(power, x);
      const tail = geometricTail(bound.multiply(bound.integer(4), bound.power(ratio, k + 1)), ratio);
      if (k > 1 && tail !== null && bound.exponent(tail) < -precision) return real.withRadius(sum, tail);
    }
    return null;
  }
  if (!real.isPositive(x)) return null;
  const decay = a.exp(a.negate(x));
  const inverse = a.divide(a.one, x);
  if (decay === null || inverse === null) return null;
  let total = a.multiply(a.multiply(real.zeta(n + 1, precision), a.fromInteger(BigInt(n) * factorial(n))), a.powerInteger(inverse, n) ?? a.zero);
  for (let j = 0; j <= n; j++) {
    kit.check();
    const li = polylogSum(kit, a.fromInteger(j + 1), decay);
    if (li === null) return null;
    total = a.subtract(total, a.multiply(a.multiply(li, a.fromRational(Q.rational(BigInt(n) * factorial(n), factorial(n - j)))), a.powerInteger(inverse, j) ?? a.one));
  }
  return total;
}

const integer = (x: Ball | undefined): number | null => (x ? exactInteger(x) : null);

export const polylogAlgorithms: Readonly<Record<string, Algorithm>> = {
  polylog: { real: (kit, [s, x]) => (s && x ? polylog(kit, s, x) : null), complex: (kit, [s, x]) => (s && x ? polylog(kit, s, x) : null) },
  clausen: { real: (kit, [t]) => (t ? clausen(kit, t) : null) },
  inverseTangentIntegral: {
    real: (kit, [x]) => (x ? inverseTangentIntegral(kit, x) : null),
    // (Li_2(iz) - Li_2(-iz))/(2i), analytic off the imaginary axis beyond i and -i.
    complex: (kit, [z]) => {
      if (!z) return null;
      const two = complex.fromInteger(2);
      const turned: ComplexBall = { re: real.negate(z.im), im: z.re };
      const [up, down] = [polylog(kit, two, turned), polylog(kit, two, complex.negate(turned))];
      return up && down && kit.a.divide(kit.a.subtract(up, down), { re: real.ZERO, im: two.re });
    },
  },
  debye: {
    real: (kit, [n, x]) => {
      const order = integer(n);
      return x && order !== null ? debye(kit, order, x) : null;
    },
  },
};
