/** Special functions of an argument that tends to zero as powers and logarithms times series that converge there. */
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import { besselAtZero } from './besselAtZero.ts';
import { kelvinAtZero } from './kelvinAtZero.ts';

const { call, constant, difference, negation, number, power, product, quotient, sum } = build;
const log = (e: Expression): Expression => call('log', e);
const exp = (e: Expression): Expression => call('exp', e);
const gammaConstant = constant('eulerGamma');

/** The function of an argument that tends to zero from the side of `sign` (0: not known), or null. Logarithms by DLMF 6.2.4, 6.2.13, 6.2.16, 6.6. */
export function nearZero(id: string, args: readonly Expression[], x: Expression, sign: number): Expression | null {
  const ownLog = sign > 0 ? log(x) : sign < 0 ? log(negation(x)) : null;
  switch (id) {
    case 'expIntegralEi':
      return ownLog && difference(sum(gammaConstant, ownLog), call('ein', negation(x)));
    case 'cosIntegral':
      return sign > 0 && ownLog ? difference(sum(gammaConstant, ownLog), call('cin', x)) : null;
    case 'struveH':
    case 'struveL': {
      // DLMF 11.2.1, 11.2.2.
      const [order] = args;
      if (order?.kind !== 'number') return null;
      const raised = number(Q.add(order.value, Q.rational(3, 2)));
      const square = quotient(power(x, 2), number(4));
      const series = call('hypergeometric', number(1), number(2), number(1), number({ num: 3n, den: 2n }), raised, id === 'struveH' ? negation(square) : square);
      return quotient(product(power(quotient(x, number(2)), Q.add(order.value, Q.ONE)), series), product(call('gamma', number({ num: 3n, den: 2n })), call('gamma', raised)));
    }
    case 'lowerGamma':
    case 'upperGamma': {
      // DLMF 8.7.1 with 13.2.2 and 13.2.39; 8.2.3; 8.4.13 where a is zero or a negative whole number.
      const a = args[0] && rationalOf(args[0]);
      if (!a) return null;
      if (Q.isInteger(a) && a.num <= 0n) return id === 'upperGamma' && a.num > -28n ? product(power(x, a), call('expIntegralE', number(Q.subtract(Q.ONE, a)), x)) : null;
      if (sign <= 0 && !Q.isInteger(a)) return null;
      const lower = quotient(product(power(x, a), call('hypergeometric', number(1), number(1), number(a), number(Q.add(a, Q.ONE)), negation(x))), number(a));
      return id === 'lowerGamma' ? lower : difference(call('gamma', number(a)), lower);
    }
    case 'inverseTangentIntegral': {
      // sum (-1)^k x^(2k+1)/(2k+1)^2.
      const [half, raised] = [number({ num: 1n, den: 2n }), number({ num: 3n, den: 2n })];
      return product(x, call('hypergeometric', number(3), number(2), number(1), half, half, raised, raised, negation(power(x, 2))));
    }
    case 'kelvinBer':
    case 'kelvinBei':
      return kelvinAtZero(id, args, x, sign);
    case 'kelvinKer':
    case 'kelvinKei':
      return sign > 0 ? kelvinAtZero(id, args, x, sign) : null;
    case 'ein':
      // sum -(-x)^k/(k k!) (DLMF 6.6.4).
      return product(x, call('hypergeometric', number(2), number(2), number(1), number(1), number(2), number(2), negation(x)));
    case 'cin': {
      // The series of DLMF 6.6.6 without its logarithm.
      const square = quotient(power(x, 2), number(4));
      return product(square, call('hypergeometric', number(2), number(3), number(1), number(1), number(2), number(2), number({ num: 3n, den: 2n }), negation(square)));
    }
    case 'sinIntegral':
    case 'sinhIntegral': {
      // DLMF 6.6.5.
      const square = quotient(power(x, 2), number(4));
      const raised = number({ num: 3n, den: 2n });
      return product(x, call('hypergeometric', number(1), number(2), number({ num: 1n, den: 2n }), raised, raised, id === 'sinIntegral' ? negation(square) : square));
    }
    case 'parabolicD':
      return parabolicAtZero(args, x);
    case 'dawson':
      // DLMF 7.5.1 with 7.11.4 and 13.2.39.
      return product(x, call('hypergeometric', number(1), number(1), number(1), number({ num: 3n, den: 2n }), negation(power(x, 2))));
    case 'ellipticKParameter':
    case 'ellipticEParameter': {
      // DLMF 19.5.1, 19.5.2.
      const half = number({ num: 1n, den: 2n });
      return product(quotient(constant('pi'), number(2)), call('hypergeometric', number(2), number(1), id === 'ellipticKParameter' ? half : negation(half), half, number(1), x));
    }
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

/** D_p by even and odd parts (DLMF 12.4.1 with 12.2.6, 12.7.12 and 13.2.39); a part vanishes where its gamma function has a pole. */
function parabolicAtZero(args: readonly Expression[], x: Expression): Expression | null {
  const p = args[0] && rationalOf(args[0]);
  if (!p) return null;
  const half = (q: Rational): Rational => Q.multiply(q, Q.HALF);
  const [up, down] = [half(Q.subtract(Q.ONE, p)), half(Q.negate(p))];
  const square = quotient(power(x, 2), number(2));
  const part = (gammaArgument: Rational, factor: Expression, top: Rational, bottom: Rational): readonly Expression[] =>
    Q.isInteger(gammaArgument) && gammaArgument.num <= 0n ? [] : [quotient(product(factor, call('hypergeometric', number(1), number(1), number(top), number(bottom), square)), call('gamma', number(gammaArgument)))];
  const even = part(up, build.squareRoot(constant('pi')), down, Q.HALF);
  const odd = part(down, product(build.squareRoot(product(number(2), constant('pi'))), x), up, Q.rational(3, 2)).map(negation);
  return product(power(number(2), half(p)), exp(negation(quotient(power(x, 2), number(4)))), sum(...even, ...odd));
}
