/** Rigorous enclosures of the exponential, trigonometric, error and Fresnel integrals. Series with proven tails; asymptotic series where a theorem bounds the remainder (DLMF 6.12(i), 6.12(ii), 7.12(i), 8.20(i)). */
import { Q } from '../../expression/index.ts';
import { type Ball, real } from '../../rigorous/index.ts';
import { inverseOfIncreasing } from '../enclosure/inverse.ts';
import { bound, isRational, type Kit, type Parameter, parameterOf, toSet } from '../enclosure/kit.ts';
import { asymptoticSum, hypergeometricSum } from '../enclosure/series.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { upperGamma } from '../gamma/enclosure.ts';

const q = Q.rational;
/** Series of growing terms need about e |z| of them; beyond this they are left alone. */
const LARGEST_SERIES_ARGUMENT = 30_000;
const tooLarge = <T>(kit: Kit<T>, z: T): boolean => bound.exponent(kit.size(z)) > 15 || real.toDouble(kit.size(z)) > LARGEST_SERIES_ARGUMENT;
const rootPi = <T>(kit: Kit<T>): T => kit.fromReal(real.sqrt(real.pi(kit.precision + 8), kit.precision + 4) ?? real.ONE);
const euler = <T>(kit: Kit<T>): T => kit.fromReal(real.eulerGamma(kit.precision));
const halfPi = <T>(kit: Kit<T>): T => kit.fromReal(real.scaleByPowerOfTwo(real.pi(kit.precision), -1));

/** |ph z| <= pi/4 for all of z. */
function inQuarter<T>(kit: Kit<T>, z: T): boolean {
  const re = kit.realPart(z);
  return real.isPositive(re) && !bound.less(real.lowerEnd(real.absoluteLower(re)), real.absoluteUpper(kit.imaginaryPart(z)));
}
/** |ph z| <= pi/2. */
const inHalf = <T>(kit: Kit<T>, z: T): boolean => real.isPositive(kit.realPart(z));

/** erf z = 2z/sqrt(pi) e^(-z^2) 1F1(1; 3/2; z^2), all terms positive on the real line (DLMF 7.6.2). */
function erf<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  if (a.isZero(z)) return z;
  if (bound.exponent(kit.size(z)) > 3 && !real.containsZero(kit.realPart(z))) {
    const right = real.isPositive(kit.realPart(z)) ? z : a.negate(z);
    const tail = kit.isReal ? erfc(kit, right) : erfcFar(kit, right);
    if (tail !== null) return real.isPositive(kit.realPart(z)) ? a.subtract(a.one, tail) : a.subtract(tail, a.one);
  }
  const square = a.square(z);
  if (tooLarge(kit, square)) return null;
  const sum = hypergeometricSum(kit, [Q.ONE], [q(3, 2)], square);
  const decay = a.exp(a.negate(square));
  if (sum === null || decay === null) return null;
  return a.divide(a.multiply(a.multiply(a.add(z, z), decay), sum), rootPi(kit));
}

