/** Starts the worker bundle beside it. Where Node keeps compiled code, the bundle is compiled at its first start only. */
import * as nodeModule from 'node:module';
import { workerData } from 'node:worker_threads';
import { compiledFolderOf } from './nodeData.ts';

/** Since Node 22.1 and 22.10; older ones compile at every start. */
interface CompileCache {
  readonly enableCompileCache?: (folder: string) => unknown;
  readonly flushCompileCache?: () => void;
}
/** By then the first requests have shown which functions are needed. A worker that is ended writes nothing by itself. */
const WRITTEN_AFTER_MS = 5000;

const { enableCompileCache, flushCompileCache } = nodeModule as unknown as CompileCache;
const folder = compiledFolderOf(workerData);
if (folder !== null && enableCompileCache && flushCompileCache) {
  enableCompileCache(folder);
  setTimeout(flushCompileCache, WRITTEN_AFTER_MS).unref();
}
nodeModule.createRequire(__filename)('./worker.js');
