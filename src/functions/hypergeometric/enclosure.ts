/** Rigorous enclosures of pFq, Kummer's U and the parabolic cylinder function: sums with proven tails after the linear transformations of DLMF 15.8, 13.2. */
import { Q } from '../../expression/index.ts';
import { type Ball, real } from '../../rigorous/index.ts';
import { bound, exactRational, isRational, type Kit, type Parameter, toSet } from '../enclosure/kit.ts';
import { hypergeometricSum } from '../enclosure/series.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { digamma, gamma, reciprocalGamma } from '../gamma/enclosure.ts';
import { factorial } from '../sequences.ts';

const q = Q.rational;
const plus = <T>(kit: Kit<T>, ...values: readonly Parameter<T>[]): Parameter<T> =>
  values.reduce<Parameter<T>>((sum, v) => (isRational(sum) && isRational(v) ? Q.add(sum, v) : { set: kit.a.add(toSet(kit, sum), toSet(kit, v)) }), Q.ZERO);
const minus = <T>(kit: Kit<T>, p: Parameter<T>): Parameter<T> => (isRational(p) ? Q.negate(p) : { set: kit.a.negate(p.set) });
const integerOf = <T>(p: Parameter<T>): number | null => (isRational(p) && Q.isInteger(p) && Q.compare(Q.absolute(p), q(10_000)) <= 0 ? Number(p.num) : null);
const isPole = <T>(p: Parameter<T>): boolean => {
  const n = integerOf(p);
  return n !== null && n <= 0;
};
/** z^p, principal. */
const raised = <T>(kit: Kit<T>, z: T, p: Parameter<T>): T | null => {
  const n = integerOf(p);
  if (n !== null) return kit.a.powerInteger(z, n);
  return isRational(p) ? kit.a.powerRational(z, p) : kit.a.power(z, p.set);
};
const product = <T>(kit: Kit<T>, ...values: readonly (T | null)[]): T | null => {
  let result: T = kit.a.one;
  for (const value of values) {
    if (value === null) return null;
    result = kit.a.multiply(result, value);
  }
  return result;
};
const g = <T>(kit: Kit<T>, p: Parameter<T>): T | null => gamma(kit, toSet(kit, p));
const rg = <T>(kit: Kit<T>, p: Parameter<T>): T | null => reciprocalGamma(kit, toSet(kit, p));
const psi = <T>(kit: Kit<T>, p: Parameter<T>): T | null => digamma(kit, toSet(kit, p));

/**
 * sum over k of w_k (h + d_k) with w_(k+1) = w_k z prod(top_i + k)/((k+1)(k+m+1)), d_0 = 0, d_(k+1) = d_k + sum of 1/(top_i + k) - 1/(k+1) - 1/(k+m+1).
 * Tail from n on: |w_n| (|h+d_n|/(1-C) + D C/(1-C)^2), C a bound of later ratios, D of later increments.
 */
function logarithmicSum<T>(kit: Kit<T>, tops: readonly Parameter<T>[], m: number, z: T, h: T): T | null {
  const { a, precision } = kit;
  let weight = a.divide(a.one, a.fromInteger(factorial(m)));
  let shift = h;
  let sum = a.zero;
  const size = kit.size(z);
  for (let k = 0; k < 50_000 && weight !== null; k++) {
    kit.check();
    const term = a.multiply(weight, shift);
    if (bound.exponent(kit.size(term)) < Math.max(bound.exponent(kit.size(sum)), bound.exponent(kit.size(weight))) - precision || k % 32 === 31) {
      const tail = logarithmicTail(kit, tops, m, size, weight, shift, k);
      if (tail !== null && bound.exponent(tail) < Math.max(bound.exponent(kit.size(sum)) - precision, -4 * precision)) return kit.inflate(sum, tail);
    }
    sum = a.add(sum, term);
    let next = a.divide(a.multiply(weight, z), a.fromInteger(BigInt(k + 1) * BigInt(k + m + 1)));
    let change = a.fromRational(Q.negate(Q.add(q(1, k + 1), q(1, k + m + 1))));
    for (const p of tops) {
      const value = a.add(toSet(kit, p), a.fromInteger(k));
      const inverse = a.divide(a.one, value);
      if (inverse === null || next === null) return null;
      next = a.multiply(next, value);
      change = a.add(change, inverse);
    }
    weight = next;
    shift = a.add(shift, change);
  }
  return null;
}
function logarithmicTail<T>(kit: Kit<T>, tops: readonly Parameter<T>[], m: number, size: Ball, weight: T, shift: T, n: number): Ball | null {
  const { a } = kit;
  let ratio = size;
  let increment = bound.add(bound.rational(q(1, n + 1)), bound.rational(q(1, n + m + 1)));
  const bottoms = [1, m + 1];
  for (const [i, b] of bottoms.entries()) {
    const top = tops[i];
    const least = bound.integer(n + b);
    if (top === undefined) {
      ratio = bound.divide(ratio, least) ?? ratio;
      continue;
    }
    const value = a.add(toSet(kit, top), a.fromInteger(n));
    const inverse = bound.divide(bound.one, kit.least(value));
    const factor = bound.divide(kit.size(a.subtract(toSet(kit, top), a.fromInteger(b))), least);
    if (inverse === null || factor === null || !real.isPositive(kit.realPart(value))) return null;
    ratio = bound.multiply(ratio, bound.add(bound.one, factor));
    increment = bound.add(increment, inverse);
  }
  const rest = real.lowerEnd(real.subtract(real.ONE, ratio, 64));
  if (!bound.less(bound.twoTo(-10), rest)) return null;
  const first = bound.divide(kit.size(shift), real.absoluteLower(rest));
  const second = bound.divide(bound.multiply(increment, ratio), real.absoluteLower(real.square(rest, 64)));
  return first && second && bound.multiply(kit.size(weight), bound.add(first, second));
}

