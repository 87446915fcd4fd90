/** The commands, one table. */
import * as vscode from 'vscode';
import type { ErrorAnswer, GuardAnswer } from '../protocol.ts';
import type { Mode } from '../webview/messages.ts';
import type { Place, Question } from '../worker/desk/types.ts';
import { authorQuery } from './authorQuery.ts';
import { type Consultation, selectionOf } from './consultant.ts';
import { applyChecked, groundOf } from './edits.ts';
import { commentMarks, engineLanguage, isCode, isProse } from './languages.ts';
import type { Pages } from './pages.ts';
import { countsOf, type Problems } from './problems.ts';
import type { PlaceLink, Services } from './services.ts';
import { settingsFor } from './settings.ts';
import { countsText } from './status.ts';
import { testHarness } from './testHarness.ts';
import { checkWorkspace } from './workspaceCheck.ts';
import { plainSymbol, said } from './words.ts';

interface Target {
  readonly document: vscode.TextDocument;
  readonly place: Place;
}
/** What commands work with. */
interface Room {
  readonly services: Services;
  readonly pages: Pages;
  readonly problems: Problems;
}
type Handler = (room: Room, link?: unknown, extra?: unknown) => Promise<unknown>;

const COMMANDS = {
  expandHere: (room, link) => onTarget(link, ({ document, place }) => room.pages.show(document, place)),
  openBeside: (room, link) => onTarget(link, ({ document, place }) => room.pages.showBeside(document, place)),
  replaceCall: (room, link) => onExpression(room, link, 'fit'),
  guard: (room, link) => onExpression(room, link, 'guard'),
  libraryFunction: (room, link) => onTarget(link, (target) => useLibraryFunction(room, target)),
  testHarness: (room, link) => onTarget(link, (target) => writeTestHarness(room, target)),
  checkDocument: (room) => checkDocument(room),
  checkWorkspace: (room) => checkWorkspace(room.services),
  copyQuery: (room) => copyQuery(room),
  addNote: (room, link) => onTarget(link, (target) => addNote(room, target)),
  setSmallQuantity: (room, link) => onTarget(link, (target) => setSmallQuantity(room, target)),
  forgetAnswers: (room) => forgetAnswers(room),
  showLog: async (room) => room.services.log.show(),
  // Behind links and menus only.
  oneTermMore: (room, link, terms) => onTarget(link, ({ document, place }) => room.pages.show(document, place, 'expand', typeof terms === 'number' ? { terms } : {})),
  fillInConstants: (room, link, variable) => onTarget(link, ({ document, place }) => room.pages.show(document, place, 'expand', { constants: 'values', ...(typeof variable === 'string' ? { variable } : {}) })),
  applyProposal: (room, link, kind) => onTarget(link, (target) => applyProposal(room, target, String(kind), link)),
} as const satisfies Readonly<Record<string, Handler>>;

export function registerCommands(room: Room): vscode.Disposable {
  const registered = Object.entries<Handler>(COMMANDS).map(([name, handler]) =>
    vscode.commands.registerCommand(`leadingOrder.${name}`, async (link?: unknown, extra?: unknown) => {
      try {
        return await handler(room, link, extra);
      } catch (error) {
        room.services.log.error(name, error);
        void vscode.window.showErrorMessage(vscode.l10n.t('This did not work; the log says why (command "Show Log").'));
        return undefined;
      }
    }),
  );
  return vscode.Disposable.from(...registered);
}

/** The place in a link, else the selection or cursor of the active editor. Says so in the status bar where there is neither. */
async function onTarget(link: unknown, use: (target: Target) => Promise<unknown>): Promise<unknown> {
  const target = targetOf(link);
  if (target) return use(target);
  say(vscode.l10n.t('Open a file and put the cursor on an expression first.'));
  return undefined;
}

function targetOf(link: unknown): Target | null {
  if (isPlaceLink(link)) {
    const document = vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === link.uri);
    return document ? { document, place: { start: link.start, end: link.end } } : null;
  }
  const editor = vscode.window.activeTextEditor;
  return editor ? { document: editor.document, place: selectionOf(editor.document, editor.selection) } : null;
}

const isPlaceLink = (link: unknown): link is PlaceLink =>
  typeof link === 'object' && link !== null && 'start' in link && 'end' in link && 'uri' in link && typeof link.uri === 'string' && typeof link.start === 'number' && typeof link.end === 'number';

const say = (message: string): void => void vscode.window.setStatusBarMessage(message, 6000);

const consult = (room: Room, { document, place }: Target, chosen: Question = {}): Promise<Consultation> =>
  room.services.status.during(room.services.consultant.consult(document, place, ['reading'], chosen));

