/** Rigorous enclosures of the gamma family, from Euler-Maclaurin summation (DLMF 2.10.1) with the remainder bound by the periodic Bernoulli function: |B_2M(t)|/(2M)! <= 4/(2 pi)^2M. */
import { Q, type Rational } from '../../expression/index.ts';
import { type Ball, real } from '../../rigorous/index.ts';
import { bound, exactInteger, isRational, type Kit, type Parameter, parameterOf, toSet } from '../enclosure/kit.ts';
import { asymptoticSum, hypergeometricSum } from '../enclosure/series.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { bernoulli, factorial } from '../sequences.ts';

/** A shift r such that Re z + r is large enough for 2^-precision; null beyond reach. */
function shiftFor<T>(kit: Kit<T>, z: T): number | null {
  const wanted = Math.ceil(0.17 * kit.precision) + 4;
  const low = real.lowerEnd(kit.realPart(z));
  const have = real.toDouble(low);
  if (have >= wanted + 1) return 0;
  if (!(have > -20_000)) return null;
  return Math.ceil(wanted - have) + 1;
}

/** The remainder after M terms for f(t) = log(z+t) (order 0) and its derivatives: 4 (2M+order-2)!/(2 pi)^2M (Re z)^(1-order-2M). */
function remainder<T>(kit: Kit<T>, z: T, M: number, order: number): Ball | null {
  const least = real.absoluteLower(kit.realPart(z));
  const scale = bound.divide(bound.integer(4n * factorial(2 * M + order - 2)), real.lowerEnd(real.powerInteger(TWO_PI, 2 * M, 40) ?? real.ONE));
  const power = real.powerInteger(least, 2 * M + order - 1, 40);
  return scale && power && bound.divide(scale, real.lowerEnd(power));
}
const TWO_PI = real.multiply(real.fromInteger(2), real.pi(64), 64);

/** sum over k = 1..M of B_2k (2k+order-2)!/(2k)! z^(1-order-2k) with M chosen for the precision, and the remainder. Re z must be positive. */
function stirlingSum<T>(kit: Kit<T>, z: T, order: number): T | null {
  const { a, precision } = kit;
  const inverse = a.divide(a.one, z);
  if (inverse === null || !real.isPositive(kit.realPart(z))) return null;
  const square = a.square(inverse);
  let power = a.powerInteger(inverse, order + 1);
  if (power === null) return null;
  let sum = a.zero;
  const target = order === 0 ? -precision : bound.exponent(kit.size(power)) - precision;
  let last: Ball | null = null;
  for (let k = 1; k < 4 * precision + 40; k++) {
    kit.check();
    const b = bernoulli(2 * k);
    const c = Q.multiply(b, Q.rational(factorial(2 * k + order - 2), factorial(2 * k)));
    sum = a.add(sum, divideRational(kit, power, c));
    const rest = remainder(kit, z, k, order);
    if (rest === null) return null;
    if (bound.exponent(rest) < target) return kit.inflate(sum, rest);
    if (last !== null && !bound.less(rest, last)) return null;
    last = rest;
    power = a.multiply(power, square);
  }
  return null;
}
const divideRational = <T>(kit: Kit<T>, x: T, c: Rational): T => kit.a.divide(kit.a.multiply(x, kit.a.fromInteger(c.num)), kit.a.fromInteger(c.den)) ?? kit.a.zero;

/** log Gamma at Re z large, principal on the right half-plane: (z-1/2) log z - z + log(2pi)/2 + sum. */
function stirling<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const sum = stirlingSum(kit, z, 0);
  const logarithm = a.log(z);
  if (sum === null || logarithm === null) return null;
  const half = a.fromRational(Q.HALF);
  const main = a.subtract(a.multiply(a.subtract(z, half), logarithm), z);
  const constant = a.log(kit.fromReal(real.multiply(real.fromInteger(2), real.pi(kit.precision), kit.precision)));
  return constant === null ? null : a.add(a.add(main, a.divideInteger(constant, 2)), sum);
}

