/** Between brackets: entries, the parameters of a function head, and what is passed over. */
import type { Code, ParameterCode } from '../syntax.ts';
import type { Parser } from './parser.ts';
import type { Token } from './tokens.ts';

const CLOSERS: Readonly<Record<string, string>> = { '(': ')', '[': ']', '{': '}', '(/': '/)' };

/** Entries between brackets, the brackets taken. */
export function readEntries(p: Parser): readonly Code[] {
  const open = p.next();
  const close = CLOSERS[open.text] ?? ')';
  if (p.tooDeep) return [skipTo(p, open)];
  return p.insideEntries(open.text === '[' && p.language.family === 'matlab', () => {
    const items: Code[] = [];
    for (;;) {
      const token = p.peek();
      if (token.kind === 'end' || token.kind === 'close') break;
      if (token.kind === 'separator') {
        p.next();
        continue;
      }
      const before = p.position;
      items.push(readEntry(p));
      if (p.position === before) p.next();
    }
    if (p.is(close)) p.next();
    return items;
  });
}

/** An expression, or a value with a name in front. */
function readEntry(p: Parser): Code {
  const [name, sign] = [p.peek(), p.peek(1)];
  const label = p.language.family === 'swift' ? ':' : '=';
  if (name.kind === 'name' && sign.kind === 'operator' && sign.text === label) {
    p.next();
    p.next();
    const value = p.expression();
    return { kind: 'named', name: name.text, value, start: name.start, end: value.end };
  }
  return p.expression();
}

/** Parameter list of a function head: names with the words around them as types. */
export function readParameters(p: Parser): readonly ParameterCode[] {
  if (!p.is('(')) return [];
  p.next();
  const found: ParameterCode[] = [];
  let words: Token[] = [];
  let depth = 1;
  const flush = (): void => {
    const names = words.filter((w) => w.kind === 'name');
    const colon = words.findIndex((w) => w.text === ':' || w.text === '::');
    const equals = words.findIndex((w) => w.text === '=');
    const named = colon > 0 ? words.slice(0, colon).filter((w) => w.kind === 'name').at(-1) : equals > 0 ? words.slice(0, equals).filter((w) => w.kind === 'name').at(-1) : names.at(-1);
    if (named) {
      const type = colon > 0 ? words.slice(colon + 1, equals > colon ? equals : undefined) : names.filter((w) => w !== named && w.start < named.start);
      found.push({ name: named.text, type: type.map((w) => w.text).join(' '), start: words[0]?.start ?? named.start, end: words.at(-1)?.end ?? named.end });
    }
    words = [];
  };
  for (;;) {
    const token = p.next();
    if (token.kind === 'end') break;
    if (token.kind === 'newline') continue;
    if (token.kind === 'open') depth += 1;
    if (token.kind === 'close') depth -= 1;
    if (depth === 0) break;
    if (token.kind === 'separator' && depth === 1) flush();
    else words.push(token);
  }
  flush();
  return found;
}

/** Skips one bracketed piece, or one token, as opaque. */
export function skipNested(p: Parser): Code {
  const token = p.peek();
  if (token.kind !== 'open') {
    if (token.kind !== 'end' && token.kind !== 'close' && token.kind !== 'separator') p.next();
    return { kind: 'opaque', what: 'expression nested too deeply', parts: [], start: token.start, end: Math.max(token.start, p.lastEnd) };
  }
  p.next();
  return skipTo(p, token);
}

/** To the bracket that closes `open`, which has been taken. */
function skipTo(p: Parser, open: Token): Code {
  let depth = 1;
  for (;;) {
    const token = p.peek();
    if (token.kind === 'end') break;
    p.next();
    if (token.kind === 'open') depth += 1;
    if (token.kind === 'close') depth -= 1;
    if (depth === 0) break;
  }
  return { kind: 'opaque', what: 'expression nested too deeply', parts: [], start: open.start, end: p.lastEnd };
}
