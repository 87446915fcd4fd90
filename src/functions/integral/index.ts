/** Exponential, trigonometric and error integrals. */
import { build, type Expression, Q, rationalOf } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { minus } from '../compose.ts';
import { enclosed } from '../enclosure/wrap.ts';
import { integralAlgorithms } from './enclosure.ts';
import { dawsonLocal, erfcinvLocal, erfcLocal, erfiLocal, erfinvLocal, erfLocal, fresnelCLocal, fresnelSLocal } from './error.ts';
import { chiLocal, ciLocal, cinLocal, eiLocal, einLocal, expIntegralLocal, expIntegralValue, shiLocal, siLocal } from './exponential.ts';
import { integralNames as n } from './names.ts';

const { call, constant, difference, negation, number, power, product, quotient, squareRoot } = build;
const pi = constant('pi');
const exp = (e: Expression): Expression => call('exp', e);
const sq = (e: Expression): Expression => power(e, 2);

const atOrigin =
  (value: number) =>
  ([x]: readonly Expression[]): Expression | null => {
    const exact = x && rationalOf(x);
    return exact && Q.isZero(exact) ? number(value) : null;
  };

const descriptions: readonly FunctionDescription[] = [
  { id: 'erf', title: 'error function', arity: 1, parity: 'odd', names: n.erf, local: erfLocal, value: atOrigin(0), derivative: ([x = number(0)]) => product(quotient(number(2), squareRoot(pi)), exp(negation(sq(x)))), source: 'DLMF 7.2.1' },
  { id: 'erfc', title: 'complementary error function', arity: 1, names: n.erfc, local: erfcLocal, value: atOrigin(1), derivative: ([x = number(0)]) => negation(product(quotient(number(2), squareRoot(pi)), exp(negation(sq(x))))), source: 'DLMF 7.2.2' },
  { id: 'erfi', title: 'imaginary error function', arity: 1, parity: 'odd', names: n.erfi, local: erfiLocal, value: atOrigin(0), derivative: ([x = number(0)]) => product(quotient(number(2), squareRoot(pi)), exp(sq(x))), source: 'DLMF 7.2.5' },
  { id: 'erfcx', title: 'scaled complementary error function exp(x^2) erfc(x)', arity: 1, names: n.erfcx, definition: ([x = number(0)]) => product(exp(sq(x)), call('erfc', x)) },
  { id: 'dawson', title: "Dawson's integral", arity: 1, parity: 'odd', names: n.dawson, local: dawsonLocal, value: atOrigin(0), derivative: ([x = number(0)]) => difference(number(1), product(number(2), x, call('dawson', x))), source: 'DLMF 7.2.5' },
  { id: 'erfinv', title: 'inverse error function', arity: 1, parity: 'odd', names: n.erfinv, local: erfinvLocal, value: atOrigin(0), derivative: ([x = number(0)]) => product(quotient(squareRoot(pi), number(2)), exp(sq(call('erfinv', x)))), domain: '-1 < x < 1', source: 'DLMF 7.17' },
  { id: 'erfcinv', title: 'inverse complementary error function', arity: 1, names: n.erfcinv, local: erfcinvLocal, value: ([x]) => (x?.kind === 'number' && Q.isOne(x.value) ? number(0) : null), derivative: ([x = number(0)]) => negation(product(quotient(squareRoot(pi), number(2)), exp(sq(call('erfcinv', x))))), domain: '0 < x < 2', source: 'DLMF 7.17' },
  { id: 'normalCdf', title: 'normal distribution function', arity: 1, names: n.normalCdf, definition: ([x = number(0)]) => quotient(call('erfc', negation(quotient(x, squareRoot(number(2))))), number(2)) },
  { id: 'normalQuantile', title: 'normal quantile', arity: 1, names: n.normalQuantile, definition: ([p = number(0)]) => negation(product(squareRoot(number(2)), call('erfcinv', product(number(2), p)))), domain: '0 < p < 1' },
  { id: 'fresnelS', title: 'Fresnel sine integral', arity: 1, parity: 'odd', names: n.fresnelS, local: fresnelSLocal, value: atOrigin(0), derivative: ([x = number(0)]) => call('sin', quotient(product(pi, sq(x)), number(2))), source: 'DLMF 7.2.8' },
  { id: 'fresnelC', title: 'Fresnel cosine integral', arity: 1, parity: 'odd', names: n.fresnelC, local: fresnelCLocal, value: atOrigin(0), derivative: ([x = number(0)]) => call('cos', quotient(product(pi, sq(x)), number(2))), source: 'DLMF 7.2.7' },
  { id: 'expIntegralEi', title: 'exponential integral Ei', arity: 1, names: n.expIntegralEi, local: eiLocal, derivative: ([x = number(0)]) => quotient(exp(x), x), domain: 'x is not 0', source: 'DLMF 6.2.5' },
  { id: 'expIntegralE', title: 'generalised exponential integral', arity: 2, names: n.expIntegralE, local: expIntegralLocal, value: expIntegralValue, derivative: ([order = number(1), x = number(0)], index) => (index === 1 ? negation(call('expIntegralE', minus(order, 1), x)) : null), domain: 'x > 0', source: 'DLMF 8.19.1' },
  { id: 'logIntegral', title: 'logarithmic integral', arity: 1, names: n.logIntegral, definition: ([x = number(0)]) => call('expIntegralEi', call('log', x)), derivative: ([x = number(0)]) => quotient(number(1), call('log', x)), domain: 'x > 0, x is not 1', source: 'DLMF 6.2.8' },
  { id: 'offsetLogIntegral', title: 'logarithmic integral from 2', arity: 1, names: n.offsetLogIntegral, definition: ([x = number(0)]) => difference(call('logIntegral', x), call('logIntegral', number(2))) },
  { id: 'sinIntegral', title: 'sine integral', arity: 1, parity: 'odd', names: n.sinIntegral, local: siLocal, value: atOrigin(0), derivative: ([x = number(0)]) => quotient(call('sin', x), x), source: 'DLMF 6.2.9' },
  { id: 'complementarySinIntegral', title: 'sine integral from infinity, Si(x) - pi/2', arity: 1, names: n.complementarySinIntegral, definition: ([x = number(0)]) => difference(call('sinIntegral', x), quotient(pi, number(2))), source: 'DLMF 6.2.10' },
  { id: 'cosIntegral', title: 'cosine integral', arity: 1, names: n.cosIntegral, local: ciLocal, derivative: ([x = number(0)]) => quotient(call('cos', x), x), domain: 'x > 0', source: 'DLMF 6.2.11' },
  { id: 'cin', title: 'entire cosine integral', arity: 1, parity: 'even', names: n.cin, local: cinLocal, value: atOrigin(0), derivative: ([x = number(0)]) => quotient(difference(number(1), call('cos', x)), x), source: 'DLMF 6.2.12' },
  { id: 'ein', title: 'entire exponential integral', arity: 1, names: n.ein, local: einLocal, value: atOrigin(0), derivative: ([x = number(0)]) => quotient(difference(number(1), exp(negation(x))), x), source: 'DLMF 6.2.3' },
  { id: 'sinhIntegral', title: 'hyperbolic sine integral', arity: 1, parity: 'odd', names: n.sinhIntegral, local: shiLocal, value: atOrigin(0), derivative: ([x = number(0)]) => quotient(call('sinh', x), x), source: 'DLMF 6.2.15' },
  { id: 'coshIntegral', title: 'hyperbolic cosine integral', arity: 1, names: n.coshIntegral, local: chiLocal, derivative: ([x = number(0)]) => quotient(call('cosh', x), x), domain: 'x > 0', source: 'DLMF 6.2.16' },
];

export const integralFunctions = enclosed(descriptions, integralAlgorithms);