/** 2F1 near 1 by DLMF 15.8.4, and 15.8.10 where c - a - b is an integer m >= 0 (15.8.1 turns m < 0 round). */
function gaussNearOne<T>(kit: Kit<T>, p1: Parameter<T>, p2: Parameter<T>, c: Parameter<T>, v: T): T | null {
  const { a } = kit;
  const s = plus(kit, c, minus(kit, p1), minus(kit, p2));
  const ca = plus(kit, c, minus(kit, p1));
  const cb = plus(kit, c, minus(kit, p2));
  const m = integerOf(s);
  if (m === null) {
    const first = hypergeometricSum(kit, [p1, p2], [plus(kit, Q.ONE, minus(kit, s))], v);
    const second = hypergeometricSum(kit, [ca, cb], [plus(kit, Q.ONE, s)], v);
    const left = product(kit, g(kit, c), g(kit, s), rg(kit, ca), rg(kit, cb), first);
    const right = product(kit, g(kit, c), g(kit, minus(kit, s)), rg(kit, p1), rg(kit, p2), raised(kit, v, s), second);
    return left === null || right === null ? null : a.add(left, right);
  }
  if (m < 0) return product(kit, a.powerInteger(v, m), gaussNearOne(kit, ca, cb, c, v));
  if (isPole(p1) || isPole(p2)) return null;
  const am = plus(kit, p1, q(m));
  const bm = plus(kit, p2, q(m));
  const logarithm = a.log(v);
  const [pa, pb] = [psi(kit, am), psi(kit, bm)];
  if (logarithm === null || pa === null || pb === null) return null;
  // log v + psi(a+m) + psi(b+m) - psi(1) - psi(m+1).
  let h = a.add(logarithm, a.add(pa, pb));
  h = a.add(h, a.multiply(a.fromInteger(2), kit.fromReal(real.eulerGamma(kit.precision))));
  for (let j = 1; j <= m; j++) h = a.subtract(h, a.fromRational(q(1, j)));
  const sum = logarithmicSum(kit, [am, bm], m, v, h);
  const main = product(kit, g(kit, c), rg(kit, p1), rg(kit, p2), a.powerInteger(v, m), sum);
  if (main === null) return null;
  const signed = m % 2 === 0 ? a.negate(main) : main;
  if (m === 0) return signed;
  let finite = a.zero;
  let term: T = a.one;
  for (let k = 0; k < m; k++) {
    kit.check();
    finite = a.add(finite, term);
    const next = a.multiply(a.multiply(term, v), a.multiply(a.add(toSet(kit, p1), a.fromInteger(k)), a.add(toSet(kit, p2), a.fromInteger(k))));
    if (k + 1 < m) term = a.divide(next, a.fromInteger((k + 1) * (1 - m + k))) ?? a.zero;
  }
  const lead = product(kit, a.fromInteger(factorial(m - 1)), g(kit, c), rg(kit, am), rg(kit, bm), finite);
  return lead === null ? null : a.add(lead, signed);
}

