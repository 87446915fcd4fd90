/** Rigorous enclosures of Lambert W and Wright omega: the defining equation solved by interval Newton, the branch proved from its range (DLMF 4.13). */
import { type Ball, type ComplexBall, complex, real } from '../../rigorous/index.ts';
import { inverseOfIncreasing } from '../enclosure/inverse.ts';
import { exactInteger, type Kit } from '../enclosure/kit.ts';
import type { Algorithm } from '../enclosure/wrap.ts';

/** w e^w and its slope. */
const product = (kit: Kit<Ball>, w: Ball): Ball | null => {
  const e = kit.a.exp(w);
  return e && kit.a.multiply(w, e);
};
const slope = (kit: Kit<Ball>, w: Ball): Ball | null => {
  const e = kit.a.exp(w);
  return e && kit.a.multiply(kit.a.add(w, kit.a.one), e);
};

/** An integer n >= 1 with x <= n e^n: log2 of x is enough. */
function upperEnd(x: Ball): number {
  return Math.max(1, real.exponentOf(x));
}

function principal(kit: Kit<Ball>, x: Ball): Ball | null {
  const { a } = kit;
  if (a.isZero(x)) return a.zero;
  // w in (-1, upper): w e^w increases there. Close to the branch point the slope has no sign and the answer is null.
  const e = real.e(kit.precision);
  const fromBranch = a.add(a.multiply(x, e), a.one);
  if (!real.isPositive(fromBranch)) return null;
  if (real.exponentOf(x) > 60) return throughLogarithm(kit, x);
  // W_0(x) >= -1 + sqrt(2(ex+1))/3 for -1/e <= x <= 0 (from the series in sqrt(2(ex+1)), whose first omitted part is below half the kept one).
  const low = real.isPositive(x) ? real.ZERO : lowerStart(kit, fromBranch);
  return low && inverseOfIncreasing(kit, product, slope, x, [low, upperEnd(x)]);
}
/** A number between -1 and W_0: certified afterwards by the sign of w e^w - x at it. */
function lowerStart(kit: Kit<Ball>, fromBranch: Ball): Ball | null {
  const root = real.sqrt(real.scaleByPowerOfTwo(real.lowerEnd(fromBranch), 1), 60);
  if (root === null) return null;
  return real.midpoint(kit.a.subtract(real.scaleByPowerOfTwo(real.lowerEnd(root), -2), kit.a.one));
}
/** w + log w = log x for large x. */
function throughLogarithm(kit: Kit<Ball>, x: Ball): Ball | null {
  const logarithm = kit.a.log(x);
  return logarithm && omega(kit, logarithm);
}
/** The y > 0 with y + log y = x. */
function omega(kit: Kit<Ball>, x: Ball): Ball | null {
  const { a } = kit;
  const f = (k: Kit<Ball>, y: Ball): Ball | null => {
    const logarithm = k.a.log(y);
    return logarithm && k.a.add(y, logarithm);
  };
  const steep = (k: Kit<Ball>, y: Ball): Ball | null => {
    const inverse = k.a.divide(k.a.one, y);
    return inverse && k.a.add(k.a.one, inverse);
  };
  const size = real.toDouble(x);
  if (!(size < 1e15)) return null;
  if (size < 1) {
    // omega = W_0(e^x).
    const e = a.exp(x);
    return e && principal(kit, e);
  }
  return inverseOfIncreasing(kit, f, steep, x, [real.scaleByPowerOfTwo(real.ONE, -4), Math.ceil(Math.abs(size)) + 2]);
}

/** W_-1 on (-1/e, 0): -w e^w increases with -w below 1... as a function of v = -w > 1, v e^-v decreases, so -v e^-v increases. */
function lower(kit: Kit<Ball>, x: Ball): Ball | null {
  const { a } = kit;
  if (!real.isNegative(x)) return null;
  const fromBranch = a.add(a.multiply(x, real.e(kit.precision)), a.one);
  if (!real.isPositive(fromBranch)) return null;
  const f = (k: Kit<Ball>, v: Ball): Ball | null => {
    const e = k.a.exp(k.a.negate(v));
    return e && k.a.negate(k.a.multiply(v, e));
  };
  const steep = (k: Kit<Ball>, v: Ball): Ball | null => {
    const e = k.a.exp(k.a.negate(v));
    return e && k.a.multiply(k.a.subtract(v, k.a.one), e);
  };
  const root = real.sqrt(real.scaleByPowerOfTwo(real.lowerEnd(fromBranch), 1), 60);
  if (root === null) return null;
  const start = real.midpoint(real.add(real.ONE, real.scaleByPowerOfTwo(real.lowerEnd(root), -2), 60));
  // v e^-v = |x| has v below 2 log(1/|x|) + 2.
  const far = 2 * Math.max(1, -real.exponentOf(real.absoluteLower(x)) + 2) + 2;
  const v = inverseOfIncreasing(kit, f, steep, x, [start, far]);
  return v && a.negate(v);
}

