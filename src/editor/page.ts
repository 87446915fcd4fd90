/** One Expansion page: what it is about, what it shows, and what its buttons do. The view and the editor tab are both such pages. */
import * as vscode from 'vscode';
import type { CheckAnswer, Detail, ErrorAnswer, FitAnswer, FitRequest, GuardAnswer } from '../protocol.ts';
import type { CodeControls, CopyKind, FromPage, HistoryEntry, Kept, Mode, PageState, Shown, ToPage } from '../webview/messages.ts';
import type { Place, Proposal, ProposalKind, Question, TextEdit } from '../worker/desk/types.ts';
import { proposalTitle, withoutOverlap } from './actions.ts';
import { type Consultation, selectionOf } from './consultant.ts';
import { applyChecked, groundOf, rangeOf, sayMovedOn } from './edits.ts';
import { countsOf } from './problems.ts';
import { countsText } from './status.ts';
import { engineLanguage, isCode, serves } from './languages.ts';
import { requestCommand } from './requestCommand.ts';
import type { Services } from './services.ts';
import { settingsFor } from './settings.ts';
import { said, shorten, sourceName } from './words.ts';

const DETAILS: readonly Detail[] = ['reading', 'ladder', 'reach', 'plot'];
const FOLLOW_PAUSE_MS = 250;
/** Fits and guards are asked for by hand and may take longer than a hover. */
const LEAST_CODE_BUDGET_MS = 20_000;
const HISTORY_LENGTH = 12;
/** Controls that hold for every expression; the others are about one. */
const LASTING: readonly (keyof Question)[] = ['interval', 'tolerance', 'measure'];

/** Calls that are fitted in two variables. */
const OF_TWO = /hypot|a(?:rc)?tan2|sqrt/i;

