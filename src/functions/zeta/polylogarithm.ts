/** Polylogarithms and the functions of their circle: Clausen, inverse tangent integral, Debye. Sources: DLMF 25.12, Abramowitz & Stegun 27.1, 27.8. */
import { build, type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { argument, bigO, call, exp, gamma, half, lift, log, minus, neg, over, pi, plus, pow, q, reciprocalGamma, scaled, square, times } from '../compose.ts';
import type { FormalSeries, FunctionDescription, LocalForm, Place } from '../description.ts';
import { asInteger, asMultipleOfPi } from '../exactForms.ts';
import { alternating, atInfinity, F1, formalName, form, isAt, realLog, series } from '../formal.ts';
import { bernoulli, factorial, harmonicNumber } from '../sequences.ts';
import { etaAtInteger, zetaAtInteger } from './exactZeta.ts';

/** sum over k >= 1 of x^k/k^s. */
function powerSum(s: Expression, x: Expression): FormalSeries {
  const n = asInteger(s, 1000);
  return series(x, (k) => {
    if (k === 0) return Q.ZERO;
    if (n !== null) return Q.power(Q.rational(k), -n);
    return k === 1 ? Q.ONE : pow(k, neg(s));
  });
}
const zetaTree = (s: Expression): Expression => {
  const n = asInteger(s, 1000);
  return n === null ? call('zeta', s) : lift(zetaAtInteger(n));
};

/** At x = exp(mu), mu -> 0: DLMF 25.12.12 and, for s = n = 1, 2, ..., its limit with the logarithm. */
function atOne(s: Expression, u: Expression): LocalForm {
  const mu = log(plus(1, u));
  const exact = rationalOf(s);
  const n = asInteger(s, 1000);
  const zetas = series(mu, (k) => {
    if (n !== null && n - k === 1) return Q.ZERO;
    return scaled(Q.rational(1n, factorial(k)), zetaTree(exact ? lift(Q.subtract(exact, Q.rational(k))) : minus(s, k)));
  });
  if (n !== null && n >= 1) {
    const lead = times(Q.rational(1n, factorial(n - 1)), pow(mu, n - 1), minus(harmonicNumber(n - 1), log(neg(mu))));
    return form(plus(lead, F1), [zetas], 'DLMF 25.12.12, limit at integers (Lewin 1981, from memory)');
  }
  return form(plus(times(gamma(minus(1, s)), pow(neg(mu), minus(s, 1))), F1), [zetas], 'DLMF 25.12.12');
}

/** For x to either infinity, w = log(-x): Li_n(x) = -2 sum eta(2k) w^(n-2k)/(n-2k)! - (-1)^n Li_n(1/x) (exact, principal values); for other s the Sommerfeld series, on the negative axis. */
function atFar(s: Expression, x: Expression, direction: 1 | -1): LocalForm | null {
  const w = log(neg(x));
  const n = asInteger(s, 1000);
  const eta = (k: number): Rational | Expression => (k === 0 ? Q.HALF : etaAtInteger(2 * k));
  if (n !== null && n >= 1) {
    const terms = Array.from({ length: Math.floor(n / 2) + 1 }, (_, k) => times(Q.rational(-2n, factorial(n - 2 * k)), eta(k), pow(w, n - 2 * k)));
    return form(plus(...terms, times(n % 2 === 0 ? -1 : 1, F1)), [powerSum(s, over(1, x))], 'Inversion formula of Jonquière; DLMF 25.12.7 for order 2');
  }
  if (direction === 1 || n !== null) return null;
  const exact = rationalOf(s);
  const shifted = (k: number): Expression => (exact ? lift(Q.add(exact, Q.rational(1 - 2 * k))) : plus(s, 1 - 2 * k));
  const sum = series(over(1, square(w)), (k) => times(-2, eta(k), reciprocalGamma(shifted(k))), { divergent: true });
  return form(times(pow(w, s), F1), [sum], 'Sommerfeld expansion; DLMF 25.12.16 at large x', { subdominantDropped: true });
}

export function polylogLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  const s = argument(args, 0);
  if (index === 0) {
    const order = atInfinity(place, 1);
    const x = argument(args, 1);
    if (!order) return null;
    const count = 24;
    const terms = Array.from({ length: count }, (_, i) => times(pow(x, i + 1), i === 0 ? 1 : exp(neg(times(order, log(i + 1))))));
    return form(plus(...terms, bigO(exp(neg(times(order, log(count + 1)))))), [], 'DLMF 25.12.10');
  }
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    return atFar(s, place.argument, place.direction);
  }
  if (isAt(place, 0)) return form(F1, [powerSum(s, place.offset)], 'DLMF 25.12.10');
  return isAt(place, 1) ? atOne(s, place.offset) : null;
}

export const polylogDerivative: NonNullable<FunctionDescription['derivative']> = (args, index) => {
  if (index !== 1) return null;
  const s = argument(args, 0);
  const x = argument(args, 1);
  const exact = rationalOf(s);
  const lower = exact ? lift(Q.subtract(exact, Q.ONE)) : minus(s, 1);
  return over(polylogValue([lower, x]) ?? call('polylog', lower, x), x);
};

