/** Names of the gamma family: factorials, Gamma, digamma, beta, incomplete gamma, Barnes G. */
import { build, type Expression } from '../../expression/index.ts';
import type { FunctionNames } from '../description.ts';
import { names, swapped } from '../naming.ts';

const raw = (args: readonly string[], i: number): string => args[i] ?? '';
const pairOnly = {
  read: (args: readonly Expression[]): readonly Expression[] | null => (args.length === 2 ? args : null),
  write: (args: readonly Expression[]): readonly Expression[] | null => args,
};
/** (a, b, x) of a library as (x, a, b). */
const lastFirst = {
  read: ([a, b, x]: readonly Expression[]): readonly Expression[] | null => (a && b && x ? [x, a, b] : null),
  write: ([x, a, b]: readonly Expression[]): readonly Expression[] | null => (a && b && x ? [a, b, x] : null),
};
const asTrigamma = {
  read: (args: readonly Expression[]): readonly Expression[] | null => (args.length === 1 ? [build.number(1), ...args] : null),
  write: (): null => null,
};

export const gammaNames = {
  gamma: names({ latex: ['\\Gamma', '\\operatorname{Gamma}'], plain: ['Gamma', 'tgamma'], unicodeForm: (a) => `Γ(${raw(a, 0)})`, mpmath: 'gamma', code: { c: 'tgamma', cpp: 'tgamma', python: ['gamma'], rust: ['gamma', 'tgamma'], go: 'Gamma', julia: 'gamma', fortran: ['gamma', 'dgamma'], matlab: 'gamma', r: 'gamma', swift: 'tgamma', javascript: 'gamma' } }),
  logGamma: names({ latex: ['\\operatorname{lgamma}', '\\operatorname{lnGamma}', '\\operatorname{logGamma}'], latexForm: (a) => `\\ln\\Gamma(${raw(a, 0)})`, plain: ['lgamma', 'loggamma', 'lngamma', 'gammaln'], unicodeForm: (a) => `ln Γ(${raw(a, 0)})`, mpmath: 'loggamma', code: { c: 'lgamma', cpp: 'lgamma', python: ['gammaln', 'loggamma', 'lgamma'], rust: ['ln_gamma', 'lgamma'], go: 'Lgamma', julia: ['loggamma', 'lgamma'], fortran: ['log_gamma', 'dlgama', 'algama'], matlab: 'gammaln', r: 'lgamma', swift: 'lgamma' } }),
  digamma: names({ latex: ['\\psi', '\\digamma', '\\operatorname{digamma}'], latexForm: (a) => `\\psi(${raw(a, 0)})`, plain: ['psi'], unicodeForm: (a) => `ψ(${raw(a, 0)})`, mpmath: (a) => `psi(0,${raw(a, 0)})`, code: { python: ['digamma', 'psi'], julia: 'digamma', matlab: 'psi', r: 'digamma', cpp: 'digamma' } }),
  polygamma: names({
    latex: ['\\operatorname{polygamma}'],
    latexIndices: { count: 1, place: 'superscript' },
    latexForm: (a) => `\\psi^{(${raw(a, 0)})}(${raw(a, 1)})`,
    unicodeForm: (a) => (a[0] === '1' ? `ψ′(${raw(a, 1)})` : a[0] === '2' ? `ψ″(${raw(a, 1)})` : `ψ⁽${raw(a, 0)}⁾(${raw(a, 1)})`),
    plain: ['psi', 'trigamma'],
    mpmath: 'psi',
    code: { python: 'polygamma', julia: ['polygamma', 'trigamma'], matlab: 'psi', r: ['psigamma', 'trigamma'], cpp: ['polygamma', 'trigamma'] },
    codeArguments: { 'matlab:psi': pairOnly, 'r:psigamma': swapped, 'r:trigamma': asTrigamma, 'julia:trigamma': asTrigamma, 'cpp:trigamma': asTrigamma },
  }),
  factorial: names({ latex: ['\\operatorname{factorial}'], latexForm: (a) => `${/^(\w|\\[a-zA-Z]+)$/.test(raw(a, 0)) || /^\d+$/.test(raw(a, 0)) ? raw(a, 0) : `(${raw(a, 0)})`}!`, unicodeForm: (a) => `(${raw(a, 0)})!`, mpmath: 'factorial', code: { python: 'factorial', julia: 'factorial', matlab: 'factorial', r: 'factorial' } }),
  doubleFactorial: names({ latex: [], latexForm: (a) => `(${raw(a, 0)})!!`, unicodeForm: (a) => `(${raw(a, 0)})!!`, mpmath: 'fac2', code: { python: ['factorial2', 'fac2'] } }),
  binomial: names({ latex: ['\\binom', '\\dbinom', '\\tbinom', '\\operatorname{binomial}'], latexForm: (a) => `\\binom{${raw(a, 0)}}{${raw(a, 1)}}`, plain: ['choose', 'binom', 'comb'], mpmath: 'binomial', code: { python: ['comb', 'binom'], julia: 'binomial', matlab: 'nchoosek', r: 'choose' } }),
  pochhammer: names({ latex: [], latexForm: (a) => `(${raw(a, 0)})_{${raw(a, 1)}}`, unicodeForm: (a) => `(${raw(a, 0)})_${raw(a, 1)}`, plain: ['rf'], mpmath: 'rf', code: { python: ['poch', 'rf'], matlab: 'pochhammer' } }),
  fallingFactorial: names({ latex: [], latexForm: (a) => `(${raw(a, 0)})^{\\underline{${raw(a, 1)}}}`, plain: ['ff'], mpmath: 'ff', code: { python: 'ff' } }),
  beta: names({ latex: ['\\operatorname{B}', '\\Beta', '\\operatorname{Beta}', '\\operatorname{beta}', '\\mathrm{B}'], latexLetters: ['B'], latexForm: (a) => `\\mathrm{B}(${a.join(', ')})`, unicodeForm: (a) => `B(${a.join(', ')})`, plain: ['Beta'], mpmath: 'beta', code: { cpp: 'beta', python: 'beta', julia: 'beta', matlab: 'beta', r: 'beta' } }),
  logBeta: names({ latex: [], latexForm: (a) => `\\ln\\mathrm{B}(${a.join(', ')})`, mpmath: (a) => `log(beta(${a.join(',')}))`, code: { python: 'betaln', julia: 'logbeta', matlab: 'betaln', r: 'lbeta' } }),
  harmonic: names({ latex: ['\\operatorname{harmonic}'], latexLetters: ['H'], latexIndices: { count: 1, place: 'subscript' }, latexForm: (a) => `H_{${raw(a, 0)}}`, unicodeForm: (a) => `H(${raw(a, 0)})`, mpmath: 'harmonic', code: { python: 'harmonic', matlab: 'harmonic' } }),
  upperGamma: names({ latex: ['\\Gamma'], latexForm: (a) => `\\Gamma(${a.join(', ')})`, unicodeForm: (a) => `Γ(${a.join(', ')})`, mpmath: 'gammainc', code: { julia: 'gamma', python: 'uppergamma' } }),
  lowerGamma: names({ latex: ['\\gamma'], latexForm: (a) => `\\gamma(${a.join(', ')})`, unicodeForm: (a) => `γ(${a.join(', ')})`, mpmath: ([s = '', x = '']) => `gammainc(${s},0,${x})`, code: { python: 'lowergamma' } }),
  regularizedUpperGamma: names({ latex: ['\\operatorname{Q}'], latexLetters: ['Q'], latexForm: (a) => `Q(${a.join(', ')})`, unicodeForm: (a) => `Q(${a.join(', ')})`, mpmath: ([s = '', x = '']) => `gammainc(${s},${x},regularized=True)`, code: { python: 'gammaincc', cpp: 'gamma_q' } }),
  regularizedLowerGamma: names({ latex: ['\\operatorname{P}'], latexLetters: ['P'], latexForm: (a) => `P(${a.join(', ')})`, unicodeForm: (a) => `P(${a.join(', ')})`, mpmath: ([s = '', x = '']) => `gammainc(${s},0,${x},regularized=True)`, code: { python: 'gammainc', matlab: 'gammainc', cpp: 'gamma_p' }, codeArguments: { 'matlab:gammainc': swapped } }),
  incompleteBeta: names({ latex: ['\\operatorname{B}', '\\Beta'], latexLetters: ['B'], latexIndices: { count: 1, place: 'subscript' }, latexForm: ([x = '', ...rest]) => `\\mathrm{B}_{${x}}(${rest.join(', ')})`, unicodeForm: ([x = '', ...rest]) => `B_${x}(${rest.join(', ')})`, mpmath: ([x = '', a = '', b = '']) => `betainc(${a},${b},0,${x})` }),
  regularizedBeta: names({
    latex: ['\\operatorname{I}'],
    latexLetters: ['I'],
    latexIndices: { count: 1, place: 'subscript' },
    latexForm: ([x = '', ...rest]) => `I_{${x}}(${rest.join(', ')})`,
    unicodeForm: ([x = '', ...rest]) => `I_${x}(${rest.join(', ')})`,
    plain: ['betainc'],
    mpmath: ([x = '', a = '', b = '']) => `betainc(${a},${b},0,${x},regularized=True)`,
    code: { python: 'betainc', matlab: 'betainc', r: 'pbeta', julia: 'beta_inc', cpp: 'ibeta' },
    codeArguments: { 'python:betainc': lastFirst, 'cpp:ibeta': lastFirst, 'julia:beta_inc': lastFirst },
  }),
  generalizedHarmonic: names({ latex: ['\\operatorname{harmonic}'], latexForm: ([n = '', r = '']) => `H_{${n}}^{(${r})}`, unicodeForm: ([n = '', r = '']) => `H(${n}, ${r})`, mpmath: ([n = '', r = '']) => `(zeta(${r})-zeta(${r},(${n})+1))`, code: { matlab: 'harmonic' } }),
  barnesG: names({ latex: ['\\operatorname{G}'], latexLetters: ['G'], latexForm: (a) => `G(${raw(a, 0)})`, unicodeForm: (a) => `G(${raw(a, 0)})`, mpmath: 'barnesg', code: { python: 'barnesg' } }),
  logBarnesG: names({ latex: [], latexForm: (a) => `\\ln G(${raw(a, 0)})`, unicodeForm: (a) => `ln G(${raw(a, 0)})`, mpmath: (a) => `log(barnesg(${raw(a, 0)}))` }),
  hyperfactorial: names({ latex: ['\\operatorname{hyperfactorial}', '\\operatorname{H}'], latexForm: (a) => `\\operatorname{H}(${raw(a, 0)})`, mpmath: 'hyperfac', code: { python: 'hyperfac' } }),
  superfactorial: names({ latex: ['\\operatorname{superfactorial}'], mpmath: 'superfac', code: { python: 'superfac' } }),
} satisfies Readonly<Record<string, FunctionNames>>;
