import { PassThrough } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { batch } from '../../src/cli/batch.ts';
import type { Answer, Request } from '../../src/protocol.ts';
import type { EngineClient } from '../../src/worker/client.ts';

/** An engine that answers a request when it is told to. */
function engine(): { readonly client: EngineClient; readonly answer: (id: number) => void } {
  const waiting = new Map<number, (answer: Answer) => void>();
  const early = new Set<number>();
  const answerOf = (id: number): Answer => ({ id, ok: false, error: { code: 'unreadable', message: 'x' } });
  const client = {
    ask: (request: Request) =>
      new Promise<Answer>((resolve) => {
        const id = Number(request.id);
        if (early.has(id)) resolve(answerOf(id));
        else waiting.set(id, resolve);
      }),
    dispose: () => undefined,
  } as unknown as EngineClient;
  return {
    client,
    answer: (id) => {
      early.add(id);
      waiting.get(id)?.(answerOf(id));
    },
  };
}

const line = (id: number): string => `{"id":${id},"ask":"expand","text":"x"}\n`;
const idsIn = (text: string): readonly unknown[] => text.split('\n').filter((l) => l !== '').map((l) => (JSON.parse(l) as Answer).id);

describe('batch', () => {
  it('answers one line while more may come, and keeps the order asked', async () => {
    const { client, answer } = engine();
    const [input, output] = [new PassThrough(), new PassThrough()];
    let written = '';
    output.on('data', (piece: Buffer) => {
      written += piece.toString();
    });
    const settled = (): Promise<void> => new Promise((resolve) => setTimeout(resolve, 20));
    const done = batch([client, client], { input, output });
    input.write(line(1));
    answer(1);
    await settled();
    expect(idsIn(written)).toEqual([1]);
    input.write(line(2) + line(3));
    answer(3);
    await settled();
    expect(idsIn(written)).toEqual([1]);
    answer(2);
    await settled();
    expect(idsIn(written)).toEqual([1, 2, 3]);
    for (let id = 4; id <= 30; id += 1) input.write(line(id));
    for (let id = 30; id >= 4; id -= 1) answer(id);
    input.end();
    await done;
    expect(idsIn(written)).toEqual(Array.from({ length: 30 }, (_, i) => i + 1));
  });
});