/** Orders 1, 0, -1, ... are elementary; Li_n at 0, 1, -1; Li_2(1/2), Li_3(1/2) (DLMF 25.12.6 and Lewin 1981). */
export function polylogValue(args: readonly Expression[]): Expression | null {
  const [s = lift(2), x = lift(0)] = args;
  const at = rationalOf(x);
  if (at && Q.isZero(at)) return lift(0);
  const n = asInteger(s, 1000);
  if (n === 1) return neg(log(minus(1, x)));
  if (n !== null && n <= 0 && n >= -24) return eulerianQuotient(-n, x);
  if (!at) return null;
  if (Q.isOne(at)) {
    if (n !== null) return n >= 2 ? lift(zetaAtInteger(n)) : null;
    const exact = rationalOf(s);
    return exact && Q.compare(exact, Q.ONE) > 0 ? call('zeta', s) : null;
  }
  if (Q.equal(at, Q.MINUS_ONE)) return n === null ? neg(call('dirichletEta', s)) : neg(lift(etaAtInteger(n)));
  if (Q.equal(at, Q.HALF) && n === 2) return minus(times(q(1, 12), square(pi)), times(half, square(log(2))));
  if (Q.equal(at, Q.HALF) && n === 3) return plus(times(q(7, 8), call('zeta', 3)), times(q(-1, 12), square(pi), log(2)), times(q(1, 6), pow(log(2), 3)));
  return null;
}
/** Li_-n(x) = (x d/dx)^n x/(1-x) = x A_n(x)/(1-x)^(n+1), A_n Eulerian. */
function eulerianQuotient(n: number, x: Expression): Expression {
  let row = [1n];
  for (let m = 2; m <= n; m++) row = Array.from({ length: m }, (_, j) => BigInt(j + 1) * (row[j] ?? 0n) + BigInt(m - j) * (row[j - 1] ?? 0n));
  return over(times(x, plus(...row.map((c, j) => times(c, pow(x, j))))), pow(minus(1, x), n + 1));
}

/** Cl_2(theta) at the multiples of 2pi: -t log|t| + t + sum |B_2k| t^(2k+1)/(2k (2k+1)!) (Abramowitz & Stegun 27.8.2). */
export function clausenLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  if (place.kind !== 'finite' || place.side === 'complex') return null;
  const turn = asMultipleOfPi(place.center) ?? rationalOf(place.center);
  const isPeriod = turn && Q.isInteger(turn) && turn.num % 2n === 0n && (Q.isZero(turn) || asMultipleOfPi(place.center) !== null);
  if (!isPeriod) return null;
  const t = place.offset;
  const sum = series(t, (j) => (j < 3 || j % 2 === 0 ? Q.ZERO : Q.divide(Q.absolute(bernoulli(j - 1)), Q.rational(BigInt(j - 1) * factorial(j)))));
  return form(plus(neg(times(t, realLog(place))), t, F1), [sum], 'Abramowitz & Stegun 27.8.2');
}
export const clausenDerivative = ([t = lift(0)]: readonly Expression[]): Expression => neg(log(call('abs', times(2, call('sin', times(half, t))))));
export function clausenValue([t]: readonly Expression[]): Expression | null {
  const turn = t && (asMultipleOfPi(t) ?? (t.kind === 'number' && Q.isZero(t.value) ? Q.ZERO : null));
  if (!turn) return null;
  if (Q.isInteger(turn)) return lift(0);
  if (turn.den !== 2n) return null;
  const odd = ((turn.num % 4n) + 4n) % 4n;
  return times(odd === 1n ? 1 : -1, build.constant('catalan'));
}

/** Ti_2 at 0 and by inversion Ti_2(x) = sgn(x) (pi/2) log|x| + Ti_2(1/x) (Lewin 1981, 2.5, from memory). */
export function inverseTangentIntegralLocal(_args: readonly Expression[], _index: number, place: Place): LocalForm | null {
  const odd = (x: Expression): FormalSeries => series(x, (j) => (j % 2 === 0 ? Q.ZERO : Q.multiply(alternating((j - 1) / 2), q(1, j * j))));
  if (place.kind === 'infinite') {
    if (place.direction !== 1 && place.direction !== -1) return null;
    const x = place.argument;
    return form(plus(times(q(place.direction, 2), pi, log(times(place.direction, x))), F1), [odd(over(1, x))], 'Lewin 1981, 2.2 and 2.5, from memory');
  }
  return isAt(place, 0) ? form(F1, [odd(place.offset)], 'Lewin 1981, 2.2, from memory') : null;
}

/** Debye function D_n(x) = n/x^n times the integral of t^n/(e^t - 1) from 0 to x, n = 1, 2, ... (Abramowitz & Stegun 27.1.1, 27.1.2). */
export function debyeLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  const n = asInteger(argument(args, 0), 60);
  if (index !== 1 || n === null || n < 1) return null;
  if (place.kind === 'finite') {
    if (!isAt(place, 0)) return null;
    return form(F1, [series(place.offset, (k) => Q.multiply(Q.rational(n, n + k), Q.divide(bernoulli(k), Q.rational(factorial(k)))))], 'Abramowitz & Stegun 27.1.1');
  }
  const x = atInfinity(place, 1);
  if (!x) return null;
  const whole = times(Q.rational(BigInt(n) * factorial(n)), zetaAtInteger(n + 1), pow(x, -n));
  // n/x^n times the integral from x on: sum over j of n n!/(n-j)! x^-j Li_(j+1)(e^-x).
  const formals = Array.from({ length: n + 1 }, (_, j) => powerSum(lift(j + 1), exp(neg(x))));
  const tail = Array.from({ length: n + 1 }, (_, j) => times(Q.rational(BigInt(n) * factorial(n), factorial(n - j)), pow(x, -j), formalName(j)));
  return form(minus(whole, plus(...tail)), formals, 'Abramowitz & Stegun 27.1.2');
}
export const debyeDerivative: NonNullable<FunctionDescription['derivative']> = ([n = lift(1), x = lift(0)], index) =>
  index === 1 ? times(n, minus(over(1, minus(exp(x), 1)), over(call('debye', n, x), x))) : null;
