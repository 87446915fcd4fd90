/**
 * Rigorous enclosures of zeta functions and polylogarithms.
 * zeta(s,a) by Euler-Maclaurin (DLMF 25.11.8 and 2.10.1): sum of (a+k)^-s below N, (a+N)^(1-s)/(s-1), (a+N)^-s/2, and B_2k/(2k)! (s)_(2k-1) (a+N)^(1-s-2k);
 * remainder at most 4 |(s)_2M|/(2pi)^2M e^(|Im s| pi/2) times the integral of |a+N+t|^(-Re s-2M).
 */
import { Q, type Rational } from '../../expression/index.ts';
import { type Ball, type ComplexBall, complex, real } from '../../rigorous/index.ts';
import { bound, complexKit, exactInteger, type Kit, realKit } from '../enclosure/kit.ts';
import { geometricTail } from '../enclosure/series.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { gamma, logGamma, reciprocalGamma } from '../gamma/enclosure.ts';
import { bernoulli, binomial, eulerNumber, factorial } from '../sequences.ts';

/** Truncated power series in the shift of s: coefficients 0..n. */
type Jet<T> = readonly T[];

function multiplyJets<T>(kit: Kit<T>, x: Jet<T>, y: Jet<T>): Jet<T> {
  const { a } = kit;
  return x.map((_, n) => {
    let sum = a.zero;
    for (let i = 0; i <= n; i++) sum = a.add(sum, a.multiply(x[i] ?? a.zero, y[n - i] ?? a.zero));
    return sum;
  });
}
const addJets = <T>(kit: Kit<T>, x: Jet<T>, y: Jet<T>): Jet<T> => x.map((v, i) => kit.a.add(v, y[i] ?? kit.a.zero));
const scaleJet = <T>(kit: Kit<T>, x: Jet<T>, c: T): Jet<T> => x.map((v) => kit.a.multiply(v, c));

/** base^-(s+e) = base^-s sum of (-log base)^n e^n/n!. */
function powerJet<T>(kit: Kit<T>, base: T, s: T, order: number): Jet<T> | null {
  const { a } = kit;
  const logarithm = a.log(base);
  if (logarithm === null) return null;
  const value = a.exp(a.negate(a.multiply(s, logarithm)));
  if (value === null) return null;
  const out: T[] = [value];
  for (let n = 1; n <= order; n++) out.push(a.divideInteger(a.negate(a.multiply(out[n - 1] ?? value, logarithm)), n));
  return out;
}

const TWO_PI = real.multiply(real.fromInteger(2), real.pi(64), 64);

/**
 * Taylor coefficients 0..order of zeta(s + e, z) in e (pole part left out: without (z+N)^(1-s)/(s-1) expanded at s = 1 the function is zeta(s,z) - 1/(s-1)).
 * Re z > 0 after the shift by N. Null where s is near 1 without being it, or out of reach.
 */
function hurwitzJet<T>(kit: Kit<T>, s: T, z: T, order: number, atPole: boolean): Jet<T> | null {
  const { a, precision } = kit;
  const sigma = real.toDouble(kit.realPart(s));
  const height = Math.abs(real.toDouble(kit.imaginaryPart(s)));
  const low = real.toDouble(real.lowerEnd(kit.realPart(z)));
  if (!(low > -5_000) || !(height < 2_000) || Math.abs(sigma) > 3_000) return null;
  const N = Math.max(0, Math.ceil(0.2 * precision + 0.8 * height + Math.max(0, -sigma) * 0.4 - low) + order + 6);
  if (N > 60_000) return null;
  let total: Jet<T> = Array.from({ length: order + 1 }, () => a.zero);
  for (let k = 0; k < N; k++) {
    const term = powerJet(kit, a.add(z, a.fromInteger(k)), s, order);
    if (term === null) return null;
    total = addJets(kit, total, term);
  }
  const w = a.add(z, a.fromInteger(N));
  if (!real.isPositive(kit.realPart(w))) return null;
  const power = powerJet(kit, w, s, order);
  const inverse = a.divide(a.one, w);
  if (power === null || inverse === null) return null;
  total = addJets(kit, total, scaleJet(kit, power, a.fromRational(Q.HALF)));
  const integral = atPole ? poleIntegral(kit, w, order) : regularIntegral(kit, scaleJet(kit, power, w), s, order);
  if (integral === null) return null;
  total = addJets(kit, total, integral);
  return bernoulliTail(kit, s, w, power, inverse, order, total);
}

