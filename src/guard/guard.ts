/** The guard of an expression: the form that serves each range of the argument, the switch between them, and the proof of the whole. */
import { dependsOn, freeSymbols, Q, type Rational } from '../expression/index.ts';
import { parityOf } from '../fit/index.ts';
import { differentiate } from '../functions/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../outcome.ts';
import { powerOfTwo } from '../write/index.ts';
import { answer } from './answer.ts';
import { candidate, type Candidate, FEW_UNITS, PREFERENCE, seriesFor, type SharedSeries } from './candidate.ts';
import { rowFor } from './code.ts';
import { exactForms, type ExactForm } from './forms.ts';
import type { Piece } from './pieces.ts';
import { Scanner, type Side } from './region.ts';
import { unproved } from './unproved.ts';
import { settle, type Setting, signs } from './setting.ts';
import type { Guarded, GuardProblem } from './types.ts';

export function guarded(problem: GuardProblem, budget: Budget): Guarded {
  const { function: f, variable, format, library, language } = problem;
  const row = rowFor(language);
  const others = freeSymbols(f).filter((name) => name !== variable);
  if (others.length > 0) throw new Declined('needs-assumption', `A guard needs numbers: give a value for ${others.slice(0, 3).join(', ')}.`);
  if (!dependsOn(f, variable)) throw new Declined('bad-request', 'This expression does not depend on the variable; choose one that does.');
  const scanner = new Scanner(variable, { format, library }, budget);
  const setting = settle(problem, scanner);
  let series: SharedSeries | null | undefined;
  const shared = (): SharedSeries | null => (series === undefined ? (series = seriesFor(problem, setting.sides, scanner, budget)) : series);
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
  if (!best) throw unproved(problem, setting, scanner, original);
  const found = answer(best, candidates, problem, setting, scanner.grows);
  if (!problem.derivative) return found;
  const slope = derivativeOf(found, setting, problem, budget);
  return typeof slope === 'string' ? { ...found, derivative: null, assumptions: [...found.assumptions, `no guard of the derivative: ${slope}`] } : { ...found, derivative: slope };
}

/** A guard of the derivative with a switch of its own is taken where the shared one loses this factor. */
const SWITCH_COSTS = 4;

/** f' near the same point on the same interval, handed over at the same switch where that serves it; the reason where it has no guard. */
function derivativeOf(found: Guarded, setting: Setting, problem: GuardProblem, budget: Budget): Guarded | string {
  const slope = differentiate(problem.function, problem.variable);
  if (!slope) return 'its derivative is not known';
  if (!dependsOn(slope, problem.variable)) return 'it is constant';
  const ends = setting.sides.map((s) => s.to && Q.add(s.point, Q.multiply(s.to, Q.rational(s.direction))));
  const starts = setting.sides.map((s) => Q.add(s.point, Q.multiply(s.from, Q.rational(s.direction))));
  const finite = ends.filter((e): e is Rational => e !== null);
  const known = [...starts, ...finite].sort((a, b) => Q.compare(a, b));
  const open = (direction: 1 | -1): boolean => setting.sides.some((s) => s.direction === direction && s.to === null);
  const interval = { low: open(-1) ? null : (known[0] ?? null), high: open(1) ? null : (known.at(-1) ?? null) };
  const { derivative: _, ...rest } = problem;
  const guardOf = (more: Pick<GuardProblem, 'switch'>): Outcome<Guarded> => attempt(() => guarded({ ...rest, function: slope, interval, intervalText: setting.text, name: ['guarded', 'derivative'], ...more }, budget));
  const shared = found.switch && found.switch.den < 1n << 20n ? guardOf({ switch: found.switch }) : null;
  if (shared?.ok && shared.value.bound.whole <= FEW_UNITS * 2 ** -problem.format.precision) return shared.value;
  const own = guardOf({});
  if (shared?.ok && (!own.ok || shared.value.bound.whole <= SWITCH_COSTS * own.value.bound.whole)) return shared.value;
  return own.ok ? own.value : own.error.message;
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

/** The least whole bound; a plainer candidate where it is nearly as good. */
function chosen(candidates: readonly Candidate[], { format, tolerance }: GuardProblem): Candidate | null {
  const least = Math.min(...candidates.map((c) => c.whole));
  const enough = Math.max(least * PREFERENCE, FEW_UNITS * 2 ** -format.precision, tolerance ? Q.toDouble(tolerance) : 0);
  const close = candidates.filter((c) => c.whole <= enough);
  const cost = (c: Candidate): number => c.form.cost + (c.series ? 4 + 2 * c.series.terms : 0);
  return close.reduce<Candidate | null>((best, c) => (best && cost(best) <= cost(c) ? best : c), null);
}
