/**
 * Rigorous enclosures of Bessel and Struve functions. Power series with proven tails (precision rises with the digits that cancel);
 * for large real arguments the asymptotic series of DLMF 10.17.3, 10.17.4, 10.40.2, whose remainders are below the first omitted terms once enough terms are taken (10.17(iii), 10.40(ii)).
 */
import { Q, type Rational } from '../../expression/index.ts';
import { type Ball, real } from '../../rigorous/index.ts';
import { bound, isRational, type Kit, type Parameter, parameterOf, toSet } from '../enclosure/kit.ts';
import { asymptoticSum, geometricTail, hypergeometricSum } from '../enclosure/series.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { reciprocalGamma } from '../gamma/enclosure.ts';
import { factorial, harmonicNumber } from '../sequences.ts';

const q = Q.rational;
/** Power series with about |z| growing terms. */
const LARGEST = 30_000;
const tooLarge = <T>(kit: Kit<T>, z: T): boolean => bound.exponent(kit.size(z)) > 15 || real.toDouble(kit.size(z)) > LARGEST;

const plus = <T>(kit: Kit<T>, p: Parameter<T>, n: Rational): Parameter<T> => (isRational(p) ? Q.add(p, n) : { set: kit.a.add(p.set, kit.a.fromRational(n)) });
const negate = <T>(kit: Kit<T>, p: Parameter<T>): Parameter<T> => (isRational(p) ? Q.negate(p) : { set: kit.a.negate(p.set) });
export const integerOf = <T>(p: Parameter<T>): number | null => (isRational(p) && Q.isInteger(p) && Q.compare(Q.absolute(p), q(100_000)) <= 0 ? Number(p.num) : null);

/** z^p, principal. */
const raised = <T>(kit: Kit<T>, z: T, p: Parameter<T>): T | null => {
  const n = integerOf(p);
  if (n !== null) return kit.a.powerInteger(z, n);
  return isRational(p) ? kit.a.powerRational(z, p) : kit.a.power(z, p.set);
};

/** (z/2)^nu/Gamma(nu+1) 0F1(; nu+1; sign z^2/4): J (sign -1) or I (sign 1), DLMF 10.2.2 and 10.25.2. */
export function firstKind<T>(kit: Kit<T>, order: Parameter<T>, z: T, sign: 1 | -1): T | null {
  const { a } = kit;
  const n = integerOf(order);
  if (n !== null && n < 0) {
    const value = firstKind(kit, q(-n), z, sign);
    return value === null ? null : sign === -1 && n % 2 !== 0 ? a.negate(value) : value;
  }
  if (tooLarge(kit, z)) return null;
  const half = a.divideInteger(z, 2);
  const quarter = a.square(half);
  const up = plus(kit, order, Q.ONE);
  const power = raised(kit, half, order);
  const scale = reciprocalGamma(kit, toSet(kit, up));
  const sum = hypergeometricSum(kit, [], [up], sign === -1 ? a.negate(quarter) : quarter);
  return power === null || scale === null || sum === null ? null : a.multiply(a.multiply(power, scale), sum);
}

/** a_(k+1)/a_k z^-1 of DLMF 10.17.1. */
function hankelStep<T>(kit: Kit<T>, order: Parameter<T>, inverse: T): (term: T, k: number) => T {
  const { a } = kit;
  const fourSquare = isRational(order) ? a.fromRational(Q.multiply(q(4), Q.multiply(order, order))) : a.multiply(a.square(order.set), a.fromInteger(4));
  return (term, k) => {
    const odd = a.fromInteger(BigInt(2 * k + 1) ** 2n);
    return a.divideInteger(a.multiply(a.multiply(term, a.subtract(fourSquare, odd)), inverse), 8 * (k + 1));
  };
}
/** [P, Q] of DLMF 10.17.3 for real order and x > 0. */
function modulusPhase(kit: Kit<Ball>, order: Parameter<Ball>, x: Ball): readonly [Ball, Ball] | null {
  const { a } = kit;
  const inverse = a.divide(a.one, x);
  if (inverse === null || !real.isPositive(x)) return null;
  const step = hankelStep(kit, order, inverse);
  const size = Math.abs(real.toDouble(toSet(kit, order)));
  const least = Math.max(1, Math.ceil(size / 2 - 0.25));
  const two = (offset: number) => (term: Ball, k: number): Ball => a.negate(step(step(term, 2 * k + offset), 2 * k + 1 + offset));
  const first = asymptoticSum(kit, a.one, two(0), least);
  const second = asymptoticSum(kit, step(a.one, 0), two(1), least);
  return first === null || second === null ? null : [first, second];
}
/** J or Y at large x > 0. */
function oscillating(kit: Kit<Ball>, order: Parameter<Ball>, x: Ball, kind: 'J' | 'Y'): Ball | null {
  const { a } = kit;
  const parts = modulusPhase(kit, order, x);
  if (parts === null) return null;
  const pi = real.pi(kit.precision + Math.max(0, real.exponentOf(x)) + 8);
  const shift = isRational(order) ? a.multiply(pi, a.fromRational(Q.add(Q.multiply(order, Q.HALF), q(1, 4)))) : a.multiply(pi, a.add(a.divideInteger(order.set, 2), a.fromRational(q(1, 4))));
  const omega = real.subtract(x, shift, kit.precision + Math.max(0, real.exponentOf(x)) + 8);
  const [sine, cosine] = real.sinCos(omega, kit.precision);
  const amplitude = a.sqrt(a.divide(a.fromInteger(2), a.multiply(pi, x)) ?? a.zero);
  if (amplitude === null) return null;
  const wave = kind === 'J' ? a.subtract(a.multiply(cosine, parts[0]), a.multiply(sine, parts[1])) : a.add(a.multiply(sine, parts[0]), a.multiply(cosine, parts[1]));
  return a.multiply(amplitude, wave);
}

