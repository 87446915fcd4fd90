/** The hover: what is expanded and why, one line of Unicode, a small table, the typeset formula, and links. */
import * as vscode from 'vscode';
import type { ExpandAnswer } from '../protocol.ts';
import { constantsText, shortened } from '../webview/figures.ts';
import type { Place } from '../worker/desk/types.ts';
import { type Consultation, selectionOf } from './consultant.ts';
import { rangeOf } from './edits.ts';
import { engineLanguage, isCode, SELECTOR } from './languages.ts';
import { commandLink, escapeMarkdown, table } from './markdown.ts';
import type { PlaceLink, Services } from './services.ts';
import { settingsFor } from './settings.ts';
import { limitText, plainSymbol, said, saidEach, sourcesText } from './words.ts';

const DEADLINE_MS = 300;
const PICTURE_DEADLINE_MS = 150;
/** The table comes right behind the expansion; a hover without it would stay without it until it is opened again. */
const TABLE_GRACE_MS = 120;
/** The first picture waits for the typesetter's fonts. */
const FIRST_PICTURE_DEADLINE_MS = 500;
const PICTURE_WIDTH = 480;
const LONGEST_LINE = 600;

/** What has come of the promise after so many milliseconds; null where nothing has. */
const within = <T>(ms: number, work: Promise<T>): Promise<T | null> => Promise.race([work, new Promise<null>((resolve) => setTimeout(() => resolve(null), Math.max(0, ms)))]);

let drawnBefore = false;

export function registerHover(services: Services): vscode.Disposable {
  /** Finished hovers, as long as their answers are remembered. */
  const finished = new WeakMap<Consultation, Map<string, vscode.Hover>>();
  return vscode.languages.registerHoverProvider(SELECTOR, {
    provideHover: async (document, position, token) => {
      const began = performance.now();
      const settings = settingsFor(document);
      if (settings.hover === 'off') return null;
      const selected = selectionAt(document, position);
      if (!selected && isCode(engineLanguage(document)) && !mayHoldCall(document.lineAt(position.line).text)) return null;
      const place = selected ?? selectionOf(document, new vscode.Range(position, position));
      const left = (): number => DEADLINE_MS - (performance.now() - began);
      const asking = services.consultant.consult(document, place, ['reading'], {}, token);
      const table = tableOf(services, document, place, token);
      // A text is asked about for its mathematics: the table is begun behind the expansion, before that has come back; with an interval there is none.
      if ((selected || !isCode(engineLanguage(document))) && !NOTED_INTERVAL.test(document.getText())) table.begin();
      const first = await within(left(), asking);
      if (token.isCancellationRequested) return null;
      if (!first) return selected || !isCode(engineLanguage(document)) ? new vscode.Hover(stillComputing(document, place)) : null;
      const style = JSON.stringify([selected !== null, settings.hover, vscode.window.activeColorTheme.kind]);
      const known = finished.get(first)?.get(style);
      if (known) return known;
      const { answer } = first;
      const saysMore = answer.ok && (selected !== null || first.worthwhile);
      const tabled = saysMore && !answer.exact && !first.asked.interval;
      if (tabled) table.begin();
      else table.drop();
      // The picture does not wait for the table, nor the expansion for either.
      const picture = saysMore && settings.hover === 'picture' ? within(drawnBefore ? PICTURE_DEADLINE_MS : FIRST_PICTURE_DEADLINE_MS, drawn(services, answer)) : null;
      const made = await picture;
      drawnBefore ||= made !== null;
      const full = tabled ? await within(Math.max(left(), TABLE_GRACE_MS), table.begin()) : first;
      if (token.isCancellationRequested) return null;
      const hover = render(document, full ?? first, selected !== null, made);
      if (hover && full && (made || !picture)) finished.set(first, (finished.get(first) ?? new Map<string, vscode.Hover>()).set(style, hover));
      return hover;
    },
  });
}

/** The expansion with its reach, asked for once and withdrawn where it turns out not to be shown. */
function tableOf(services: Services, document: vscode.TextDocument, place: Place, token: vscode.CancellationToken): { begin(): Promise<Consultation>; drop(): void } {
  const source = new vscode.CancellationTokenSource();
  token.onCancellationRequested(() => source.cancel());
  let asked: Promise<Consultation> | null = null;
  return {
    begin: () => (asked ??= services.consultant.consult(document, place, ['reading', 'reach'], {}, source.token)),
    drop: () => source.cancel(),
  };
}

/** The active editor's selection, where it holds the position: a hover is told a position only. */
function selectionAt(document: vscode.TextDocument, position: vscode.Position): Place | null {
  const editor = vscode.window.activeTextEditor;
  if (editor?.document !== document || editor.selection.isEmpty || !editor.selection.contains(position)) return null;
  return selectionOf(document, editor.selection);
}

