/** Why no form could be proved: the place that spoils the expression itself. */
import { Q, type Rational } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { powerOfTwo, roundToFormat, shortestDecimal } from '../write/index.ts';
import type { ExactForm } from './forms.ts';
import type { Scanner, Side } from './region.ts';
import type { Setting } from './setting.ts';
import type { GuardProblem } from './types.ts';

const CELLS = 8;
const DEPTH = 6;
const MOST_LOOKS = 300;
const NEXT_TO_POINT = powerOfTwo(-8);
/** Distances beyond this are not looked at. */
const FARTHEST = powerOfTwo(12);

interface Cell {
  readonly low: Rational;
  readonly high: Rational;
}

/** The reason with what to do next. The interval is cut where the expression has no proven bound; what lies in the smallest cell is named. */
export function unproved({ format, variable, point }: GuardProblem, { sides, text }: Setting, scanner: Scanner, original: ExactForm | undefined): Declined {
  const decline = (why: string): Declined => new Declined('undecided', why);
  const interval = text.join(', ');
  const name = variable.replace(/\\/g, '');
  const cells = original ? sides.map((side) => spoiled(original, side, scanner)) : [];
  const found = cells.find((c) => typeof c !== 'string');
  if (cells.includes('unknown') && !found) return decline(`No form of this expression could be proved accurate on [${interval}] in ${format.name}; give a smaller "interval" that leaves out its other zeros and singular points.`);
  if (!found || typeof found === 'string') {
    return typeof point === 'string' || sides.some((side) => side.to === null)
      ? decline(`No form of this expression could be proved accurate on [${interval}] in ${format.name}: it overflows, underflows or oscillates far out; give an "interval" with a finite end.`)
      : decline(`No form of this expression could be proved accurate close to ${name} = ${Q.toText(point)} in ${format.name}; give an "interval" that begins farther from it.`);
  }
  const place = shortest(found);
  const models = scanner.models({ kind: 'plain', ...found });
  const value = original && models.of(original.tree);
  if (value && models.size(value).least > 2 ** format.emax) return decline(`The values are beyond the largest ${format.name} number near ${name} = ${place}; give a smaller "interval".`);
  return decline(`No form of this expression could be proved accurate near ${name} = ${place} in ${format.name}; give that "point" if it is defined there in the limit, or an "interval" that leaves it out.`);
}

/** The first small cell, from the point outward, in which nothing is proved; `none` where that is only the point itself, `unknown` where the search was given up. */
function spoiled({ tree }: ExactForm, side: Side, scanner: Scanner): Cell | 'none' | 'unknown' {
  let looks = 0;
  const cellOf = (from: Rational, to: Rational): Cell => {
    const [a, b] = [from, to].map((d) => Q.add(side.point, Q.multiply(d, Q.rational(side.direction)))) as [Rational, Rational];
    return side.direction > 0 ? { low: a, high: b } : { low: b, high: a };
  };
  const search = (from: Rational, to: Rational, depth: number): Cell | null => {
    looks += 1;
    const bound = looks > MOST_LOOKS ? null : scanner.bound(tree, { kind: 'plain', ...cellOf(from, to) });
    if (looks > MOST_LOOKS || (bound !== null && bound < 1)) return null;
    if (depth === DEPTH) return cellOf(from, to);
    const step = Q.divide(Q.subtract(to, from), Q.rational(CELLS));
    const at = (k: number): Rational => Q.add(from, Q.multiply(step, Q.rational(k)));
    for (let k = 0; k < CELLS; k += 1) {
      const found = search(at(k), at(k + 1), depth + 1);
      if (found) return found;
    }
    return null;
  };
  const far = side.to && Q.compare(side.to, FARTHEST) < 0 ? side.to : Q.add(side.from, FARTHEST);
  // Next to the point itself every expression that needs a guard is spoiled.
  const start = Q.isZero(side.from) ? Q.multiply(far, NEXT_TO_POINT) : side.from;
  const found = search(start, far, 0);
  const first = cellOf(start, start).low;
  if (found && Q.isZero(side.from) && (Q.equal(found.low, first) || Q.equal(found.high, first))) return 'none';
  return found ?? (looks > MOST_LOOKS ? 'unknown' : 'none');
}

const decimalText = (q: Rational): string => shortestDecimal(roundToFormat(q, 'binary64') ?? q, 'binary64');

/** The shortest decimal in the cell, ends included. */
function shortest({ low, high }: Cell): string {
  for (let digits = 0; digits < 40; digits += 1) {
    const scale = Q.rational(10n ** BigInt(digits));
    const value = Q.divide(Q.rational(-Q.floor(Q.negate(Q.multiply(low, scale)))), scale);
    if (Q.compare(value, high) <= 0) return decimalText(value);
  }
  return decimalText(low);
}
