/** The engine in a worker thread, with its bundled files beside this program. A request that runs away is ended without ending the program. */
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import { createEngineClient, type EngineClient } from '../worker/client.ts';
import type { FromWorker } from '../worker/messages.ts';

export function startEngine(folder: string): EngineClient {
  return createEngineClient({
    start: ({ message, died }) => {
      const worker = new Worker(join(folder, 'worker.js'));
      worker.on('message', (data: FromWorker) => message(data));
      worker.on('error', (error: Error) => died(error.message));
      worker.on('exit', (code) => died(`exit code ${code}`));
      return { post: (data) => worker.postMessage(data), end: () => void worker.terminate() };
    },
    readFile: async (name) => {
      if (!/^[\w.-]+$/.test(name)) return null;
      return new Uint8Array(await readFile(join(folder, 'grammars', name)));
    },
  });
}
