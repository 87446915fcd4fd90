/** What follows an operand: calls, indices, type arguments, members, casts by a word. */
import type { Code } from '../syntax.ts';
import { readEntries } from './brackets.ts';
import { readOperand } from './operands.ts';
import type { Parser } from './parser.ts';
import type { Token } from './tokens.ts';

/** An operand with all that follows it without an operator. */
export function readPostfix(p: Parser): Code {
  let code = readOperand(p);
  for (;;) {
    const token = p.peek();
    if (token.kind === 'newline' && memberFollows(p)) {
      p.skipNewlines();
      continue;
    }
    if (token.kind === 'open' && token.text === '(' && code.kind !== 'literal' && !(code.kind === 'opaque' && code.start === code.end)) {
      if (token.spaced && (p.language.family === 'julia' || p.spaceSeparates)) return code;
      const args = readEntries(p);
      code = { kind: 'call', callee: code, args, start: code.start, end: p.lastEnd };
      continue;
    }
    if (token.kind === 'open' && token.text === '[' && !token.spaced && code.kind !== 'literal') {
      const args = readEntries(p);
      code = { kind: 'index', object: code, args, start: code.start, end: p.lastEnd };
      continue;
    }
    const following = p.peek(1);
    const typed = token.text === '<' && (code.kind === 'name' || code.kind === 'member') ? readTypeArguments(p) : null;
    if (typed) {
      const cast = code.kind === 'name' && /_cast$/.test(code.text);
      const [operand, ...more] = cast ? readEntries(p) : [];
      if (cast) code = operand && more.length === 0 ? { kind: 'cast', type: typed.text, operand, start: code.start, end: p.lastEnd } : p.opaque(code.start, 'cast');
      else code = { ...code, end: typed.end };
      continue;
    }
    if (token.kind === 'operator' && /^(?:\.|::|\?\.|->|%|\$)$/.test(token.text) && following.kind === 'name' && selects(p, token)) {
      p.next();
      const name = p.next();
      code = { kind: 'member', object: code, name: name.text, separator: token.text, start: code.start, end: name.end };
      continue;
    }
    if (token.kind === 'operator' && !token.spaced && (token.text === "'" || token.text === ".'")) {
      p.next();
      code = p.opaque(code.start, 'transpose', [code]);
      continue;
    }
    if (token.kind === 'operator' && !token.spaced && (token.text === '!!' || token.text === '++' || token.text === '--' || (token.text === '!' && p.language.family === 'swift'))) {
      p.next();
      code = token.text.startsWith('!') ? { ...code, end: token.end } : p.opaque(code.start, 'changing operator', [code]);
      continue;
    }
    if (token.kind === 'name' && token.text === 'as' && (p.language.family === 'kotlin' || p.language.family === 'swift' || p.language.family === 'rust') && following.kind === 'name') {
      p.next();
      const type = p.next();
      code = { kind: 'cast', type: type.text, operand: code, start: code.start, end: type.end };
      continue;
    }
    return code;
  }
}

/** `<double>` between a name and a bracket, in the languages that have it; taken only where it is there. */
function readTypeArguments(p: Parser): { readonly text: string; readonly end: number } | null {
  if (!['cpp', 'csharp', 'java', 'rust'].includes(p.language.family)) return null;
  let text = '';
  for (let i = 1; i < 12; i += 1) {
    const token = p.peek(i);
    if (token.text === '>' && text !== '' && p.peek(i + 1).text === '(') {
      for (let k = 0; k <= i; k += 1) p.next();
      return { text, end: token.end };
    }
    if (token.kind !== 'name' && !/^(?:::|,|\*|&|\.)$/.test(token.text)) return null;
    text += `${text === '' ? '' : ' '}${token.text}`;
  }
  return null;
}

/** Kotlin and Swift: `.name` opens the next line. */
function memberFollows(p: Parser): boolean {
  if (p.language.family !== 'kotlin' && p.language.family !== 'swift') return false;
  const [dot, name] = p.beyondLineEnds();
  return dot?.kind === 'operator' && /^\??\.$/.test(dot.text) && name?.kind === 'name';
}

/** Whether the sign selects a member in this language. */
function selects(p: Parser, token: Token): boolean {
  switch (token.text) {
    case '%':
      return p.language.family === 'fortran';
    case '$':
      return p.language.family === 'r';
    case '->':
      return p.language.family === 'c' || p.language.family === 'cpp';
    default:
      return true;
  }
}
