/**
 * Rigorous enclosures of zeta functions, their derivatives, Stieltjes constants and Bernoulli numbers.
 * zeta(s,a) by Euler-Maclaurin (DLMF 25.11.8 and 2.10.1): sum of (a+k)^-s below N, (a+N)^(1-s)/(s-1), (a+N)^-s/2, and B_2k/(2k)! (s)_(2k-1) (a+N)^(1-s-2k);
 * remainder at most 4 |(s)_2M|/(2pi)^2M e^(|Im s| pi/2) times the integral of |a+N+t|^(-Re s-2M).
 */
import { Q, type Rational } from '../../expression/index.ts';
import { type Ball, type ComplexBall, real } from '../../rigorous/index.ts';
import { bound, exactInteger, type Kit, realKit } from '../enclosure/kit.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { gamma } from '../gamma/enclosure.ts';
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

export const TWO_PI = real.multiply(real.fromInteger(2), real.pi(64), 64);

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
    kit.check();
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
    kit.check();
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
    kit.check();
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
    const value = zeta(realKit(kit.precision, kit.check), kit.realPart(s));
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
export function zetaDerivative<T>(kit: Kit<T>, n: number, s: T, z: T): T | null {
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


const imaginaryFree = (z: ComplexBall | undefined): number | null => (z && z.im.mid === 0n && z.im.rad === 0n ? exactInteger(z.re) : null);
const integer = (x: Ball | undefined): number | null => (x ? exactInteger(x) : null);

export const zetaAlgorithms: Readonly<Record<string, Algorithm>> = {
  zeta: { real: (kit, [s]) => (s ? zeta(kit, s) : null), complex: (kit, [s]) => (s ? zeta(kit, s) : null) },
  zetaDerivative: {
    real: (kit, [n, s]) => {
      const order = integer(n);
      return s && order !== null ? zetaDerivative(kit, order, s, kit.a.one) : null;
    },
    complex: (kit, [n, s]) => {
      const order = imaginaryFree(n);
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
      const order = imaginaryFree(n);
      return x && order !== null ? bernoulliPolynomial(kit, order, x) : null;
    },
  },
};
