/** One claim against the truth: the difference of the two sides, its leading term, and what the printed mark allows. */
import { build, dependsOn, Q, walk, type Expression, type Relation } from '../expression/index.ts';
import type { Setting } from './context.ts';
import { absorbDecimals } from './decimals.ts';
import { mayVanish } from './enclose.ts';
import { compare, compareSizes, leading, type Leading, type Size } from './size.ts';
import { hasMarks, lastKept, takeApart, type PrintedTerm, type Truncated } from './truncated.ts';

export type Judgement =
  | { readonly kind: 'identity' }
  /** Not meant as an expansion as far as the text shows. */
  | { readonly kind: 'other' }
  | { readonly kind: 'holds'; readonly hint: Hint | null; readonly truncated: Truncated }
  | { readonly kind: 'undecided'; readonly reason: string; readonly needsTime: boolean }
  | { readonly kind: 'fails'; readonly failure: Failed; readonly truncated: Truncated };

/** A remark on a claim that holds. */
export type Hint =
  /** The difference is smaller than stated. */
  | { readonly kind: 'weak'; readonly difference: Size }
  | { readonly kind: 'absorbed'; readonly term: PrintedTerm }
  | { readonly kind: 'approximation' };

export interface Failed {
  /** Leading term of function minus printed sum; null on another scale. */
  readonly difference: { readonly size: Size; readonly coefficient: Expression } | null;
  /** Where only the stated O or o is at fault: every printed term is right. */
  readonly onlyOrder: boolean;
  /** Printed terms that are right before the first wrong one. */
  readonly matched: number;
}

/** Judges `f relation side` at the point. Undecided where a zero test, a size or the time does not allow more. */
export function judge(f: Expression, side: Expression, relation: Relation, setting: Setting): Judgement {
  const truncated = takeApart(side, setting);
  const leftMarked = hasMarks(f) ? takeApart(f, setting) : null;
  const truth = leftMarked ? leftMarked.kept : f;
  let sum = truncated.kept;
  const plain = build.difference(truth, sum);
  let lead = leading(setting, plain);
  const allowed = absorbDecimals(truth, truncated, lead, setting);
  const difference = allowed.sum === sum ? plain : build.difference(truth, allowed.sum);
  sum = allowed.sum;
  lead = allowed.lead;
  if (lead.kind === 'undecided') return { kind: 'undecided', reason: lead.reason, needsTime: lead.needsTime };
  if (lead.kind === 'zero') return identity(truncated, relation, leftMarked);
  const verdict = truncated.scale ? againstScale(truncated, truncated.scale, difference, setting) : againstLast(truncated, truth, difference, lead, setting);
  if (verdict.kind === 'fails' && lead.kind === 'monomial' && mayVanish(lead.coefficient)) return { kind: 'undecided', reason: 'Numerically the first coefficient of the difference is zero, but this is not proved.', needsTime: false };
  if (verdict.kind === 'holds' && leftMarked) return withLeftMark(leftMarked, truncated, verdict, setting);
  if (verdict.kind === 'fails' && leftMarked && !refutes(leftMarked, lead, setting)) return { kind: 'undecided', reason: 'The left side is itself cut off before the terms that would decide it.', needsTime: false };
  if (verdict.kind === 'holds' && truncated.mark === 'none' && relation === '=') return { ...verdict, hint: { kind: 'approximation' } };
  return verdict;
}

function identity(truncated: Truncated, relation: Relation, leftMarked: Truncated | null): Judgement {
  if (truncated.mark === 'none' && relation === '=' && !leftMarked) return { kind: 'identity' };
  return { kind: 'holds', hint: null, truncated };
}

function againstScale(truncated: Truncated, scale: Expression, difference: Expression, setting: Setting): Judgement {
  const size = compare(setting, difference, scale);
  if (typeof size === 'object') return { kind: 'undecided', reason: size.undecided, needsTime: size.needsTime };
  const holds = truncated.mark === 'O' ? size !== 'larger' : size === 'smaller';
  const lead = leading(setting, difference);
  if (!holds) return { kind: 'fails', failure: failureOf(truncated, difference, lead, setting), truncated };
  const absorbed = truncated.terms.find((t) => {
    const reach = compare(setting, t.value, scale);
    return truncated.mark === 'O' ? reach === 'same' || reach === 'smaller' : reach === 'smaller';
  });
  if (absorbed) return { kind: 'holds', hint: { kind: 'absorbed', term: absorbed }, truncated };
  if (truncated.mark === 'O' && size === 'smaller' && lead.kind === 'monomial') return { kind: 'holds', hint: { kind: 'weak', difference: lead.size }, truncated };
  return { kind: 'holds', hint: null, truncated };
}

