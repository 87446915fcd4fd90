/** The part of an interval next to its local end, the point of expansion or infinity: f - sum by its own series there, by a difference of models, or by amplitudes. */
import { build, type Expression, Q } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { type LogModel, logRange, type Model } from '../rigorous/index.ts';
import { denominatorOf, isPowerSum, type Local, localDomain, localModel, logModelOf, remainderAtPoint, sumOf } from './local.ts';
import type { Numbers } from './numbers.ts';
import type { PieceTask } from './pieces.ts';
import type { Segment } from './region.ts';
import { limitOf, settledOf, type SharpProblem, slackOf } from './sharp.ts';
import { supremumOfModel } from './supremum.ts';
import type { Measure } from './types.ts';
import { waveDifference } from './waves.ts';

const EXTRA = 14;
/** Halvings of the part next to the local end. */
const MOST_CUTS = 24;
const MOST_DIFFERENCE_CUTS = 12;

/** Local models serve every number of terms; a ladder keeps them between its rows. */
export type ModelCache = Map<string, { readonly length: number; readonly local: unknown }>;

export interface Memory {
  readonly cache: ModelCache;
  readonly lengthHint: number;
}

/** The local model of f on a part, from memory where it is long enough. */
function remembered<T>(part: Segment, key: string, n: Numbers<T>, variable: string, length: number, q: number, check: () => void, memory: Memory): Local<T> | null {
  const full = `${key}|${n.precision}|${q}`;
  const known = memory.cache.get(full);
  if (known && known.length >= length) return known.local as Local<T> | null;
  const wanted = known ? Math.max(length, memory.lengthHint) : length;
  const local = localModel(part, n, variable, wanted, q, check);
  memory.cache.set(full, { length: wanted, local });
  return local;
}

/** A finite segment as one piece. */
export function wholeTask<T>(segment: Segment, sum: Expression, n: Numbers<T>): PieceTask<T> | null {
  if (segment.lower === null || segment.upper === null) return null;
  const [x0, x1] = [n.value(segment.lower), n.value(segment.upper)];
  return x0 === null || x1 === null ? null : { x0, x1, expansion: segment.expansion, sum, touches: 'upper' };
}

export interface Near<T> {
  readonly kind: 'bounded';
  readonly upper: T;
  readonly lower: T;
  readonly steps: (show: (x: T) => string) => readonly string[];
  readonly rest: PieceTask<T> | null;
  /** The first omitted term at the far end of the interval, over |f| there in a relative measure; null where it is not a term of the model's form. */
  readonly omitted: T | null;
}
export interface Unbounded {
  readonly kind: 'unbounded';
  readonly place: Expression;
  readonly steps: readonly string[];
}

