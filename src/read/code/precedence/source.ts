/** What the reader of statements lends to the readers of single kinds of statement. */
import type { CodeLanguage } from '../languages/index.ts';
import type { Code } from '../syntax.ts';
import type { Parser } from './parser.ts';
import type { Token } from './tokens.ts';

export interface StatementSource {
  readonly language: CodeLanguage;
  readonly parser: Parser;
  /** Statements up to one of the stops (left in place), an unmatched closer or the end. */
  readonly list: (stops: readonly string[]) => readonly Code[];
  /** One statement, or a block in braces. */
  readonly arm: () => Code;
  /** One statement of any kind; null where it says nothing. */
  readonly statement: () => Code | null;
  /** An expression or an assignment; null where there is none. */
  readonly simple: () => Code | null;
  /** The type behind a colon, which stands at the current place. */
  readonly annotation: () => string;
  /** The word of a token, in lower case where the language does not tell cases apart. */
  readonly word: (token: Token) => string;
  readonly endOfStatement: () => boolean;
  readonly skipLine: () => void;
}
