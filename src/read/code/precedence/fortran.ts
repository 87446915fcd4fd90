/** Fortran: choices, functions and subroutines, declarations. */
import type { Code } from '../syntax.ts';
import { readEntries, readParameters } from './brackets.ts';
import { bracketText, readDeclarators } from './declarators.ts';
import { readOperand } from './operands.ts';
import type { StatementSource } from './source.ts';
import type { Token } from './tokens.ts';

/** `if (condition) statement`, `if (condition) then ... else if ... end if`. */
export function readFortranChoice(s: StatementSource, token: Token): Code {
  const p = s.parser;
  p.next();
  const condition = p.is('(') ? readOperand(p) : p.expression();
  if (!p.isWord('then')) {
    const then = s.arm();
    return { kind: 'if', condition, then, otherwise: null, start: token.start, end: p.lastEnd };
  }
  p.next();
  const stops = ['else', 'elseif', 'end'];
  const start = p.peek().start;
  const then: Code = { kind: 'block', body: s.list(stops), start, end: p.lastEnd };
  let otherwise: Code | null = null;
  if (p.isWord('elseif')) otherwise = readFortranChoice(s, p.peek());
  else if (p.isWord('else')) {
    p.next();
    if (p.isWord('if')) otherwise = readFortranChoice(s, p.peek());
    else {
      const from = p.peek().start;
      otherwise = { kind: 'block', body: s.list(['end']), start: from, end: p.lastEnd };
      s.skipLine();
    }
  } else s.skipLine();
  return { kind: 'if', condition, then, otherwise, start: token.start, end: p.lastEnd };
}

/** A function or a subroutine, from that word on; `returns` is the type in front. The `returns` of the result is that type, `=` and the name of the result variable. */
export function readFortranFunction(s: StatementSource, token: Token, returns: string): Code {
  const p = s.parser;
  p.next();
  const name = p.next();
  const parameters = readParameters(p);
  let result = name.text;
  if (p.isWord('result') && p.peek(1).text === '(') {
    p.next();
    const [inner] = readEntries(p);
    if (inner?.kind === 'name') result = inner.text;
  }
  const start = p.peek().start;
  const body = s.list(['end']);
  s.skipLine();
  return { kind: 'function', name: name.text, parameters, returns: returns === '' ? `=${result}` : `${returns}=${result}`, body: { kind: 'block', body, start, end: p.lastEnd }, start: token.start, end: p.lastEnd };
}

/** `real(8), parameter :: x = 1`, or a function with its type in front; null where a type begins and no name follows, undefined where no declaration begins. */
export function readFortranDeclaration(s: StatementSource, token: Token, word: string): Code | null | undefined {
  if (!/^(?:real|integer|double|complex|logical|character|type|parameter)$/.test(word)) return undefined;
  const p = s.parser;
  const start = p.position;
  if (p.peek(1).text === '=' || (word === 'real' && p.peek(1).text === '(' && !lineHas(s, '::') && !lineHas(s, 'function'))) return undefined;
  const words: string[] = [];
  const hasColons = lineHas(s, '::');
  while (!s.endOfStatement() || p.is(',')) {
    const here = p.peek();
    if (here.text === '::') {
      p.next();
      break;
    }
    if (s.word(here) === 'function') return readFortranFunction(s, here, words.join(' ').replace(/ (?=[(,])/g, ''));
    if (!hasColons && here.kind === 'name' && words.length > 0 && !/^(?:precision|\*|\()$/.test(s.word(here))) break;
    if (here.kind === 'open') {
      const from = here.start;
      readEntries(p);
      words.push(bracketText(s, from));
    } else words.push(p.next().text);
  }
  const type = words.join(' ').replace(/ (?=[(,])/g, '');
  const first = p.peek();
  if (first.kind !== 'name') {
    p.position = start;
    s.skipLine();
    return null;
  }
  p.next();
  return readDeclarators(s, token, /parameter/i.test(type) ? `const ${type}` : type, first);
}

/** Whether a word or sign stands on the rest of the line (its first 60 tokens). */
function lineHas(s: StatementSource, text: string): boolean {
  const p = s.parser;
  for (let i = 0; i < 60; i += 1) {
    const token = p.peek(i);
    if (token.kind === 'newline' || token.kind === 'end') return false;
    if (s.word(token) === text) return true;
  }
  return false;
}
