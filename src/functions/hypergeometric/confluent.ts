/** 1F1, 0F1, Kummer's U and the parabolic cylinder function. Sources: DLMF 10.16, 12.2, 12.9, 13.2, 13.7. */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { argument, call, cos, euler, exp, gamma, half, lift, log, minus, neg, over, pi, plus, pow, q, reciprocalGamma, scaled, sqrt, square, times } from '../compose.ts';
import type { FunctionDescription, LocalForm, Place } from '../description.ts';
import { asInteger } from '../exactForms.ts';
import { F1, F2, F3, form, hypergeometricSeries, isAt, series } from '../formal.ts';
import { besselILocal, besselJLocal } from '../bessel/cylinder.ts';
import { polygammaTree } from '../gamma/gamma.ts';
import { factorial, harmonicNumber, recurrence } from '../sequences.ts';
import { parameter } from './gauss.ts';

type Parameter = Rational | Expression;
const tree = (...values: (Parameter | number)[]): Parameter => parameter(plus(...values));
const negative = (value: Parameter): Parameter => ('kind' in value ? neg(value) : Q.negate(value));

/** M(a,b,x) at both ends of the real line (DLMF 13.7.1, 13.2.39). The recessive part is kept where it is real. */
export function kummerMAtInfinity(a: Parameter, b: Parameter, x: Expression, direction: 1 | -1): LocalForm {
  const growing = hypergeometricSeries(over(1, x), [tree(1, negative(a)), tree(b, negative(a))], []);
  const w = neg(x);
  if (direction === 1) return form(times(gamma(lift(b)), reciprocalGamma(lift(a)), exp(x), pow(x, lift(tree(a, negative(b)))), F1), [growing], 'DLMF 13.7.1', { subdominantDropped: true });
  const algebraic = hypergeometricSeries(over(1, w), [a, tree(a, negative(b), 1)], []);
  return form(times(gamma(lift(b)), reciprocalGamma(lift(tree(b, negative(a)))), pow(w, neg(lift(a))), F1), [algebraic], 'DLMF 13.7.1, 13.2.39', { subdominantDropped: true });
}
/** Where 1/Gamma(a) or 1/Gamma(b-a) vanishes the leading form above is zero: then M is a polynomial times at most an exponential. */
export function kummerMTerminates(a: Parameter, b: Parameter): boolean {
  const pole = (value: Parameter): boolean => !('kind' in value) && Q.isInteger(value) && value.num <= 0n;
  return pole(a) || pole(tree(b, negative(a)));
}

/** 0F1(;b;x) = Gamma(b) x^((1-b)/2) I_(b-1)(2 sqrt x), and with J on the negative side (DLMF 10.16.9, 10.39.9). */
export function limitFunctionAtInfinity(b: Parameter, x: Expression, direction: 1 | -1): LocalForm | null {
  const size = direction === 1 ? x : neg(x);
  const order = lift(tree(b, -1));
  const inner = (direction === 1 ? besselILocal : besselJLocal)([order, x], 1, { kind: 'infinite', argument: times(2, sqrt(size)), direction: 1 });
  return inner && { ...inner, body: times(gamma(lift(b)), pow(size, times(half, minus(1, lift(b)))), inner.body), source: 'DLMF 10.16.9, 10.39.9' };
}

export function kummerULocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  if (index !== 2) return null;
  const a = parameter(argument(args, 0));
  const b = parameter(argument(args, 1));
  if (place.kind === 'infinite') {
    if (place.direction !== 1) return null;
    const sum = hypergeometricSeries(over(1, place.argument), [a, tree(a, negative(b), 1)], [], Q.MINUS_ONE);
    return form(times(pow(place.argument, neg(lift(a))), F1), [{ ...sum, divergent: sum.length === undefined }], 'DLMF 13.7.3');
  }
  if (!isAt(place, 0)) return null;
  const x = place.offset;
  const bInteger = 'kind' in b || !Q.isInteger(b) ? null : Number(b.num);
  if (bInteger === null) {
    // DLMF 13.2.42.
    const first = times(gamma(lift(tree(1, negative(b)))), reciprocalGamma(lift(tree(a, negative(b), 1))), F1);
    const second = times(gamma(lift(tree(b, -1))), reciprocalGamma(lift(a)), pow(x, minus(1, lift(b))), F2);
    return form(plus(first, second), [hypergeometricSeries(x, [a], [b]), hypergeometricSeries(x, [tree(a, negative(b), 1)], [tree(2, negative(b))])], 'DLMF 13.2.42');
  }
  // Kummer's transformation 13.2.40 turns b < 1 into 2 - b > 1.
  if (bInteger < 1) {
    const inner = kummerULocal([lift(tree(a, negative(b), 1)), lift(tree(2, negative(b))), x], 2, place);
    return inner && { ...inner, body: times(pow(x, minus(1, lift(b))), inner.body), source: 'DLMF 13.2.40, 13.2.9' };
  }
  return integerU(a, bInteger - 1, x);
}

