/** Inverse circular functions, principal values. Sources: DLMF 4.23, 4.24. */
import { build, type Expression, Q, type Rational } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { piTimes, signedSquare } from '../exactForms.ts';
import { everywhere, names } from '../naming.ts';
import { acosLocal, asinLocal, atanLocal } from './inverseLocal.ts';

const { call, difference, negation, number, power, product, quotient, squareRoot, sum } = build;
const one = (args: readonly Expression[]): Expression => args[0] ?? number(0);
const square = (e: Expression): Expression => power(e, 2);
const reciprocal = (e: Expression): Expression => quotient(number(1), e);
const asinLatex = (name: string, long: string): readonly string[] => [`\\${long}`, `\\operatorname{${long}}`, `\\operatorname{${name}}`];

/** As above for names that TeX has no command for: the form that every document can set comes first. */
const operatorLatex = (name: string, long: string): readonly string[] => [`\\operatorname{${long}}`, `\\${long}`, `\\operatorname{${name}}`];

/** Angles in units of pi by the signed square of their sine. */
const SINES: readonly (readonly [Rational, Rational])[] = [
  [Q.ZERO, Q.ZERO],
  [Q.rational(1, 4), Q.rational(1, 6)],
  [Q.HALF, Q.rational(1, 4)],
  [Q.rational(3, 4), Q.rational(1, 3)],
  [Q.ONE, Q.HALF],
];
const TANGENTS: readonly (readonly [Rational, Rational])[] = [
  [Q.ZERO, Q.ZERO],
  [Q.rational(1, 3), Q.rational(1, 6)],
  [Q.ONE, Q.rational(1, 4)],
  [Q.rational(3), Q.rational(1, 3)],
];

function angle(table: readonly (readonly [Rational, Rational])[], e: Expression): Rational | null {
  const sq = signedSquare(e);
  if (!sq) return null;
  const found = table.find(([s]) => Q.equal(s, Q.absolute(sq)));
  return found ? (sq.num < 0n ? Q.negate(found[1]) : found[1]) : null;
}
const asineAngle = (e: Expression): Rational | null => angle(SINES, e);
const inverse = (sq: Expression): Expression => quotient(number(1), sq);
const isZeroValue = (e: Expression): boolean => {
  const sq = signedSquare(e);
  return sq !== null && Q.isZero(sq);
};

export const inverseCircular: readonly FunctionDescription[] = [
  {
    id: 'asin',
    title: 'inverse sine',
    arity: 1,
    parity: 'odd',
    names: names({ latex: asinLatex('asin', 'arcsin'), plain: ['arcsin'], mpmath: 'asin', code: everywhere('asin', { python: ['arcsin', 'asin'], fortran: ['asin', 'dasin'] }) }),
    derivative: (args) => reciprocal(squareRoot(difference(number(1), square(one(args))))),
    value: (args) => {
      const q = asineAngle(one(args));
      return q && piTimes(q);
    },
    local: asinLocal,
    domain: '-1 <= x <= 1',
    source: 'DLMF 4.24.1, 4.24.7',
  },
  {
    id: 'acos',
    title: 'inverse cosine',
    arity: 1,
    names: names({ latex: asinLatex('acos', 'arccos'), plain: ['arccos'], mpmath: 'acos', code: everywhere('acos', { python: ['arccos', 'acos'], fortran: ['acos', 'dacos'] }) }),
    derivative: (args) => negation(reciprocal(squareRoot(difference(number(1), square(one(args)))))),
    value: (args) => {
      const q = asineAngle(one(args));
      return q && piTimes(Q.subtract(Q.HALF, q));
    },
    local: acosLocal,
    domain: '-1 <= x <= 1',
    source: 'DLMF 4.24.2, 4.24.8',
  },
  {
    id: 'atan',
    title: 'inverse tangent',
    arity: 1,
    parity: 'odd',
    names: names({ latex: [...asinLatex('atan', 'arctan'), '\\operatorname{arctg}', '\\arctg'], plain: ['arctan', 'arctg'], mpmath: 'atan', code: everywhere('atan', { python: ['arctan', 'atan'], fortran: ['atan', 'datan'] }) }),
    derivative: (args) => reciprocal(sum(number(1), square(one(args)))),
    value: (args) => {
      const q = angle(TANGENTS, one(args));
      return q && piTimes(q);
    },
    local: atanLocal,
    source: 'DLMF 4.24.3, 4.24.4, 4.24.9',
  },
  {
    id: 'acot',
    title: 'inverse cotangent, arctan(1/x)',
    arity: 1,
    names: names({ latex: [...operatorLatex('acot', 'arccot'), '\\operatorname{arcctg}'], plain: ['arccot'], mpmath: 'acot', code: { julia: 'acot', matlab: 'acot' } }),
    definition: (args) => call('atan', reciprocal(one(args))),
    derivative: (args) => negation(reciprocal(sum(number(1), square(one(args))))),
    value: (args) => {
      if (isZeroValue(one(args))) return piTimes(Q.HALF);
      const q = angle(TANGENTS, inverse(one(args)));
      return q && piTimes(q);
    },
    domain: 'x is not 0',
    source: 'DLMF 4.23.9',
  },
  {
    id: 'asec',
    title: 'inverse secant',
    arity: 1,
    names: names({ latex: operatorLatex('asec', 'arcsec'), plain: ['arcsec'], mpmath: 'asec', code: { julia: 'asec', matlab: 'asec' } }),
    definition: (args) => call('acos', reciprocal(one(args))),
    derivative: (args) => reciprocal(product(square(one(args)), squareRoot(difference(number(1), power(one(args), -2))))),
    value: (args) => {
      const q = isZeroValue(one(args)) ? null : asineAngle(inverse(one(args)));
      return q && piTimes(Q.subtract(Q.HALF, q));
    },
    domain: '|x| >= 1',
    source: 'DLMF 4.23.8',
  },
  {
    id: 'acsc',
    title: 'inverse cosecant',
    arity: 1,
    parity: 'odd',
    names: names({ latex: [...operatorLatex('acsc', 'arccsc'), '\\operatorname{arccosec}'], plain: ['arccsc'], mpmath: 'acsc', code: { julia: 'acsc', matlab: 'acsc' } }),
    definition: (args) => call('asin', reciprocal(one(args))),
    derivative: (args) => negation(reciprocal(product(square(one(args)), squareRoot(difference(number(1), power(one(args), -2)))))),
    value: (args) => {
      const q = isZeroValue(one(args)) ? null : asineAngle(inverse(one(args)));
      return q && piTimes(q);
    },
    domain: '|x| >= 1',
    source: 'DLMF 4.23.7',
  },
  {
    id: 'atan2',
    title: 'angle of the point (x, y), atan2(y, x)',
    arity: 2,
    names: names({ latex: ['\\operatorname{atan2}', '\\operatorname{arctan2}'], plain: ['arctan2'], mpmath: 'atan2', code: everywhere('atan2', { python: ['arctan2', 'atan2'], fortran: ['atan2', 'datan2'], julia: 'atan', glsl: 'atan' }) }),
    derivative: ([y = number(0), x = number(0)], index) =>
      index === 0 ? quotient(x, sum(square(x), square(y))) : negation(quotient(y, sum(square(x), square(y)))),
    domain: 'not both arguments 0; a jump of 2 pi across y = 0, x < 0',
  },
];