/** The segment that starts at the point of expansion: the whole of it by the local model, or a part of it with the rest left to pieces. */
export function atPoint<T>(segment: Segment, n: Numbers<T>, problem: SharpProblem, variable: string, lower: T, check: () => void, memory: Memory): Near<T> | Unbounded | null {
  const { r } = n;
  const base = denominatorOf(segment.expansion);
  if (base === null || !isPowerSum(segment.expansion)) return null;
  const count = Math.max(2, segment.expansion.terms.length);
  let settledLower = lower;
  const hopeless = new Set<number>();
  const probed = new Set<number>();
  cuts: for (let cut = 0; cut < MOST_CUTS; cut += 1) {
    const part = cutSegment(segment, cut);
    for (const factor of [1, 2, 3]) {
      const q = base * factor;
      if (hopeless.has(q)) continue;
      let length = neededLength(segment.expansion, q, count) + EXTRA;
      for (let attempt = 0; attempt < 3; attempt += 1) {
        check();
        const local = remembered(part.near, `${segment.local}${segment.expansion.side}${cut}`, n, variable, length, q, check, memory);
        if (local === null) {
          // What has no model on the smallest part has none on a larger one.
          if (!probed.has(q) && localModel(cutSegment(segment, MOST_CUTS - 1).near, n, variable, length, q, check) === null) hopeless.add(q);
          probed.add(q);
          if (hopeless.size === 3) return null;
          break;
        }
        const rest = remainderAtPoint(local, segment.expansion, n);
        if (rest === null) {
          length += EXTRA;
          continue;
        }
        if (rest.length > 1 || (problem.measure === 'relative' && local.f.length > 1)) {
          if (problem.measure === 'absolute' && growsAtPoint(r, rest)) {
            return { kind: 'unbounded', place: pointExpression(segment), steps: ['The leading term of f - sum at the point of expansion is unbounded: the sum does not contain every term that is.'] };
          }
          const coarse = withLogarithms(r, rest, local.f, problem.measure);
          if (coarse === null) break;
          // Enough where it is below what is known from elsewhere; else the part is made smaller.
          if (cut < 20 && r.isPositive(r.subtract(coarse, settledLower))) continue cuts;
          return {
            kind: 'bounded',
            omitted: firstOmitted(rest, local, cut, segment, n, problem, variable),
            upper: coarse,
            lower: settledLower,
            rest: part.rest === null ? null : wholeTask(part.rest, sumOf(segment.expansion), n),
            steps: (show) => [`Next to the point, t <= ${show(local.scale)}: f - sum is a sum of s^k (log s)^j with enclosed coefficients; with |s^k log^j s| <= (j/(k e))^j it is at most ${show(coarse)}.`],
          };
        }
        const [remainder, f] = [rest[0], local.f[0]];
        const g = remainder === undefined || f === undefined ? null : problem.measure === 'absolute' ? remainder : local.m.divide(remainder, f);
        if (g === null) break;
        if (g.valuation < 0) {
          const lead = g.coefficients[0];
          if (lead === undefined || r.containsZero(lead)) {
            length += EXTRA;
            continue;
          }
          const place = pointExpression(segment);
          return { kind: 'unbounded', place, steps: ['The remainder has a pole at the point of expansion: the sum does not contain every term with a negative power.'] };
        }
        const result = supremumOfModel(r, g, { from: local.from, to: local.to, floor: settledLower, slack: slackOf(problem) / 4, check });
        settledLower = r.lowerEnd(r.maximum(settledLower, result.lower));
        const limit = limitOf(r, settledLower, problem);
        // Sets of parameter values widen every coefficient; there the tail decides, and the box of parameters is divided instead.
        const good = n.wide ? !tailMatters(r, result, problem) : !r.isPositive(r.subtract(result.upper, limit));
        if (!good && attempt < 2 && tailMatters(r, result, problem)) {
          length += EXTRA;
          continue;
        }
        if (!good && cut < 10) break;
        return {
          kind: 'bounded',
          upper: result.upper,
          lower: settledLower,
          rest: part.rest === null ? null : wholeTask(part.rest, sumOf(segment.expansion), n),
          steps: (show) => describeLocal(local, g.valuation, result.upper, result.tail, n, show, cut),
          omitted: firstOmitted(rest, local, cut, segment, n, problem, variable),
        };
      }
    }
  }
  return null;
}

/** Whether the leading term s^k (log s)^j has k < 0, or k = 0 < j, and a coefficient that is not zero. */
function growsAtPoint<T>(r: Numbers<T>['r'], rest: LogModel<T>): boolean {
  const parts = rest.map((g, j) => ({ g, j })).filter(({ g }) => g.coefficients.length > 0 || !r.isZero(g.tail));
  const least = Math.min(...parts.map(({ g }) => g.valuation));
  const [first] = parts.filter(({ g }) => g.valuation === least).sort((a, b) => b.j - a.j);
  const lead = first?.g.coefficients[0];
  return first !== undefined && lead !== undefined && !r.containsZero(lead) && (least < 0 || (least === 0 && first.j > 0));
}

/** An upper bound of |f - sum| (or of its ratio to f) over s in (0, 1] from the components of powers of log s. */
function withLogarithms<T>(r: Numbers<T>['r'], rest: LogModel<T>, f: LogModel<T>, measure: Measure): T | null {
  if (measure === 'absolute') {
    const range = logRange(r, rest);
    return range === null ? null : r.upperEnd(r.absolute(range));
  }
  // Divide both by the leading power of f, whose leading component must be free of logarithms and dominate the others.
  const [lead] = f;
  if (lead === undefined || lead.coefficients.length === 0) return null;
  const shift = (g: Model<T>): Model<T> => ({ ...g, valuation: g.valuation - lead.valuation });
  const numerator = logRange(r, rest.map(shift));
  // log s <= 0: where (-1)^j f_j have one sign, no power of the logarithm makes |f| smaller.
  const signs = f.filter((g) => g.coefficients.length > 0 || !r.isZero(g.tail)).map((g) => (r.isPositive(g.range) ? 1 : r.isNegative(g.range) ? -1 : 0) * (f.indexOf(g) % 2 === 0 ? 1 : -1));
  const denominator = f.length > 1 && signs[0] !== 0 && signs.every((sign) => sign === signs[0]) ? lead.range : logRange(r, f.map(shift));
  const quotient = numerator === null || denominator === null ? null : r.divide(numerator, denominator);
  return quotient === null ? null : r.upperEnd(r.absolute(quotient));
}

