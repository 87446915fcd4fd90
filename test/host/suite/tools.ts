import * as vscode from 'vscode';

export function check(condition: unknown, message: string): asserts condition {
  if (!condition) throw new Error(message);
}

export function same<T>(actual: T, expected: T, what: string): void {
  const [a, e] = [JSON.stringify(actual), JSON.stringify(expected)];
  if (a !== e) throw new Error(`${what}: ${a}, expected ${e}`);
}

export async function until<T>(what: string, look: () => T | Promise<T>, patience = 20_000): Promise<NonNullable<T>> {
  const end = Date.now() + patience;
  for (;;) {
    const seen = await look();
    if (seen) return seen;
    if (Date.now() > end) throw new Error(`never saw ${what}`);
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}

/** A closing that the case before asked for can still be under way and take the new document with it: then it is opened again. */
export async function open(language: string, content: string): Promise<vscode.TextEditor> {
  for (let tries = 1; ; tries += 1) {
    const document = await vscode.workspace.openTextDocument({ language, content });
    const editor = await vscode.window.showTextDocument(document);
    await new Promise((resolve) => setTimeout(resolve, 30 * tries));
    if (!document.isClosed && document.getText() === content) return editor;
    check(tries < 5, 'the document does not stay open');
  }
}

/** Selects the first occurrence of `text`. */
export function select(editor: vscode.TextEditor, text: string): vscode.Range {
  const at = editor.document.getText().indexOf(text);
  check(at >= 0, `${text} is not in the document`);
  const range = new vscode.Range(editor.document.positionAt(at), editor.document.positionAt(at + text.length));
  editor.selection = new vscode.Selection(range.start, range.end);
  return range;
}

export async function hoverText(document: vscode.TextDocument, position: vscode.Position): Promise<string> {
  const hovers = await vscode.commands.executeCommand<vscode.Hover[]>('vscode.executeHoverProvider', document.uri, position);
  return hovers.flatMap((hover) => hover.contents.map((content) => (typeof content === 'string' ? content : content.value))).join('\n---\n');
}

/** Resolved, so that late edits are there. */
export async function fixes(document: vscode.TextDocument, range: vscode.Range, resolve = 50): Promise<vscode.CodeAction[]> {
  return vscode.commands.executeCommand<vscode.CodeAction[]>('vscode.executeCodeActionProvider', document.uri, range, undefined, resolve);
}

export async function fix(document: vscode.TextDocument, range: vscode.Range, title: string): Promise<vscode.CodeAction> {
  const actions = await fixes(document, range);
  const found = actions.find((action) => action.title.includes(title));
  check(found, `no quick fix "${title}"; offered: ${actions.map((action) => action.title).join(' | ') || 'none'}`);
  return found;
}

export const wait = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));