/** Dots, or no mark: the difference must be smaller than the last kept term. */
function againstLast(truncated: Truncated, truth: Expression, difference: Expression, lead: Leading, setting: Setting): Judgement {
  const reach = isDifferenceFormula(truncated.side, setting) ? ownSize(truth, setting) : lastKept(truncated, setting);
  if (lead.kind === 'monomial' && reach) {
    return compareSizes(lead.size, reach.last) > 0 ? { kind: 'holds', hint: null, truncated } : { kind: 'fails', failure: failureOf(truncated, difference, lead, setting), truncated };
  }
  const last = truncated.terms.at(-1);
  if (!last) return { kind: 'undecided', reason: 'No printed term was found.', needsTime: false };
  const size = compare(setting, difference, last.value);
  if (typeof size === 'object') return { kind: 'undecided', reason: size.undecided, needsTime: size.needsTime };
  return size === 'smaller' ? { kind: 'holds', hint: null, truncated } : { kind: 'fails', failure: failureOf(truncated, difference, lead, setting), truncated };
}

/** Values f(x + h) of an unspecified function: the formula is as good as what remains beside the quantity itself. */
const isDifferenceFormula = (side: Expression, setting: Setting): boolean => [...walk(side)].some((n) => n.kind === 'apply' && n.args.some((a) => dependsOn(a, setting.variable)));

function ownSize(truth: Expression, setting: Setting): { readonly last: Size } | null {
  const own = leading(setting, truth);
  return own.kind === 'monomial' ? { last: own.size } : null;
}

function failureOf(truncated: Truncated, difference: Expression, lead: Leading, setting: Setting): Failed {
  const found = lead.kind === 'monomial' ? { size: lead.size, coefficient: lead.coefficient } : null;
  const isRight = (term: PrintedTerm): boolean => {
    const own = leading(setting, term.value);
    if (found && own.kind === 'monomial') return compareSizes(own.size, found.size) < 0;
    return found === null && compare(setting, term.value, difference) === 'larger';
  };
  const right = truncated.terms.map(isRight);
  return { difference: found, onlyOrder: truncated.scale !== null && right.length > 0 && right.every(Boolean), matched: right.filter(Boolean).length };
}

/** A cut-off left side: its own remainder must be covered by the right one. */
function withLeftMark(left: Truncated, right: Truncated, verdict: Judgement, setting: Setting): Judgement {
  if (!right.scale) return verdict;
  const unknown = left.scale ?? nextAfter(left, setting);
  if (!unknown) return { kind: 'undecided', reason: 'How much the left side leaves out cannot be told.', needsTime: false };
  const size = compare(setting, unknown, right.scale);
  if (size === 'larger' || typeof size === 'object') return { kind: 'undecided', reason: 'The left side leaves out more than the right side states.', needsTime: false };
  return verdict;
}

/** The difference lies among terms that the left side shows. */
function refutes(left: Truncated, lead: Leading, setting: Setting): boolean {
  if (lead.kind !== 'monomial') return false;
  if (left.scale) {
    const scale = leading(setting, left.scale);
    return scale.kind === 'monomial' && compareSizes(lead.size, scale.size) < 0;
  }
  const reach = lastKept(left, setting);
  return reach !== null && compareSizes(lead.size, reach.last) <= 0;
}

/** What dots leave out is taken to be the next power in the step of the last two printed ones. */
function nextAfter(left: Truncated, setting: Setting): Expression | null {
  const reach = lastKept(left, setting);
  if (!reach) return null;
  const powers = left.terms.flatMap((t) => {
    const size = leading(setting, t.value);
    return size.kind === 'monomial' ? [size.size.power] : [];
  });
  const below = powers.filter((p) => Q.compare(p, reach.last.power) < 0).reduce<typeof reach.last.power | null>((best, p) => (!best || Q.compare(p, best) > 0 ? p : best), null);
  const step = below ? Q.subtract(reach.last.power, below) : Q.ONE;
  const next = Q.add(reach.last.power, step);
  const variable = build.symbol(setting.variable);
  const local = setting.point === 'inf' || setting.point === '-inf' ? build.quotient(build.number(1), variable) : build.difference(variable, setting.point);
  return build.power(local, next);
}
