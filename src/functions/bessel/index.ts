/** Bessel functions, Airy, Struve, Kelvin. */
import { build, type Expression } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { airyEquation, airyLocal, airyValue } from './airy.ts';
import { besselILocal, besselJLocal, besselKLocal, besselYLocal, cylinderDerivative, cylinderEquation, cylinderValue } from './cylinder.ts';
import { enclosed } from '../enclosure/wrap.ts';
import { airyKelvinAlgorithms } from './airyKelvinEnclosure.ts';
import { besselAlgorithms } from './enclosure.ts';
import { besselITogether, besselJTogether, besselKTogether, besselYTogether } from './largeOrder.ts';
import { kelvinDerivative, kelvinEquation, kelvinLocal, kelvinValue } from './kelvin.ts';
import { besselNames as n } from './names.ts';
import { struveDerivative, struveEquation, struveLocal } from './struve.ts';

const { call, constant, difference, number, product, quotient, squareRoot, sum } = build;
const half = quotient(number(1), number(2));
const spherical =
  (id: string) =>
  ([order = number(0), x = number(0)]: readonly Expression[]): Expression =>
    product(squareRoot(quotient(constant('pi'), product(number(2), x))), call(id, sum(order, half), x));

const descriptions: readonly FunctionDescription[] = [
  { id: 'besselJ', title: 'Bessel function of the first kind', arity: 2, names: n.besselJ, local: besselJLocal, together: besselJTogether, value: cylinderValue('J'), derivative: cylinderDerivative('besselJ', 1), equation: cylinderEquation('besselJ', 1), source: 'DLMF 10.2.2' },
  { id: 'besselY', title: 'Bessel function of the second kind', arity: 2, names: n.besselY, local: besselYLocal, together: besselYTogether, value: cylinderValue('Y'), derivative: cylinderDerivative('besselY', 1), equation: cylinderEquation('besselY', 1), domain: 'x > 0', source: 'DLMF 10.2.3' },
  { id: 'besselI', title: 'modified Bessel function of the first kind', arity: 2, names: n.besselI, local: besselILocal, together: besselITogether, value: cylinderValue('I'), derivative: cylinderDerivative('besselI', 1), equation: cylinderEquation('besselI', -1), source: 'DLMF 10.25.2' },
  { id: 'besselK', title: 'modified Bessel function of the second kind', arity: 2, names: n.besselK, local: besselKLocal, together: besselKTogether, value: cylinderValue('K'), derivative: cylinderDerivative('besselK', -1), equation: cylinderEquation('besselK', -1), domain: 'x > 0', source: 'DLMF 10.27.4' },
  { id: 'hankel1', title: 'Hankel function of the first kind', arity: 2, names: n.hankel1, definition: ([v = number(0), x = number(0)]) => sum(call('besselJ', v, x), product(constant('i'), call('besselY', v, x))), domain: 'x > 0', source: 'DLMF 10.4.3' },
  { id: 'hankel2', title: 'Hankel function of the second kind', arity: 2, names: n.hankel2, definition: ([v = number(0), x = number(0)]) => difference(call('besselJ', v, x), product(constant('i'), call('besselY', v, x))), domain: 'x > 0', source: 'DLMF 10.4.3' },
  { id: 'sphericalJ', title: 'spherical Bessel function of the first kind', arity: 2, names: n.sphericalJ, definition: spherical('besselJ'), source: 'DLMF 10.47.3' },
  { id: 'sphericalY', title: 'spherical Bessel function of the second kind', arity: 2, names: n.sphericalY, definition: spherical('besselY'), domain: 'x > 0', source: 'DLMF 10.47.4' },
  { id: 'sphericalI', title: 'modified spherical Bessel function of the first kind', arity: 2, names: n.sphericalI, definition: spherical('besselI'), source: 'DLMF 10.47.7' },
  { id: 'sphericalK', title: 'modified spherical Bessel function of the second kind', arity: 2, names: n.sphericalK, definition: spherical('besselK'), domain: 'x > 0', source: 'DLMF 10.47.9' },
  { id: 'airyAi', title: 'Airy function Ai', arity: 1, names: n.airyAi, local: airyLocal('Ai'), value: airyValue('Ai'), equation: airyEquation('Ai'), derivative: ([x = number(0)]) => call('airyAiPrime', x), source: 'DLMF 9.2' },
  { id: 'airyBi', title: 'Airy function Bi', arity: 1, names: n.airyBi, local: airyLocal('Bi'), value: airyValue('Bi'), equation: airyEquation('Bi'), derivative: ([x = number(0)]) => call('airyBiPrime', x), source: 'DLMF 9.2' },
  { id: 'airyAiPrime', title: "derivative of the Airy function Ai", arity: 1, names: n.airyAiPrime, local: airyLocal('AiPrime'), value: airyValue('AiPrime'), equation: airyEquation('AiPrime'), derivative: ([x = number(0)]) => product(x, call('airyAi', x)), source: 'DLMF 9.2.1' },
  { id: 'airyBiPrime', title: "derivative of the Airy function Bi", arity: 1, names: n.airyBiPrime, local: airyLocal('BiPrime'), value: airyValue('BiPrime'), equation: airyEquation('BiPrime'), derivative: ([x = number(0)]) => product(x, call('airyBi', x)), source: 'DLMF 9.2.1' },
  { id: 'struveH', title: 'Struve function H', arity: 2, names: n.struveH, local: struveLocal('H'), derivative: struveDerivative('H'), equation: struveEquation('H'), source: 'DLMF 11.2.1' },
  { id: 'struveL', title: 'modified Struve function L', arity: 2, names: n.struveL, local: struveLocal('L'), derivative: struveDerivative('L'), equation: struveEquation('L'), source: 'DLMF 11.2.2' },
  { id: 'kelvinBer', title: 'Kelvin function ber', arity: 2, names: n.kelvinBer, local: kelvinLocal('Ber'), value: kelvinValue('Ber'), derivative: kelvinDerivative('Ber'), equation: kelvinEquation('Ber'), source: 'DLMF 10.61.1' },
  { id: 'kelvinBei', title: 'Kelvin function bei', arity: 2, names: n.kelvinBei, local: kelvinLocal('Bei'), value: kelvinValue('Bei'), derivative: kelvinDerivative('Bei'), equation: kelvinEquation('Bei'), source: 'DLMF 10.61.1' },
  { id: 'kelvinKer', title: 'Kelvin function ker', arity: 2, names: n.kelvinKer, local: kelvinLocal('Ker'), value: kelvinValue('Ker'), derivative: kelvinDerivative('Ker'), equation: kelvinEquation('Ker'), domain: 'x > 0', source: 'DLMF 10.61.2' },
  { id: 'kelvinKei', title: 'Kelvin function kei', arity: 2, names: n.kelvinKei, local: kelvinLocal('Kei'), value: kelvinValue('Kei'), derivative: kelvinDerivative('Kei'), equation: kelvinEquation('Kei'), domain: 'x > 0', source: 'DLMF 10.61.2' },
];

export const besselFunctions = enclosed(descriptions, { ...besselAlgorithms, ...airyKelvinAlgorithms });