function gauss<T>(kit: Kit<T>, p1: Parameter<T>, p2: Parameter<T>, c: Parameter<T>, z: T): T | null {
  const { a } = kit;
  if (isPole(p1) || isPole(p2) || bound.less(kit.size(z), bound.rational(q(5, 8)))) return hypergeometricSum(kit, [p1, p2], [c], z);
  const v = a.subtract(a.one, z);
  // Pfaff: (1-z)^-a F(a, c-b; c; z/(z-1)) for Re z < 1/2 (DLMF 15.8.1).
  if (real.toDouble(real.midpoint(kit.realPart(z))) < 0.5) {
    const power = raised(kit, v, minus(kit, p1));
    const image = a.divide(a.negate(z), v);
    const cb = plus(kit, c, minus(kit, p2));
    if (image === null || power === null) return null;
    const inner = bound.less(kit.size(image), bound.rational(q(5, 8))) || isPole(cb) ? hypergeometricSum(kit, [p1, cb], [c], image) : gaussBetween(kit, p1, cb, c, image, a.divide(a.one, v));
    return product(kit, power, inner);
  }
  return gaussBetween(kit, p1, p2, c, z, v);
}
/** In terms of v = 1 - z where that is small, else the plain sum up to 15/16. */
function gaussBetween<T>(kit: Kit<T>, p1: Parameter<T>, p2: Parameter<T>, c: Parameter<T>, z: T, v: T | null): T | null {
  if (v !== null && bound.less(kit.size(v), bound.rational(q(5, 8)))) {
    const value = gaussNearOne(kit, p1, p2, c, v);
    if (value !== null) return value;
  }
  return bound.less(kit.size(z), bound.rational(q(15, 16))) ? hypergeometricSum(kit, [p1, p2], [c], z) : null;
}

function pFq<T>(kit: Kit<T>, p: number, tops: readonly Parameter<T>[], bottoms: readonly Parameter<T>[], z: T): T | null {
  const { a } = kit;
  const [first, second] = tops;
  const [bottom] = bottoms;
  const terminates = tops.some(isPole);
  if (p === 2 && bottoms.length === 1 && first && second && bottom) return gauss(kit, first, second, bottom, z);
  if (p === 1 && bottoms.length === 1 && first && bottom && !terminates && real.isNegative(kit.realPart(z))) {
    // Kummer's transformation 13.2.39 keeps the terms of one sign.
    return product(kit, a.exp(z), hypergeometricSum(kit, [plus(kit, bottom, minus(kit, first))], [bottom], a.negate(z)));
  }
  if (p > bottoms.length && !terminates && !bound.less(kit.size(z), bound.rational(q(15, 16)))) return null;
  if (bound.exponent(kit.size(z)) > 15) return terminates ? hypergeometricSum(kit, tops, bottoms, z) : null;
  return hypergeometricSum(kit, tops, bottoms, z);
}

/** U(a,b,x): DLMF 13.2.42 for b no integer, 13.2.9 for b = 1, 2, ..., 13.2.40 below, 13.2.7 where it is a polynomial. */
function kummerU<T>(kit: Kit<T>, p: Parameter<T>, b: Parameter<T>, x: T): T | null {
  const { a } = kit;
  const n = integerOf(p);
  if (n !== null && n <= 0) {
    let rising: T = a.one;
    for (let j = 0; j < -n; j++) rising = a.multiply(rising, a.add(toSet(kit, b), a.fromInteger(j)));
    const sum = isPole(b) ? null : hypergeometricSum(kit, [p], [b], x);
    if (sum !== null) return n % 2 === 0 ? a.multiply(rising, sum) : a.negate(a.multiply(rising, sum));
  }
  const whole = integerOf(b);
  const shifted = plus(kit, p, minus(kit, b), Q.ONE);
  if (whole === null) {
    const first = product(kit, g(kit, plus(kit, Q.ONE, minus(kit, b))), rg(kit, shifted), hypergeometricSum(kit, [p], [b], x));
    const second = product(kit, g(kit, plus(kit, b, q(-1))), rg(kit, p), raised(kit, x, plus(kit, Q.ONE, minus(kit, b))), hypergeometricSum(kit, [shifted], [plus(kit, q(2), minus(kit, b))], x));
    return first === null || second === null ? null : a.add(first, second);
  }
  if (whole < 1) return product(kit, raised(kit, x, plus(kit, Q.ONE, minus(kit, b))), kummerU(kit, shifted, q(2 - whole), x));
  const m = whole - 1;
  const logarithm = a.log(x);
  const value = isPole(p) ? null : psi(kit, p);
  if (logarithm === null || value === null) return null;
  let h = a.add(a.add(logarithm, value), a.multiply(a.fromInteger(2), kit.fromReal(real.eulerGamma(kit.precision))));
  for (let j = 1; j <= m; j++) h = a.subtract(h, a.fromRational(q(1, j)));
  const main = product(kit, rg(kit, plus(kit, p, q(-m))), logarithmicSum(kit, [p], m, x, h));
  if (main === null) return null;
  const signed = m % 2 === 0 ? a.negate(main) : main;
  let finite = a.zero;
  for (let k = 1; k <= m; k++) {
    kit.check();
    let rising: T = a.one;
    for (let j = 0; j < m - k; j++) rising = a.multiply(rising, a.add(toSet(kit, plus(kit, Q.ONE, minus(kit, p))), a.fromInteger(k + j)));
    const power = a.powerInteger(x, -k);
    if (power === null) return null;
    finite = a.add(finite, a.multiply(a.multiply(rising, power), a.fromRational(Q.rational(factorial(k - 1), factorial(m - k)))));
  }
  const lead = m === 0 ? a.zero : product(kit, rg(kit, p), finite);
  return lead === null ? null : a.add(lead, signed);
}

