/** Door of the operator-precedence reader: for languages without a grammar, and wherever a grammar is not loaded. */
import type { CodeLanguage } from '../languages/index.ts';
import type { Code, Program } from '../syntax.ts';
import { parseTokens } from './statements.ts';
import { tokenize } from './tokens.ts';

/** The program in [start, end) of a text. Never throws; what cannot be read is opaque. */
export function parseByPrecedence(text: string, language: CodeLanguage, start: number, end: number): Program {
  const { tokens, comments } = tokenize(text, language, start, end);
  const body = parseTokens(tokens, language);
  const [only] = body;
  const root: Code = only && body.length === 1 ? only : { kind: 'block', body, start, end };
  return { root, comments };
}
