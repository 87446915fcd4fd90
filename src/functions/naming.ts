/** Helpers with which descriptions state their names. */
import { build, type Expression } from '../expression/index.ts';
import type { FunctionNames } from './description.ts';

/** Families of languages that share their library names; other language ids are aliases of these. */
export const LANGUAGE_FAMILIES = ['c', 'cpp', 'python', 'javascript', 'rust', 'java', 'csharp', 'go', 'julia', 'fortran', 'matlab', 'r', 'glsl', 'hlsl', 'kotlin', 'swift'] as const;
export type LanguageFamily = (typeof LANGUAGE_FAMILIES)[number];

const ALIASES: Readonly<Record<string, LanguageFamily>> = {
  typescript: 'javascript',
  typescriptreact: 'javascript',
  javascriptreact: 'javascript',
  'cuda-cpp': 'cpp',
  cuda: 'cpp',
  'objective-c': 'c',
  'objective-cpp': 'cpp',
  'fortran-modern': 'fortran',
  'fortran-fixed-form': 'fortran',
  FortranFreeForm: 'fortran',
  fortran_free: 'fortran',
  octave: 'matlab',
  wgsl: 'glsl',
  shaderlab: 'hlsl',
};

/** The family of a language id; null for a language without one. */
export function languageFamily(id: string): LanguageFamily | null {
  const found = LANGUAGE_FAMILIES.find((family) => family === id);
  return found ?? ALIASES[id] ?? null;
}

type CodeTable = Partial<Record<LanguageFamily, string | readonly string[]>>;

interface NameTable extends Omit<FunctionNames, 'mpmath' | 'code'> {
  /** A function name of mpmath, or the whole writing. */
  readonly mpmath: string | FunctionNames['mpmath'];
  readonly code?: CodeTable;
}

const list = (value: string | readonly string[]): readonly string[] => (typeof value === 'string' ? [value] : value);

export function names(table: NameTable): FunctionNames {
  const { mpmath, code = {}, ...rest } = table;
  const written: Record<string, readonly string[]> = {};
  for (const family of LANGUAGE_FAMILIES) {
    const entry = code[family];
    if (entry !== undefined) written[family] = list(entry);
  }
  return {
    ...rest,
    mpmath: typeof mpmath === 'string' ? (args) => `${mpmath}(${args.join(',')})` : mpmath,
    code: written,
  };
}

const capital = (name: string): string => name.charAt(0).toUpperCase() + name.slice(1);

/** The same bare name in every family, capitalised where the library does so (C#, Go); `changes` replaces entries, an empty list removes one. */
export function everywhere(name: string, changes: CodeTable = {}): CodeTable {
  const table: CodeTable = {};
  for (const family of LANGUAGE_FAMILIES) table[family] = family === 'csharp' || family === 'go' ? capital(name) : name;
  return { ...table, ...changes };
}

/** LaTeX of name_{index}(rest), for functions with one subscript. */
export const subscripted =
  (name: string) =>
  (args: readonly string[]): string =>
    `${name}_{${args[0] ?? ''}}(${args.slice(1).join(', ')})`;

/** An order read from the second place: `besselJ(x, nu)`. */
export const swapped = {
  read: (args: readonly Expression[]): readonly Expression[] | null => (args.length === 2 ? [...args].reverse() : null),
  write: (args: readonly Expression[]): readonly Expression[] | null => (args.length === 2 ? [...args].reverse() : null),
};

/** A library function that fixes the first argument: `j0(x)` is besselJ(0, x). */
export function withFirst(fixed: Expression): { readonly read: (args: readonly Expression[]) => readonly Expression[] | null; readonly write: (args: readonly Expression[]) => readonly Expression[] | null } {
  return {
    read: (args) => [fixed, ...args],
    write: (args) => {
      const [first, ...rest] = args;
      return first && first.kind === 'number' && fixed.kind === 'number' && first.value.num === fixed.value.num && first.value.den === fixed.value.den ? rest : null;
    },
  };
}
export const integerArgument = (n: number): Expression => build.number(n);
