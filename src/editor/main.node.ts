/** Entry of the desktop and remote hosts. */
import { Worker } from 'node:worker_threads';
import * as vscode from 'vscode';
import type { FromWorker } from '../worker/messages.ts';
import type { NodeWorkerData } from '../worker/nodeData.ts';
import { type Api, activateWith } from './activate.ts';

export function activate(context: vscode.ExtensionContext): Api {
  return activateWith(context, async ({ message, died }) => {
    const shared = new SharedArrayBuffer(4);
    const flag = new Int32Array(shared);
    const workerData: NodeWorkerData = { shared, compiled: await compiledFolder(context) };
    const worker = new Worker(vscode.Uri.joinPath(context.extensionUri, 'dist', 'worker.boot.js').fsPath, { workerData });
    worker.on('message', (data: FromWorker) => message(data));
    worker.on('error', (error: Error) => died(error.message));
    worker.on('exit', (code) => died(`exit code ${code}`));
    return { post: (data) => worker.postMessage(data), end: () => void worker.terminate(), interrupt: (ticket) => void Atomics.store(flag, 0, ticket) };
  });
}

/** A folder in the extension's own storage for this version's compiled code; what other versions left is removed. */
async function compiledFolder(context: vscode.ExtensionContext): Promise<string | null> {
  const parent = vscode.Uri.joinPath(context.globalStorageUri, 'compiled');
  const own = String((context.extension.packageJSON as { readonly version?: unknown }).version);
  try {
    const folder = vscode.Uri.joinPath(parent, own);
    const found = await vscode.workspace.fs.readDirectory(parent).then(
      (entries) => entries.map(([name]) => name),
      (): string[] => [],
    );
    if (!found.includes(own)) await vscode.workspace.fs.createDirectory(folder);
    for (const name of found) if (name !== own) void vscode.workspace.fs.delete(vscode.Uri.joinPath(parent, name), { recursive: true }).then(undefined, () => undefined);
    return folder.scheme === 'file' ? folder.fsPath : null;
  } catch {
    return null;
  }
}
