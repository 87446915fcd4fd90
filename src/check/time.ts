/** How the time of a check is shared among its claims. */
import { type Budget, Declined } from '../outcome.ts';
import type { Finding } from '../protocol.ts';
import type { CheckMemory } from './memory.ts';

/** Longest time that one claim may take of what is left, so that one hard claim does not starve the others. */
const SHARE = 0.25;

/** Findings kept from an earlier check, else judged now and kept, unless time ran short. */
export function remembered(memory: CheckMemory | undefined, keyOf: () => string, start: number, budget: Budget, find: (time: Budget) => readonly Finding[]): readonly Finding[] {
  if (!memory) return find(budget);
  const key = keyOf();
  const known = memory.verdicts.recall(key, start);
  if (known) return known;
  const allowed = budget.remaining() * SHARE;
  const begun = performance.now();
  const findings = find(budget);
  if (performance.now() - begun < allowed || findings.every((f) => f.verdict === 'holds')) memory.verdicts.keep(key, start, findings);
  return findings;
}

/** The findings, or that there was no time for them. */
export function withinTime(span: { readonly start: number; readonly end: number }, find: () => readonly Finding[]): readonly Finding[] {
  try {
    return find();
  } catch (error) {
    if (!(error instanceof Declined)) throw error;
    return [{ ...span, claim: span, verdict: 'undecided', severity: 'hint', reason: error.failure.message, found: '', fix: null }];
  }
}

/** A part of the remaining time, never none. */
export function share(whole: Budget): Budget {
  const end = performance.now() + Math.max(20, whole.remaining() * SHARE);
  return {
    deadline: Math.min(end, whole.deadline),
    remaining: () => Math.min(end - performance.now(), whole.remaining()),
    check() {
      whole.check();
      if (performance.now() > end) throw new Declined('over-budget', 'This claim took too long to judge; allow more time.');
    },
  };
}