/** D_p by even and odd parts (DLMF 12.2.6, 12.4.1, 12.7.12). */
function parabolicD<T>(kit: Kit<T>, p: Parameter<T>, x: T): T | null {
  const { a } = kit;
  const half = (v: Parameter<T>): Parameter<T> => (isRational(v) ? Q.multiply(v, Q.HALF) : { set: a.divideInteger(v.set, 2) });
  const z = a.divideInteger(a.square(x), 2);
  if (bound.exponent(kit.size(z)) > 14) return null;
  const up = half(plus(kit, Q.ONE, minus(kit, p)));
  const down = half(minus(kit, p));
  const pi = real.pi(kit.precision + 8);
  const even = product(kit, kit.fromReal(real.sqrt(pi, kit.precision) ?? real.ONE), rg(kit, up), hypergeometricSum(kit, [down], [Q.HALF], z));
  const odd = product(kit, kit.fromReal(real.sqrt(real.scaleByPowerOfTwo(pi, 1), kit.precision) ?? real.ONE), x, rg(kit, down), hypergeometricSum(kit, [up], [q(3, 2)], z));
  const scale = raised(kit, a.fromInteger(2), half(p));
  const decay = a.exp(a.negate(a.divideInteger(z, 2)));
  return even === null || odd === null ? null : product(kit, scale, decay, a.subtract(even, odd));
}

const realParameter = (x: Ball): Parameter<Ball> => exactRational(x) ?? { set: x };

/** One algorithm on parameters for both kinds of sets. */
function withParameters(f: <T>(kit: Kit<T>, parameters: readonly Parameter<T>[], x: T) => T | null): Algorithm {
  return {
    real: (kit, args) => {
      const x = args[args.length - 1];
      return x ? f(kit, args.slice(0, -1).map(realParameter), x) : null;
    },
    complex: (kit, args) => {
      const z = args[args.length - 1];
      const parameters = args.slice(0, -1).map((arg) => {
        const exact = arg.im.mid === 0n && arg.im.rad === 0n ? exactRational(arg.re) : null;
        return exact ?? { set: arg };
      });
      return z ? f(kit, parameters, z) : null;
    },
  };
}

export const hypergeometricAlgorithms: Readonly<Record<string, Algorithm>> = {
  hypergeometric: withParameters((kit, parameters, x) => {
    const [pCount, qCount, ...rest] = parameters;
    const p = pCount ? integerOf(pCount) : null;
    const bottoms = qCount ? integerOf(qCount) : null;
    return p === null || bottoms === null || rest.length !== p + bottoms ? null : pFq(kit, p, rest.slice(0, p), rest.slice(p), x);
  }),
  kummerU: withParameters((kit, [p, b], x) => (p && b ? (kit.isReal && !real.isPositive(kit.realPart(x)) ? null : kummerU(kit, p, b, x)) : null)),
  parabolicD: withParameters((kit, [p], x) => (p ? parabolicD(kit, p, x) : null)),
};
