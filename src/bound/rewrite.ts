/** Exact identities that bring a special function to a place where it can be modelled: away from poles, its logarithm in the open, or its asymptotic series with a proven remainder. */
import { build, type Expression, Q } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import type { Model, ModelArithmetic } from '../rigorous/index.ts';
import { lambertAtBranch } from './lambertBranch.ts';
import { nearZero } from './nearZero.ts';
import type { Numbers } from './numbers.ts';

const { call, constant, difference, negation, number, power, product, quotient, squareRoot, sum } = build;
const log = (e: Expression): Expression => call('log', e);
const exp = (e: Expression): Expression => call('exp', e);
const MOST_STEPS = 60;

/** Names of series that only bound/ knows: formal series at infinity whose remainder lies between zero and the first term left out. */
export const ENVELOPES = [
  'enveloping log gamma', 'enveloping digamma', 'enveloping polygamma', 'enveloping erfc', 'enveloping exponential integral', 'enveloping incomplete gamma', 'enveloping Ei', 'enveloping Bessel K', 'enveloping Bessel I',
  'enveloping Bessel P', 'enveloping Bessel Q', 'enveloping Airy', 'enveloping sine integral f', 'enveloping sine integral g', 'enveloping Fresnel f', 'enveloping Fresnel g', 'enveloping Dawson', 'enveloping Barnes G',
] as const;
export type EnvelopeName = (typeof ENVELOPES)[number];

/** The call written differently, or null. `models` are those of the arguments. */
export function rewriteCall<T>(id: string, args: readonly Expression[], models: readonly Model<T>[], n: Numbers<T>, m: ModelArithmetic<T>): Expression | null {
  const { r } = n;
  const last = models.length - 1;
  const [u, x] = [models[last], args[last]];
  if (u === undefined || x === undefined) return null;
  // A polynomial wherever it stands.
  if (id === 'bernoulliPolynomial') return describe(id)?.value?.(args) ?? null;
  if (u.valuation < 0) return atInfinity(id, args, x, r.isPositive(u.range) ? 1 : r.isNegative(u.range) ? -1 : 0);
  if (u.valuation > 0) {
    const small = nearZero(id, args, x, r.isPositive(u.range) ? 1 : r.isNegative(u.range) ? -1 : 0);
    if (small !== null) return small;
  }
  if (id === 'lambertW') return lambertAtBranch(args, u, n);
  if (id === 'barnesG') {
    // G(z+1) = Gamma(z) G(z) (DLMF 5.17.1) until the logarithm is real.
    if (r.isPositive(u.range) && u.valuation === 0) return exp(call('logBarnesG', x));
    return u.valuation >= 0 && r.toDouble(r.lowerEnd(m.rangeOf(u) ?? r.zero)) > -MOST_STEPS ? quotient(call('barnesG', sum(x, number(1))), call('gamma', x)) : null;
  }
  if (!['gamma', 'logGamma', 'digamma', 'polygamma'].includes(id)) return null;
  const range = m.rangeOf(u);
  if (range === null) return null;
  const low = r.toDouble(r.lowerEnd(range));
  const width = r.toDouble(r.upperEnd(range)) - low;
  const steps = Math.ceil(Math.max(1, 2.5 * width) - low);
  if (steps > MOST_STEPS) return null;
  if (steps > 0) return shifted(id, args, x, steps, r.isPositive(u.range) && (u.valuation === 0 || r.isNonNegative(m.domain)));
  return id === 'gamma' ? exp(call('logGamma', x)) : null;
}

function shifted(id: string, args: readonly Expression[], x: Expression, steps: number, positive: boolean): Expression | null {
  const moved = sum(x, number(steps));
  const factors = Array.from({ length: steps }, (_, k) => (k === 0 ? x : sum(x, number(k))));
  switch (id) {
    case 'gamma':
      return quotient(call('gamma', moved), product(...factors));
    case 'logGamma':
      return positive ? sum(call('logGamma', moved), ...factors.map((factor) => negation(log(factor)))) : null;
    case 'digamma':
      return sum(call('digamma', moved), ...factors.map((factor) => negation(quotient(number(1), factor))));
    default: {
      // psi^(m)(x) = psi^(m)(x+1) - (-1)^m m!/x^(m+1).
      const [order] = args;
      if (order?.kind !== 'number' || !Q.isInteger(order.value) || order.value.num < 0n || order.value.num > 40n) return null;
      const degree = Number(order.value.num);
      let factorial = 1n;
      for (let i = 2; i <= degree; i += 1) factorial *= BigInt(i);
      const weight = number(degree % 2 === 0 ? -factorial : factorial);
      return sum(call('polygamma', order, moved), ...factors.map((factor) => quotient(weight, power(factor, degree + 1))));
    }
  }
}

