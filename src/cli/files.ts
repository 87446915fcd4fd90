/** The documents and sources below the operands, .gitignore respected. */
import { readFile, readdir, stat } from 'node:fs/promises';
import { dirname, join, relative, resolve, sep } from 'node:path';
import ignore, { type Ignore } from 'ignore';

const LANGUAGE_BY_ENDING: Readonly<Record<string, string>> = {
  tex: 'latex',
  sty: 'latex',
  md: 'markdown',
  markdown: 'markdown',
  qmd: 'markdown',
  rmd: 'markdown',
  ipynb: 'notebook',
  txt: 'plain',
  c: 'c',
  h: 'c',
  cc: 'cpp',
  cpp: 'cpp',
  cxx: 'cpp',
  hh: 'cpp',
  hpp: 'cpp',
  cu: 'cpp',
  py: 'python',
  js: 'javascript',
  mjs: 'javascript',
  cjs: 'javascript',
  ts: 'typescript',
  mts: 'typescript',
  rs: 'rust',
  java: 'java',
  cs: 'csharp',
  go: 'go',
  jl: 'julia',
  f: 'fortran',
  f90: 'fortran',
  f95: 'fortran',
  f03: 'fortran',
  f08: 'fortran',
  m: 'matlab',
  r: 'r',
  glsl: 'glsl',
  vert: 'glsl',
  frag: 'glsl',
  comp: 'glsl',
  hlsl: 'hlsl',
  kt: 'kotlin',
  kts: 'kotlin',
  swift: 'swift',
};

export interface SourceFile {
  readonly path: string;
  readonly language: string;
}

export function languageOfPath(path: string): string | null {
  const ending = /\.([^./\\]+)$/.exec(path)?.[1]?.toLowerCase();
  return ending === undefined ? null : (LANGUAGE_BY_ENDING[ending] ?? null);
}

interface Rules {
  readonly folder: string;
  readonly rules: Ignore;
}

/** The rules of the deepest folder that say anything about the path decide, as in Git. */
function isIgnored(path: string, isFolder: boolean, stack: readonly Rules[]): boolean {
  for (const { folder, rules } of [...stack].reverse()) {
    const inside = relative(folder, path).split(sep).join('/');
    if (inside === '' || inside.startsWith('..')) continue;
    const said = rules.test(isFolder ? `${inside}/` : inside);
    if (said.ignored || said.unignored) return said.ignored;
  }
  return false;
}

async function rulesOf(folder: string, file = '.gitignore'): Promise<readonly Rules[]> {
  try {
    return [{ folder, rules: ignore().add(await readFile(join(folder, file), 'utf8')) }];
  } catch {
    return [];
  }
}

/** Rules of the folders above, up to the root of the repository; none outside of one. */
async function rulesAbove(folder: string): Promise<readonly Rules[]> {
  const above: string[] = [];
  for (let here = resolve(folder); ; here = dirname(here)) {
    if (await exists(join(here, '.git'))) {
      const shared = await rulesOf(here, join('.git', 'info', 'exclude'));
      return [...shared, ...(await Promise.all(above.reverse().map((f) => rulesOf(f)))).flat()];
    }
    if (dirname(here) === here) return [];
    above.push(dirname(here));
  }
}
const exists = (path: string): Promise<boolean> =>
  stat(path).then(
    () => true,
    () => false,
  );

/** Files named as operands are taken whatever they are called (unknown endings as plain text); folders are searched. Each file once. `missing`: operands that are not there; `unreadable`: folders below them that could not be opened. */
export async function sourceFiles(operands: readonly string[]): Promise<{ readonly files: readonly SourceFile[]; readonly missing: readonly string[]; readonly unreadable: readonly string[] }> {
  const files: SourceFile[] = [];
  const missing: string[] = [];
  const unreadable: string[] = [];
  const visit = async (folder: string, above: readonly Rules[]): Promise<void> => {
    const stack = [...above, ...(await rulesOf(folder))];
    const entries = await readdir(folder, { withFileTypes: true }).catch(() => {
      unreadable.push(folder);
      return [];
    });
    entries.sort((a, b) => (a.name < b.name ? -1 : 1));
    for (const entry of entries) {
      const path = join(folder, entry.name);
      if (entry.isDirectory()) {
        if (entry.name !== '.git' && entry.name !== 'node_modules' && !isIgnored(path, true, stack)) await visit(path, stack);
      } else if (entry.isFile()) {
        const language = languageOfPath(path);
        if (language !== null && !isIgnored(path, false, stack)) files.push({ path, language });
      }
    }
  };
  for (const operand of operands) {
    try {
      if ((await stat(operand)).isDirectory()) {
        const above = await rulesAbove(operand);
        // A folder that is named outright is searched even where Git leaves it out.
        await visit(operand, isIgnored(operand, true, above) ? [] : above);
      }
      else files.push({ path: operand, language: languageOfPath(operand) ?? 'plain' });
    } catch {
      missing.push(operand);
    }
  }
  const once = new Map(files.map((file) => [resolve(file.path), file]));
  return { files: [...once.values()], missing, unreadable };
}
