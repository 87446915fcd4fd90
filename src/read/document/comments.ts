/** Comments of a document by the language's table: positions of their words, strings skipped. Linear in the text. */
import type { Language, StringRule } from '../languages.ts';

/** A comment. `contentStart` to `contentEnd` is what stands between its signs. */
export interface Comment {
  readonly start: number;
  readonly end: number;
  readonly contentStart: number;
  readonly contentEnd: number;
  readonly block: boolean;
}

export function findComments(text: string, language: Language): readonly Comment[] {
  const { line, block, nested } = language.comments;
  if (line.length === 0 && block.length === 0) return [];
  const lead = new Set([...line, ...block.map(([open]) => open), ...language.strings.map((s) => s.open)].map((sign) => sign.charCodeAt(0)));
  const out: Comment[] = [];
  const latex = language.id === 'latex';
  let i = 0;
  while (i < text.length) {
    const code = text.charCodeAt(i);
    if (latex && code === 92) {
      i += 2;
      continue;
    }
    if (!lead.has(code)) {
      i += 1;
      continue;
    }
    const opened = block.find(([open]) => text.startsWith(open, i));
    if (opened) {
      const [open, close] = opened;
      const end = nested ? nestedEnd(text, i, open, close) : endAfter(text, close, i + open.length);
      const closed = text.startsWith(close, end - close.length) && end - close.length >= i + open.length;
      out.push({ start: i, end, contentStart: i + open.length, contentEnd: closed ? end - close.length : end, block: true });
      i = end;
      continue;
    }
    const string = language.strings.find((s) => text.startsWith(s.open, i));
    const lineSign = line.find((sign) => text.startsWith(sign, i));
    if (lineSign !== undefined && !(string && string.open.length > lineSign.length)) {
      let end = text.indexOf('\n', i);
      if (end < 0) end = text.length;
      let contentStart = i + lineSign.length;
      // `///`, `//!`, `%%`: repeated signs belong to the delimiter.
      while (contentStart < end && (text.charAt(contentStart) === lineSign.charAt(lineSign.length - 1) || (lineSign === '//' && text.charAt(contentStart) === '!'))) contentStart += 1;
      const contentEnd = text.charCodeAt(end - 1) === 13 && end - 1 >= contentStart ? end - 1 : end;
      out.push({ start: i, end, contentStart, contentEnd, block: false });
      i = end;
      continue;
    }
    i = string ? stringEnd(text, i, string) : i + 1;
  }
  return out;
}

function endAfter(text: string, sign: string, from: number): number {
  const at = text.indexOf(sign, from);
  return at < 0 ? text.length : at + sign.length;
}

function nestedEnd(text: string, from: number, open: string, close: string): number {
  let depth = 0;
  let i = from;
  while (i < text.length) {
    if (text.startsWith(open, i)) {
      depth += 1;
      i += open.length;
    } else if (text.startsWith(close, i)) {
      depth -= 1;
      i += close.length;
      if (depth === 0) return i;
    } else i += 1;
  }
  return text.length;
}

function stringEnd(text: string, from: number, rule: StringRule): number {
  let i = from + rule.open.length;
  while (i < text.length) {
    const c = text.charAt(i);
    if (c === '\n' && !rule.multiline) return i;
    if (rule.escape === 'backslash' && c === '\\') i += 2;
    else if (text.startsWith(rule.close, i)) {
      if (rule.escape === 'doubled' && text.startsWith(rule.close, i + rule.close.length)) i += 2 * rule.close.length;
      else return i + rule.close.length;
    } else i += 1;
  }
  return text.length;
}