export function besselJ<T>(kit: Kit<T>, order: Parameter<T>, z: T): T | null {
  if (kit.isReal) {
    const far = oscillating(kit as unknown as Kit<Ball>, order as unknown as Parameter<Ball>, kit.realPart(z), 'J');
    if (far !== null) return kit.fromReal(far);
    const n = integerOf(order);
    if (n !== null && real.isNegative(kit.realPart(z))) {
      const value = besselJ(kit, order, kit.a.negate(z));
      return value === null ? null : n % 2 === 0 ? value : kit.a.negate(value);
    }
  }
  return firstKind(kit, order, z, -1);
}
export const besselI = <T>(kit: Kit<T>, order: Parameter<T>, z: T): T | null => firstKind(kit, order, z, 1);

/** sum over k of (H_k + H_(n+k)) (sign z^2/4)^k/(k!(n+k)!); the ratio of terms from k >= 1 on is at most 3|z^2/4|/((k+1)(n+k+1)). */
function harmonicSum<T>(kit: Kit<T>, n: number, quarter: T): T | null {
  const { a, precision } = kit;
  let power = a.divide(a.one, a.fromInteger(factorial(n)));
  let sum = a.zero;
  const size = kit.size(quarter);
  for (let k = 0; k < 100_000 && power !== null; k++) {
    kit.check();
    const weight = a.fromRational(Q.add(harmonicNumber(k), harmonicNumber(n + k)));
    const term = a.multiply(power, weight);
    if (k >= 1 && bound.exponent(kit.size(term)) < Math.max(bound.exponent(kit.size(sum)), bound.exponent(kit.size(power))) - precision) {
      const ratio = bound.divide(bound.multiply(bound.integer(3), size), bound.integer((k + 1) * (n + k + 1)));
      const tail = ratio && geometricTail(kit.size(term), ratio);
      if (tail) return kit.inflate(sum, tail);
    }
    sum = a.add(sum, term);
    power = a.divide(a.multiply(power, quarter), a.fromInteger(BigInt(k + 1) * BigInt(n + k + 1)));
  }
  return null;
}
/** sum over k < n of (n-k-1)!/k! w^k. */
function finiteSum<T>(kit: Kit<T>, n: number, w: T): T {
  const { a } = kit;
  let sum = a.zero;
  let power = a.one;
  for (let k = 0; k < n; k++) {
    kit.check();
    sum = a.add(sum, a.multiply(power, a.fromRational(Q.rational(factorial(n - k - 1), factorial(k)))));
    power = a.multiply(power, w);
  }
  return sum;
}

