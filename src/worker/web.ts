/** Entry of the worker bundle for web workers: one classic script, started from a blob by the host. */
import type { FromWorker, ToWorker } from './messages.ts';
import { serve } from './serve.ts';

interface WorkerScope {
  postMessage(message: FromWorker): void;
  onmessage: ((event: { readonly data: ToWorker }) => void) | null;
}
const scope = globalThis as unknown as WorkerScope;
serve({
  post: (message) => scope.postMessage(message),
  listen: (handler) => {
    scope.onmessage = (event) => handler(event.data);
  },
});
