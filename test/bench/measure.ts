/** Median engine time of one request over repeated runs in a warm engine. */
import { readFile } from 'node:fs/promises';
import { createEngine, type Engine } from '../../src/engine.ts';
import type { TimedCase } from './cases.ts';

/** Grammars from the packages that the build copies them from. */
export async function benchEngine(): Promise<Engine> {
  const folders = ['node_modules/@vscode/tree-sitter-wasm/wasm', 'node_modules/tree-sitter-c', 'node_modules/web-tree-sitter'];
  return createEngine({
    loadFile: async (name) => {
      for (const folder of folders) {
        try {
          return new Uint8Array(await readFile(`${folder}/${name}`));
        } catch {
          // The next folder may have it.
        }
      }
      throw new Error(`no file ${name}`);
    },
  });
}

export interface Timing {
  readonly median: number;
  readonly ok: boolean;
}

/** `clock` in milliseconds: the wall clock, or the processor time where other work runs beside. */
export async function medianOf(engine: Engine, { request }: TimedCase, runs = 20, clock = (): number => performance.now()): Promise<Timing> {
  const times: number[] = [];
  const first = await engine.ask(request);
  for (let k = 0; k < runs; k += 1) {
    const start = clock();
    await engine.ask(request);
    times.push(clock() - start);
  }
  times.sort((a, b) => a - b);
  return { median: times[Math.floor(times.length / 2)] ?? NaN, ok: first.ok };
}