/** z (z+1) ... (z+r-1). */
function rising<T>(kit: Kit<T>, z: T, r: number): T {
  const { a } = kit;
  let result = a.one;
  for (let j = 0; j < r; j++) result = a.multiply(result, a.add(z, a.fromInteger(j)));
  return result;
}

/** log Gamma: real for positive z; on the plane cut along the negative axis. */
export function logGamma<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  if (kit.isReal && !real.isPositive(kit.realPart(z))) return null;
  const n = integerPart(kit, z, 2000);
  if (n !== null) return n > 0 ? a.log(a.fromInteger(factorial(n - 1))) : null;
  const r = shiftFor(kit, z);
  if (r === null) return null;
  const far = stirling(kit, a.add(z, a.fromInteger(r)));
  if (far === null) return null;
  if (kit.isReal) {
    const down = a.log(rising(kit, z, r));
    return down === null ? null : a.subtract(far, down);
  }
  let result: T = far;
  for (let j = 0; j < r; j++) {
    kit.check();
    const term = a.log(a.add(z, a.fromInteger(j)));
    if (term === null) return null;
    result = a.subtract(result, term);
  }
  return result;
}

const sinPi = <T>(kit: Kit<T>, z: T): T | null => kit.a.sin(kit.a.multiply(z, kit.fromReal(real.pi(kit.precision + 8))));

export function gamma<T>(kit: Kit<T>, z: T): T | null {
  const inverse = leftHalf(kit, z) ? reciprocalGamma(kit, z) : null;
  if (inverse !== null) return kit.a.divide(kit.a.one, inverse);
  return gammaRight(kit, z);
}
/** The integer that z is exactly; null otherwise. */
const integerPart = <T>(kit: Kit<T>, z: T, limit?: number): number | null => (kit.a.isZero(kit.fromReal(kit.imaginaryPart(z))) ? exactInteger(kit.realPart(z), limit) : null);

/** Re z below 1/2 at the middle. */
const leftHalf = <T>(kit: Kit<T>, z: T): boolean => real.toDouble(real.midpoint(kit.realPart(z))) < 0.5;

function gammaRight<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const n = integerPart(kit, z, 2000);
  if (n !== null && n > 0) return a.fromInteger(factorial(n - 1));
  const r = shiftFor(kit, z);
  const logarithm = r === null ? null : stirling(kit, a.add(z, a.fromInteger(r)));
  const far = logarithm === null ? null : a.exp(logarithm);
  return r === null || far === null ? null : a.divide(far, rising(kit, z, r));
}

/** 1/Gamma, entire; reflection 5.5.3 on the left. */
export function reciprocalGamma<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const n = integerPart(kit, z);
  if (n !== null && n <= 0) return a.zero;
  if (!leftHalf(kit, z)) {
    const value = gammaRight(kit, z);
    return value && a.divide(a.one, value);
  }
  const sine = sinPi(kit, z);
  const mirrored = gammaRight(kit, a.subtract(a.one, z));
  return sine === null || mirrored === null ? null : a.divide(a.multiply(sine, mirrored), kit.fromReal(real.pi(kit.precision)));
}

/** psi: log z - 1/(2z) - sum of B_2k/(2k) z^-2k after a shift; reflection 5.5.4 on the left. */
export function digamma<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  if (leftHalf(kit, z)) {
    const angle = a.multiply(z, kit.fromReal(real.pi(kit.precision + 8)));
    const [sine, cosine] = [a.sin(angle), a.cos(angle)];
    const cotangent = sine && cosine && a.divide(cosine, sine);
    const mirrored = digamma(kit, a.subtract(a.one, z));
    return cotangent && mirrored && a.subtract(mirrored, a.multiply(cotangent, kit.fromReal(real.pi(kit.precision))));
  }
  const r = shiftFor(kit, z);
  if (r === null) return null;
  const far = a.add(z, a.fromInteger(r));
  const sum = stirlingSum(kit, far, 1);
  const logarithm = a.log(far);
  const halfInverse = a.divide(a.fromRational(Q.HALF), far);
  if (sum === null || logarithm === null || halfInverse === null) return null;
  let result = a.subtract(a.subtract(logarithm, halfInverse), sum);
  for (let j = 0; j < r; j++) {
    kit.check();
    const term = a.divide(a.one, a.add(z, a.fromInteger(j)));
    if (term === null) return null;
    result = a.subtract(result, term);
  }
  return result;
}

