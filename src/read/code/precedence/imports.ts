/** What names a program brings in: imports of modules, macros of the preprocessor. */
import type { Code } from '../syntax.ts';
import type { StatementSource } from './source.ts';
import type { Token } from './tokens.ts';

/** `import a.b.C`, `using M: f, g`, `use m`, `library(m)`. */
export function readImport(s: StatementSource, token: Token): Code {
  const p = s.parser;
  p.next();
  const words: string[] = [];
  while (!s.endOfStatement()) words.push(p.next().text);
  while (p.is(',')) {
    while (p.peek().kind !== 'newline' && p.peek().kind !== 'end') words.push(p.next().text);
  }
  const whole = words.join('').replace(/[()]/g, '');
  const [path = '', listed] = whole.split(/:(?!:)/);
  const last = /^(.*)[.]([\w*]+)$/.exec(path);
  const names = listed !== undefined ? listed.split(',').map((n) => [n, n] as const) : last && s.language.family === 'kotlin' ? [[last[2] ?? '', last[2] ?? ''] as const] : [['*', '*'] as const];
  return { kind: 'import', path: last && s.language.family === 'kotlin' ? (last[1] ?? '') : path, alias: null, names, start: token.start, end: p.lastEnd };
}

/** `#define G 9.81` and `#define SQ(x) ...`; other directives say nothing. */
export function readDirective(token: Token): Code | null {
  const define = /^#\s*define\s+(\w+)(\([^)]*\))?[ \t]*/.exec(token.text);
  if (!define) return null;
  const [head, name = '', parameters] = define;
  const { start, end } = token;
  if (parameters !== undefined) return { kind: 'function', name, parameters: [], returns: '#define', body: null, start, end };
  const from = start + head.length;
  const value: Code | null = from < end ? { kind: 'opaque', what: 'macro', parts: [], start: from, end } : null;
  return { kind: 'declare', name, type: '#define', value, constant: true, start, end };
}
