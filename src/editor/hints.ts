/** Inlay hints, off by default: behind the line below a `leading-order:` note, what the expansion leaves out. */
import * as vscode from 'vscode';
import { engineLanguage, SELECTOR } from './languages.ts';
import type { Services } from './services.ts';
import { settingsFor } from './settings.ts';

const LINES_BELOW = 6;

export function registerHints(services: Services): vscode.Disposable {
  const changed = new vscode.EventEmitter<void>();
  const provider = vscode.languages.registerInlayHintsProvider(SELECTOR, {
    onDidChangeInlayHints: changed.event,
    provideInlayHints: async (document, range, token) => {
      const { inlayHints } = settingsFor(document);
      if (inlayHints === 'off' || !document.getText(range).includes('leading-order:')) return [];
      const { version } = document;
      const notes = await services.client.consult({ desk: 'notes', text: document.getText(), language: engineLanguage(document) });
      if (!('notes' in notes)) return [];
      const hints: vscode.InlayHint[] = [];
      for (const note of notes.notes) {
        if (token.isCancellationRequested || document.version !== version) return hints;
        if (note.skip || note.problem !== null || !range.contains(document.positionAt(note.start))) continue;
        const found = await firstExpression(services, document, document.positionAt(note.end).line, token);
        if (!found || document.version !== version) continue;
        const { answer, line } = found;
        if (!answer.ok) continue;
        const label = inlayHints === 'bound' && answer.bound?.value ? vscode.l10n.t('error ≤ {0}', answer.bound.value) : answer.remainder ? (/[+−-]\s*(O\(.*\))\s*$/.exec(answer.text)?.[1] ?? null) : vscode.l10n.t('exact');
        if (label === null) continue;
        const hint = new vscode.InlayHint(document.lineAt(line).range.end, label);
        hint.paddingLeft = true;
        hint.tooltip = answer.text;
        hints.push(hint);
      }
      return hints;
    },
  });
  const listening = vscode.workspace.onDidChangeConfiguration((event) => event.affectsConfiguration('leadingOrder') && changed.fire());
  return vscode.Disposable.from(changed, provider, listening);
}

/** The first expression below a note: tried where words of a formula begin, a few lines down. */
async function firstExpression(services: Services, document: vscode.TextDocument, noteLine: number, token: vscode.CancellationToken) {
  for (let line = noteLine + 1; line <= Math.min(noteLine + LINES_BELOW, document.lineCount - 1); line += 1) {
    const { text } = document.lineAt(line);
    if (/^\s*(\\begin|\\label|\$\$\s*$|\\\[\s*$|%|#|\/\/|$)/.test(text)) continue;
    for (const match of text.matchAll(/\\[A-Za-z]+|[A-Za-z_][\w.:]*\s*\(|[A-Za-z]/g)) {
      const offset = document.offsetAt(new vscode.Position(line, match.index + 1));
      const found = await services.consultant.consult(document, { start: offset, end: offset }, ['reading'], {}, token);
      if (found.answer.ok && found.worthwhile) return { answer: found.answer, line };
      if (token.isCancellationRequested) return null;
    }
  }
  return null;
}
