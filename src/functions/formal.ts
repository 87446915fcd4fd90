/** Builders of formal series and recognition of places. */
import { type Expression, Q, type Rational, rationalOf, sameExpression } from '../expression/index.ts';
import { lift, over, plus, scaled, sym } from './compose.ts';
import type { FormalSeries, LocalForm, Place } from './description.ts';

type Coefficient = Rational | Expression;

/** A series with cached coefficients. */
export function series(argument: Expression, coefficient: (k: number) => Coefficient, options: { readonly divergent?: boolean; readonly length?: number } = {}): FormalSeries {
  const cache: (Coefficient | undefined)[] = [];
  return {
    argument,
    coefficient: (k) => {
      if (options.length !== undefined && k >= options.length) return Q.ZERO;
      return (cache[k] ??= coefficient(k));
    },
    divergent: options.divergent ?? false,
    ...(options.length === undefined ? {} : { length: options.length }),
  };
}

/** c_0 = first, c_(k+1) = c_k * ratio(k). */
export function ratioSeries(argument: Expression, first: Coefficient, ratio: (k: number) => Coefficient, options: Parameters<typeof series>[2] = {}): FormalSeries {
  const members: Coefficient[] = [first];
  return series(
    argument,
    (k) => {
      for (let i = members.length; i <= k; i++) members.push(scaled(members[i - 1] as Coefficient, ratio(i - 1)));
      return members[k] as Coefficient;
    },
    options,
  );
}

/** Product of (a_i + k) over product of (b_j + k), rational where all are. */
function shiftedRatio(tops: readonly Coefficient[], bottoms: readonly Coefficient[], k: number): Coefficient {
  const shift = (value: Coefficient): Coefficient => {
    if (!('kind' in value)) return Q.add(value, Q.rational(k));
    const exact = rationalOf(value);
    return exact ? Q.add(exact, Q.rational(k)) : plus(value, k);
  };
  let top: Coefficient = Q.ONE;
  for (const value of tops) top = scaled(top, shift(value));
  let bottom: Coefficient = Q.ONE;
  for (const value of bottoms) bottom = scaled(bottom, shift(value));
  if (!('kind' in top) && !('kind' in bottom)) return Q.divide(top, bottom);
  return over(top, bottom);
}

/** sum of (a_1)_k ... / ((b_1)_k ... k!) * scale^k * argument^k. Terminates where some a_i is a non-positive integer. */
export function hypergeometricSeries(argument: Expression, tops: readonly Coefficient[], bottoms: readonly Coefficient[], scale: Rational = Q.ONE): FormalSeries {
  const length = terminationLength(tops);
  return ratioSeries(argument, Q.ONE, (k) => scaled(shiftedRatio(tops, [...bottoms, Q.ONE], k), scale), {
    divergent: length === null && tops.length > bottoms.length + 1,
    ...(length === null ? {} : { length }),
  });
}

/** Number of terms of a hypergeometric sum that ends; null if it does not. */
export function terminationLength(tops: readonly Coefficient[]): number | null {
  let shortest: number | null = null;
  for (const top of tops) {
    const exact = 'kind' in top ? rationalOf(top) : top;
    if (exact && Q.isInteger(exact) && exact.num <= 0n && exact.num > -1000000n) {
      const length = 1 - Number(exact.num);
      if (shortest === null || length < shortest) shortest = length;
    }
  }
  return shortest;
}

/** Fresh names of formal series in a body. The prefix cannot be written by a user, so nothing collides. */
export const F1 = sym('\\formal_1');
export const F2 = sym('\\formal_2');
export const F3 = sym('\\formal_3');
const NAMES = ['\\formal_1', '\\formal_2', '\\formal_3', '\\formal_4'];

/** A local form whose series are named F1, F2, ... in order. */
export function form(body: Expression, formals: readonly FormalSeries[], source: string, extra: Partial<LocalForm> = {}): LocalForm {
  return { body, formals: Object.fromEntries(formals.map((f, i) => [NAMES[i] ?? `\\formal_${i + 1}`, f])), source, ...extra };
}
export const formalName = (i: number): Expression => sym(`\\formal_${i + 1}`);

export const isAt = (place: Place, value: number | Rational | Expression): boolean => {
  if (place.kind !== 'finite') return false;
  const wanted = lift(value);
  const exact = rationalOf(place.center);
  return exact && wanted.kind === 'number' ? Q.equal(exact, wanted.value) : sameExpression(place.center, wanted);
};
/** Integer n where the centre is the integer n; null otherwise. */
export function integerCenter(place: Place): number | null {
  if (place.kind !== 'finite') return null;
  const exact = rationalOf(place.center);
  return exact && Q.isInteger(exact) && Q.compare(Q.absolute(exact), Q.rational(10000)) <= 0 ? Number(exact.num) : null;
}
/** The large argument where the place is +infinity (1) or -infinity (-1) on the real line. */
export const atInfinity = (place: Place, direction: 1 | -1): Expression | null => (place.kind === 'infinite' && place.direction === direction ? place.argument : null);

/** Taylor coefficients by a rule; for descriptions whose derivatives have closed forms. */
export const taylor = (place: Extract<Place, { kind: 'finite' }>, coefficient: (k: number) => Coefficient): FormalSeries => series(place.offset, coefficient);

/** The logarithm that serves the sides asked for: log u, log(-u), or log|u| where both real sides are. For functions whose value on the negative side is real (principal value). */
export function realLog(place: Extract<Place, { kind: 'finite' }>): Expression {
  const u = place.offset;
  if (place.side === 'left') return { kind: 'call', function: 'log', args: [{ kind: 'negation', operand: u }] };
  if (place.side === 'both') return { kind: 'call', function: 'log', args: [{ kind: 'call', function: 'abs', args: [u] }] };
  return { kind: 'call', function: 'log', args: [u] };
}
export const alternating = (k: number): Rational => (k % 2 === 0 ? Q.ONE : Q.MINUS_ONE);
