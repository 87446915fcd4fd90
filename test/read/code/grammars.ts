/** Grammar bytes from the installed packages, for Node programs that run from the source tree (tests, development). */
import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import type { GrammarHost } from '../../../src/read/code/index.ts';

/** `from` is a file or folder URL inside the project. */
export function nodeGrammars(from: string | URL): GrammarHost {
  const { resolve } = createRequire(from);
  const bytes = async (path: string): Promise<Uint8Array> => new Uint8Array(await readFile(resolve(path)));
  return {
    wasmBinary: () => bytes('web-tree-sitter/web-tree-sitter.wasm'),
    loadGrammar: (name) => bytes(name === 'tree-sitter-c' ? 'tree-sitter-c/tree-sitter-c.wasm' : `@vscode/tree-sitter-wasm/wasm/${name}.wasm`),
  };
}