/** w^(1-s-e)/(s-1+e). */
function regularIntegral<T>(kit: Kit<T>, top: Jet<T>, s: T, order: number): Jet<T> | null {
  const { a } = kit;
  const base = a.subtract(s, a.one);
  const inverse = a.divide(a.one, base);
  if (inverse === null) return null;
  const geometric: T[] = [inverse];
  for (let n = 1; n <= order; n++) geometric.push(a.negate(a.multiply(geometric[n - 1] ?? inverse, inverse)));
  return multiplyJets(kit, top, geometric);
}
/** (w^-e - 1)/e: the pole at s = 1 removed. */
function poleIntegral<T>(kit: Kit<T>, w: T, order: number): Jet<T> | null {
  const { a } = kit;
  const logarithm = a.log(w);
  if (logarithm === null) return null;
  let term: T = a.negate(logarithm);
  const out: T[] = [term];
  for (let n = 1; n <= order; n++) {
    term = a.divideInteger(a.negate(a.multiply(term, logarithm)), n + 1);
    out.push(term);
  }
  return out;
}

/** Adds B_2k/(2k)! (s+e)_(2k-1) w^(1-s-e-2k) for k = 1..M and the remainder. */
function bernoulliTail<T>(kit: Kit<T>, s: T, w: T, power: Jet<T>, inverse: T, order: number, start: Jet<T>): Jet<T> | null {
  const { a, precision } = kit;
  let total = start;
  // rising = (s+e)_(2k-1) w^-(2k-1) as a jet.
  const factor = (j: number): Jet<T> => Array.from({ length: order + 1 }, (_, i) => (i === 0 ? a.multiply(a.add(s, a.fromInteger(j)), inverse) : i === 1 ? inverse : a.zero));
  let rising = multiplyJets(kit, power, factor(0));
  const goal = bound.exponent(kit.size(total[0] ?? a.one)) - precision;
  let last: Ball | null = null;
  for (let k = 1; k < 4 * precision + 60; k++) {
    const c = Q.divide(bernoulli(2 * k), Q.rational(factorial(2 * k)));
    total = addJets(kit, total, scaleJet(kit, rising, a.fromRational(c)));
    const rest = remainderBound(kit, s, w, k, order);
    if (rest !== null && bound.exponent(rest) < goal) return total.map((v) => kit.inflate(v, rest));
    if (rest !== null && last !== null && !bound.less(rest, last)) {
      // The smallest remainder is reached: good for what it is; the caller raises N with the precision.
      return total.map((v) => kit.inflate(v, rest));
    }
    if (rest !== null) last = rest;
    rising = multiplyJets(kit, multiplyJets(kit, rising, factor(2 * k - 1)), factor(2 * k));
  }
  return null;
}

/**
 * For all s' with |s' - s| <= 1/2 (order 0: s itself): 4 |(s')_2M|/(2 pi)^2M * integral over t >= 0 of |(w+t)^(-s'-2M)|.
 * |(w+t)^-s'| = |w+t|^-Re s' e^(Im s' arg(w+t)), |arg| < pi/2, |w+t| >= Re w + t. Cauchy's estimate on the disc of radius 1/2 bounds the Taylor coefficients by 2^order times that.
 */
function remainderBound<T>(kit: Kit<T>, s: T, w: T, M: number, order: number): Ball | null {
  const reach = order === 0 ? real.ZERO : real.scaleByPowerOfTwo(real.ONE, -1);
  const sigma = real.subtract(real.lowerEnd(kit.realPart(s)), reach, 64);
  const decay = real.add(sigma, real.fromInteger(2 * M - 1), 64);
  if (!real.isPositive(decay)) return null;
  const least = real.absoluteLower(kit.realPart(w));
  let top = bound.integer(4);
  for (let j = 0; j < 2 * M; j++) top = bound.multiply(top, bound.add(kit.size(kit.a.add(s, kit.a.fromInteger(j))), reach));
  const angle = bound.multiply(bound.add(real.absoluteUpper(kit.imaginaryPart(s)), reach), bound.rational(Q.rational(11, 7)));
  const turn = bound.exponent(angle) === -Infinity ? bound.one : bound.exp(angle);
  const falling = real.power(real.fromEnds(least, least, 64), real.negate(real.lowerEnd(decay)), 64);
  const circle = real.powerInteger(TWO_PI, 2 * M, 64);
  if (turn === null || falling === null || circle === null) return null;
  // Where Re w < 1 the power of the largest decay would be larger; w is far to the right, so the smallest decay bounds it.
  if (!bound.less(real.ONE, least)) return null;
  const whole = bound.multiply(bound.multiply(top, turn), real.absoluteUpper(falling));
  const divided = bound.divide(whole, real.absoluteLower(real.multiply(circle, decay, 64)));
  return divided && (order === 0 ? divided : bound.multiply(divided, bound.power(bound.integer(2), order)));
}

