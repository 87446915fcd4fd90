/** Names of the Bessel family, Airy, Struve, Kelvin. */
import { build } from '../../expression/index.ts';
import type { FunctionNames } from '../description.ts';
import { names, subscripted, swapped, withFirst } from '../naming.ts';

const zero = withFirst(build.number(0));
const one = withFirst(build.number(1));
const sub = (letter: string, mpmath: string, code: Parameters<typeof names>[0]['code'], extra: FunctionNames['codeArguments'] = {}, latex: readonly string[] = []): FunctionNames =>
  names({ latex, latexLetters: [letter], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted(letter), unicodeForm: ([n = '', ...rest]) => `${letter}_${n}(${rest.join(', ')})`, mpmath, plain: [mpmath], ...(code ? { code } : {}), codeArguments: extra });
const kelvin = (id: string): FunctionNames =>
  names({
    latex: [`\\operatorname{${id}}`],
    latexIndices: { count: 1, place: 'subscript' },
    latexForm: ([n = '', x = '']) => (n === '0' ? `\\operatorname{${id}}(${x})` : `\\operatorname{${id}}_{${n}}(${x})`),
    unicodeForm: ([n = '', x = '']) => (n === '0' ? `${id}(${x})` : `${id}_${n}(${x})`),
    mpmath: id,
    code: { python: id },
    codeArguments: { [`python:${id}`]: { read: (args) => (args.length === 1 ? [build.number(0), ...args] : args.length === 2 ? args : null), write: zero.write } },
  });

