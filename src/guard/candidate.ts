/** What one form can promise, by itself or with a series near the point: the switch, the number of terms and the bounds. */
import { Q, type Rational } from '../expression/index.ts';
import { parityOf } from '../fit/index.ts';
import type { Budget } from '../outcome.ts';
import { interval as doubles } from '../rigorous/index.ts';
import { isRepresentable, roundToFormat } from '../write/index.ts';
import type { ExactForm } from './forms.ts';
import { type Scan, type Scanner, type Side, worstBeyond } from './region.ts';
import { evaluationBound, seriesForm, type SeriesForm, seriesTerms, type SeriesTerms, Truncation } from './series.ts';
import type { Setting } from './setting.ts';
import type { GuardProblem } from './types.ts';

const MOST_TERMS = 24;
/** A plainer form is kept where others gain less than this. */
export const PREFERENCE = 1.4;
/** Fewer terms are taken where more of them gain less than this. */
const PLATEAU = 1.1;
/** A series is looked at on an interval that comes this near to the point. */
const WITHIN = Q.ONE;
/** Switches whose series is bounded closely, for each number of terms. */
const LOOKED_AT = 3;
/** A few ulp, in unit roundoffs: better than that is no reason for a dearer form. */
export const FEW_UNITS = 8;

export interface Candidate {
  readonly form: ExactForm;
  readonly scans: readonly Scan[];
  readonly series: SeriesForm | null;
  /** The exact terms, as a reader writes them. */
  readonly seriesText: string;
  readonly switch: Rational | null;
  readonly seriesBound: number | null;
  readonly directBound: number | null;
  readonly whole: number;
}

export interface SharedSeries {
  readonly terms: SeriesTerms & { readonly exact: boolean };
  readonly truncations: readonly Truncation[];
  readonly sides: readonly Side[];
  readonly forms: Map<number, SeriesForm>;
  readonly evaluations: Map<string, number>;
}

/** What is needed to judge a series branch on the sides that touch the point; null where there is none to be had. */
export function seriesFor(problem: GuardProblem, sides: readonly Side[], scanner: Scanner, budget: Budget): SharedSeries | null {
  const { point, format, library, function: f, variable } = problem;
  if (typeof point === 'string' || !isRepresentable(point, format.name)) return null;
  const touching = sides.filter((s) => Q.compare(s.from, WITHIN) < 0);
  if (touching.length === 0) return null;
  const [only] = sides.length === 1 ? sides : [];
  const terms = seriesTerms(f, variable, { point, direction: only?.direction ?? 'both' }, MOST_TERMS, { format, library }, budget);
  if (!terms) return null;
  const both = parityOf(f, variable) !== null && Q.isZero(point) ? touching.slice(0, 1) : touching;
  const truncations: Truncation[] = [];
  for (const side of both) {
    let reach = side.to && Q.compare(side.to, Q.ONE) < 0 ? side.to : Q.ONE;
    let found: Truncation | null = null;
    for (let cut = 0; cut < 8 && !found; cut += 1) {
      const attempt = new Truncation(f, variable, side, reach, scanner.orders, budget);
      if (attempt.usable) found = attempt;
      else reach = Q.divide(reach, Q.rational(2));
    }
    if (!found) return null;
    truncations.push(found);
  }
  return { terms, truncations, sides: both, forms: new Map(), evaluations: new Map() };
}

function formOf(shared: SharedSeries, n: number, { variable, point }: GuardProblem): SeriesForm {
  let form = shared.forms.get(n);
  if (!form) shared.forms.set(n, (form = seriesForm(shared.terms, n, variable, point as Rational)));
  return form;
}

/** Error of the series below the distance h. */
function seriesError(shared: SharedSeries, n: number, h: Rational, problem: GuardProblem, scanner: Scanner): number {
  const form = formOf(shared, n, problem);
  const truncated = truncationError(shared, n, h, problem);
  if (!(truncated < 1)) return Infinity;
  const key = `${n} ${Q.toText(h)}`;
  let evaluated = shared.evaluations.get(key);
  if (evaluated === undefined) {
    evaluated = Math.max(...shared.sides.map((side) => evaluationBound(form, side, h, scanner)));
    shared.evaluations.set(key, evaluated);
  }
  const { up } = doubles;
  // The smallest values of a coarse series may be subnormal where the function is not.
  if (truncated > 2 ** -11) evaluated += 4 * 2 ** -problem.format.precision;
  return up(truncated + up(evaluated * up(1 + truncated)));
}

