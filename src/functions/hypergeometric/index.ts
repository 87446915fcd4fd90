/** Generalised hypergeometric functions, confluent U, parabolic cylinder, and orthogonal polynomials by degree. */
import { build, type Expression } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { call, cos, exp, minus, neg, over, plus, pow, sin, sqrt, square, times } from '../compose.ts';
import { names, subscripted } from '../naming.ts';
import { enclosed } from '../enclosure/wrap.ts';
import { hypergeometricAlgorithms } from './enclosure.ts';
import { kummerUDerivative, kummerUEquation, kummerULocal, parabolicDerivative, parabolicEquation, parabolicLocal, parabolicValue } from './confluent.ts';
import { hypergeometricDerivative, hypergeometricEquation, hypergeometricLocal, hypergeometricValue } from './generalized.ts';
import { chebyshevTValue, chebyshevUValue, hermiteValue, laguerreValue, legendreValue } from './polynomials.ts';

const { number } = build;
/** Call arguments (a..., b..., x) of a named pFq as arguments of the one description. */
const shaped = (p: number, q: number) => ({
  read: (a: readonly Expression[]): readonly Expression[] | null => (a.length === p + q + 1 ? [number(p), number(q), ...a] : null),
  write: (a: readonly Expression[]): readonly Expression[] | null =>
    a[0]?.kind === 'number' && a[1]?.kind === 'number' && a[0].value.num === BigInt(p) && a[1].value.num === BigInt(q) ? a.slice(2) : null,
});
const split = (args: readonly string[]): { p: string; q: string; a: readonly string[]; b: readonly string[]; x: string } => {
  const [p = '0', q = '0', ...rest] = args;
  const count = Number(p);
  return { p, q, a: rest.slice(0, count), b: rest.slice(count, -1), x: rest.at(-1) ?? '' };
};
const degree = (letter: string, mpmath: string, code: readonly [string, string, string?]): ReturnType<typeof names> =>
  names({ latex: [], latexLetters: [letter], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted(letter), unicodeForm: ([n = '', x = '']) => `${letter}_${n}(${x})`, mpmath, code: { python: [code[0], mpmath], matlab: code[1], ...(code[2] ? { cpp: code[2] } : {}) } });

