/** Regions that a text states beside an infinite series: `(|x| < 1)`, `-1 < x \le 1`, `R = 1`, against the proved radius of convergence. */
import { expand } from '../expand/index.ts';
import { build, dependsOn, Q, type Expression, type Rational, type Span } from '../expression/index.ts';
import { readFormula } from '../read/index.ts';
import { intervalOf } from './intervals.ts';
import type { Setting } from './context.ts';
import { enclose } from './enclose.ts';

export interface Region {
  readonly place: Span;
  /** Ends of an interval, or the radius itself. */
  readonly stated: { readonly kind: 'interval'; readonly low: Expression; readonly high: Expression } | { readonly kind: 'radius'; readonly value: Expression };
  /** The bound alone, where replacing it puts the region right. */
  readonly bound: Expression | null;
}

export interface RegionError {
  readonly place: Span;
  readonly radius: Expression;
  readonly reason: string;
  readonly bound: Span | null;
}

/** The region stated in the formula's own conditions, else directly behind it; null where there is none in the variable. */
export function regionBeside(text: string, conditions: readonly Expression[], from: number, to: number, variable: string): Region | null {
  for (const condition of conditions) {
    const found = regionOf(condition, variable, condition.span ?? null);
    if (found) return found;
  }
  const behind = /^[\s$.,;\\)\]]*(?:\\?\()?\s*(?:(?:which\s+)?(?:converges|valid|holds)\s+)?(?:for|when|if|where|provided(?:\s+that)?|with)?\s*\(?\s*(?:\$|\\\()([^$]{1,80}?)(?:\$|\\\))/.exec(text.slice(from, to));
  if (!behind?.[1]) return null;
  const start = from + behind[0].lastIndexOf(behind[1]);
  const read = readFormula(text, 'latex', { start, end: start + behind[1].length, symbols: [variable] });
  return read.ok ? regionOf(read.value.expression, variable, { start, end: start + behind[1].length }) : null;
}

function regionOf(e: Expression, variable: string, place: Span | null): Region | null {
  if (e.kind !== 'relation' || !place) return null;
  const [left, right] = e.sides;
  if (e.sides.length === 2 && e.relations[0] === '=' && left?.kind === 'symbol' && /^(?:R|\\rho|r)$/.test(left.name) && right && !dependsOn(right, variable)) return { place, stated: { kind: 'radius', value: right }, bound: right };
  const ends = intervalOf(e, variable);
  return ends && { place, stated: { kind: 'interval', low: ends.low, high: ends.high }, bound: e.sides.length === 2 ? (right ?? null) : null };
}

/** What is wrong with the region; null where it lies in the disc, or where the radius is not proved or not a plain number. */
export function regionError(region: Region, f: Expression, setting: Setting): RegionError | null {
  const { point } = setting;
  if (typeof point !== 'object') return null;
  const expansion = expand({ function: f, variable: build.symbol(setting.variable), point, side: setting.side, assumptions: setting.assumptions, terms: 2, radius: true }, setting.budget);
  const radius = expansion.ok ? expansion.value.radius : undefined;
  const exact = radius?.value ?? null;
  // A divergent series is meant as an asymptotic one, whose region is another matter.
  if (!exact || (exact.kind === 'number' && Q.isZero(exact.value))) return null;
  const [proved, center] = [enclose(exact), enclose(point)];
  if (!proved || !center) return null;
  const error = (reason: string): RegionError => ({ place: region.place, radius: exact, reason, bound: region.bound?.span ?? null });
  if (region.stated.kind === 'radius') {
    const value = enclose(region.stated.value);
    return value && (Q.compare(value.low, proved.high) > 0 || Q.compare(value.high, proved.low) < 0) ? error('This is not the radius of convergence') : null;
  }
  const [low, high] = [enclose(region.stated.low), enclose(region.stated.high)];
  if (!low || !high) return null;
  const reach = larger(Q.subtract(high.low, center.high), Q.subtract(center.low, low.high));
  return Q.compare(reach, proved.high) > 0 ? error('The series diverges in a part of this region') : null;
}

const larger = (a: Rational, b: Rational): Rational => (Q.compare(a, b) >= 0 ? a : b);
