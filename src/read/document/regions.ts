/** What a document holds for this tool: stretches of mathematics and of code, with positions. */

export interface Region {
  /** With delimiters. */
  readonly start: number;
  readonly end: number;
  /** Without delimiters. */
  readonly contentStart: number;
  readonly contentEnd: number;
  readonly kind: 'inline' | 'display' | 'environment' | 'code' | 'comment' | 'text';
  /** Name of the environment (`align*`). */
  readonly environment?: string;
  readonly label?: string;
  readonly tag?: string;
  /** How the content is read: `latex`, `plain`, or the language of a code block as it is named there. */
  readonly language: string;
  /** The formulas of the region: rows that continue one another belong together. Empty for code. */
  readonly formulas: readonly FormulaPlace[];
}

/** One formula: what stands between row ends, continued rows joined. */
export interface FormulaPlace {
  readonly start: number;
  readonly end: number;
  readonly label?: string;
  readonly tag?: string;
  /** Row ends (`\\`) inside, to be read past. */
  readonly rows: number;
}
