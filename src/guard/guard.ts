/** The guard of an expression: the form that serves each range of the argument, the switch between them, and the proof of the whole. */
import { type Assumption, build, dependsOn, freeSymbols, Q, type Rational } from '../expression/index.ts';
import { parityOf } from '../fit/index.ts';
import { differentiate } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { interval as doubles } from '../rigorous/index.ts';
import { isRepresentable, powerOfTwo, roundToFormat, shortestDecimal, toPlain } from '../write/index.ts';
import { guardCode, rowFor } from './code.ts';
import { exactForms, type ExactForm } from './forms.ts';
import type { Piece } from './pieces.ts';
import { type Scan, Scanner, type Side, worstBeyond } from './region.ts';
import { evaluationBound, seriesForm, type SeriesForm, seriesTerms, type SeriesTerms, Truncation } from './series.ts';
import type { Guarded, GuardProblem, GuardRange } from './types.ts';
import { commentOf, decimal } from './words.ts';

const MOST_TERMS = 24;
/** Fewer terms are taken where more of them gain less than this. */
const PLATEAU = 1.1;
/** A plainer form is kept where others gain less than this. */
const PREFERENCE = 1.4;
/** Switches whose series is bounded closely, for each number of terms. */
const LOOKED_AT = 3;
/** A few ulp, in unit roundoffs: better than that is no reason for a dearer form. */
const FEW_UNITS = 8;

