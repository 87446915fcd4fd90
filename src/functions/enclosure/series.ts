/** Hypergeometric sums with a proven tail. Tail bound: F. Johansson, "Computing hypergeometric functions rigorously", ACM TOMS 45 (2019), section 4.1 (from memory; the argument is in the code). */
import { Q } from '../../expression/index.ts';
import { type Ball, real } from '../../rigorous/index.ts';
import { bound, isRational, type Kit, type Parameter, toSet } from './kit.ts';

/** Sums that need more terms are left to other methods. */
const MOST_TERMS = 200_000;

/**
 * sum over k >= 0 of (a_1)_k ... (a_p)_k/((b_1)_k ... (b_q)_k k!) z^k with p <= q + 1; null where no b may be guaranteed to stay off the non-positive integers in the tail, or the sum does not converge on the whole set.
 * For k >= n, with Re b_j + n > 0: |(a_i+k)/(b_i+k)| <= 1 + |a_i - b_i|/|b_i + n|, |1/(b_j+k)| <= 1/|b_j+n|; so the ratio of terms from n on is at most C, and the tail at most |t_n|/(1 - C).
 */
export function hypergeometricSum<T>(kit: Kit<T>, tops: readonly Parameter<T>[], bottoms: readonly Parameter<T>[], z: T): T | null {
  const { a } = kit;
  const shifted: readonly Parameter<T>[] = [...bottoms, Q.ONE];
  if (tops.length > shifted.length) return null;
  let term = a.one;
  let sum = a.one;
  const size = kit.size(z);
  if (size.mid === 0n) return sum;
  for (let k = 0; k < MOST_TERMS; k++) {
    kit.check();
    const next = advance(kit, term, z, tops, shifted, k);
    if (next === null) return null;
    term = next;
    if (a.isZero(term)) return sum;
    const small = bound.exponent(kit.size(term)) < Math.max(bound.exponent(kit.size(sum)) - kit.precision, accuracyFloor(kit, sum)) - 1;
    if (small || k % 64 === 63) {
      const tail = tailBound(kit, term, size, tops, shifted, k + 1);
      if (small && tail !== null) return kit.inflate(sum, tail);
    }
    sum = a.add(sum, term);
  }
  return null;
}

/** The exponent of the error that the sum already carries. */
function accuracyFloor<T>(kit: Kit<T>, sum: T): number {
  return Math.max(errorExponent(kit.realPart(sum)), errorExponent(kit.imaginaryPart(sum))) - 8;
}
const errorExponent = (x: Ball): number => (x.rad === 0n ? -Infinity : real.exponentOf(real.radius(x)));

function advance<T>(kit: Kit<T>, term: T, z: T, tops: readonly Parameter<T>[], bottoms: readonly Parameter<T>[], k: number): T | null {
  const { a } = kit;
  let top = 1n;
  let bottom = 1n;
  let result = a.multiply(term, z);
  for (const p of tops) {
    if (isRational(p)) {
      top *= p.num + BigInt(k) * p.den;
      bottom *= p.den;
    } else result = a.multiply(result, a.add(p.set, a.fromInteger(k)));
  }
  for (const p of bottoms) {
    if (isRational(p)) {
      bottom *= p.num + BigInt(k) * p.den;
      top *= p.den;
    } else {
      const divided = a.divide(result, a.add(p.set, a.fromInteger(k)));
      if (divided === null) return null;
      result = divided;
    }
  }
  if (bottom === 0n) return null;
  if (top === 0n) return a.zero;
  return a.divide(a.multiply(result, a.fromInteger(top)), a.fromInteger(bottom));
}

/** A bound of the sum of all terms from number n on, whose first is `term`; null where the ratio is not yet below one. */
function tailBound<T>(kit: Kit<T>, term: T, size: Ball, tops: readonly Parameter<T>[], bottoms: readonly Parameter<T>[], n: number): Ball | null {
  const { a } = kit;
  let ratio = size;
  for (const [i, p] of bottoms.entries()) {
    const b = a.add(toSet(kit, p), a.fromInteger(n));
    if (!real.isPositive(kit.realPart(b))) return null;
    const least = kit.least(b);
    const top = tops[i];
    const factor = top === undefined ? bound.divide(bound.one, least) : bound.divide(kit.size(a.subtract(toSet(kit, top), toSet(kit, p))), least);
    if (factor === null) return null;
    ratio = bound.multiply(ratio, top === undefined ? factor : bound.add(bound.one, factor));
  }
  return geometricTail(kit.size(term), ratio);
}

/** first/(1 - ratio); null unless ratio < 1 - 2^-10. */
export function geometricTail(first: Ball, ratio: Ball): Ball | null {
  const rest = real.subtract(real.ONE, ratio, 64);
  if (!bound.less(bound.twoTo(-10), real.lowerEnd(rest))) return null;
  return bound.divide(first, real.absoluteLower(rest));
}

/**
 * sum over k = 0..n-1 of the terms of an asymptotic series, cut where they are smallest or small enough; the error is at most the first omitted term times `factor`.
 * `step(t, k)` gives term k + 1 from term k. Null where the smallest term is not below 2^-precision of the sum.
 */
export function asymptoticSum<T>(kit: Kit<T>, first: T, step: (term: T, k: number) => T | null, least: number, factor: Ball = bound.one): T | null {
  const { a } = kit;
  let term = first;
  let sum = first;
  for (let k = 0; k < 100_000; k++) {
    kit.check();
    const next = step(term, k);
    if (next === null) return null;
    if (a.isZero(next)) return sum;
    const size = kit.size(next);
    if (k + 1 >= least && bound.exponent(size) < bound.exponent(kit.size(sum)) - kit.precision) return kit.inflate(sum, bound.multiply(size, factor));
    if (k + 1 >= least && !bound.less(size, kit.size(term))) return null;
    sum = a.add(sum, next);
    term = next;
  }
  return null;
}
