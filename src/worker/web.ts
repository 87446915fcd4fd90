/** Entry of the worker bundle for web workers: one classic script, started from a blob by the host. */
import type { FromWorker, ToWorker } from './messages.ts';
import { serve } from './serve.ts';

interface WorkerScope {
  postMessage(message: FromWorker): void;
  onmessage: ((event: { readonly data: ToWorker }) => void) | null;
}
/** The web's own ports, which the types of Node know under other names. */
interface WebPort {
  postMessage(message: null): void;
  onmessage: (() => void) | null;
}
const scope = globalThis as unknown as WorkerScope;
/** A timer would wait four milliseconds each time; a message to oneself stands in the queue behind those of the host. */
const { port1: inner, port2: outer } = new MessageChannel() as unknown as { readonly port1: WebPort; readonly port2: WebPort };
const turns: (() => void)[] = [];
inner.onmessage = () => turns.shift()?.();
serve({
  post: (message) => scope.postMessage(message),
  listen: (handler) => {
    scope.onmessage = (event) => handler(event.data);
  },
  turn: () =>
    new Promise((resolve) => {
      turns.push(resolve);
      outer.postMessage(null);
    }),
});
