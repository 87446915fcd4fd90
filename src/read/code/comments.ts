/** Comments as running text: delimiters taken off, neighbouring line comments joined, with the way back to offsets of the document. */
import type { Span } from '../../expression/index.ts';
import type { CodeLanguage } from './languages/index.ts';
import type { CommentCode } from './syntax.ts';

/** A run of characters that stand in the same order in the comment's text and in the document. */
export interface Piece {
  /** Offset in `text`. */
  readonly at: number;
  /** Offset in the document. */
  readonly from: number;
  readonly length: number;
}

export interface CommentText {
  /** With delimiters. */
  readonly span: Span;
  readonly doc: boolean;
  /** Without delimiters; lines are joined by `\n`. */
  readonly text: string;
  readonly pieces: readonly Piece[];
  /** The code that stands before the comment on its line; null where there is none. */
  readonly beside: Span | null;
}

/** The document's offset of a place in the comment's text; the end of the text maps behind its last character. */
export function documentOffset(comment: CommentText, index: number): number {
  let [low, high] = [0, comment.pieces.length - 1];
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((comment.pieces[middle]?.at ?? 0) <= index) low = middle;
    else high = middle - 1;
  }
  const piece = comment.pieces[low];
  return piece ? piece.from + Math.min(index - piece.at, piece.length) : comment.span.start;
}

interface Part {
  readonly from: number;
  readonly to: number;
}

/** Marks that open a line comment, the longer ones (documentation) first. */
const LINE_MARK = /^(?:\/\/[/!]?<?|#'|##?|%%?|![!><]?|--)[ \t]?/;

/** What remains of one comment without its delimiters, line by line. */
function contentOf(text: string, comment: CommentCode): readonly Part[] {
  const written = text.slice(comment.start, comment.end);
  const string = /^[a-zA-Z]{0,2}("""|'''|"|')/.exec(written);
  if (string?.[1] !== undefined) {
    const closed = written.length >= string[0].length + string[1].length && written.endsWith(string[1]);
    return lines(text, comment.start + string[0].length, comment.end - (closed ? string[1].length : 0));
  }
  for (const [open, close] of [
    [/^\/\*[*!]?<?/, '*/'],
    [/^#=/, '=#'],
    [/^%\{/, '%}'],
  ] as const) {
    const head = open.exec(written);
    if (!head) continue;
    const closed = written.length >= head[0].length + close.length && written.endsWith(close);
    return lines(text, comment.start + head[0].length, comment.end - (closed ? close.length : 0)).map((part, i, all) => {
      if (i > 0 && i === all.length - 1 && /^[ \t]*$/.test(text.slice(part.from, part.to))) return { from: part.to, to: part.to };
      const star = i > 0 && close === '*/' ? /^[ \t]*\*(?!\*)[ \t]?/.exec(text.slice(part.from, part.to)) : null;
      return star ? { from: part.from + star[0].length, to: part.to } : part;
    });
  }
  const mark = LINE_MARK.exec(written);
  return [{ from: comment.start + (mark?.[0].length ?? 0), to: comment.end }];
}

function lines(text: string, from: number, to: number): readonly Part[] {
  const parts: Part[] = [];
  let start = from;
  while (start <= to) {
    const stop = text.indexOf('\n', start);
    const end = stop < 0 || stop > to ? to : stop;
    parts.push({ from: start, to: end > start && text[end - 1] === '\r' ? end - 1 : end });
    if (stop < 0 || stop >= to) break;
    start = stop + 1;
  }
  return parts;
}

const isLine = (text: string, comment: CommentCode): boolean => !/^(?:\/\*|#=|%\{|[a-zA-Z]{0,2}["'])/.test(text.slice(comment.start, comment.start + 6));

/** The column and the code before a comment on its line. */
function lineOf(text: string, offset: number): { readonly start: number; readonly column: number; readonly code: string } {
  const start = text.lastIndexOf('\n', offset - 1) + 1;
  const code = text.slice(start, offset);
  return { start, column: offset - start, code };
}

export function commentTexts(comments: readonly CommentCode[], text: string, language: CodeLanguage): readonly CommentText[] {
  const groups: CommentCode[][] = [];
  for (const comment of comments) {
    const group = groups[groups.length - 1];
    const last = group?.[group.length - 1];
    if (group && last && isLine(text, last) && isLine(text, comment) && last.doc === comment.doc) {
      const [a, b] = [lineOf(text, last.start), lineOf(text, comment.start)];
      const between = text.slice(last.end, comment.start);
      // A remark beside code may go on in the same column below; one that has its line goes on in the next line.
      if (b.code.trim() === '' && a.column === b.column && /^\r?\n[ \t]*$/.test(between)) {
        group.push(comment);
        continue;
      }
    }
    groups.push([comment]);
  }
  return groups.flatMap((group) => {
    const [first] = group;
    return first ? [joined(group, first, text, language)] : [];
  });
}

function joined(group: readonly CommentCode[], first: CommentCode, text: string, language: CodeLanguage): CommentText {
  const pieces: Piece[] = [];
  let whole = '';
  group.forEach((comment) => {
    const escapes = language.family === 'python' && /^[a-zA-Z]{0,2}["']/.test(text.slice(comment.start, comment.start + 4)) && !/^[a-zA-Z]*r/i.test(text.slice(comment.start, comment.start + 2));
    for (const part of contentOf(text, comment)) {
      if (whole !== '' || pieces.length > 0) {
        pieces.push({ at: whole.length, from: Math.max(0, part.from - 1), length: 1 });
        whole += '\n';
      }
      let from = part.from;
      // In a plain Python string `\\` is one backslash.
      for (let i = escapes ? text.indexOf('\\\\', from) : -1; i >= 0 && i + 1 < part.to; i = text.indexOf('\\\\', from)) {
        pieces.push({ at: whole.length, from, length: i + 1 - from });
        whole += text.slice(from, i + 1);
        from = i + 2;
      }
      pieces.push({ at: whole.length, from, length: part.to - from });
      whole += text.slice(from, Math.max(from, part.to));
    }
  });
  const { start, code } = lineOf(text, first.start);
  const lead = /^[ \t]*/.exec(code)?.[0].length ?? 0;
  const beside = code.trim() === '' ? null : { start: start + lead, end: start + code.trimEnd().length };
  return { span: { start: first.start, end: group[group.length - 1]?.end ?? first.end }, doc: first.doc, text: whole, pieces, beside };
}
