/** The gamma family. */
import { build, type Expression, Q } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { argument } from '../compose.ts';
import { enclosed } from '../enclosure/wrap.ts';
import { barnesGLocal, barnesGValue, logBarnesGDerivative, logBarnesGLocal } from './barnes.ts';
import { barnesAlgorithms } from './barnesEnclosure.ts';
import { gammaAlgorithms } from './enclosure.ts';
import { explicitOrder, gammaLocal, gammaValue, logGammaLocal, logGammaValue, polygammaLocal, polygammaValue } from './gamma.ts';
import { incompleteDerivative, lowerGammaLocal, lowerGammaValue, upperGammaLocal, upperGammaValue } from './incomplete.ts';
import { gammaNames } from './names.ts';

const { call, difference, negation, number, power, product, quotient, sum } = build;
const gamma = (e: Expression): Expression => call('gamma', e);
const plusOne = (e: Expression): Expression => sum(e, number(1));

const descriptions: readonly FunctionDescription[] = [
  { id: 'gamma', title: 'Gamma function', arity: 1, names: gammaNames.gamma, local: gammaLocal, value: gammaValue, derivative: ([x = number(0)]) => product(gamma(x), call('digamma', x)), domain: 'x is not 0, -1, -2, ...', source: 'DLMF 5.2.1' },
  { id: 'logGamma', title: 'logarithm of the Gamma function', arity: 1, names: gammaNames.logGamma, local: logGammaLocal, value: logGammaValue, derivative: ([x = number(0)]) => call('digamma', x), domain: 'x > 0', source: 'DLMF 5.2' },
  { id: 'digamma', title: 'digamma function', arity: 1, names: gammaNames.digamma, local: (_args, _index, place) => polygammaLocal(0, place), value: (args) => polygammaValue(0, argument(args, 0)), derivative: ([x = number(0)]) => call('polygamma', number(1), x), domain: 'x is not 0, -1, -2, ...', source: 'DLMF 5.2.2' },
  {
    id: 'polygamma',
    title: 'polygamma function',
    arity: 2,
    names: gammaNames.polygamma,
    local: (args, index, place) => {
      const order = explicitOrder(args);
      return order === null || index !== 1 ? null : polygammaLocal(order, place);
    },
    value: (args) => {
      const order = explicitOrder(args);
      if (order === null) return null;
      return polygammaValue(order, argument(args, 1)) ?? (order === 0 ? call('digamma', argument(args, 1)) : null);
    },
    derivative: ([n = number(0), x = number(0)], index) => (index === 1 ? call('polygamma', n.kind === 'number' ? number(Q.add(n.value, Q.ONE)) : plusOne(n), x) : null),
    domain: 'x is not 0, -1, -2, ...',
    source: 'DLMF 5.15.1',
  },
  { id: 'factorial', title: 'factorial', arity: 1, names: gammaNames.factorial, definition: ([n = number(0)]) => gamma(plusOne(n)) },
  {
    id: 'doubleFactorial',
    title: 'double factorial',
    arity: 1,
    names: gammaNames.doubleFactorial,
    definition: ([n = number(0)]) =>
      product(
        power(number(2), quotient(n, number(2))),
        power(quotient(build.constant('pi'), number(2)), quotient(difference(call('cos', product(build.constant('pi'), n)), number(1)), number(4))),
        gamma(plusOne(quotient(n, number(2)))),
      ),
    source: 'DLMF 5.4.2, interpolated as in common practice: equal at every non-negative integer',
  },
  { id: 'binomial', title: 'binomial coefficient', arity: 2, names: gammaNames.binomial, definition: ([n = number(0), k = number(0)]) => quotient(gamma(plusOne(n)), product(gamma(plusOne(k)), gamma(plusOne(difference(n, k))))), source: 'DLMF 1.2.6' },
  { id: 'pochhammer', title: 'rising factorial (Pochhammer symbol)', arity: 2, names: gammaNames.pochhammer, definition: ([a = number(0), n = number(0)]) => quotient(gamma(sum(a, n)), gamma(a)), source: 'DLMF 5.2.5' },
  { id: 'fallingFactorial', title: 'falling factorial', arity: 2, names: gammaNames.fallingFactorial, definition: ([a = number(0), n = number(0)]) => quotient(gamma(plusOne(a)), gamma(plusOne(difference(a, n)))) },
  { id: 'beta', title: 'beta function', arity: 2, names: gammaNames.beta, definition: ([a = number(0), b = number(0)]) => quotient(product(gamma(a), gamma(b)), gamma(sum(a, b))), source: 'DLMF 5.12.1' },
  { id: 'logBeta', title: 'logarithm of the beta function', arity: 2, names: gammaNames.logBeta, definition: ([a = number(0), b = number(0)]) => sum(call('logGamma', a), call('logGamma', b), negation(call('logGamma', sum(a, b)))) },
  { id: 'harmonic', title: 'harmonic number', arity: 1, names: gammaNames.harmonic, definition: ([n = number(0)]) => sum(call('digamma', plusOne(n)), build.constant('eulerGamma')), source: 'DLMF 5.4.14' },
  { id: 'upperGamma', title: 'upper incomplete gamma function', arity: 2, names: gammaNames.upperGamma, local: upperGammaLocal, value: upperGammaValue, derivative: incompleteDerivative(-1), domain: 'x > 0', source: 'DLMF 8.2.2' },
  { id: 'lowerGamma', title: 'lower incomplete gamma function', arity: 2, names: gammaNames.lowerGamma, local: lowerGammaLocal, value: lowerGammaValue, derivative: incompleteDerivative(1), domain: 'a > 0, x >= 0', source: 'DLMF 8.2.1' },
  { id: 'regularizedUpperGamma', title: 'regularised upper incomplete gamma function', arity: 2, names: gammaNames.regularizedUpperGamma, definition: ([a = number(0), x = number(0)]) => quotient(call('upperGamma', a, x), gamma(a)), source: 'DLMF 8.2.4' },
  { id: 'regularizedLowerGamma', title: 'regularised lower incomplete gamma function', arity: 2, names: gammaNames.regularizedLowerGamma, definition: ([a = number(0), x = number(0)]) => quotient(call('lowerGamma', a, x), gamma(a)), source: 'DLMF 8.2.4' },
  {
    id: 'incompleteBeta',
    title: 'incomplete beta function (x, a, b)',
    arity: 3,
    names: gammaNames.incompleteBeta,
    definition: ([x = number(0), a = number(1), b = number(1)]) => product(quotient(power(x, a), a), call('hypergeometric', number(2), number(1), a, difference(number(1), b), plusOne(a), x)),
    derivative: ([x = number(0), a = number(1), b = number(1)], index) => (index === 0 ? product(power(x, difference(a, number(1))), power(difference(number(1), x), difference(b, number(1)))) : null),
    domain: '0 <= x <= 1',
    source: 'DLMF 8.17.1, 8.17.7',
  },
  { id: 'regularizedBeta', title: 'regularised incomplete beta function (x, a, b)', arity: 3, names: gammaNames.regularizedBeta, definition: ([x = number(0), a = number(1), b = number(1)]) => quotient(call('incompleteBeta', x, a, b), call('beta', a, b)), domain: '0 <= x <= 1', source: 'DLMF 8.17.2' },
  {
    id: 'generalizedHarmonic',
    title: 'generalised harmonic number (n, order)',
    arity: 2,
    names: gammaNames.generalizedHarmonic,
    definition: ([n = number(0), r = number(1)]) => (r.kind === 'number' && Q.isOne(r.value) ? call('harmonic', n) : difference(call('zeta', r), call('hurwitzZeta', r, plusOne(n)))),
    source: 'DLMF 25.11.4',
  },
  { id: 'barnesG', title: 'Barnes G-function', arity: 1, names: gammaNames.barnesG, local: barnesGLocal, value: barnesGValue, derivative: (args) => product(call('barnesG', argument(args, 0)), logBarnesGDerivative(args)), source: 'DLMF 5.17' },
  { id: 'logBarnesG', title: 'logarithm of the Barnes G-function', arity: 1, names: gammaNames.logBarnesG, local: logBarnesGLocal, derivative: logBarnesGDerivative, value: (args) => { const value = barnesGValue(args); return value && value.kind === 'number' && !Q.isZero(value.value) ? call('log', value) : null; }, domain: 'x > 0', source: 'DLMF 5.17' },
  { id: 'hyperfactorial', title: 'hyperfactorial', arity: 1, names: gammaNames.hyperfactorial, definition: ([n = number(0)]) => call('exp', difference(product(n, call('logGamma', plusOne(n))), call('logBarnesG', plusOne(n)))), domain: 'x > -1', source: 'DLMF 5.17' },
  { id: 'superfactorial', title: 'superfactorial', arity: 1, names: gammaNames.superfactorial, definition: ([n = number(0)]) => call('barnesG', sum(n, number(2))) },
];

export const gammaFunctions = enclosed(descriptions, { ...gammaAlgorithms, ...barnesAlgorithms });
