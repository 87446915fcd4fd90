/** Exact identities that bring a special function to a place where it can be modelled: away from poles, its logarithm in the open, or its asymptotic series with a proven remainder. */
import { build, type Expression, Q } from '../expression/index.ts';
import type { Model, ModelArithmetic } from '../rigorous/index.ts';
import { besselAtZero } from './besselAtZero.ts';
import type { Numbers } from './numbers.ts';

const { call, constant, difference, negation, number, power, product, quotient, squareRoot, sum } = build;
const log = (e: Expression): Expression => call('log', e);
const exp = (e: Expression): Expression => call('exp', e);
const gammaConstant = constant('eulerGamma');
const MOST_STEPS = 60;

/** Names of series that only bound/ knows: formal series at infinity whose remainder lies between zero and the first term left out. */
export const ENVELOPES = ['enveloping log gamma', 'enveloping digamma', 'enveloping erfc', 'enveloping exponential integral', 'enveloping Bessel K', 'enveloping Airy'] as const;
export type EnvelopeName = (typeof ENVELOPES)[number];

/** The call written differently, or null. `models` are those of the arguments. */
export function rewriteCall<T>(id: string, args: readonly Expression[], models: readonly Model<T>[], n: Numbers<T>, m: ModelArithmetic<T>): Expression | null {
  const { r } = n;
  const last = models.length - 1;
  const [u, x] = [models[last], args[last]];
  if (u === undefined || x === undefined) return null;
  if (u.valuation < 0) return atInfinity(id, args, x, r.isPositive(u.range) ? 1 : r.isNegative(u.range) ? -1 : 0);
  if (u.valuation > 0) {
    const small = nearZero(id, args, x, r.isPositive(u.range) ? 1 : r.isNegative(u.range) ? -1 : 0);
    if (small !== null) return small;
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

/** Logarithms taken out at zero (DLMF 6.2.4, 6.2.13, 6.2.16; 6.6). */
function nearZero(id: string, args: readonly Expression[], x: Expression, sign: number): Expression | null {
  const ownLog = sign > 0 ? log(x) : sign < 0 ? log(negation(x)) : null;
  switch (id) {
    case 'expIntegralEi':
      return ownLog && difference(sum(gammaConstant, ownLog), call('ein', negation(x)));
    case 'cosIntegral':
      return sign > 0 && ownLog ? difference(sum(gammaConstant, ownLog), call('cin', x)) : null;
    case 'coshIntegral':
      return sign > 0 && ownLog ? difference(sum(gammaConstant, ownLog), quotient(sum(call('ein', x), call('ein', negation(x))), number(2))) : null;
    case 'expIntegralE': {
      const [order] = args;
      if (order?.kind !== 'number' || !Q.isInteger(order.value) || sign <= 0 || !ownLog) return null;
      const k = Number(order.value.num);
      if (k === 1) return sum(negation(gammaConstant), negation(ownLog), call('ein', x));
      // E_k(x) = (e^-x - x E_(k-1)(x))/(k-1) (DLMF 8.19.12).
      return k > 1 && k < 30 ? quotient(difference(exp(negation(x)), product(x, call('expIntegralE', number(k - 1), x))), number(k - 1)) : null;
    }
    case 'besselJ':
    case 'besselI':
      return besselAtZero(id, args, x);
    case 'besselY':
    case 'besselK':
      return sign > 0 ? besselAtZero(id, args, x) : null;
    default:
      return null;
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
