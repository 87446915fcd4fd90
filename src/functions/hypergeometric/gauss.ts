/** The Gauss function 2F1 at 0, at 1 and at infinity. Sources: DLMF 15.2, 15.4, 15.8. */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { euler, gamma, lift, log, neg, over, plus, pow, reciprocalGamma, scaled, times } from '../compose.ts';
import type { FormalSeries, LocalForm } from '../description.ts';
import { F1, F2, F3, form, hypergeometricSeries, series } from '../formal.ts';
import { polygammaTree } from '../gamma/gamma.ts';
import { collected } from '../linear.ts';
import { factorial, harmonicNumber } from '../sequences.ts';

type Parameter = Rational | Expression;
/** A parameter with like terms collected, as a rational where it is one. */
export const parameter = (e: Expression): Parameter => {
  const tree = collected(e);
  return rationalOf(tree) ?? tree;
};
const sum = (...values: Parameter[]): Parameter => parameter(plus(...values));
const negative = (value: Parameter): Parameter => ('kind' in value ? parameter(neg(value)) : Q.negate(value));
const integer = (value: Parameter): number | null => ('kind' in value || !Q.isInteger(value) || Q.compare(Q.absolute(value), Q.rational(2000)) > 0 ? null : Number(value.num));
const isPole = (value: Parameter): boolean => {
  const n = integer(value);
  return n !== null && n <= 0;
};

/** (p)_n as a value. */
function rising(p: Parameter, n: number): Parameter {
  let total: Parameter = Q.ONE;
  for (let i = 0; i < n; i++) total = scaled(total, sum(p, Q.rational(i)));
  return total;
}

/** psi(p) as a tree. */
const digamma = (p: Parameter): Expression => polygammaTree(0, lift(p));

/** psi(p + k) - psi(p) for k >= 0 as a value. */
function digammaShift(p: Parameter, k: number): Parameter {
  let total: Parameter = Q.ZERO;
  for (let i = 0; i < k; i++) {
    const term: Parameter = sum(p, Q.rational(i));
    const next: Parameter = 'kind' in term ? over(1, term) : Q.reciprocal(term);
    total = 'kind' in total || 'kind' in next ? plus(total, next) : Q.add(total, next);
  }
  return total;
}

/** Near x = 1, with v = 1 - x. */
export function gaussAtOne(a: Parameter, b: Parameter, c: Parameter, v: Expression): LocalForm | null {
  const s = sum(c, negative(a), negative(b));
  const m = integer(s);
  if (m === null) {
    // DLMF 15.8.4.
    const first = times(gamma(lift(c)), gamma(lift(s)), reciprocalGamma(lift(sum(c, negative(a)))), reciprocalGamma(lift(sum(c, negative(b)))));
    const second = times(gamma(lift(c)), gamma(lift(negative(s))), reciprocalGamma(lift(a)), reciprocalGamma(lift(b)));
    const formals = [hypergeometricSeries(v, [a, b], [sum(Q.ONE, negative(s))]), hypergeometricSeries(v, [sum(c, negative(a)), sum(c, negative(b))], [sum(Q.ONE, s)])];
    return form(plus(times(first, F1), times(second, pow(v, lift(s)), F2)), formals, 'DLMF 15.8.4');
  }
  if (m < 0) {
    // Euler's transformation 15.8.1 turns c-a-b = -n into n.
    const inner = gaussAtOne(sum(c, negative(a)), sum(c, negative(b)), c, v);
    return inner && { ...inner, body: times(pow(v, m), inner.body), source: 'DLMF 15.8.1, 15.8.10' };
  }
  if (isPole(a) || isPole(b)) return null;
  // DLMF 15.8.10: finite part, logarithm and digamma sum.
  const am = sum(a, Q.rational(m));
  const bm = sum(b, Q.rational(m));
  const finiteScale = times(gamma(lift(c)), factorial(Math.max(m - 1, 0)), reciprocalGamma(lift(am)), reciprocalGamma(lift(bm)));
  const finite = series(v, (k) => scaled(scaled(rising(a, k), rising(b, k)), Q.divide(Q.ONE, scaledInteger(k, 1 - m))), { length: m });
  const logScale = times(m % 2 === 0 ? -1 : 1, gamma(lift(c)), reciprocalGamma(lift(a)), reciprocalGamma(lift(b)), pow(v, m));
  const weights = series(v, (k) => scaled(scaled(rising(am, k), rising(bm, k)), Q.rational(1n, factorial(k) * factorial(k + m))));
  const shifts = series(v, (k) => {
    // psi(a+k+m) - psi(a+m) + psi(b+k+m) - psi(b+m) - H_k - H_(k+m).
    const change = plus(digammaShift(am, k), digammaShift(bm, k), Q.negate(Q.add(harmonicNumber(k), harmonicNumber(k + m))));
    return times(weights.coefficient(k), change);
  });
  const constant = plus(digamma(am), digamma(bm), times(2, euler));
  const main = times(logScale, plus(times(plus(log(v), constant), F2), F3));
  return form(m === 0 ? main : plus(times(finiteScale, F1), main), [finite, weights, shifts], 'DLMF 15.8.10');
}
/** (1-m)_k k! as a rational, non-zero for k < m. */
const scaledInteger = (k: number, start: number): Rational => {
  let total = Q.rational(factorial(k));
  for (let i = 0; i < k; i++) total = Q.multiply(total, Q.rational(start + i));
  return total;
};

