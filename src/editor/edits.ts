/** Edits that are made only against the very text they were computed from, as one undo step. */
import * as vscode from 'vscode';
import type { TextEdit } from '../worker/desk/types.ts';

/** What an edit rests on: the document's version and the text that stood in the places it replaces or follows. */
export interface Ground {
  readonly uri: string;
  readonly version: number;
  readonly expected: readonly { readonly start: number; readonly end: number; readonly text: string }[];
}

export function groundOf(document: vscode.TextDocument, places: readonly { readonly start: number; readonly end: number }[]): Ground {
  return {
    uri: document.uri.toString(),
    version: document.version,
    expected: places.map(({ start, end }) => ({ start, end, text: textAt(document, start, end) })),
  };
}

/** The open document if it still is what the edit was computed from. */
export function standsOn(ground: Ground): vscode.TextDocument | null {
  const document = vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === ground.uri);
  if (!document || document.version !== ground.version) return null;
  return ground.expected.every(({ start, end, text }) => textAt(document, start, end) === text) ? document : null;
}

export function workspaceEdit(document: vscode.TextDocument, edits: readonly TextEdit[]): vscode.WorkspaceEdit {
  const result = new vscode.WorkspaceEdit();
  result.set(
    document.uri,
    edits.map((edit) => vscode.TextEdit.replace(rangeOf(document, edit.start, edit.end), edit.text)),
  );
  return result;
}

/** True where the edit was made. Between check and edit nothing is awaited; a visible editor checks the version once more by itself. */
export async function applyChecked(ground: Ground, edits: readonly TextEdit[]): Promise<boolean> {
  const document = standsOn(ground);
  let done = false;
  if (document) {
    const editor = vscode.window.visibleTextEditors.find((candidate) => candidate.document === document);
    done = editor
      ? await editor.edit((builder) => edits.forEach((edit) => builder.replace(rangeOf(document, edit.start, edit.end), edit.text)), { undoStopBefore: true, undoStopAfter: true })
      : await vscode.workspace.applyEdit(workspaceEdit(document, edits));
  }
  if (!done) sayMovedOn();
  return done;
}

export function sayMovedOn(): void {
  void vscode.window.showWarningMessage(vscode.l10n.t('The text has changed since this was computed, so nothing was edited. Ask again.'));
}

export const rangeOf = (document: vscode.TextDocument, start: number, end: number): vscode.Range => new vscode.Range(document.positionAt(start), document.positionAt(end));
const textAt = (document: vscode.TextDocument, start: number, end: number): string => document.getText(rangeOf(document, start, end));
