/** One Expansion page: what it is about, what it shows, and what its buttons do. The view and the editor tab are both such pages. */
import * as vscode from 'vscode';
import type { CheckAnswer, Detail, FitAnswer, GuardAnswer } from '../protocol.ts';
import type { CodeControls, CopyKind, FromPage, Kept, Mode, PageState, Shown, ToPage } from '../webview/messages.ts';
import type { Place, Proposal, ProposalKind, Question, TextEdit } from '../worker/desk/types.ts';
import { proposalTitle } from './actions.ts';
import { type Consultation, selectionOf } from './consultant.ts';
import { applyChecked, groundOf, rangeOf, sayMovedOn } from './edits.ts';
import { engineLanguage, isCode, serves } from './languages.ts';
import { claimsPage } from './pageClaims.ts';
import { argumentsOf, EMPTY_FORM, emptyForm, type FormMode, formRequest, prefilled, renewed } from './pageForms.ts';
import { type Focus, movedAlong, placeAgain, type Remembered, withRemembered } from './pageHistory.ts';
import { codeSaid, copied, expansionSaid } from './pageSaid.ts';
import type { Services } from './services.ts';
import { said, saidEach, shorten, sourceName } from './words.ts';

const DETAILS: readonly Detail[] = ['reading', 'ladder', 'reach', 'plot'];
const FOLLOW_PAUSE_MS = 250;
/** Controls that hold for every expression; the others are about one. */
const LASTING: readonly (keyof Question)[] = ['interval', 'tolerance', 'measure'];

export class Page implements vscode.Disposable {
  readonly #services: Services;
  readonly #webview: vscode.Webview;
  readonly #isVisible: () => boolean;
  readonly #check: (document: vscode.TextDocument) => Promise<CheckAnswer | null>;
  readonly #listeners: vscode.Disposable[] = [];
  #claims: readonly Place[] = [];
  #focus: Focus | null = null;
  #chosen: Question = {};
  #mode: Mode = 'expand';
  #controls: CodeControls = EMPTY_FORM;
  #pinned = false;
  #shown: Shown = { kind: 'nothing' };
  #consultation: Consultation | null = null;
  /** The version that the proposals of a form for code rest on. */
  #ground = -1;
  #proposals: readonly Proposal[] = [];
  #history: readonly Remembered[] = [];
  #stale: string | null = null;
  /** The document changed while nobody saw the page; it looks again when it is shown. */
  #outdated = false;
  #busy = 0;
  #turn = 0;
  #abort: AbortController | null = null;
  #timer: ReturnType<typeof setTimeout> | undefined;
  #editTimer: ReturnType<typeof setTimeout> | undefined;
  /** Changes of the document since the page last looked at it. */
  #changes: vscode.TextDocumentContentChangeEvent[] = [];