/** psi^(n), n >= 1, by (-1)^(n+1) psi^(n)(z) = sum of n!/(z+j)^(n+1) with Euler-Maclaurin; upward recurrence reaches every z off the poles. */
function polygamma<T>(kit: Kit<T>, order: number, z: T): T | null {
  const { a } = kit;
  if (order === 0) return digamma(kit, z);
  if (order < 0 || order > 400) return null;
  const r = shiftFor(kit, a.subtract(z, a.fromInteger(order)));
  if (r === null) return null;
  const far = a.add(z, a.fromInteger(r));
  const sum = stirlingSum(kit, far, order + 1);
  const inverse = a.divide(a.one, far);
  const lead = inverse && a.powerInteger(inverse, order);
  if (sum === null || inverse === null || lead === null) return null;
  // (n-1)!/z^n + n!/(2 z^(n+1)) + sum of B_2k (2k+n-1)!/(2k)! z^(-2k-n).
  let total = a.add(a.multiply(lead, a.fromInteger(factorial(order - 1))), a.multiply(a.multiply(lead, inverse), a.fromRational(Q.rational(factorial(order), 2))));
  total = a.add(total, sum);
  const scale = a.fromInteger(factorial(order));
  for (let j = 0; j < r; j++) {
    kit.check();
    const term = a.powerInteger(a.add(z, a.fromInteger(j)), -(order + 1));
    if (term === null) return null;
    total = a.add(total, a.multiply(scale, term));
  }
  return order % 2 === 1 ? total : a.negate(total);
}

/** gamma(a,x) = x^a e^-x sum of x^k/(a)_(k+1) (DLMF 8.11.4). */
function lowerGamma<T>(kit: Kit<T>, s: Parameter<T>, x: T): T | null {
  const { a } = kit;
  const set = toSet(kit, s);
  const up = isRational(s) ? Q.add(s, Q.ONE) : { set: a.add(s.set, a.one) };
  const sum = hypergeometricSum(kit, [Q.ONE], [up], x);
  const power = isRational(s) ? a.powerRational(x, s) : a.power(x, s.set);
  const decay = a.exp(a.negate(x));
  const scaled = sum && power && decay && a.divide(a.multiply(a.multiply(power, decay), sum), set);
  return scaled ?? null;
}

