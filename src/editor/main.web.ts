/** Entry of the web host: the worker is one classic script, started from a blob since it may come from another origin. */
import * as vscode from 'vscode';
import type { FromWorker, ToWorker } from '../worker/messages.ts';
import { type Api, activateWith } from './activate.ts';

/** The part of the web's worker interface that is used here; the extension host of the web has it, the editor's types do not. */
interface WebWorker {
  postMessage(message: ToWorker): void;
  terminate(): void;
  onmessage: ((event: { readonly data: FromWorker }) => void) | null;
  onerror: ((event: { readonly message?: string }) => void) | null;
}
interface WebScope {
  readonly Worker: new (url: string) => WebWorker;
  readonly Blob: new (parts: readonly Uint8Array[], options: { readonly type: string }) => object;
  readonly URL: { createObjectURL(blob: object): string; revokeObjectURL(url: string): void };
}

export function activate(context: vscode.ExtensionContext): Api {
  const web = globalThis as unknown as WebScope;
  return activateWith(context, async ({ message, died }) => {
    const script = await vscode.workspace.fs.readFile(vscode.Uri.joinPath(context.extensionUri, 'dist', 'worker.web.js'));
    const address = web.URL.createObjectURL(new web.Blob([script], { type: 'text/javascript' }));
    const worker = new web.Worker(address);
    worker.onmessage = (event) => {
      web.URL.revokeObjectURL(address);
      message(event.data);
    };
    worker.onerror = (event) => died(event.message ?? 'the worker could not run');
    return { post: (data) => worker.postMessage(data), end: () => worker.terminate() };
  });
}
