/** Rigorous enclosures of Airy and Kelvin functions, by power series and through Bessel functions. */
import { Q, type Rational } from '../../expression/index.ts';
import { type Ball, type ComplexBall, complex, real } from '../../rigorous/index.ts';
import { bound, complexKit, isRational, type Kit, type Parameter, parameterOf } from '../enclosure/kit.ts';
import { hypergeometricSum } from '../enclosure/series.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { reciprocalGamma } from '../gamma/enclosure.ts';
import { besselI, besselJ, besselK, firstKind, integerOf, secondKind } from './enclosure.ts';

const q = Q.rational;

/** Airy functions by f and g of DLMF 9.4.1 near 0, by Bessel functions of order 1/3 and 2/3 (9.6) far out on the real line. */
type AiryKind = 'Ai' | 'Bi' | 'AiPrime' | 'BiPrime';
function airyNear<T>(kit: Kit<T>, kind: AiryKind, z: T): T | null {
  const { a } = kit;
  const prime = kind === 'AiPrime' || kind === 'BiPrime';
  const cube = a.divideInteger(a.multiply(a.square(z), z), 9);
  // f = 0F1(;2/3;z^3/9), g = z 0F1(;4/3;z^3/9); f' = z^2/2 0F1(;5/3;z^3/9), g' = 0F1(;1/3;z^3/9).
  const first = hypergeometricSum(kit, [], [prime ? q(5, 3) : q(2, 3)], cube);
  const second = hypergeometricSum(kit, [], [prime ? q(1, 3) : q(4, 3)], cube);
  if (first === null || second === null) return null;
  const third = a.fromRational(q(1, 3));
  const c1 = scaleAt(kit, q(2, 3));
  const c2 = scaleAt(kit, q(1, 3));
  if (c1 === null || c2 === null) return null;
  const f = a.multiply(c1, prime ? a.divideInteger(a.multiply(a.square(z), first), 2) : first);
  const g = a.multiply(c2, prime ? second : a.multiply(z, second));
  if (kind === 'Ai' || kind === 'AiPrime') return a.subtract(f, g);
  const rootThree = a.sqrt(a.divide(a.one, third) ?? a.one);
  return rootThree === null ? null : a.multiply(rootThree, a.add(f, g));
}
/** 3^-s/Gamma(s). */
function scaleAt<T>(kit: Kit<T>, s: Rational): T | null {
  const power = real.powerRational(real.fromInteger(3), Q.negate(s), kit.precision);
  const inverse = reciprocalGamma(kit, kit.a.fromRational(s));
  return power && inverse !== null ? kit.a.multiply(kit.fromReal(power), inverse) : null;
}
function airyFar(kit: Kit<Ball>, kind: AiryKind, x: Ball): Ball | null {
  const { a } = kit;
  const size = real.absolute(x);
  const root = a.sqrt(size);
  if (root === null) return null;
  const zeta = a.divideInteger(a.multiply(a.multiply(size, root), a.fromInteger(2)), 3);
  const prime = kind === 'AiPrime' || kind === 'BiPrime';
  const order = q(prime ? 2 : 1, 3);
  const rootThree = a.sqrt(a.fromInteger(3));
  if (rootThree === null) return null;
  if (real.isPositive(x)) {
    if (kind === 'Ai' || kind === 'AiPrime') {
      const value = besselK(kit, order, zeta);
      const pi = real.pi(kit.precision);
      if (value === null) return null;
      // Ai = (1/pi) sqrt(x/3) K_1/3, Ai' = -(x/(pi sqrt 3)) K_2/3 (DLMF 9.6.1, 9.6.2).
      const scaled = a.divide(a.multiply(value, prime ? size : root), a.multiply(pi, rootThree));
      return scaled && prime ? a.negate(scaled) : scaled;
    }
    const up = besselI(kit, order, zeta);
    const down = besselI(kit, Q.negate(order), zeta);
    return up && down && a.divide(a.multiply(prime ? size : root, a.add(up, down)), rootThree);
  }
  const up = besselJ(kit, order, zeta);
  const down = besselJ(kit, Q.negate(order), zeta);
  if (up === null || down === null) return null;
  // DLMF 9.6.5 to 9.6.8.
  if (kind === 'Ai') return a.divideInteger(a.multiply(root, a.add(up, down)), 3);
  if (kind === 'AiPrime') return a.divideInteger(a.multiply(size, a.subtract(up, down)), 3);
  if (kind === 'Bi') return a.divide(a.multiply(root, a.subtract(down, up)), rootThree);
  return a.divide(a.multiply(size, a.add(up, down)), rootThree);
}
const airy = (kind: AiryKind): Algorithm => ({
  real: (kit, [x]) => {
    if (x === undefined) return null;
    if (real.exponentOf(x) > 3 && !real.containsZero(x)) {
      const far = airyFar(kit, kind, x);
      if (far !== null) return far;
    }
    return real.exponentOf(x) > 9 ? null : airyNear(kit, kind, x);
  },
  complex: (kit, [z]) => (z === undefined || bound.exponent(kit.size(z)) > 7 ? null : airyNear(kit, kind, z)),
});

