/** Regions that a text states beside an infinite series: `(|x| < 1)`, `-1 < x \le 1`, `R = 1`, against the proved radius of convergence. */
import { expand } from '../expand/index.ts';
import { build, dependsOn, Q, type Expression, type Rational, type RelationNode, type Span, substitute } from '../expression/index.ts';
import { readFormula } from '../read/index.ts';
import { intervalOf } from './intervals.ts';
import type { Setting } from './context.ts';
import { enclose } from './enclose.ts';
import { leading, type Leading } from './size.ts';

export interface Region {
  readonly place: Span;
  /** Ends of an interval, everything, or the radius itself. */
  readonly stated: { readonly kind: 'interval'; readonly low: End; readonly high: End } | { readonly kind: 'all' } | { readonly kind: 'radius'; readonly value: Expression };
  /** The bound alone, where replacing it puts the region right. */
  readonly bound: Expression | null;
}

export interface End {
  readonly at: Expression;
  /** The end itself belongs to the region. */
  readonly closed: boolean;
  /** The sign that says so. */
  readonly sign: Span | null;
}

export interface RegionError {
  readonly place: Span;
  /** The radius, or the end at which the series diverges. */
  readonly value: Expression;
  /** Null at an end. */
  readonly reason: string | null;
  readonly fix: { readonly start: number; readonly end: number; /** Absent: the radius. */ readonly text?: string } | null;
}

/** `for all real x`, `(x \\in \\mathbb{R})`, `converges everywhere`, directly behind an expansion; what goes on, as `for all x of modulus below 1`, restricts. */
const EVERYWHERE = /^(?:[\s$.,;()\]~]|\\[,;!\])]|\\q?quad(?![a-z])|\\(?:text|mathrm|left|right|big)\b|\{|\})*((?:(?:which\s+)?(?:converges|is\s+valid|valid|holds)\s+)?(?:for\s+(?:all|every|any)\s+(?:real\s+|finite\s+|complex\s+|values\s+of\s+|\}|\s)*\$?\s*(\\?[A-Za-z]+)(?:\s*\\in\s*\\mathbb\s*\{?[RC]\}?)?|(?:\\forall\s*)?(\\?[A-Za-z]+)\s*\\in\s*\\mathbb\s*\{?[RC]\}?|everywhere\b))(?![\w^_])(?=\$?\s*(?:[.;:)\]!?}]|\\[)\]]|$|\n\s*\n|\\(?:end|q?quad|text)(?![a-z])|,\s*(?:and|but|so|which|since|as|because)\b|(?:and|but|because|since)\b))/;

/** The region stated in the formula's own conditions, else directly behind it (`end`: of the expansion, `from`: of the formula); null where there is none in the variable. */
export function regionBeside(text: string, conditions: readonly Expression[], end: number, from: number, to: number, variable: string): Region | null {
  for (const condition of conditions) {
    const found = regionOf(condition, variable, condition.span ?? null);
    if (found) return found;
  }
  const everywhere = EVERYWHERE.exec(text.slice(end, to)) ?? EVERYWHERE.exec(text.slice(from, to));
  const named = everywhere?.[2] ?? everywhere?.[3];
  if (everywhere?.[1] !== undefined && (named === undefined || named === variable)) {
    const start = text.indexOf(everywhere[1], end);
    const open = everywhere[1].includes('$') && text.charAt(start + everywhere[1].length) === '$' ? 1 : 0;
    return { place: { start, end: start + everywhere[1].length + open }, stated: { kind: 'all' }, bound: null };
  }
  const behind = /^[\s$.,;\\)\]]*(?:\\?\()?\s*(?:(?:which\s+)?(?:converges|valid|holds)\s+)?(?:for|when|if|where|provided(?:\s+that)?|with)?(?:\s+(?:all|every|any)(?:\s+(?:real|complex))?)?\s*\(?\s*(?:\$|\\\()([^$]{1,80}?)(?:\$|\\\))/.exec(text.slice(from, to));
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
  const first = signOf(e, 0);
  const last = signOf(e, e.relations.length - 1);
  return ends && { place, stated: { kind: 'interval', low: { at: ends.low, ...first }, high: { at: ends.high, ...last } }, bound: e.sides.length === 2 ? (right ?? null) : null };
}

const signOf = (e: RelationNode, index: number): Omit<End, 'at'> => ({ closed: e.relations[index] === '<=', sign: e.relationSpans?.[index] ?? null });

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
  const { stated } = region;
  const error = (reason: string): RegionError => ({ place: region.place, value: exact, reason, fix: region.bound?.span ?? null });
  if (stated.kind === 'all') return error('The series diverges in a part of this region');
  if (stated.kind === 'radius') {
    const value = enclose(stated.value);
    return value && (Q.compare(value.low, proved.high) > 0 || Q.compare(value.high, proved.low) < 0) ? error('This is not the radius of convergence') : null;
  }
  const [low, high] = [enclose(stated.low.at), enclose(stated.high.at)];
  if (!low || !high) return null;
  const reach = larger(Q.subtract(high.low, center.high), Q.subtract(center.low, low.high));
  if (Q.compare(reach, proved.high) > 0) return error('The series diverges in a part of this region');
  for (const [end, side] of [[stated.high, 'left'], [stated.low, 'right']] as const) {
    if (!end.closed || !isOnCircle(end.at, point, exact, setting) || !divergesAt(end.at, side, f, radius?.nearest, setting)) continue;
    return { place: region.place, value: end.at, reason: null, fix: end.sign && { ...end.sign, text: '<' } };
  }
  return null;
}

/** The end is at the distance of the radius: exactly, or as far as its enclosures tell while the region was not refuted. */
function isOnCircle(end: Expression, center: Expression, radius: Expression, setting: Setting): boolean {
  const distance = build.difference(build.call('abs', build.difference(end, center)), radius);
  return leading({ ...setting, point: build.number(0) }, distance).kind === 'zero';
}

/**
 * The series diverges at the end. Were it convergent there, f would tend to its sum along the radius (Abel's theorem); and did its terms tend to 0 anywhere on the
 * circle, (1 - r) f would tend to 0 along every radius, so that a pole on the circle refutes all of it.
 */
function divergesAt(end: Expression, side: 'left' | 'right', f: Expression, nearest: Expression | undefined, setting: Setting): boolean {
  const own = leading({ ...setting, point: end, side }, f);
  if (own.kind === 'monomial' && isUnbounded(own)) return true;
  if (!nearest || typeof setting.point !== 'object') return false;
  const step = '\\varsigma_{radius}';
  const along = build.sum(setting.point, build.product(build.difference(nearest, setting.point), build.difference(build.number(1), build.symbol(step))));
  const pole = leading({ ...setting, variable: step, point: build.number(0), side: 'right' }, substitute(f, setting.variable, along));
  return pole.kind === 'monomial' && Q.compare(pole.size.power, Q.MINUS_ONE) <= 0;
}

const isUnbounded = ({ size }: Extract<Leading, { kind: 'monomial' }>): boolean => Q.signOf(size.power) < 0 || (Q.isZero(size.power) && size.log > 0);

const larger = (a: Rational, b: Rational): Rational => (Q.compare(a, b) >= 0 ? a : b);