/** The forms for code work on exactly one expression: the one found around a cursor. */
async function onExpression(room: Room, link: unknown, mode: Mode): Promise<unknown> {
  return onTarget(link, async (target) => {
    const place = target.place.start === target.place.end ? ((await consult(room, target)).place ?? target.place) : target.place;
    return room.pages.show(target.document, place, mode);
  });
}

async function applyProposal(room: Room, target: Target, kind: string, link: unknown): Promise<unknown> {
  const consultation = await consult(room, target);
  const stale = isPlaceLink(link) && link.version !== target.document.version;
  const proposals = stale ? [] : await room.services.consultant.proposals(target.document, consultation);
  const proposal = proposals.find((candidate) => candidate.kind === kind) ?? proposals[0];
  if (stale) return applyChecked({ uri: target.document.uri.toString(), version: -1, expected: [] }, []);
  if (!proposal) return say(consultation.answer.ok ? vscode.l10n.t('There is nothing to insert here.') : said(consultation.answer.error.message));
  return applyChecked({ ...groundOf(target.document, proposal.edits), version: consultation.version }, proposal.edits);
}

async function setSmallQuantity(room: Room, target: Target): Promise<unknown> {
  const { document } = target;
  const consultation = await consult(room, target);
  const other = { label: vscode.l10n.t('Another symbol…'), value: null };
  const items = consultation.candidates.map((candidate) => ({ label: plainSymbol(candidate), description: candidate === plainSymbol(candidate) ? '' : candidate, value: candidate }));
  const picked = await vscode.window.showQuickPick<{ label: string; description?: string; value: string | null }>([...items, other], {
    title: vscode.l10n.t('Which quantity is small? Remembered for this file.'),
    placeHolder: vscode.l10n.t('Symbols and ratios of this expression'),
  });
  if (!picked) return undefined;
  const variable = picked.value ?? (await vscode.window.showInputBox({ title: vscode.l10n.t('Small quantity, as it is written in the text'), placeHolder: '\\epsilon' }))?.trim();
  if (!variable) return undefined;
  const near = await vscode.window.showQuickPick(
    [
      { label: '0', value: '0' },
      { label: '∞', value: 'inf' },
      { label: '−∞', value: '-inf' },
      { label: vscode.l10n.t('Another point…'), value: null },
    ],
    { title: vscode.l10n.t('Where does {0} tend to?', plainSymbol(variable)) },
  );
  if (!near) return undefined;
  const point = near.value ?? (await vscode.window.showInputBox({ title: vscode.l10n.t('Point, as an exact expression'), placeHolder: 'pi/2' }))?.trim();
  if (!point) return undefined;
  await room.services.memory.remember(document.uri, { variable, point });
  return room.pages.show(document, consultation.place ?? target.place, 'expand', { variable, point });
}

async function forgetAnswers(room: Room): Promise<unknown> {
  const document = vscode.window.activeTextEditor?.document;
  if (!document) return undefined;
  const had = await room.services.memory.forget(document.uri);
  return say(had ? vscode.l10n.t('The answers for this file are forgotten.') : vscode.l10n.t('There were no answers for this file.'));
}

/** A note that states the question as it was understood, on a line of its own above the formula. */
async function addNote(room: Room, target: Target): Promise<unknown> {
  const { document } = target;
  const consultation = await consult(room, target);
  const language = engineLanguage(document);
  const at = lineForNote(document, target.place.start, language);
  const indent = /^\s*/.exec(document.lineAt(at).text)?.[0] ?? '';
  const [open, close] = commentMarks(language);
  const offset = document.offsetAt(new vscode.Position(at, 0));
  const eol = document.eol === vscode.EndOfLine.CRLF ? '\r\n' : '\n';
  const edit = { start: offset, end: offset, text: `${indent}${open}leading-order: ${noteBody(consultation)}${close}${eol}` };
  return applyChecked({ ...groundOf(document, []), version: consultation.version }, [edit]);
}

function noteBody({ asked, answer }: Consultation): string {
  const reading = answer.ok ? answer.reading : undefined;
  const variable = reading?.variable ?? asked.variable ?? 'x';
  const point = reading?.point ?? asked.point ?? '0';
  const subject = point === '0' ? `small ${variable}` : point === 'inf' ? `large ${variable}` : `near ${variable} = ${point}`;
  const interval = asked.interval ? `, on [${asked.interval.join(', ')}]` : '';
  return `${subject}${interval}${asked.tolerance ? `, within ${asked.tolerance}` : ''}`;
}

