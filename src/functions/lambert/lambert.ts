/** Lambert W on all branches and the Wright omega function. Sources: DLMF 4.13; Corless, Gonnet, Hare, Jeffrey, Knuth, "On the Lambert W function", Adv. Comput. Math. 5 (1996), from memory where named. */
import { build, type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { argument, bigO, call, exp, lift, log, neg, over, plus, pow, sqrt, times } from '../compose.ts';
import type { LocalForm, Place } from '../description.ts';
import { asInteger, isConstant } from '../exactForms.ts';
import { atInfinity, F1, form, isAt, series } from '../formal.ts';
import { factorial, fullRecurrence, recurrence, stirlingCycle } from '../sequences.ts';

const e = build.constant('e');

/** W near -1/e in p = sqrt(2(e x + 1)): mu_0 = -1, mu_1 = 1 and the recurrence of Corless et al., eqs. 4.23, 4.24. */
const branchNumbers = (() => {
  const alpha: Rational[] = [Q.rational(2), Q.MINUS_ONE];
  return fullRecurrence<Rational>([Q.MINUS_ONE, Q.ONE], (k, mu) => {
    const at = (list: readonly Rational[], i: number): Rational => list[i] ?? Q.ZERO;
    let total = Q.ZERO;
    for (let j = 2; j < k; j++) total = Q.add(total, Q.multiply(at(mu, j), at(mu, k + 1 - j)));
    alpha[k] = total;
    const first = Q.multiply(Q.rational(k - 1, k + 1), Q.add(Q.divide(at(mu, k - 2), Q.rational(2)), Q.divide(at(alpha, k - 2), Q.rational(4))));
    return Q.subtract(Q.subtract(first, Q.divide(total, Q.rational(2))), Q.divide(at(mu, k - 1), Q.rational(k + 1)));
  });
})();

/** Powers of 1/L1 that are written before the O-term. */
const LOGARITHMIC_ORDERS = 14;

/** L1 - L2 + sum over l >= 0, m >= 1 of (-1)^l [l+m, l+1]/m! L2^m L1^(-l-m) (DLMF 4.13.10, Stirling cycle numbers), and the next power of L2/L1 as O. */
function logarithmicSum(L1: Expression, L2: Expression): Expression {
  const terms: Expression[] = [];
  for (let k = 1; k <= LOGARITHMIC_ORDERS; k++) {
    for (let m = k; m >= 1; m--) {
      const l = k - m;
      terms.push(times(Q.rational((l % 2 === 0 ? 1n : -1n) * stirlingCycle(k, l + 1), factorial(m)), over(pow(L2, m), pow(L1, k))));
    }
  }
  return plus(L1, neg(L2), ...terms, bigO(pow(over(L2, L1), LOGARITHMIC_ORDERS + 1)));
}

/** n-th derivative of W is exp(-nW) p_n(W)/(1+W)^(2n-1) with p_1 = 1, p_(n+1)(w) = -(nw + 3n - 1) p_n(w) + (1+w) p_n'(w) (Corless et al., eq. 3.5). */
const derivativePolynomials = recurrence<readonly bigint[]>([1n], (n, p) => {
  const out: bigint[] = Array.from({ length: n + 1 }, () => 0n);
  p.forEach((c, i) => {
    out[i + 1] = (out[i + 1] ?? 0n) - BigInt(n) * c;
    out[i] = (out[i] ?? 0n) - BigInt(3 * n - 1) * c + BigInt(i) * c;
    if (i > 0) out[i - 1] = (out[i - 1] ?? 0n) + BigInt(i) * c;
  });
  return out;
});

function polynomialAt(p: readonly bigint[], w: Expression): Expression {
  const exact = rationalOf(w);
  if (exact) return lift(p.reduceRight<Rational>((sum, c) => Q.add(Q.multiply(sum, exact), Q.rational(c)), Q.ZERO));
  return plus(...p.map((c, i) => times(c, pow(w, i))));
}

const branchPoint = (place: Place): boolean => {
  if (place.kind !== 'finite') return false;
  const center = place.center;
  const inner = center.kind === 'negation' ? center.operand : null;
  const negativeExp = (x: Expression): boolean => (x.kind === 'quotient' && rationalOf(x.numerator)?.num === 1n && rationalOf(x.numerator)?.den === 1n && isConstant(x.denominator, 'e')) || (x.kind === 'call' && x.function === 'exp' && isMinusOne(x.args[0])) || (x.kind === 'power' && isConstant(x.base, 'e') && isMinusOne(x.exponent));
  if (inner && negativeExp(inner)) return true;
  if (center.kind === 'quotient') return isMinusOne(center.numerator) && isConstant(center.denominator, 'e');
  if (center.kind === 'product' && center.factors.length === 2) return center.factors.some(isMinusOne) && center.factors.some(negativeExp);
  return false;
};
const isMinusOne = (x: Expression | undefined): boolean => {
  const exact = x && rationalOf(x);
  return exact !== null && exact !== undefined && Q.equal(exact, Q.MINUS_ONE);
};

export function lambertLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  const branch = asInteger(argument(args, 0), 10000);
  if (index !== 1 || branch === null) return null;
  if (place.kind === 'infinite') {
    const x = branch === 0 ? atInfinity(place, 1) : null;
    if (!x) return null;
    const [L1, L2] = [log(x), log(log(x))];
    return form(logarithmicSum(L1, L2), [], 'DLMF 4.13.10');
  }
  if (branchPoint(place)) {
    if (branch !== 0 && branch !== -1) return null;
    const p = sqrt(times(2, e, place.offset));
    return form(F1, [series(branch === 0 ? p : neg(p), branchNumbers)], 'DLMF 4.13.6; Corless et al. 1996, eqs. 4.22 to 4.24');
  }
  if (isAt(place, 0)) {
    if (branch === 0) return form(F1, [series(place.offset, (k) => (k === 0 ? Q.ZERO : Q.rational((k % 2 === 0 ? -1n : 1n) * BigInt(k) ** BigInt(k - 1), factorial(k))))], 'DLMF 4.13.5');
    if (branch !== -1) return null;
    const L1 = log(neg(place.offset));
    const L2 = log(neg(L1));
    return form(logarithmicSum(L1, L2), [], 'DLMF 4.13.11');
  }
  const center = place.center;
  const w = lambertValue([lift(branch), center]) ?? call('lambertW', branch, center);
  const coefficient = (k: number): Expression => {
    if (k === 0) return w;
    // exp(-kW) = (W/a)^k.
    const bottom = times(factorial(k), pow(plus(1, w), 2 * k - 1), pow(center, k));
    return over(times(pow(w, k), polynomialAt(derivativePolynomials(k - 1), w)), bottom);
  };
  return form(F1, [series(place.offset, coefficient)], 'Corless et al. 1996, eqs. 3.4, 3.5');
}

