/**
 * Rigorous enclosures of elliptic integrals and functions.
 * Complete integrals by the arithmetic-geometric mean (DLMF 19.8.1, 19.8.5, 19.8.6); symmetric integrals by Carlson's duplication (19.26), whose remaining integral lies between the values at the least and the largest argument.
 */
import { Q, type Rational } from '../../expression/index.ts';
import { type Ball, real } from '../../rigorous/index.ts';
import { inverseOfIncreasing } from '../enclosure/inverse.ts';
import { bound, type Kit } from '../enclosure/kit.ts';
import { hypergeometricSum } from '../enclosure/series.ts';
import type { Algorithm } from '../enclosure/wrap.ts';

const q = Q.rational;

/** [agm(1, b), sum of 2^(n-1) c_n^2] for b > 0; the mean lies between the two sequences, the tail of the sum below its next term (c_(n+1) <= c_n/2). */
function agmSteps(kit: Kit<Ball>, b: Ball): readonly [Ball, Ball] | null {
  const { a, precision } = kit;
  if (!real.isPositive(b)) return null;
  let [upper, lower] = [a.one, b];
  // c_0^2 = 1 - b^2, weight 2^-1.
  let sum = a.divideInteger(a.subtract(a.one, a.square(b)), 2);
  for (let n = 0; n < 200; n++) {
    kit.check();
    const mean = a.divideInteger(a.add(upper, lower), 2);
    const geometric = a.sqrt(a.multiply(upper, lower));
    if (geometric === null) return null;
    const c = a.divideInteger(a.subtract(upper, lower), 2);
    const term = real.scaleByPowerOfTwo(a.square(c), n);
    sum = a.add(sum, term);
    [upper, lower] = [mean, geometric];
    const gap = real.exponentOf(a.subtract(upper, lower));
    if (gap < real.exponentOf(upper) - precision || gap <= errorExponent(upper) + 2) {
      // Later terms: c^2 falls by four at least while the weight doubles.
      return [real.union(upper, lower, precision), real.withRadius(sum, real.absoluteUpper(term))];
    }
  }
  return null;
}
const errorExponent = (x: Ball): number => (x.rad === 0n ? -Infinity : real.exponentOf(real.radius(x)));

function completeK(kit: Kit<Ball>, m: Ball): Ball | null {
  const { a } = kit;
  const root = a.sqrt(a.subtract(a.one, m));
  const steps = root && agmSteps(kit, root);
  return steps && a.divide(real.scaleByPowerOfTwo(real.pi(kit.precision), -1), steps[0]);
}
function completeE(kit: Kit<Ball>, m: Ball): Ball | null {
  const { a } = kit;
  if (a.isZero(a.subtract(m, a.one))) return a.one;
  const root = a.sqrt(a.subtract(a.one, m));
  const steps = root && agmSteps(kit, root);
  const k = steps && a.divide(real.scaleByPowerOfTwo(real.pi(kit.precision), -1), steps[0]);
  return steps && k && a.multiply(k, a.subtract(a.one, steps[1]));
}
/** Off the real line by 2F1 for |m| < 1 (DLMF 19.5.1, 19.5.2). */
const completeComplex =
  (first: Rational): NonNullable<Algorithm['complex']> =>
  (kit, [m]) => {
    if (m === undefined || !bound.less(kit.size(m), bound.rational(q(15, 16)))) return null;
    const sum = hypergeometricSum(kit, [first, Q.HALF], [Q.ONE], m);
    return sum && kit.a.multiply(sum, kit.fromReal(real.scaleByPowerOfTwo(real.pi(kit.precision), -1)));
  };

/** The value of a function of three numbers that falls in each, between its values at equal arguments: x^power at the least and the largest. */
function between(kit: Kit<Ball>, values: readonly Ball[], power: Rational): Ball | null {
  const ends = values.map((v) => kit.a.powerRational(v, power));
  let all: Ball | null = null;
  for (const end of ends) {
    if (end === null) return null;
    all = all === null ? end : real.union(all, end, kit.precision);
  }
  return all;
}

