/** Typing costs nothing: changes only restart a pause, and the worker hears of the text once, after it. */
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { CheckSchedule, pauseFor } from '../../src/editor/checkSchedule.ts';
import { createEngineClient, type WorkerEvents } from '../../src/worker/client.ts';
import type { ToWorker } from '../../src/worker/messages.ts';

const NONE = { ok: true, findings: [], unread: [] } as const;

function room(interruptible = true) {
  const posted: ToWorker[] = [];
  const asks = (): ToWorker[] => posted.filter(({ kind }) => kind === 'ask');
  const interrupted: number[] = [];
  let ended = 0;
  let events: WorkerEvents | null = null;
  const client = createEngineClient({
    start: (told) => {
      events = told;
      return { post: (message) => void posted.push(message), end: () => void (ended += 1), ...(interruptible ? { interrupt: (ticket: number) => void interrupted.push(ticket) } : {}) };
    },
    readFile: () => Promise.resolve(null),
  });
  let text = '';
  let running: AbortController | null = null;
  const schedule = new CheckSchedule<string>({
    sizeOf: () => text.length,
    begin: () => {
      running = new AbortController();
      void client.ask({ ask: 'check', text, language: 'latex', budget_ms: 20_000 }, running.signal);
    },
    withdraw: () => running?.abort(),
  });
  return {
    posted,
    asks,
    interrupted,
    ended: () => ended,
    answer: (ticket: number) => events?.message({ kind: 'answer', ticket, answer: NONE }),
    schedule,
    type: (more: string) => {
      text += more;
      schedule.changed('a.tex');
    },
  };
}

describe('a burst of changes', () => {
  beforeEach(() => void vi.useFakeTimers());
  afterEach(() => void vi.useRealTimers());

  it('sends nothing before the pause ends, then the text once', async () => {
    const { posted, type } = room();
    for (let i = 0; i < 50; i += 1) {
      type('x');
      await vi.advanceTimersByTimeAsync(60);
    }
    expect(posted).toEqual([]);
    await vi.advanceTimersByTimeAsync(5000);
    expect(posted).toHaveLength(1);
    expect(posted[0]).toMatchObject({ kind: 'ask', request: { ask: 'check', text: 'x'.repeat(50) } });
  });

  it('withdraws the check under way at the first change and keeps the worker', async () => {
    const { asks, interrupted, ended, answer, type } = room();
    type('x');
    await vi.advanceTimersByTimeAsync(5000);
    for (let i = 0; i < 50; i += 1) type('y');
    expect(interrupted).toEqual([1]);
    answer(1);
    await vi.advanceTimersByTimeAsync(5000);
    expect(asks()).toHaveLength(2);
    expect(ended()).toBe(0);
  });

  it('has at most one check in the worker, and ends one that does not give up', async () => {
    const { asks, ended, type } = room();
    type('x');
    await vi.advanceTimersByTimeAsync(1000);
    type('y');
    await vi.advanceTimersByTimeAsync(1400);
    expect([asks().length, ended()]).toEqual([1, 0]);
    await vi.advanceTimersByTimeAsync(200);
    expect([asks().length, ended()]).toEqual([2, 1]);
  });

  it('tells a worker that shares no memory, and ends it only if it does not give up', async () => {
    const { posted, ended, type } = room(false);
    type('x');
    await vi.advanceTimersByTimeAsync(1000);
    type('y');
    expect(posted.at(-1)).toEqual({ kind: 'withdraw', ticket: 1 });
    expect(ended()).toBe(0);
    await vi.advanceTimersByTimeAsync(1600);
    expect(ended()).toBe(1);
  });

  it('forgets a closed document', async () => {
    const { posted, schedule, type } = room();
    type('x');
    schedule.forget('a.tex');
    await vi.advanceTimersByTimeAsync(5000);
    expect(posted).toEqual([]);
  });

  it('waits longer in large documents, within reason', () => expect([0, 200_000, 10_000_000].map(pauseFor)).toEqual([700, 1500, 2500]));
});