/** Y_n or K_n of integer order by DLMF 10.8.1, 10.31.1. */
function integerSecondKind<T>(kit: Kit<T>, n: number, z: T, kind: 'Y' | 'K'): T | null {
  const { a } = kit;
  const half = a.divideInteger(z, 2);
  const quarter = a.square(half);
  const w = kind === 'Y' ? a.negate(quarter) : quarter;
  const logarithm = a.log(half);
  // At z = 0, where the sum below would never see its terms grow small against it.
  if (logarithm === null) return null;
  const own = firstKind(kit, q(n), z, kind === 'Y' ? -1 : 1);
  const harmonic = harmonicSum(kit, n, w);
  const up = a.powerInteger(half, n);
  const down = a.powerInteger(half, -n);
  if (own === null || harmonic === null || up === null || down === null) return null;
  const finite = n === 0 ? a.zero : a.multiply(down, finiteSum(kit, n, a.negate(w)));
  const lead = a.multiply(a.add(logarithm, kit.fromReal(real.eulerGamma(kit.precision))), own);
  const tail = a.multiply(up, harmonic);
  if (kind === 'Y') return a.divide(a.subtract(a.subtract(a.add(lead, lead), finite), tail), kit.fromReal(real.pi(kit.precision)));
  const signed = (v: T): T => (n % 2 === 0 ? v : a.negate(v));
  return a.add(a.divideInteger(a.add(finite, signed(tail)), 2), a.negate(signed(lead)));
}
/** Other orders by DLMF 10.2.3, 10.27.4. */
function fractionalSecondKind<T>(kit: Kit<T>, order: Parameter<T>, z: T, kind: 'Y' | 'K'): T | null {
  const { a } = kit;
  const sign = kind === 'Y' ? -1 : 1;
  const up = firstKind(kit, order, z, sign);
  const down = firstKind(kit, negate(kit, order), z, sign);
  const pi = kit.fromReal(real.pi(kit.precision + 8));
  const angle = a.multiply(pi, toSet(kit, order));
  const [sine, cosine] = [a.sin(angle), a.cos(angle)];
  if (up === null || down === null || sine === null || cosine === null) return null;
  if (kind === 'Y') return a.divide(a.subtract(a.multiply(up, cosine), down), sine);
  return a.divide(a.multiply(a.divideInteger(pi, 2), a.subtract(down, up)), sine);
}
export function secondKind<T>(kit: Kit<T>, order: Parameter<T>, z: T, kind: 'Y' | 'K'): T | null {
  const n = integerOf(order);
  if (n === null) return fractionalSecondKind(kit, order, z, kind);
  const value = integerSecondKind(kit, Math.abs(n), z, kind);
  return value !== null && kind === 'Y' && n < 0 && n % 2 !== 0 ? kit.a.negate(value) : value;
}
function besselY<T>(kit: Kit<T>, order: Parameter<T>, z: T): T | null {
  if (kit.isReal) {
    if (!real.isPositive(kit.realPart(z))) return null;
    const far = oscillating(kit as unknown as Kit<Ball>, order as unknown as Parameter<Ball>, kit.realPart(z), 'Y');
    if (far !== null) return kit.fromReal(far);
  }
  return tooLarge(kit, z) ? null : secondKind(kit, order, z, 'Y');
}
export function besselK<T>(kit: Kit<T>, order: Parameter<T>, z: T): T | null {
  const { a } = kit;
  if (kit.isReal) {
    if (!real.isPositive(kit.realPart(z))) return null;
    const inverse = a.divide(a.one, z);
    const size = Math.abs(real.toDouble(kit.realPart(toSet(kit, order))));
    const sum = inverse === null ? null : asymptoticSum(kit, a.one, hankelStep(kit, order, inverse), Math.max(1, Math.ceil(size - 0.5)));
    const pi = kit.fromReal(real.pi(kit.precision));
    const amplitude = a.sqrt(a.divide(pi, a.add(z, z)) ?? a.zero);
    const decay = a.exp(a.negate(z));
    if (sum !== null && amplitude !== null && decay !== null) return a.multiply(a.multiply(amplitude, decay), sum);
  }
  return tooLarge(kit, z) ? null : secondKind(kit, order, z, 'K');
}

/** z^(mu+1) scale 1F2(1; 3/2, nu+3/2; sign z^2/4): DLMF 11.2.1, 11.2.2. */
function struve<T>(kit: Kit<T>, order: Parameter<T>, z: T, sign: 1 | -1): T | null {
  const { a } = kit;
  if (tooLarge(kit, z)) return null;
  const half = a.divideInteger(z, 2);
  const quarter = a.square(half);
  const up = plus(kit, order, q(3, 2));
  const power = raised(kit, half, plus(kit, order, Q.ONE));
  const scale = reciprocalGamma(kit, toSet(kit, up));
  const sum = hypergeometricSum(kit, [Q.ONE], [q(3, 2), up], sign === -1 ? a.negate(quarter) : quarter);
  const rootPi = a.sqrt(kit.fromReal(real.pi(kit.precision)));
  if (power === null || scale === null || sum === null || rootPi === null) return null;
  const product = a.multiply(a.multiply(power, scale), sum);
  return a.divide(a.add(product, product), rootPi);
}

type WithOrder = <T>(kit: Kit<T>, order: Parameter<T>, z: T) => T | null;
/** The order must be real; a complex ball's order counts as a parameter only where it is one. */
const ordered = (f: WithOrder): Algorithm => ({
  real: (kit, [nu, x]) => (nu && x ? f(kit, parameterOf(nu), x) : null),
  complex: (kit, [nu, z]) => {
    if (!nu || !z) return null;
    const exact = nu.im.mid === 0n && nu.im.rad === 0n ? parameterOf(nu.re) : null;
    return f(kit, exact && isRational(exact) ? exact : { set: nu }, z);
  },
});
export const besselAlgorithms: Readonly<Record<string, Algorithm>> = {
  besselJ: ordered(besselJ),
  besselY: ordered(besselY),
  besselI: ordered(besselI),
  besselK: ordered(besselK),
  struveH: ordered((kit, order, z) => struve(kit, order, z, -1)),
  struveL: ordered((kit, order, z) => struve(kit, order, z, 1)),
};
