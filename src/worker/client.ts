/** The host's end: starts the worker on first use, keeps one request in it at a time, cancels by a shared flag where there is one and else by ending the worker, and starts a fresh one when it dies. */
import type { Answer, ErrorAnswer, Request } from '../protocol.ts';
import type { DeskAnswer, DeskAnswerTo, DeskRequest } from './desk/types.ts';
import type { FromWorker, ToWorker } from './messages.ts';

/** A running worker as a host sees it. */
export interface WorkerHandle {
  post(message: ToWorker): void;
  end(): void;
  /** Tells a worker that is busy with this ticket to give up; it then answers soon. Absent where no memory can be shared. */
  interrupt?(ticket: number): void;
}
export interface WorkerEvents {
  message(message: FromWorker): void;
  /** The worker ended by itself or threw. */
  died(reason: string): void;
}
export interface ClientOptions {
  /** May be asynchronous: the web host first reads the script. */
  readonly start: (events: WorkerEvents) => WorkerHandle | Promise<WorkerHandle>;
  /** Bundled files (grammars) by name; null where there is none. */
  readonly readFile: (name: string) => Promise<Uint8Array | null>;
  readonly log?: (line: string) => void;
  /** Time beyond a request's own budget after which the worker is ended, in milliseconds. */
  readonly grace?: number;
}

interface Job {
  readonly request: Request | DeskRequest;
  readonly settle: (answer: Answer | DeskAnswer) => void;
  readonly signal: AbortSignal | undefined;
  cancelled: boolean;
}

export interface EngineClient {
  /** Never rejects: every failure is an answer. A cancelled request is answered `over-budget`. */
  ask<A extends Answer>(request: Request, signal?: AbortSignal): Promise<A | ErrorAnswer>;
  /** The same for what an editor asks beyond the engine's protocol. */
  consult<R extends DeskRequest>(request: R, signal?: AbortSignal): Promise<DeskAnswerTo<R> | ErrorAnswer>;
  readonly busy: boolean;
  dispose(): void;
}

const DEFAULT_BUDGET = 5000;
/** A worker that was told to give up has this long to answer before it is ended, in milliseconds. */
const GIVING_UP = 1500;
const budgetOf = (request: Request | DeskRequest): number => ('budget_ms' in request ? request.budget_ms : undefined) ?? DEFAULT_BUDGET;

export function createEngineClient(options: ClientOptions): EngineClient {
  const queue: Job[] = [];
  let current: { readonly job: Job; readonly ticket: number; timer: ReturnType<typeof setTimeout> | undefined; posted: boolean } | null = null;
  let worker: WorkerHandle | null = null;
  let generation = 0;
  let ticket = 0;
  let disposed = false;

  const refuse = (job: Job, message: string): void =>
    job.settle({ ...('id' in job.request && job.request.id !== undefined ? { id: job.request.id } : {}), ok: false, error: { code: 'over-budget', message } });

  const drop = (): void => {
    generation += 1;
    worker?.end();
    worker = null;
    if (current?.timer) clearTimeout(current.timer);
    current = null;
  };

  const start = async (): Promise<WorkerHandle> => {
    const mine = generation;
    const stale = (): boolean => mine !== generation;
    const handle = await options.start({
      message: (message) => {
        if (stale()) return;
        if (message.kind === 'wantFile') {
          void options.readFile(message.name).then(
            (bytes) => handle.post({ kind: 'file', name: message.name, bytes }),
            () => handle.post({ kind: 'file', name: message.name, bytes: null }),
          );
          return;
        }
        if (message.kind === 'answer' && current?.ticket === message.ticket) {
          const { job, timer } = current;
          if (timer) clearTimeout(timer);
          current = null;
          job.settle(message.answer);
          void pump();
        }
      },
      died: (reason) => {
        if (stale()) return;
        options.log?.(`engine ended: ${reason}`);
        const lost = current?.job;
        drop();
        if (lost) refuse(lost, 'The engine stopped during this request and has been restarted; try again.');
        void pump();
      },
    });
    if (stale()) handle.end();
    return handle;
  };

  const pump = async (): Promise<void> => {
    if (current || disposed) return;
    const job = queue.shift();
    if (!job) return;
    if (job.cancelled) {
      refuse(job, 'This request was cancelled.');
      return pump();
    }
    ticket += 1;
    const mine = ticket;
    const entry = { job, ticket: mine, timer: undefined as ReturnType<typeof setTimeout> | undefined, posted: false };
    current = entry;
    try {
      worker ??= await start();
    } catch (error) {
      if (current === entry) current = null;
      refuse(job, `The engine could not be started: ${error instanceof Error ? error.message : String(error)}.`);
      return pump();
    }
    if (current !== entry) return;
    if (job.cancelled) {
      current = null;
      return pump();
    }
    const budget = budgetOf(job.request);
    const limit = budget + (options.grace ?? 2000);
    entry.timer = setTimeout(() => {
      if (current !== entry) return;
      options.log?.(`request ended after ${limit} ms`);
      drop();
      refuse(job, `This took longer than ${budget} ms; ask for fewer terms or allow more time.`);
      void pump();
    }, limit);
    entry.posted = true;
    worker.post({ kind: 'ask', ticket: mine, request: job.request });
  };

  const enqueue = (request: Request | DeskRequest, signal: AbortSignal | undefined): Promise<Answer | DeskAnswer> =>
    new Promise((resolve) => {
      const job: Job = { request, settle: resolve, signal, cancelled: signal?.aborted ?? false };
      if (disposed) return refuse(job, 'The engine has been shut down.');
      signal?.addEventListener(
        'abort',
        () => {
          job.cancelled = true;
          if (current?.job !== job) return;
          refuse(job, 'This request was cancelled.');
          // A worker that is only starting is as good for the next request.
          if (!current.posted) return;
          if (worker?.interrupt) {
            worker.interrupt(current.ticket);
            clearTimeout(current.timer);
            current.timer = setTimeout(() => {
              if (current?.job !== job) return;
              drop();
              void pump();
            }, GIVING_UP);
            return;
          }
          drop();
          void pump();
        },
        { once: true },
      );
      queue.push(job);
      void pump();
    });

  return {
    ask: (request, signal) => enqueue(request, signal) as Promise<never>,
    consult: (request, signal) => enqueue(request, signal) as Promise<never>,
    get busy() {
      return current !== null || queue.length > 0;
    },
    dispose: () => {
      disposed = true;
      const left = [...(current ? [current.job] : []), ...queue.splice(0)];
      drop();
      for (const job of left) refuse(job, 'The engine has been shut down.');
    },
  };
}