/** x -> -infinity, w = -x > 0 (DLMF 15.8.2; 15.8.8 where b - a is an integer). */
export function gaussAtMinusInfinity(a: Parameter, b: Parameter, c: Parameter, w: Expression): LocalForm | null {
  const difference = integer(sum(b, negative(a)));
  const z = over(-1, w);
  const branch = (p: Parameter, other: Parameter, name: Expression): Expression =>
    times(gamma(lift(c)), gamma(lift(sum(other, negative(p)))), reciprocalGamma(lift(other)), reciprocalGamma(lift(sum(c, negative(p)))), pow(w, neg(lift(p))), name);
  const formal = (p: Parameter, other: Parameter): FormalSeries => hypergeometricSeries(z, [p, sum(p, negative(c), Q.ONE)], [sum(p, negative(other), Q.ONE)]);
  if (difference === null) return form(plus(branch(a, b, F1), branch(b, a, F2)), [formal(a, b), formal(b, a)], 'DLMF 15.8.2');
  if (difference < 0) return gaussAtMinusInfinity(b, a, c, w);
  // b = a + m. The logarithmic case: DLMF 15.8.8.
  const m = difference;
  const ca = sum(c, negative(a));
  if (isPole(a) || isPole(b) || integer(ca) !== null) return null;
  // 1/Gamma(c-a-k-m) = (-1)^(k+m) (1-c+a)_(k+m)/Gamma(c-a).
  const oneCA = sum(Q.ONE, negative(ca));
  const finite = series(z, (k) => {
    // (-1)^k (a)_k (m-k-1)!/(k! Gamma(c-a-k)) z'^k with z' = 1/x: here in z = -1/w = 1/x.
    const sign = k % 2 === 0 ? Q.ONE : Q.MINUS_ONE;
    return scaled(scaled(rising(a, k), rising(oneCA, k)), Q.multiply(Q.multiply(sign, sign), Q.rational((k % 2 === 0 ? 1n : -1n) * factorial(m - k - 1), factorial(k))));
  }, { length: m });
  const weights = series(z, (k) => scaled(scaled(rising(a, k + m), rising(oneCA, k + m)), Q.rational(1n, factorial(k) * factorial(k + m))));
  const shifts = series(z, (k) => {
    // psi(k+1) + psi(k+m+1) - psi(a+k+m) - psi(c-a-k-m), the last as psi(1-c+a+k+m) + pi cot(pi(c-a-k-m))... kept as psi(c-a) minus finite sums.
    let down: Parameter = Q.ZERO;
    for (let i = 1; i <= k + m; i++) {
      const term: Parameter = sum(ca, Q.rational(-i));
      const next: Parameter = 'kind' in term ? over(1, term) : Q.reciprocal(term);
      down = 'kind' in down || 'kind' in next ? plus(down, next) : Q.add(down, next);
    }
    const change = plus(Q.add(harmonicNumber(k), harmonicNumber(k + m)), neg(lift(digammaShift(a, k + m))), down);
    return times(weights.coefficient(k), change);
  });
  const constant = plus(times(-2, euler), neg(digamma(a)), neg(digamma(ca)));
  const finitePart = times(gamma(lift(c)), reciprocalGamma(lift(b)), reciprocalGamma(lift(ca)), pow(w, neg(lift(a))), F1);
  const logPart = times(gamma(lift(c)), reciprocalGamma(lift(b)), reciprocalGamma(lift(ca)), pow(w, neg(lift(b))), plus(times(plus(log(w), constant), F2), F3));
  return form(m === 0 ? logPart : plus(finitePart, logPart), [finite, weights, shifts], 'DLMF 15.8.8');
}

/** Gauss' value at 1 (DLMF 15.4.20) where c - a - b is a positive number. */
export function gaussValueAtOne(a: Parameter, b: Parameter, c: Parameter): Expression | null {
  const s = sum(c, negative(a), negative(b));
  if ('kind' in s || s.num <= 0n) return null;
  return times(gamma(lift(c)), gamma(s), reciprocalGamma(lift(sum(c, negative(a)))), reciprocalGamma(lift(sum(c, negative(b)))));
}
