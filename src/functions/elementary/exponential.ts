/** exp and log with their relatives in libraries. Sources: DLMF 4.2 to 4.8. */
import { build, type Expression, Q, rationalOf } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { asMultipleOfImaginaryPi, isConstant, piTimes } from '../exactForms.ts';
import { everywhere, names } from '../naming.ts';

const { call, constant, difference, negation, number, power, product, quotient, sum } = build;
const one = (args: readonly Expression[]): Expression => args[0] ?? number(0);
const log = (e: Expression): Expression => call('log', e);
const exp = (e: Expression): Expression => call('exp', e);
const everywhereExcept = (name: string, without: readonly string[], changes: Parameters<typeof everywhere>[1] = {}): ReturnType<typeof everywhere> =>
  everywhere(name, { ...Object.fromEntries(without.map((family) => [family, []])), ...changes });

export const exponential: readonly FunctionDescription[] = [
  {
    id: 'exp',
    title: 'exponential',
    arity: 1,
    names: names({ latex: ['\\exp'], latexForm: (args) => `e^{${args[0] ?? ''}}`, mpmath: 'exp', code: everywhere('exp', { fortran: ['exp', 'dexp', 'cexp'] }) }),
    derivative: (args) => exp(one(args)),
    value: (args) => {
      const argument = one(args);
      const q = rationalOf(argument);
      if (q && Q.isZero(q)) return number(1);
      if (q && Q.isOne(q)) return constant('e');
      if (argument.kind === 'call' && argument.function === 'log') return argument.args[0] ?? null;
      const turn = asMultipleOfImaginaryPi(argument);
      if (!turn) return null;
      const quarter = Q.multiply(turn, Q.rational(2));
      if (!Q.isInteger(quarter)) return null;
      const step = ((quarter.num % 4n) + 4n) % 4n;
      return step === 0n ? number(1) : step === 2n ? number(-1) : step === 1n ? constant('i') : negation(constant('i'));
    },
    source: 'DLMF 4.2.19',
  },
  {
    id: 'log',
    title: 'natural logarithm',
    arity: 1,
    names: names({
      latex: ['\\ln', '\\log', '\\operatorname{ln}', '\\operatorname{Log}', '\\operatorname{Ln}'],
      plain: ['ln'],
      mpmath: 'log',
      code: everywhere('log', { rust: 'ln', kotlin: ['ln', 'log'], fortran: ['log', 'dlog', 'alog'] }),
    }),
    derivative: (args) => quotient(number(1), one(args)),
    value: (args) => {
      const argument = one(args);
      if (isConstant(argument, 'e')) return number(1);
      if (isConstant(argument, 'i')) return product(constant('i'), piTimes(Q.HALF));
      const q = rationalOf(argument);
      if (q && Q.isOne(q)) return number(0);
      if (q && Q.isZero(Q.add(q, Q.ONE))) return product(constant('i'), constant('pi'));
      return null;
    },
    domain: 'x > 0',
    source: 'DLMF 4.2.2',
  },
  {
    id: 'log10',
    title: 'logarithm to base 10',
    arity: 1,
    names: names({ latex: ['\\operatorname{lg}', '\\lg'], latexForm: (args) => `\\log_{10}(${args[0] ?? ''})`, mpmath: 'log10', code: everywhereExcept('log10', ['glsl'], { fortran: ['log10', 'dlog10', 'alog10'] }) }),
    definition: (args) => quotient(log(one(args)), log(number(10))),
    domain: 'x > 0',
  },
  {
    id: 'log2',
    title: 'logarithm to base 2',
    arity: 1,
    names: names({ latex: ['\\operatorname{lb}'], latexForm: (args) => `\\log_{2}(${args[0] ?? ''})`, mpmath: (args) => `log(${args[0] ?? ''},2)`, code: everywhereExcept('log2', ['java', 'fortran']) }),
    definition: (args) => quotient(log(one(args)), log(number(2))),
    domain: 'x > 0',
  },
  {
    id: 'log1p',
    title: 'ln(1 + x)',
    arity: 1,
    names: names({
      latex: ['\\operatorname{log1p}'],
      latexForm: (args) => `\\ln(1 + ${args[0] ?? ''})`,
      mpmath: 'log1p',
      code: everywhereExcept('log1p', ['fortran', 'glsl', 'hlsl', 'csharp'], { rust: 'ln_1p', kotlin: ['ln1p', 'log1p'], csharp: 'LogP1', julia: 'log1p', swift: ['log1p', 'log'] }),
    }),
    definition: (args) => log(sum(number(1), one(args))),
    derivative: (args) => quotient(number(1), sum(number(1), one(args))),
    domain: 'x > -1',
  },
  {
    id: 'expm1',
    title: 'exp(x) - 1',
    arity: 1,
    names: names({
      latex: ['\\operatorname{expm1}'],
      latexForm: (args) => `(e^{${args[0] ?? ''}} - 1)`,
      mpmath: 'expm1',
      code: everywhereExcept('expm1', ['fortran', 'glsl', 'hlsl'], { rust: 'exp_m1', csharp: 'ExpM1' }),
    }),
    definition: (args) => difference(exp(one(args)), number(1)),
    derivative: (args) => exp(one(args)),
  },
  {
    id: 'exp2',
    title: '2^x',
    arity: 1,
    names: names({ latex: ['\\operatorname{exp2}'], latexForm: (args) => `2^{${args[0] ?? ''}}`, mpmath: (args) => `(2**(${args[0] ?? ''}))`, code: { c: 'exp2', cpp: 'exp2', python: 'exp2', rust: 'exp2', go: 'Exp2', julia: 'exp2', glsl: 'exp2', hlsl: 'exp2', csharp: 'Exp2', swift: 'exp2' } }),
    definition: (args) => power(number(2), one(args)),
  },
  {
    id: 'exp10',
    title: '10^x',
    arity: 1,
    names: names({ latex: ['\\operatorname{exp10}'], latexForm: (args) => `10^{${args[0] ?? ''}}`, mpmath: (args) => `(10**(${args[0] ?? ''}))`, code: { c: ['exp10', 'pow10'], python: 'exp10', julia: 'exp10', go: 'Pow10', csharp: 'Exp10' } }),
    definition: (args) => power(number(10), one(args)),
  },
  {
    id: 'log1mexp',
    title: 'ln(1 - exp(x))',
    arity: 1,
    names: names({ latex: [], latexForm: (args) => `\\ln(1 - e^{${args[0] ?? ''}})`, mpmath: (args) => `log(-expm1(${args[0] ?? ''}))`, code: { julia: 'log1mexp' } }),
    definition: (args) => log(difference(number(1), exp(one(args)))),
    domain: 'x < 0',
  },
  {
    id: 'softplus',
    title: 'softplus, ln(1 + exp(x))',
    arity: 1,
    names: names({ latex: ['\\operatorname{softplus}'], mpmath: (args) => `log(1+exp(${args[0] ?? ''}))`, code: { python: ['softplus'], julia: ['log1pexp', 'softplus'] } }),
    definition: (args) => log(sum(number(1), exp(one(args)))),
    derivative: (args) => call('logistic', one(args)),
  },
  {
    id: 'logistic',
    title: 'logistic function, 1/(1 + exp(-x))',
    arity: 1,
    names: names({ latex: ['\\operatorname{sigmoid}', '\\operatorname{expit}', '\\operatorname{logistic}'], plain: ['sigmoid', 'expit'], mpmath: (args) => `(1/(1+exp(-(${args[0] ?? ''}))))`, code: { python: ['expit', 'sigmoid'], julia: ['logistic', 'sigmoid'], r: 'plogis' } }),
    definition: (args) => quotient(number(1), sum(number(1), exp(negation(one(args))))),
    derivative: (args) => product(call('logistic', one(args)), difference(number(1), call('logistic', one(args)))),
  },
  {
    id: 'logit',
    title: 'logit, ln(x/(1 - x))',
    arity: 1,
    names: names({ latex: ['\\operatorname{logit}'], mpmath: (args) => `log((${args[0] ?? ''})/(1-(${args[0] ?? ''})))`, code: { python: 'logit', julia: 'logit', r: 'qlogis' } }),
    definition: (args) => log(quotient(one(args), difference(number(1), one(args)))),
    domain: '0 < x < 1',
  },
  {
    id: 'gudermannian',
    title: 'Gudermannian',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\operatorname{gd}'], plain: ['gd'], mpmath: (args) => `(2*atan(tanh((${args[0] ?? ''})/2)))` }),
    definition: (args) => product(number(2), call('atan', call('tanh', quotient(one(args), number(2))))),
    derivative: (args) => call('sech', one(args)),
    source: 'DLMF 4.23.39',
  },
  {
    id: 'inverseGudermannian',
    title: 'inverse Gudermannian',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\operatorname{gd}^{-1}', '\\operatorname{arcgd}', '\\operatorname{lam}'], mpmath: (args) => `(2*atanh(tan((${args[0] ?? ''})/2)))` }),
    definition: (args) => product(number(2), call('atanh', call('tan', quotient(one(args), number(2))))),
    derivative: (args) => call('sec', one(args)),
    domain: '-pi/2 < x < pi/2',
    source: 'DLMF 4.23.41',
  },
  {
    id: 'langevin',
    title: 'Langevin function, coth x - 1/x',
    arity: 1,
    parity: 'odd',
    names: names({ latex: [], latexForm: (args) => `\\mathcal{L}(${args[0] ?? ''})`, mpmath: (args) => `(coth(${args[0] ?? ''})-1/(${args[0] ?? ''}))` }),
    definition: (args) => difference(call('coth', one(args)), quotient(number(1), one(args))),
  },
  {
    id: 'brillouin',
    title: 'Brillouin function B_J(x)',
    arity: 2,
    names: names({ latex: [], latexForm: (args) => `B_{${args[0] ?? ''}}(${args[1] ?? ''})`, mpmath: ([j = '', x = '']) => `((2*(${j})+1)/(2*(${j}))*coth((2*(${j})+1)/(2*(${j}))*(${x}))-1/(2*(${j}))*coth((${x})/(2*(${j}))))` }),
    definition: ([j = number(1), x = number(0)]) => {
      const twice = product(number(2), j);
      const factor = quotient(sum(twice, number(1)), twice);
      return difference(product(factor, call('coth', product(factor, x))), product(quotient(number(1), twice), call('coth', quotient(x, twice))));
    },
  },
];
