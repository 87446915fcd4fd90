/** Reads the files that a document refers to, for the engine. Only files inside one folder tree are opened, links followed to where they lead. */
import { readFile, realpath } from 'node:fs/promises';
import { dirname, isAbsolute, relative, resolve, sep } from 'node:path';
import { companionsOf } from '../companions.ts';
import type { CompanionFile } from '../protocol.ts';

const isInside = (tree: string, path: string): boolean => {
  const way = relative(tree, path);
  return way !== '..' && !way.startsWith(`..${sep}`) && !isAbsolute(way);
};

export class CompanionReader {
  private readonly known = new Map<string, Promise<string | null>>();
  private readonly folder: string;

  /** `folder`: where the command was started. */
  constructor(folder: string) {
    this.folder = folder;
  }

  /** The `files` of a request about the document. Those outside of the started folder's tree (of the document's own folder, where it lies elsewhere) are left out. */
  async of(path: string, text: string, language: string): Promise<readonly CompanionFile[]> {
    const own = dirname(resolve(this.folder, path));
    const tree = await realpath(isInside(this.folder, own) ? this.folder : own);
    const files = await companionsOf({ path: resolve(this.folder, path).split(sep).join('/'), text, language }, (name) => this.read(name, tree));
    return files.map((file) => ({ ...file, name: relative(own, file.name).split(sep).join('/') }));
  }

  private async read(path: string, tree: string): Promise<string | null> {
    try {
      const real = await realpath(path);
      if (!isInside(tree, real)) return null;
      const known = this.known.get(real) ?? readFile(real, 'utf8');
      this.known.set(real, known);
      return await known;
    } catch {
      return null;
    }
  }
}
