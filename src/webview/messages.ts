/** What passes between the Expansion page and its host. Plain JSON both ways. */
import type { ErrorAnswer, ExpandAnswer, FitAnswer, FitMeasure, FitRequest, GuardAnswer, Verdict } from '../protocol.ts';
import type { Question, Sources } from '../worker/desk/types.ts';

export type Mode = 'expand' | 'fit' | 'guard' | 'claims';

/** One printed expansion of the document and what the check says of it. */
export interface ClaimRow {
  readonly line: number;
  readonly label: string;
  readonly claim: string;
  readonly verdict: Verdict;
  readonly reason: string;
  readonly found: string;
}

/** The controls of a polynomial or a guarded form, as typed. */
export interface CodeControls {
  /** Counts the expressions that the form was about: what an older one still sends is dropped. */
  readonly form: number;
  readonly from: string;
  readonly to: string;
  readonly tolerance: string;
  readonly measure: FitMeasure;
  /** Empty: as the code around says. */
  readonly format: string;
  readonly point: string;
  readonly variable: string;
  /** Of a function of two variables: the other one and its interval; empty otherwise. */
  readonly second: string;
  readonly secondFrom: string;
  readonly secondTo: string;
  readonly reduction: NonNullable<FitRequest['reduction']>;
  /** Floats of the leading coefficient; empty: as many as the tolerance needs. */
  readonly words: '' | '1' | '2';
  /** The code asserts its range. */
  readonly assertion: boolean;
}

export type Shown =
  | { readonly kind: 'nothing' }
  | { readonly kind: 'failure'; readonly message: string; readonly candidates: readonly string[]; readonly asked: Question }
  | { readonly kind: 'expansion'; readonly answer: ExpandAnswer; readonly asked: Question; readonly sources: Sources; readonly origins: Origins; /** Why there is no bound on the interval asked for. */ readonly unbounded?: string }
  | { readonly kind: 'fit'; readonly answer: FitAnswer | ErrorAnswer | null; readonly controls: CodeControls }
  | { readonly kind: 'guard'; readonly answer: GuardAnswer | ErrorAnswer | null; readonly controls: CodeControls }
  | { readonly kind: 'claims'; readonly summary: string; readonly rows: readonly ClaimRow[] };

/** Where each control's value came from, in words. */
export type Origins = Readonly<Partial<Record<'variable' | 'point' | 'interval' | 'tolerance' | 'terms', string>>>;

export interface HistoryEntry {
  readonly label: string;
  readonly detail: string;
}

export interface PageState {
  readonly shown: Shown;
  readonly busy: boolean;
  /** The file and line that the expression stands in; empty before the first. */
  readonly place: string;
  readonly code: boolean;
  readonly pinned: boolean;
  /** Says that the text has changed since; null while it has not. */
  readonly stale: string | null;
  readonly actions: readonly { readonly label: string; readonly title: string }[];
  readonly history: readonly HistoryEntry[];
}

/** What the editor keeps for a page across reloads. */
export interface Kept {
  readonly uri: string;
  readonly start: number;
  readonly end: number;
  readonly mode: Mode;
  readonly pinned: boolean;
  readonly chosen: Question;
}

export type CopyKind = 'latex' | 'unicode' | 'code' | 'request' | 'report';

export type FromPage =
  | { readonly kind: 'ready'; readonly kept: Kept | null }
  | { readonly kind: 'choose'; readonly question: Question }
  | { readonly kind: 'mode'; readonly mode: Mode }
  | { readonly kind: 'code'; readonly controls: CodeControls }
  | { readonly kind: 'apply'; readonly index: number }
  | { readonly kind: 'copy'; readonly what: CopyKind }
  | { readonly kind: 'pin'; readonly pinned: boolean }
  | { readonly kind: 'recall'; readonly index: number }
  | { readonly kind: 'reveal' }
  /** Shows a claim in the text. */
  | { readonly kind: 'claim'; readonly index: number }
  | { readonly kind: 'cancel' };

export type ToPage = { readonly kind: 'state'; readonly state: PageState; readonly kept: Kept | null };
