/** sin, cos and their quotients, with sinc and cos x - 1. Sources: DLMF 4.14 to 4.21. */
import { build, type Expression, Q, type Rational } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { asMultipleOfPi, rootTimes } from '../exactForms.ts';
import { everywhere, names } from '../naming.ts';

const { call, negation, number, power, product, quotient, sum, difference } = build;
const one = (args: readonly Expression[]): Expression => args[0] ?? number(0);
const square = (e: Expression): Expression => power(e, 2);

/** sin(q pi) for denominators 1 to 6, 8, 10 and 12; DLMF Table 4.17.1 and the pentagon. */
function sineOfPiMultiple(q: Rational): Expression | null {
  let rest = Q.subtract(q, Q.multiply(Q.rational(2), Q.rational(Q.floor(Q.divide(q, Q.rational(2))))));
  let negative = false;
  if (Q.compare(rest, Q.ONE) >= 0) {
    rest = Q.subtract(rest, Q.ONE);
    negative = true;
  }
  if (Q.compare(rest, Q.HALF) > 0) rest = Q.subtract(Q.ONE, rest);
  const value = FIRST_QUADRANT[Q.toText(rest)]?.();
  if (!value) return null;
  return negative && !(value.kind === 'number' && Q.isZero(value.value)) ? negation(value) : value;
}

const root = (n: number): Expression => build.squareRoot(number(n));
const quarterOf = (e: Expression): Expression => quotient(e, number(4));
const FIRST_QUADRANT: Readonly<Record<string, () => Expression>> = {
  '0': () => number(0),
  '1/12': () => quarterOf(difference(root(6), root(2))),
  '1/10': () => quarterOf(difference(root(5), number(1))),
  '1/8': () => quotient(build.squareRoot(difference(number(2), root(2))), number(2)),
  '1/6': () => number(Q.HALF),
  '1/5': () => quarterOf(build.squareRoot(difference(number(10), product(number(2), root(5))))),
  '1/4': () => rootTimes(Q.HALF, 2),
  '3/10': () => quarterOf(sum(root(5), number(1))),
  '1/3': () => rootTimes(Q.HALF, 3),
  '3/8': () => quotient(build.squareRoot(sum(number(2), root(2))), number(2)),
  '2/5': () => quarterOf(build.squareRoot(sum(number(10), product(number(2), root(5))))),
  '5/12': () => quarterOf(sum(root(6), root(2))),
  '1/2': () => number(1),
};
const cosineOfPiMultiple = (q: Rational): Expression | null => sineOfPiMultiple(Q.subtract(Q.HALF, q));

/** numerator/denominator of two exact values; null at a pole. Simple tangents are written without a quotient of roots. */
function ratioOfPiMultiple(q: Rational, top: 'sine' | 'cosine'): Expression | null {
  const turned = top === 'sine' ? q : Q.subtract(Q.HALF, q);
  const period = Q.subtract(turned, Q.rational(Q.floor(turned)));
  return TANGENTS[Q.toText(period)]?.() ?? null;
}
const TANGENTS: Readonly<Record<string, () => Expression>> = {
  '0': () => number(0),
  '1/12': () => difference(number(2), root(3)),
  '1/8': () => difference(root(2), number(1)),
  '1/6': () => rootTimes(Q.rational(1, 3), 3),
  '1/4': () => number(1),
  '1/3': () => root(3),
  '3/8': () => sum(root(2), number(1)),
  '5/12': () => sum(number(2), root(3)),
  '7/12': () => negation(sum(number(2), root(3))),
  '5/8': () => negation(sum(root(2), number(1))),
  '2/3': () => negation(root(3)),
  '3/4': () => number(-1),
  '5/6': () => rootTimes(Q.rational(-1, 3), 3),
  '7/8': () => difference(number(1), root(2)),
  '11/12': () => difference(root(3), number(2)),
};

