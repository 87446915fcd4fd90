/** The Expansion page in its two homes: a view that the user may drag, and an editor tab beside the text. */
import * as vscode from 'vscode';
import type { Mode } from '../webview/messages.ts';
import type { Place, Question } from '../worker/desk/types.ts';
import type { CheckAnswer } from '../protocol.ts';
import { Page } from './page.ts';
import type { Problems } from './problems.ts';
import { pageHtml, pageRoots } from './pageHtml.ts';
import type { Services } from './services.ts';

export const VIEW = 'leadingOrder.view';
export const TAB = 'leadingOrder.page';

export class Pages implements vscode.Disposable {
  readonly #services: Services;
  readonly #problems: Problems;
  readonly #registered: vscode.Disposable;
  #view: { readonly page: Page; readonly view: vscode.WebviewView } | null = null;
  #tab: { readonly page: Page; readonly panel: vscode.WebviewPanel } | null = null;
  #waiting: ((page: Page) => void)[] = [];

  constructor(services: Services, problems: Problems) {
    this.#services = services;
    this.#problems = problems;
    this.#registered = vscode.Disposable.from(
      vscode.window.registerWebviewViewProvider(VIEW, { resolveWebviewView: (view) => this.#resolveView(view) }),
      vscode.window.registerWebviewPanelSerializer(TAB, {
        deserializeWebviewPanel: async (panel) => {
          this.#adopt(panel);
        },
      }),
    );
  }

  /** Shows a place on the page that is in sight, else in the view. */
  async show(document: vscode.TextDocument, place: Place, mode: Mode = 'expand', chosen?: Question): Promise<void> {
    const page = this.#tab?.panel.visible ? this.#tab.page : await this.#openView();
    await page.show(document, place, mode, chosen);
  }

  async showClaims(document: vscode.TextDocument, answer: CheckAnswer): Promise<void> {
    const page = this.#tab?.panel.visible ? this.#tab.page : await this.#openView();
    page.showClaims(document, answer);
  }

  async showBeside(document: vscode.TextDocument, place: Place): Promise<void> {
    if (!this.#tab) {
      const options = { enableScripts: true, localResourceRoots: pageRoots(this.#services.context.extensionUri) };
      this.#adopt(vscode.window.createWebviewPanel(TAB, vscode.l10n.t('Expansion'), { viewColumn: vscode.ViewColumn.Beside, preserveFocus: true }, options));
    } else this.#tab.panel.reveal(undefined, true);
    await this.#tab?.page.show(document, place);
  }

  dispose(): void {
    this.#registered.dispose();
    this.#view?.page.dispose();
    this.#tab?.page.dispose();
  }

  async #openView(): Promise<Page> {
    if (this.#view) {
      this.#view.view.show(true);
      return this.#view.page;
    }
    const resolved = new Promise<Page>((resolve) => this.#waiting.push(resolve));
    await vscode.commands.executeCommand(`${VIEW}.focus`, { preserveFocus: true });
    return resolved;
  }

  #resolveView(view: vscode.WebviewView): void {
    view.webview.options = { enableScripts: true, localResourceRoots: pageRoots(this.#services.context.extensionUri) };
    const page = new Page(this.#services, view.webview, () => view.visible, (document) => this.#problems.check(document));
    this.#view = { page, view };
    view.onDidDispose(() => {
      page.dispose();
      if (this.#view?.page === page) this.#view = null;
    });
    view.webview.html = pageHtml(view.webview, this.#services.context.extensionUri, 'view');
    for (const resolve of this.#waiting.splice(0)) resolve(page);
  }

  #adopt(panel: vscode.WebviewPanel): void {
    panel.webview.options = { enableScripts: true, localResourceRoots: pageRoots(this.#services.context.extensionUri) };
    panel.iconPath = vscode.Uri.joinPath(this.#services.context.extensionUri, 'media', 'icon.png');
    const page = new Page(this.#services, panel.webview, () => panel.visible, (document) => this.#problems.check(document));
    this.#tab = { page, panel };
    panel.onDidDispose(() => {
      page.dispose();
      if (this.#tab?.page === page) this.#tab = null;
    });
    panel.webview.html = pageHtml(panel.webview, this.#services.context.extensionUri, 'tab');
  }
}
