/** What the text states beside a claim: a tolerance, a region of convergence. */
import { type Expression, Q, walk } from '../expression/index.ts';
import type { Finding } from '../protocol.ts';
import { judgeAccuracy } from './accuracy.ts';
import type { Claim } from './claims.ts';
import type { Setting } from './context.ts';
import { regionBeside, regionError } from './convergence.ts';
import { notationOf, writeIn } from './notation.ts';
import { prepared } from './prepared.ts';
import { lastSentence, type Statement, statementAround } from './statements.ts';
import { withoutMarks } from './truncated.ts';
import { labelOf, type Place } from './verdicts.ts';

export const NO_INTERVAL = 'The stated accuracy is not judged, since no interval is named beside it.';

/** The tolerance stated in the sentence of the claim, or in one behind it that goes on about the error. */
export function statementOf(printed: Claim, setting: Setting, { text, formula, around, since, until }: Place): Statement | null {
  const { start } = formula.span;
  const from = printed.span.end;
  const end = Math.min(text.length, Math.max(formula.span.end, from) + ACCURACY_REACH, until ?? Infinity);
  const stop = text.slice(from, end).search(OTHER_SENTENCE);
  const first = Math.max(start - around.before.length, since ?? 0);
  return statementAround({
    text,
    claim: printed.span,
    from: first >= start ? start : first + lastSentence(text.slice(first, start)),
    to: stop < 0 ? end : from + stop,
    since: since ?? null,
    until: until ?? null,
    conditions: around.conditions,
    variable: setting.variable,
    small: typeof setting.point === 'object' && setting.point.kind === 'number' && Q.isZero(setting.point.value),
  });
}

/** The verdict on a stated tolerance; null where no interval is stated. */
export function accuracyFinding(statement: Statement, printed: Claim, given: Expression, setting: Setting, place: Place): Finding | null {
  const { interval, doubt } = statement;
  if (!interval) return null;
  const { f, claim } = prepared(given, printed, setting);
  const judged = judgeAccuracy(statement, interval, f, withoutMarks(claim.side), setting);
  const verdict = doubt !== null ? { kind: 'undecided' as const, reason: doubt } : judged;
  const base = { ...statement.place, claim: printed.span, found: '', fix: null, ...labelOf(place) };
  switch (verdict.kind) {
    case 'holds':
      return { ...base, verdict: 'holds', severity: 'none', reason: `Holds: the error on this interval is proved to be at most ${verdict.error}.` };
    case 'fails':
      return { ...base, verdict: 'fails', severity: 'error', reason: `The error on this interval reaches ${verdict.error}.`, found: verdict.error, fix: statement.plain ? { ...statement.place, text: statement.percent ? verdict.error.replace('%', statement.printed.includes('\\%') ? '\\%' : '%') : verdict.error } : null };
    case 'undecided':
      return { ...base, verdict: 'undecided', severity: 'hint', reason: verdict.reason };
  }
}

/** A region of convergence beside dots or an infinite sum that is larger than the disc, or holds an end at which the series diverges. */
export function regionFinding(printed: Claim, given: Expression, setting: Setting, place: Place): Finding | null {
  const endless = [...walk(printed.side)].some((n) => n.kind === 'dots' || (n.kind === 'indexedSum' && n.upper.kind === 'constant'));
  if (!endless || printed.relation === 'tilde') return null;
  const { end } = place.formula.span;
  const region = regionBeside(place.text, place.around.conditions, printed.span.end, end, Math.min(end + ACCURACY_REACH, place.until ?? Infinity), setting.variable);
  const error = region && regionError(region, prepared(given, printed, setting).f, setting);
  if (!error) return null;
  const notation = notationOf(place.text.slice(place.formula.span.start, place.formula.span.end), place.formula.notation);
  const right = writeIn(notation, error.value);
  const base = { ...error.place, claim: printed.span, verdict: 'fails' as const, severity: 'error' as const, found: right, ...labelOf(place) };
  const reason = error.reason ? `${error.reason}: the radius of convergence is ${right}.` : `The series diverges at ${right}, an end of this region.`;
  return { ...base, reason, fix: error.fix && { start: error.fix.start, end: error.fix.end, text: error.fix.text ?? right } };
}

const ACCURACY_REACH = 160;

/** The end of the paragraph, or of a sentence that the next one does not go on about. */
const OTHER_SENTENCE = /\n\s*\n|[.!?][$)\s]*\s(?=[A-Z])(?!(?:The|Its|Here the|This|It)\b[^.;]{0,40}?\b(?:errors?|accura\w+|within|correct to|precision|deviat\w+)\b)/;
