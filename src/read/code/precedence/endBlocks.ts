/** Julia and MATLAB: functions and choices that run to an `end`. */
import type { Code } from '../syntax.ts';
import { readParameters } from './brackets.ts';
import type { StatementSource } from './source.ts';
import type { Token } from './tokens.ts';

/** `function f(x) ... end`; the short form is an assignment. */
export function readJuliaFunction(s: StatementSource, token: Token): Code {
  const p = s.parser;
  p.next();
  const name = p.next();
  const parameters = readParameters(p);
  s.skipLine();
  const start = p.peek().start;
  const body = s.list(['end']);
  const stop = p.lastEnd;
  if (p.isWord('end')) p.next();
  return { kind: 'function', name: name.text, parameters, returns: '', body: { kind: 'block', body, start, end: Math.max(start, stop) }, start: token.start, end: p.lastEnd };
}

/** `function y = f(x) ... end`. */
export function readMatlabFunction(s: StatementSource, token: Token): Code {
  const p = s.parser;
  p.next();
  const head: Token[] = [];
  while (!s.endOfStatement() && !p.is('(')) head.push(p.next());
  const equals = head.findIndex((t) => t.text === '=');
  const name = head.slice(equals + 1).filter((t) => t.kind === 'name').at(-1);
  const result = equals > 0 ? head.slice(0, equals).filter((t) => t.kind === 'name') : [];
  const parameters = readParameters(p);
  const start = p.peek().start;
  const body = s.list(['end', 'function']);
  if (p.isWord('end')) p.next();
  return { kind: 'function', name: name?.text ?? '', parameters, returns: result.length === 1 ? (result[0]?.text ?? '') : '', body: { kind: 'block', body, start, end: p.lastEnd }, start: token.start, end: p.lastEnd };
}

/** `if condition ... elseif ... else ... end`. */
export function readMatlabChoice(s: StatementSource, token: Token): Code {
  const p = s.parser;
  p.next();
  const condition = p.expression();
  const stops = ['else', 'elseif', 'end'];
  const start = p.peek().start;
  const then: Code = { kind: 'block', body: s.list(stops), start, end: p.lastEnd };
  let otherwise: Code | null = null;
  if (p.isWord('elseif')) otherwise = readMatlabChoice(s, p.peek());
  else if (p.isWord('else')) {
    p.next();
    const from = p.peek().start;
    otherwise = { kind: 'block', body: s.list(['end']), start: from, end: p.lastEnd };
    if (p.isWord('end')) p.next();
  } else if (p.isWord('end')) p.next();
  return { kind: 'if', condition, then, otherwise, start: token.start, end: p.lastEnd };
}