export const besselNames = {
  besselJ: sub('J', 'besselj', { python: ['jv', 'j0', 'j1', 'jn', 'besselj'], cpp: ['cyl_bessel_j', 'j0', 'j1', 'jn'], c: ['jn', 'j0', 'j1'], go: ['Jn', 'J0', 'J1'], julia: ['besselj', 'besselj0', 'besselj1'], fortran: ['bessel_jn', 'bessel_j0', 'bessel_j1'], matlab: 'besselj', r: 'besselJ', swift: ['jn', 'j0', 'j1'] }, { 'python:j0': zero, 'python:j1': one, 'cpp:j0': zero, 'cpp:j1': one, 'c:j0': zero, 'c:j1': one, 'go:J0': zero, 'go:J1': one, 'julia:besselj0': zero, 'julia:besselj1': one, 'fortran:bessel_j0': zero, 'fortran:bessel_j1': one, 'swift:j0': zero, 'swift:j1': one, 'r:besselJ': swapped }),
  besselY: sub('Y', 'bessely', { python: ['yv', 'y0', 'y1', 'yn', 'bessely'], cpp: ['cyl_neumann', 'y0', 'y1', 'yn'], c: ['yn', 'y0', 'y1'], go: ['Yn', 'Y0', 'Y1'], julia: ['bessely', 'bessely0', 'bessely1'], fortran: ['bessel_yn', 'bessel_y0', 'bessel_y1'], matlab: 'bessely', r: 'besselY', swift: ['yn', 'y0', 'y1'] }, { 'python:y0': zero, 'python:y1': one, 'cpp:y0': zero, 'cpp:y1': one, 'c:y0': zero, 'c:y1': one, 'go:Y0': zero, 'go:Y1': one, 'julia:bessely0': zero, 'julia:bessely1': one, 'fortran:bessel_y0': zero, 'fortran:bessel_y1': one, 'swift:y0': zero, 'swift:y1': one, 'r:besselY': swapped }),
  besselI: sub('I', 'besseli', { python: ['iv', 'i0', 'i1', 'besseli'], cpp: 'cyl_bessel_i', julia: 'besseli', matlab: 'besseli', r: 'besselI' }, { 'python:i0': zero, 'python:i1': one, 'r:besselI': swapped }),
  besselK: sub('K', 'besselk', { python: ['kv', 'k0', 'k1', 'kn', 'besselk'], cpp: 'cyl_bessel_k', julia: 'besselk', matlab: 'besselk', r: 'besselK' }, { 'python:k0': zero, 'python:k1': one, 'r:besselK': swapped }),
  hankel1: names({ latex: ['\\operatorname{H}^{(1)}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: ([n = '', x = '']) => `H^{(1)}_{${n}}(${x})`, mpmath: 'hankel1', code: { python: 'hankel1', julia: 'hankelh1' } }),
  hankel2: names({ latex: ['\\operatorname{H}^{(2)}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: ([n = '', x = '']) => `H^{(2)}_{${n}}(${x})`, mpmath: 'hankel2', code: { python: 'hankel2', julia: 'hankelh2' } }),
  sphericalJ: names({ latex: ['\\mathsf{j}'], latexLetters: ['j'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('\\mathsf{j}'), unicodeForm: ([n = '', x = '']) => `j_${n}(${x})`, mpmath: ([n = '', x = '']) => `(sqrt(pi/(2*(${x})))*besselj((${n})+1/2,${x}))`, code: { python: 'spherical_jn', cpp: 'sph_bessel', julia: 'sphericalbesselj' } }),
  sphericalY: names({ latex: ['\\mathsf{y}'], latexLetters: ['y'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('\\mathsf{y}'), unicodeForm: ([n = '', x = '']) => `y_${n}(${x})`, mpmath: ([n = '', x = '']) => `(sqrt(pi/(2*(${x})))*bessely((${n})+1/2,${x}))`, code: { python: 'spherical_yn', cpp: 'sph_neumann', julia: 'sphericalbessely' } }),
  sphericalI: names({ latex: ['\\mathsf{i}^{(1)}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('\\mathsf{i}^{(1)}'), unicodeForm: ([n = '', x = '']) => `i_${n}(${x})`, mpmath: ([n = '', x = '']) => `(sqrt(pi/(2*(${x})))*besseli((${n})+1/2,${x}))`, code: { python: 'spherical_in' } }),
  sphericalK: names({ latex: ['\\mathsf{k}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('\\mathsf{k}'), unicodeForm: ([n = '', x = '']) => `k_${n}(${x})`, mpmath: ([n = '', x = '']) => `(sqrt(pi/(2*(${x})))*besselk((${n})+1/2,${x}))`, code: { python: 'spherical_kn' } }),
  airyAi: names({ latex: ['\\operatorname{Ai}', '\\Ai'], unicodeForm: ([x = '']) => `Ai(${x})`, plain: ['Ai'], mpmath: 'airyai', code: { julia: 'airyai', matlab: 'airy', cpp: 'airy_ai', python: 'airyai' } }),
  airyBi: names({ latex: ['\\operatorname{Bi}', '\\Bi'], unicodeForm: ([x = '']) => `Bi(${x})`, plain: ['Bi'], mpmath: 'airybi', code: { julia: 'airybi', cpp: 'airy_bi', python: 'airybi' } }),
  airyAiPrime: names({ latex: ["\\operatorname{Ai}'", "\\Ai'"], latexForm: ([x = '']) => `\\operatorname{Ai}'(${x})`, unicodeForm: ([x = '']) => `Ai′(${x})`, plain: ["Ai'"], mpmath: ([x = '']) => `airyai(${x},derivative=1)`, code: { julia: 'airyaiprime', cpp: 'airy_ai_prime' } }),
  airyBiPrime: names({ latex: ["\\operatorname{Bi}'", "\\Bi'"], latexForm: ([x = '']) => `\\operatorname{Bi}'(${x})`, unicodeForm: ([x = '']) => `Bi′(${x})`, plain: ["Bi'"], mpmath: ([x = '']) => `airybi(${x},derivative=1)`, code: { julia: 'airybiprime', cpp: 'airy_bi_prime' } }),
  struveH: names({ latex: ['\\mathbf{H}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('\\mathbf{H}'), unicodeForm: ([n = '', x = '']) => `𝐇_${n}(${x})`, mpmath: 'struveh', code: { python: ['struve', 'struveh'] } }),
  struveL: names({ latex: ['\\mathbf{L}'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('\\mathbf{L}'), unicodeForm: ([n = '', x = '']) => `𝐋_${n}(${x})`, mpmath: 'struvel', code: { python: ['modstruve', 'struvel'] } }),
  kelvinBer: kelvin('ber'),
  kelvinBei: kelvin('bei'),
  kelvinKer: kelvin('ker'),
  kelvinKei: kelvin('kei'),
} satisfies Readonly<Record<string, FunctionNames>>;
