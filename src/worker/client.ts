/** The host's end: starts the worker on first use, keeps one request in it at a time (and one check beside it, which lets the other through between its claims), withdraws what nobody waits for, and starts a fresh worker when one dies. */
import type { Answer, ErrorAnswer, Request } from '../protocol.ts';
import type { DeskAnswer, DeskAnswerTo, DeskRequest } from './desk/types.ts';
import type { FromWorker, ToWorker } from './messages.ts';

/** A running worker as a host sees it. */
export interface WorkerHandle {
  post(message: ToWorker): void;
  end(): void;
  /** Tells a worker that is in the middle of this ticket to give up. Absent where no memory can be shared: there only checks, which look between claims, hear that they are withdrawn. */
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
  /** Checks stand in a queue of their own, so that nothing waits for the end of a long one. */
  readonly checksAside?: boolean;
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

/** One line of requests, answered in order. */
interface Lane {
  readonly queue: Job[];
  current: Entry | null;
}
interface Entry {
  readonly job: Job;
  readonly ticket: number;
  timer: ReturnType<typeof setTimeout> | undefined;
  posted: boolean;
}

export function createEngineClient(options: ClientOptions): EngineClient {
  const first: Lane = { queue: [], current: null };
  const aside: Lane = { queue: [], current: null };
  const lanes: readonly Lane[] = [first, aside];
  let worker: WorkerHandle | null = null;
  let starting: Promise<WorkerHandle> | null = null;
  let generation = 0;
  let ticket = 0;
  let disposed = false;

  const laneOf = (request: Request | DeskRequest): Lane => (options.checksAside && 'ask' in request && request.ask === 'check' ? aside : first);

  const refuse = (job: Job, message: string): void =>
    job.settle({ ...('id' in job.request && job.request.id !== undefined ? { id: job.request.id } : {}), ok: false, error: { code: 'over-budget', message } });

  /** Ends the worker and returns what it was doing. */
  const drop = (): readonly Job[] => {
    generation += 1;
    worker?.end();
    worker = null;
    starting = null;
    const lost: Job[] = [];
    for (const lane of lanes) {
      if (!lane.current) continue;
      clearTimeout(lane.current.timer);
      lost.push(lane.current.job);
      lane.current = null;
    }
    return lost;
  };

  const pumpAll = (): void => lanes.forEach((lane) => void pump(lane));

  /** Ends the worker because of one request; what else it was doing is asked again. */
  const endFor = (guilty: Job): void => {
    for (const job of drop()) if (job !== guilty && !job.cancelled) laneOf(job.request).queue.unshift(job);
    pumpAll();
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
        const lane = lanes.find(({ current }) => current?.ticket === message.ticket);
        if (message.kind === 'answer' && lane?.current) {
          const { job, timer } = lane.current;
          clearTimeout(timer);
          lane.current = null;
          job.settle(message.answer);
          void pump(lane);
        }
      },
      died: (reason) => {
        if (stale()) return;
        options.log?.(`engine ended: ${reason}`);
        for (const job of drop()) refuse(job, 'The engine stopped during this request and has been restarted; try again.');
        pumpAll();
      },
    });
    if (stale()) handle.end();
    else worker = handle;
    return handle;
  };

  const pump = async (lane: Lane): Promise<void> => {
    if (lane.current || disposed) return;
    const job = lane.queue.shift();
    if (!job) return;
    if (job.cancelled) {
      refuse(job, 'This request was cancelled.');
      return pump(lane);
    }
    ticket += 1;
    const entry: Entry = { job, ticket, timer: undefined, posted: false };
    lane.current = entry;
    let handle: WorkerHandle;
    try {
      handle = await (starting ??= start());
    } catch (error) {
      starting = null;
      if (lane.current === entry) lane.current = null;
      refuse(job, `The engine could not be started: ${error instanceof Error ? error.message : String(error)}.`);
      return pump(lane);
    }
    if (lane.current !== entry) return;
    if (job.cancelled) {
      lane.current = null;
      return pump(lane);
    }
    const budget = budgetOf(job.request);
    const limit = budget + (options.grace ?? 2000);
    entry.timer = setTimeout(() => {
      if (lane.current !== entry) return;
      options.log?.(`request ended after ${limit} ms`);
      refuse(job, `This took longer than ${budget} ms; ask for fewer terms or allow more time.`);
      endFor(job);
    }, limit);
    entry.posted = true;
    handle.post({ kind: 'ask', ticket: entry.ticket, request: job.request });
  };

  const withdraw = (job: Job): void => {
    job.cancelled = true;
    const { current } = laneOf(job.request);
    if (current?.job !== job) return;
    refuse(job, 'This request was cancelled.');
    // A worker that is only starting is as good for the next request.
    if (!current.posted) return;
    worker?.interrupt?.(current.ticket);
    worker?.post({ kind: 'withdraw', ticket: current.ticket });
    clearTimeout(current.timer);
    current.timer = setTimeout(() => endFor(job), GIVING_UP);
  };

  const enqueue = (request: Request | DeskRequest, signal: AbortSignal | undefined): Promise<Answer | DeskAnswer> =>
    new Promise((resolve) => {
      const job: Job = { request, settle: resolve, signal, cancelled: signal?.aborted ?? false };
      if (disposed) return refuse(job, 'The engine has been shut down.');
      signal?.addEventListener('abort', () => withdraw(job), { once: true });
      const lane = laneOf(request);
      lane.queue.push(job);
      void pump(lane);
    });

  return {
    ask: (request, signal) => enqueue(request, signal) as Promise<never>,
    consult: (request, signal) => enqueue(request, signal) as Promise<never>,
    get busy() {
      return lanes.some((lane) => lane.current !== null || lane.queue.length > 0);
    },
    dispose: () => {
      disposed = true;
      const waiting = lanes.flatMap((lane) => lane.queue.splice(0));
      for (const job of [...drop(), ...waiting]) refuse(job, 'The engine has been shut down.');
    },
  };
}
