/** Text -> tokens for the operator-precedence reader. Comments and strings are recognised so that nothing inside them is read as code. */
import type { CodeLanguage } from '../languages/index.ts';
import type { CommentCode } from '../syntax.ts';

export interface Token {
  readonly kind: 'number' | 'name' | 'operator' | 'open' | 'close' | 'separator' | 'newline' | 'text' | 'directive' | 'end';
  readonly text: string;
  readonly start: number;
  readonly end: number;
  /** White space stands before it. */
  readonly spaced: boolean;
}

const NAME = /[\p{L}\p{Nl}_$][\p{L}\p{Nl}\p{Nd}\p{No}\p{Mn}_$!′]*/uy;
/** Longest first. */
const OPERATORS = ['.**', '...', '..<', '<<-', '->>', '===', '!==', '>>>', '**', '.^', '.*', './', '.\\', '.+', '.-', ".'", '&&', '||', '==', '!=', '~=', '/=', '<=', '>=', '.<', '.>', '<-', '->', '=>', '::', '//', '?:', '?.', '??', '!!', '+=', '-=', '*=', '<<', '>>', '..', '++', '--', '%/%', '%%', '%*%', '%in%', ':='];

/** Words of statements, which are never the name of an operand. */
const NO_OPERAND: ReadonlySet<string> = new Set(['then', 'else', 'elseif', 'end', 'endif', 'do', 'return', 'elsif', 'in', 'to', 'otherwise']);
export const isOperandName = (word: string): boolean => !NO_OPERAND.has(word);