const atPiMultiple =
  (rule: (q: Rational) => Expression | null) =>
  (args: readonly Expression[]): Expression | null => {
    const q = asMultipleOfPi(one(args));
    return q && rule(q);
  };
const reciprocalValue = (value: Expression | null): Expression | null =>
  value && !(value.kind === 'number' && Q.isZero(value.value)) ? quotient(number(1), value) : null;

export const circular: readonly FunctionDescription[] = [
  {
    id: 'sin',
    title: 'sine',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\sin'], mpmath: 'sin', code: everywhere('sin', { fortran: ['sin', 'dsin', 'csin'] }) }),
    derivative: (args) => call('cos', one(args)),
    value: atPiMultiple(sineOfPiMultiple),
    source: 'DLMF 4.20.1',
  },
  {
    id: 'cos',
    title: 'cosine',
    arity: 1,
    parity: 'even',
    names: names({ latex: ['\\cos'], mpmath: 'cos', code: everywhere('cos', { fortran: ['cos', 'dcos', 'ccos'] }) }),
    derivative: (args) => negation(call('sin', one(args))),
    value: atPiMultiple(cosineOfPiMultiple),
    source: 'DLMF 4.20.2',
  },
  {
    id: 'tan',
    title: 'tangent',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\tan', '\\operatorname{tg}', '\\tg'], plain: ['tg'], mpmath: 'tan', code: everywhere('tan', { fortran: ['tan', 'dtan'] }) }),
    definition: (args) => quotient(call('sin', one(args)), call('cos', one(args))),
    derivative: (args) => sum(number(1), square(call('tan', one(args)))),
    value: atPiMultiple((q) => ratioOfPiMultiple(q, 'sine')),
    domain: 'x is not an odd multiple of pi/2',
    source: 'DLMF 4.20.3',
  },
  {
    id: 'cot',
    title: 'cotangent',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\cot', '\\operatorname{ctg}', '\\ctg', '\\operatorname{cotg}', '\\cotg'], plain: ['cotg', 'ctg'], mpmath: 'cot', code: { julia: 'cot', matlab: 'cot', fortran: ['cotan', 'dcotan'] } }),
    definition: (args) => quotient(call('cos', one(args)), call('sin', one(args))),
    derivative: (args) => negation(sum(number(1), square(call('cot', one(args))))),
    value: atPiMultiple((q) => (q.den === 1n ? null : ratioOfPiMultiple(q, 'cosine'))),
    domain: 'x is not a multiple of pi',
    source: 'DLMF 4.20.6',
  },
  {
    id: 'sec',
    title: 'secant',
    arity: 1,
    parity: 'even',
    names: names({ latex: ['\\sec'], mpmath: 'sec', code: { julia: 'sec', matlab: 'sec' } }),
    definition: (args) => quotient(number(1), call('cos', one(args))),
    derivative: (args) => product(call('sec', one(args)), call('tan', one(args))),
    value: atPiMultiple((q) => reciprocalValue(cosineOfPiMultiple(q))),
    domain: 'x is not an odd multiple of pi/2',
    source: 'DLMF 4.20.5',
  },
  {
    id: 'csc',
    title: 'cosecant',
    arity: 1,
    parity: 'odd',
    names: names({ latex: ['\\csc', '\\operatorname{cosec}', '\\cosec'], plain: ['cosec'], mpmath: 'csc', code: { julia: 'csc', matlab: 'csc' } }),
    definition: (args) => quotient(number(1), call('sin', one(args))),
    derivative: (args) => negation(product(call('csc', one(args)), call('cot', one(args)))),
    value: atPiMultiple((q) => reciprocalValue(sineOfPiMultiple(q))),
    domain: 'x is not a multiple of pi',
    source: 'DLMF 4.20.4',
  },
  {
    id: 'sinc',
    title: 'sinc (sin x / x)',
    arity: 1,
    parity: 'even',
    names: names({ latex: ['\\operatorname{sinc}', '\\sinc'], mpmath: 'sinc' }),
    definition: (args) => quotient(call('sin', one(args)), one(args)),
    value: (args) => {
      const q = asMultipleOfPi(one(args));
      return q && (Q.isZero(q) ? number(1) : q.den === 1n ? number(0) : null);
    },
  },
  {
    id: 'normalizedSinc',
    title: 'normalised sinc (sin(pi x)/(pi x))',
    arity: 1,
    parity: 'even',
    names: names({
      latex: [],
      latexForm: (args) => `\\frac{\\sin(\\pi ${args[0] ?? ''})}{\\pi ${args[0] ?? ''}}`,
      unicodeForm: (args) => `sinc(π(${args[0] ?? ''}))`,
      mpmath: 'sincpi',
      code: { python: 'sinc', julia: 'sinc', matlab: 'sinc' },
    }),
    definition: (args) => call('sinc', product(build.constant('pi'), one(args))),
  },
  {
    id: 'cosm1',
    title: 'cos x - 1',
    arity: 1,
    parity: 'even',
    names: names({ latex: [], latexForm: (args) => `(\\cos(${args[0] ?? ''}) - 1)`, unicodeForm: (args) => `(cos(${args[0] ?? ''}) - 1)`, mpmath: (args) => `(-2*sin((${args[0] ?? ''})/2)**2)`, code: { python: 'cosm1', cpp: 'cosm1' } }),
    definition: (args) => difference(call('cos', one(args)), number(1)),
  },
  {
    id: 'versin',
    title: 'versed sine (1 - cos x)',
    arity: 1,
    parity: 'even',
    names: names({ latex: ['\\operatorname{versin}', '\\operatorname{vers}'], mpmath: (args) => `(2*sin((${args[0] ?? ''})/2)**2)` }),
    definition: (args) => difference(number(1), call('cos', one(args))),
  },
  {
    id: 'haversin',
    title: 'haversine (sin^2(x/2))',
    arity: 1,
    parity: 'even',
    names: names({ latex: ['\\operatorname{hav}', '\\operatorname{haversin}'], plain: ['hav', 'haversine'], mpmath: (args) => `(sin((${args[0] ?? ''})/2)**2)` }),
    definition: (args) => square(call('sin', quotient(one(args), number(2)))),
  },
  {
    id: 'sinpi',
    title: 'sin(pi x)',
    arity: 1,
    parity: 'odd',
    names: names({ latex: [], latexForm: (args) => `\\sin(\\pi ${args[0] ?? ''})`, mpmath: 'sinpi', code: { c: 'sinpi', cpp: ['sinpi', 'sin_pi'], julia: 'sinpi', matlab: 'sinpi', r: 'sinpi', csharp: 'SinPi' } }),
    definition: (args) => call('sin', product(build.constant('pi'), one(args))),
  },
  {
    id: 'cospi',
    title: 'cos(pi x)',
    arity: 1,
    parity: 'even',
    names: names({ latex: [], latexForm: (args) => `\\cos(\\pi ${args[0] ?? ''})`, mpmath: 'cospi', code: { c: 'cospi', cpp: ['cospi', 'cos_pi'], julia: 'cospi', matlab: 'cospi', r: 'cospi', csharp: 'CosPi' } }),
    definition: (args) => call('cos', product(build.constant('pi'), one(args))),
  },
  {
    id: 'tanpi',
    title: 'tan(pi x)',
    arity: 1,
    parity: 'odd',
    names: names({ latex: [], latexForm: (args) => `\\tan(\\pi ${args[0] ?? ''})`, mpmath: (args) => `tan(pi*(${args[0] ?? ''}))`, code: { c: 'tanpi', cpp: 'tanpi', julia: 'tanpi', r: 'tanpi', csharp: 'TanPi' } }),
    definition: (args) => call('tan', product(build.constant('pi'), one(args))),
  },
];
