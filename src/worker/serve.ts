/** The engine behind a message port. Answers requests one at a time, in the order they came; knows no file system, no DOM, no editor. */
import { createEngine } from '../engine.ts';
import { createDesk } from './desk/index.ts';
import type { FromWorker, Port, ToWorker } from './messages.ts';

export function serve(port: Port<FromWorker, ToWorker>): void {
  const waiting = new Map<string, ((bytes: Uint8Array) => void)[]>();
  const refused = new Map<string, ((reason: Error) => void)[]>();
  const loadFile = (name: string): Promise<Uint8Array> =>
    new Promise<Uint8Array>((resolve, reject) => {
      const queue = waiting.get(name);
      if (queue) {
        queue.push(resolve);
        refused.get(name)?.push(reject);
        return;
      }
      waiting.set(name, [resolve]);
      refused.set(name, [reject]);
      port.post({ kind: 'wantFile', name });
    });
  let answering = 0;
  const { withdrawn } = port;
  const engine = createEngine({ loadFile, ...(withdrawn ? { interrupted: () => withdrawn() === answering } : {}) });
  const desk = createDesk({ engine, loadFile });
  let last: Promise<void> = Promise.resolve();
  port.listen((message) => {
    if (message.kind === 'file') {
      const { name, bytes } = message;
      for (const resolve of bytes ? (waiting.get(name) ?? []) : []) if (bytes) resolve(bytes);
      for (const reject of bytes ? [] : (refused.get(name) ?? [])) reject(new Error(`the bundled file ${name} is missing`));
      waiting.delete(name);
      refused.delete(name);
      return;
    }
    const { ticket, request } = message;
    last = last.then(async () => {
      answering = ticket;
      port.post({ kind: 'answer', ticket, answer: 'desk' in request ? await desk.ask(request) : await engine.ask(request) });
    });
  });
}