export function hurwitzZeta<T>(kit: Kit<T>, s: T, z: T): T | null {
  const jet = hurwitzJet(kit, s, z, 0, false);
  return jet?.[0] ?? null;
}
export function zeta<T>(kit: Kit<T>, s: T): T | null {
  const { a } = kit;
  const onLine = real.exponentOf(kit.imaginaryPart(s)) === -Infinity;
  const n = onLine ? exactInteger(kit.realPart(s), 3000) : null;
  if (n !== null && n !== 1) return kit.fromReal(real.zeta(n, kit.precision));
  if (onLine && !kit.isReal) {
    const value = zeta(realKit(kit.precision), kit.realPart(s));
    return value === null ? null : kit.fromReal(value);
  }
  const re = real.toDouble(kit.realPart(s));
  if (re > 3000) return kit.isReal ? largeZeta(kit, s) : null;
  if (re < -1) return reflected(kit, s);
  return hurwitzZeta(kit, s, a.one);
}
/** 1 < zeta(s) < 1 + 2^-s + 2 2^-s for s > 2... used far to the right: |zeta(s) - 1| <= 2^(1-s). */
function largeZeta<T>(kit: Kit<T>, s: T): T {
  const low = real.floorOf(real.lowerEnd(kit.realPart(s))) ?? 3000n;
  return kit.inflate(kit.a.one, bound.twoTo(1 - Math.min(Number(low), 1_000_000)));
}
/** DLMF 25.4.1 at 1 - s: zeta(s) = 2 (2pi)^(s-1) sin(pi s/2) Gamma(1-s) zeta(1-s). */
function reflected<T>(kit: Kit<T>, s: T): T | null {
  const { a } = kit;
  const pi = kit.fromReal(real.pi(kit.precision + 8));
  const mirrored = a.subtract(a.one, s);
  const other = zeta(kit, mirrored);
  const g = gamma(kit, mirrored);
  const sine = a.sin(a.divideInteger(a.multiply(pi, s), 2));
  const logarithm = a.log(a.add(pi, pi));
  const power = logarithm === null ? null : a.exp(a.negate(a.multiply(mirrored, logarithm)));
  if (other === null || g === null || sine === null || power === null) return null;
  const product = a.multiply(a.multiply(power, sine), a.multiply(g, other));
  return a.add(product, product);
}

/** n! times the Taylor coefficient. */
function zetaDerivative<T>(kit: Kit<T>, n: number, s: T, z: T): T | null {
  if (n < 0 || n > 120) return null;
  const jet = hurwitzJet(kit, s, z, n, false);
  const value = jet?.[n];
  return value === undefined ? null : kit.a.multiply(value, kit.a.fromInteger(factorial(n)));
}
/** gamma_n = (-1)^n n! times the coefficient of (s-1)^n in zeta(s) - 1/(s-1). */
function stieltjes(kit: Kit<Ball>, n: number): Ball | null {
  if (n < 0 || n > 120) return null;
  const jet = hurwitzJet(kit, kit.a.one, kit.a.one, n, true);
  const value = jet?.[n];
  if (value === undefined) return null;
  return kit.a.multiply(value, kit.a.fromInteger(n % 2 === 0 ? factorial(n) : -factorial(n)));
}

