/** Kotlin and Swift: functions and declarations behind a keyword. */
import type { Code } from '../syntax.ts';
import { readParameters } from './brackets.ts';
import { readBlock } from './operands.ts';
import type { StatementSource } from './source.ts';
import type { Token } from './tokens.ts';

/** `fun f(x: Double): Double = ...`, `func f(_ x: Double) -> Double { ... }`. */
export function readModernFunction(s: StatementSource, token: Token): Code | null {
  const p = s.parser;
  p.next();
  let name = p.next();
  while (p.is('.') && p.peek(1).kind === 'name') {
    p.next();
    name = p.next();
  }
  const parameters = readParameters(p);
  const words: string[] = [];
  while (!s.endOfStatement() && !p.is('{') && !p.is('=')) words.push(p.next().text);
  let body: Code | null;
  if (p.take('=')) {
    p.skipNewlines();
    body = p.expression();
  } else {
    body = readBlock(p);
  }
  return { kind: 'function', name: name.text, parameters, returns: words.join('').replace(/^(?::|->)/, ''), body, start: token.start, end: p.lastEnd };
}

/** `let x: Double = 1`, `val x = 1`. */
export function readModernDeclaration(s: StatementSource, token: Token): Code {
  const p = s.parser;
  const keyword = p.next();
  const name = p.next();
  const type = p.is(':') ? s.annotation() : '';
  let value: Code | null = null;
  if (p.take('=')) {
    p.skipNewlines();
    value = p.expression();
  }
  return { kind: 'declare', name: name.text, type, value, constant: keyword.text !== 'var', start: token.start, end: p.lastEnd };
}
