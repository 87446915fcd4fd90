/** Identities between functions: numerically with enclosures, and exactly between the coefficient sequences of local forms. */
import { describe, expect, it } from 'vitest';
import { build, type Expression, Q, type Rational } from '../../src/expression/index.ts';
import { describe as description, type FormalSeries, type Place } from '../../src/functions/index.ts';
import { real } from '../../src/rigorous/index.ts';
import { tree as q, valueOf } from './support.ts';

const { call, power, product, quotient, squareRoot, sum, difference, negation } = build;
const pi = build.constant('pi');
const f = (id: string, ...args: readonly (Expression | string)[]): Expression => call(id, ...args.map((a) => (typeof a === 'string' ? q(a) : a)));
const half = q('1/2');

/** Both sides, and where the identity stands. */
const NUMERIC: readonly (readonly [string, Expression, Expression])[] = [
  ['DLMF 5.5.5', f('gamma', '5/2'), product(quotient(power(q('2'), q('3/2')), squareRoot(pi)), f('gamma', '5/4'), f('gamma', '7/4'))],
  ['DLMF 5.5.3', product(f('gamma', '3/8'), f('gamma', '5/8')), quotient(pi, f('sin', product(q('3/8'), pi)))],
  ['DLMF 5.5.8', f('digamma', '3/2'), sum(product(half, f('digamma', '3/4')), product(half, f('digamma', '5/4')), f('log', '2'))],
  ['DLMF 5.15.5', f('polygamma', '2', '9/4'), sum(f('polygamma', '2', '5/4'), quotient(q('2'), power(q('5/4'), 3)))],
  ['DLMF 8.2.3', f('gamma', '5/4'), sum(f('upperGamma', '5/4', '7/2'), f('lowerGamma', '5/4', '7/2'))],
  ['DLMF 8.8.2', f('upperGamma', '5/4', '7/2'), sum(product(q('1/4'), f('upperGamma', '1/4', '7/2')), product(power(q('7/2'), q('1/4')), f('exp', '-7/2')))],
  ['DLMF 5.17.1', f('barnesG', '13/4'), product(f('gamma', '9/4'), f('barnesG', '9/4'))],
  ['DLMF 7.4.2', f('erfc', '-5/4'), difference(q('2'), f('erfc', '5/4'))],
  ['DLMF 7.5.1', f('dawson', '5/4'), product(half, squareRoot(pi), f('exp', '-25/16'), f('erfi', '5/4'))],
  ['DLMF 7.11.2', f('erfc', '5/4'), quotient(f('upperGamma', '1/2', '25/16'), squareRoot(pi))],
  ['DLMF 8.19.12', product(q('2'), f('expIntegralE', '3', '5/4')), difference(f('exp', '-5/4'), product(q('5/4'), f('expIntegralE', '2', '5/4')))],
  ['DLMF 6.5.5', f('sinhIntegral', '7/4'), product(half, sum(f('expIntegralEi', '7/4'), f('expIntegralE', '1', '7/4')))],
  ['DLMF 10.5.2', difference(product(f('besselJ', '5/4', '7/2'), f('besselY', '1/4', '7/2')), product(f('besselJ', '1/4', '7/2'), f('besselY', '5/4', '7/2'))), quotient(q('2'), product(pi, q('7/2')))],
  ['DLMF 10.28.2', sum(product(f('besselI', '1/4', '7/2'), f('besselK', '5/4', '7/2')), product(f('besselI', '5/4', '7/2'), f('besselK', '1/4', '7/2'))), q('2/7')],
  ['DLMF 10.6.1', sum(f('besselY', '1', '9/2'), f('besselY', '3', '9/2')), product(q('8/9'), f('besselY', '2', '9/2'))],
  ['DLMF 9.2.7', difference(product(f('airyAi', '-9/4'), f('airyBiPrime', '-9/4')), product(f('airyAiPrime', '-9/4'), f('airyBi', '-9/4'))), quotient(q('1'), pi)],
  ['DLMF 9.2.7', difference(product(f('airyAi', '41/2'), f('airyBiPrime', '41/2')), product(f('airyAiPrime', '41/2'), f('airyBi', '41/2'))), quotient(q('1'), pi)],
  ['DLMF 11.4.1', f('struveH', '1/2', '9/4'), product(squareRoot(quotient(q('2'), product(pi, q('9/4')))), difference(q('1'), f('cos', '9/4')))],
  ['DLMF 11.4.23', sum(f('struveH', '0', '9/4'), f('struveH', '2', '9/4')), sum(product(q('8/9'), f('struveH', '1', '9/4')), quotient(q('9/8'), product(squareRoot(pi), f('gamma', '5/2'))))],
  ['DLMF 10.63.1', sum(f('kelvinBer', '0', '5/2'), f('kelvinBer', '2', '5/2')), product(q('-2/5'), squareRoot(q('2')), difference(f('kelvinBer', '1', '5/2'), f('kelvinBei', '1', '5/2')))],
  ['DLMF 19.7.1 (Legendre)', sum(product(f('ellipticE', '3/5'), f('ellipticK', '4/5')), product(f('ellipticE', '4/5'), f('ellipticK', '3/5')), negation(product(f('ellipticK', '3/5'), f('ellipticK', '4/5')))), quotient(pi, q('2'))],
  ['DLMF 19.8.12', f('ellipticK', '3/5'), product(q('10/9'), f('ellipticK', '1/9'))],
  ['DLMF 22.6.1', sum(power(f('jacobiSn', '5/4', '3/4'), 2), power(f('jacobiCn', '5/4', '3/4'), 2)), q('1')],
  ['DLMF 22.6.5', f('jacobiSn', '5/2', '1/2'), quotient(product(q('2'), f('jacobiSn', '5/4', '1/2'), f('jacobiCn', '5/4', '1/2'), f('jacobiDn', '5/4', '1/2')), difference(q('1'), product(q('1/4'), power(f('jacobiSn', '5/4', '1/2'), 4))))],
  ['DLMF 4.13.1', product(f('lambertW', '-1', '-1/4'), f('exp', f('lambertW', '-1', '-1/4'))), q('-1/4')],
  ['DLMF 4.13.1', f('wrightOmega', '5/2'), difference(q('5/2'), f('log', f('wrightOmega', '5/2')))],
  ['DLMF 25.4.2', f('zeta', '-5/4'), product(power(q('2'), q('-5/4')), power(pi, q('-9/4')), f('sin', product(q('-5/8'), pi)), f('gamma', '9/4'), f('zeta', '9/4'))],
  ['DLMF 25.11.3', f('hurwitzZeta', '9/4', '5/4'), difference(f('hurwitzZeta', '9/4', '1/4'), power(q('1/4'), q('-9/4')))],
  ['DLMF 25.12.6', sum(f('polylog', '2', '3/8'), f('polylog', '2', '5/8')), difference(quotient(power(pi, 2), q('6')), product(f('log', '3/8'), f('log', '5/8')))],
  ['DLMF 25.12.4', f('polylog', '2', '-5/2'), difference(difference(negation(quotient(power(pi, 2), q('6'))), product(half, power(f('log', '5/2'), 2))), f('polylog', '2', '-2/5'))],
  ['Lewin 1981, duplication (from memory)', sum(f('polylog', '5/2', '7/8'), f('polylog', '5/2', '-7/8')), product(power(q('2'), q('-3/2')), f('polylog', '5/2', '49/64'))],
  ['Clausen duplication, DLMF 25.12.9 with 25.12.3', f('clausen', '5/2'), difference(product(q('2'), f('clausen', '5/4')), product(q('2'), f('clausen', difference(pi, q('5/4')))))],
  ['DLMF 15.8.1', f('hypergeometric', '2', '1', '1/4', '3/4', '5/4', '3/8'), product(power(q('5/8'), q('-1/4')), f('hypergeometric', '2', '1', '1/4', '1/2', '5/4', '-3/5'))],
  ['DLMF 13.2.39', f('hypergeometric', '1', '1', '1/4', '7/4', '5/2'), product(f('exp', '5/2'), f('hypergeometric', '1', '1', '3/2', '7/4', '-5/2'))],
  ['DLMF 13.2.40', f('kummerU', '1/4', '5/2', '3/4'), product(power(q('3/4'), q('-3/2')), f('kummerU', '-5/4', '-1/2', '3/4'))],
  ['DLMF 12.7.1 with 12.2.4', f('parabolicD', '-1', '5/4'), product(f('exp', '25/64'), squareRoot(quotient(pi, q('2'))), f('erfc', product(q('5/4'), squareRoot(half))))],
  ['DLMF 19.6.1', f('ellipticPiParameter', '0', '1/4'), f('ellipticKParameter', '1/4')],
  ['DLMF 25.11.18', f('zetaDerivative', '1', '0'), product(q('-1/2'), f('log', product(q('2'), pi)))],
];