/** ber + i bei = J_nu(x e^(3 pi i/4)), ker + i kei = e^(-nu pi i/2) K_nu(x e^(pi i/4)) (DLMF 10.61.1, 10.61.2). */
function kelvin(kit: Kit<Ball>, order: Ball, x: Ball, kind: 'Ber' | 'Bei' | 'Ker' | 'Kei'): Ball | null {
  const c = complexKit(kit.precision, kit.check);
  const s = kit.a.sqrt(kit.a.fromRational(Q.HALF));
  if (s === null || real.exponentOf(x) > 12) return null;
  const nu = parameterOf(order);
  const complexOrder: Parameter<ComplexBall> = isRational(nu) ? nu : { set: complex.fromReal(order) };
  const reach = kit.a.multiply(x, s);
  if (kind === 'Ber' || kind === 'Bei') {
    if (!real.isPositive(x) && integerOf(nu) === null) return null;
    const value = firstKind(c, complexOrder, { re: real.negate(reach), im: reach }, -1);
    return value && (kind === 'Ber' ? value.re : value.im);
  }
  if (!real.isPositive(x)) return null;
  const value = secondKind(c, complexOrder, { re: reach, im: reach }, 'K');
  const angle = kit.a.multiply(order, real.scaleByPowerOfTwo(real.pi(kit.precision), -1));
  const [sine, cosine] = real.sinCos(angle, kit.precision);
  if (value === null) return null;
  const turned = c.a.multiply(value, { re: cosine, im: real.negate(sine) });
  return kind === 'Ker' ? turned.re : turned.im;
}

/** Off the real axis through both conjugate directions: ber = (J(z w) + J(z w*))/2, w = e^(3 pi i/4), and so on; integer orders of ber and bei are entire. */
function kelvinComplex(kit: Kit<ComplexBall>, nu: ComplexBall, z: ComplexBall, kind: 'Ber' | 'Bei' | 'Ker' | 'Kei'): ComplexBall | null {
  const exact = nu.im.mid === 0n && nu.im.rad === 0n ? parameterOf(nu.re) : null;
  const s = real.sqrt(real.scaleByPowerOfTwo(real.ONE, -1), kit.precision);
  if (exact === null || !isRational(exact) || s === null || bound.exponent(kit.size(z)) > 12) return null;
  const { a } = kit;
  const first = kind === 'Ber' || kind === 'Bei';
  // The turned arguments must not have crossed the cuts of J and K: away from the sector the function is not the sum of principal values.
  const turned = first && integerOf(exact) === null;
  if ((!first && !real.isPositive(z.re)) || (turned && real.compare(real.absolute(z.im), z.re) !== -1)) return null;
  const direction: ComplexBall = { re: first ? real.negate(s) : s, im: s };
  const value = (w: ComplexBall, turn: 1 | -1): ComplexBall | null => {
    const raw = first ? firstKind(kit, exact, a.multiply(z, w), -1) : secondKind(kit, exact, a.multiply(z, w), 'K');
    if (raw === null || first) return raw;
    const angle = real.multiply(nu.re, real.scaleByPowerOfTwo(real.pi(kit.precision), -1), kit.precision);
    return a.multiply(raw, { re: real.cos(angle, kit.precision), im: turn === 1 ? real.negate(real.sin(angle, kit.precision)) : real.sin(angle, kit.precision) });
  };
  const [up, down] = [value(direction, 1), value(complex.conjugate(direction), -1)];
  if (up === null || down === null) return null;
  if (kind === 'Ber' || kind === 'Ker') return a.divideInteger(a.add(up, down), 2);
  return a.divide(a.subtract(up, down), { re: real.ZERO, im: real.fromInteger(2) });
}
const kelvinAlgorithm = (kind: 'Ber' | 'Bei' | 'Ker' | 'Kei'): Algorithm => ({
  real: (kit, [nu, x]) => (nu && x ? kelvin(kit, nu, x, kind) : null),
  complex: (kit, [nu, z]) => (nu && z ? kelvinComplex(kit, nu, z, kind) : null),
});

export const airyKelvinAlgorithms: Readonly<Record<string, Algorithm>> = {
  airyAi: airy('Ai'),
  airyBi: airy('Bi'),
  airyAiPrime: airy('AiPrime'),
  airyBiPrime: airy('BiPrime'),
  kelvinBer: kelvinAlgorithm('Ber'),
  kelvinBei: kelvinAlgorithm('Bei'),
  kelvinKer: kelvinAlgorithm('Ker'),
  kelvinKei: kelvinAlgorithm('Kei'),
};
