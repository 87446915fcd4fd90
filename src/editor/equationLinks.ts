/** Links from `implements eq:…` in a note to the equation's label in a LaTeX or Markdown file of the workspace. */
import * as vscode from 'vscode';
import { SELECTOR } from './languages.ts';

const NOTE = /leading-order:[^\n]*?\bimplements\s+([A-Za-z][\w:.-]*\w)/g;
const MOST_FILES = 300;

export function registerEquationLinks(): vscode.Disposable {
  return vscode.languages.registerDocumentLinkProvider(SELECTOR, {
    provideDocumentLinks: (document) =>
      [...document.getText().matchAll(NOTE)].map((match) => {
        const label = match[1] ?? '';
        const start = match.index + match[0].length - label.length;
        const link = new vscode.DocumentLink(new vscode.Range(document.positionAt(start), document.positionAt(start + label.length)));
        link.tooltip = vscode.l10n.t('Go to the equation {0}', label);
        return Object.assign(link, { label });
      }),
    resolveDocumentLink: async (link) => {
      const label = 'label' in link ? String(link.label) : '';
      const found = await findLabel(label);
      if (found) link.target = found.uri.with({ fragment: `L${found.line + 1}` });
      else vscode.window.setStatusBarMessage(vscode.l10n.t('No file of the workspace has the label {0}.', label), 6000);
      return link;
    },
  });
}

export async function findLabel(label: string): Promise<{ readonly uri: vscode.Uri; readonly line: number; readonly text: string } | null> {
  const wanted = `\\label{${label}}`;
  for (const uri of await vscode.workspace.findFiles('**/*.{tex,md,qmd}', '**/node_modules/**', MOST_FILES)) {
    const open = vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === uri.toString());
    const text = open?.getText() ?? new TextDecoder().decode(await vscode.workspace.fs.readFile(uri));
    const at = text.indexOf(wanted);
    if (at >= 0) return { uri, line: text.slice(0, at).split('\n').length - 1, text };
  }
  return null;
}