describe('identities between enclosures', () => {
  it.each(NUMERIC.map(([source, left, right], i) => [`${i + 1}: ${source}`, left, right] as const))('%s', (_label, left, right) => {
    const [a, b] = [valueOf(left, 160), valueOf(right, 160)];
    expect(a).not.toBeNull();
    expect(b).not.toBeNull();
    if (!a || !b) return;
    expect(real.overlaps(a, b)).toBe(true);
    expect(real.relativeAccuracy(a)).toBeGreaterThan(100);
  });
});

/** The series of a form, by its place, as rational coefficients. */
function coefficients(id: string, args: readonly string[], place: Place, which: number, count: number): Rational[] {
  const index = args.indexOf('*');
  const form = description(id)?.local?.(args.map((a) => (a === '*' ? build.symbol('z') : q(a))), index, place);
  const formal: FormalSeries | undefined = form ? Object.values(form.formals)[which] : undefined;
  if (!formal) throw new Error(`no series ${which} of ${id}`);
  return Array.from({ length: count }, (_, k) => {
    const c = formal.coefficient(k);
    if ('kind' in c) throw new Error(`coefficient ${k} of ${id} is no rational`);
    return c;
  });
}
const infinity: Place = { kind: 'infinite', argument: build.symbol('z'), direction: 1 };
const minusInfinity: Place = { kind: 'infinite', argument: build.symbol('z'), direction: -1 };
const origin: Place = { kind: 'finite', center: build.number(0), offset: build.symbol('z'), side: 'right' };
const one: Place = { kind: 'finite', center: build.number(1), offset: build.symbol('z'), side: 'left' };
const multiply = (a: readonly Rational[], b: readonly Rational[]): Rational[] =>
  a.map((_, n) => a.slice(0, n + 1).reduce((total, x, i) => Q.add(total, Q.multiply(x, b[n - i] ?? Q.ZERO)), Q.ZERO));