function numberPattern(language: CodeLanguage): RegExp {
  const whole = '\\d[\\d_]*';
  switch (language.family) {
    case 'fortran':
      return /(?:\d+(?:\.(?![a-z]+\.)\d*)?|\.\d+)(?:[edq][+-]?\d+)?(?:_\w+)?/iy;
    case 'julia':
      return /0x[\da-f_]+(?:\.[\da-f_]*)?(?:p[+-]?\d+)?|0[bo][\d_]+|(?:\d[\d_]*(?:\.(?![*/^\\+.'-])[\d_]*)?|\.\d[\d_]*)(?:[ef][+-]?\d+)?/iy;
    case 'matlab':
      return /0x[\da-f]+|(?:\d+(?:\.(?![*/^\\'])\d*)?|\.\d+)(?:[ed][+-]?\d+)?(?:[ij](?![\w]))?/iy;
    case 'r':
      return /0x[\da-f]+(?:\.[\da-f]*)?(?:p[+-]?\d+)?L?|(?:\d+(?:\.\d*)?|\.\d+)(?:e[+-]?\d+)?[Li]?/iy;
    case 'kotlin':
    case 'swift':
      return /0x[\da-f_]+(?:\.[\da-f_]+)?(?:p[+-]?\d+)?|0[bo][\d_]+|(?:\d[\d_]*(?:\.\d[\d_]*)?|\.\d[\d_]*)(?:e[+-]?\d+)?(?:f|u?l|u)?(?![\w])/iy;
    default:
      return new RegExp(`0x[\\da-f_']*(?:\\.[\\da-f_']*)?(?:p[+-]?\\d+)?[\\w]*|(?:${whole}(?:'[\\d]+)*(?:\\.(?!\\.)[\\d_]*)?|\\.\\d[\\d_]*)(?:e[+-]?\\d+)?(?:_?[a-z]\\w*)?`, 'iy');
  }
}

const C_LIKE: ReadonlySet<string> = new Set(['glsl', 'hlsl', 'c', 'cpp', 'csharp']);
/** Line ends mean nothing. */
const FREE_LINES: ReadonlySet<string> = new Set(['glsl', 'hlsl', 'c', 'cpp', 'csharp', 'java', 'rust', 'javascript', 'go']);
/** A word operator between dots: `.and.`, `.lt.`. */
const DOTTED = /\.(?:and|or|not|lt|le|gt|ge|eq|ne|true|false|eqv|neqv)\./iy;

/** A literal string at `at`, its end; -1 where there is none. An unclosed one ends with its line. */
function stringEnd(text: string, at: number, end: number, language: CodeLanguage, afterValue: boolean): number {
  const quote = text[at];
  if (quote !== '"' && quote !== "'" && quote !== '`') return -1;
  const { family } = language;
  if (quote === '`' && family !== 'javascript') return -1;
  if (quote === "'" && (family === 'matlab' || family === 'julia') && afterValue) return -1;
  const triple = quote.repeat(3);
  if (text.startsWith(triple, at) && (family === 'julia' || family === 'kotlin' || family === 'swift' || family === 'python')) {
    const close = text.indexOf(triple, at + 3);
    return close < 0 || close > end ? end : close + 3;
  }
  // Doubled quotes stand for one in Fortran and MATLAB; elsewhere a backslash escapes.
  const doubled = family === 'fortran' || family === 'matlab';
  for (let i = at + 1; i < end; i += 1) {
    const c = text[i];
    if (c === '\n' && quote !== '`') return i;
    if (c === '\\' && !doubled) i += 1;
    else if (c === quote) {
      if (doubled && text[i + 1] === quote) i += 1;
      else return i + 1;
    }
  }
  return end;
}

/** The end of a comment at `at`; -1 where there is none. */
function commentEnd(text: string, at: number, end: number, language: CodeLanguage): number {
  const { comments, family } = language;
  for (const [open, close] of comments.block) {
    if (!text.startsWith(open, at)) continue;
    if (family === 'matlab' && !/(?:^|\n)[ \t]*%\{[ \t]*(?:\r?\n|$)/y.test(text.slice(Math.max(0, text.lastIndexOf('\n', at)), at + 200))) continue;
    let depth = 1;
    let i = at + open.length;
    while (i < end && depth > 0) {
      if (text.startsWith(close, i)) {
        depth -= 1;
        i += close.length;
      } else if (comments.nested && text.startsWith(open, i)) {
        depth += 1;
        i += open.length;
      } else i += 1;
    }
    return i;
  }
  const line = comments.line.some((mark) => text.startsWith(mark, at)) || (family === 'matlab' && text[at] === '#');
  if (!line) return -1;
  const stop = text.indexOf('\n', at);
  return stop < 0 || stop > end ? end : stop;
}

/** Fortran's `&` and MATLAB's `...` join lines; the end of what is skipped, or -1. */
function continuationEnd(text: string, at: number, end: number, language: CodeLanguage): number {
  const pattern = language.family === 'fortran' ? /&[ \t]*(?:![^\n]*)?\r?\n(?:[ \t]*(?:![^\n]*)?\r?\n)*[ \t]*&?/y : language.family === 'matlab' ? /\.\.\.[^\n]*(?:\n|$)/y : /\\\r?\n/y;
  pattern.lastIndex = at;
  const match = pattern.exec(text);
  return match ? Math.min(end, at + match[0].length) : -1;
}

export function tokenize(text: string, language: CodeLanguage, start: number, end: number): { readonly tokens: readonly Token[]; readonly comments: readonly CommentCode[] } {
  const tokens: Token[] = [];
  const comments: CommentCode[] = [];
  const numbers = numberPattern(language);
  const freeLines = FREE_LINES.has(language.family);
  let at = start;
  let spaced = false;
  let lineStart = true;
  const push = (kind: Token['kind'], to: number): void => {
    tokens.push({ kind, text: text.slice(at, to), start: at, end: to, spaced });
    at = to;
    spaced = false;
    lineStart = kind === 'newline';
  };
  const match = (pattern: RegExp): number => {
    pattern.lastIndex = at;
    const found = pattern.exec(text);
    return found && found[0] !== '' ? Math.min(end, at + found[0].length) : -1;
  };
  while (at < end) {
    const c = text[at] ?? '';
    const previous = tokens[tokens.length - 1];
    const afterValue = !spaced && (previous?.kind === 'name' || previous?.kind === 'number' || previous?.kind === 'close' || previous?.text === "'");
    const joined = c === '&' || c === '.' || c === '\\' ? continuationEnd(text, at, end, language) : -1;
    if (joined > at) {
      if (language.family === 'fortran') {
        for (const found of text.slice(at, joined).matchAll(/![^\n\r]*/g)) comments.push({ start: at + found.index, end: at + found.index + found[0].length, doc: false });
      }
      at = joined;
      spaced = true;
      continue;
    }
    if (c === '\n') {
      if (freeLines) {
        at += 1;
        spaced = true;
        lineStart = true;
      } else push('newline', at + 1);
      continue;
    }
    if (/\s/.test(c)) {
      at += 1;
      spaced = true;
      continue;
    }
    if (c === '#' && lineStart && C_LIKE.has(language.family)) {
      const line = /(?:\\\r?\n|[^\n])*/y;
      push('directive', match(line));
      lineStart = true;
      continue;
    }
    const comment = commentEnd(text, at, end, language);
    if (comment > at) {
      const written = text.slice(at, comment);
      comments.push({ start: at, end: comment, doc: language.comments.doc.some((mark) => written.startsWith(mark)) });
      at = comment;
      spaced = true;
      continue;
    }
    const string = stringEnd(text, at, end, language, afterValue);
    if (string > at) {
      // Julia: a string that opens a statement documents what follows.
      if (language.family === 'julia' && (previous === undefined || previous.kind === 'newline') && /^[ \t]*\r?\n/.test(text.slice(string, string + 200))) {
        comments.push({ start: at, end: string, doc: true });
        at = string;
        continue;
      }
      push('text', string);
      continue;
    }
    if (c === '.' && language.family === 'fortran') {
      const dotted = match(DOTTED);
      if (dotted > at) {
        push('operator', dotted);
        continue;
      }
    }
    if (/\d/.test(c) || (c === '.' && /\d/.test(text[at + 1] ?? '') && !(afterValue && previous?.kind !== 'number'))) {
      const to = match(numbers);
      push('number', to > at ? to : at + 1);
      continue;
    }
    if (c === '`' && language.family === 'r') {
      const close = text.indexOf('`', at + 1);
      push('name', close < 0 || close >= end ? end : close + 1);
      continue;
    }
    const name = match(NAME);
    if (name > at) {
      push('name', nameEnd(text, at, name, end, language));
      continue;
    }
    // Fortran's older brackets of lists (ISO/IEC 1539-1, array constructors).
    const slashed = language.family === 'fortran' ? text.slice(at, Math.min(end, at + 2)) : '';
    if (slashed === '(/') push('open', at + 2);
    else if (slashed === '/)') push('close', at + 2);
    else if (c === '(' || c === '[' || c === '{') push('open', at + 1);
    else if (c === ')' || c === ']' || c === '}') push('close', at + 1);
    else if (c === ',' || c === ';') push('separator', at + 1);
    else {
      const operator = OPERATORS.find((o) => text.startsWith(o, at) && at + o.length <= end && usable(o, language));
      push('operator', at + (operator ? operator.length : (text.codePointAt(at) ?? 0) > 0xffff ? 2 : 1));
    }
  }
  tokens.push({ kind: 'end', text: '', start: end, end, spaced });
  return { tokens, comments };
}

/** Names may go on with dots in R, and end in a dot before a bracket in Julia (broadcasting); `!` ends a Julia name only before a bracket. */
function nameEnd(text: string, start: number, to: number, end: number, language: CodeLanguage): number {
  let stop = to;
  if (language.family === 'r') {
    const more = /(?:\.[\w.]*)?/y;
    more.lastIndex = stop;
    stop += more.exec(text)?.[0].length ?? 0;
  }
  if (language.family !== 'julia') {
    const bang = text.slice(start, stop).search(/[!′]/);
    if (bang > 0) stop = start + bang;
    return Math.min(stop, end);
  }
  if (text[stop - 1] === '!' && text[stop] === '=') stop -= 1;
  if (text[stop] === '.' && text[stop + 1] === '(') stop += 1;
  return Math.min(stop, end);
}

function usable(operator: string, language: CodeLanguage): boolean {
  const { family } = language;
  const dotted = family === 'julia' || family === 'matlab';
  if (/^\.[*/^\\+'<>-]/.test(operator) || operator === '.**') return dotted;
  if (operator === '~=') return family === 'matlab';
  if (operator === '/=') return family !== 'matlab' && family !== 'r';
  if (operator === '**') return family === 'fortran' || family === 'python' || family === 'javascript' || family === 'matlab' || family === 'r';
  if (operator === '<-' || operator === '<<-' || operator === '->>' || operator.startsWith('%')) return family === 'r' || (operator === '->' && family !== 'r');
  if (operator === '//') return family === 'julia' || family === 'python' || family === 'fortran';
  if (operator === '++' || operator === '--') return family !== 'julia' && family !== 'fortran' && family !== 'r' && family !== 'matlab' && family !== 'swift' && family !== 'python';
  if (operator === '!!') return family === 'kotlin';
  return true;
}