/** Gamma(a,x): on x > 0 the asymptotic series with DLMF 8.11(i) where it is good enough; else Gamma(a) - gamma(a,x), non-positive integers a through E_1, other a with Re a <= 0 by upward recurrence. */
export function upperGamma<T>(kit: Kit<T>, s: Parameter<T>, x: T): T | null {
  const { a } = kit;
  const set = toSet(kit, s);
  if (kit.isReal && !real.isPositive(kit.realPart(x))) return null;
  const logarithm = isRational(s) ? a.one : a.log(x);
  const inverse = a.divide(a.one, x);
  const power = isRational(s) ? a.powerRational(x, Q.subtract(s, Q.ONE)) : logarithm === null ? null : a.exp(a.multiply(a.subtract(set, a.one), logarithm));
  const decay = a.exp(a.negate(x));
  if (power === null || decay === null || inverse === null) return null;
  const low = real.toDouble(kit.realPart(set));
  if (kit.isReal) {
    const least = Math.max(1, Math.ceil(real.toDouble(real.upperEnd(kit.realPart(set)))));
    const step = (term: T, k: number): T => a.multiply(a.multiply(term, inverse), a.subtract(set, a.fromInteger(k + 1)));
    const far = least < 10_000 ? asymptoticSum(kit, a.one, step, least) : null;
    if (far !== null) return a.multiply(a.multiply(power, decay), far);
  }
  if (bound.exponent(kit.size(x)) > 15) return null;
  if (real.isPositive(kit.realPart(set))) {
    const whole = gamma(kit, set);
    const lower = lowerGamma(kit, s, x);
    return whole === null || lower === null ? null : a.subtract(whole, lower);
  }
  const n = isRational(s) && s.den === 1n ? Number(s.num) : null;
  if (n !== null && n >= -2000) return integerUpperGamma(kit, -n, x);
  if (a.containsZero(set) || low < -500) return null;
  // Gamma(a,x) = (Gamma(a+1,x) - x^a e^-x)/a (DLMF 8.8.2).
  const above = upperGamma(kit, isRational(s) ? Q.add(s, Q.ONE) : { set: a.add(set, a.one) }, x);
  return above === null ? null : a.divide(a.subtract(above, a.multiply(a.multiply(power, x), decay)), set);
}
/** Gamma(-m, x), m >= 0, from Gamma(0, x) = E_1(x). */
function integerUpperGamma<T>(kit: Kit<T>, m: number, x: T): T | null {
  const { a } = kit;
  const logarithm = a.log(x);
  // E_1(x) = -gamma - log x + x 2F2(1,1;2,2;-x) (DLMF 6.6.2).
  const sum = hypergeometricSum(kit, [Q.ONE, Q.ONE], [Q.rational(2), Q.rational(2)], a.negate(x));
  if (logarithm === null || sum === null) return null;
  let value: T = a.subtract(a.multiply(x, sum), a.add(kit.fromReal(real.eulerGamma(kit.precision)), logarithm));
  const decay = a.exp(a.negate(x));
  let power: T = a.one;
  if (decay === null) return null;
  for (let j = 1; j <= m; j++) {
    kit.check();
    const next = a.divide(power, x);
    if (next === null) return null;
    power = next;
    value = a.divideInteger(a.subtract(a.multiply(power, decay), value), j);
  }
  return value;
}

/** The algorithm of f(s, x) on both kinds of sets; a real exact s stays a rational. */
const withParameter = (f: <T>(kit: Kit<T>, s: Parameter<T>, x: T) => T | null): Algorithm => ({
  real: (kit, [s, x]) => (s && x ? f(kit, parameterOf(s), x) : null),
  complex: (kit, [s, x]) => {
    if (!s || !x) return null;
    const exact = s.im.mid === 0n && s.im.rad === 0n ? parameterOf(s.re) : null;
    return f(kit, exact && isRational(exact) ? exact : { set: s }, x);
  },
});
const one =
  (f: <T>(kit: Kit<T>, z: T) => T | null) =>
  <T>(kit: Kit<T>, [z]: readonly T[]): T | null =>
    z === undefined ? null : f(kit, z);
const generic = (f: <T>(kit: Kit<T>, z: T) => T | null): Algorithm => ({ real: one(f), complex: one(f) });

export const gammaAlgorithms: Readonly<Record<string, Algorithm>> = {
  gamma: generic(gamma),
  logGamma: generic(logGamma),
  digamma: generic(digamma),
  polygamma: {
    real: (kit, [n, x]) => {
      const order = n && exactInteger(n);
      return x && order !== null && order !== undefined ? polygamma(kit, order, x) : null;
    },
    complex: (kit, [n, z]) => {
      const order = n && kit.a.isZero({ re: n.im, im: n.im }) ? exactInteger(n.re) : null;
      return z && order !== null ? polygamma(kit, order, z) : null;
    },
  },
  upperGamma: withParameter(upperGamma),
  lowerGamma: withParameter((kit, s, x) => {
    if (kit.isReal && (!real.isPositive(kit.realPart(toSet(kit, s))) || !real.isNonNegative(kit.realPart(x)))) return null;
    return kit.a.isZero(x) ? kit.a.zero : lowerGamma(kit, s, x);
  }),
};