/** Complex W of any branch: Newton from the logarithmic start, certified by interval Newton; the branch by its range. */
function complexW(kit: Kit<ComplexBall>, branch: number, z: ComplexBall): ComplexBall | null {
  const { a } = kit;
  const twoPi = real.scaleByPowerOfTwo(real.pi(kit.precision), 1);
  const turn: ComplexBall = { re: real.ZERO, im: real.multiply(twoPi, real.fromInteger(branch), kit.precision) };
  const middle = complex.midpoint(z);
  const loose = complex.arithmetic(kit.precision);
  const logarithm = loose.log(middle);
  if (logarithm === null) return null;
  // Start: for branch 0 and small z the series, else L - log L with L = log z + 2 pi i k.
  const shifted = loose.add(logarithm, turn);
  const inner = loose.log(shifted);
  const small = branch === 0 && real.exponentOf(complex.absolute(middle, 40)) <= 1;
  let w = small ? loose.log1p(middle) : inner && loose.subtract(shifted, inner);
  if (!w) return null;
  w = complex.midpoint(w);
  for (let i = 0; i < 60; i++) {
    kit.check();
    const e = loose.exp(w);
    const step = e && loose.divide(loose.subtract(loose.multiply(w, e), middle), loose.multiply(loose.add(w, loose.one), e));
    if (!step) return null;
    w = complex.midpoint(complex.round(loose.subtract(w, step), kit.precision));
    if (real.exponentOf(complex.absolute(step, 40)) < real.exponentOf(complex.absolute(w, 40)) - kit.precision / 2) break;
  }
  return certified(kit, branch, w, z, a);
}
/** Interval Newton on boxes around w that grow until one maps into itself; then the only root in it for every number of z. */
function certified(kit: Kit<ComplexBall>, branch: number, w: ComplexBall, z: ComplexBall, a: Kit<ComplexBall>['a']): ComplexBall | null {
  const e = a.exp(w);
  const value = e && a.subtract(a.multiply(w, e), z);
  const here = e && a.multiply(a.add(w, a.one), e);
  const shift = value && here && a.divide(value, here);
  if (!shift) return null;
  let reach = real.absoluteUpper(real.add(complex.absolute(shift, 40), { mid: 1n, rad: 0n, exp: real.exponentOf(complex.absolute(w, 40)) - kit.precision }, 40));
  for (let i = 0; i < 12; i++) {
    kit.check();
    reach = real.scaleByPowerOfTwo(reach, 1);
    const box = kit.inflate(w, reach);
    const grown = a.exp(box);
    const steep = grown && a.multiply(a.add(box, a.one), grown);
    const change = value && steep && a.divide(value, steep);
    if (!change) continue;
    const next = a.subtract(w, change);
    if (complex.containsBall(box, next)) return inRange(kit, branch, next) ? next : null;
  }
  return null;
}
/** The range of W_k: between the curves -v cot v + iv (DLMF 4.13(ii); Corless et al. 1996, section 4). Proved for k = 0 by |v| < pi and u + v cot v > 0; for |k| >= 2 and for k = 1, -1 off the real line by the strip of v and the sign of u + v cot v. */
function inRange(kit: Kit<ComplexBall>, branch: number, w: ComplexBall): boolean {
  const pi = real.pi(kit.precision);
  const v = w.im;
  const rightOf = (): -1 | 1 | 0 => {
    if (v.mid === 0n && v.rad === 0n) return real.isPositive(real.add(w.re, real.ONE, kit.precision)) ? 1 : real.isNegative(real.add(w.re, real.ONE, kit.precision)) ? -1 : 0;
    const [sine, cosine] = real.sinCos(v, kit.precision);
    // v cot v = cos v/(sin v/v); near v = 0 it is 1 - v^2/3 - ..., at least 1 - v^2 for |v| <= 1 and at most 1.
    const cotangent = real.divide(real.multiply(v, cosine, kit.precision), sine, kit.precision) ?? (real.exponentOf(v) <= 0 ? real.fromEnds(real.subtract(real.ONE, real.square(v, 64), 64), real.ONE, 64) : null);
    if (cotangent === null) return 0;
    const sum = real.add(w.re, cotangent, kit.precision);
    return real.isPositive(sum) ? 1 : real.isNegative(sum) ? -1 : 0;
  };
  const within = (low: number, high: number): boolean =>
    real.isPositive(real.subtract(v, real.multiply(pi, real.fromInteger(low), kit.precision), kit.precision)) && real.isNegative(real.subtract(v, real.multiply(pi, real.fromInteger(high), kit.precision), kit.precision));
  if (branch === 0) return within(-1, 1) && rightOf() === 1;
  // For k >= 1: v in ((2k-2) pi, (2k+1) pi): above the curve of sheet k-1 and below that of k.
  const k = Math.abs(branch);
  const up = branch > 0;
  const strip = (low: number, high: number): boolean => (up ? within(low, high) : within(-high, -low));
  if (strip(2 * k - 1, 2 * k)) return true;
  if (strip(2 * k - 2, 2 * k - 1)) return rightOf() === -1;
  if (strip(2 * k, 2 * k + 1)) return rightOf() === 1;
  return false;
}

const branchOf = (k: Ball | undefined): number | null => (k ? exactInteger(k, 10_000) : null);
export const lambertAlgorithms: Readonly<Record<string, Algorithm>> = {
  lambertW: {
    real: (kit, [k, x]) => {
      const branch = branchOf(k);
      if (!x) return null;
      return branch === 0 ? principal(kit, x) : branch === -1 ? lower(kit, x) : null;
    },
    complex: (kit, [k, z]) => {
      const branch = k && k.im.mid === 0n && k.im.rad === 0n ? branchOf(k.re) : null;
      return z && branch !== null ? complexW(kit, branch, z) : null;
    },
  },
  wrightOmega: { real: (kit, [x]) => (x ? omega(kit, x) : null) },
};