/** R_F and R_D by duplication. Arguments positive (one of x, y may be zero at the start). */
function duplicate(kit: Kit<Ball>, start: readonly [Ball, Ball, Ball], kind: 'F' | 'D'): Ball | null {
  const { a, precision } = kit;
  let [x, y, z] = start;
  let sum = a.zero;
  let scale = 0;
  for (let n = 0; n < precision + 60; n++) {
    kit.check();
    const spread = real.exponentOf(real.subtract(real.upperEnd(real.maximum(real.maximum(x, y), z)), real.lowerEnd(real.minimum(real.minimum(x, y), z)), 64));
    if (spread < real.exponentOf(z) - precision - 2 || (n > 8 && spread <= Math.max(errorExponent(x), errorExponent(y), errorExponent(z)) + 3)) break;
    const roots = [a.sqrt(x), a.sqrt(y), a.sqrt(z)];
    const [rx, ry, rz] = roots;
    if (!rx || !ry || !rz) return null;
    const lambda = a.add(a.add(a.multiply(rx, ry), a.multiply(ry, rz)), a.multiply(rz, rx));
    if (kind === 'D') {
      const term = a.divide(a.fromInteger(3), a.multiply(rz, a.add(z, lambda)));
      if (term === null) return null;
      sum = a.add(sum, real.scaleByPowerOfTwo(term, scale));
      scale -= 2;
    }
    [x, y, z] = [x, y, z].map((v) => real.scaleByPowerOfTwo(a.add(v, lambda), -2)) as [Ball, Ball, Ball];
  }
  const rest = between(kit, [x, y, z], kind === 'F' ? q(-1, 2) : q(-3, 2));
  return rest && (kind === 'F' ? rest : a.add(sum, real.scaleByPowerOfTwo(rest, scale)));
}

/** F or E of amplitude phi, |phi| reduced by the period: F(phi + n pi) = F(phi) + 2nK (DLMF 19.2.10). */
function incomplete(kit: Kit<Ball>, phi: Ball, m: Ball, kind: 'F' | 'E'): Ball | null {
  const { a } = kit;
  const pi = real.pi(kit.precision + 8);
  const turns = a.divide(phi, pi);
  if (turns === null) return null;
  const n = real.nearestInteger(real.midpoint(turns));
  const u = n === 0n ? phi : a.subtract(phi, a.multiply(pi, a.fromInteger(n)));
  const [sine, cosine] = real.sinCos(u, kit.precision);
  const x = a.square(cosine);
  const y = a.subtract(a.one, a.multiply(m, a.square(sine)));
  if (!real.isPositive(y) || !real.isNonNegative(real.upperEnd(x))) return null;
  const clipped = real.isNonNegative(x) ? x : real.union(real.ZERO, real.upperEnd(x), kit.precision);
  const first = duplicate(kit, [clipped, y, a.one], 'F');
  if (first === null) return null;
  let value = a.multiply(sine, first);
  if (kind === 'E') {
    const second = duplicate(kit, [clipped, y, a.one], 'D');
    if (second === null) return null;
    // E = s R_F - (m/3) s^3 R_D (DLMF 19.25.9).
    value = a.subtract(value, a.divideInteger(a.multiply(a.multiply(m, a.multiply(sine, a.square(sine))), second), 3));
  }
  if (n === 0n) return value;
  const whole = kind === 'F' ? completeK(kit, m) : completeE(kit, m);
  return whole && a.add(value, a.multiply(whole, a.fromInteger(2n * n)));
}