interface Candidate {
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

export function guarded(problem: GuardProblem, budget: Budget): Guarded {
  const { function: f, variable, format, library, language } = problem;
  const row = rowFor(language);
  const others = freeSymbols(f).filter((name) => name !== variable);
  if (others.length > 0) throw new Declined('needs-assumption', `A guard needs numbers: give a value for ${others.slice(0, 3).join(', ')}.`);
  if (!dependsOn(f, variable)) throw new Declined('bad-request', 'This expression does not depend on the variable; choose one that does.');
  const scanner = new Scanner(variable, { format, library }, budget);
  const setting = settle(problem, scanner);
  const shared = seriesFor(problem, setting.sides, scanner, budget);
  const candidates: Candidate[] = [];
  const judge = (form: ExactForm): void => {
    const sides = parityOf(f, variable) && parityOf(form.tree, variable) && setting.symmetric ? setting.sides.slice(0, 1) : setting.sides;
    const found = candidate(form, sides, setting, shared, problem, scanner, budget);
    if (found) candidates.push(found);
  };
  const forms = exactForms(f, signs(variable, setting), row, budget);
  const [original] = forms;
  if (original) judge(original);
  try {
    for (const form of promising(forms, setting, scanner)) judge(form);
  } catch (error) {
    // What was proved so far still serves when the time is up.
    if (!(error instanceof Declined && error.failure.code === 'over-budget' && candidates.length > 0)) throw error;
  }
  const best = chosen(candidates, problem);
  if (!best) throw new Declined('undecided', `No form of this expression could be proved accurate on [${setting.text.join(', ')}] in ${format.name}; give a smaller "interval" that leaves out its other zeros and singular points.`);
  const found = answer(best, candidates, problem, setting);
  return problem.derivative ? { ...found, derivative: derivativeOf(found, setting, problem, budget) } : found;
}

/** f' near the same point on the same interval, handed over at the same switch. */
function derivativeOf(found: Guarded, setting: Setting, problem: GuardProblem, budget: Budget): Guarded | null {
  const slope = differentiate(problem.function, problem.variable);
  if (!slope || !dependsOn(slope, problem.variable)) return null;
  const ends = setting.sides.map((s) => s.to && Q.add(s.point, Q.multiply(s.to, Q.rational(s.direction))));
  const starts = setting.sides.map((s) => Q.add(s.point, Q.multiply(s.from, Q.rational(s.direction))));
  const finite = ends.filter((e): e is Rational => e !== null);
  const known = [...starts, ...finite].sort((a, b) => Q.compare(a, b));
  const open = (direction: 1 | -1): boolean => setting.sides.some((s) => s.direction === direction && s.to === null);
  const interval = { low: open(-1) ? null : (known[0] ?? null), high: open(1) ? null : (known.at(-1) ?? null) };
  const { derivative: _, ...rest } = problem;
  try {
    return guarded({ ...rest, function: slope, interval, intervalText: setting.text, name: ['guarded', 'derivative'], ...(found.switch && found.switch.den < 1n << 20n ? { switch: found.switch } : {}) }, budget);
  } catch (error) {
    if (error instanceof Declined) return null;
    throw error;
  }
}

/** What the interval says of the sign of the variable. */
function signs(variable: string, { sides }: Setting): readonly Assumption[] {
  const [only] = sides;
  if (sides.length !== 1 || !only || !Q.isZero(only.point)) return [];
  return [{ kind: 'relation', left: build.symbol(variable), relation: only.direction > 0 ? '>' : '<', right: build.number(0) }];
}

/** Distances at which forms are compared before they are judged on the whole interval. */
const PROBES = [-2, -12, -24] as const;
const MOST_FORMS = 6;

/** The expression itself and the most accurate forms at a few places; a form as good as another and dearer is left out. */
function promising(forms: readonly ExactForm[], { sides }: Setting, scanner: Scanner): readonly ExactForm[] {
  const [original, ...others] = forms;
  const [side] = sides;
  if (!original || !side) return forms;
  const pieces: Piece[] = [];
  const far = side.to ?? Q.multiply(Q.add(side.from, Q.ONE), powerOfTwo(12));
  if (side.to === null) pieces.push({ kind: 'plain', ...ordered(side, Q.multiply(far, Q.rational(7, 8)), far) });
  for (const e of PROBES) {
    const to = Q.add(side.from, Q.multiply(Q.subtract(side.to ?? Q.add(side.from, Q.ONE), side.from), powerOfTwo(e)));
    const from = Q.add(side.from, Q.multiply(Q.subtract(to, side.from), Q.rational(7, 8)));
    pieces.push({ kind: 'plain', ...ordered(side, from, to) });
  }
  const judged = others
    .map((form) => ({ form, bounds: pieces.map((p) => scanner.bound(form.tree, p) ?? Infinity) }))
    .map(({ form, bounds }) => ({ form, bounds, worst: Math.max(...bounds) }))
    .filter((j) => Math.min(...j.bounds) < 1)
    .sort((a, b) => a.worst - b.worst || a.form.cost - b.form.cost);
  const kept: typeof judged = [];
  for (const j of judged) {
    if (kept.length >= MOST_FORMS) break;
    if (!kept.some((k) => k.form.cost <= j.form.cost && k.bounds.every((b, i) => b <= (j.bounds[i] ?? 0) * 1.02))) kept.push(j);
  }
  return kept.map((k) => k.form);
}

function ordered({ point, direction }: Side, from: Rational, to: Rational): { readonly low: Rational; readonly high: Rational } {
  const [a, b] = [from, to].map((d) => Q.add(point, Q.multiply(d, Q.rational(direction)))) as [Rational, Rational];
  return direction > 0 ? { low: a, high: b } : { low: b, high: a };
}

interface Setting {
  readonly sides: readonly Side[];
  readonly symmetric: boolean;
  readonly text: readonly [string, string];
  readonly proposed: boolean;
}

/** The sides of the point that the interval has, each with its distances. */
function settle(problem: GuardProblem, scanner: Scanner): Setting {
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
  const { low, high } = given;
  const text = problem.intervalText ?? [low ? Q.toText(low) : '-inf', high ? Q.toText(high) : 'inf'];
  if (low && high && Q.compare(low, high) >= 0) throw new Declined('bad-request', 'The interval needs two different ends, the smaller one first.');
  const distance = (end: Rational | null, direction: 1 | -1): Rational | null => end && Q.multiply(Q.subtract(end, point), Q.rational(direction));
  const sides: Side[] = [];
  const [right, left] = [distance(high, 1), distance(low, -1)];
  const rightFrom = distance(low, 1);
  const leftFrom = distance(high, -1);
  if (right === null || right.num > 0n) sides.push({ point, direction: 1, from: rightFrom && rightFrom.num > 0n ? rightFrom : Q.ZERO, to: right });
  if (left === null || left.num > 0n) sides.push({ point, direction: -1, from: leftFrom && leftFrom.num > 0n ? leftFrom : Q.ZERO, to: left });
  const symmetric = sides.length === 2 && Q.isZero(point) && (right === null ? left === null : left !== null && Q.equal(right, left));
  for (const end of [low, high]) if (end && Q.compare(Q.absolute(end), largest) > 0) throw new Declined('bad-request', `The interval reaches beyond the largest ${format.name} number; write inf for an end without limit.`);
  return { sides, symmetric, text, proposed: false };
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

interface SharedSeries {
  readonly terms: SeriesTerms & { readonly exact: boolean };
  readonly truncations: readonly Truncation[];
  readonly sides: readonly Side[];
  readonly forms: Map<number, SeriesForm>;
  readonly evaluations: Map<string, number>;
}

/** What is needed to judge a series branch on the sides that touch the point; null where there is none to be had. */
function seriesFor(problem: GuardProblem, sides: readonly Side[], scanner: Scanner, budget: Budget): SharedSeries | null {
  const { point, format, library, function: f, variable } = problem;
  if (typeof point === 'string' || !isRepresentable(point, format.name)) return null;
  const touching = sides.filter((s) => Q.isZero(s.from));
  if (touching.length === 0) return null;
  const terms = seriesTerms(f, variable, point, MOST_TERMS, { format, library }, budget);
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

function candidate(form: ExactForm, sides: readonly Side[], setting: Setting, shared: SharedSeries | null, problem: GuardProblem, scanner: Scanner, budget: Budget): Candidate | null {
  const scans = sides.map((side) => scanner.scan(form.tree, side));
  const touches = setting.sides.some((s) => Q.isZero(s.from)) && typeof problem.point !== 'string';
  const worst = (h: Rational): number | null => {
    let total = 0;
    for (const scan of scans) {
      const bound = worstBeyond(scan, h);
      if (bound === null) return null;
      total = Math.max(total, bound);
    }
    return total;
  };
  const everywhere = scans.every((s) => s.complete && (s.stretches.length > 0)) ? worst(Q.ZERO) ?? (touches ? null : Math.max(...scans.flatMap((s) => s.stretches.map((p) => p.bound)))) : null;
  if (everywhere !== null) return { form, scans, series: null, seriesText: '', switch: null, seriesBound: null, directBound: everywhere, whole: everywhere };
  if (!shared || !touches) return null;
  const { format } = problem;
  const distances = [...new Map(scans.flatMap((s) => s.stretches.map((p) => [Q.toText(p.low), p.low] as const))).values()]
    .filter((h) => h.num > 0n)
    .map((h) => roundToFormat(h, format.name))
    .filter((h): h is Rational => h !== null)
    .sort((a, b) => Q.compare(a, b));
  // The series may serve the whole interval.
  const ends = setting.sides.map((side) => side.to);
  const [end] = ends;
  const whole = end && setting.sides.every((side) => Q.isZero(side.from) && side.to && Q.equal(side.to, end)) ? roundToFormat(end, format.name) : null;
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

/** The least whole bound; a plainer candidate where it is nearly as good. */
function chosen(candidates: readonly Candidate[], { format, tolerance }: GuardProblem): Candidate | null {
  const least = Math.min(...candidates.map((c) => c.whole));
  const enough = Math.max(least * PREFERENCE, FEW_UNITS * 2 ** -format.precision, tolerance ? Q.toDouble(tolerance) : 0);
  const close = candidates.filter((c) => c.whole <= enough);
  const cost = (c: Candidate): number => c.form.cost + (c.series ? 4 + 2 * c.series.terms : 0);
  return close.reduce<Candidate | null>((best, c) => (best && cost(best) <= cost(c) ? best : c), null);
}

function answer(best: Candidate, candidates: readonly Candidate[], problem: GuardProblem, setting: Setting): Guarded {
  const { format, library, language, variable, function: f, point } = problem;
  const exact = candidates.filter((c) => c.form.identities.length > 0).sort((a, b) => a.whole - b.whole);
  const assumptions = [
    ...(setting.proposed ? [`no interval was given: [${setting.text.join(', ')}] is proposed`] : []),
    'round to nearest, subnormal numbers kept, no optimisation that changes values (such as fast-math)',
    `each library call is within ${library} ulp; square roots are correctly rounded`,
    'holds with and without fusing of products and sums (a*b + c)',
    `where the value is below the smallest normal ${format.name} number the relative bound does not apply`,
  ];
  const written = guardCode({
    name: problem.name ?? ['guarded'],
    variable,
    language,
    format,
    comment: commentOf({ function: f, variable, interval: setting.text, format, whole: best.whole, series: best.seriesBound, direct: best.directBound, switchText: best.switch ? shortestDecimal(best.switch, format.name) : null, terms: best.series?.terms ?? null, assumptions: assumptions.slice(setting.proposed ? 1 : 0) }),
    direct: best.form.tree,
    ...(problem.prefix === undefined ? {} : { prefix: problem.prefix }),
    series: best.series && best.switch && typeof point !== 'string' ? { form: best.series, point, switch: best.switch, closed: best.directBound === null } : null,
  });
  return {
    forms: exact.map((c) => ({ tree: c.form.tree, text: toPlain(c.form.tree), bound: c.whole, identities: c.form.identities })),
    ranges: rangesOf(best, problem, setting),
    switch: best.switch,
    terms: best.series?.terms ?? null,
    bound: { series: best.seriesBound, direct: best.directBound, whole: best.whole },
    code: written.code,
    imports: written.imports,
    assumptions,
    interval: setting.text,
  };
}

/** One row for each range of the argument and form. */
function rangesOf(best: Candidate, problem: GuardProblem, setting: Setting): GuardRange[] {
  const text = toPlain(best.form.tree);
  const [low, high] = setting.text;
  const { point, format } = problem;
  if (!best.series || !best.switch || typeof point === 'string') return [{ from: low, to: high, form: text, bound: best.whole }];
  const at = (d: Rational): string => {
    const value = roundToFormat(Q.add(point, d), format.name);
    return value ? shortestDecimal(value, format.name) : decimal(Q.toDouble(Q.add(point, d)));
  };
  const rows: GuardRange[] = [];
  const touches = (direction: 1 | -1): boolean => setting.sides.some((s) => s.direction === direction);
  const direct = best.directBound;
  if (direct === null) return [{ from: low, to: high, form: best.seriesText, bound: best.whole }];
  if (touches(-1)) rows.push({ from: low, to: at(Q.negate(best.switch)), form: text, bound: direct });
  rows.push({ from: touches(-1) ? at(Q.negate(best.switch)) : low, to: touches(1) ? at(best.switch) : high, form: best.seriesText, bound: best.seriesBound ?? 0 });
  if (touches(1)) rows.push({ from: at(best.switch), to: high, form: text, bound: direct });
  return rows;
}