/** e^(-z^2)/(z sqrt(pi)) sum of (-1)^k (1/2)_k z^-2k, remainder below the first omitted term for |ph z| <= pi/4 (DLMF 7.12(i)). */
function erfcFar<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  if (!inQuarter(kit, z)) return null;
  const inverseSquare = a.divide(a.one, a.square(z));
  if (inverseSquare === null) return null;
  const sum = asymptoticSum(kit, a.one, (term, k) => a.negate(a.divideInteger(a.multiply(a.multiply(term, inverseSquare), a.fromInteger(2 * k + 1)), 2)), 1);
  const decay = a.exp(a.negate(a.square(z)));
  return sum === null || decay === null ? null : a.divide(a.multiply(decay, sum), a.multiply(z, rootPi(kit)));
}
function erfc<T>(kit: Kit<T>, z: T): T | null {
  const far = erfcFar(kit, z);
  if (far !== null) return far;
  const { a } = kit;
  const square = a.square(z);
  if (tooLarge(kit, square)) {
    if (!kit.isReal || !real.isNegative(kit.realPart(z))) return null;
    const mirrored = erfcFar(kit, a.negate(z));
    return mirrored && a.subtract(a.fromInteger(2), mirrored);
  }
  const sum = hypergeometricSum(kit, [Q.ONE], [q(3, 2)], square);
  const decay = a.exp(a.negate(square));
  if (sum === null || decay === null) return null;
  const value = a.divide(a.multiply(a.multiply(a.add(z, z), decay), sum), rootPi(kit));
  return value === null ? null : a.subtract(a.one, value);
}
function erfi<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const square = a.square(z);
  if (tooLarge(kit, square)) return null;
  const sum = hypergeometricSum(kit, [Q.HALF], [q(3, 2)], square);
  return sum === null ? null : a.divide(a.multiply(a.add(z, z), sum), rootPi(kit));
}
/** e^(-z^2) times the integral of e^(t^2): z e^(-z^2) 1F1(1/2; 3/2; z^2). */
function dawson<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const square = a.square(z);
  if (tooLarge(kit, square)) return null;
  const sum = hypergeometricSum(kit, [Q.HALF], [q(3, 2)], square);
  const decay = a.exp(a.negate(square));
  return sum === null || decay === null ? null : a.multiply(a.multiply(z, decay), sum);
}
function erfcx<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const tail = erfc(kit, z);
  const growth = a.exp(a.square(z));
  return tail === null || growth === null ? null : a.multiply(tail, growth);
}

/** C (odd = 0) and S (odd = 1): z 1F2(1/4 + odd/2; 1/2 + odd, 5/4 + odd/2; -(pi z^2/2)^2/4) with leading powers (DLMF 7.6.4, 7.6.6). */
function fresnel<T>(kit: Kit<T>, z: T, odd: 0 | 1): T | null {
  const { a } = kit;
  const phase = a.multiply(halfPi(kit), a.square(z));
  if (tooLarge(kit, phase)) return null;
  const far = kit.isReal ? fresnelFar(kit, z, phase, odd) : null;
  if (far !== null) return far;
  const argument = a.divideInteger(a.negate(a.square(phase)), 4);
  const sum = odd === 0 ? hypergeometricSum(kit, [q(1, 4)], [q(1, 2), q(5, 4)], argument) : hypergeometricSum(kit, [q(3, 4)], [q(3, 2), q(7, 4)], argument);
  if (sum === null) return null;
  return odd === 0 ? a.multiply(z, sum) : a.divideInteger(a.multiply(a.multiply(z, phase), sum), 3);
}
/** DLMF 7.5.3, 7.5.4 with 7.12.2, 7.12.3: remainders of f and g below the first omitted terms for real z (7.12(ii)). */
function fresnelFar<T>(kit: Kit<T>, z: T, phase: T, odd: 0 | 1): T | null {
  const { a } = kit;
  const x = kit.realPart(z);
  if (!real.isPositive(x)) {
    if (!real.isNegative(x)) return null;
    const mirrored = fresnelFar(kit, a.negate(z), phase, odd);
    return mirrored === null ? null : a.negate(mirrored);
  }
  const inverse = a.divide(a.one, phase);
  const lead = a.divide(a.one, a.multiply(a.add(halfPi(kit), halfPi(kit)), z));
  if (inverse === null || lead === null) return null;
  const inverseSquare = a.square(inverse);
  const step = (shift: number) => (term: T, k: number): T => {
    const m = 2 * k + shift;
    return a.negate(a.divideInteger(a.multiply(a.multiply(term, inverseSquare), a.fromInteger((2 * m + 1) * (2 * m + 3))), 4));
  };
  const f = asymptoticSum(kit, a.one, step(0), 1);
  const g = asymptoticSum(kit, a.divideInteger(inverse, 2), step(1), 1);
  const [sine, cosine] = [a.sin(phase), a.cos(phase)];
  if (f === null || g === null || sine === null || cosine === null) return null;
  const half = a.fromRational(Q.HALF);
  const wave = odd === 0 ? a.subtract(a.multiply(f, sine), a.multiply(g, cosine)) : a.negate(a.add(a.multiply(f, cosine), a.multiply(g, sine)));
  return a.add(half, a.multiply(lead, wave));
}

