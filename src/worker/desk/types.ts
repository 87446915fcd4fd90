/**
 * What an editor asks of the worker beyond the engine's protocol: an expansion at a place in a document with every source of the
 * question weighed, the edits that put a result into the text, and pictures of formulas. Offsets count UTF-16 code units.
 */
import type { Answer, CheckAnswer, CompanionFile, Detail, ErrorAnswer, ExpandAnswer, FitAnswer, GuardAnswer, Measure, Side } from '../../protocol.ts';

/** What can be settled about an expansion before it is computed. Absent: not settled here. */
export interface Question {
  readonly variable?: string;
  readonly small?: readonly string[];
  readonly point?: string;
  readonly side?: Side;
  readonly terms?: number;
  readonly order?: string;
  readonly interval?: readonly [string, string];
  readonly tolerance?: string;
  readonly measure?: Measure;
  readonly assume?: readonly string[];
  readonly at?: string;
  /** Constants that code defines beside the expression: symbols, or filled in. */
  readonly constants?: 'symbols' | 'values';
}

/** Where a part of the question came from, strongest first. `text`: the formula leaves no choice. `default`: the tool's own. */
export type Source = 'chosen' | 'note' | 'fileNote' | 'remembered' | 'setting' | 'text' | 'default';
export type Sources = Readonly<Partial<Record<keyof Question, Source>>>;

export interface Place {
  readonly start: number;
  readonly end: number;
}

export interface ConsultRequest {
  readonly desk: 'consult';
  readonly text: string;
  readonly language: string;
  /** Cursor (empty) or selection. */
  readonly selection: Place;
  /** Said in the controls of the webview: beats everything. */
  readonly chosen?: Question;
  readonly remembered?: Question;
  readonly setting?: Question;
  readonly details?: readonly Detail[];
  /** Files that the document refers to. */
  readonly files?: readonly CompanionFile[];
  readonly budget_ms?: number;
}
export interface ConsultAnswer {
  readonly answer: ExpandAnswer | ErrorAnswer;
  /** The question as it was put to the engine, and the source of each part. */
  readonly asked: Question;
  readonly sources: Sources;
  /** The expression in the document, as far as it was found. */
  readonly place: Place | null;
  /** Symbols and dimensionless ratios that could be the small quantity, likeliest first. */
  readonly candidates: readonly string[];
  /** False where the expression is its own expansion, so that a hover would say nothing. */
  readonly worthwhile: boolean;
  /** Why there is no bound although an interval was given: the engine's sentence. */
  readonly unbounded?: string;
}

export interface TextEdit extends Place {
  readonly text: string;
}
export type ProposalKind = 'after' | 'row' | 'replace' | 'polynomial' | 'comment' | 'helper' | 'corrections';
/** One way to put a result into the document. Titles are the editor's; `preview` is one line of Unicode. */
export interface Proposal {
  readonly kind: ProposalKind;
  readonly preview: string;
  readonly edits: readonly TextEdit[];
}
export type OrderStyle = 'auto' | 'O' | '\\mathcal{O}' | '\\order' | 'about';
export interface ProposalsRequest {
  readonly desk: 'proposals';
  readonly text: string;
  readonly language: string;
  readonly place: Place;
  readonly answer: ExpandAnswer;
  readonly orderStyle: OrderStyle;
}
export interface ProposalsAnswer {
  readonly proposals: readonly Proposal[];
}

/** Code that was written for the user, put into the user's file in place of the expression. */
export interface ReplacementRequest {
  readonly desk: 'replacement';
  readonly text: string;
  readonly language: string;
  readonly place: Place;
  readonly code: string;
  readonly imports: readonly string[];
  /** What the new function is called with. */
  readonly argument: string;
}

/** Exact forms in plain notation, put into the user's file in place of the expression. */
export interface FormsRequest {
  readonly desk: 'forms';
  readonly text: string;
  readonly language: string;
  readonly place: Place;
  readonly forms: readonly string[];
  /** `binary32` or `binary64`, as the guard was asked for. */
  readonly format?: string;
}

/** A formula in a programming language. */
export interface TranslationRequest {
  readonly desk: 'translation';
  readonly latex: string;
  readonly language: string;
}
export interface TranslationAnswer {
  /** Null where the language cannot say it. */
  readonly code: string | null;
}

/** A formula as a picture that a Markdown image can show. `ink` is a CSS colour. */
export interface PictureRequest {
  readonly desk: 'picture';
  readonly latex: string;
  readonly ink: string;
  /** Widest line, in CSS pixels. */
  readonly width: number;
  /** Of the surrounding text, in CSS pixels. */
  readonly size: number;
}
export interface PictureAnswer {
  /** A data URI, or null where the formula cannot be drawn. */
  readonly uri: string | null;
  readonly width: number;
  readonly height: number;
}

/** A `leading-order:` note as it stands in a document. */
export interface NoteReading extends Place {
  readonly question: Question;
  readonly skip: boolean;
  /** One plain sentence where the note cannot be read. */
  readonly problem: string | null;
  /** The label of the equation that a polynomial in code implements. */
  readonly implements?: string;
}
export interface NotesRequest {
  readonly desk: 'notes';
  readonly text: string;
  readonly language: string;
}
export interface NotesAnswer {
  readonly notes: readonly NoteReading[];
}

export type DeskRequest = ConsultRequest | ProposalsRequest | ReplacementRequest | FormsRequest | PictureRequest | NotesRequest | TranslationRequest;
export type DeskAnswerTo<R extends DeskRequest> = R extends ConsultRequest
  ? ConsultAnswer
  : R extends ProposalsRequest | ReplacementRequest | FormsRequest
    ? ProposalsAnswer
    : R extends PictureRequest
      ? PictureAnswer
      : R extends TranslationRequest
        ? TranslationAnswer
        : NotesAnswer;
/** A defect or a cancelled request comes back as the protocol's failure. */
export type DeskAnswer = ConsultAnswer | ProposalsAnswer | PictureAnswer | NotesAnswer | TranslationAnswer | ErrorAnswer;
export type { Answer, CheckAnswer, ErrorAnswer, ExpandAnswer, FitAnswer, GuardAnswer };
