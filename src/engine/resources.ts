/** What the engine needs from its host: the bytes of bundled files (grammars) by name. It has no file system of its own. */
export interface EngineResources {
  /** Rejects where there is no such file. */
  readonly loadFile: (name: string) => Promise<Uint8Array>;
}
