/** Tokens of mathematical text, LaTeX and plain alike. Offsets are UTF-16 code units of the text that was read, also through macro expansion. */
import type { Failure } from '../../protocol.ts';

export type TokenKind =
  | 'letter'
  /** One digit: `\frac12` needs them apart; numbers are joined by the parser. */
  | 'digit'
  /** A command that stayed: `text` is its name without the backslash. */
  | 'command'
  /** A run of letters that stands for one name: `\operatorname{erf}`, `\mathrm{d}`, an identifier of plain notation. */
  | 'word'
  /** `\text{...}`: words for people. */
  | 'text'
  | 'open'
  | 'close'
  /** Everything of one to three characters: operators, brackets, relations. */
  | 'mark'
  /** A visible gap: `\,`, `\quad`. `text` is its command name. */
  | 'space'
  /** A run of Unicode superscripts or subscripts, as plain text (`-1`, `n`). */
  | 'super'
  | 'sub'
  | 'end';

export interface Token {
  readonly kind: TokenKind;
  readonly text: string;
  readonly start: number;
  readonly end: number;
  /** White space stood before it in the source. */
  readonly spaced: boolean;
  /** For `word`: an upright single letter such as `\mathrm{d}` or a name from `\operatorname`. */
  readonly upright?: boolean;
}

/** Thrown inside the reader only; its door turns it into an Outcome. */
export class Unreadable extends Error {
  readonly failure: Failure;
  constructor(message: string, place: { readonly start: number; readonly end: number }, code: Failure['code'] = 'unreadable') {
    super(message);
    this.failure = { code, message, start: place.start, end: place.end };
  }
}

/** Deepest nesting of brackets and operators that is read. Keeps every later recursion over the tree far from the end of the stack. */
export const MAX_DEPTH = 200;
/** Most tokens of one formula, macro expansion included. */
export const MAX_TOKENS = 20_000;
export const TOO_DEEP = `This is nested more than ${MAX_DEPTH} levels deep; simplify the formula or close brackets that are still open.`;
