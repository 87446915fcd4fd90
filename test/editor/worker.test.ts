/** Both ends of the worker's channel together: a check lets other requests through and gives up between its claims, without any shared memory. */
import { describe, expect, it } from 'vitest';
import type { CheckAnswer, ExpandAnswer } from '../../src/protocol.ts';
import { createEngineClient } from '../../src/worker/client.ts';
import type { FromWorker, ToWorker } from '../../src/worker/messages.ts';
import { serve } from '../../src/worker/serve.ts';

/** A worker in the same thread whose messages take a turn of the event loop each way, as in a real one. */
function room(checksAside = true) {
  const told: FromWorker[] = [];
  let ended = 0;
  const client = createEngineClient({
    checksAside,
    readFile: () => Promise.resolve(null),
    start: (events) => {
      let hear: (message: ToWorker) => void = () => undefined;
      let alive = true;
      serve({
        post: (message) => {
          told.push(message);
          setImmediate(() => alive && events.message(message));
        },
        listen: (handler) => void (hear = handler),
        turn: () => new Promise((resolve) => void setImmediate(resolve)),
      });
      return {
        post: (message) => void setImmediate(() => alive && hear(message)),
        end: () => {
          alive = false;
          ended += 1;
        },
      };
    },
  });
  return { client, told, ended: () => ended };
}

/** Maclaurin series of handbooks, each with another number in it so that none is remembered. */
const CLAIMS = Array.from({ length: 60 }, (_, i) => `\\[ \\sin(${i + 2} x) = ${i + 2} x - \\frac{${(i + 2) ** 3} x^3}{6} + O(x^5) \\]`).join('\n');
const check = { ask: 'check', text: CLAIMS, language: 'latex', budget_ms: 60_000 } as const;
const expand = { ask: 'expand', text: '\\sin x', language: 'latex', variable: 'x', terms: 2 } as const;

describe('a check', () => {
  it('is right, and lets an expansion through before it ends', async () => {
    const { client } = room();
    const order: string[] = [];
    const checking = client.ask<CheckAnswer>(check).then((answer) => (order.push('check'), answer));
    await new Promise((resolve) => setTimeout(resolve, 5));
    const expanded = await client.ask<ExpandAnswer>(expand).then((answer) => (order.push('expand'), answer));
    expect(expanded).toMatchObject({ ok: true, text: 'x − x³/6 + O(x⁵)' });
    const checked = await checking;
    expect(checked.ok && checked.findings.map((finding) => finding.verdict)).toEqual(Array.from({ length: 60 }, () => 'holds'));
    expect(order).toEqual(['expand', 'check']);
  });

  it('gives up between claims when it is withdrawn, and the worker lives on', async () => {
    const { client, told, ended } = room();
    const abort = new AbortController();
    const checking = client.ask<CheckAnswer>(check, abort.signal);
    await new Promise((resolve) => setTimeout(resolve, 30));
    abort.abort();
    expect((await checking).ok).toBe(false);
    const after = await client.ask<CheckAnswer>({ ...check, text: '\\[ e^x = 1 + x + O(x^2) \\]' });
    expect(after.ok && after.findings.map((finding) => finding.verdict)).toEqual(['holds']);
    expect(ended()).toBe(0);
    const first = told.find((message) => message.kind === 'answer');
    expect(first?.kind === 'answer' && 'ok' in first.answer && !first.answer.ok && first.answer.error.message).toMatch(/cancelled/);
  });

  it('stands in the one queue where nobody asked for two', async () => {
    const { client } = room(false);
    const order: string[] = [];
    const checking = client.ask(check).then(() => order.push('check'));
    await client.ask(expand).then(() => order.push('expand'));
    await checking;
    expect(order).toEqual(['check', 'expand']);
  });
});

describe('a worker that is ended because of one request', () => {
  it('is asked again for the other', async () => {
    const posted: ToWorker[] = [];
    let started = 0;
    const client = createEngineClient({
      checksAside: true,
      grace: 0,
      readFile: () => Promise.resolve(null),
      start: (events) => {
        started += 1;
        const second = started === 2;
        return {
          post: (message) => {
            posted.push(message);
            if (second && message.kind === 'ask') events.message({ kind: 'answer', ticket: message.ticket, answer: { ok: true, findings: [], unread: [] } });
          },
          end: () => undefined,
        };
      },
    });
    const checking = client.ask(check);
    const stuck = await client.ask({ ...expand, budget_ms: 20 });
    expect(stuck.ok).toBe(false);
    expect((await checking).ok).toBe(true);
    expect(started).toBe(2);
  });
});
