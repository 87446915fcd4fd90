/** Where a guard serves: the sides of its point that the interval has. */
import { type Assumption, build, Q, type Rational } from '../expression/index.ts';
import { ulp } from '../fit/index.ts';
import { Declined } from '../outcome.ts';
import { powerOfTwo, roundToFormat } from '../write/index.ts';
import type { Scanner, Side } from './region.ts';
import type { GuardProblem } from './types.ts';

export interface Setting {
  readonly sides: readonly Side[];
  readonly symmetric: boolean;
  readonly text: readonly [string, string];
  readonly proposed: boolean;
}

/** The sides of the point that the interval has, each with its distances. */
export function settle(problem: GuardProblem, scanner: Scanner): Setting {
  const { point, format } = problem;
  const given = problem.interval;
  const largest = Q.subtract(powerOfTwo(format.emax + 1), powerOfTwo(format.emax + 1 - format.precision));
  if (typeof point === 'string') {
    const direction = point === 'inf' ? 1 : -1;
    const ends = given ? (direction > 0 ? given : { low: given.high && Q.negate(given.high), high: given.low && Q.negate(given.low) }) : { low: Q.ONE, high: null };
    const from = ends.low ?? Q.ONE;
    if (from.num < 0n) throw new Declined('bad-request', 'An interval towards an infinite point begins at zero or beyond; give such an "interval".');
    const side: Side = { point: Q.ZERO, direction, from, to: ends.high };
    const text: readonly [string, string] = problem.intervalText ?? (direction > 0 ? ['1', 'inf'] : ['-inf', '-1']);
    return { sides: [side], symmetric: false, text, proposed: !given };
  }
  if (!given) return proposed(point, problem, scanner);
  for (const end of [given.low, given.high]) if (end && Q.compare(Q.absolute(end), largest) > 0) throw new Declined('bad-request', `The interval reaches beyond the largest ${format.name} number; write inf for an end without limit.`);
  const [low, high] = [inward(given.low, problem, 1), inward(given.high, problem, -1)];
  const text = problem.intervalText ?? [low ? Q.toText(low) : '-inf', high ? Q.toText(high) : 'inf'];
  if (given.low && given.high && Q.compare(given.low, given.high) >= 0) throw new Declined('bad-request', 'The interval needs two different ends, the smaller one first.');
  if (low && high && Q.compare(low, high) >= 0) throw new Declined('bad-request', Q.equal(low, high) ? `The interval holds only one ${format.name} number; give a wider one.` : `The interval holds no ${format.name} number; give a wider one.`);
  const distance = (end: Rational | null, direction: 1 | -1): Rational | null => end && Q.multiply(Q.subtract(end, point), Q.rational(direction));
  const sides: Side[] = [];
  const [right, left] = [distance(high, 1), distance(low, -1)];
  const rightFrom = distance(low, 1);
  const leftFrom = distance(high, -1);
  if (right === null || right.num > 0n) sides.push({ point, direction: 1, from: rightFrom && rightFrom.num > 0n ? rightFrom : Q.ZERO, to: right });
  if (left === null || left.num > 0n) sides.push({ point, direction: -1, from: leftFrom && leftFrom.num > 0n ? leftFrom : Q.ZERO, to: left });
  const symmetric = sides.length === 2 && Q.isZero(point) && (right === null ? left === null : left !== null && Q.equal(right, left));
  return { sides, symmetric, text, proposed: false };
}

/** The end of the interval as the arguments have it. A decimal or ratio stands for the float nearest to it, as a literal does; any other end for the first float from it on, in the given direction. */
function inward(end: Rational | null, { format }: GuardProblem, direction: 1 | -1): Rational | null {
  if (!end) return null;
  if ((end.den & (end.den - 1n)) !== 0n) return roundToFormat(end, format.name);
  const step = ulp(end, format);
  const places = Q.multiply(Q.divide(end, step), Q.rational(-direction));
  return Q.multiply(step, Q.multiply(Q.rational(Q.floor(places)), Q.rational(-direction)));
}

/** Where no interval is given: the distances up to 1 on the sides where the function is real, halved while it cannot be enclosed. */
function proposed(point: Rational, problem: GuardProblem, scanner: Scanner): Setting {
  const sides: Side[] = [];
  for (const direction of [1, -1] as const) {
    for (let e = 0; e >= -6; e -= 1) {
      const to = powerOfTwo(e);
      const end = Q.add(point, Q.multiply(to, Q.rational(direction)));
      const middle = Q.add(point, Q.multiply(Q.divide(to, Q.rational(2)), Q.rational(direction)));
      const [low, high] = direction > 0 ? [middle, end] : [end, middle];
      const real = scanner.models({ kind: 'plain', low, high }).of(problem.function);
      if (real) {
        sides.push({ point, direction, from: Q.ZERO, to });
        break;
      }
    }
  }
  const [first, second] = sides;
  if (!first) throw new Declined('bad-request', 'The expression has no real values near this point; choose another point or give an "interval".');
  const end = (s: Side): Rational => Q.add(s.point, Q.multiply(s.to ?? Q.ONE, Q.rational(s.direction)));
  const ends = [...sides.map(end), ...(second ? [] : [point])].sort((a, b) => Q.compare(a, b));
  const [low = point, high = point] = ends;
  return { sides, symmetric: second !== undefined && Q.isZero(point) && first.to !== null && second.to !== null && Q.equal(first.to, second.to), text: [Q.toText(low), Q.toText(high)], proposed: true };
}

/** What the interval says of the sign of the variable. */
export function signs(variable: string, { sides }: Setting): readonly Assumption[] {
  const [only] = sides;
  if (sides.length !== 1 || !only || !Q.isZero(only.point)) return [];
  return [{ kind: 'relation', left: build.symbol(variable), relation: only.direction > 0 ? '>' : '<', right: build.number(0) }];
}