/** b = n + 1 (DLMF 13.2.9); finite where a is a non-positive integer (13.2.7). */
function integerU(a: Parameter, n: number, x: Expression): LocalForm {
  const exact = 'kind' in a ? null : a;
  if (exact && Q.isInteger(exact) && exact.num <= 0n) {
    const m = -Number(exact.num);
    const sum = series(x, (k) => Q.multiply(Q.rational((k + m) % 2 === 0 ? 1 : -1), Q.rational((factorial(m) * factorial(n + m)) , factorial(k) * factorial(m - k) * factorial(n + k))), { length: m + 1 });
    return form(F1, [sum], 'DLMF 13.2.7');
  }
  const shift = (p: Parameter, k: number): Parameter => {
    let total: Parameter = Q.ZERO;
    for (let i = 0; i < k; i++) {
      const term = tree(p, i);
      const next: Parameter = 'kind' in term ? over(1, term) : Q.reciprocal(term);
      total = 'kind' in total || 'kind' in next ? plus(total, next) : Q.add(total, next);
    }
    return total;
  };
  const rising = recurrence<Parameter>(Q.ONE, (k, previous) => scaled(previous, tree(a, k - 1)));
  const weights = series(x, (k) => scaled(rising(k), Q.rational(1n, factorial(k) * factorial(n + k))));
  const shifts = series(x, (k) => times(weights.coefficient(k), plus(shift(a, k), Q.negate(Q.add(harmonicNumber(k), harmonicNumber(n + k))))));
  const an = tree(a, -n);
  const logScale = times(n % 2 === 0 ? -1 : 1, reciprocalGamma(lift(an)));
  const main = times(logScale, plus(times(plus(log(x), polygammaTree(0, lift(a)), times(2, euler)), F1), F2));
  if (n === 0) return form(main, [weights, shifts], 'DLMF 13.2.9');
  // sum over k = 1..n of (k-1)! (1-a+k)_(n-k)/(n-k)! x^-k = x^-n times a polynomial.
  const finite = series(
    x,
    (j) => {
      const k = n - j;
      let product: Parameter = Q.ONE;
      for (let i = 0; i < n - k; i++) product = scaled(product, tree(1 + k + i, negative(a)));
      return scaled(product, Q.rational(factorial(k - 1), factorial(n - k)));
    },
    { length: n },
  );
  return form(plus(main, times(reciprocalGamma(lift(a)), pow(x, -n), F3)), [weights, shifts, finite], 'DLMF 13.2.9');
}
/** x f'' + (b - x) f' - a f = 0 (DLMF 13.2.1). */
export const kummerEquation =
  (value: (a: Expression, b: Expression, x: Expression) => Expression, slope: (a: Expression, b: Expression, x: Expression) => Expression) =>
  (a: Expression, b: Expression): NonNullable<ReturnType<NonNullable<FunctionDescription['equation']>>> => ({
    polynomials: [[neg(a)], [b, lift(-1)], [lift(0), lift(1)]],
    initial: [(p) => value(a, b, p), (p) => slope(a, b, p)],
  });
const U = (a: Expression, b: Expression, x: Expression): Expression => call('kummerU', a, b, x);
const uSlope = (a: Expression, b: Expression, x: Expression): Expression => neg(times(a, U(collectedPlus(a, 1), collectedPlus(b, 1), x)));
const collectedPlus = (e: Expression, n: number): Expression => lift(tree(e, n));
export const kummerUDerivative: NonNullable<FunctionDescription['derivative']> = ([a = lift(1), b = lift(1), x = lift(0)], index) => (index === 2 ? uSlope(a, b, x) : null);
export const kummerUEquation: NonNullable<FunctionDescription['equation']> = ([a = lift(1), b = lift(1)], index) => (index === 2 ? kummerEquation(U, uSlope)(a, b) : null);

