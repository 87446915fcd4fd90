/** Names with bounds and values behind a type: languages of the C kind, and Fortran. */
import type { Code } from '../syntax.ts';
import { readEntries } from './brackets.ts';
import type { Parser } from './parser.ts';
import type { StatementSource } from './source.ts';
import type { Token } from './tokens.ts';

/** `x = 1, y[2] = {1, 2}` behind `type`, which opened with `token`; the first name has been taken. */
export function readDeclarators(s: StatementSource, token: Token, type: string, first: Token): Code {
  const p = s.parser;
  const constant = /\b(?:const|constexpr|final|uniform)\b/.test(type);
  const found: Code[] = [];
  let name = first;
  for (;;) {
    let value: Code | null = null;
    let bounds = type;
    if (p.is('[') || (p.is('(') && s.language.family === 'fortran')) {
      const from = p.peek().start;
      readEntries(p);
      bounds = bracketText(s, from);
    }
    if (p.take('=')) value = p.is('{') ? bracedList(p) : p.expression();
    // Fortran: `c(0:5)`, `dimension(0:5)`.
    const lower = s.language.family === 'fortran' && value?.kind === 'list' ? /^(?:.*dimension)?\((-?\d+):/i.exec(bounds)?.[1] : undefined;
    if (value?.kind === 'list' && lower !== undefined) value = { ...value, first: BigInt(lower) };
    found.push({ kind: 'declare', name: name.text, type, value, constant, start: found.length === 0 ? token.start : name.start, end: p.lastEnd });
    if (!p.is(',') || p.peek(1).kind !== 'name') break;
    p.next();
    name = p.next();
  }
  const [only] = found;
  return only && found.length === 1 ? only : { kind: 'block', body: found, start: token.start, end: p.lastEnd };
}

/** The text of the bracket that was just read, without white space. */
export function bracketText(s: StatementSource, start: number): string {
  return s.parser.textBetween(start, s.parser.lastEnd);
}

/** `{1, 2}` as a list. */
function bracedList(p: Parser): Code {
  const start = p.peek().start;
  const items = readEntries(p);
  return { kind: 'list', items, start, end: p.lastEnd };
}