interface Focus {
  readonly uri: vscode.Uri;
  readonly place: Place;
  readonly text: string;
}
interface Remembered extends HistoryEntry {
  readonly focus: Focus;
  readonly chosen: Question;
}

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
  #controls: CodeControls = { form: 0, from: '', to: '', tolerance: '1e-6', measure: 'absolute', format: '', point: '0', variable: '', second: '', secondFrom: '', secondTo: '', reduction: 'auto', words: '', assertion: false };
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

  #emptyForm(): Shown {
    return this.#mode === 'guard' ? { kind: 'guard', answer: null, controls: this.#controls } : { kind: 'fit', answer: null, controls: this.#controls };
  }

  /** What notes, memory and settings say about the expression fills the form; what is not said stays empty. */
  async #prefill(document: vscode.TextDocument, place: Place): Promise<void> {
    // The form comes at once, without what was said of another expression; what is known about this one follows.
    this.#controls = { ...this.#controls, form: this.#controls.form + 1, from: '', to: '', point: '0', variable: '', second: '', secondFrom: '', secondTo: '' };
    const { form } = this.#controls;
    this.#shown = this.#emptyForm();
    this.#proposals = [];
    this.#post();
    const { answer, asked, candidates } = await this.#services.consultant.consult(document, place, ['reading']);
    if (form !== this.#controls.form) return;
    const reading = answer.ok ? answer.reading : undefined;
    const [from, to] = asked.interval ?? ['', ''];
    const [first, other] = candidates;
    const pair = candidates.length === 2 && OF_TWO.test(this.#focus?.text ?? '');
    this.#controls = {
      ...this.#controls,
      from,
      to,
      tolerance: asked.tolerance ?? '1e-6',
      measure: asked.measure ?? 'absolute',
      point: reading?.point ?? asked.point ?? '0',
      variable: reading?.variable ?? asked.variable ?? (candidates.length === 1 || pair ? (first ?? '') : ''),
      second: pair ? (other ?? '') : '',
    };
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
    const text = document.getText();
    this.#claims = answer.findings.map(({ start, end }) => ({ start, end }));
    const fixes = withoutOverlap(answer.findings.flatMap((finding) => (finding.verdict === 'fails' && finding.fix ? [finding.fix] : [])));
    this.#proposals = fixes.length === 0 ? [] : [{ kind: 'corrections', preview: String(fixes.length), edits: fixes }];
    this.#shown = {
      kind: 'claims',
      summary: countsText(countsOf(answer)),
      rows: answer.findings.map((finding) => ({
        line: document.positionAt(finding.start).line + 1,
        label: finding.label ?? '',
        claim: text.slice(finding.claim.start, finding.claim.end).replace(/\s+/g, ' ').trim(),
        verdict: finding.verdict,
        reason: said(finding.reason),
        found: finding.found,
      })),
    };
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
    let { start, end } = focus.place;
    let touched = false;
    for (const { rangeOffset, rangeLength, text } of changes) {
      if (rangeOffset + rangeLength <= start) {
        start += text.length - rangeLength;
        end += text.length - rangeLength;
      } else if (rangeOffset < end) touched = true;
    }
    if (touched || document.getText(rangeOf(document, start, end)) !== focus.text) {
      this.#stale = vscode.l10n.t('The text has changed since.');
      this.#proposals = [];
      this.#post();
      return;
    }
    this.#focus = { ...focus, place: { start, end } };
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
    this.#shown = { kind: 'expansion', answer, asked, sources, origins, ...(unbounded === undefined ? {} : { unbounded: said(unbounded) }) };
    this.#remember(answer.text);
  }

  async #computeCode(document: vscode.TextDocument, focus: Focus, turn: number, signal: AbortSignal): Promise<void> {
    const { version } = document;
    const controls = this.#controls;
    const mode = this.#mode === 'guard' ? 'guard' : 'fit';
    const interval = controls.from !== '' && controls.to !== '' ? ([controls.from, controls.to] as const) : null;
    let answer: FitAnswer | GuardAnswer | ErrorAnswer | null = null;
    const language = engineLanguage(document);
    const settings = settingsFor(document);
    const { place } = focus;
    const text = document.getText();
    const common = {
      text,
      files: await this.#services.companions.of({ uri: document.uri, text, language }),
      selection: place,
      language,
      emit: language === 'plain' || !isCode(language) ? 'c' : language,
      budget_ms: Math.max(settings.budget, LEAST_CODE_BUDGET_MS),
      ...(controls.format === '' ? {} : { format: controls.format }),
      ...(controls.variable === '' ? {} : { variable: controls.variable }),
    } as const;
    if (mode === 'fit' && interval) {
      answer = await this.#services.client.ask<FitAnswer>({ ask: 'fit', ...common, ...fitOptions(controls, interval), form: settings.form, details: ['plot'] }, signal);
    } else if (mode === 'guard') {
      answer = await this.#services.client.ask<GuardAnswer>({ ask: 'guard', ...common, point: controls.point || '0', ...(interval ? { interval } : {}) }, signal);
    }
    const proposals = answer?.ok ? await this.#services.client.consult({ desk: 'replacement', text: common.text, language, place, code: answer.code, imports: answer.imports ?? [], argument: argumentsOf(answer, controls) }) : null;
    if (turn !== this.#turn || document.version !== version) return;
    this.#stale = null;
    this.#consultation = null;
    this.#ground = version;
    if (answer && !answer.ok) answer = { ...answer, error: { ...answer.error, message: said(answer.error.message) } };
    this.#shown = mode === 'fit' ? { kind: 'fit', answer: answer as FitAnswer | ErrorAnswer | null, controls } : { kind: 'guard', answer: answer as GuardAnswer | ErrorAnswer | null, controls };
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
    const shown = this.#shown;
    const text =
      shown.kind === 'expansion'
        ? what === 'latex'
          ? shown.answer.latex
          : what === 'unicode'
            ? shown.answer.text
            : what === 'request'
              ? requestCommand(this.#focus?.text ?? '', engineLanguageOf(this.#document()), shown.asked)
              : shown.answer.numeric.sum
        : shown.kind === 'claims'
          ? claimsReport(this.#document()?.uri.path.split('/').at(-1) ?? '', shown)
          : (shown.kind === 'fit' || shown.kind === 'guard') && shown.answer?.ok
          ? shown.answer.code
          : null;
    if (text === null) return;
    await vscode.env.clipboard.writeText(text);
    vscode.window.setStatusBarMessage(vscode.l10n.t('Copied: {0}', shorten(firstLine(text), 60)), 4000);
  }

  async #recall(index: number): Promise<void> {
    const entry = this.#history[index];
    if (!entry) return;
    const document = vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === entry.focus.uri.toString());
    if (!document) return;
    // The text may have moved: the same words nearest to the old place are meant.
    const start = nearest(document.getText(), entry.focus.text, entry.focus.place.start);
    if (start === null) return;
    await this.show(document, { start, end: start + entry.focus.text.length }, 'expand', entry.chosen);
  }

  async #reveal(): Promise<void> {
    const document = this.#document();
    if (!document || !this.#focus) return;
    const editor = await vscode.window.showTextDocument(document, { preserveFocus: false, ...columnOf(document) });
    const range = rangeOf(document, this.#focus.place.start, this.#focus.place.end);
    editor.selection = new vscode.Selection(range.start, range.end);
    editor.revealRange(range, vscode.TextEditorRevealType.InCenterIfOutsideViewport);
  }

  #remember(label: string): void {
    const focus = this.#focus;
    if (!focus || focus.text === '') return;
    const entry: Remembered = { label: shorten(focus.text.replace(/\s+/g, ' '), 80), detail: shorten(label, 120), focus, chosen: this.#chosen };
    this.#history = [entry, ...this.#history.filter((old) => old.label !== entry.label || old.focus.uri.toString() !== focus.uri.toString())].slice(0, HISTORY_LENGTH);
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
      place: document ? `${document.uri.path.split('/').at(-1) ?? ''}${this.#mode === 'claims' ? '' : `:${line}`}` : '',
      code: document ? isCode(engineLanguage(document)) : false,
      pinned: this.#pinned,
      stale: this.#stale,
      actions: this.#proposals.map((proposal) => ({ label: this.#mode !== 'expand' && proposal.kind !== 'corrections' && document ? vscode.l10n.t('Replace in {0}', document.uri.path.split('/').at(-1) ?? '') : buttonLabel(proposal), title: proposalTitle(proposal) })),
      history: this.#history.slice(1).map(({ label, detail }) => ({ label, detail })),
    };
    const message: ToPage = { kind: 'state', state, kept: this.kept };
    void this.#webview.postMessage(message);
  }
}

