/** Names of the exponential, trigonometric and error integrals. */
import { build, type Expression } from '../../expression/index.ts';
import type { FunctionNames } from '../description.ts';
import { names, subscripted, withFirst } from '../naming.ts';

const first = withFirst(build.number(1));
const unary = { read: (args: readonly Expression[]): readonly Expression[] | null => (args.length === 1 ? args : null), write: (args: readonly Expression[]): readonly Expression[] | null => args };

export const integralNames = {
  erf: names({ latex: ['\\operatorname{erf}', '\\erf', '\\operatorname{Erf}'], mpmath: 'erf', code: { c: 'erf', cpp: 'erf', python: 'erf', rust: 'erf', go: 'Erf', julia: 'erf', fortran: ['erf', 'derf'], matlab: 'erf', swift: 'erf', javascript: 'erf' } }),
  erfc: names({ latex: ['\\operatorname{erfc}', '\\erfc', '\\operatorname{Erfc}'], mpmath: 'erfc', code: { c: 'erfc', cpp: 'erfc', python: 'erfc', rust: 'erfc', go: 'Erfc', julia: 'erfc', fortran: ['erfc', 'derfc'], matlab: 'erfc', swift: 'erfc' } }),
  erfi: names({ latex: ['\\operatorname{erfi}', '\\erfi'], mpmath: 'erfi', code: { python: 'erfi', julia: 'erfi', matlab: 'erfi' } }),
  erfcx: names({ latex: ['\\operatorname{erfcx}'], mpmath: ([x = '']) => `(exp((${x})**2)*erfc(${x}))`, code: { python: 'erfcx', julia: 'erfcx', matlab: 'erfcx', fortran: 'erfc_scaled' } }),
  dawson: names({ latex: ['\\operatorname{dawson}', '\\operatorname{daw}', '\\operatorname{Daw}'], plain: ['dawson'], latexForm: ([x = '']) => `\\operatorname{daw}(${x})`, mpmath: ([x = '']) => `(sqrt(pi)/2*exp(-(${x})**2)*erfi(${x}))`, code: { python: 'dawsn', julia: 'dawson', matlab: 'dawson' } }),
  erfinv: names({ latex: ['\\operatorname{inverf}', '\\operatorname{erfinv}', '\\operatorname{erf}^{-1}'], latexForm: ([x = '']) => `\\operatorname{inverf}(${x})`, plain: ['inverf'], mpmath: 'erfinv', code: { python: 'erfinv', julia: 'erfinv', matlab: 'erfinv', go: 'Erfinv', cpp: 'erf_inv' } }),
  erfcinv: names({ latex: ['\\operatorname{inverfc}', '\\operatorname{erfcinv}', '\\operatorname{erfc}^{-1}'], latexForm: ([x = '']) => `\\operatorname{inverfc}(${x})`, plain: ['inverfc'], mpmath: ([x = '']) => `erfinv(1-(${x}))`, code: { python: 'erfcinv', julia: 'erfcinv', matlab: 'erfcinv', go: 'Erfcinv', cpp: 'erfc_inv' } }),
  normalCdf: names({ latex: ['\\Phi'], latexForm: ([x = '']) => `\\Phi(${x})`, unicodeForm: ([x = '']) => `Φ(${x})`, plain: ['normcdf'], mpmath: 'ncdf', code: { python: ['ndtr', 'ncdf'], matlab: 'normcdf', r: 'pnorm', julia: 'normcdf' }, codeArguments: { 'r:pnorm': unary, 'matlab:normcdf': unary } }),
  normalQuantile: names({ latex: ['\\operatorname{probit}', '\\Phi^{-1}'], plain: ['probit'], mpmath: ([p = '']) => `(sqrt(2)*erfinv(2*(${p})-1))`, code: { python: 'ndtri', matlab: 'norminv', r: 'qnorm' }, codeArguments: { 'r:qnorm': unary, 'matlab:norminv': unary } }),
  fresnelS: names({ latex: ['\\operatorname{S}', '\\operatorname{FresnelS}'], latexLetters: ['S'], latexForm: ([x = '']) => `S(${x})`, unicodeForm: ([x = '']) => `S(${x})`, mpmath: 'fresnels', code: { python: 'fresnels', matlab: 'fresnels' } }),
  fresnelC: names({ latex: ['\\operatorname{C}', '\\operatorname{FresnelC}'], latexLetters: ['C'], latexForm: ([x = '']) => `C(${x})`, unicodeForm: ([x = '']) => `C(${x})`, mpmath: 'fresnelc', code: { python: 'fresnelc', matlab: 'fresnelc' } }),
  expIntegralEi: names({ latex: ['\\operatorname{Ei}', '\\Ei'], unicodeForm: ([x = '']) => `Ei(${x})`, plain: ['Ei', 'ei'], mpmath: 'ei', code: { python: ['expi', 'ei'], cpp: 'expint', julia: 'expinti', matlab: 'ei' }, codeArguments: { 'cpp:expint': unary } }),
  expIntegralE: names({
    latex: ['\\operatorname{E}', '\\mathrm{E}'],
    latexLetters: ['E'],
    latexIndices: { count: 1, place: 'subscript' },
    latexForm: subscripted('E'),
    unicodeForm: ([n = '', x = '']) => `E_${n}(${x})`,
    plain: ['expint'],
    mpmath: ([n = '', x = '']) => (n === '1' ? `e1(${x})` : `expint(${n},${x})`),
    code: { python: ['expn', 'exp1', 'e1', 'expint'], julia: 'expint', matlab: 'expint', cpp: 'expint' },
    codeArguments: { 'python:exp1': first, 'python:e1': first, 'matlab:expint': first, 'julia:expint': { read: (args) => (args.length === 1 ? [build.number(1), ...args] : args.length === 2 ? args : null), write: (args) => args }, 'cpp:expint': { read: (args) => (args.length === 2 ? args : null), write: (args) => args } },
  }),
  logIntegral: names({ latex: ['\\operatorname{li}', '\\li'], unicodeForm: ([x = '']) => `li(${x})`, mpmath: 'li', plain: ['li'], code: { matlab: 'logint', python: 'li' } }),
  offsetLogIntegral: names({ latex: ['\\operatorname{Li}', '\\Li'], unicodeForm: ([x = '']) => `Li(${x})`, mpmath: ([x = '']) => `li(${x},offset=True)` }),
  sinIntegral: names({ latex: ['\\operatorname{Si}', '\\Si'], unicodeForm: ([x = '']) => `Si(${x})`, plain: ['Si'], mpmath: 'si', code: { julia: 'sinint', matlab: 'sinint', python: 'si' } }),
  complementarySinIntegral: names({ latex: ['\\operatorname{si}'], unicodeForm: ([x = '']) => `si(${x})`, mpmath: ([x = '']) => `(si(${x})-pi/2)`, code: { matlab: 'ssinint' } }),
  cosIntegral: names({ latex: ['\\operatorname{Ci}', '\\Ci', '\\operatorname{ci}'], unicodeForm: ([x = '']) => `Ci(${x})`, plain: ['Ci'], mpmath: 'ci', code: { julia: 'cosint', matlab: 'cosint', python: 'ci' } }),
  cin: names({ latex: ['\\operatorname{Cin}'], unicodeForm: ([x = '']) => `Cin(${x})`, plain: ['Cin'], mpmath: ([x = '']) => `(euler+log(${x})-ci(${x}))` }),
  ein: names({ latex: ['\\operatorname{Ein}'], unicodeForm: ([x = '']) => `Ein(${x})`, plain: ['Ein'], mpmath: ([x = '']) => `(e1(${x})+log(${x})+euler)` }),
  sinhIntegral: names({ latex: ['\\operatorname{Shi}', '\\Shi'], unicodeForm: ([x = '']) => `Shi(${x})`, plain: ['Shi'], mpmath: 'shi', code: { matlab: 'sinhint', python: 'shi' } }),
  coshIntegral: names({ latex: ['\\operatorname{Chi}', '\\Chi'], unicodeForm: ([x = '']) => `Chi(${x})`, plain: ['Chi'], mpmath: 'chi', code: { matlab: 'coshint', python: 'chi' } }),
} satisfies Readonly<Record<string, FunctionNames>>;

