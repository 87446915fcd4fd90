/** Long lines: of code broken after an operator, as each language allows it; of comments between words. */
import type { LanguageRow } from '../write/index.ts';

const WIDTH = 100;
/** What ends a broken line where line ends are not white space. */
const CONTINUED: Readonly<Record<string, string>> = { fortran: ' &', matlab: ' ...' };

/** Breaks only after ` + `, ` - ` and `*(`, where every language here reads on. */
export function wrapCode(line: string, row: LanguageRow): readonly string[] {
  if (line.length <= WIDTH) return [line];
  const indent = /^\s*/.exec(line)?.[0] ?? '';
  const bracketed = row.id === 'python' ? inBrackets(line) : line;
  const inner = `${indent}${row.id === 'go' ? '\t' : '    '}`;
  const lines: string[] = [];
  let rest = bracketed;
  while (rest.length > WIDTH) {
    const at = breakBefore(rest, WIDTH - 4, indent.length);
    if (at === null) break;
    lines.push(`${rest.slice(0, at).trimEnd()}${CONTINUED[row.id] ?? ''}`);
    rest = `${inner}${rest.slice(at).trimStart()}`;
  }
  return [...lines, rest];
}

/** The last place to break at most `width` characters in, beyond the indentation; null where there is none. */
function breakBefore(line: string, width: number, indent: number): number | null {
  let last: number | null = null;
  for (const match of line.matchAll(/ [+-] |\*\(/g)) {
    const at = match.index + match[0].length;
    if (at > width) break;
    if (match.index > indent + 8) last = at;
  }
  return last;
}

/** Python reads on only inside brackets. */
function inBrackets(line: string): string {
  const [, head, value] = /^(\s*(?:return|\w+ =) )(.*)$/.exec(line) ?? [];
  return head === undefined || value === undefined ? line : `${head}(${value})`;
}

const COMMENT_WIDTH = 92;

/** Words of one sentence of a comment in lines of bounded width. */
export function filledLines(text: string): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && line.length + 1 + word.length > COMMENT_WIDTH) {
      lines.push(line);
      line = word;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  return [...lines, line];
}
