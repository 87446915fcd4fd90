/** Identities for a difference A - B whose two parts may cancel: forms in which they do not. Sources: DLMF 4.21 (circular), 4.35 (hyperbolic), 4.6 and 4.8 (logarithms, powers); conjugates are plain algebra. */
import { build, type Expression, rationalOf } from '../expression/index.ts';
import { callOf, cubeOf, exponentOf, isOne, type Normal, ONE, radicandOf, same, squareBase } from './patterns.ts';

export interface Rewritten {
  readonly tree: Expression;
  readonly identity: string;
  /** True for identities of real numbers that hold wherever both sides are real, and that the normal form of the difference may not know. */
  readonly everywhere?: true;
}
export type Difference = (a: Expression, b: Expression, normal: Normal) => Rewritten | null;

const { product, quotient, sum, difference, negation, power, call } = build;
const half = (u: Expression, normal: Normal): Expression => normal.tidy(quotient(u, build.number(2)));
const two = build.number(2);

/** k - cos u and its like for a function with f(u) - 1 = factor * square(u/2)^2. */
const oneMinus = (id: string, square: string, sign: 1 | -1, identity: string): Difference => (a, b, normal) => {
  const [u, v] = [callOf(a, id), callOf(b, id)];
  const argument = isOne(a) ? v : isOne(b) ? u : null;
  if (!argument) return null;
  const value = product(two, power(call(square, half(argument, normal)), 2));
  return { tree: (isOne(a) ? sign : -sign) > 0 ? value : negation(value), identity };
};

const exponentials: Difference = (a, b, normal) => {
  const [u, v] = [exponentOf(a), exponentOf(b)];
  if (!u || !v || (isOne(a) && isOne(b))) return null;
  if (isOne(b)) return { tree: call('expm1', u), identity: 'exp(u) - 1 = expm1(u)' };
  if (isOne(a)) return { tree: negation(call('expm1', v)), identity: 'exp(u) - 1 = expm1(u)' };
  if (normal.isZero(sum(u, v))) return { tree: product(two, call('sinh', u)), identity: 'exp(u) - exp(-u) = 2 sinh(u)' };
  return { tree: product(b, call('expm1', normal.tidy(difference(u, v)))), identity: 'exp(u) - exp(v) = exp(v) expm1(u - v)' };
};

/** w^q - 1 = expm1(q log w), with log1p where w is 1 + something. */
const powers: Difference = (a, b, normal) => {
  const [base, other] = isOne(b) ? [a, b] : [b, a];
  if (!isOne(other) || base.kind !== 'power' || (base.base.kind === 'constant' && base.base.name === 'e')) return null;
  const constant = rationalOf(base.exponent);
  if (constant && constant.den === 1n && constant.num > -5n && constant.num < 5n) return null;
  const w = base.base;
  const logarithm = rationalOf(w) ? call('log', w) : call('log1p', normal.tidy(difference(w, ONE)));
  const tree = call('expm1', product(base.exponent, logarithm));
  return { tree: isOne(b) ? tree : negation(tree), identity: 'w^q - 1 = expm1(q log1p(w - 1))' };
};

const roots: Difference = (a, b, normal) => {
  const [p, q] = [radicandOf(a), radicandOf(b)];
  if (!p && !q) return null;
  const top = normal.tidy(difference(p ?? power(a, 2), q ?? power(b, 2)));
  if (normal.isZero(top)) return null;
  return { tree: quotient(top, sum(a, b)), identity: 'p - q = (p^2 - q^2)/(p + q)' };
};

const cubeRoots: Difference = (a, b, normal) => {
  const [p, q] = [cubeOf(a), cubeOf(b)];
  if (!p && !q) return null;
  const top = normal.tidy(difference(p ?? power(a, 3), q ?? power(b, 3)));
  if (normal.isZero(top)) return null;
  const below = isOne(b) ? sum(power(a, 2), a, ONE) : isOne(a) ? sum(ONE, b, power(b, 2)) : sum(power(a, 2), product(a, b), power(b, 2));
  return { tree: quotient(top, below), identity: 'p - q = (p^3 - q^3)/(p^2 + p q + q^2)' };
};

const logarithms: Difference = (a, b, normal) => {
  const [u, v] = [callOf(a, 'log'), callOf(b, 'log')];
  if (!u || !v) return null;
  return { tree: call('log1p', normal.tidy(quotient(normal.tidy(difference(u, v)), v))), identity: 'log u - log v = log1p((u - v)/v)' };
};

const byProducts = (id: string, sumCall: string, differenceCall: string, sign: 1 | -1, identity: string): Difference => (a, b, normal) => {
  const [u, v] = [callOf(a, id), callOf(b, id)];
  if (!u || !v) return null;
  const tree = product(two, call(sumCall, normal.tidy(quotient(sum(u, v), two))), call(differenceCall, normal.tidy(quotient(difference(u, v), two))));
  return { tree: sign > 0 ? tree : negation(tree), identity };
};

