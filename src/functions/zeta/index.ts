/** Zeta functions, polylogarithms, Clausen, Debye and Fermi-Dirac integrals, Bernoulli and Euler numbers. */
import { build, Q } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { lift, minus, over, plus, pow, times } from '../compose.ts';
import { asInteger } from '../exactForms.ts';
import { names, subscripted } from '../naming.ts';
import { enclosed } from '../enclosure/wrap.ts';
import { numberAlgorithms, zetaAlgorithms } from './enclosure.ts';
import { polylogAlgorithms } from './polylogEnclosure.ts';
import { etaAtInteger } from './exactZeta.ts';
import { bernoulliNumberValue, bernoulliPolynomialDerivative, bernoulliPolynomialValue, eulerNumberValue } from './numbers.ts';
import { clausenDerivative, clausenLocal, clausenValue, debyeDerivative, debyeLocal, inverseTangentIntegralLocal, polylogDerivative, polylogLocal, polylogValue } from './polylogarithm.ts';
import { hurwitzDerivative, hurwitzLocal, hurwitzValue, zetaDerivativeLocal, zetaDerivativeValue, zetaLocal, zetaValue } from './zeta.ts';

const { call, constant, difference, negation, number, sum } = build;

const descriptions: readonly FunctionDescription[] = [
  { id: 'zeta', title: 'Riemann zeta function', arity: 1, local: zetaLocal, value: zetaValue, names: names({ latex: ['\\zeta', '\\operatorname{zeta}'], plain: ['zeta'], unicodeForm: ([s = '']) => `ζ(${s})`, mpmath: 'zeta', code: { cpp: 'riemann_zeta', python: 'zeta', julia: 'zeta', matlab: 'zeta' } }), derivative: ([s = number(0)]) => call('zetaDerivative', number(1), s), domain: 's is not 1', source: 'DLMF 25.2.1' },
  { id: 'zetaDerivative', title: 'derivative of the Riemann zeta function (order, s)', arity: 2, local: zetaDerivativeLocal, value: zetaDerivativeValue, derivative: ([n = number(0), s = number(0)], index) => (index === 1 ? call('zetaDerivative', plus(n, 1), s) : null), names: names({ latex: [], latexIndices: { count: 1, place: 'superscript' }, latexForm: ([n = '', s = '']) => `\\zeta^{(${n})}(${s})`, unicodeForm: ([n = '', s = '']) => (n === '1' ? `ζ′(${s})` : `ζ⁽${n}⁾(${s})`), mpmath: ([n = '', s = '']) => `zeta(${s},1,${n})` }), source: 'DLMF 25.2.7' },
  { id: 'hurwitzZeta', title: 'Hurwitz zeta function (s, a)', arity: 2, local: hurwitzLocal, value: hurwitzValue, derivative: hurwitzDerivative, names: names({ latex: ['\\zeta'], latexForm: (a) => `\\zeta(${a.join(', ')})`, unicodeForm: (a) => `ζ(${a.join(', ')})`, mpmath: 'zeta', code: { python: 'zeta', julia: 'zeta', matlab: 'hurwitzZeta' } }), source: 'DLMF 25.11.1' },
  { id: 'dirichletEta', title: 'Dirichlet eta function', arity: 1, definition: ([s = number(0)]) => times(minus(1, pow(2, minus(1, s))), call('zeta', s)), value: ([s]) => { const n = s && asInteger(s, 1000); return n === null || n === undefined ? null : lift(etaAtInteger(n)); }, names: names({ latex: ['\\operatorname{eta}'], latexForm: ([s = '']) => `\\eta(${s})`, mpmath: 'altzeta', code: { julia: 'eta', python: 'altzeta' } }), source: 'DLMF 25.2.3' },
  {
    id: 'dirichletBeta',
    title: 'Dirichlet beta function',
    arity: 1,
    definition: ([s = number(0)]) => times(pow(4, negation(s)), minus(call('hurwitzZeta', s, number(Q.rational(1, 4))), call('hurwitzZeta', s, number(Q.rational(3, 4))))),
    names: names({ latex: ['\\operatorname{beta}'], latexForm: ([s = '']) => `\\beta(${s})`, unicodeForm: ([s = '']) => `β(${s})`, mpmath: ([s = '']) => `dirichlet(${s},[0,1,0,-1])` }),
    source: 'Abramowitz & Stegun 23.2.21 with DLMF 25.11.1',
  },
  { id: 'polylog', title: 'polylogarithm (s, x)', arity: 2, local: polylogLocal, value: polylogValue, derivative: polylogDerivative, names: names({ latex: ['\\operatorname{Li}', '\\Li', '\\operatorname{polylog}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('\\operatorname{Li}'), unicodeForm: ([s = '', x = '']) => `Li_${s}(${x})`, plain: ['polylog'], mpmath: 'polylog', code: { matlab: 'polylog', julia: 'polylog', python: 'polylog' } }), domain: 'x <= 1', source: 'DLMF 25.12.10' },
  { id: 'spence', title: "Spence's function Li_2(1 - x)", arity: 1, names: names({ latex: ['\\operatorname{spence}'], latexForm: ([x = '']) => `\\operatorname{Li}_2(1 - ${x})`, mpmath: ([x = '']) => `polylog(2,1-(${x}))`, code: { python: 'spence', matlab: 'dilog' } }), definition: ([x = number(0)]) => call('polylog', number(2), difference(number(1), x)) },
  { id: 'clausen', title: 'Clausen function Cl_2', arity: 1, parity: 'odd', local: clausenLocal, value: clausenValue, derivative: clausenDerivative, names: names({ latex: ['\\operatorname{Cl}_2', '\\operatorname{Cl}', '\\Cl'], latexForm: ([x = '']) => `\\operatorname{Cl}_2(${x})`, unicodeForm: ([x = '']) => `Cl₂(${x})`, mpmath: ([x = '']) => `clsin(2,${x})`, code: { python: 'clausen2' } }), source: 'DLMF 25.12.9' },
  { id: 'inverseTangentIntegral', title: 'inverse tangent integral Ti_2', arity: 1, parity: 'odd', local: inverseTangentIntegralLocal, derivative: ([x = number(0)]) => over(call('atan', x), x), value: ([x]) => (x?.kind !== 'number' ? null : Q.isZero(x.value) ? number(0) : Q.isOne(x.value) ? constant('catalan') : Q.isOne(Q.negate(x.value)) ? negation(constant('catalan')) : null), names: names({ latex: ['\\operatorname{Ti}_2', '\\operatorname{Ti}'], latexForm: ([x = '']) => `\\operatorname{Ti}_2(${x})`, unicodeForm: ([x = '']) => `Ti₂(${x})`, mpmath: ([x = '']) => `im(polylog(2,I*(${x})))` }), source: 'Lewin, Polylogarithms and Associated Functions, ch. 2, from memory' },
  { id: 'legendreChi', title: 'Legendre chi function (s, x)', arity: 2, names: names({ latex: ['\\chi'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('\\chi'), mpmath: ([s = '', x = '']) => `((polylog(${s},${x})-polylog(${s},-(${x})))/2)` }), definition: ([s = number(0), x = number(0)]) => build.quotient(difference(call('polylog', s, x), call('polylog', s, negation(x))), number(2)) },
  { id: 'debye', title: 'Debye function D_n(x)', arity: 2, local: debyeLocal, derivative: debyeDerivative, names: names({ latex: ['\\operatorname{Debye}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('D'), mpmath: ([n = '', x = '']) => `((${n})/(${x})**(${n})*quad(lambda t_: t_**(${n})/expm1(t_),[0,${x}]))` }), source: 'Abramowitz & Stegun 27.1.1' },
  { id: 'fermiDirac', title: 'Fermi-Dirac integral F_j(x), normalised by Gamma(j + 1)', arity: 2, names: names({ latex: ['\\mathcal{F}', '\\operatorname{F}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('F'), mpmath: ([j = '', x = '']) => `(-polylog((${j})+1,-exp(${x})))` }), definition: ([j = number(0), x = number(0)]) => negation(call('polylog', sum(j, number(1)), negation(call('exp', x)))), source: 'DLMF 25.12.14' },
  { id: 'boseEinstein', title: 'Bose-Einstein integral G_j(x), normalised by Gamma(j + 1)', arity: 2, names: names({ latex: [], latexForm: subscripted('G'), mpmath: ([j = '', x = '']) => `polylog((${j})+1,exp(${x}))` }), definition: ([j = number(0), x = number(0)]) => call('polylog', sum(j, number(1)), call('exp', x)), domain: 'x < 0', source: 'DLMF 25.12.15' },
  { id: 'bernoulliNumber', title: 'Bernoulli number B_n', arity: 1, value: bernoulliNumberValue, names: names({ latex: [], latexLetters: ['B'], latexIndices: { count: 1, place: 'subscript' }, latexForm: ([n = '']) => `B_{${n}}`, unicodeForm: ([n = '']) => `B_${n}`, plain: ['bernoulli'], mpmath: 'bernoulli', code: { matlab: 'bernoulli' } }), source: 'DLMF 24.2.1' },
  { id: 'bernoulliPolynomial', title: 'Bernoulli polynomial B_n(x)', arity: 2, value: bernoulliPolynomialValue, derivative: bernoulliPolynomialDerivative, names: names({ latex: [], latexLetters: ['B'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('B'), mpmath: 'bernpoly', code: { matlab: 'bernoulli' } }), source: 'DLMF 24.2.3' },
  { id: 'eulerNumber', title: 'Euler number E_n', arity: 1, value: eulerNumberValue, names: names({ latex: [], latexLetters: ['E'], latexIndices: { count: 1, place: 'subscript' }, latexForm: ([n = '']) => `E_{${n}}`, unicodeForm: ([n = '']) => `E_${n}`, mpmath: 'eulernum', code: { matlab: 'euler' } }), source: 'DLMF 24.2.6' },
  { id: 'stieltjes', title: 'Stieltjes constant gamma_n', arity: 1, names: names({ latex: [], latexForm: ([n = '']) => `\\gamma_{${n}}`, unicodeForm: ([n = '']) => `γ_${n}`, mpmath: 'stieltjes' }), value: ([n]) => (n?.kind === 'number' && n.value.num === 0n ? constant('eulerGamma') : null), source: 'DLMF 25.2.5' },
];

export const zetaFunctions = enclosed(descriptions, { ...zetaAlgorithms, ...polylogAlgorithms, ...numberAlgorithms });
