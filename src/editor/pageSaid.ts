/** The sentences inside an answer in the user's language, and what the page's copy buttons put on the clipboard. */
import type { ErrorAnswer, ExpandAnswer, FitAnswer, GuardAnswer } from '../protocol.ts';
import type { CopyKind, Shown } from '../webview/messages.ts';
import { claimsReport } from './pageClaims.ts';
import { requestCommand } from './requestCommand.ts';
import { said, saidEach } from './words.ts';

/** Coefficients, bounds and code stay as they are. */
export function expansionSaid(answer: ExpandAnswer): ExpandAnswer {
  const { bound, needed, left } = answer;
  return {
    ...answer,
    assumptions: answer.assumptions.map(saidEach),
    ...(bound ? { bound: { ...bound, method: saidEach(bound.method) } } : {}),
    ...(needed?.reason === undefined ? {} : { needed: { ...needed, reason: saidEach(needed.reason) } }),
    ...(left ? { left: expansionSaid(left) } : {}),
  };
}

export function codeSaid<A extends FitAnswer | GuardAnswer>(answer: A | ErrorAnswer | null): A | ErrorAnswer | null {
  if (!answer) return null;
  if (!answer.ok) return { ...answer, error: { ...answer.error, message: said(answer.error.message) } };
  return answer.assumptions ? { ...answer, assumptions: answer.assumptions.map(saidEach) } : answer;
}

/** What the page is about, for requests and reports. */
export interface Subject {
  readonly name: string;
  readonly text: string;
  readonly language: string;
}

export function copied(shown: Shown, what: CopyKind, { name, text, language }: Subject): string | null {
  switch (shown.kind) {
    case 'expansion':
      switch (what) {
        case 'latex':
          return shown.answer.latex;
        case 'unicode':
          return shown.answer.text;
        case 'request':
          return requestCommand(text, language, shown.asked);
        default:
          return shown.answer.numeric.sum;
      }
    case 'claims':
      return claimsReport(name, shown);
    case 'fit':
    case 'guard':
      return shown.answer?.ok ? shown.answer.code : null;
    default:
      return null;
  }
}
