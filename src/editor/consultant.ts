/** Puts questions about places in documents to the worker, remembers recent answers and says whether they are still about the present text. */
import * as vscode from 'vscode';
import type { Detail, ErrorAnswer } from '../protocol.ts';
import type { EngineClient } from '../worker/client.ts';
import type { ConsultAnswer, Place, Proposal, ProposalsRequest, Question } from '../worker/desk/types.ts';
import type { Companions } from './companions.ts';
import { engineLanguage } from './languages.ts';
import type { Memory } from './memory.ts';
import { type Settings, settingsFor } from './settings.ts';

/** An answer together with the state of the document that it is about. */
export interface Consultation extends ConsultAnswer {
  readonly uri: string;
  readonly version: number;
  readonly selection: Place;
  readonly language: string;
}

const REMEMBERED = 60;
/** A cancelled question is let run this long, since its answer is kept and asking again would start over. */
const MERCY_MS = 1500;

export class Consultant {
  readonly #client: EngineClient;
  readonly #memory: Memory;
  readonly #companions: Companions;
  readonly #recent = new Map<string, { readonly promise: Promise<Consultation>; done: Consultation | null }>();

  constructor(client: EngineClient, memory: Memory, companions: Companions) {
    this.#companions = companions;
    this.#client = client;
    this.#memory = memory;
  }

  /** The answer if it is known already; never starts the engine. */
  known(document: vscode.TextDocument, selection: Place, details: readonly Detail[], chosen: Question = {}): Consultation | null {
    return this.#recent.get(this.#key(document, selection, details, chosen, settingsFor(document)))?.done ?? null;
  }

  consult(document: vscode.TextDocument, selection: Place, details: readonly Detail[], chosen: Question = {}, token?: vscode.CancellationToken): Promise<Consultation> {
    const settings = settingsFor(document);
    const key = this.#key(document, selection, details, chosen, settings);
    const known = this.#recent.get(key);
    if (known) return known.promise;
    const { version } = document;
    const uri = document.uri.toString();
    const language = engineLanguage(document);
    const abort = new AbortController();
    const cancelling = token?.onCancellationRequested(() => setTimeout(() => abort.abort(), MERCY_MS));
    const small = settings.smallQuantities;
    const request = {
      desk: 'consult',
      text: document.getText(),
      language,
      selection,
      chosen,
      remembered: this.#memory.recall(document.uri),
      setting: { ...settings.question, ...(small.length > 0 ? { small } : {}) },
      details,
      budget_ms: settings.budget,
    } as const;
    const companions = this.#companions.of({ uri: document.uri, text: request.text, language });
    const asking = companions.then((files) => this.#client.consult({ ...request, files }, abort.signal));
    const promise = asking.then((answer): Consultation => {
      cancelling?.dispose();
      const told: ConsultAnswer = 'answer' in answer ? answer : { answer, asked: {}, sources: {}, place: null, candidates: [], worthwhile: true };
      const consultation = { ...told, uri, version, selection, language };
      // What ran out of time or was cancelled may succeed the next time.
      if (!told.answer.ok && told.answer.error.code === 'over-budget') this.#recent.delete(key);
      else entry.done = consultation;
      return consultation;
    });
    const entry: { readonly promise: Promise<Consultation>; done: Consultation | null } = { promise, done: null };
    this.#recent.set(key, entry);
    if (this.#recent.size > REMEMBERED) this.#recent.delete(this.#recent.keys().next().value ?? '');
    return promise;
  }

  async proposals(document: vscode.TextDocument, consultation: Consultation): Promise<readonly Proposal[]> {
    if (!consultation.answer.ok || !consultation.place || document.version !== consultation.version) return [];
    const request: ProposalsRequest = {
      desk: 'proposals',
      text: document.getText(),
      language: consultation.language,
      place: consultation.place,
      answer: consultation.answer,
      orderStyle: settingsFor(document).orderTerm,
    };
    const answer: { readonly proposals: readonly Proposal[] } | ErrorAnswer = await this.#client.consult(request);
    return 'proposals' in answer ? answer.proposals : [];
  }

  #key(document: vscode.TextDocument, selection: Place, details: readonly Detail[], chosen: Question, settings: Settings): string {
    return JSON.stringify([document.uri.toString(), document.version, document.languageId, selection, details, chosen, this.#memory.generation, this.#companions.generation, settings.question, settings.smallQuantities]);
  }
}

export const selectionOf = (document: vscode.TextDocument, range: vscode.Range): Place => ({ start: document.offsetAt(range.start), end: document.offsetAt(range.end) });