/** D_p(x): DLMF 12.9.1 at +infinity, 12.2.15 and 12.9.2 at -infinity, 12.2.6 with 12.4 at 0 (a = -p - 1/2). */
export function parabolicLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  if (index !== 1) return null;
  const p = parameter(argument(args, 0));
  const pTree = lift(p);
  const exact = 'kind' in p ? null : p;
  const polynomial = exact !== null && Q.isInteger(exact) && exact.num >= 0n;
  const recessive = (z: Expression): ReturnType<typeof series> => {
    // (-1)^k (-p)_2k/(k! (2z^2)^k).
    const sum = hypergeometricSeries(over(1, square(z)), [scaled(q(1, 2), negative(p)), scaled(q(1, 2), tree(1, negative(p)))], [], Q.rational(-2));
    return { ...sum, divergent: sum.length === undefined };
  };
  const dominant = (z: Expression): ReturnType<typeof series> => {
    const sum = hypergeometricSeries(over(1, square(z)), [scaled(q(1, 2), tree(p, 1)), scaled(q(1, 2), tree(p, 2))], [], Q.rational(2));
    return { ...sum, divergent: sum.length === undefined };
  };
  if (place.kind === 'infinite') {
    const x = place.argument;
    const gaussian = exp(neg(over(square(x), 4)));
    if (place.direction === 1) return form(times(pow(x, pTree), gaussian, F1), [recessive(x)], 'DLMF 12.9.1');
    if (place.direction !== -1) return null;
    const w = neg(x);
    const parity = exact && Q.isInteger(exact) ? lift(exact.num % 2n === 0n ? 1 : -1) : cos(times(pi, pTree));
    const small = times(parity, pow(w, pTree), gaussian, F1);
    if (polynomial) return form(small, [recessive(w)], 'DLMF 12.9.1, 12.7.2');
    const large = times(sqrt(times(2, pi)), reciprocalGamma(neg(pTree)), exp(over(square(w), 4)), pow(w, lift(tree(negative(p), -1))), F2);
    return form(plus(large, small), [recessive(w), dominant(w)], 'DLMF 12.2.15, 12.9.1, 12.9.2');
  }
  if (!isAt(place, 0)) return null;
  const x = place.offset;
  const z = times(half, square(x));
  const even = times(sqrt(pi), reciprocalGamma(lift(scaled(q(1, 2), tree(1, negative(p))))), F1);
  const odd = times(sqrt(times(2, pi)), x, reciprocalGamma(lift(scaled(q(-1, 2), p))), F2);
  const formals = [hypergeometricSeries(z, [scaled(q(-1, 2), p)], [Q.HALF]), hypergeometricSeries(z, [scaled(q(1, 2), tree(1, negative(p)))], [q(3, 2)])];
  return form(times(pow(2, over(pTree, 2)), exp(neg(over(square(x), 4))), minus(even, odd)), formals, 'DLMF 12.2.6, 12.4.1, 12.7.12');
}
export const parabolicDerivative: NonNullable<FunctionDescription['derivative']> = ([p = lift(0), x = lift(0)], index) =>
  index === 1 ? minus(times(half, x, call('parabolicD', p, x)), call('parabolicD', lift(tree(p, 1)), x)) : null;
/** w'' = (x^2/4 - p - 1/2) w (DLMF 12.2.1, 12.2.4). */
export const parabolicEquation: NonNullable<FunctionDescription['equation']> = ([p = lift(0)], index) =>
  index === 1
    ? {
        polynomials: [[plus(p, q(1, 2)), lift(0), lift(q(-1, 4))], [], [lift(1)]],
        initial: [(point) => call('parabolicD', p, point), (point) => parabolicDerivative([p, point], 1) ?? lift(0)],
      }
    : null;
/** D_n for n = 0, 1, ... is Hermite's polynomial times a Gaussian (DLMF 12.7.2); D_p(0) (12.2.6). */
export function parabolicValue(args: readonly Expression[]): Expression | null {
  const x = argument(args, 1);
  const n = asInteger(argument(args, 0), 60);
  if (n !== null && n >= 0) {
    // He_n: He_(m+1) = x He_m - m He_(m-1).
    let [before, now] = [[0n], [1n]];
    for (let m = 0; m < n; m++) {
      const next = [0n, ...now];
      before.forEach((c, i) => (next[i] = (next[i] ?? 0n) - BigInt(m) * c));
      [before, now] = [now, next];
    }
    return times(exp(neg(over(square(x), 4))), plus(...now.flatMap((c, i) => (c === 0n ? [] : [times(c, pow(x, i))]))));
  }
  const zero = rationalOf(x);
  const p = argument(args, 0);
  return zero && Q.isZero(zero) ? times(pow(2, over(p, 2)), sqrt(pi), reciprocalGamma(lift(scaled(q(1, 2), tree(1, negative(parameter(p))))))) : null;
}
