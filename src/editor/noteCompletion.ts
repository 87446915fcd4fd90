/** Completion inside `leading-order:` notes, and the word itself at the start of a comment. */
import * as vscode from 'vscode';
import { SELECTOR } from './languages.ts';

const HEAD = /leading-order:(.*)$/;

export function registerNoteCompletion(): vscode.Disposable {
  return vscode.languages.registerCompletionItemProvider(
    SELECTOR,
    {
      provideCompletionItems: (document, position) => {
        const before = document.lineAt(position.line).text.slice(0, position.character);
        const body = HEAD.exec(before)?.[1];
        if (body === undefined) return atStart(before, position);
        const clause = body.split(/,(?![^[(]*[\])])/).at(-1) ?? '';
        const symbols = symbolsBelow(document, position.line);
        return clauses(symbols, body).flatMap((item) => complete(item, clause, position));
      },
    },
    ':',
    ' ',
    ',',
  );
}

function atStart(before: string, position: vscode.Position): vscode.CompletionItem[] {
  const written = /^\s*(?:%|\/\/|#|!|<!--)\s*([a-z-]*)$/.exec(before)?.[1];
  if (written === undefined || written === '' || !'leading-order:'.startsWith(written)) return [];
  const item = new vscode.CompletionItem('leading-order:', vscode.CompletionItemKind.Keyword);
  item.detail = vscode.l10n.t('says how the next formula is expanded');
  item.insertText = 'leading-order: ';
  item.range = new vscode.Range(position.translate(0, -written.length), position);
  item.command = { command: 'editor.action.triggerSuggest', title: '' };
  return [item];
}

interface Clause {
  readonly label: string;
  readonly snippet: string;
  readonly detail: string;
}

function clauses(symbols: readonly string[], body: string): readonly Clause[] {
  const settled = /\b(small|large|near)\b/.test(body);
  const point = settled
    ? []
    : symbols.flatMap((symbol): Clause[] => [
        { label: `small ${symbol}`, snippet: `small ${escape(symbol)}`, detail: vscode.l10n.t('expands as {0} tends to 0', symbol) },
        { label: `large ${symbol}`, snippet: `large ${escape(symbol)}`, detail: vscode.l10n.t('expands as {0} tends to infinity', symbol) },
        { label: `near ${symbol} = `, snippet: `near ${escape(symbol)} = \${1:1}`, detail: vscode.l10n.t('expands as {0} tends to a point', symbol) },
      ]);
  const rest: readonly Clause[] = [
    { label: 'on |x| <= …', snippet: `on |${escape(symbols[0] ?? 'x')}| <= \${1:0.5}`, detail: vscode.l10n.t('interval on which the remainder is bounded') },
    { label: 'on [a, b]', snippet: 'on [${1:0}, ${2:1/2}]', detail: vscode.l10n.t('interval on which the remainder is bounded') },
    { label: 'within 1e-6', snippet: 'within ${1:1e-6}', detail: vscode.l10n.t('tolerance that the terms are counted for') },
    { label: 'assume a > 0', snippet: 'assume ${1:a > 0}', detail: vscode.l10n.t('an assumption on a parameter') },
    { label: 'skip', snippet: 'skip', detail: vscode.l10n.t('leaves the next formula alone') },
    { label: 'implements eq:…', snippet: 'implements ${1:eq:label}', detail: vscode.l10n.t('names the equation that the next polynomial implements') },
  ];
  return [...point, ...rest];
}

function complete(item: Clause, clause: string, position: vscode.Position): vscode.CompletionItem[] {
  const written = clause.trimStart();
  if (!item.label.startsWith(written)) return [];
  const completion = new vscode.CompletionItem(item.label, vscode.CompletionItemKind.Snippet);
  completion.insertText = new vscode.SnippetString(clause === written && clause === '' ? ` ${item.snippet}` : item.snippet);
  completion.detail = item.detail;
  completion.range = new vscode.Range(position.translate(0, -written.length), position);
  completion.filterText = item.label;
  return [completion];
}

const escape = (text: string): string => text.replace(/[\\$}]/g, (c) => `\\${c}`);

/** Symbols of the next lines, most frequent first: what a note is likely to be about. */
function symbolsBelow(document: vscode.TextDocument, line: number): readonly string[] {
  const text = document.getText(new vscode.Range(line + 1, 0, Math.min(line + 8, document.lineCount), 0));
  const counts = new Map<string, number>();
  for (const [symbol] of text.matchAll(/\\(?:epsilon|varepsilon|delta|theta|alpha|beta|gamma|lambda|eta|mu|omega|phi|tau)\b|(?<![\\A-Za-z])[A-Za-z](?![A-Za-z])/g)) counts.set(symbol, (counts.get(symbol) ?? 0) + 1);
  const found = [...counts].sort((a, b) => b[1] - a[1]).map(([symbol]) => symbol);
  return found.length > 0 ? found.slice(0, 5) : ['x'];
}