const truncationError = (shared: SharedSeries, n: number, h: Rational, problem: GuardProblem): number =>
  Math.max(...shared.truncations.map((t) => (Q.compare(h, t.reach) <= 0 ? t.bound(formOf(shared, n, problem).tree, h) : Infinity)));

export function candidate(form: ExactForm, sides: readonly Side[], setting: Setting, sharedSeries: () => SharedSeries | null, problem: GuardProblem, scanner: Scanner, budget: Budget): Candidate | null {
  const scans = sides.map((side) => scanner.scan(form.tree, side));
  const worst = (h: Rational): number | null => {
    let total = 0;
    for (const scan of scans) {
      const bound = worstBeyond(scan, h);
      if (bound === null) return null;
      total = Math.max(total, bound);
    }
    return total;
  };
  const everywhere = scans.every((s) => s.complete && (s.stretches.length > 0)) ? Math.max(...scans.flatMap((s) => s.stretches.map((p) => p.bound))) : null;
  const alone: Candidate | null = everywhere === null ? null : { form, scans, series: null, seriesText: '', switch: null, seriesBound: null, directBound: everywhere, whole: everywhere };
  const { format } = problem;
  const enough = Math.max(FEW_UNITS * 2 ** -format.precision, problem.tolerance ? Q.toDouble(problem.tolerance) : 0);
  if (alone && alone.whole <= enough) return alone;
  const shared = sharedSeries();
  if (!shared) return alone;
  const withSeries = seriesCandidate(form, scans, worst, setting, shared, problem, budget, scanner);
  return alone && (!withSeries || alone.whole <= withSeries.whole * PREFERENCE) ? alone : withSeries;
}

/** The form beyond a switch and the series up to it, or the series alone. */
function seriesCandidate(form: ExactForm, scans: readonly Scan[], worst: (h: Rational) => number | null, setting: Setting, shared: SharedSeries, problem: GuardProblem, budget: Budget, scanner: Scanner): Candidate | null {
  const { format } = problem;
  const distances = [...new Map(scans.flatMap((s) => s.stretches.map((p) => [Q.toText(p.low), p.low] as const))).values()]
    .filter((h) => h.num > 0n)
    .map((h) => roundToFormat(h, format.name))
    .filter((h): h is Rational => h !== null)
    .sort((a, b) => Q.compare(a, b));
  // The series may serve the whole interval.
  const ends = setting.sides.map((side) => side.to);
  const [end] = ends;
  const whole = end && setting.sides.every((side) => side.to && Q.equal(side.to, end)) ? roundToFormat(end, format.name) : null;
  // The expression itself may be replaced by its series everywhere; a rewritten form is kept for what it is.
  const rewritten = form.identities.length > 0;
  if (!rewritten && whole && end && Q.equal(whole, end)) distances.push(whole);
  const beyond = (h: Rational): number | null => (whole && end && Q.compare(h, end) >= 0 ? 0 : worst(h));
  if (problem.switch) distances.splice(0, distances.length, problem.switch);
  let plateau: Candidate | null = null;
  const found: Candidate[] = [];
  const goal = problem.tolerance ? Q.toDouble(problem.tolerance) : rewritten ? FEW_UNITS * 2 ** -format.precision : null;
  for (let n = 1; n <= shared.terms.powers.length; n += 1) {
    budget.check();
    // The truncation error grows with h, the direct one falls: the places where the larger of them is least are looked at closely.
    let best: Candidate | null = null;
    const places = distances
      .flatMap((h) => {
        const direct = beyond(h);
        return direct === null ? [] : [{ h, direct, least: Math.max(direct, truncationError(shared, n, h, problem)) }];
      })
      .sort((p, q) => p.least - q.least || Q.compare(q.h, p.h));
    for (const { h, direct, least } of places.slice(0, LOOKED_AT)) {
      if (best && least >= best.whole) break;
      const own = seriesError(shared, n, h, problem, scanner);
      const total = Math.max(own, direct);
      if (!best || total < best.whole) best = { form, scans, series: formOf(shared, n, problem), seriesText: shared.terms.texts.slice(0, n).join(' + ').replaceAll('+ -', '- '), switch: h, seriesBound: own, directBound: direct === 0 ? null : direct, whole: total };
    }
    if (!best || !Number.isFinite(best.whole)) continue;
    found.push(best);
    if (!plateau || best.whole < plateau.whole) plateau = best;
    if (goal !== null && best.whole <= goal) return best;
    if (plateau && found.length >= 3 && found.slice(-3).every((c) => c.whole <= (plateau?.whole ?? 0) * PLATEAU)) break;
  }
  const limit = (plateau?.whole ?? 0) * PLATEAU;
  return found.find((c) => c.whole <= limit) ?? null;
}
