/** The engine behind a message port. Answers requests one at a time, in the order they came; a check lets what comes meanwhile through between its claims. Knows no file system, no DOM, no editor. */
import { createEngine } from '../engine.ts';
import { Interrupted } from '../outcome.ts';
import type { ErrorAnswer } from '../protocol.ts';
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
  let checking = 0;
  let paused = 0;
  const given = new Set<number>();
  let last: Promise<void> = Promise.resolve();
  let lastCheck: Promise<void> = Promise.resolve();
  /** Between the claims of a check. */
  const pause = async (): Promise<void> => {
    if (performance.now() - paused < SLICE_MS) return;
    await port.turn();
    await last;
    if (given.has(checking)) throw new Interrupted();
    answering = checking;
    paused = performance.now();
  };
  const { withdrawn } = port;
  const engine = createEngine({ loadFile, pause, ...(withdrawn ? { interrupted: () => withdrawn() === answering } : {}) });
  const desk = createDesk({ engine, loadFile });
  port.listen((message) => {
    if (message.kind === 'withdraw') {
      given.add(message.ticket);
      return;
    }
    if (message.kind === 'file') {
      const { name, bytes } = message;
      for (const resolve of bytes ? (waiting.get(name) ?? []) : []) if (bytes) resolve(bytes);
      for (const reject of bytes ? [] : (refused.get(name) ?? [])) reject(new Error(`the bundled file ${name} is missing`));
      waiting.delete(name);
      refused.delete(name);
      return;
    }
    const { ticket, request } = message;
    const answer = async (): Promise<void> => {
      answering = ticket;
      const withdrawnEarly = given.delete(ticket);
      port.post({ kind: 'answer', ticket, answer: withdrawnEarly ? CANCELLED : 'desk' in request ? await desk.ask(request) : await engine.ask(request) });
      given.delete(ticket);
    };
    if (!('ask' in request) || request.ask !== 'check') {
      last = last.then(answer);
      return;
    }
    lastCheck = Promise.all([lastCheck, last]).then(() => {
      checking = ticket;
      return answer();
    });
  });
}

const CANCELLED: ErrorAnswer = { ok: false, error: { code: 'over-budget', message: new Interrupted().message } };
/** A check works this long before it looks whether something else has come. */
const SLICE_MS = 12;
