/** The engine with its bundled files, for requests as a client would send them. */
import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { createEngine } from '../../src/engine.ts';
import type { FitAnswer } from '../../src/protocol.ts';

const require = createRequire(import.meta.url);
const folders = [join(dirname(require.resolve('@vscode/tree-sitter-wasm/package.json')), 'wasm'), dirname(require.resolve('tree-sitter-c/package.json')), dirname(require.resolve('web-tree-sitter'))];

const engine = createEngine({
  loadFile: async (name) => {
    for (const folder of folders) {
      try {
        return new Uint8Array(await readFile(join(folder, name)));
      } catch {
        // The next folder.
      }
    }
    throw new Error(`no file ${name}`);
  },
});

export const ask = (request: Readonly<Record<string, unknown>>): ReturnType<typeof engine.ask> => engine.ask({ ask: 'fit', language: 'plain', budget_ms: 60_000, ...request });

export async function fitAnswer(request: Readonly<Record<string, unknown>>): Promise<FitAnswer> {
  const answer = await ask(request);
  if (!answer.ok) throw new Error(answer.error.message);
  if (!('coefficients' in answer)) throw new Error('no fit');
  return answer;
}
