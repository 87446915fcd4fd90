/** pFq with arguments (p, q, a_1..a_p, b_1..b_q, x). Sources: DLMF 13, 15, 16. */
import { type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import { call, exp, lift, log, minus, neg, over, plus, pow, times } from '../compose.ts';
import type { FunctionDescription, LocalForm, Place } from '../description.ts';
import { asInteger } from '../exactForms.ts';
import { F1, form, hypergeometricSeries, isAt, terminationLength } from '../formal.ts';
import { kummerEquation, kummerMAtInfinity, kummerMTerminates, limitFunctionAtInfinity } from './confluent.ts';
import { gaussAtMinusInfinity, gaussAtOne, gaussValueAtOne, parameter } from './gauss.ts';

interface HypergeometricParts {
  readonly p: number;
  readonly q: number;
  readonly tops: readonly (Rational | Expression)[];
  readonly bottoms: readonly (Rational | Expression)[];
  readonly x: Expression;
}

/** Null where the counts do not fit the number of arguments. */
function hypergeometricParts(args: readonly Expression[]): HypergeometricParts | null {
  const [pTree, qTree, ...rest] = args;
  const p = pTree && asInteger(pTree, 16);
  const q = qTree && asInteger(qTree, 16);
  if (p === null || q === null || p === undefined || q === undefined || p < 0 || q < 0 || rest.length !== p + q + 1) return null;
  const parameters = rest.slice(0, -1).map(parameter);
  // Equal upper and lower parameters cancel (DLMF 16.2(i)).
  const tops = parameters.slice(0, p);
  const bottoms = parameters.slice(p);
  return { p, q, tops, bottoms, x: rest[rest.length - 1] ?? lift(0) };
}

const rebuild = (tops: readonly (Rational | Expression)[], bottoms: readonly (Rational | Expression)[], x: Expression): Expression => call('hypergeometric', tops.length, bottoms.length, ...tops, ...bottoms, x);

export function hypergeometricLocal(args: readonly Expression[], index: number, place: Place): LocalForm | null {
  const parts = hypergeometricParts(args);
  if (!parts || index !== args.length - 1) return null;
  const { p, q, tops, bottoms } = parts;
  // Elementary cases are expanded as what they are.
  const whole = place.kind === 'infinite' ? place.argument : plus(place.center, place.offset);
  const closed = place.kind === 'finite' && isAt(place, 0) ? null : hypergeometricValue([...args.slice(0, -1), whole]);
  if (closed) return form(closed, [], 'DLMF 15.4, 16.2');
  if (place.kind === 'finite') {
    if (isAt(place, 0)) {
      const sum = hypergeometricSeries(place.offset, tops, bottoms);
      return form(F1, [sum], 'DLMF 16.2.1');
    }
    const [a, b] = tops;
    const [c] = bottoms;
    if (isAt(place, 1) && p === 2 && q === 1 && a && b && c && terminationLength(tops) === null) return gaussAtOne(a, b, c, neg(place.offset));
    return null;
  }
  if (place.direction !== 1 && place.direction !== -1) return null;
  const x = place.argument;
  const [a, b] = tops;
  const [c] = bottoms;
  if (terminationLength(tops) !== null) return null;
  if (p === 2 && q === 1 && a && b && c) return place.direction === -1 ? gaussAtMinusInfinity(a, b, c, neg(x)) : null;
  if (p === 1 && q === 1 && a && c) return kummerMTerminates(a, c) ? null : kummerMAtInfinity(a, c, x, place.direction);
  if (p === 0 && q === 1 && c) return limitFunctionAtInfinity(c, x, place.direction);
  return null;
}

/** (a_1...a_p)/(b_1...b_q) pFq(a+1; b+1; x) (DLMF 16.3.1). */
export const hypergeometricDerivative: NonNullable<FunctionDescription['derivative']> = (args, index) => {
  const parts = hypergeometricParts(args);
  if (!parts || index !== args.length - 1) return null;
  const up = (value: Rational | Expression): Rational | Expression => parameter(plus(value, 1));
  return times(over(times(...parts.tops), times(...parts.bottoms)), rebuild(parts.tops.map(up), parts.bottoms.map(up), parts.x));
};

/** DLMF 15.10.1, 13.2.1 and x f'' + b f' - f = 0. */
export const hypergeometricEquation: NonNullable<FunctionDescription['equation']> = (args, index) => {
  const parts = hypergeometricParts(args);
  if (!parts || index !== args.length - 1) return null;
  const { p, q, tops, bottoms } = parts;
  const f = (point: Expression): Expression => rebuild(tops, bottoms, point);
  const slope = (point: Expression): Expression => hypergeometricDerivative([...args.slice(0, -1), point], index) ?? lift(0);
  const [a, b] = tops.map(lift);
  const [c] = bottoms.map(lift);
  if (p === 2 && q === 1 && a && b && c) return { polynomials: [[neg(times(a, b))], [c, neg(plus(a, b, 1))], [lift(0), lift(1), lift(-1)]], initial: [f, slope] };
  if (p === 1 && q === 1 && a && c) return kummerEquation((_a, _b, x) => f(x), (_a, _b, x) => slope(x))(a, c);
  if (p === 0 && q === 1 && c) return { polynomials: [[lift(-1)], [c], [lift(0), lift(1)]], initial: [f, slope] };
  return null;
};

/** Cancelling parameters, finite sums, 0F0 = exp, 1F0 = (1-x)^-a, 2F1(1,1;2;x), and Gauss' sum at 1. */
export function hypergeometricValue(args: readonly Expression[]): Expression | null {
  const parts = hypergeometricParts(args);
  if (!parts) return null;
  const { tops, bottoms, x } = parts;
  const zero = rationalOf(x);
  if (zero && Q.isZero(zero)) return lift(1);
  const length = terminationLength(tops);
  if (length !== null && length <= 64 && !bottoms.some((value) => terminationLength([value]) !== null)) {
    const sum = hypergeometricSeries(x, tops, bottoms);
    return plus(...Array.from({ length }, (_, k) => times(sum.coefficient(k), pow(x, k))));
  }
  const same = (u: Rational | Expression, v: Rational | Expression): boolean => {
    const difference = parameter(minus(lift(u), lift(v)));
    return !('kind' in difference) && Q.isZero(difference);
  };
  for (const [i, top] of tops.entries()) {
    const j = bottoms.findIndex((bottom) => same(top, bottom));
    if (j >= 0) {
      const reduced = rebuild(tops.filter((_, k) => k !== i), bottoms.filter((_, k) => k !== j), x);
      return reduced.kind === 'call' ? (hypergeometricValue(reduced.args) ?? reduced) : reduced;
    }
  }
  const [a, b] = tops;
  const [c] = bottoms;
  if (tops.length === 0 && bottoms.length === 0) return exp(x);
  if (tops.length === 1 && bottoms.length === 0 && a) return pow(minus(1, x), neg(lift(a)));
  if (tops.length === 2 && bottoms.length === 1 && a && b && c) {
    const isValue = (value: Rational | Expression, n: number): boolean => !('kind' in value) && Q.equal(value, Q.rational(n));
    if (isValue(a, 1) && isValue(b, 1) && isValue(c, 2)) return over(neg(log(minus(1, x))), x);
    if (zero && Q.isOne(zero)) return gaussValueAtOne(a, b, c);
  }
  return null;
}