const descriptions: readonly FunctionDescription[] = [
  {
    id: 'hypergeometric',
    title: 'generalised hypergeometric function pFq; arguments p, q, a_1..a_p, b_1..b_q, x',
    arity: [3, 32],
    local: hypergeometricLocal,
    derivative: hypergeometricDerivative,
    equation: hypergeometricEquation,
    value: hypergeometricValue,
    names: names({
      latex: [],
      latexForm: (args) => {
        const { p, q, a, b, x } = split(args);
        return `{}_{${p}}F_{${q}}(${a.join(', ')}; ${b.join(', ')}; ${x})`;
      },
      unicodeForm: (args) => {
        const { p, q, a, b, x } = split(args);
        return `${p}F${q}(${a.join(', ')}; ${b.join(', ')}; ${x})`;
      },
      mpmath: (args) => {
        const { a, b, x } = split(args);
        return `hyper([${a.join(',')}],[${b.join(',')}],${x})`;
      },
      plain: ['hyp2f1', 'hyp1f1', 'hyp0f1'],
      code: { python: ['hyp2f1', 'hyp1f1', 'hyp0f1', 'hyp1f2', 'hyp2f0', 'hyp3f2'], cpp: ['hyperg', 'conf_hyperg'] },
      codeArguments: { 'python:hyp2f1': shaped(2, 1), 'python:hyp1f1': shaped(1, 1), 'python:hyp0f1': shaped(0, 1), 'python:hyp1f2': shaped(1, 2), 'python:hyp2f0': shaped(2, 0), 'python:hyp3f2': shaped(3, 2), 'cpp:hyperg': shaped(2, 1), 'cpp:conf_hyperg': shaped(1, 1) },
    }),
    source: 'DLMF 16.2.1',
  },
  { id: 'kummerU', title: 'confluent hypergeometric function U(a, b, x)', arity: 3, local: kummerULocal, derivative: kummerUDerivative, equation: kummerUEquation, names: names({ latex: ['\\operatorname{U}'], latexLetters: ['U'], latexForm: (a) => `U(${a.join(', ')})`, unicodeForm: (a) => `U(${a.join(', ')})`, mpmath: 'hyperu', code: { python: 'hyperu', matlab: 'kummerU' } }), domain: 'x > 0', source: 'DLMF 13.2.6' },
  { id: 'kummerM', title: 'confluent hypergeometric function M(a, b, x)', arity: 3, names: names({ latex: ['\\operatorname{M}'], latexLetters: ['M'], latexForm: (a) => `M(${a.join(', ')})`, mpmath: 'hyp1f1' }), definition: ([a = number(0), b = number(0), x = number(0)]) => build.call('hypergeometric', number(1), number(1), a, b, x), source: 'DLMF 13.2.2' },
  { id: 'parabolicD', title: 'parabolic cylinder function D_p(x)', arity: 2, local: parabolicLocal, derivative: parabolicDerivative, equation: parabolicEquation, value: parabolicValue, names: names({ latex: [], latexLetters: ['D'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('D'), unicodeForm: ([p = '', x = '']) => `D_${p}(${x})`, mpmath: 'pcfd', code: { python: 'pcfd' } }), source: 'DLMF 12.1' },
  { id: 'parabolicU', title: 'parabolic cylinder function U(a, x)', arity: 2, names: names({ latex: ['\\operatorname{U}'], latexLetters: ['U'], latexForm: (a) => `U(${a.join(', ')})`, unicodeForm: (a) => `U(${a.join(', ')})`, mpmath: 'pcfu', code: { python: 'pcfu' } }), definition: ([a = number(0), x = number(0)]) => build.call('parabolicD', build.difference(build.negation(a), build.quotient(number(1), number(2))), x), source: 'DLMF 12.1' },
  { id: 'legendreP', title: 'Legendre function P_n(x)', arity: 2, value: legendreValue, definition: ([n = number(0), x = number(0)]) => call('hypergeometric', 2, 1, neg(n), plus(n, 1), 1, over(minus(1, x), 2)), derivative: ([n = number(0), x = number(0)], index) => (index === 1 ? over(times(n, minus(times(x, call('legendreP', n, x)), call('legendreP', plus(n, -1), x))), minus(square(x), 1)) : null), names: degree('P', 'legendre', ['eval_legendre', 'legendreP', 'legendre']), source: 'DLMF 14.3.1, 18.5' },
  { id: 'chebyshevT', title: 'Chebyshev function T_n(x)', arity: 2, value: chebyshevTValue, definition: ([n = number(0), x = number(0)]) => cos(times(n, call('acos', x))), names: degree('T', 'chebyt', ['eval_chebyt', 'chebyshevT', 'chebyshev_t']), source: 'DLMF 18.5.1' },
  { id: 'chebyshevU', title: 'Chebyshev function U_n(x)', arity: 2, value: chebyshevUValue, definition: ([n = number(0), x = number(0)]) => over(sin(times(plus(n, 1), call('acos', x))), sqrt(minus(1, square(x)))), names: degree('U', 'chebyu', ['eval_chebyu', 'chebyshevU', 'chebyshev_u']), source: 'DLMF 18.5.2' },
  { id: 'hermiteH', title: 'Hermite function H_n(x)', arity: 2, value: hermiteValue, definition: ([n = number(0), x = number(0)]) => times(pow(2, over(n, 2)), exp(over(square(x), 2)), call('parabolicD', n, times(sqrt(2), x))), derivative: ([n = number(0), x = number(0)], index) => (index === 1 ? times(2, n, call('hermiteH', plus(n, -1), x)) : null), names: degree('H', 'hermite', ['eval_hermite', 'hermiteH', 'hermite']), source: 'DLMF 18.5' },
  { id: 'laguerreL', title: 'Laguerre function L_n(x)', arity: 2, value: laguerreValue, definition: ([n = number(0), x = number(0)]) => call('hypergeometric', 1, 1, neg(n), 1, x), names: names({ latex: [], latexLetters: ['L'], latexIndices: { count: 1, place: 'subscript' }, latexForm: subscripted('L'), unicodeForm: ([n = '', x = '']) => `L_${n}(${x})`, mpmath: ([n = '', x = '']) => `laguerre(${n},0,${x})`, code: { python: 'eval_laguerre', matlab: 'laguerreL', cpp: 'laguerre' } }), source: 'DLMF 18.5' },
];

export const hypergeometricFunctions = enclosed(descriptions, hypergeometricAlgorithms);
