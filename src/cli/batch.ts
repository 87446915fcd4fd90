/** JSON Lines in, JSON Lines out, in the order asked; a bad line is answered, never fatal. */
import { createInterface } from 'node:readline';
import type { Answer, Request } from '../protocol.ts';
import type { EngineClient } from '../worker/client.ts';

export interface BatchStreams {
  readonly input: NodeJS.ReadableStream;
  readonly output: NodeJS.WritableStream;
}

/** Requests are spread over the engines given; answers are written in the order asked, each as soon as it and all before it are there, whether or not more input comes. */
export async function batch(engines: readonly EngineClient[], { input, output }: BatchStreams): Promise<void> {
  const lines = createInterface({ input, crlfDelay: Infinity });
  const window = engines.length * 4;
  const pending: Promise<void>[] = [];
  let last: Promise<void> = Promise.resolve();
  let next = 0;
  const write = async (answer: Answer): Promise<void> => {
    if (!output.write(`${JSON.stringify(answer)}\n`)) await new Promise<void>((resolve) => output.once('drain', () => resolve()));
  };
  const writeAfter = async (before: Promise<void>, answer: Promise<Answer>): Promise<void> => {
    await before;
    await write(await answer);
  };
  for await (const line of lines) {
    if (line.trim() === '') continue;
    const engine = engines[next % engines.length];
    next += 1;
    if (!engine) continue;
    last = writeAfter(last, answerLine(engine, line));
    pending.push(last);
    // No more requests are taken in than the engines can hold; what is read later waits in the pipe.
    if (pending.length >= window) await pending.shift();
  }
  await last;
}

async function answerLine(engine: EngineClient, line: string): Promise<Answer> {
  let request: unknown;
  try {
    request = JSON.parse(line);
  } catch {
    return { ok: false, error: { code: 'bad-request', message: 'This line is not JSON; each line holds one request object.' } };
  }
  // The worker validates every field; the cast only says that it is on its way there.
  return engine.ask(typeof request === 'object' && request !== null ? (request as Request) : ({ ask: null } as unknown as Request));
}
