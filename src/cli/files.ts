/** The documents and sources below the operands, .gitignore respected. */
import { readFile, readdir, stat } from 'node:fs/promises';
import { join, relative, sep } from 'node:path';
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

const isIgnored = (path: string, isFolder: boolean, stack: readonly Rules[]): boolean =>
  stack.some(({ folder, rules }) => {
    const inside = relative(folder, path).split(sep).join('/');
    return inside !== '' && !inside.startsWith('..') && rules.ignores(isFolder ? `${inside}/` : inside);
  });

async function rulesOf(folder: string): Promise<readonly Rules[]> {
  try {
    return [{ folder, rules: ignore().add(await readFile(join(folder, '.gitignore'), 'utf8')) }];
  } catch {
    return [];
  }
}

/** Files named as operands are taken whatever they are called (unknown endings as plain text); folders are searched. Missing operands are listed in `missing`. */
export async function sourceFiles(operands: readonly string[]): Promise<{ readonly files: readonly SourceFile[]; readonly missing: readonly string[] }> {
  const files: SourceFile[] = [];
  const missing: string[] = [];
  const visit = async (folder: string, above: readonly Rules[]): Promise<void> => {
    const stack = [...above, ...(await rulesOf(folder))];
    const entries = await readdir(folder, { withFileTypes: true });
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
      if ((await stat(operand)).isDirectory()) await visit(operand, []);
      else files.push({ path: operand, language: languageOfPath(operand) ?? 'plain' });
    } catch {
      missing.push(operand);
    }
  }
  return { files, missing };
}