function atInfinity(id: string, args: readonly Expression[], x: Expression, sign: number): Expression | null {
  const half = number({ num: 1n, den: 2n });
  switch (id) {
    case 'logGamma':
      // DLMF 5.11.1.
      return sign > 0 ? sum(product(difference(x, half), log(x)), negation(x), quotient(log(product(number(2), constant('pi'))), number(2)), call('enveloping log gamma', x)) : null;
    case 'gamma':
      return sign > 0 ? exp(call('logGamma', x)) : null;
    case 'digamma':
      // DLMF 5.11.2.
      return sign > 0 ? sum(log(x), negation(quotient(number(1), product(number(2), x))), call('enveloping digamma', x)) : null;
    case 'polygamma': {
      // DLMF 5.15.8: (-1)^(n+1) psi^(n)(x) = (n-1)!/x^n + n!/(2 x^(n+1)) + sum B_2k (2k+n-1)!/((2k)! x^(2k+n)).
      const [order] = args;
      if (sign <= 0 || order?.kind !== 'number' || !Q.isInteger(order.value) || order.value.num < 1n || order.value.num > 40n) return null;
      const n = Number(order.value.num);
      let factorial = 1n;
      for (let i = 2; i < n; i += 1) factorial *= BigInt(i);
      const series = sum(quotient(number(factorial), power(x, n)), quotient(number(factorial * BigInt(n)), product(number(2), power(x, n + 1))), quotient(call('enveloping polygamma', order, x), power(x, n)));
      return n % 2 === 1 ? series : negation(series);
    }
    case 'upperGamma':
      // DLMF 8.11.2.
      return sign > 0 && args[0] ? product(exp(negation(x)), power(x, difference(args[0], number(1))), call('enveloping incomplete gamma', args[0], x)) : null;
    case 'besselI': {
      // DLMF 10.34.2 with m = 1 and 10.40.2, real parts taken: I = e^x/sqrt(2 pi x) (sum + remainder) - sin(nu pi)/pi K.
      const [order] = args;
      if (sign <= 0 || !order) return null;
      const main = product(quotient(exp(x), squareRoot(product(number(2), constant('pi'), x))), call('enveloping Bessel I', order, x));
      if (order.kind === 'number' && Q.isInteger(order.value)) return main;
      return difference(main, product(quotient(call('sin', product(order, constant('pi'))), constant('pi')), call('besselK', order, x)));
    }
    case 'airyBi': {
      // Bi(x) = sqrt(x/3) (I_(1/3) + I_(-1/3))(2/3 x^(3/2)) (DLMF 9.6.4): the parts with K cancel.
      if (sign <= 0) return null;
      const zeta = product(number({ num: 2n, den: 3n }), power(x, { num: 3n, den: 2n }));
      return product(quotient(exp(zeta), product(squareRoot(constant('pi')), power(x, { num: 1n, den: 4n }))), call('enveloping Bessel I', number({ num: 1n, den: 3n }), zeta));
    }
    case 'dawson': {
      const main = quotient(call('enveloping Dawson', sign > 0 ? x : negation(x)), product(number(2), x));
      return sign === 0 ? null : main;
    }
    case 'erfi':
      // DLMF 7.5.1.
      return sign === 0 ? null : product(quotient(number(2), squareRoot(constant('pi'))), exp(power(x, 2)), call('dawson', x));
    case 'sinhIntegral':
    case 'coshIntegral': {
      // (Ei(x) +- E_1(x))/2 (DLMF 6.5.3, 6.5.4), the growth taken out.
      if (sign <= 0) return sign < 0 && id === 'sinhIntegral' ? negation(call(id, negation(x))) : null;
      const small = product(exp(product(number(-2), x)), call('enveloping exponential integral', number(1), x));
      return product(quotient(exp(x), product(number(2), x)), sum(call('enveloping Ei', x), id === 'sinhIntegral' ? small : negation(small)));
    }
    case 'lowerGamma':
      return sign > 0 && args[0] ? difference(call('gamma', args[0]), call('upperGamma', args[0], x)) : null;
    case 'barnesG':
      return sign > 0 ? exp(call('logBarnesG', x)) : null;
    case 'logBarnesG': {
      // DLMF 5.17.5 with Stirling's series for log Gamma(z+1) put in, z = x - 1.
      if (sign <= 0) return null;
      const z = difference(x, number(1));
      const logGamma = sum(product(sum(z, half), log(z)), negation(z), quotient(log(product(number(2), constant('pi'))), number(2)));
      return sum(
        quotient(power(z, 2), number(4)),
        product(z, sum(logGamma, call('enveloping log gamma', z))),
        negation(product(sum(quotient(product(z, sum(z, number(1))), number(2)), number({ num: 1n, den: 12n })), log(z))),
        negation(log(constant('glaisher'))),
        call('enveloping Barnes G', z),
      );
    }
    case 'erfc':
      // DLMF 7.12.1.
      if (sign > 0) return product(quotient(exp(negation(power(x, 2))), product(x, squareRoot(constant('pi')))), call('enveloping erfc', x));
      return sign < 0 ? difference(number(2), call('erfc', negation(x))) : null;
    case 'erf':
      if (sign > 0) return difference(number(1), call('erfc', x));
      return sign < 0 ? difference(call('erfc', negation(x)), number(1)) : null;
    case 'expIntegralE':
      // DLMF 8.20.2.
      return sign > 0 && args[0] ? product(quotient(exp(negation(x)), x), call('enveloping exponential integral', args[0], x)) : null;
    case 'expIntegralEi':
      // DLMF 6.12.2.
      if (sign > 0) return product(quotient(exp(x), x), call('enveloping Ei', x));
      return sign < 0 ? negation(call('expIntegralE', number(1), negation(x))) : null;
    case 'besselK':
      // DLMF 10.40.2.
      return sign > 0 && args[0] ? product(squareRoot(quotient(constant('pi'), product(number(2), x))), exp(negation(x)), call('enveloping Bessel K', args[0], x)) : null;
    case 'airyAi':
      // DLMF 9.7.5.
      return sign > 0
        ? product(quotient(exp(negation(product(number({ num: 2n, den: 3n }), power(x, { num: 3n, den: 2n })))), product(number(2), squareRoot(constant('pi')), power(x, { num: 1n, den: 4n }))), call('enveloping Airy', x))
        : null;
    default:
      return null;
  }
}