function tailMatters<T>(r: Numbers<T>['r'], result: { readonly upper: T; readonly tail: T }, problem: SharpProblem): boolean {
  return r.isPositive(r.subtract(r.multiply(result.tail, r.fromInteger(Math.round(20 / (settledOf(problem) - 1)))), result.upper));
}

function describeLocal<T>(local: Local<T>, order: number, upper: T, tail: T, n: Numbers<T>, show: (x: T) => string, cut: number): readonly string[] {
  const power = local.denominator === 1 ? 't' : `t^(1/${local.denominator})`;
  return [
    `With s = ${power}/h, t <= ${show(local.scale)}${cut > 0 ? ' (the part next to the point)' : ''}: f - sum = s^${order} (r_0 + r_1 s + ... ), ${local.m.length} coefficients enclosed with ${n.precision} bits.`,
    `The rest of that series is at most ${show(tail)} in absolute value for all 0 <= s <= 1 (residual of the truncated series in the differential equations of the functions); the whole is at most ${show(upper)}.`,
  ];
}

/** The first omitted term at the far end of the whole interval (over |f| there in a relative measure): s = 2^(cut/q) in units of the part. */
function firstOmitted<T>(rest: LogModel<T>, local: Local<T>, cut: number, segment: Segment, n: Numbers<T>, problem: SharpProblem, variable: string): T | null {
  const { r } = n;
  const present = rest.filter((g) => g.coefficients.length > 0);
  if (present.length === 0) return null;
  const least = Math.min(...present.map((g) => g.valuation));
  const power = r.powerRational(r.fromInteger(2), Q.rational(cut * least, local.denominator));
  const far = r.log(r.fromInteger(2));
  if (power === null || far === null) return null;
  const logarithm = r.divideInteger(r.multiply(r.fromInteger(cut), far), local.denominator);
  let sum = r.zero;
  for (const [j, g] of rest.entries()) {
    if (g.valuation === least) sum = r.add(sum, r.multiply(g.coefficients[0] ?? r.zero, r.powerInteger(logarithm, j) ?? r.one));
  }
  const size = r.absolute(r.multiply(sum, power));
  if (problem.measure === 'absolute') return size;
  const end = segment.local === 'lower' ? segment.upper : segment.lower;
  const x = end && n.value(end);
  const f = x && n.value(segment.expansion.function, new Map([[variable, x]]));
  return f && r.divide(size, r.absolute(f));
}

/** Common practice, beside the proof: the first omitted term at the far end, and whether it would have misled. */
export function ruleOfThumb<T>(omitted: T, upper: T, measure: Measure, n: Numbers<T>, show: (x: T) => string): readonly string[] {
  const ratio = n.r.divide(upper, n.r.upperEnd(omitted));
  if (ratio === null) return [];
  const factor = n.r.toDouble(ratio);
  const verdict = factor > 1.1 ? `too small here by a factor of ${factor.toPrecision(3)}` : factor < 0.9 ? `larger than the truth here by a factor of ${(1 / factor).toPrecision(3)}` : 'near the truth here';
  return [`Rule of thumb (common practice, no proof): the first omitted term is ${show(omitted)}${measure === 'relative' ? ' of |f|' : ''} at the far end, ${verdict}.`];
}

const pointExpression = (segment: Segment): Expression => {
  const point = segment.expansion.point;
  if (point === 'inf') return build.constant('infinity');
  return point === '-inf' ? build.negation(build.constant('infinity')) : point;
};