const Q2 = q(2);
/** Ein(z) = z 2F2(1,1;2,2;-z) (DLMF 6.6.4). */
function ein<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  if (tooLarge(kit, z)) return null;
  const sum = hypergeometricSum(kit, [Q.ONE, Q.ONE], [Q2, Q2], a.negate(z));
  return sum === null ? null : a.multiply(z, sum);
}
/** E_1: asymptotic with remainder below the first omitted term for |ph z| <= pi/2 (DLMF 6.12(i)), else Ein(z) - log z - gamma. */
function e1<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const inverse = a.divide(a.one, z);
  if (inHalf(kit, z) && inverse !== null) {
    const sum = asymptoticSum(kit, inverse, (term, k) => a.negate(a.multiply(a.multiply(term, inverse), a.fromInteger(k + 1))), 1);
    const decay = a.exp(a.negate(z));
    if (sum !== null && decay !== null) return a.multiply(sum, decay);
  }
  const entire = ein(kit, z);
  const logarithm = a.log(z);
  return entire === null || logarithm === null ? null : a.subtract(entire, a.add(logarithm, euler(kit)));
}
/** Ei on the real line; off it by gamma + log z - Ein(-z), analytic on the plane cut along the negative axis. */
function ei<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const x = kit.realPart(z);
  if (kit.isReal && real.isNegative(x)) {
    const value = e1(kit, a.negate(z));
    return value === null ? null : a.negate(value);
  }
  const entire = ein(kit, a.negate(z));
  const logarithm = a.log(z);
  return entire === null || logarithm === null ? null : a.subtract(a.add(euler(kit), logarithm), entire);
}

/** f and g of DLMF 6.12.3, 6.12.4; remainders below the first omitted terms for |ph z| <= pi/4 (6.12(ii)). */
function auxiliary<T>(kit: Kit<T>, z: T): readonly [T, T] | null {
  const { a } = kit;
  const inverse = inQuarter(kit, z) ? a.divide(a.one, z) : null;
  if (inverse === null) return null;
  const inverseSquare = a.square(inverse);
  const step = (shift: number) => (term: T, k: number): T => a.negate(a.multiply(a.multiply(term, inverseSquare), a.fromInteger((2 * k + 1 + shift) * (2 * k + 2 + shift))));
  const f = asymptoticSum(kit, inverse, step(0), 1);
  const g = asymptoticSum(kit, inverseSquare, step(1), 1);
  return f === null || g === null ? null : [f, g];
}
function si<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  const far = auxiliary(kit, z);
  const [sine, cosine] = [a.sin(z), a.cos(z)];
  if (far !== null && sine !== null && cosine !== null) return a.subtract(halfPi(kit), a.add(a.multiply(far[0], cosine), a.multiply(far[1], sine)));
  if (kit.isReal && real.isNegative(kit.realPart(z))) {
    const mirrored = si(kit, a.negate(z));
    return mirrored === null ? null : a.negate(mirrored);
  }
  if (tooLarge(kit, z)) return null;
  const sum = hypergeometricSum(kit, [Q.HALF], [q(3, 2), q(3, 2)], a.divideInteger(a.negate(a.square(z)), 4));
  return sum === null ? null : a.multiply(z, sum);
}
/** Cin z = z^2/4 2F3(1,1;2,2,3/2;-z^2/4). */
function cin<T>(kit: Kit<T>, z: T, sign: 1 | -1 = -1): T | null {
  const { a } = kit;
  if (tooLarge(kit, z)) return null;
  const quarter = a.divideInteger(a.square(z), 4);
  const sum = hypergeometricSum(kit, [Q.ONE, Q.ONE], [Q2, Q2, q(3, 2)], sign === -1 ? a.negate(quarter) : quarter);
  return sum === null ? null : a.multiply(quarter, sum);
}
function ci<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  if (kit.isReal && !real.isPositive(kit.realPart(z))) return null;
  const far = auxiliary(kit, z);
  const [sine, cosine] = [a.sin(z), a.cos(z)];
  if (far !== null && sine !== null && cosine !== null) return a.subtract(a.multiply(far[0], sine), a.multiply(far[1], cosine));
  const entire = cin(kit, z);
  const logarithm = a.log(z);
  return entire === null || logarithm === null ? null : a.subtract(a.add(euler(kit), logarithm), entire);
}
function shi<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  if (tooLarge(kit, z)) return null;
  const sum = hypergeometricSum(kit, [Q.HALF], [q(3, 2), q(3, 2)], a.divideInteger(a.square(z), 4));
  return sum === null ? null : a.multiply(z, sum);
}
function chi<T>(kit: Kit<T>, z: T): T | null {
  const { a } = kit;
  if (kit.isReal && !real.isPositive(kit.realPart(z))) return null;
  const entire = cin(kit, z, 1);
  const logarithm = a.log(z);
  return entire === null || logarithm === null ? null : a.add(a.add(euler(kit), logarithm), entire);
}

