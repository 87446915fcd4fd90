/** What surrounds an expression while it is read: language, declared types, imports, local names, and remarks to hand back. */
import type { Expression, Span } from '../../expression/index.ts';
import type { CodeLanguage } from './languages/language.ts';
import type { ListCode } from './syntax.ts';
import type { ValueType } from './types.ts';

/** What a piece of code means, and the machine type it has. */
export interface Meaning {
  readonly expression: Expression;
  readonly type: ValueType;
}

/** Something the reader did that a careful user wants to know. */
export interface Remark {
  readonly span: Span;
  readonly message: string;
}

export interface Imports {
  /** Local alias -> module path (`np` -> `numpy`). */
  readonly modules: ReadonlyMap<string, string>;
  /** Local name -> the module it came from and its name there. */
  readonly names: ReadonlyMap<string, { readonly module: string; readonly original: string }>;
  /** Modules whose names all came in. */
  readonly open: readonly string[];
}

export interface Environment {
  readonly language: CodeLanguage;
  readonly text: string;
  readonly imports: Imports;
  readonly typeOf: (name: string) => ValueType;
  /** The document declares this name itself (variable, parameter or function). */
  readonly isLocal: (name: string) => boolean;
  readonly isLocalFunction: (name: string) => boolean;
  /** The number behind a symbol (`c1`, `c[2]`) that the file declares as a constant or gives a value once; null for others. */
  readonly constantOf: (symbol: string) => Expression | null;
  /** The entries of a list that the file declares once under this name. */
  readonly listOf: (name: string) => ListCode | null;
  /** Counters of the loops that are being followed, by spelled name; their values are exact. */
  readonly counters?: ReadonlyMap<string, bigint>;
  readonly remark: (span: Span, message: string) => void;
  /** Canonical spelling: in languages that fold case, the first one read. */
  readonly spell: (name: string) => string;
}