/** Coefficients needed to reach past the remainder's order from the leading power. */
function neededLength(expansion: Expansion, q: number, count: number): number {
  const powers = expansion.terms.map((t) => t.power).concat(expansion.remainder?.power ?? []);
  let [low, high] = [0, 0];
  for (const power of powers) {
    if (power.kind !== 'number' && !(power.kind === 'negation' && power.operand.kind === 'number')) continue;
    const value = power.kind === 'number' ? Q.toDouble(power.value) : power.operand.kind === 'number' ? -Q.toDouble(power.operand.value) : 0;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  return Math.max(count, Math.ceil((high - low) * q) + 1);
}

/** The first 2^-cut of the segment from its local end, and what is left of it. */
function cutSegment(segment: Segment, cut: number): { readonly near: Segment; readonly rest: Segment | null } {
  if (cut === 0) return { near: segment, rest: null };
  const factor = build.number(1n << BigInt(cut));
  const [lower, upper] = [segment.lower, segment.upper];
  const infinite = segment.expansion.point === 'inf' || segment.expansion.point === '-inf';
  if (segment.local === 'upper' && (upper === null || infinite)) {
    const middle = build.product(lower ?? build.number(1), factor);
    return { near: { ...segment, lower: middle }, rest: { ...segment, upper: middle, local: 'none', atPoint: false } };
  }
  if (segment.local === 'lower' && (lower === null || infinite)) {
    const middle = build.product(upper ?? build.number(-1), factor);
    return { near: { ...segment, upper: middle }, rest: { ...segment, lower: middle, local: 'none', atPoint: false } };
  }
  const [a, b] = [lower ?? build.number(0), upper ?? build.number(0)];
  const part = build.quotient(build.difference(b, a), factor);
  const middle = segment.local === 'lower' ? build.sum(a, part) : build.difference(b, part);
  return segment.local === 'lower'
    ? { near: { ...segment, upper: middle }, rest: { ...segment, lower: middle, local: 'none', atPoint: false } }
    : { near: { ...segment, lower: middle }, rest: { ...segment, upper: middle, local: 'none', atPoint: false } };
}

/** The local end belongs to the segment: infinity itself, or the finite point. */
export function reachesLocalEnd(segment: Segment): boolean {
  const { point } = segment.expansion;
  if (segment.atPoint && (point === 'inf' || point === '-inf')) return (segment.local === 'upper' ? segment.upper : segment.lower) === null;
  return true;
}

/** f and the sum by models at the local end and their difference, coarse: for infinite ends that are not the point, and for expansions with a prefactor or on another scale. */
export function byDifference<T>(segment: Segment, sum: Expression, n: Numbers<T>, problem: SharpProblem, variable: string, lower: T, check: () => void): Near<T> | Unbounded | null {
  const { r } = n;
  const settled = (x: T): boolean => !r.isPositive(r.subtract(x, lower));
  if (problem.measure === 'relative' && segment.expansion.prefactor !== null) {
    const scaled = inPrefactor(segment.expansion, segment.expansion.prefactor);
    const near = byDifference({ ...segment, expansion: scaled }, sumOf(scaled), n, problem, variable, lower, check);
    if (near === null || near.kind === 'unbounded') return near;
    // The rest is of f and its own sum again.
    return { ...near, rest: near.rest && { ...near.rest, expansion: segment.expansion, sum }, steps: (show) => ['f and the sum are divided by the prefactor.', ...near.steps(show)] };
  }
  const grown = problem.measure === 'absolute' ? growsWithPrefactor(segment, n, variable, check) : null;
  if (grown !== null) return { kind: 'unbounded', place: grown, steps: ['f and the sum share a prefactor that grows faster than every power; what multiplies it in f - sum has a leading power that is not zero.'] };
  if (segment.expansion.oscillating && problem.measure === 'absolute') return byWaves(segment, sum, n, variable, lower, check);
  const hopeless = new Set<number>();
  for (let cut = 0; cut < MOST_DIFFERENCE_CUTS; cut += 1) {
    const part = cutSegment(segment, cut);
    for (const q of [1, 2, 3, 4]) {
      if (hopeless.has(q)) continue;
      check();
      const local = localModel(part.near, n, variable, 30, q, check);
      if (local === null) {
        if (cut === 0 && localModel(cutSegment(segment, MOST_DIFFERENCE_CUTS - 1).near, n, variable, 30, q, check) === null) hopeless.add(q);
        continue;
      }
      const s = logModelOf(sum, n, local.m, variable, local.leaf, undefined, check);
      if (s === null) continue;
      const difference = Array.from({ length: Math.max(local.f.length, s.length) }, (_, j) => local.m.subtract(local.f[j] ?? local.m.constant(r.zero), s[j] ?? local.m.constant(r.zero)));
      const [main, ...logs] = difference;
      const [f, ...logsOfF] = local.f;
      if (main === undefined || f === undefined) continue;
      const rest = part.rest === null ? null : wholeTask(part.rest, sum, n);
      const done = (upper: T, found: T): Near<T> => ({ kind: 'bounded', omitted: null, upper, lower: r.lowerEnd(r.maximum(lower, found)), rest, steps: (show) => [`At the local end f and the sum are enclosed separately: their difference is at most ${show(upper)} there.`] });
      if (logs.length > 0 || logsOfF.length > 0) {
        const coarse = withLogarithms(r, difference, local.f, problem.measure);
        if (coarse === null) continue;
        if (settled(coarse) || cut === MOST_DIFFERENCE_CUTS - 1) return done(coarse, r.zero);
        break;
      }
      const g = problem.measure === 'absolute' ? main : local.m.divide(main, f);
      if (g === null) continue;
      if (g.valuation < 0) {
        const lead = g.coefficients[0];
        if (lead === undefined || r.containsZero(lead)) continue;
        const infinity = build.constant('infinity');
        const place = segment.upper === null ? infinity : segment.lower === null ? build.negation(infinity) : pointExpression(segment);
        return { kind: 'unbounded', place, steps: ['f - sum grows without bound at the end of the interval.'] };
      }
      const result = supremumOfModel(r, g, { from: local.from, to: local.to, floor: lower, slack: slackOf(problem) / 4, check });
      const limit = limitOf(r, r.maximum(lower, result.lower), problem);
      if (!r.isPositive(r.subtract(result.upper, limit)) || cut === MOST_DIFFERENCE_CUTS - 1) return done(result.upper, result.lower);
      break;
    }
  }
  return null;
}

/**
 * The infinite end of a segment, where f - sum is proved to be unbounded there: (f - sum)/P = c s^v (1 + o(1)) with c not zero, and 1/P enclosed as C s^w with w > v, P the prefactor. Null where that is not proved.
 */
function growsWithPrefactor<T>(segment: Segment, n: Numbers<T>, variable: string, check: () => void): Expression | null {
  const { prefactor } = segment.expansion;
  const end = segment.upper === null ? build.constant('infinity') : segment.lower === null ? build.negation(build.constant('infinity')) : null;
  if (prefactor === null || end === null) return null;
  const scaled = inPrefactor(segment.expansion, prefactor);
  const base = denominatorOf(scaled);
  if (base === null) return null;
  // Any part next to infinity will do.
  const { near } = cutSegment({ ...segment, expansion: scaled }, 4);
  for (const q of [base, 2 * base]) {
    const local = localModel(near, n, variable, 20, q, check);
    const rest = local && remainderAtPoint(local, scaled, n);
    const inverse = rest && logModelOf(build.quotient(build.number(1), prefactor), n, local.m, variable, local.leaf, undefined, check);
    const [difference, decay] = [rest?.[0], inverse?.[0]];
    if (rest?.length !== 1 || inverse?.length !== 1 || !difference || !decay) continue;
    const lead = difference.coefficients[0];
    if (lead !== undefined && !n.r.containsZero(lead) && decay.valuation > difference.valuation) return end;
  }
  return null;
}

/** The far part of an interval that ends at infinity, where f and the sum oscillate: the amplitudes of their difference, cut off where they are below what is known from the near part. */
function byWaves<T>(segment: Segment, sum: Expression, n: Numbers<T>, variable: string, lower: T, check: () => void): Near<T> | null {
  const { r } = n;
  for (let cut = 0; cut < 10; cut += 1) {
    const part = cutSegment(segment, cut);
    for (const q of [1, 2, 4]) {
      check();
      const domain = localDomain(part.near, n, 30, q);
      const found = domain && waveDifference(segment.expansion.function, sum, n, domain.m, variable, domain.leaf, check);
      if (!found) continue;
      if (r.isPositive(r.subtract(found, lower)) && cut < 9) break;
      const rest = part.rest === null ? null : wholeTask(part.rest, sum, n);
      return { kind: 'bounded', omitted: null, upper: found, lower, rest, steps: (show) => [`Beyond ${part.rest === null ? 'the start of the interval' : `2^${cut} times its start`} f - sum = A + B cos(phi) + C sin(phi) with enveloping series as amplitudes (DLMF 6.12(ii), 7.12(ii), 9.7(iii), 10.17(iii)); |A| + sqrt(B^2 + C^2) is at most ${show(found)} there.`] };
    }
  }
  return null;
}

/** f over its prefactor, and the sum without it: their ratio is that of f and the sum. */
const inPrefactor = (expansion: Expansion, prefactor: Expression): Expansion => ({ ...expansion, function: build.quotient(expansion.function, prefactor), prefactor: null });
