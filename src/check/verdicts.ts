/** What is shown of a judgement: verdict, severity, place and reason. */
import { type Expression, Q, type Span } from '../expression/index.ts';
import type { Finding } from '../protocol.ts';
import { toPlain } from '../write/index.ts';
import { type Accused, blame } from './blame.ts';
import { type Claim, isTranscendental } from './claims.ts';
import type { Setting } from './context.ts';
import type { PlacedFormula } from './formulas.ts';
import type { Hint, Judgement } from './judge.ts';
import { notationOf } from './notation.ts';
import type { Around } from './setting.ts';

export interface Place {
  readonly text: string;
  readonly formula: PlacedFormula;
  readonly around: Around;
  /** Where the next claim of the text begins: what stands behind that belongs to it. Absent: there is none. */
  readonly until?: number;
  /** Where the claim before it ends. Absent: there is none. */
  readonly since?: number;
  /** Files that the document refers to and that could not be read. */
  readonly absent?: readonly string[];
}

export function holding(claim: Claim, f: Expression, setting: Setting, judgement: Extract<Judgement, { kind: 'holds' }>, place: Place, presumed: string | undefined): Finding | null {
  if (claim.relation === '=' && judgement.truncated.mark === 'none' && (!isTranscendental(f, setting.variable) || judgement.truncated.terms.length === 0)) return null;
  const suffix = presumed === undefined ? '' : ` (taken as ${presumed})`;
  const base = { ...claim.span, claim: claim.span, verdict: 'holds' as const, found: '', fix: null, ...labelOf(place) };
  const { hint } = judgement;
  if (!hint) return { ...base, severity: 'none', reason: `Holds: every printed term agrees with the expansion${suffix}.` };
  const { place: at, reason } = hintText(claim, hint, judgement, setting);
  return { ...base, ...at, severity: 'hint', reason: `Holds${suffix}. ${reason}` };
}

function hintText(claim: Claim, hint: Hint, judgement: Extract<Judgement, { kind: 'holds' }>, setting: Setting): { readonly place: Span; readonly reason: string } {
  const order = judgement.truncated.orders[0];
  switch (hint.kind) {
    case 'weak': {
      const power = Q.toText(hint.difference.power);
      const reached = setting.point === 'inf' || setting.point === '-inf' ? `the power -${power} of ${setting.variable}` : `the power ${power}`;
      return { place: order?.argument.span ?? claim.span, reason: `The difference is smaller than stated: it is of order ${reached}.` };
    }
    case 'absorbed':
      return { place: hint.term.node.span ?? claim.span, reason: 'This term is not larger than the stated remainder, which absorbs it.' };
    case 'approximation':
      return { place: claim.span, reason: 'The two sides are not equal; an approximation sign or a remainder is meant.' };
  }
}

export function undecided(claim: Claim, place: Place, reason: string): Finding {
  return { ...claim.span, claim: claim.span, verdict: 'undecided', severity: 'hint', reason, found: '', fix: null, ...labelOf(place) };
}

export const unresolved = (claim: Claim, place: Place): Finding =>
  undecided(claim, place, `The left side ${claim.name ? toPlain(claim.name) : place.text.slice(claim.function?.span?.start ?? 0, claim.function?.span?.end ?? 0)} is only a name, and its ${notDefined(place)}.`);

export function failing(claim: Claim, f: Expression, setting: Setting, judgement: Extract<Judgement, { kind: 'fails' }>, place: Place): Finding {
  const found = blame(accusedOf(claim, f, setting, judgement, place));
  return { start: found.place.start, end: found.place.end, claim: claim.span, verdict: 'fails', severity: 'error', reason: found.message, found: found.found, fix: found.fix, ...labelOf(place) };
}

export function accusedOf(claim: Claim, f: Expression, setting: Setting, { failure, truncated }: Pick<Extract<Judgement, { kind: 'fails' }>, 'failure' | 'truncated'>, place: Place): Accused {
  const notation = notationOf(place.text.slice(place.formula.span.start, place.formula.span.end), place.formula.notation);
  return { truth: f, relation: claim.relation, truncated, failure, setting, notation, text: place.text };
}

export const notDefined = ({ absent }: Place): string => `definition does not stand in this document${orIn(absent)}`;

/** Names the files that were not reached. */
export const orIn = (absent: readonly string[] | undefined): string => (absent?.length ? `; it may stand in ${absent.slice(0, 3).join(', ')}${absent.length > 3 ? ', ...' : ''}, which could not be read` : '');

export const labelOf = (place: Place): { readonly label?: string } => (place.formula.label === null ? {} : { label: place.formula.label });