/** E_p(x) = x^(p-1) Gamma(1-p, x) (DLMF 8.19.1), and its asymptotic series for p > 0 (8.20(i)). */
function expIntegral<T>(kit: Kit<T>, p: Parameter<T>, x: T): T | null {
  const { a } = kit;
  const n = isRational(p) && p.den === 1n ? Number(p.num) : null;
  if (kit.isReal && !real.isPositive(kit.realPart(x))) return a.isZero(x) && n !== null && n > 1 ? a.fromRational(q(1, n - 1)) : null;
  if (n === 1) return e1(kit, x);
  const set = toSet(kit, p);
  const inverse = a.divide(a.one, x);
  if (kit.isReal && inverse !== null && real.isPositive(kit.realPart(set))) {
    const sum = asymptoticSum(kit, inverse, (term, k) => a.negate(a.multiply(a.multiply(term, inverse), a.add(set, a.fromInteger(k)))), 1);
    const decay = a.exp(a.negate(x));
    if (sum !== null && decay !== null) return a.multiply(sum, decay);
  }
  const upper = upperGamma(kit, isRational(p) ? Q.subtract(Q.ONE, p) : { set: a.subtract(a.one, set) }, x);
  const power = isRational(p) ? a.powerRational(x, Q.subtract(p, Q.ONE)) : a.power(x, a.subtract(set, a.one));
  return upper === null || power === null ? null : a.multiply(power, upper);
}

const one = (f: <T>(kit: Kit<T>, z: T) => T | null): Algorithm => ({
  real: (kit, [z]) => (z === undefined ? null : f(kit, z)),
  complex: (kit, [z]) => (z === undefined ? null : f(kit, z)),
});
const erfSlope = (kit: Kit<Ball>, y: Ball): Ball | null => {
  const decay = kit.a.exp(kit.a.negate(kit.a.square(y)));
  return decay && kit.a.divide(kit.a.add(decay, decay), rootPi(kit));
};

export const integralAlgorithms: Readonly<Record<string, Algorithm>> = {
  erf: one(erf),
  erfc: one(erfc),
  erfi: one(erfi),
  erfcx: one(erfcx),
  dawson: one(dawson),
  erfinv: { real: (kit, [x]) => (x === undefined ? null : inverseOfIncreasing(kit, erf, erfSlope, x, [-64, 64])) },
  erfcinv: {
    real: (kit, [x]) => {
      if (x === undefined) return null;
      const down = (k: Kit<Ball>, y: Ball): Ball | null => erfc(k, k.a.negate(y));
      const value = inverseOfIncreasing(kit, down, erfSlope, x, [-200, 200]);
      return value && kit.a.negate(value);
    },
  },
  fresnelS: one((kit, z) => fresnel(kit, z, 1)),
  fresnelC: one((kit, z) => fresnel(kit, z, 0)),
  expIntegralEi: one(ei),
  expIntegralE: {
    real: (kit, [p, x]) => (p && x ? expIntegral(kit, parameterOf(p), x) : null),
    complex: (kit, [p, z]) => {
      if (!p || !z) return null;
      const exact = p.im.mid === 0n && p.im.rad === 0n ? parameterOf(p.re) : null;
      return expIntegral(kit, exact && isRational(exact) ? exact : { set: p }, z);
    },
  },
  ein: one(ein),
  cin: one(cin),
  sinIntegral: one(si),
  cosIntegral: one(ci),
  sinhIntegral: one(shi),
  coshIntegral: one(chi),
};
