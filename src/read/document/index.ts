/** A document: its mathematics, code blocks, comments and macro definitions, with positions. Nothing in it is run. */
import { languageOf } from '../languages.ts';
import { collectMacros, type MacroTable, NO_MACROS } from '../math/macros.ts';
import { type Comment, findComments } from './comments.ts';
import { latexRegions } from './latex.ts';
import { markdownContent } from './markdown.ts';
import type { Region } from './regions.ts';

export type { Comment } from './comments.ts';
export { findComments } from './comments.ts';
export type { FormulaPlace, Region } from './regions.ts';

export interface DocumentContent {
  readonly regions: readonly Region[];
  readonly comments: readonly Comment[];
  readonly macros: MacroTable;
}

/**
 * Regions of a document in order. LaTeX: all mathematics, and listings that name a language. Markdown: mathematics and fenced code.
 * Code: its comments (read as plain notation unless they hold a backslash). Plain: the lines of the text. Linear in the text.
 * `inherited` are macros of other files that the document includes.
 */
export function readDocument(text: string, language: string, options: { readonly fileName?: string; readonly macros?: MacroTable } = {}): DocumentContent {
  const entry = languageOf(language, options.fileName);
  const inherited = options.macros ?? NO_MACROS;
  switch (entry.reader) {
    case 'latex':
      return { regions: latexRegions(text), comments: findComments(text, entry), macros: collectMacros(text, inherited) };
    case 'markdown': {
      const { regions, comments } = markdownContent(text);
      const definitions = regions.filter((r) => r.language === 'latex').map((r) => text.slice(r.contentStart, r.contentEnd));
      return { regions, comments, macros: definitions.reduce((known, part) => collectMacros(part, known), inherited) };
    }
    case 'code': {
      const comments = findComments(text, entry);
      return { regions: comments.map((c) => commentRegion(text, c)), comments, macros: inherited };
    }
    case 'plain':
      return { regions: plainLines(text), comments: findComments(text, entry), macros: inherited };
  }
}

function commentRegion(text: string, comment: Comment): Region {
  const content = text.slice(comment.contentStart, comment.contentEnd);
  return { start: comment.start, end: comment.end, contentStart: comment.contentStart, contentEnd: comment.contentEnd, kind: 'comment', language: content.includes('\\') ? 'latex' : 'plain', formulas: [] };
}

function plainLines(text: string): readonly Region[] {
  const out: Region[] = [];
  for (let start = 0; start <= text.length; ) {
    const line = text.indexOf('\n', start);
    const end = line < 0 ? text.length : line;
    if (text.slice(start, end).trim() !== '') out.push({ start, end, contentStart: start, contentEnd: end, kind: 'text', language: 'plain', formulas: [{ start, end, rows: 1 }] });
    start = end + 1;
  }
  return out;
}
