/** Elliptic integrals and functions, and the arithmetic-geometric mean. In LaTeX the modulus k, in library calls the parameter m = k^2. */
import { build, type Expression } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { minus, over, pi, times } from '../compose.ts';
import { names } from '../naming.ts';
import { enclosed } from '../enclosure/wrap.ts';
import { ellipticAlgorithms } from './enclosure.ts';
import { completeEquation, completeLocal, completeValue, eDerivative, incompleteDerivative, incompleteLocal, incompleteValue, kDerivative, piDerivative, piLocal, piValue } from './integrals.ts';
import { amplitudeLocal, jacobiDerivative, jacobiLocal, jacobiValue } from './jacobi.ts';

const { call, negation, number, power } = build;
const sq = (e: Expression): Expression => power(e, 2);
const swapLast = { read: (a: readonly Expression[]): readonly Expression[] | null => (a.length === 2 ? [...a].reverse() : null), write: (a: readonly Expression[]): readonly Expression[] | null => [...a].reverse() };

const descriptions: readonly FunctionDescription[] = [
  { id: 'ellipticK', title: 'complete elliptic integral of the first kind (modulus k)', arity: 1, parity: 'even', names: names({ latex: ['\\operatorname{K}'], latexLetters: ['K'], latexForm: ([k = '']) => `K(${k})`, unicodeForm: ([k = '']) => `K(${k})`, mpmath: ([k = '']) => `ellipk((${k})**2)`, code: { cpp: ['comp_ellint_1'] } }), definition: ([k = number(0)]) => call('ellipticKParameter', sq(k)), domain: '-1 < k < 1', source: 'DLMF 19.2.8' },
  { id: 'ellipticE', title: 'complete elliptic integral of the second kind (modulus k)', arity: 1, parity: 'even', names: names({ latex: ['\\operatorname{E}'], latexLetters: ['E'], latexForm: ([k = '']) => `E(${k})`, unicodeForm: ([k = '']) => `E(${k})`, mpmath: ([k = '']) => `ellipe((${k})**2)`, code: { cpp: ['comp_ellint_2'] } }), definition: ([k = number(0)]) => call('ellipticEParameter', sq(k)), domain: '-1 <= k <= 1', source: 'DLMF 19.2.8' },
  { id: 'ellipticF', title: 'elliptic integral of the first kind (amplitude, modulus k)', arity: 2, names: names({ latex: ['\\operatorname{F}'], latexLetters: ['F'], latexForm: (a) => `F(${a.join(', ')})`, unicodeForm: (a) => `F(${a.join(', ')})`, mpmath: ([p = '', k = '']) => `ellipf(${p},(${k})**2)`, code: { cpp: 'ellint_1' }, codeArguments: { 'cpp:ellint_1': swapLast } }), definition: ([p = number(0), k = number(0)]) => call('ellipticFParameter', p, sq(k)), source: 'DLMF 19.2.4' },
  { id: 'ellipticEIncomplete', title: 'elliptic integral of the second kind (amplitude, modulus k)', arity: 2, names: names({ latex: ['\\operatorname{E}'], latexLetters: ['E'], latexForm: (a) => `E(${a.join(', ')})`, unicodeForm: (a) => `E(${a.join(', ')})`, mpmath: ([p = '', k = '']) => `ellipe(${p},(${k})**2)`, code: { cpp: 'ellint_2' }, codeArguments: { 'cpp:ellint_2': swapLast } }), definition: ([p = number(0), k = number(0)]) => call('ellipticEIncompleteParameter', p, sq(k)), source: 'DLMF 19.2.5' },
  { id: 'ellipticPi', title: 'complete elliptic integral of the third kind (characteristic alpha^2, modulus k)', arity: 2, names: names({ latex: ['\\Pi'], latexForm: (a) => `\\Pi(${a.join(', ')})`, unicodeForm: (a) => `Π(${a.join(', ')})`, mpmath: ([n = '', k = '']) => `ellippi(${n},(${k})**2)`, code: { cpp: 'comp_ellint_3' }, codeArguments: { 'cpp:comp_ellint_3': swapLast } }), definition: ([n = number(0), k = number(0)]) => call('ellipticPiParameter', n, sq(k)), source: 'DLMF 19.2.8' },
  { id: 'ellipticKParameter', title: 'complete elliptic integral of the first kind (parameter m)', arity: 1, local: completeLocal('K'), derivative: kDerivative, equation: completeEquation('K'), value: completeValue('K'), names: names({ latex: [], latexForm: ([m = '']) => `K(\\sqrt{${m}})`, unicodeForm: ([m = '']) => `K(√(${m}))`, mpmath: 'ellipk', plain: ['ellipk'], code: { python: 'ellipk', julia: 'ellipk', matlab: ['ellipticK', 'ellipke'] } }), domain: 'm < 1', source: 'DLMF 19.2.8' },
  { id: 'ellipticEParameter', title: 'complete elliptic integral of the second kind (parameter m)', arity: 1, local: completeLocal('E'), derivative: eDerivative, equation: completeEquation('E'), value: completeValue('E'), names: names({ latex: [], latexForm: ([m = '']) => `E(\\sqrt{${m}})`, unicodeForm: ([m = '']) => `E(√(${m}))`, mpmath: 'ellipe', plain: ['ellipe'], code: { python: 'ellipe', julia: 'ellipe', matlab: 'ellipticE' } }), domain: 'm <= 1', source: 'DLMF 19.2.8' },
  { id: 'ellipticFParameter', title: 'elliptic integral of the first kind (amplitude, parameter m)', arity: 2, local: incompleteLocal('F'), derivative: incompleteDerivative('F'), value: incompleteValue('F'), names: names({ latex: [], latexForm: ([p = '', m = '']) => `F(${p}, \\sqrt{${m}})`, mpmath: 'ellipf', code: { python: ['ellipkinc', 'ellipf'], matlab: 'ellipticF' } }), source: 'DLMF 19.2.4' },
  { id: 'ellipticEIncompleteParameter', title: 'elliptic integral of the second kind (amplitude, parameter m)', arity: 2, local: incompleteLocal('E'), derivative: incompleteDerivative('E'), value: incompleteValue('E'), names: names({ latex: [], latexForm: ([p = '', m = '']) => `E(${p}, \\sqrt{${m}})`, mpmath: 'ellipe', code: { python: ['ellipeinc', 'ellipe'], matlab: 'ellipticE' } }), source: 'DLMF 19.2.5' },
  { id: 'ellipticPiParameter', title: 'complete elliptic integral of the third kind (characteristic n, parameter m)', arity: 2, local: piLocal, derivative: piDerivative, value: piValue, names: names({ latex: [], latexForm: ([n = '', m = '']) => `\\Pi(${n}, \\sqrt{${m}})`, mpmath: 'ellippi', code: { python: 'ellippi', matlab: 'ellipticPi' } }), source: 'DLMF 19.2.8' },
  ...(['sn', 'cn', 'dn'] as const).map((id): FunctionDescription => ({
    id: `jacobi${id.charAt(0).toUpperCase()}${id.charAt(1)}`,
    title: `Jacobian elliptic function ${id} (argument, modulus k)`,
    arity: 2,
    local: jacobiLocal(id),
    derivative: jacobiDerivative(id),
    value: jacobiValue(id),
    names: names({ latex: [`\\operatorname{${id}}`, `\\${id}`], latexForm: (a) => `\\operatorname{${id}}(${a.join(', ')})`, unicodeForm: (a) => `${id}(${a.join(', ')})`, plain: [id], mpmath: ([u = '', k = '']) => `ellipfun("${id}",${u},(${k})**2)` }),
    source: 'DLMF 22.2',
  })),
  {
    id: 'jacobiAm',
    title: "Jacobi's amplitude function (argument, modulus k)",
    arity: 2,
    local: amplitudeLocal,
    derivative: ([u = number(0), k = number(0)], index) => (index === 0 ? call('jacobiDn', u, k) : null),
    value: ([u, k]) => (u?.kind === 'number' && u.value.num === 0n ? number(0) : k?.kind === 'number' && k.value.num === 0n && u ? u : null),
    names: names({ latex: ['\\operatorname{am}', '\\am'], latexForm: (a) => `\\operatorname{am}(${a.join(', ')})`, unicodeForm: (a) => `am(${a.join(', ')})`, plain: ['am'], mpmath: ([u = '', k = '']) => `(2*atan(ellipfun("sn",${u},(${k})**2)/(1+ellipfun("cn",${u},(${k})**2))))` }),
    source: 'DLMF 22.16.1',
  },
  // Glaisher's quotients (DLMF 22.2.10).
  ...(['ns', 'nc', 'nd', 'sc', 'sd', 'cs', 'cd', 'ds', 'dc'] as const).map((id): FunctionDescription => {
    const part = (letter: string, args: readonly Expression[]): Expression => (letter === 'n' ? number(1) : call(`jacobi${letter.toUpperCase()}n`, ...args));
    return {
      id: `jacobi${id.charAt(0).toUpperCase()}${id.charAt(1)}`,
      title: `Jacobian elliptic function ${id} (argument, modulus k)`,
      arity: 2,
      definition: (args) => over(part(id.charAt(0), args), part(id.charAt(1), args)),
      names: names({ latex: [`\\operatorname{${id}}`], latexForm: (a) => `\\operatorname{${id}}(${a.join(', ')})`, unicodeForm: (a) => `${id}(${a.join(', ')})`, mpmath: ([u = '', k = '']) => `ellipfun("${id}",${u},(${k})**2)` }),
      source: 'DLMF 22.2.10',
    };
  }),
  {
    id: 'ellipticKComplementary',
    title: "complementary complete elliptic integral K'(k)",
    arity: 1,
    definition: ([k = number(0)]) => call('ellipticKParameter', minus(1, sq(k))),
    names: names({ latex: ["\\operatorname{K}'"], latexForm: ([k = '']) => `K'(${k})`, mpmath: ([k = '']) => `ellipk(1-(${k})**2)` }),
    domain: '0 < k <= 1',
    source: 'DLMF 19.2.9',
  },
  {
    id: 'ellipticEComplementary',
    title: "complementary complete elliptic integral E'(k)",
    arity: 1,
    definition: ([k = number(0)]) => call('ellipticEParameter', minus(1, sq(k))),
    names: names({ latex: ["\\operatorname{E}'"], latexForm: ([k = '']) => `E'(${k})`, mpmath: ([k = '']) => `ellipe(1-(${k})**2)` }),
    source: 'DLMF 19.2.9',
  },
  {
    id: 'ellipticNome',
    title: 'elliptic nome q(k)',
    arity: 1,
    definition: ([k = number(0)]) => call('exp', negation(over(times(pi, call('ellipticKComplementary', k)), call('ellipticK', k)))),
    names: names({ latex: [], latexForm: ([k = '']) => `q(${k})`, mpmath: ([k = '']) => `qfrom(k=${k})` }),
    domain: '0 < k < 1',
    source: 'DLMF 22.2.1',
  },
  { id: 'agm', title: 'arithmetic-geometric mean', arity: [1, 2], names: names({ latex: ['\\operatorname{agm}', '\\operatorname{M}', '\\operatorname{AGM}'], latexLetters: ['M'], latexForm: (a) => `\\operatorname{agm}(${a.join(', ')})`, mpmath: 'agm', code: { python: 'agm' } }), definition: (args) => { const [a = number(1), b = number(1)] = args.length === 1 ? [number(1), ...args] : args; return over(times(pi, a), times(2, call('ellipticKParameter', minus(1, over(sq(b), sq(a)))))); }, domain: 'positive arguments', source: 'DLMF 19.8.1' },
];

export const ellipticFunctions = enclosed(descriptions, ellipticAlgorithms);
