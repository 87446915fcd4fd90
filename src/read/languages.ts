/** One table of VS Code language identifiers and aliases: which reader serves a language, its comment syntax and its string rules. */

/** A literal that hides comment signs. `escape`: a backslash protects the next character, or the closing sign is doubled. */
export interface StringRule {
  readonly open: string;
  readonly close: string;
  readonly escape: 'backslash' | 'doubled' | 'none';
  /** May run over line ends. */
  readonly multiline: boolean;
}
export interface CommentSyntax {
  /** Signs that start a comment up to the end of the line. */
  readonly line: readonly string[];
  /** Opening and closing signs. */
  readonly block: readonly (readonly [string, string])[];
  /** Block comments nest. */
  readonly nested: boolean;
}
export interface Language {
  /** VS Code identifier under which the other tables list the language. */
  readonly id: string;
  readonly reader: 'latex' | 'markdown' | 'plain' | 'code';
  readonly comments: CommentSyntax;
  readonly strings: readonly StringRule[];
  /** Further identifiers that editors and extensions use. */
  readonly aliases: readonly string[];
  /** File name endings with their dot, lower case. */
  readonly extensions: readonly string[];
}

const SLASHES: CommentSyntax = { line: ['//'], block: [['/*', '*/']], nested: false };
const NESTED_SLASHES: CommentSyntax = { ...SLASHES, nested: true };
const HASH: CommentSyntax = { line: ['#'], block: [], nested: false };
const NONE: CommentSyntax = { line: [], block: [], nested: false };
const double: StringRule = { open: '"', close: '"', escape: 'backslash', multiline: false };
const single: StringRule = { open: "'", close: "'", escape: 'backslash', multiline: false };
const backtick: StringRule = { open: '`', close: '`', escape: 'backslash', multiline: true };
const triple = (sign: string): StringRule => ({ open: sign.repeat(3), close: sign.repeat(3), escape: 'backslash', multiline: true });
const C_STRINGS = [{ open: 'R"(', close: ')"', escape: 'none', multiline: true } as const, double, single];
const SCRIPT_STRINGS = [double, single, backtick];

const code = (id: string, comments: CommentSyntax, strings: readonly StringRule[], extensions: string, aliases = ''): Language => ({
  id,
  reader: 'code',
  comments,
  strings,
  aliases: aliases === '' ? [] : aliases.split(' '),
  extensions: extensions.split(' '),
});

export const LANGUAGES: readonly Language[] = [
  { id: 'latex', reader: 'latex', comments: { line: ['%'], block: [], nested: false }, strings: [], aliases: ['tex', 'latex-expl3', 'context', 'doctex', 'pweave', 'rsweave', 'jlweave', 'plaintex', 'LaTeX', 'TeX'], extensions: ['.tex', '.ltx', '.latex', '.sty', '.cls', '.rnw', '.jtexw', '.texw', '.dtx'] },
  { id: 'markdown', reader: 'markdown', comments: { line: [], block: [['<!--', '-->']], nested: false }, strings: [], aliases: ['quarto', 'rmd', 'rmarkdown', 'mdx', 'myst', 'juliamarkdown', 'weave_markdown', 'md', 'Markdown'], extensions: ['.md', '.markdown', '.mkd', '.mdown', '.qmd', '.rmd', '.mdx', '.jmd'] },
  { id: 'plain', reader: 'plain', comments: { line: ['#', '//', '%'], block: [['<!--', '-->']], nested: false }, strings: [], aliases: ['plaintext', 'text', 'txt', 'restructuredtext', 'asciidoc', 'log', 'org'], extensions: ['.txt', '.text', '.rst', '.adoc', '.org'] },
  code('c', SLASHES, [double, single], '.c .h .cl', 'objective-c opencl C'),
  code('cpp', SLASHES, C_STRINGS, '.cpp .cc .cxx .c++ .hpp .hh .hxx .h++ .ipp .inl .tpp .cu .cuh .mm .metal .ino', 'cuda-cpp cuda objective-cpp metal arduino c++'),
  code('python', HASH, [triple('"'), triple("'"), double, single], '.py .pyi .pyw .pyx .pxd .sage', 'cython sagemath py'),
  code('javascript', SLASHES, SCRIPT_STRINGS, '.js .mjs .cjs', 'js'),
  code('javascriptreact', SLASHES, SCRIPT_STRINGS, '.jsx', 'jsx'),
  code('typescript', SLASHES, SCRIPT_STRINGS, '.ts .mts .cts', 'ts'),
  code('typescriptreact', SLASHES, SCRIPT_STRINGS, '.tsx', 'tsx'),
  code('rust', NESTED_SLASHES, [{ open: 'r#"', close: '"#', escape: 'none', multiline: true }, { ...double, multiline: true }], '.rs', 'rs'),
  code('java', SLASHES, [triple('"'), double, single], '.java'),
  code('csharp', SLASHES, [triple('"'), { open: '@"', close: '"', escape: 'doubled', multiline: true }, double, single], '.cs .csx', 'c# cs'),
  code('go', SLASHES, [{ ...backtick, escape: 'none' }, double, single], '.go', 'golang'),
  code('julia', { line: ['#'], block: [['#=', '=#']], nested: true }, [triple('"'), double], '.jl', 'jl'),
  code('fortran', { line: ['!'], block: [], nested: false }, [{ ...double, escape: 'doubled' }, { ...single, escape: 'doubled' }], '.f90 .f95 .f03 .f08 .f18 .f .for .ftn .fpp', 'fortran-modern fortran-fixed-form FortranFreeForm FortranFixedForm fortran_free fortran_fixed-form fortran77 f90'),
  code('matlab', { line: ['%'], block: [['%{', '%}']], nested: true }, [double], '.m', 'octave Matlab'),
  code('r', HASH, [double, single, backtick], '.r', 'R'),
  code('glsl', SLASHES, [], '.glsl .vert .frag .geom .comp .tesc .tese .vs .fs .wgsl', 'wgsl'),
  code('hlsl', SLASHES, [double], '.hlsl .hlsli .fx .shader .cginc .compute', 'shaderlab'),
  code('kotlin', NESTED_SLASHES, [triple('"'), double, single], '.kt .kts', 'kt'),
  code('swift', NESTED_SLASHES, [triple('"'), double], '.swift'),
];

/** A comment-less text: the language of last resort. */
const FALLBACK: Language = LANGUAGES.find((l) => l.id === 'plain') ?? { id: 'plain', reader: 'plain', comments: NONE, strings: [], aliases: [], extensions: [] };
const BY_ID: ReadonlyMap<string, Language> = new Map(LANGUAGES.flatMap((l) => [l.id, ...l.aliases].map((id) => [id, l] as const)));
const BY_EXTENSION: ReadonlyMap<string, Language> = new Map(LANGUAGES.flatMap((l) => l.extensions.map((e) => [e, l] as const)));

/**
 * The language of a VS Code identifier. An unknown identifier and `plaintext` fall back to the ending of the file name, then to plain text.
 * Identifiers are compared as given, then in lower case.
 */
export function languageOf(id: string, fileName?: string): Language {
  const known = BY_ID.get(id) ?? BY_ID.get(id.toLowerCase());
  if (known && known !== FALLBACK) return known;
  const ending = fileName === undefined ? null : /\.[^./\\]+$/.exec(fileName);
  const byName = ending ? BY_EXTENSION.get(ending[0].toLowerCase()) : undefined;
  return byName ?? known ?? FALLBACK;
}

/** Whether the identifier itself is in the table. */
export const isKnownLanguage = (id: string): boolean => BY_ID.has(id) || BY_ID.has(id.toLowerCase());
