/** The files that a LaTeX document refers to, gathered from open editors and the workspace's file system, whatever that is. */
import * as vscode from 'vscode';
import { companionsOf, joinedPath, referencedFiles } from '../companions.ts';
import type { CompanionFile } from '../protocol.ts';

/** What the files belong to; an open document is one. */
export interface CompanionOwner {
  readonly uri: vscode.Uri;
  readonly text: string;
  readonly language: string;
}
interface Gathered {
  /** What the text referred to when the files were gathered. */
  readonly references: string;
  readonly at: number;
  readonly files: Promise<readonly CompanionFile[]>;
  /** Of the files found; null until they are: any file may then be among them. */
  readonly paths: () => ReadonlySet<string> | null;
}

const PATTERN = '**/*.{tex,ltx,sty,cls,def,cfg,inc,macros,latex}';
const ENDING = /\.(?:tex|ltx|sty|cls|def|cfg|inc|macros|latex)$/i;
/** Some file systems tell of no changes; gathered files are looked at again after so long. */
const KEPT_MS = 30_000;
const LONGEST_BYTES = 2_000_000;
const NONE: Promise<readonly CompanionFile[]> = Promise.resolve([]);

export class Companions implements vscode.Disposable {
  readonly #gathered = new Map<string, Gathered>();
  readonly #listeners: vscode.Disposable[] = [];
  readonly #changes = new vscode.EventEmitter<readonly string[]>();
  #generation = 0;

  /** Addresses of the documents that refer to a file that changed. */
  readonly onDidChange = this.#changes.event;

  /** Rises when a file that was handed over may have changed. */
  get generation(): number {
    return this.#generation;
  }

  of({ uri, text, language }: CompanionOwner): Promise<readonly CompanionFile[]> {
    const references = referencedFiles(text, language).join('\n');
    if (references === '' || uri.scheme === 'untitled') return NONE;
    this.#watch();
    const key = uri.toString();
    const known = this.#gathered.get(key);
    if (known && known.references === references && Date.now() - known.at < KEPT_MS) return known.files;
    const folder = folderOf(uri.path);
    let paths: ReadonlySet<string> | null = null;
    const files = companionsOf({ path: uri.path, text, language }, (path) => read(uri, path)).then((found) => {
      paths = new Set(found.map(({ name }) => name));
      return found.map(({ name, text: content }) => ({ name: name.startsWith(`${folder}/`) ? name.slice(folder.length + 1) : name, text: content }));
    });
    this.#gathered.set(key, { references, at: Date.now(), files, paths: () => paths });
    return files;
  }

  dispose(): void {
    this.#changes.dispose();
    for (const listener of this.#listeners) listener.dispose();
  }

  /** Begins with the first document that refers to a file. */
  #watch(): void {
    if (this.#listeners.length > 0) return;
    const watcher = vscode.workspace.createFileSystemWatcher(PATTERN);
    const changed = (uri: vscode.Uri): void => this.#changed(uri);
    // A file that appears may be the one that was missing.
    const appeared = (uri: vscode.Uri): void => this.#changed(uri, true);
    this.#listeners.push(
      watcher,
      watcher.onDidChange(changed),
      watcher.onDidCreate(appeared),
      watcher.onDidDelete(changed),
      vscode.workspace.onDidChangeTextDocument(({ document, contentChanges }) => contentChanges.length > 0 && ENDING.test(document.uri.path) && this.#changed(document.uri)),
    );
  }

  /** What the document itself says is not among its own companions: typing in it keeps them. */
  #changed(uri: vscode.Uri, anywhere = false): void {
    const own = uri.toString();
    const concerned: string[] = [];
    for (const [key, { paths }] of [...this.#gathered]) {
      if (key === own) continue;
      if (anywhere || (paths()?.has(uri.path) ?? true)) concerned.push(key);
      this.#gathered.delete(key);
      this.#generation += 1;
    }
    if (concerned.length > 0) this.#changes.fire(concerned);
  }
}

/** Only what the user has opened, and what lies in a folder of the workspace or, outside of one, below the document's own folder. */
async function read(owner: vscode.Uri, path: string): Promise<string | null> {
  const uri = owner.with({ path, query: '', fragment: '' });
  const open = vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === uri.toString());
  if (open) return open.getText();
  const allowed = vscode.workspace.getWorkspaceFolder(uri) !== undefined || joinedPath('', path).startsWith(`${joinedPath('', folderOf(owner.path))}/`);
  if (!allowed) return null;
  try {
    const { type, size } = await vscode.workspace.fs.stat(uri);
    if ((type & vscode.FileType.File) === 0 || size > LONGEST_BYTES) return null;
    return new TextDecoder().decode(await vscode.workspace.fs.readFile(uri));
  } catch {
    return null;
  }
}

const folderOf = (path: string): string => path.slice(0, Math.max(0, path.lastIndexOf('/')));
