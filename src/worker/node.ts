/** Entry of the worker bundle for Node's worker threads. */
import { parentPort } from 'node:worker_threads';
import { serve } from './serve.ts';

if (parentPort) {
  const port = parentPort;
  serve({ post: (message) => port.postMessage(message), listen: (handler) => void port.on('message', handler) });
}
