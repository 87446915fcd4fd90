/** Hyperbolic functions and their inverses. Sources: DLMF 4.28 to 4.40. */
import { build, type Expression, Q, rationalOf } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { everywhere, names } from '../naming.ts';
import { acoshLocal, asinhLocal, atanhLocal } from './inverseLocal.ts';

const { call, difference, negation, number, power, product, quotient, squareRoot, sum } = build;
const one = (args: readonly Expression[]): Expression => args[0] ?? number(0);
const square = (e: Expression): Expression => power(e, 2);
const reciprocal = (e: Expression): Expression => quotient(number(1), e);
const atZero =
  (value: Expression) =>
  (args: readonly Expression[]): Expression | null => {
    const q = rationalOf(one(args));
    return q && Q.isZero(q) ? value : null;
  };
const exponential = (e: Expression): Expression => call('exp', e);
const half = (e: Expression): Expression => quotient(e, number(2));
const inverseLatex = (short: string): readonly string[] => [`\\operatorname{ar${short}}`, `\\operatorname{arc${short}}`, `\\operatorname{a${short}}`, `\\ar${short}`, `\\arc${short}`];

export const hyperbolic: readonly FunctionDescription[] = [
  {
    id: 'sinh',
    title: 'hyperbolic sine',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\sinh', '\\operatorname{sh}', '\\sh'], mpmath: 'sinh', code: everywhere('sinh', { fortran: ['sinh', 'dsinh'] }) }),
    definition: (args) => half(difference(exponential(one(args)), exponential(negation(one(args))))),
    derivative: (args) => call('cosh', one(args)),
    value: atZero(number(0)),
    source: 'DLMF 4.28.1',
  },
  {
    id: 'cosh',
    title: 'hyperbolic cosine',
    arity: 1,
    parity: 'even',
    names: names({ latex: ['\\cosh', '\\operatorname{ch}', '\\ch'], mpmath: 'cosh', code: everywhere('cosh', { fortran: ['cosh', 'dcosh'] }) }),
    definition: (args) => half(sum(exponential(one(args)), exponential(negation(one(args))))),
    derivative: (args) => call('sinh', one(args)),
    value: atZero(number(1)),
    source: 'DLMF 4.28.2',
  },
  {
    id: 'tanh',
    title: 'hyperbolic tangent',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\tanh', '\\operatorname{th}', '\\operatorname{tgh}'], mpmath: 'tanh', code: everywhere('tanh', { fortran: ['tanh', 'dtanh'] }) }),
    definition: (args) => quotient(call('sinh', one(args)), call('cosh', one(args))),
    derivative: (args) => difference(number(1), square(call('tanh', one(args)))),
    value: atZero(number(0)),
    source: 'DLMF 4.28.4',
  },
  {
    id: 'coth',
    title: 'hyperbolic cotangent',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\coth', '\\operatorname{cth}'], mpmath: 'coth', code: { julia: 'coth', matlab: 'coth' } }),
    definition: (args) => quotient(call('cosh', one(args)), call('sinh', one(args))),
    derivative: (args) => difference(number(1), square(call('coth', one(args)))),
    domain: 'x is not 0',
    source: 'DLMF 4.28.7',
  },
  {
    id: 'sech',
    title: 'hyperbolic secant',
    arity: 1,
    parity: 'even',
    names: names({ latex: ['\\operatorname{sech}', '\\sech'], mpmath: 'sech', code: { julia: 'sech', matlab: 'sech' } }),
    definition: (args) => reciprocal(call('cosh', one(args))),
    derivative: (args) => negation(product(call('sech', one(args)), call('tanh', one(args)))),
    value: atZero(number(1)),
    source: 'DLMF 4.28.6',
  },
  {
    id: 'csch',
    title: 'hyperbolic cosecant',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\operatorname{csch}', '\\csch', '\\operatorname{cosech}', '\\cosech'], plain: ['cosech'], mpmath: 'csch', code: { julia: 'csch', matlab: 'csch' } }),
    definition: (args) => reciprocal(call('sinh', one(args))),
    derivative: (args) => negation(product(call('csch', one(args)), call('coth', one(args)))),
    domain: 'x is not 0',
    source: 'DLMF 4.28.5',
  },
  {
    id: 'asinh',
    title: 'inverse hyperbolic sine',
    arity: 1,
    parity: 'odd',
    names: names({ latex: [...inverseLatex('sinh'), '\\operatorname{Arsinh}', '\\operatorname{arsh}'], plain: ['arcsinh', 'arsinh'], mpmath: 'asinh', code: everywhere('asinh', { python: ['arcsinh', 'asinh'], hlsl: [], java: [] }) }),
    derivative: (args) => reciprocal(squareRoot(sum(square(one(args)), number(1)))),
    value: atZero(number(0)),
    local: asinhLocal,
    source: 'DLMF 4.37.16, 4.38.1',
  },
  {
    id: 'acosh',
    title: 'inverse hyperbolic cosine',
    arity: 1,
    names: names({ latex: [...inverseLatex('cosh'), '\\operatorname{Arcosh}', '\\operatorname{arch}'], plain: ['arccosh', 'arcosh'], mpmath: 'acosh', code: everywhere('acosh', { python: ['arccosh', 'acosh'], hlsl: [], java: [] }) }),
    derivative: (args) => reciprocal(product(squareRoot(difference(one(args), number(1))), squareRoot(sum(one(args), number(1))))),
    value: (args) => {
      const q = rationalOf(one(args));
      return q && Q.isOne(q) ? number(0) : null;
    },
    local: acoshLocal,
    domain: 'x >= 1',
    source: 'DLMF 4.37.19',
  },
  {
    id: 'atanh',
    title: 'inverse hyperbolic tangent',
    arity: 1,
    parity: 'odd',
    names: names({ latex: [...inverseLatex('tanh'), '\\operatorname{Artanh}', '\\operatorname{arth}'], plain: ['arctanh', 'artanh'], mpmath: 'atanh', code: everywhere('atanh', { python: ['arctanh', 'atanh'], hlsl: [], java: [] }) }),
    derivative: (args) => reciprocal(difference(number(1), square(one(args)))),
    value: atZero(number(0)),
    local: atanhLocal,
    domain: '-1 < x < 1',
    source: 'DLMF 4.37.24',
  },
  {
    id: 'acoth',
    title: 'inverse hyperbolic cotangent',
    arity: 1,
    names: names({ latex: inverseLatex('coth'), plain: ['arccoth', 'arcoth'], mpmath: 'acoth', code: { julia: 'acoth', matlab: 'acoth' } }),
    definition: (args) => call('atanh', reciprocal(one(args))),
    derivative: (args) => reciprocal(difference(number(1), square(one(args)))),
    domain: '|x| > 1',
    source: 'DLMF 4.37.9',
  },
  {
    id: 'asech',
    title: 'inverse hyperbolic secant',
    arity: 1,
    names: names({ latex: inverseLatex('sech'), plain: ['arcsech', 'arsech'], mpmath: 'asech', code: { julia: 'asech', matlab: 'asech' } }),
    definition: (args) => call('acosh', reciprocal(one(args))),
    derivative: (args) => negation(reciprocal(product(square(one(args)), squareRoot(difference(reciprocal(one(args)), number(1))), squareRoot(sum(reciprocal(one(args)), number(1)))))),
    domain: '0 < x <= 1',
    source: 'DLMF 4.37.8',
  },
  {
    id: 'acsch',
    title: 'inverse hyperbolic cosecant',
    arity: 1,
    parity: 'odd',
    names: names({ latex: inverseLatex('csch'), plain: ['arccsch', 'arcsch'], mpmath: 'acsch', code: { julia: 'acsch', matlab: 'acsch' } }),
    definition: (args) => call('asinh', reciprocal(one(args))),
    derivative: (args) => negation(reciprocal(product(square(one(args)), squareRoot(sum(number(1), power(one(args), -2)))))),
    domain: 'x is not 0',
    source: 'DLMF 4.37.7',
  },
];
