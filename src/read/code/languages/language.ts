/** What the readers must know of one programming language. One table a language; adding a language is adding a table. */
import type { Expression } from '../../../expression/index.ts';

/** IEEE formats by their standard names; `extended` is the x87 or a wider long double, `decimal` a decimal type. */
export type FloatFormat = 'binary16' | 'bfloat16' | 'binary32' | 'binary64' | 'extended' | 'binary128' | 'decimal';

/** Builders for library calls that are no function of their own but arithmetic. */
export type Arithmetic =
  | 'power' /* pow(x, y) */
  | 'squareRoot'
  | 'reciprocalSquareRoot'
  | 'cubeRoot'
  | 'square'
  | 'reciprocal'
  | 'multiplyAdd' /* fma(a, b, c) = a b + c */
  | 'addProduct' /* x.addingProduct(a, b) = x + a b */
  | 'negate'
  | 'identity' /* a conversion that keeps the value */
  | 'truncate' /* a conversion to an integer type */
  | 'realRoot' /* nthroot(x, n): real for odd n */
  | 'logBase' /* log(x, b); with one argument the plain logarithm of the library */
  | 'logBaseFirst' /* log(b, x) */
  | 'scaleBinary' /* ldexp(x, n) = x 2^n */
  | 'choose' /* (condition, then, otherwise) */
  | 'merge' /* (then, otherwise, condition) */
  | 'add'
  | 'subtract'
  | 'multiply'
  | 'divide'
  | 'radians'
  | 'degrees'
  | 'horner rising' /* polyval with lowest power first */
  | 'horner falling';

export interface CodeLanguage {
  /** The family in the names of src/functions. */
  readonly family: string;
  /** File name of the grammar for injected loading, without extension; null: the operator-precedence reader. */
  readonly grammar: string | null;
  /** Paths in front of library names, separators written as a dot: `std`, `np`, `Math`, `f64`. */
  readonly prefixes: readonly string[];
  /** Modules whose import alias serves as prefix (`numpy`, `math`). */
  readonly modules: readonly string[];
  /** Library calls may stand behind their first argument: `x.sin()`. */
  readonly methods: boolean;
  /** Library names beside those of src/functions, by bare name. */
  readonly arithmetic: Readonly<Record<string, Arithmetic>>;
  /** Library names of functions that src/functions does not list for this family, bare name -> function id. */
  readonly functions?: Readonly<Record<string, string>>;
  /** Constants by whole path (`Math.PI`, `f64.consts.PI`) or bare name. */
  readonly constants: Readonly<Record<string, Expression>>;
  /** Constant names that are read without a prefix or an import; the others need one. */
  readonly bareConstants: RegExp;
  /** What `1/2` of two integer literals is. `context`: the literals take the type that their surroundings give. */
  readonly integerQuotient: 'truncated' | 'exact' | 'context';
  /** What `^` means. */
  readonly caret: 'power' | 'exclusive or';
  /** Names are the same in upper and lower case. */
  readonly foldCase?: boolean;
  /** A number beside a factor multiplies it. */
  readonly juxtaposition?: boolean;
  /** Types by name. */
  readonly floatTypes: Readonly<Record<string, FloatFormat>>;
  readonly integerTypes: readonly string[];
  /** Literal suffixes that name a float format, lower case. */
  readonly suffixes: Readonly<Record<string, FloatFormat>>;
  /** Format of `1.0`; `adaptable` where an unsuffixed literal takes the type of its surroundings. */
  readonly literalFormat: FloatFormat;
  readonly literalAdapts: boolean;
  /** Suffix of library names that fixes the format (`sinf`). */
  readonly nameSuffixes: Readonly<Record<string, FloatFormat>>;
  readonly comments: CommentStyle;
  /** Undeclared names that start with i to n are integers. */
  readonly implicitIntegers?: boolean;
}

export interface CommentStyle {
  readonly line: readonly string[];
  readonly block: readonly (readonly [string, string])[];
  readonly nested: boolean;
  /** A comment that starts a line with this is documentation. */
  readonly doc: readonly string[];
}

export const SLASHES: CommentStyle = { line: ['//'], block: [['/*', '*/']], nested: false, doc: ['///', '//!', '/**', '/*!'] };
