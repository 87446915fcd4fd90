/** The language status item: what the tool is doing and what the check found, never a notification. */
import * as vscode from 'vscode';
import { SELECTOR } from './languages.ts';

export interface Counts {
  readonly claims: number;
  readonly hold: number;
  readonly fail: number;
  readonly undecided: number;
  readonly unread: number;
}

export class Status implements vscode.Disposable {
  readonly #item = vscode.languages.createLanguageStatusItem('leadingOrder.status', SELECTOR);
  readonly #counts = new Map<string, Counts>();
  #working = 0;

  constructor() {
    this.#item.name = 'Leading Order';
    this.#item.command = { command: 'leadingOrder.expandHere', title: vscode.l10n.t('Expand Here') };
    this.refresh();
  }

  async during<T>(work: Promise<T>): Promise<T> {
    this.#working += 1;
    this.refresh();
    try {
      return await work;
    } finally {
      this.#working -= 1;
      this.refresh();
    }
  }

  count(uri: vscode.Uri, counts: Counts | null): void {
    if (counts) this.#counts.set(uri.toString(), counts);
    else this.#counts.delete(uri.toString());
    this.refresh();
  }

  refresh(): void {
    const uri = vscode.window.activeTextEditor?.document.uri.toString();
    const counts = uri ? this.#counts.get(uri) : undefined;
    this.#item.busy = this.#working > 0;
    this.#item.severity = counts && counts.fail > 0 ? vscode.LanguageStatusSeverity.Warning : vscode.LanguageStatusSeverity.Information;
    if (this.#working > 0) this.#item.text = vscode.l10n.t('Computing…');
    else if (counts) this.#item.text = countsText(counts);
    else this.#item.text = vscode.l10n.t('Ready');
    this.#item.detail = vscode.l10n.t('printed expansions');
  }

  dispose(): void {
    this.#item.dispose();
  }
}

function oneClaim({ hold, fail }: Counts): string {
  return hold > 0 ? vscode.l10n.t('1 claim: it holds') : fail > 0 ? vscode.l10n.t('1 claim: it fails') : vscode.l10n.t('1 claim: undecided');
}

export function countsText(counts: Counts): string {
  if (counts.claims === 0) return vscode.l10n.t('No printed expansions');
  const text = counts.claims === 1 ? oneClaim(counts) : vscode.l10n.t('{0} claims: {1} hold, {2} fail, {3} undecided', counts.claims, counts.hold, counts.fail, counts.undecided);
  return counts.unread > 0 ? `${text}; ${vscode.l10n.t('{0} formulas not read', counts.unread)}` : text;
}