/** A note with an interval, `on` some numbers. */
const NOTED_INTERVAL = /leading-order:[^\n]*\bon\b/;

/** Cheap look before the engine is asked: a call or a quotient on the line. Plain arithmetic never opens a hover in code. */
const mayHoldCall = (line: string): boolean => /[A-Za-z_]\w*\s*\(|\/|\*\*|\^/.test(line);

function stillComputing(document: vscode.TextDocument, place: Place): vscode.MarkdownString {
  const text = trusted();
  text.appendMarkdown(`${escapeMarkdown(vscode.l10n.t('Still computing.'))} ${commandLink(vscode.l10n.t('Open the Expansion page'), 'leadingOrder.expandHere', [linkTo(document, place)])}`);
  return text;
}

const COMMANDS = ['leadingOrder.expandHere', 'leadingOrder.setSmallQuantity', 'leadingOrder.oneTermMore', 'leadingOrder.fillInConstants', 'leadingOrder.applyProposal', 'leadingOrder.addNote'];
function trusted(): vscode.MarkdownString {
  const text = new vscode.MarkdownString();
  text.isTrusted = { enabledCommands: COMMANDS };
  return text;
}
const linkTo = (document: vscode.TextDocument, place: Place): PlaceLink => ({ uri: document.uri.toString(), version: document.version, start: place.start, end: place.end });

function render(document: vscode.TextDocument, consultation: Consultation, selected: boolean, picture: vscode.MarkdownString | null): vscode.Hover | null {
  const { answer, place } = consultation;
  if (document.version !== consultation.version) return null;
  if (!answer.ok) {
    const quiet = answer.error.code === 'unreadable' || answer.error.code === 'unknown-function' || answer.error.code === 'bad-request';
    if (!selected && (quiet || !place) && !(consultation.candidates.length > 1)) return null;
    const text = trusted();
    text.appendMarkdown(escapeMarkdown(said(answer.error.message)));
    const link = linkTo(document, place ?? consultation.selection);
    const links = [consultation.candidates.length > 1 ? commandLink(vscode.l10n.t('Set the small quantity'), 'leadingOrder.setSmallQuantity', [link]) : '', commandLink(vscode.l10n.t('Open the Expansion page'), 'leadingOrder.expandHere', [link])];
    text.appendMarkdown(`\n\n${links.filter(Boolean).join(' · ')}`);
    return new vscode.Hover(text, place ? rangeOf(document, place.start, place.end) : undefined);
  }
  if (!selected && !consultation.worthwhile) return null;
  const link = linkTo(document, place ?? consultation.selection);
  const head = trusted();
  head.appendMarkdown(`${headline(consultation, answer)} · ${commandLink(vscode.l10n.t('change'), 'leadingOrder.setSmallQuantity', [link])}`);
  head.appendMarkdown(`\n\n${escapeMarkdown(answer.text.length > LONGEST_LINE ? `${answer.text.slice(0, LONGEST_LINE)} …` : answer.text)}`);
  if (answer.left) head.appendMarkdown(`\n\n${escapeMarkdown(vscode.l10n.t('From the left: {0}', answer.left.text))}`);
  head.appendMarkdown(`\n\n${figures(answer, consultation)}`);
  if (consultation.unbounded !== undefined) head.appendMarkdown(`\n\n${escapeMarkdown(saidEach(consultation.unbounded))}`);
  const foot = trusted();
  foot.appendMarkdown(links(link, answer));
  const contents = picture ? [head, picture, foot] : [head, foot];
  return new vscode.Hover(contents, place ? rangeOf(document, place.start, place.end) : undefined);
}

function headline(consultation: Consultation, answer: ExpandAnswer): string {
  const { reading } = answer;
  const { asked, sources } = consultation;
  if (answer.value) return `**${escapeMarkdown(vscode.l10n.t('definite integral'))}**`;
  const small = asked.small && asked.small.length > 0 ? vscode.l10n.t('small {0}', asked.small.map(plainSymbol).join(', ')) : null;
  const limit = small ?? limitText(reading?.variableLatex ?? asked.variable ?? '', reading?.point ?? asked.point ?? '0', reading?.side ?? asked.side ?? 'both');
  return `**${escapeMarkdown(limit)}** ${escapeMarkdown(`(${sourcesText(sources, small ? ['small'] : ['variable', 'point'])})`)}`;
}

/** One table: with an interval the remainder's order, its bound and the terms needed; without one how far 2, 3 and 4 terms reach. */
function figures(answer: ExpandAnswer, { asked }: Consultation): string {
  if (answer.value) return escapeMarkdown(vscode.l10n.t('The value lies between {0} and {1}.', answer.value.low, answer.value.high));
  if (answer.exact) return escapeMarkdown(vscode.l10n.t('The sum is exact: nothing is left out.'));
  const tolerance = asked.tolerance ?? '';
  if (asked.interval && (answer.bound || answer.needed)) {
    const [from, to] = asked.interval.map(minus);
    const rows: (readonly [string, string])[] = [];
    if (answer.bound) rows.push([vscode.l10n.t('proven bound on [{0}, {1}]', from ?? '', to ?? ''), boundText(answer)]);
    if (answer.needed) rows.push([vscode.l10n.t('terms needed for {0}', tolerance), neededText(answer)]);
    return table(
      [cell(vscode.l10n.t('terms')), String(answer.terms.length)],
      rows.map((row) => row.map(cell)),
    );
  }
  const { reach } = answer;
  if (!reach || reach.length === 0) return '';
  return table(
    [cell(vscode.l10n.t('terms')), ...reach.map((row) => cell(String(row.terms)))],
    [
      [cell(vscode.l10n.t('left out')), ...reach.map((row) => cell(row.order))],
      [cell(vscode.l10n.t('error proven ≤ {0} within', tolerance)), ...reach.map((row) => cell(row.distance === null ? '–' : row.distance === 'inf' ? '∞' : shortened(row.distance, 'below')))],
    ],
  );
}

/** The hover gives its table no room between columns. */
const cell = (text: string): string => `${escapeMarkdown(text)}\u2003`;

function boundText({ bound }: ExpandAnswer): string {
  if (!bound) return '–';
  if (bound.value === null) return vscode.l10n.t('none: unbounded at {0}', bound.place ?? '?');
  const value = shortened(bound.value, 'above');
  return bound.factor ? `${value} · ${bound.factor}` : value;
}
const minus = (end: string): string => end.replaceAll('-', '−');

function neededText(answer: ExpandAnswer): string {
  const { needed } = answer;
  if (!needed) return '–';
  if (needed.terms !== null) return needed.bound ? `${needed.terms} (${vscode.l10n.t('bound {0}', shortened(needed.bound, 'above'))})` : String(needed.terms);
  const reach = needed.reach ? ` ${vscode.l10n.t('It can be kept up to a distance of {0}.', shortened(needed.reach.distance, 'below'))}` : '';
  return `${vscode.l10n.t('no number of terms does: {0}', saidEach(needed.reason ?? ''))}${reach}`;
}

function links(link: PlaceLink, answer: ExpandAnswer): string {
  return [
    commandLink(vscode.l10n.t('Insert'), 'leadingOrder.applyProposal', [link, 'after']),
    answer.exact ? '' : commandLink(vscode.l10n.t('one term more'), 'leadingOrder.oneTermMore', [link, answer.terms.length + 1]),
    constantsLink(link, answer),
    commandLink(vscode.l10n.t('Expansion page'), 'leadingOrder.expandHere', [link]),
    commandLink(vscode.l10n.t('add a note'), 'leadingOrder.addNote', [link]),
  ]
    .filter(Boolean)
    .join(' · ');
}

/** Constants that the code defines beside the expression stand as symbols; the link puts their values in. */
function constantsLink(link: PlaceLink, { reading }: ExpandAnswer): string {
  const kept = reading?.constants?.filter(({ filled }) => !filled) ?? [];
  return kept.length === 0 ? '' : commandLink(vscode.l10n.t('fill in {0}', constantsText(kept)), 'leadingOrder.fillInConstants', [link, reading?.variable]);
}

/** Ink by the kind of theme: an image cannot see the theme's colours. */
function inkOf(kind: vscode.ColorThemeKind): string {
  switch (kind) {
    case vscode.ColorThemeKind.Light:
      return '#1f1f1f';
    case vscode.ColorThemeKind.HighContrast:
      return '#ffffff';
    case vscode.ColorThemeKind.HighContrastLight:
      return '#292929';
    default:
      return '#cccccc';
  }
}

async function drawn(services: Services, answer: ExpandAnswer): Promise<vscode.MarkdownString | null> {
  const latex = answer.equation ?? (answer.reading ? `${answer.reading.latex} = ${answer.latex}` : answer.latex);
  const made = await services.client.consult({ desk: 'picture', latex, ink: inkOf(vscode.window.activeColorTheme.kind), width: PICTURE_WIDTH, size: 15 });
  if (!('uri' in made) || made.uri === null) return null;
  return new vscode.MarkdownString(`![${escapeMarkdown(answer.text).slice(0, 300)}](${made.uri})`);
}
