/** What an author of code has settled already: language, float type, how literals and library calls are written in this file. */
import type { FloatFormat } from '../float.ts';
import type { LiteralStyle } from './literal.ts';

export interface CodeOptions {
  /** A language identifier of the editor. */
  readonly language: string;
  /** Default binary64; binary32 for shading languages. */
  readonly format?: FloatFormat;
  readonly literal?: LiteralStyle;
  /** How the file calls its library: `np.`, `math.`, `std::`, empty after `using namespace std`. */
  readonly prefix?: string;
  /** Name in the code of a symbol; by default the symbol's own letters, kept clear of keywords. */
  readonly nameOf?: (symbol: string) => string;
}

export interface Code {
  readonly text: string;
  /** Lines that the file needs at its head for the text to compile (`#include <math.h>`, `import numpy as np`). */
  readonly imports: readonly string[];
}
