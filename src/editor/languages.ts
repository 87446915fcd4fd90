/** Which documents the extension serves. Unknown identifiers fall back to the file's extension; without either only the command works. */
import * as vscode from 'vscode';

/** Editor identifiers that several extensions use for one language, and the identifier the engine knows. */
const ALIASES: Readonly<Record<string, string>> = {
  tex: 'latex',
  quarto: 'markdown',
  rmd: 'markdown',
  mdx: 'markdown',
  'cuda-cpp': 'cpp',
  'objective-c': 'c',
  'objective-cpp': 'cpp',
  javascriptreact: 'javascript',
  FortranFreeForm: 'fortran',
  'fortran-modern': 'fortran',
  FortranFixedForm: 'fortran',
};
const KNOWN = [
  ...['latex', 'markdown', 'c', 'cpp', 'python', 'javascript', 'typescript', 'typescriptreact', 'rust', 'java', 'go', 'csharp', 'julia', 'fortran', 'matlab', 'r', 'glsl', 'hlsl', 'kotlin', 'swift'],
] as const;
const BY_EXTENSION: Readonly<Record<string, string>> = {
  tex: 'latex',
  ltx: 'latex',
  md: 'markdown',
  qmd: 'markdown',
  rmd: 'markdown',
  f: 'fortran',
  for: 'fortran',
  f90: 'fortran',
  f95: 'fortran',
  f03: 'fortran',
  f08: 'fortran',
  jl: 'julia',
  m: 'matlab',
  kt: 'kotlin',
  swift: 'swift',
  glsl: 'glsl',
  vert: 'glsl',
  frag: 'glsl',
  comp: 'glsl',
  hlsl: 'hlsl',
  cu: 'cpp',
};

/** The engine's name of a document's language; `plain` where none is known. */
export function engineLanguage(document: { readonly languageId: string; readonly uri: vscode.Uri }): string {
  const { languageId } = document;
  const known = ALIASES[languageId] ?? (KNOWN.find((id) => id === languageId) as string | undefined);
  if (known === 'typescriptreact') return 'typescript';
  if (known) return known;
  const extension = /\.([A-Za-z0-9]+)$/.exec(document.uri.path)?.[1]?.toLowerCase();
  return (extension && BY_EXTENSION[extension]) ?? 'plain';
}

export const isProse = (language: string): boolean => language === 'latex' || language === 'markdown';
export const isCode = (language: string): boolean => !isProse(language) && language !== 'plain';

/** Documents in which hovers, fixes and checks appear by themselves. Any scheme: untitled, virtual, notebook cells. */
export const SELECTOR: vscode.DocumentSelector = [...new Set([...KNOWN, ...Object.keys(ALIASES)])].map((language) => ({ language }));
export const serves = (document: vscode.TextDocument): boolean => vscode.languages.match(SELECTOR, document) > 0 && !document.uri.scheme.startsWith('output');

const COMMENTS: Readonly<Record<string, readonly [string, string]>> = {
  latex: ['% ', ''],
  markdown: ['<!-- ', ' -->'],
  python: ['# ', ''],
  julia: ['# ', ''],
  r: ['# ', ''],
  fortran: ['! ', ''],
  matlab: ['% ', ''],
};
/** What opens and closes a one-line comment. */
export const commentMarks = (language: string): readonly [string, string] => COMMENTS[language] ?? ['// ', ''];