/** What the form says beyond the interval, left out where it says nothing. */
function fitOptions({ tolerance, measure, variable, second, secondFrom, secondTo, reduction, words, assertion }: CodeControls, interval: readonly [string, string]): Pick<FitRequest, 'interval' | 'intervals' | 'tolerance' | 'measure' | 'reduction' | 'words' | 'assertion'> {
  return {
    interval,
    tolerance,
    measure,
    ...(second !== '' && secondFrom !== '' && secondTo !== '' ? { intervals: { [variable]: interval, [second]: [secondFrom, secondTo] } } : {}),
    ...(reduction === 'auto' ? {} : { reduction }),
    ...(words === '' ? {} : { words: words === '1' ? 1 : 2 }),
    ...(assertion ? { assertion } : {}),
  };
}

/** What the new function is called with. */
const argumentsOf = (answer: FitAnswer | GuardAnswer, { variable }: CodeControls): string => ('arguments' in answer && answer.arguments ? answer.arguments.join(', ') : variable);

/** Markdown for a review. */
function claimsReport(name: string, { summary, rows }: Extract<Shown, { readonly kind: 'claims' }>): string {
  const cell = (text: string): string => text.replaceAll('|', '\\|').replaceAll('`', "'");
  return [`## ${name}`, summary, ['| line | verdict | claim | reason |', '| --- | --- | --- | --- |', ...rows.map((row) => `| ${row.line} | ${row.verdict} | \`${cell(row.claim)}\` | ${cell(row.reason)} |`)].join('\n')].join('\n\n');
}

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
const engineLanguageOf = (document: vscode.TextDocument | null): string => (document ? engineLanguage(document) : 'plain');
const columnOf = (document: vscode.TextDocument): { viewColumn?: vscode.ViewColumn } => {
  const column = vscode.window.visibleTextEditors.find((editor) => editor.document === document)?.viewColumn;
  return column === undefined ? {} : { viewColumn: column };
};

export function nearest(text: string, wanted: string, around: number): number | null {
  let best: number | null = null;
  for (let at = text.indexOf(wanted); at >= 0; at = text.indexOf(wanted, at + 1)) if (best === null || Math.abs(at - around) < Math.abs(best - around)) best = at;
  return best;
}