/** Pi(n|m) = K + (n/3) R_J(0, 1-m, 1, 1-n), n < 1 (DLMF 19.25.2), R_J by duplication with R_C in closed form (19.6.15 region: 19.26.18, Carlson 1995). */
function completePi(kit: Kit<Ball>, n: Ball, m: Ball): Ball | null {
  const { a, precision } = kit;
  const first = completeK(kit, m);
  const start = [a.zero, a.subtract(a.one, m), a.one, a.subtract(a.one, n)];
  let [x, y, z, p] = start as [Ball, Ball, Ball, Ball];
  if (first === null || !real.isPositive(y) || !real.isPositive(p)) return null;
  let sum = a.zero;
  let scale = 0;
  for (let i = 0; i < precision + 60; i++) {
    kit.check();
    const all = [x, y, z, p];
    const high = all.reduce((u, v) => real.maximum(u, v));
    const low = all.reduce((u, v) => real.minimum(u, v));
    const spread = real.exponentOf(real.subtract(real.upperEnd(high), real.lowerEnd(low), 64));
    if (spread < real.exponentOf(p) - precision - 2 || (i > 8 && spread <= Math.max(...all.map(errorExponent)) + 3)) break;
    const roots = all.map((v) => a.sqrt(v));
    const [rx, ry, rz, rp] = roots;
    if (!rx || !ry || !rz || !rp) return null;
    const lambda = a.add(a.add(a.multiply(rx, ry), a.multiply(ry, rz)), a.multiply(rz, rx));
    // R_J(x,y,z,p) = R_J(quarter)/4 + 6 R_C(1, 1+e)/d, d = (rp+rx)(rp+ry)(rp+rz), e = (p-x)(p-y)(p-z)/d^2.
    const d = a.multiply(a.multiply(a.add(rp, rx), a.add(rp, ry)), a.add(rp, rz));
    const e = a.divide(a.multiply(a.multiply(a.subtract(p, x), a.subtract(p, y)), a.subtract(p, z)), a.square(d));
    const c = e && elementaryC(kit, e);
    const term = c && a.divide(a.multiply(a.fromInteger(6), c), d);
    if (!term) return null;
    sum = a.add(sum, real.scaleByPowerOfTwo(term, scale));
    scale -= 2;
    [x, y, z, p] = all.map((v) => real.scaleByPowerOfTwo(a.add(v, lambda), -2)) as [Ball, Ball, Ball, Ball];
  }
  const rest = between(kit, [x, y, z, p], q(-3, 2));
  if (rest === null) return null;
  const rj = a.add(sum, real.scaleByPowerOfTwo(rest, scale));
  return a.add(first, a.divideInteger(a.multiply(n, rj), 3));
}
/** R_C(1, 1+e) = arctan(sqrt e)/sqrt e, e > -1: sum of (-e)^k/(2k+1) where |e| <= 1/2, closed forms elsewhere. */
function elementaryC(kit: Kit<Ball>, e: Ball): Ball | null {
  const { a } = kit;
  if (bound.less(real.absoluteUpper(e), bound.rational(q(1, 2)))) return hypergeometricSum(kit, [Q.HALF, Q.ONE], [q(3, 2)], a.negate(e));
  if (real.isPositive(e)) {
    const root = a.sqrt(e);
    const angle = root && a.atan(root);
    return angle && root && a.divide(angle, root);
  }
  const root = a.sqrt(a.negate(e));
  const area = root && a.atanh(root);
  return area && root && a.divide(area, root);
}

/** Amplitude by inverting F for fixed m = k^2 <= 1. */
function amplitude(kit: Kit<Ball>, u: Ball, m: Ball): Ball | null {
  if (!real.isPositive(kit.a.subtract(kit.a.one, m)) || !real.isNonNegative(m)) return null;
  const size = Math.abs(real.toDouble(u));
  if (!(size < 2000)) return null;
  const steep = (k: Kit<Ball>, phi: Ball): Ball | null => {
    const sine = k.a.sin(phi);
    const root = sine && k.a.sqrt(k.a.subtract(k.a.one, k.a.multiply(m, k.a.square(sine))));
    return root && k.a.divide(k.a.one, root);
  };
  // phi <= F(phi) for 0 <= m < 1, so the amplitude lies within u and 0.
  const reach = Math.ceil(size) + 1;
  return inverseOfIncreasing(kit, (k, phi) => incomplete(k, phi, m, 'F'), steep, u, [-reach, reach]);
}
const jacobi = (kind: 'sn' | 'cn' | 'dn'): Algorithm => ({
  real: (kit, [u, k]) => {
    if (!u || !k) return null;
    const { a } = kit;
    const m = a.square(k);
    if (a.isZero(u)) return kind === 'sn' ? a.zero : a.one;
    const phi = amplitude(kit, u, m);
    if (phi === null) return null;
    const [sine, cosine] = real.sinCos(phi, kit.precision);
    if (kind === 'sn') return sine;
    if (kind === 'cn') return cosine;
    return a.sqrt(a.subtract(a.one, a.multiply(m, a.square(sine))));
  },
});

export const ellipticAlgorithms: Readonly<Record<string, Algorithm>> = {
  ellipticKParameter: { real: (kit, [m]) => (m ? completeK(kit, m) : null), complex: completeComplex(Q.HALF) },
  ellipticEParameter: { real: (kit, [m]) => (m ? completeE(kit, m) : null), complex: completeComplex(q(-1, 2)) },
  ellipticFParameter: { real: (kit, [phi, m]) => (phi && m ? incomplete(kit, phi, m, 'F') : null) },
  ellipticEIncompleteParameter: { real: (kit, [phi, m]) => (phi && m ? incomplete(kit, phi, m, 'E') : null) },
  ellipticPiParameter: { real: (kit, [n, m]) => (n && m ? completePi(kit, n, m) : null) },
  jacobiAm: { real: (kit, [u, k]) => (u && k ? (kit.a.isZero(u) ? kit.a.zero : amplitude(kit, u, kit.a.square(k))) : null) },
  jacobiSn: jacobi('sn'),
  jacobiCn: jacobi('cn'),
  jacobiDn: jacobi('dn'),
};
