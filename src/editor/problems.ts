/** Problems from checking printed expansions, and from notes that cannot be read. Old ones stay until the new ones are ready. */
import * as vscode from 'vscode';
import type { CheckAnswer, Finding } from '../protocol.ts';
import type { NoteReading } from '../worker/desk/types.ts';
import { CheckSchedule } from './checkSchedule.ts';
import { rangeOf } from './edits.ts';
import { checkImplementations } from './implementations.ts';
import { engineLanguage, serves } from './languages.ts';
import type { Services } from './services.ts';
import { type Settings, settingsFor } from './settings.ts';
import type { Counts } from './status.ts';
import { said } from './words.ts';

const SOURCE = 'Leading Order';

/** What the last check found, with the version it is about. */
export interface Checked {
  readonly version: number;
  readonly findings: readonly Finding[];
}

/** The check under way of a document; there is at most one. */
interface Running {
  readonly abort: AbortController;
  readonly version: number;
  readonly answer: Promise<CheckAnswer | null>;
}

export class Problems implements vscode.Disposable {
  readonly #services: Services;
  readonly #collection = vscode.languages.createDiagnosticCollection('leadingOrder');
  readonly #checked = new Map<string, Checked>();
  readonly #schedule: CheckSchedule<vscode.TextDocument>;
  readonly #saved = new WeakSet<vscode.TextDocument>();
  readonly #running = new Map<string, Running>();
  readonly #listeners: vscode.Disposable;

  constructor(services: Services) {
    this.#services = services;
    this.#schedule = new CheckSchedule({
      // The offset of the end is kept by the editor; the text would have to be put together.
      sizeOf: (document) => (document.isClosed ? 0 : document.offsetAt(document.lineAt(document.lineCount - 1).range.end)),
      begin: (document) => this.#begin(document),
      withdraw: (document) => this.#running.get(document.uri.toString())?.abort.abort(),
    });
    this.#listeners = vscode.Disposable.from(
      vscode.workspace.onDidOpenTextDocument((document) => this.#soon(document)),
      vscode.workspace.onDidChangeTextDocument(({ document, contentChanges }) => contentChanges.length > 0 && this.#schedule.changed(document)),
      vscode.workspace.onDidSaveTextDocument((document) => this.#soon(document)),
      vscode.workspace.onDidCloseTextDocument((document) => this.#forget(document)),
      services.companions.onDidChange((owners) => {
        for (const document of vscode.workspace.textDocuments) if (owners.includes(document.uri.toString())) this.#schedule.changed(document);
      }),
    );
    for (const document of vscode.workspace.textDocuments) this.#soon(document);
  }

  /** The findings of the document as it stands; null where it has changed since or was never checked. */
  current(document: vscode.TextDocument): readonly Finding[] | null {
    const checked = this.#checked.get(document.uri.toString());
    return checked && checked.version === document.version ? checked.findings : null;
  }

  /** Checks now, whatever the settings say. Null where the text changed under the check or the check failed. */
  check(document: vscode.TextDocument): Promise<CheckAnswer | null> {
    const key = document.uri.toString();
    const { version } = document;
    const running = this.#running.get(key);
    if (running && running.version === version && !running.abort.signal.aborted) return running.answer;
    running?.abort.abort();
    const abort = new AbortController();
    const answer = this.#checkNow(document, version, abort).finally(() => {
      if (this.#running.get(key)?.abort === abort) this.#running.delete(key);
    });
    this.#running.set(key, { abort, version, answer });
    return answer;
  }

  async #checkNow(document: vscode.TextDocument, version: number, abort: AbortController): Promise<CheckAnswer | null> {
    const language = engineLanguage(document);
    const text = document.getText();
    const settings = settingsFor(document);
    const { client, companions, status } = this.#services;
    const asking = companions.of({ uri: document.uri, text, language }).then((files) => client.ask<CheckAnswer>({ ask: 'check', text, language, files, budget_ms: Math.max(settings.budget, 20_000) }, abort.signal));
    const answer = await status.during(asking);
    const notes = abort.signal.aborted ? null : await this.#services.client.consult({ desk: 'notes', text, language }, abort.signal);
    const read = notes && 'notes' in notes ? notes.notes : [];
    const against = abort.signal.aborted ? [] : await checkImplementations(this.#services, document, read, abort.signal);
    if (abort.signal.aborted || document.isClosed || document.version !== version) return null;
    const unreadable = read.filter((note) => note.problem !== null);
    const others = [...unreadable.map((note) => noteProblem(document, note)), ...against];
    if (!answer.ok) {
      this.#services.log.info(`check of ${document.uri.path}: ${answer.error.message}`);
      this.#collection.set(document.uri, others);
      return null;
    }
    this.#checked.set(document.uri.toString(), { version, findings: answer.findings });
    this.#collection.set(document.uri, [...answer.findings.flatMap((finding) => claimProblem(document, finding, settings)), ...others]);
    this.#services.status.count(document.uri, countsOf(answer));
    return answer;
  }

  dispose(): void {
    this.#listeners.dispose();
    this.#collection.dispose();
    this.#schedule.dispose();
    for (const { abort } of this.#running.values()) abort.abort();
  }

  /** Opened or saved. */
  #soon(document: vscode.TextDocument): void {
    this.#saved.add(document);
    this.#schedule.soon(document);
  }

  /** The pause is over: only now the settings and the text are looked at. */
  #begin(document: vscode.TextDocument): void {
    const saved = this.#saved.delete(document);
    if (document.isClosed || !serves(document)) return;
    const { check } = settingsFor(document);
    if (check === 'command' || (check === 'save' && !saved) || !mayHoldClaims(document)) return;
    void this.check(document).catch((error: unknown) => this.#services.log.error('check', error));
  }

  #forget(document: vscode.TextDocument): void {
    const { uri } = document;
    const key = uri.toString();
    this.#schedule.forget(document);
    this.#saved.delete(document);
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
  const problem = new vscode.Diagnostic(rangeOf(document, finding.start, finding.end), said(finding.reason), fails ? settings.severity : vscode.DiagnosticSeverity.Hint);
  problem.source = SOURCE;
  problem.code = fails ? 'fails' : finding.verdict === 'undecided' ? 'undecided' : 'hint';
  return [problem];
}

function noteProblem(document: vscode.TextDocument, note: NoteReading): vscode.Diagnostic {
  const problem = new vscode.Diagnostic(rangeOf(document, note.start, note.end), said(note.problem ?? ''), vscode.DiagnosticSeverity.Warning);
  problem.source = SOURCE;
  problem.code = 'note';
  return problem;
}
