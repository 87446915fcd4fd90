/** Entry of the worker bundle for Node's worker threads. */
import { parentPort, workerData } from 'node:worker_threads';
import { serve } from './serve.ts';

if (parentPort) {
  const port = parentPort;
  const shared: unknown = workerData;
  const flag = shared instanceof SharedArrayBuffer ? new Int32Array(shared) : null;
  serve({ ...(flag ? { withdrawn: () => Atomics.load(flag, 0) } : {}), post: (message) => port.postMessage(message), listen: (handler) => void port.on('message', handler) });
}
