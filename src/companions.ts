/**
 * The files that a LaTeX document refers to, whose macros and definitions it may use. The engine reads no files: a host gathers them with `companionsOf`
 * and hands them over in a request's `files`. Pure text and path work, light enough for every host.
 */
import type { CompanionFile } from './protocol.ts';

/** Endings of files that may be read on behalf of a document. */
const READABLE = /\.(?:tex|ltx|sty|cls|def|cfg|inc|macros|latex)$/i;
const COMMENT = /(?<!\\)((?:\\\\)*)%[^\n]*/g;
const NAMING = /\\(input|include|subfile|subfileinclude|InputIfFileExists|loadglsentries)\s*\{([^{}\n]{1,400})\}|\\(input)\s+([^\s{}\\]{1,400})|\\(?:sub)?(?:import|includefrom|inputfrom)\*?\s*\{([^{}\n]{0,400})\}\s*\{([^{}\n]{1,400})\}|\\(usepackage|RequirePackage|documentclass|LoadClass)\s*(?:\[([^\]]{0,2000})\])?\s*\{([^{}]{1,2000})\}/g;
/** `% !TEX root = main.tex`, and the master file among an editor's local variables. */
const ROOT = /^[ \t]*%+(?!%)[ \t]*![ \t]*TeX[ \t]+root[ \t]*=[ \t]*([^\s][^\n]{0,400})$|^[ \t]*%+(?!%)[^\n]{0,400}\bTeX-master:[ \t]*"([^"\n]+)"/gim;

const MOST_FILES = 200;
const MOST_CHARACTERS = 8_000_000;

export interface FileReference {
  /** With its ending, relative: `macros.tex`, `../main.tex`. */
  readonly name: string;
  /** `package`: a style file or class, which may as well belong to the system. `root`: the document that this one is a part of. */
  readonly kind: 'root' | 'part' | 'package';
}

const withEnding = (name: string, ending: string): string => (READABLE.test(name) ? name : `${name}${ending}`);
const isRelative = (name: string): boolean => name !== '' && !/^(?:[\\/~|]|[a-z][\w+.-]*:)/i.test(name) && !/[\\#$]/.test(name);

/** What a text refers to, in order of appearance, each once. Empty for languages other than LaTeX. Linear in the text. */
export function fileReferences(text: string, language: string): readonly FileReference[] {
  if (language !== 'latex' && language !== 'tex') return [];
  const found = new Map<string, FileReference>();
  const add = (name: string, kind: FileReference['kind'], ending: string): void => {
    const plain = name.trim().replace(/^"(.*)"$/, '$1').replace(/^\.\//, '');
    if (!isRelative(plain)) return;
    const full = withEnding(plain, ending);
    if (!found.has(full)) found.set(full, { name: full, kind });
  };
  for (const match of text.matchAll(ROOT)) add(match[1] ?? match[2] ?? '', 'root', '.tex');
  for (const match of text.replace(COMMENT, '$1').matchAll(NAMING)) {
    const [, , braced, , bare, folder, inFolder, command, options, names] = match;
    if (inFolder !== undefined) add(`${(folder ?? '').replace(/\/?$/, folder ? '/' : '')}${inFolder}`, 'part', '.tex');
    else if (command === undefined) add(braced ?? bare ?? '', 'part', '.tex');
    else if (command === 'documentclass' && names?.trim() === 'subfiles') add(options ?? '', 'root', '.tex');
    else for (const name of (names ?? '').split(',')) add(name, 'package', /lass$/.test(command) ? '.cls' : '.sty');
  }
  return [...found.values()];
}

/** Names of the files that a document wants to be checked with, relative to its own folder or its root file's. */
export const referencedFiles = (text: string, language: string): readonly string[] => fileReferences(text, language).map((r) => r.name);

/** A path with `/`, `.` and `..` worked out; a leading `..` stays. */
export function joinedPath(folder: string, name: string): string {
  const out: string[] = [];
  for (const part of `${folder}/${name}`.split('/')) {
    if (part === '' || part === '.') continue;
    if (part === '..' && out.length > 0 && out.at(-1) !== '..') out.pop();
    else out.push(part);
  }
  return `${folder.startsWith('/') ? '/' : ''}${out.join('/')}`;
}
const folderOf = (path: string): string => (path.includes('/') ? path.slice(0, path.lastIndexOf('/')) || '/' : '.');

/**
 * Every file that a document refers to, through other files too, as the `files` of a request: the root document and what it loads first, as TeX would.
 * `path` has `/` between folders; `read` gives null for what is not there or may not be read. A document that another one refers to
 * stands among them by its name alone, so that it is not taken for missing. At most 200 files and 8 million characters.
 */
export async function companionsOf(document: { readonly path: string; readonly text: string; readonly language: string }, read: (path: string) => Promise<string | null>): Promise<readonly CompanionFile[]> {
  const itself = joinedPath(folderOf(document.path), document.path.slice(document.path.lastIndexOf('/') + 1));
  const seen = new Set([itself]);
  let refersBack = false;
  const files: CompanionFile[] = [];
  let characters = 0;
  let tries = 0;
  const visit = async (text: string, folder: string, root: string): Promise<void> => {
    const references = fileReferences(text, document.language);
    for (const { name, kind } of [...references.filter((r) => r.kind === 'root'), ...references.filter((r) => r.kind !== 'root')]) {
      for (const from of new Set([folder, root])) {
        const path = joinedPath(from, name);
        refersBack ||= path === itself;
        if (seen.has(path)) break;
        if (files.length >= MOST_FILES || tries >= 8 * MOST_FILES) return;
        tries += 1;
        const found = await read(path);
        if (found === null) continue;
        seen.add(path);
        characters += found.length;
        if (characters > MOST_CHARACTERS) return;
        const own = folderOf(path);
        const place = files.length;
        await visit(found, own, kind === 'root' ? own : root);
        // What a file loads comes before what it says itself; the root goes on before its parts.
        files.splice(kind === 'root' ? place : files.length, 0, { name: path, text: found });
        break;
      }
    }
  };
  const own = folderOf(document.path);
  const rootName = fileReferences(document.text, document.language).find((r) => r.kind === 'root');
  await visit(document.text, own, rootName ? folderOf(joinedPath(own, rootName.name)) : own);
  return refersBack ? [{ name: itself, text: '' }, ...files] : files;
}

/** Parts and roots that the text, or a file given with it, refers to and that were not given; packages only where their name has a folder. */
export function missingFiles(text: string, language: string, files: readonly CompanionFile[]): readonly string[] {
  const given = files.map((f) => `/${joinedPath('', f.name)}`);
  const wanted = [text, ...files.map((f) => f.text)].flatMap((t) => fileReferences(t, language)).filter((r) => r.kind !== 'package' || r.name.includes('/'));
  const tail = (name: string): string => `/${joinedPath('', name).replace(/^(?:\.\.\/)+/, '')}`;
  return [...new Set(wanted.map((r) => r.name))].filter((name) => !given.some((path) => path.endsWith(tail(name))));
}
