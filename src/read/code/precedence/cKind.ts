/** Languages of the C kind: declarations and functions that begin with a type, choices. */
import type { Code } from '../syntax.ts';
import { readParameters } from './brackets.ts';
import { readDeclarators } from './declarators.ts';
import { isCKind } from './families.ts';
import { readBlock, readOperand } from './operands.ts';
import type { StatementSource } from './source.ts';
import type { Token } from './tokens.ts';

/** A declaration or a function; undefined where none begins here. */
export function readTyped(s: StatementSource, token: Token): Code | undefined {
  const p = s.parser;
  if (!isCKind(s.language)) return undefined;
  let words = 0;
  while (p.peek(words).kind === 'name' && words < 8) words += 1;
  if (words < 2) return undefined;
  const after = p.peek(words);
  if (!/^(?:=|;|,|\(|\[|\{)$/.test(after.text)) return undefined;
  const type = Array.from({ length: words - 1 }, (_, i) => p.peek(i).text).join(' ');
  if (/\b(?:return|else|struct|typedef|using)\b/.test(type)) return undefined;
  for (let i = 0; i < words - 1; i += 1) p.next();
  const name = p.next();
  if (after.text === '(') {
    const parameters = readParameters(p);
    const body = readBlock(p);
    return { kind: 'function', name: name.text, parameters, returns: type, body, start: token.start, end: p.lastEnd };
  }
  return readDeclarators(s, token, type, name);
}

/** `if (condition) statement else statement`. */
export function readCChoice(s: StatementSource, token: Token): Code {
  const p = s.parser;
  p.next();
  const condition = p.is('(') ? readOperand(p) : p.expression();
  const then = s.arm();
  let otherwise: Code | null = null;
  const before = p.position;
  while (p.is(';')) p.next();
  if (p.isWord('else')) {
    p.next();
    otherwise = s.arm();
  } else p.position = before;
  return { kind: 'if', condition, then, otherwise, start: token.start, end: p.lastEnd };
}
