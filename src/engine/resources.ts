/** What the engine needs from its host, and what it keeps between requests. It has no file system of its own. */
import { CheckMemory } from '../check/index.ts';
import { CodeReader } from '../read/index.ts';

export interface EngineResources {
  /** Bytes of a bundled file (a grammar, the parser runtime) by name. Rejects where there is no such file. */
  readonly loadFile: (name: string) => Promise<Uint8Array>;
  /** Whether the request that is being answered has been withdrawn. Asked often, so it must be cheap; without it a request ends by its time alone. */
  readonly interrupted?: () => boolean;
  /** Called between the claims of a check: other requests may be answered before it resolves; it throws `Interrupted` to give the check up. */
  readonly pause?: () => Promise<void>;
}

/** State that lives as long as one engine: loaded grammars, verdicts of earlier checks. */
export interface EngineTools {
  readonly code: CodeReader;
  readonly memory: CheckMemory;
  readonly pause?: () => Promise<void>;
}

const PARSER_RUNTIME = 'web-tree-sitter.wasm';

export function engineTools(resources: EngineResources): EngineTools {
  const code = new CodeReader({
    loadGrammar: (name) => resources.loadFile(`${name}.wasm`),
    wasmBinary: () => resources.loadFile(PARSER_RUNTIME),
  });
  return { code, memory: new CheckMemory(), ...(resources.pause ? { pause: resources.pause } : {}) };
}