/** W_0(0) = 0, W_0(e) = 1, W(-1/e) = -1 on branches 0 and -1, W_0(x log x) patterns aside. */
export function lambertValue(args: readonly Expression[]): Expression | null {
  const branch = asInteger(argument(args, 0), 10000);
  const x = argument(args, 1);
  if (branch === null) return null;
  if (branch === 0) {
    const exact = rationalOf(x);
    if (exact && Q.isZero(exact)) return lift(0);
    if (isConstant(x, 'e')) return lift(1);
  }
  const place: Place = { kind: 'finite', center: x, offset: x, side: 'both' };
  return (branch === 0 || branch === -1) && branchPoint(place) ? lift(-1) : null;
}

/** Taylor polynomials of omega: omega^(n) = q_n(omega)/(1+omega)^(2n-1), q_1 = w, q_(n+1) = w((1+w) q_n' - (2n-1) q_n). */
const omegaPolynomials = recurrence<readonly bigint[]>([0n, 1n], (n, p) => {
  const out: bigint[] = Array.from({ length: p.length + 1 }, () => 0n);
  p.forEach((c, i) => {
    out[i] = (out[i] ?? 0n) + BigInt(i) * c;
    out[i + 1] = (out[i + 1] ?? 0n) + BigInt(i) * c - BigInt(2 * n - 1) * c;
  });
  return out;
});

export function wrightLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind === 'infinite') {
    const x = place.argument;
    if (place.direction === 1) return form(logarithmicSum(x, log(x)), [], 'DLMF 4.13.10 with ln x replaced by x');
    if (place.direction !== -1) return null;
    return form(F1, [series(exp(x), (k) => (k === 0 ? Q.ZERO : Q.rational((k % 2 === 0 ? -1n : 1n) * BigInt(k) ** BigInt(k - 1), factorial(k))))], 'DLMF 4.13.5 with argument exp(x)');
  }
  const w = wrightValue([place.center]) ?? call('wrightOmega', place.center);
  return form(F1, [series(place.offset, (k) => (k === 0 ? w : over(polynomialAt(omegaPolynomials(k - 1), w), times(factorial(k), pow(plus(1, w), 2 * k - 1)))))], 'omega\' = omega/(1 + omega), differentiated');
}
export function wrightValue([x]: readonly Expression[]): Expression | null {
  const exact = x && rationalOf(x);
  if (!exact) return null;
  if (Q.isOne(exact)) return lift(1);
  return null;
}
