/** Problems from checking printed expansions, and from notes that cannot be read. Old ones stay until the new ones are ready. */
import * as vscode from 'vscode';
import type { CheckAnswer, Finding } from '../protocol.ts';
import type { NoteReading } from '../worker/desk/types.ts';
import { rangeOf } from './edits.ts';
import { checkImplementations } from './implementations.ts';
import { engineLanguage, serves } from './languages.ts';
import type { Services } from './services.ts';
import { type Settings, settingsFor } from './settings.ts';
import type { Counts } from './status.ts';

const PAUSE_MS = 700;
const SOURCE = 'Leading Order';

/** What the last check found, with the version it is about. */
export interface Checked {
  readonly version: number;
  readonly findings: readonly Finding[];
}

export class Problems implements vscode.Disposable {
  readonly #services: Services;
  readonly #collection = vscode.languages.createDiagnosticCollection('leadingOrder');
  readonly #checked = new Map<string, Checked>();
  readonly #timers = new Map<string, ReturnType<typeof setTimeout>>();
  readonly #running = new Map<string, AbortController>();
  readonly #listeners: vscode.Disposable;

  constructor(services: Services) {
    this.#services = services;
    this.#listeners = vscode.Disposable.from(
      vscode.workspace.onDidOpenTextDocument((document) => this.#later(document, ['typing', 'save'], 0)),
      vscode.workspace.onDidChangeTextDocument(({ document, contentChanges }) => contentChanges.length > 0 && this.#later(document, ['typing'], PAUSE_MS)),
      vscode.workspace.onDidSaveTextDocument((document) => this.#later(document, ['typing', 'save'], 0)),
      vscode.workspace.onDidCloseTextDocument((document) => this.#forget(document.uri)),
    );
    for (const document of vscode.workspace.textDocuments) this.#later(document, ['typing', 'save'], 0);
  }

  /** The findings of the document as it stands; null where it has changed since or was never checked. */
  current(document: vscode.TextDocument): readonly Finding[] | null {
    const checked = this.#checked.get(document.uri.toString());
    return checked && checked.version === document.version ? checked.findings : null;
  }

  /** Checks now, whatever the settings say. Null where the text changed under the check or the check failed. */
  async check(document: vscode.TextDocument): Promise<CheckAnswer | null> {
    const key = document.uri.toString();
    this.#running.get(key)?.abort();
    const abort = new AbortController();
    this.#running.set(key, abort);
    const { version } = document;
    const language = engineLanguage(document);
    const text = document.getText();
    const settings = settingsFor(document);
    const answer = await this.#services.status.during(
      this.#services.client.ask<CheckAnswer>({ ask: 'check', text, language, budget_ms: Math.max(settings.budget, 20_000) }, abort.signal),
    );
    const notes = abort.signal.aborted ? null : await this.#services.client.consult({ desk: 'notes', text, language }, abort.signal);
    const read = notes && 'notes' in notes ? notes.notes : [];
    const against = abort.signal.aborted ? [] : await checkImplementations(this.#services, document, read, abort.signal);
    if (this.#running.get(key) === abort) this.#running.delete(key);
    if (abort.signal.aborted || document.isClosed || document.version !== version) return null;
    const unreadable = read.filter((note) => note.problem !== null);
    const others = [...unreadable.map((note) => noteProblem(document, note)), ...against];
    if (!answer.ok) {
      this.#services.log.info(`check of ${document.uri.path}: ${answer.error.message}`);
      this.#collection.set(document.uri, others);
      return null;
    }
    this.#checked.set(key, { version, findings: answer.findings });
    this.#collection.set(document.uri, [...answer.findings.flatMap((finding) => claimProblem(document, finding, settings)), ...others]);
    this.#services.status.count(document.uri, countsOf(answer));
    return answer;
  }

  dispose(): void {
    this.#listeners.dispose();
    this.#collection.dispose();
    for (const timer of this.#timers.values()) clearTimeout(timer);
    for (const abort of this.#running.values()) abort.abort();
  }

  #later(document: vscode.TextDocument, when: readonly Settings['check'][], pause: number): void {
    if (!serves(document) || !when.includes(settingsFor(document).check)) return;
    const key = document.uri.toString();
    clearTimeout(this.#timers.get(key));
    this.#timers.set(
      key,
      setTimeout(() => {
        this.#timers.delete(key);
        if (!document.isClosed && mayHoldClaims(document)) void this.check(document).catch((error: unknown) => this.#services.log.error('check', error));
      }, pause),
    );
  }

  #forget(uri: vscode.Uri): void {
    const key = uri.toString();
    clearTimeout(this.#timers.get(key));
    this.#running.get(key)?.abort();
    this.#timers.delete(key);
    this.#running.delete(key);
    this.#checked.delete(key);
    this.#collection.delete(uri);
    this.#services.status.count(uri, null);
  }
}

/** A file without any sign of an expansion never starts the engine. */
const mayHoldClaims = (document: vscode.TextDocument): boolean => /\\[a-z]*frac|\\approx|\\sim|\\simeq|O\s*[({\\]|\\d?dots|\.\.\.|≈|leading-order:|\*\s*x|\^/i.test(document.getText());

export function countsOf(answer: CheckAnswer): Counts {
  const of = (verdict: Finding['verdict']): number => answer.findings.filter((finding) => finding.verdict === verdict).length;
  return { claims: answer.findings.length, hold: of('holds'), fail: of('fails'), undecided: of('undecided'), unread: answer.unread.length };
}

function claimProblem(document: vscode.TextDocument, finding: Finding, settings: Settings): vscode.Diagnostic[] {
  if (finding.severity === 'none') return [];
  const fails = finding.verdict === 'fails';
  const problem = new vscode.Diagnostic(rangeOf(document, finding.start, finding.end), finding.reason, fails ? settings.severity : vscode.DiagnosticSeverity.Hint);
  problem.source = SOURCE;
  problem.code = fails ? 'fails' : finding.verdict === 'undecided' ? 'undecided' : 'hint';
  return [problem];
}

function noteProblem(document: vscode.TextDocument, note: NoteReading): vscode.Diagnostic {
  const problem = new vscode.Diagnostic(rangeOf(document, note.start, note.end), note.problem ?? '', vscode.DiagnosticSeverity.Warning);
  problem.source = SOURCE;
  problem.code = 'note';
  return problem;
}
