/** Entry of the desktop and remote hosts. */
import { Worker } from 'node:worker_threads';
import * as vscode from 'vscode';
import type { FromWorker } from '../worker/messages.ts';
import { type Api, activateWith } from './activate.ts';

export function activate(context: vscode.ExtensionContext): Api {
  return activateWith(context, ({ message, died }) => {
    const shared = new SharedArrayBuffer(4);
    const flag = new Int32Array(shared);
    const worker = new Worker(vscode.Uri.joinPath(context.extensionUri, 'dist', 'worker.js').fsPath, { workerData: shared });
    worker.on('message', (data: FromWorker) => message(data));
    worker.on('error', (error: Error) => died(error.message));
    worker.on('exit', (code) => died(`exit code ${code}`));
    return { post: (data) => worker.postMessage(data), end: () => void worker.terminate(), interrupt: (ticket) => void Atomics.store(flag, 0, ticket) };
  });
}
