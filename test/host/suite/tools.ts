import * as vscode from 'vscode';

export function check(condition: unknown, message: string): asserts condition {
  if (!condition) throw new Error(message);
}

export function same<T>(actual: T, expected: T, what: string): void {
  const [a, e] = [JSON.stringify(actual), JSON.stringify(expected)];
  if (a !== e) throw new Error(`${what}: ${a}, expected ${e}`);
}

/** States are waited for as long as a machine ten times slower than usual takes; on a usual one nothing comes near. */
export const PATIENCE_MS = 200_000;

export async function until<T>(what: string, look: () => T | Promise<T>): Promise<NonNullable<T>> {
  const end = Date.now() + PATIENCE_MS;
  for (;;) {
    const seen = await look();
    if (seen) return seen;
    if (Date.now() > end) throw new Error(`never saw ${what}`);
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}

/** A document that does not come up within so long is opened anew: a closing that the case before asked for may have taken it. */
const REOPEN_MS = 5_000;

/** What the editor says of the document at once need not be there yet for its commands: waits until its tab is the active one, too. */
export async function open(language: string, content: string): Promise<vscode.TextEditor> {
  const end = Date.now() + PATIENCE_MS;
  for (;;) {
    const document = await vscode.workspace.openTextDocument({ language, content });
    await vscode.window.showTextDocument(document);
    const reopen = Date.now() + REOPEN_MS;
    while (!document.isClosed && Date.now() < reopen) {
      const editor = vscode.window.activeTextEditor;
      if (editor?.document === document && activeTab(isTextTab(document.uri)) && document.getText() === content) return editor;
      await wait(50);
    }
    if (Date.now() > end) throw new Error('never saw the document in an editor of its own');
  }
}

type TabTest = (tab: vscode.Tab) => boolean;
const isTextTab =
  (uri: vscode.Uri): TabTest =>
  ({ input }) =>
    input instanceof vscode.TabInputText && input.uri.toString() === uri.toString();
export const isNotebookTab: TabTest = ({ input }) => input instanceof vscode.TabInputNotebook;
export const isPageTab: TabTest = ({ input }) => input instanceof vscode.TabInputWebview && input.viewType.includes('leadingOrder.page');

const activeTab = (wanted: TabTest): boolean => {
  const tab = vscode.window.tabGroups.activeTabGroup.activeTab;
  return tab !== undefined && wanted(tab);
};
export const isOpen = (wanted: TabTest): boolean => vscode.window.tabGroups.all.some((group) => group.tabs.some(wanted));

/** Closes the active editor, without saving, once it is the one that is meant, and waits until it is gone: a closing that comes late takes the next case's document. */
export async function closeActive(wanted: TabTest): Promise<void> {
  await until('the editor that is to be closed', () => activeTab(wanted));
  await vscode.commands.executeCommand('workbench.action.revertAndCloseActiveEditor');
  await until('the closing of the editor', () => !isOpen(wanted));
}
/** The page stands beside the text, which keeps the focus. */
export async function closePage(): Promise<void> {
  await vscode.window.tabGroups.close(vscode.window.tabGroups.all.flatMap((group) => group.tabs.filter(isPageTab)));
  await until('the closing of the page', () => !isOpen(isPageTab));
}
export const closeText = (document: vscode.TextDocument): Promise<void> => closeActive(isTextTab(document.uri));

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

/** The quick fix once it is offered. */
export async function fix(document: vscode.TextDocument, range: vscode.Range, title: string): Promise<vscode.CodeAction> {
  let offered: readonly vscode.CodeAction[] = [];
  try {
    return await until('the quick fix', async () => {
      offered = await fixes(document, range);
      return offered.find((action) => action.title.includes(title));
    });
  } catch {
    throw new Error(`no quick fix "${title}"; offered: ${offered.map((action) => action.title).join(' | ') || 'none'}`);
  }
}

export const wait = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

/** What the loop below takes on the machine that the aims were set on. */
const USUAL_LOOP_MS = 120;
/** How many times slower than usual this machine is now, at least 1: the processor's share in a fixed loop and the way through the event loop. */
export async function slowness(): Promise<number> {
  const began = performance.now();
  let sum = 0;
  for (let round = 0; round < 10; round += 1) {
    for (let i = 1; i < 400_000; i += 1) sum += Math.sqrt(i) / (sum + i);
    await wait(0);
  }
  check(Number.isFinite(sum), 'the loop has no value');
  return Math.max(1, (performance.now() - began) / USUAL_LOOP_MS);
}

export const median = (times: readonly number[]): number => [...times].sort((a, b) => a - b)[Math.floor(times.length / 2)] ?? 0;