const zeros = (n: number): Rational[] => Array.from({ length: n }, () => Q.ZERO);
const flip = (a: readonly Rational[]): Rational[] => a.map((x, k) => (k % 2 === 0 ? x : Q.negate(x)));
const N = 24;

describe('identities between series, exactly', () => {
  it('Stirling: S(1/z) - S(1/(z+1)) = (z + 1/2) log(1 + 1/z) - 1 (DLMF 5.5.1 with 5.11.1)', () => {
    const s = coefficients('logGamma', ['*'], infinity, 0, N);
    // t = 1/z; S(t/(1+t)): (t/(1+t))^k = sum of binomial(-k, j) t^(k+j).
    const shifted = zeros(N);
    for (let k = 1; k < N; k++) {
      let c = Q.ONE;
      for (let j = 0; k + j < N; j++) {
        shifted[k + j] = Q.add(shifted[k + j] ?? Q.ZERO, Q.multiply(s[k] ?? Q.ZERO, c));
        c = Q.multiply(c, Q.rational(-k - j, j + 1));
      }
    }
    for (let n = 1; n < N - 1; n++) {
      const log = (m: number): Rational => Q.rational(m % 2 === 1 ? 1 : -1, m);
      const right = Q.add(log(n + 1), Q.multiply(Q.HALF, log(n)));
      expect(Q.toText(Q.subtract(s[n] ?? Q.ZERO, shifted[n] ?? Q.ZERO))).toBe(Q.toText(right));
    }
  });

  it('digamma and trigamma at infinity are derivatives of log Gamma', () => {
    const s = coefficients('logGamma', ['*'], infinity, 0, N);
    const psi = coefficients('digamma', ['*'], infinity, 0, N);
    const trigamma = coefficients('polygamma', ['1', '*'], infinity, 0, N);
    for (let n = 2; n < N; n++) {
      expect(psi[n]).toEqual(Q.multiply(Q.rational(-(n - 1)), s[n - 1] ?? Q.ZERO));
      expect(trigamma[n]).toEqual(Q.add(n === 2 ? Q.HALF : Q.ZERO, n === 2 ? Q.ZERO : Q.multiply(Q.rational(-(n - 1)), psi[n - 1] ?? Q.ZERO)));
    }
    expect(Q.toText(psi[1] ?? Q.ZERO)).toBe('-1/2');
    expect(Q.toText(trigamma[1] ?? Q.ZERO)).toBe('1');
  });

  it.each(['0', '1', '1/3', '5/2'])('Hankel expansions of order %s: I K product equals DLMF 10.40.6', (order) => {
    const i = coefficients('besselI', [order, '*'], infinity, 0, N);
    const k = coefficients('besselK', [order, '*'], infinity, 0, N);
    const product_ = multiply(i, k);
    // 2x I K = 1 - (1/2)(mu-1)/(2x)^2 + (1*3)/(2*4) (mu-1)(mu-9)/(2x)^4 - ...
    const mu = Q.multiply(Q.rational(4), Q.power(Q.multiply(Q.ONE, rationalOf(order)), 2));
    let c = Q.ONE;
    for (let m = 0; 2 * m < N; m++) {
      expect(Q.toText(product_[2 * m] ?? Q.ZERO)).toBe(Q.toText(c));
      if (2 * m + 1 < N) expect(product_[2 * m + 1]?.num).toBe(0n);
      c = Q.multiply(c, Q.multiply(Q.rational(-(2 * m + 1), 4 * (2 * m + 2)), Q.subtract(mu, Q.rational((2 * m + 1) ** 2))));
    }
  });

  it.each(['0', '2', '1/3'])('modulus of order %s: P^2 + Q^2 equals DLMF 10.18.17', (order) => {
    const p = coefficients('besselJ', [order, '*'], infinity, 0, N);
    const r = coefficients('besselJ', [order, '*'], infinity, 1, N);
    const squares = multiply(p, p).map((x, n) => Q.add(x, multiply(r, r)[n] ?? Q.ZERO));
    const mu = Q.multiply(Q.rational(4), Q.power(rationalOf(order), 2));
    let c = Q.ONE;
    for (let m = 0; 2 * m < N; m++) {
      expect(Q.toText(squares[2 * m] ?? Q.ZERO)).toBe(Q.toText(c));
      c = Q.multiply(c, Q.multiply(Q.rational(2 * m + 1, 4 * (2 * m + 2)), Q.subtract(mu, Q.rational((2 * m + 1) ** 2))));
    }
  });

  it('Airy: u and v series satisfy the Wronskian (DLMF 9.2.7)', () => {
    const u = coefficients('airyBi', ['*'], infinity, 0, N);
    const v = coefficients('airyBiPrime', ['*'], infinity, 0, N);
    const w = multiply(flip(u), v).map((x, n) => Q.add(x, multiply(flip(v), u)[n] ?? Q.ZERO));
    expect(w[0]).toEqual(Q.rational(2));
    for (const x of w.slice(1)) expect(x.num).toBe(0n);
    expect(coefficients('airyAi', ['*'], minusInfinity, 0, 3).map(Q.toText)).toEqual(['1', '0', '-385/10368']);
  });

  it('Lambert W at 0 inverts w e^w (DLMF 4.13.5)', () => {
    const w = coefficients('lambertW', ['0', '*'], origin, 0, N);
    let term = [Q.ONE, ...zeros(N - 1)];
    let exp = zeros(N);
    for (let k = 0; k < N; k++) {
      exp = exp.map((x, n) => Q.add(x, term[n] ?? Q.ZERO));
      term = multiply(term, w).map((x) => Q.divide(x, Q.rational(k + 1)));
    }
    expect(multiply(w, exp).map(Q.toText)).toEqual(['0', '1', ...Array.from({ length: N - 2 }, () => '0')]);
  });

  it('Lambert W at the branch point: printed coefficients (DLMF 4.13.6)', () => {
    const at: Place = { kind: 'finite', center: negation(f('exp', '-1')), offset: build.symbol('z'), side: 'right' };
    expect(coefficients('lambertW', ['0', '*'], at, 0, 6).map(Q.toText)).toEqual(['-1', '1', '-1/3', '11/72', '-43/540', '769/17280']);
  });

  it('inverse error function: printed coefficients (DLMF 7.17.2)', () => {
    // inverf x = t + t^3/3 + 7 t^5/30 + 127 t^7/630 + ..., t = sqrt(pi) x/2.
    expect(coefficients('erfinv', ['*'], origin, 0, 8).map(Q.toText)).toEqual(['0', '1', '0', '1/3', '0', '7/30', '0', '127/630']);
  });

  it('elliptic K and E at k = 1: printed terms (DLMF 19.12.1, 19.12.2)', () => {
    expect(coefficients('ellipticKParameter', ['*'], one, 0, 3).map(Q.toText)).toEqual(['1', '1/4', '9/64']);
    expect(coefficients('ellipticKParameter', ['*'], one, 1, 3).map(Q.toText)).toEqual(['0', '-1/4', '-21/128']);
    expect(coefficients('ellipticEParameter', ['*'], one, 0, 3).map(Q.toText)).toEqual(['0', '1/2', '3/16']);
    expect(coefficients('ellipticEParameter', ['*'], one, 1, 3).map(Q.toText)).toEqual(['0', '-1/4', '-13/64']);
  });

  it('Jacobian functions: sn^2 + cn^2 = 1 and dn^2 + k^2 sn^2 = 1 as series (DLMF 22.6.1)', () => {
    const [sn, cn, dn] = ['jacobiSn', 'jacobiCn', 'jacobiDn'].map((id) => coefficients(id, ['*', '2/3'], origin, 0, N));
    if (!sn || !cn || !dn) throw new Error('no series');
    const unit = ['1', ...Array.from({ length: N - 1 }, () => '0')];
    expect(multiply(sn, sn).map((x, n) => Q.toText(Q.add(x, multiply(cn, cn)[n] ?? Q.ZERO)))).toEqual(unit);
    expect(multiply(sn, sn).map((x, n) => Q.toText(Q.add(Q.multiply(Q.rational(4, 9), x), multiply(dn, dn)[n] ?? Q.ZERO)))).toEqual(unit);
  });

  it('Barnes G: printed coefficients (DLMF 5.17.5 with Bernoulli numbers)', () => {
    expect(coefficients('logBarnesG', ['*'], infinity, 0, 4).map(Q.toText)).toEqual(['0', '-1/240', '1/1008', '-1/1440']);
  });

  it('Clausen: printed coefficients (Abramowitz & Stegun 27.8.2)', () => {
    expect(coefficients('clausen', ['*'], origin, 0, 6).map(Q.toText)).toEqual(['0', '0', '0', '1/72', '0', '1/14400']);
  });
});

function rationalOf(text: string): Rational {
  const e = q(text);
  return e.kind === 'number' ? e.value : Q.ZERO;
}
