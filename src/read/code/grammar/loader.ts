/** Loads grammars on demand and keeps the last concrete tree, so that repeated questions about one document parse once. */
import { Language, Parser, type Tree } from 'web-tree-sitter';

/** Where bytes come from; nothing here reads files or the network by itself. */
export interface GrammarHost {
  /** Bytes of `<name>.wasm`, such as `tree-sitter-python`. */
  readonly loadGrammar: (name: string) => Promise<Uint8Array>;
  /** Bytes of the parser runtime (web-tree-sitter.wasm), or how to get them. */
  readonly wasmBinary: Uint8Array | ArrayBuffer | (() => Promise<Uint8Array | ArrayBuffer>);
}

/** The runtime exists once in a process, however many readers use it. */
let runtime: Promise<void> | null = null;

async function startRuntime(host: GrammarHost): Promise<void> {
  runtime ??= (async () => {
    const bytes = typeof host.wasmBinary === 'function' ? await host.wasmBinary() : host.wasmBinary;
    const view = bytes instanceof Uint8Array ? bytes : new Uint8Array(bytes);
    await Parser.init({ wasmBinary: view.buffer.slice(view.byteOffset, view.byteOffset + view.byteLength) as ArrayBuffer });
  })();
  try {
    await runtime;
  } catch (error) {
    runtime = null;
    throw error;
  }
}

export class GrammarStore {
  readonly #host: GrammarHost;
  readonly #parsers = new Map<string, Parser>();
  readonly #loading = new Map<string, Promise<Parser>>();
  #last: { readonly grammar: string; readonly text: string; readonly tree: Tree } | null = null;

  constructor(host: GrammarHost) {
    this.#host = host;
  }

  /** Loads one grammar, once. Rejects where its bytes cannot be had or are of another version. */
  async prepare(grammar: string): Promise<void> {
    if (this.#parsers.has(grammar)) return;
    let loading = this.#loading.get(grammar);
    if (!loading) {
      loading = (async () => {
        await startRuntime(this.#host);
        const language = await Language.load(await this.#host.loadGrammar(grammar));
        return new Parser().setLanguage(language);
      })();
      this.#loading.set(grammar, loading);
    }
    try {
      this.#parsers.set(grammar, await loading);
    } finally {
      this.#loading.delete(grammar);
    }
  }

  ready(grammar: string): boolean {
    return this.#parsers.has(grammar);
  }

  /** The concrete tree of a document, valid until the next call; null before `prepare`. */
  parseDocument(grammar: string, text: string): Tree | null {
    if (this.#last?.grammar === grammar && this.#last.text === text) return this.#last.tree;
    const tree = this.#parsers.get(grammar)?.parse(text) ?? null;
    if (!tree) return null;
    this.#last?.tree.delete();
    this.#last = { grammar, text, tree };
    return tree;
  }

  /** Runs `use` on a tree of a passing text and frees it. */
  withTree<T>(grammar: string, text: string, use: (tree: Tree) => T): T | null {
    const tree = this.#parsers.get(grammar)?.parse(text) ?? null;
    if (!tree) return null;
    try {
      return use(tree);
    } finally {
      tree.delete();
    }
  }
}
