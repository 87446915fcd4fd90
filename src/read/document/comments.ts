/** Comments of a document by the language's table, strings that document code among them: positions of their words, other strings skipped. Linear in the text. */
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
    if (!string) {
      i += 1;
      continue;
    }
    const end = stringEnd(text, i, string);
    if (DOCUMENTED.has(language.id) && isDocumentation(text, i, string, end)) {
      const closed = end - string.close.length >= i + string.open.length && text.startsWith(string.close, end - string.close.length);
      out.push({ start: i, end, contentStart: i + string.open.length, contentEnd: closed ? end - string.close.length : end, block: true });
    }
    i = Math.max(end, i + 1);
  }
  return out;
}

/** Languages in which a string that stands alone as a statement documents what it belongs to. */
const DOCUMENTED: ReadonlySet<string> = new Set(['python', 'julia']);

/** A string alone on its lines: with threefold signs anywhere, with single ones at the head of the file or of a body. */
function isDocumentation(text: string, start: number, rule: StringRule, end: number): boolean {
  const lineStart = text.lastIndexOf('\n', start - 1) + 1;
  if (!/^\s*[rRuU]?$/.test(text.slice(lineStart, start)) || !/^[ \t]*\r?(?:\n|$)/.test(text.slice(end, end + 200))) return false;
  if (rule.open.length === 3) return !/[=(,[{+\\]\s*$/.test(text.slice(Math.max(0, lineStart - 200), lineStart));
  const before = text.slice(Math.max(0, lineStart - 400), lineStart).trimEnd();
  return before === '' || /^[ \t]*(?:(?:async[ \t]+)?def|class)\b[^\n]*:$|\)[^\n]*:$/m.test(before.slice(before.lastIndexOf('\n') + 1));
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