/** log G(x) = (x-1) log Gamma(x) - zeta'(-1,x) + zeta'(-1) (Vardi 1988; follows from DLMF 5.17.4 and 25.11). */
function logBarnesG<T>(kit: Kit<T>, x: T): T | null {
  const { a } = kit;
  if (kit.isReal && !real.isPositive(kit.realPart(x))) return null;
  const n = kit.isReal ? exactInteger(kit.realPart(x), 400) : null;
  if (n !== null) return a.log(a.fromInteger(superfactorial(n)));
  const logarithm = logGamma(kit, x);
  const own = zetaDerivative(kit, 1, a.fromInteger(-1), x);
  const one = zetaDerivative(kit, 1, a.fromInteger(-1), a.one);
  if (logarithm === null || own === null || one === null) return null;
  return a.add(a.subtract(a.multiply(a.subtract(x, a.one), logarithm), own), one);
}
/** G(n), the product of the factorials below n - 1. */
function superfactorial(n: number): bigint {
  let product = 1n;
  for (let j = 2; j < n - 1; j++) product *= factorial(j);
  return product;
}
/** Entire: downward by G(x) = G(x+1)/Gamma(x). */
function barnesG<T>(kit: Kit<T>, x: T): T | null {
  const { a } = kit;
  if (real.isPositive(kit.realPart(x))) {
    const value = logBarnesG(kit, x);
    return value === null ? null : a.exp(value);
  }
  if (real.toDouble(kit.realPart(x)) < -60) return null;
  const above = barnesG(kit, a.add(x, a.one));
  const inverse = reciprocalGamma(kit, x);
  return above === null || inverse === null ? null : a.multiply(above, inverse);
}

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
    const c = complexKit(kit.precision);
    if (!isInteger) {
      const far = jonquiere(c, kit.realPart(s), value);
      return far === null ? null : kit.fromReal(far);
    }
    const z = complex.fromReal(value);
    const order_ = complex.fromReal(kit.realPart(s));
    const far = polylogComplex(c, order_, z, order, negativeLog(c, value));
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
  const real_ = realKit(precision);
  const t = real_.a.subtract(real.ONE, s);
  const g = gamma(real_, t);
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
  const c = complexKit(kit.precision);
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
    const li = polylogSum(kit, a.fromInteger(j + 1), decay);
    if (li === null) return null;
    total = a.subtract(total, a.multiply(a.multiply(li, a.fromRational(Q.rational(BigInt(n) * factorial(n), factorial(n - j)))), a.powerInteger(inverse, j) ?? a.one));
  }
  return total;
}

const zeros = (z: ComplexBall | undefined): number | null => (z && z.im.mid === 0n && z.im.rad === 0n ? exactInteger(z.re) : null);
const integer = (x: Ball | undefined): number | null => (x ? exactInteger(x) : null);

export const zetaAlgorithms: Readonly<Record<string, Algorithm>> = {
  zeta: { real: (kit, [s]) => (s ? zeta(kit, s) : null), complex: (kit, [s]) => (s ? zeta(kit, s) : null) },
  zetaDerivative: {
    real: (kit, [n, s]) => {
      const order = integer(n);
      return s && order !== null ? zetaDerivative(kit, order, s, kit.a.one) : null;
    },
    complex: (kit, [n, s]) => {
      const order = zeros(n);
      return s && order !== null ? zetaDerivative(kit, order, s, kit.a.one) : null;
    },
  },
  hurwitzZeta: {
    real: (kit, [s, z]) => (s && z && real.isPositive(z) ? hurwitzZeta(kit, s, z) : null),
    complex: (kit, [s, z]) => (s && z ? hurwitzZeta(kit, s, z) : null),
  },
  stieltjes: {
    real: (kit, [n]) => {
      const order = integer(n);
      return order === null ? null : stieltjes(kit, order);
    },
  },
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
/** B_n(x) by Horner's rule on exact coefficients (DLMF 24.2.5). */
function bernoulliPolynomial<T>(kit: Kit<T>, n: number, x: T): T | null {
  if (n < 0 || n > 1000) return null;
  const { a } = kit;
  let sum = a.zero;
  for (let k = 0; k <= n; k++) sum = a.add(a.multiply(sum, x), a.fromRational(Q.multiply(Q.rational(binomial(n, k)), bernoulli(k))));
  return sum;
}
const numberOf =
  (f: (n: number) => Rational): Algorithm['real'] =>
  (kit, [n]) => {
    const order = integer(n);
    return order === null || order < 0 || order > 2000 ? null : kit.a.fromRational(f(order));
  };
export const numberAlgorithms: Readonly<Record<string, Algorithm>> = {
  bernoulliNumber: { real: numberOf(bernoulli) },
  eulerNumber: { real: numberOf((n) => Q.rational(eulerNumber(n))) },
  bernoulliPolynomial: {
    real: (kit, [n, x]) => {
      const order = integer(n);
      return x && order !== null ? bernoulliPolynomial(kit, order, x) : null;
    },
    complex: (kit, [n, x]) => {
      const order = zeros(n);
      return x && order !== null ? bernoulliPolynomial(kit, order, x) : null;
    },
  },
};
export const barnesAlgorithms: Readonly<Record<string, Algorithm>> = {
  logBarnesG: { real: (kit, [x]) => (x ? logBarnesG(kit, x) : null), complex: (kit, [x]) => (x ? logBarnesG(kit, x) : null) },
  barnesG: { real: (kit, [x]) => (x ? barnesG(kit, x) : null), complex: (kit, [x]) => (x ? barnesG(kit, x) : null) },
};