  constructor(services: Services, webview: vscode.Webview, isVisible: () => boolean, check: (document: vscode.TextDocument) => Promise<CheckAnswer | null>) {
    this.#check = check;
    this.#services = services;
    this.#webview = webview;
    this.#isVisible = isVisible;
    this.#listeners.push(
      webview.onDidReceiveMessage((message: FromPage) => void this.#receive(message).catch((error: unknown) => services.log.error('page', error))),
      vscode.window.onDidChangeTextEditorSelection(({ textEditor }) => this.#follow(textEditor)),
      vscode.workspace.onDidChangeTextDocument((event) => this.#textChanged(event)),
    );
  }

  /** Turns the page to a place. A selection is taken exactly; a cursor finds the expression around it. */
  async show(document: vscode.TextDocument, place: Place, mode: Mode = 'expand', chosen?: Question): Promise<void> {
    const text = document.getText(rangeOf(document, place.start, place.end));
    const same = this.#focus?.uri.toString() === document.uri.toString() && this.#focus.text === text && text !== '';
    const lasting = Object.fromEntries(Object.entries(this.#chosen).filter(([key]) => LASTING.includes(key as keyof Question)));
    this.#chosen = chosen ?? (same ? this.#chosen : lasting);
    clearTimeout(this.#timer);
    this.#turn += 1;
    const fresh = !same || this.#mode === 'expand' || this.#mode === 'claims';
    this.#focus = { uri: document.uri, place, text };
    this.#changes = [];
    this.#mode = mode;
    if ((mode === 'fit' || mode === 'guard') && fresh) await this.#prefill(document, place);
    await this.#refresh();
  }

  /** The form comes at once, without what was said of another expression; what is known about this one follows. */
  async #prefill(document: vscode.TextDocument, place: Place): Promise<void> {
    this.#controls = renewed(this.#controls);
    const { form } = this.#controls;
    this.#shown = emptyForm(this.#formMode, this.#controls);
    this.#proposals = [];
    this.#post();
    const consultation = await this.#services.consultant.consult(document, place, ['reading']);
    if (form === this.#controls.form) this.#controls = prefilled(this.#controls, consultation, this.#focus?.text ?? '');
  }

  get #formMode(): FormMode {
    return this.#mode === 'guard' ? 'guard' : 'fit';
  }

  /** Turns the page to all claims of a document, as a check found them. */
  showClaims(document: vscode.TextDocument, answer: CheckAnswer): void {
    this.#turn += 1;
    this.#mode = 'claims';
    this.#stale = null;
    this.#consultation = null;
    this.#ground = document.version;
    this.#focus ??= { uri: document.uri, place: { start: 0, end: 0 }, text: '' };
    if (this.#focus.uri.toString() !== document.uri.toString()) this.#focus = { uri: document.uri, place: { start: 0, end: 0 }, text: '' };
    const { places, proposals, shown } = claimsPage(document, answer);
    this.#claims = places;
    this.#proposals = proposals;
    this.#shown = shown;
    this.#post();
  }

  async choose(question: Question): Promise<void> {
    const merged = Object.entries({ ...this.#chosen, ...question }).filter(([, value]) => value !== '' && value !== null && value !== undefined);
    this.#chosen = Object.fromEntries(merged.filter(([key]) => !(key === 'order' && 'terms' in question)));
    const document = this.#document();
    if (document && (question.variable || question.point)) {
      const settled = Object.fromEntries(Object.entries(question).filter(([key]) => ['variable', 'point', 'side'].includes(key)));
      await this.#services.memory.remember(document.uri, settled);
    }
    await this.#refresh();
  }

  get kept(): Kept | null {
    return this.#focus ? { uri: this.#focus.uri.toString(), start: this.#focus.place.start, end: this.#focus.place.end, mode: this.#mode, pinned: this.#pinned, chosen: this.#chosen } : null;
  }

  dispose(): void {
    clearTimeout(this.#timer);
    clearTimeout(this.#editTimer);
    this.#abort?.abort();
    for (const listener of this.#listeners) listener.dispose();
  }

  async #receive(message: FromPage): Promise<void> {
    switch (message.kind) {
      case 'ready':
        this.#post();
        if (!this.#focus) await this.#begin(message.kept);
        else if (this.#outdated) {
          this.#outdated = false;
          await this.#refresh();
        }
        return;
      case 'choose':
        return this.choose(message.question);
      case 'mode':
        return this.#turnTo(message.mode);
      case 'code':
        if (message.controls.form !== this.#controls.form) return undefined;
        this.#controls = message.controls;
        return this.#refresh();
      case 'apply':
        return this.#apply(message.index);
      case 'copy':
        return this.#copy(message.what);
      case 'pin':
        this.#pinned = message.pinned;
        return this.#post();
      case 'recall':
        return this.#recall(message.index);
      case 'reveal':
        return this.#reveal();
      case 'claim':
        return this.#revealClaim(message.index);
      case 'cancel':
        this.#abort?.abort();
        return undefined;
    }
  }

  async #turnTo(mode: Mode): Promise<void> {
    const document = this.#document();
    const before = this.#mode;
    clearTimeout(this.#timer);
    this.#turn += 1;
    this.#mode = mode;
    if (document && this.#focus && (mode === 'fit' || mode === 'guard') && before !== 'fit' && before !== 'guard') await this.#prefill(document, this.#focus.place);
    await this.#refresh();
  }

  /** After a reload: what was kept; on first sight: the active editor. */
  async #begin(kept: Kept | null): Promise<void> {
    if (kept) {
      const document = vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === kept.uri);
      if (document) {
        this.#pinned = kept.pinned;
        return this.show(document, { start: kept.start, end: kept.end }, kept.mode, kept.chosen);
      }
    }
    const editor = vscode.window.activeTextEditor;
    if (editor && serves(editor.document)) await this.show(editor.document, selectionOf(editor.document, editor.selection));
  }

  #follow(editor: vscode.TextEditor): void {
    if (this.#pinned || this.#mode !== 'expand' || !this.#isVisible() || !serves(editor.document)) return;
    clearTimeout(this.#timer);
    this.#timer = setTimeout(() => void this.#followTo(editor).catch((error: unknown) => this.#services.log.error('page', error)), FOLLOW_PAUSE_MS);
  }

  /** Following the cursor never replaces a result by a complaint. */
  async #followTo(editor: vscode.TextEditor): Promise<void> {
    const { document } = editor;
    const place = selectionOf(document, editor.selection);
    const turn = this.#turn;
    const now = this.#consultation;
    if (now?.place && now.uri === document.uri.toString() && now.version === document.version && editor.selection.isEmpty && now.place.start <= place.start && place.end <= now.place.end) return;
    const tried = await this.#services.consultant.consult(document, place, DETAILS);
    // Whatever was asked for meanwhile (a form for code, another place) goes first.
    if (this.#pinned || turn !== this.#turn || document.version !== tried.version) return;
    if (tried.answer.ok && (tried.worthwhile || !editor.selection.isEmpty)) await this.show(document, editor.selection.isEmpty ? (tried.place ?? place) : place);
  }

  #textChanged({ document, contentChanges }: vscode.TextDocumentChangeEvent): void {
    if (contentChanges.length === 0 || this.#focus?.uri.toString() !== document.uri.toString()) return;
    this.#changes.push(...contentChanges);
    clearTimeout(this.#editTimer);
    this.#editTimer = setTimeout(() => this.#takeChanges(document), FOLLOW_PAUSE_MS);
  }

  #takeChanges(document: vscode.TextDocument): void {
    const focus = this.#focus;
    const changes = this.#changes;
    this.#changes = [];
    if (!focus || document.isClosed) return;
    const place = movedAlong(focus.place, changes);
    if (!place || document.getText(rangeOf(document, place.start, place.end)) !== focus.text) {
      this.#stale = vscode.l10n.t('The text has changed since.');
      this.#proposals = [];
      this.#post();
      return;
    }
    this.#focus = { ...focus, place };
    this.#outdated = !this.#isVisible();
    if (!this.#outdated) void this.#refresh().catch((error: unknown) => this.#services.log.error('page', error));
  }

  async #refresh(): Promise<void> {
    const document = this.#document();
    const focus = this.#focus;
    if (!document || !focus) return this.#post();
    if (this.#mode === 'claims') return this.#recheck(document);
    this.#turn += 1;
    const turn = this.#turn;
    this.#busy += 1;
    this.#abort?.abort();
    this.#abort = new AbortController();
    this.#post();
    try {
      if (this.#mode === 'expand') await this.#expand(document, focus, turn);
      else await this.#computeCode(document, focus, turn, this.#abort.signal);
    } finally {
      this.#busy -= 1;
      this.#post();
    }
  }

  async #recheck(document: vscode.TextDocument): Promise<void> {
    this.#busy += 1;
    this.#post();
    const answer = await this.#check(document).finally(() => {
      this.#busy -= 1;
    });
    if (answer) this.showClaims(document, answer);
    else this.#post();
  }

  async #revealClaim(index: number): Promise<void> {
    const document = this.#document();
    const place = this.#claims[index];
    if (!document || !place || document.version !== this.#ground) return sayMovedOn();
    const editor = await vscode.window.showTextDocument(document, { ...columnOf(document) });
    const range = rangeOf(document, place.start, place.end);
    editor.selection = new vscode.Selection(range.start, range.end);
    editor.revealRange(range, vscode.TextEditorRevealType.InCenterIfOutsideViewport);
  }

  async #expand(document: vscode.TextDocument, focus: Focus, turn: number): Promise<void> {
    const consultation = await this.#services.status.during(this.#services.consultant.consult(document, focus.place, DETAILS, this.#chosen));
    const proposals = await this.#services.consultant.proposals(document, consultation);
    if (turn !== this.#turn || document.version !== consultation.version) return;
    const { answer, asked, sources, candidates, unbounded } = consultation;
    this.#consultation = consultation;
    this.#stale = null;
    this.#proposals = proposals;
    if (!answer.ok) {
      this.#shown = { kind: 'failure', message: said(answer.error.message), candidates, asked };
      return;
    }
    if (consultation.place) this.#focus = { uri: document.uri, place: consultation.place, text: document.getText(rangeOf(document, consultation.place.start, consultation.place.end)) };
    const origins = { variable: sourceName(sources.variable), point: sourceName(sources.point), interval: sourceName(sources.interval), tolerance: sourceName(sources.tolerance), terms: sourceName(sources.terms) };
    this.#shown = { kind: 'expansion', answer: expansionSaid(answer), asked, sources, origins, ...(unbounded === undefined ? {} : { unbounded: saidEach(unbounded) }) };
    if (this.#focus) this.#history = withRemembered(this.#history, this.#focus, answer.text, this.#chosen);
  }

  async #computeCode(document: vscode.TextDocument, focus: Focus, turn: number, signal: AbortSignal): Promise<void> {
    const { version } = document;
    const controls = this.#controls;
    const mode = this.#formMode;
    const { client } = this.#services;
    const request = await formRequest(this.#services, document, focus.place, mode, controls);
    const answer = request === null ? null : await client.ask<FitAnswer | GuardAnswer>(request, signal);
    const proposals = request && answer?.ok ? await client.consult({ desk: 'replacement', text: request.text, language: engineLanguage(document), place: focus.place, code: answer.code, imports: answer.imports ?? [], argument: argumentsOf(answer, controls) }) : null;
    if (turn !== this.#turn || document.version !== version) return;
    this.#stale = null;
    this.#consultation = null;
    this.#ground = version;
    const told = codeSaid(answer);
    this.#shown = mode === 'fit' ? { kind: 'fit', answer: told as Extract<Shown, { kind: 'fit' }>['answer'], controls } : { kind: 'guard', answer: told as Extract<Shown, { kind: 'guard' }>['answer'], controls };
    this.#proposals = proposals && 'proposals' in proposals ? proposals.proposals : [];
  }

  async #apply(index: number): Promise<void> {
    const proposal = this.#proposals[index];
    const document = this.#document();
    if (!proposal || !document || !this.#focus) return;
    const version = this.#consultation?.version ?? this.#ground;
    const edits: readonly TextEdit[] = proposal.edits;
    await applyChecked({ ...groundOf(document, [this.#focus.place, ...edits]), version }, edits);
  }

  async #copy(what: CopyKind): Promise<void> {
    const document = this.#document();
    const text = copied(this.#shown, what, { name: nameOf(document), text: this.#focus?.text ?? '', language: document ? engineLanguage(document) : 'plain' });
    if (text === null) return;
    await vscode.env.clipboard.writeText(text);
    vscode.window.setStatusBarMessage(vscode.l10n.t('Copied: {0}', shorten(firstLine(text), 60)), 4000);
  }

  async #recall(index: number): Promise<void> {
    const entry = this.#history[index];
    if (!entry) return;
    const document = vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === entry.focus.uri.toString());
    if (!document) return;
    const place = placeAgain(document.getText(), entry.focus);
    if (place) await this.show(document, place, 'expand', entry.chosen);
  }

  async #reveal(): Promise<void> {
    const document = this.#document();
    if (!document || !this.#focus) return;
    const editor = await vscode.window.showTextDocument(document, { preserveFocus: false, ...columnOf(document) });
    const range = rangeOf(document, this.#focus.place.start, this.#focus.place.end);
    editor.selection = new vscode.Selection(range.start, range.end);
    editor.revealRange(range, vscode.TextEditorRevealType.InCenterIfOutsideViewport);
  }

  #document(): vscode.TextDocument | null {
    const uri = this.#focus?.uri.toString();
    return vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === uri && !candidate.isClosed) ?? null;
  }

  #post(): void {
    const document = this.#document();
    const line = document && this.#focus ? document.positionAt(this.#focus.place.start).line + 1 : 0;
    const state: PageState = {
      shown: this.#shown,
      busy: this.#busy > 0,
      place: document ? `${nameOf(document)}${this.#mode === 'claims' ? '' : `:${line}`}` : '',
      code: document ? isCode(engineLanguage(document)) : false,
      pinned: this.#pinned,
      stale: this.#stale,
      actions: this.#proposals.map((proposal) => ({ label: this.#mode !== 'expand' && proposal.kind !== 'corrections' && document ? vscode.l10n.t('Replace in {0}', nameOf(document)) : buttonLabel(proposal), title: proposalTitle(proposal) })),
      history: this.#history.slice(1).map(({ label, detail }) => ({ label, detail })),
    };
    const message: ToPage = { kind: 'state', state, kept: this.kept };
    void this.#webview.postMessage(message);
  }
}

const nameOf = (document: vscode.TextDocument | null): string => document?.uri.path.split('/').at(-1) ?? '';

/** The page shows the result itself, so its buttons need only say what is done with it. */
function buttonLabel({ kind }: Proposal): string {
  const labels: Readonly<Record<ProposalKind, string>> = {
    after: vscode.l10n.t('Insert after'),
    row: vscode.l10n.t('Insert as next row'),
    replace: vscode.l10n.t('Replace'),
    polynomial: vscode.l10n.t('Replace by polynomial'),
    comment: vscode.l10n.t('Insert comment above'),
    helper: vscode.l10n.t('Replace by a function'),
    corrections: vscode.l10n.t('Correct all that fail'),
  };
  return labels[kind];
}

const firstLine = (text: string): string => text.split('\n').find((line) => line.trim() !== '')?.trim() ?? '';
const columnOf = (document: vscode.TextDocument): { viewColumn?: vscode.ViewColumn } => {
  const column = vscode.window.visibleTextEditors.find((editor) => editor.document === document)?.viewColumn;
  return column === undefined ? {} : { viewColumn: column };
};
