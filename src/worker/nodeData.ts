/** What a Node host hands to a worker thread at its start. */
export interface NodeWorkerData {
  /** One 32-bit integer: the ticket that was withdrawn last. */
  readonly shared: SharedArrayBuffer;
  /** A folder of the tool's own for compiled code; null where there is none. */
  readonly compiled: string | null;
}

const isData = (data: unknown): data is NodeWorkerData => typeof data === 'object' && data !== null && 'shared' in data && data.shared instanceof SharedArrayBuffer;

export const flagOf = (data: unknown): Int32Array<SharedArrayBuffer> | null => (isData(data) ? new Int32Array(data.shared) : null);
export const compiledFolderOf = (data: unknown): string | null => (isData(data) && typeof data.compiled === 'string' ? data.compiled : null);
