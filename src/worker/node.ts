/** Entry of the worker bundle for Node's worker threads. */
import { parentPort, workerData } from 'node:worker_threads';
import { flagOf } from './nodeData.ts';
import { serve } from './serve.ts';

if (parentPort) {
  const port = parentPort;
  const flag = flagOf(workerData);
  serve({
    ...(flag ? { withdrawn: () => Atomics.load(flag, 0) } : {}),
    post: (message) => port.postMessage(message),
    listen: (handler) => void port.on('message', handler),
    turn: () => new Promise((resolve) => void setImmediate(resolve)),
  });
}