/** In LaTeX and Markdown a note stands above the whole display, not inside it. */
function lineForNote(document: vscode.TextDocument, offset: number, language: string): number {
  const line = document.positionAt(offset).line;
  if (!isProse(language)) return line;
  for (let above = line; above >= Math.max(0, line - 200); above -= 1) {
    const text = document.lineAt(above).text;
    if (/^\s*(\\begin\{(equation|align|gather|multline|eqnarray|displaymath)\*?\}|\\\[)/.test(text)) return above;
    if (above < line && /(\\end\{|\\\]|^\s*$)/.test(text)) break;
    if (language === 'markdown' && /^\s*\$\$/.test(text)) return above;
  }
  return line;
}

async function useLibraryFunction(room: Room, target: Target): Promise<unknown> {
  const { document } = target;
  const consultation = await consult(room, target);
  const place = consultation.place ?? target.place;
  const { version } = document;
  const language = engineLanguage(document);
  const text = document.getText();
  const reading = consultation.answer.ok ? consultation.answer.reading : undefined;
  const answer: GuardAnswer | ErrorAnswer = await room.services.status.during(
    room.services.client.ask<GuardAnswer>({ ask: 'guard', text, files: await room.services.companions.of({ uri: document.uri, text, language }), selection: place, language, emit: isCode(language) ? language : 'c', ...(reading ? { variable: reading.variable, point: reading.point } : {}), budget_ms: settingsFor(document).budget }),
  );
  if (!answer.ok) return say(said(answer.error.message));
  if (answer.forms.length === 0) return say(vscode.l10n.t('No exact form with library functions is known for this expression.'));
  const { forms, format } = answer;
  const written = await room.services.client.consult({ desk: 'forms', text, language, place, forms: forms.map((form) => form.text), ...(format === undefined ? {} : { format }) });
  const proposals = 'proposals' in written ? written.proposals : [];
  // The bound was proved with products for small powers; a power function or operator in their place is not covered.
  const items = forms.flatMap((form, i) => {
    const proposal = proposals[i];
    if (!proposal || proposal.edits.length === 0) return [];
    return [{ label: proposal.preview, description: /\bpow|\*\*|\^/i.test(proposal.preview) ? '' : vscode.l10n.t('relative error at most {0}', form.bound), detail: form.identities?.join('; ') ?? '', edits: proposal.edits }];
  });
  if (items.length === 0) return say(vscode.l10n.t('No exact form with library functions is known for this expression.'));
  const picked = items.length === 1 ? items[0] : await vscode.window.showQuickPick(items, { title: vscode.l10n.t('Exact forms, best first') });
  if (!picked) return undefined;
  return applyChecked({ ...groundOf(document, picked.edits), version }, picked.edits);
}

async function writeTestHarness(room: Room, target: Target): Promise<unknown> {
  const consultation = await consult(room, target);
  const reading = consultation.answer.ok ? consultation.answer.reading : undefined;
  const translation = reading ? await room.services.client.consult({ desk: 'translation', latex: reading.latex, language: 'c' }) : null;
  const content = testHarness(translation && 'code' in translation ? translation.code : null, consultation);
  if (content === null) return say(consultation.answer.ok ? vscode.l10n.t('A test harness needs one variable, rational coefficients and an interval with decimal ends.') : said(consultation.answer.error.message));
  const opened = await vscode.workspace.openTextDocument({ language: 'c', content });
  return vscode.window.showTextDocument(opened, vscode.ViewColumn.Beside);
}

async function checkDocument(room: Room): Promise<unknown> {
  const document = vscode.window.activeTextEditor?.document;
  if (!document) return say(vscode.l10n.t('Open a file and put the cursor on an expression first.'));
  const answer = await room.problems.check(document);
  if (!answer) return say(vscode.l10n.t('The check did not finish; try again.'));
  const counts = countsOf(answer);
  say(countsText(counts));
  await room.pages.showClaims(document, answer);
  return counts;
}

async function copyQuery(room: Room): Promise<unknown> {
  const editor = vscode.window.activeTextEditor;
  if (!editor) return undefined;
  const { document } = editor;
  if (!room.problems.current(document)) await room.problems.check(document);
  const findings = room.problems.current(document) ?? [];
  const failing = findings.filter((finding) => finding.verdict === 'fails');
  const at = document.offsetAt(editor.selection.active);
  const here = failing.filter((finding) => finding.claim.start <= at && at <= finding.claim.end);
  const wanted = here.length > 0 ? here : failing;
  if (wanted.length === 0) return say(vscode.l10n.t('No claim of this document fails.'));
  await vscode.env.clipboard.writeText(authorQuery(document, wanted));
  return say(vscode.l10n.t('Copied {0} queries.', wanted.length));
}
