/** inverfc(x) as x -> 0+: an expansion in powers of 1/L with L = log(1/x) and polynomials in log(pi L), found by solving the asymptotic equation order by order (DLMF 7.17(iii) gives the first terms in another arrangement). */
import { type Expression, Q, type Rational } from '../../expression/index.ts';
import { bigO, half, log, over, pi, plus, pow, sqrt, times } from '../compose.ts';
import { risingFactorial } from '../sequences.ts';

/** Polynomials in lambda, lowest power first. */
type Polynomial = readonly Rational[];
/** Coefficients of sigma^0, sigma^1, ... with sigma = 1/L. */
type Series = readonly Polynomial[];

const ORDERS = 9;
const constant = (c: Rational): Polynomial => [c];
const addPolynomials = (a: Polynomial, b: Polynomial): Polynomial => Array.from({ length: Math.max(a.length, b.length) }, (_, i) => Q.add(a[i] ?? Q.ZERO, b[i] ?? Q.ZERO));
const scalePolynomial = (a: Polynomial, c: Rational): Polynomial => a.map((v) => Q.multiply(v, c));
function multiplyPolynomials(a: Polynomial, b: Polynomial): Polynomial {
  const out: Rational[] = Array.from({ length: a.length + b.length - 1 }, () => Q.ZERO);
  a.forEach((x, i) => b.forEach((y, j) => (out[i + j] = Q.add(out[i + j] ?? Q.ZERO, Q.multiply(x, y)))));
  return out;
}
const series = (member: (n: number) => Polynomial): Series => Array.from({ length: ORDERS + 1 }, (_, n) => member(n));
const addSeries = (a: Series, b: Series): Series => series((n) => addPolynomials(a[n] ?? [], b[n] ?? []));
const scaleSeries = (a: Series, c: Rational): Series => a.map((p) => scalePolynomial(p, c));
const multiplySeries = (a: Series, b: Series): Series =>
  series((n) => {
    let sum: Polynomial = constant(Q.ZERO);
    for (let i = 0; i <= n; i++) sum = addPolynomials(sum, multiplyPolynomials(a[i] ?? constant(Q.ZERO), b[n - i] ?? constant(Q.ZERO)));
    return sum;
  });
const shift = (a: Series): Series => series((n) => (n === 0 ? constant(Q.ZERO) : (a[n - 1] ?? constant(Q.ZERO))));
/** sum of c_k w^k for a series w without constant term. */
function substituted(c: (k: number) => Rational, w: Series): Series {
  let power: Series = series((n) => constant(n === 0 ? Q.ONE : Q.ZERO));
  let sum: Series = scaleSeries(power, c(0));
  for (let k = 1; k <= ORDERS; k++) {
    power = multiplySeries(power, w);
    sum = addSeries(sum, scaleSeries(power, c(k)));
  }
  return sum;
}
const logarithm = (k: number): Rational => (k === 0 ? Q.ZERO : Q.rational(k % 2 === 1 ? 1 : -1, k));

/** Coefficients of log S(w), S = sum of (-1)^k (1/2)_k w^k, from S' = S (log S)'. */
function logTail(): readonly Rational[] {
  const s = Array.from({ length: ORDERS + 1 }, (_, k) => Q.multiply(Q.rational(k % 2 === 0 ? 1 : -1), risingFactorial(Q.HALF, k)));
  const out: Rational[] = [Q.ZERO];
  for (let n = 1; n <= ORDERS; n++) {
    let total = Q.multiply(Q.rational(n), s[n] ?? Q.ZERO);
    for (let k = 1; k < n; k++) total = Q.subtract(total, Q.multiply(Q.multiply(Q.rational(k), out[k] ?? Q.ZERO), s[n - k] ?? Q.ZERO));
    out.push(Q.divide(total, Q.rational(n)));
  }
  return out;
}

/** W with y^2 = L(1 + W): W = -sigma (lambda + log(1+W)/2 - log S(sigma/(1+W))), lambda = log(pi L)/2; each round fixes one more order. */
function solve(): Series {
  const logS = logTail();
  let w: Series = series(() => constant(Q.ZERO));
  const lambda: Series = series((n) => (n === 0 ? [Q.ZERO, Q.ONE] : constant(Q.ZERO)));
  for (let round = 0; round <= ORDERS; round++) {
    const inverse = substituted((k) => Q.rational(k % 2 === 0 ? 1 : -1), w);
    const tail = substituted((k) => logS[k] ?? Q.ZERO, shift(inverse));
    const inner = addSeries(addSeries(lambda, scaleSeries(substituted(logarithm, w), Q.HALF)), scaleSeries(tail, Q.MINUS_ONE));
    w = scaleSeries(shift(inner), Q.MINUS_ONE);
  }
  return w;
}

/** Solved when first asked for: a tenth of a second that no other function should wait for. */
let solution: Series | undefined;

/** inverfc of exp(-L) for large L. */
export function inverseTail(L: Expression): Expression {
  const lambda = times(half, log(times(pi, L)));
  solution ??= solve();
  const terms = solution.slice(1).flatMap((p, i) => p.flatMap((c, j) => (Q.isZero(c) ? [] : [times(c, over(pow(lambda, j), pow(L, i + 1)))])));
  return times(sqrt(L), sqrt(plus(1, ...terms, bigO(pow(over(log(L), L), ORDERS + 1)))));
}