const tangents: Difference = (a, b, normal) => {
  const [u, v] = [callOf(a, 'tan'), callOf(b, 'tan')];
  if (!u || !v) return null;
  return { tree: quotient(call('sin', normal.tidy(difference(u, v))), product(call('cos', u), call('cos', v))), identity: 'tan u - tan v = sin(u - v)/(cos u cos v)' };
};

const arctangents: Difference = (a, b, normal) => {
  const [u, v] = [callOf(a, 'atan'), callOf(b, 'atan')];
  if (!u || !v) return null;
  return { tree: call('atan', quotient(normal.tidy(difference(u, v)), sum(ONE, product(u, v)))), identity: 'atan u - atan v = atan((u - v)/(1 + u v))' };
};

const PYTHAGORAS: readonly (readonly [string, Expression | null, (u: Expression) => Expression, string])[] = [
  ['sin', ONE, (u) => power(call('cos', u), 2), '1 - sin^2 = cos^2'],
  ['cos', ONE, (u) => power(call('sin', u), 2), '1 - cos^2 = sin^2'],
  ['tanh', ONE, (u) => quotient(ONE, power(call('cosh', u), 2)), '1 - tanh^2 = 1/cosh^2'],
  ['cosh', ONE, (u) => negation(power(call('sinh', u), 2)), 'cosh^2 - 1 = sinh^2'],
];

const squares: Difference = (a, b, normal) => {
  const [p, q] = [squareBase(a), squareBase(b)];
  if (!p || !q || same(p, q)) return null;
  for (const [id, , value, identity] of PYTHAGORAS) {
    const [u, v] = [callOf(p, id), callOf(q, id)];
    if (isOne(a) && v) return { tree: value(v), identity };
    if (isOne(b) && u) return { tree: negation(value(u)), identity };
  }
  return { tree: product(normal.tidy(difference(p, q)), normal.tidy(sum(p, q))), identity: 'p^2 - q^2 = (p - q)(p + q)' };
};

const tanhFromOne: Difference = (a, b) => {
  const [u, v] = [callOf(a, 'tanh'), callOf(b, 'tanh')];
  const argument = isOne(a) ? v : isOne(b) ? u : null;
  if (!argument) return null;
  const value = quotient(two, sum(call('exp', product(two, argument)), ONE));
  return { tree: isOne(a) ? value : negation(value), identity: '1 - tanh(u) = 2/(exp(2u) + 1)' };
};

const fractions: Difference = (a, b, normal) => {
  if (a.kind !== 'quotient' && b.kind !== 'quotient') return null;
  const parts = (e: Expression): readonly [Expression, Expression] => (e.kind === 'quotient' ? [e.numerator, e.denominator] : [e, ONE]);
  const [[n, d], [m, e]] = [parts(a), parts(b)];
  const times = (x: Expression, y: Expression): Expression => (isOne(x) ? y : isOne(y) ? x : product(x, y));
  if (same(d, e)) return { tree: quotient(normal.tidy(difference(n, m)), d), identity: 'common denominator' };
  return { tree: quotient(normal.tidy(difference(times(n, e), times(m, d))), times(d, e)), identity: 'common denominator' };
};

export const DIFFERENCES: readonly Difference[] = [
  oneMinus('cos', 'sin', 1, '1 - cos(u) = 2 sin^2(u/2)'),
  oneMinus('cosh', 'sinh', -1, 'cosh(u) - 1 = 2 sinh^2(u/2)'),
  exponentials,
  powers,
  roots,
  cubeRoots,
  logarithms,
  byProducts('sin', 'cos', 'sin', 1, 'sin u - sin v = 2 cos((u + v)/2) sin((u - v)/2)'),
  byProducts('cos', 'sin', 'sin', -1, 'cos u - cos v = -2 sin((u + v)/2) sin((u - v)/2)'),
  byProducts('sinh', 'cosh', 'sinh', 1, 'sinh u - sinh v = 2 cosh((u + v)/2) sinh((u - v)/2)'),
  byProducts('cosh', 'sinh', 'sinh', 1, 'cosh u - cosh v = 2 sinh((u + v)/2) sinh((u - v)/2)'),
  tangents,
  arctangents,
  squares,
  tanhFromOne,
  fractions,
];

/** A + B with a root in it is A - (-B). */
export const conjugateSum: Difference = (a, b, normal) => (radicandOf(a) || radicandOf(b) ? (radicandOf(a) ? roots(a, negation(b), normal) : roots(b, negation(a), normal)) : null);

/** exp(u) + exp(-u) - 2 = 4 sinh^2(u/2). */
export function secondDifference(a: Expression, b: Expression, normal: Normal): Rewritten | null {
  const [u, v] = [exponentOf(a), exponentOf(b)];
  if (!u || !v || isOne(a) || isOne(b) || !normal.isZero(sum(u, v))) return null;
  return { tree: product(build.number(4), power(call('sinh', half(u, normal)), 2)), identity: 'exp(u) + exp(-u) - 2 = 4 sinh^2(u/2)' };
}