const pi = constant('pi');
const third = number({ num: 1n, den: 3n });

/** Functions that oscillate at infinity as sums of sines and cosines with enveloping series as amplitudes; null for all others. `sign` is that of the argument. */
export function oscillatingForm(id: string, args: readonly Expression[], sign: 1 | -1): Expression | null {
  const x = args[args.length - 1];
  if (x === undefined) return null;
  const hankel = (order: Expression, z: Expression, phase: Expression, kind: 'J' | 'Y'): Expression => {
    // DLMF 10.17.3, 10.17.4.
    const [c, s] = [call('cos', phase), call('sin', phase)];
    const [P, R] = [call('enveloping Bessel P', order, z), call('enveloping Bessel Q', order, z)];
    return kind === 'J' ? difference(product(c, P), product(s, R)) : sum(product(s, P), product(c, R));
  };
  switch (id) {
    case 'besselJ':
    case 'besselY': {
      const [order] = args;
      const value = order?.kind === 'number' ? order.value : null;
      if (sign < 0 || !order || !value || value.num < 0n) return null;
      const phase = difference(x, product(number(Q.add(Q.multiply(value, Q.HALF), Q.rational(1, 4))), pi));
      return product(squareRoot(quotient(number(2), product(pi, x))), hankel(order, x, phase, id === 'besselJ' ? 'J' : 'Y'));
    }
    case 'airyAi':
    case 'airyBi': {
      // DLMF 9.7.9, 9.7.11; the two series are those of order 1/3 in zeta (9.6.6, 9.6.8 with 10.17.5).
      if (sign > 0) return null;
      const z = negation(x);
      const zeta = product(number({ num: 2n, den: 3n }), power(z, { num: 3n, den: 2n }));
      const phase = difference(zeta, quotient(pi, number(4)));
      const wave = id === 'airyAi' ? hankel(third, zeta, phase, 'J') : negation(hankel(third, zeta, phase, 'Y'));
      return quotient(wave, product(squareRoot(pi), power(z, { num: 1n, den: 4n })));
    }
    case 'sinIntegral':
    case 'cosIntegral': {
      // DLMF 6.2.19, 6.2.20.
      if (sign < 0) return id === 'sinIntegral' ? negation(call(id, negation(x))) : null;
      const [f, g] = [call('enveloping sine integral f', x), call('enveloping sine integral g', x)];
      const [c, s] = [call('cos', x), call('sin', x)];
      return id === 'sinIntegral' ? difference(quotient(pi, number(2)), sum(product(f, c), product(g, s))) : difference(product(f, s), product(g, c));
    }
    case 'fresnelS':
    case 'fresnelC': {
      // DLMF 7.5.3, 7.5.4.
      if (sign < 0) return negation(call(id, negation(x)));
      const phase = quotient(product(pi, power(x, 2)), number(2));
      const [f, g] = [call('enveloping Fresnel f', x), call('enveloping Fresnel g', x)];
      const [c, s] = [call('cos', phase), call('sin', phase)];
      const wave = id === 'fresnelC' ? difference(product(f, s), product(g, c)) : negation(sum(product(f, c), product(g, s)));
      return sum(number({ num: 1n, den: 2n }), quotient(wave, product(pi, x)));
    }
    default:
      return null;
  }
}
