/** Mathematics and code of a Markdown document, by syntax tree; a dollar sign that is money is left alone. */
import { fromMarkdown } from 'mdast-util-from-markdown';
import { mathFromMarkdown } from 'mdast-util-math';
import { math } from 'micromark-extension-math';
import type { Comment } from './comments.ts';
import { latexRegions } from './latex.ts';
import type { Region } from './regions.ts';
import { formulasOf, labelsOf } from './rows.ts';

interface MarkdownNode {
  readonly type: string;
  readonly lang?: string | null;
  readonly position?: { readonly start: { readonly offset?: number }; readonly end: { readonly offset?: number } };
  readonly children?: readonly MarkdownNode[];
}

export interface MarkdownContent {
  readonly regions: readonly Region[];
  readonly comments: readonly Comment[];
}

/** Regions in order, and HTML comments. Mathematics is `$...$`, `$$...$$`, math fences, and what mathematics scripts of web pages accept: `\(...\)`, `\[...\]` (also with doubled backslashes) and display environments. */
export function markdownContent(text: string): MarkdownContent {
  const displays = looseDisplays(text);
  const tree = fromMarkdown(blanked(text, displays), { extensions: [math()], mdastExtensions: [mathFromMarkdown()] }) as MarkdownNode;
  const regions: Region[] = displays.flatMap(({ start, end }) => mathRegion(text, start, end, true) ?? []);
  const comments: Comment[] = [];
  /** Stretches of running text, in which delimiters with backslashes are looked for. */
  const running: { start: number; end: number }[] = [];
  const stack: MarkdownNode[] = [tree];
  for (let node = stack.pop(); node; node = stack.pop()) {
    const start = node.position?.start.offset ?? 0;
    const end = node.position?.end.offset ?? 0;
    if (node.type === 'inlineMath' || node.type === 'math') {
      const region = mathRegion(text, start, end, node.type === 'math');
      if (region) regions.push(region);
    } else if (node.type === 'code') regions.push(...codeRegions(text, start, end, node.lang ?? ''));
    else if (node.type === 'html') comments.push(...htmlComments(text, start, end));
    else if (node.type === 'paragraph') running.push({ start, end });
    for (const child of [...(node.children ?? [])].reverse()) stack.push(child);
  }
  for (const stretch of running) regions.push(...backslashMath(text, stretch.start, stretch.end, regions));
  return { regions: regions.sort((a, b) => a.start - b.start), comments };
}

interface Stretch {
  readonly start: number;
  readonly end: number;
}

/**
 * Displays over several lines whose closing `$$` shares its line with something: `... = x$$`, `$$ (1)`. The syntax wants the closing sign alone on its line and
 * would take everything that follows for mathematics; authors and their pages do not. Code fences are left alone.
 */
function looseDisplays(text: string): readonly Stretch[] {
  const out: Stretch[] = [];
  if (!text.includes('$$')) return out;
  let fence: string | null = null;
  let open: { readonly start: number; readonly bare: boolean } | null = null;
  let at = 0;
  for (const line of text.split('\n')) {
    const mark = /^[ \t>]*(`{3,}|~{3,})/.exec(line)?.[1] ?? null;
    const close = line.indexOf('$$');
    if (open) {
      if (close >= 0) {
        if (line.trim() !== '$$') out.push({ start: open.start, end: at + close + 2 });
        open = null;
      } else if (line.trim() === '' && !open.bare) open = null;
    } else if (mark !== null && (fence === null || mark.startsWith(fence))) fence = fence === null ? mark : null;
    else if (fence === null && close >= 0 && /^[ \t>]*$/.test(line.slice(0, close)) && line.indexOf('$', close + 2) < 0) open = { start: at + close, bare: line.slice(close + 2).trim() === '' };
    at += line.length + 1;
  }
  return out;
}

/** The stretches as plain words of the same length, line ends kept. */
function blanked(text: string, stretches: readonly Stretch[]): string {
  let out = '';
  let done = 0;
  for (const { start, end } of stretches) {
    out += text.slice(done, start) + text.slice(start, end).replace(/[^\r\n]/g, 'x');
    done = end;
  }
  return out + text.slice(done);
}

/** Null where the dollar signs are money: a space inside the delimiters, or a digit behind the closing one. */
function mathRegion(text: string, start: number, end: number, display: boolean): Region | null {
  let sign = 0;
  while (text.charAt(start + sign) === '$') sign += 1;
  let contentStart = start + sign;
  let contentEnd = end;
  while (contentEnd > contentStart && text.charAt(contentEnd - 1) === '$') contentEnd -= 1;
  if (!display && sign === 1) {
    if (/\s/.test(text.charAt(contentStart)) || /\s/.test(text.charAt(contentEnd - 1)) || /\d/.test(text.charAt(end))) return null;
    if (/[\w$]/.test(text.charAt(start - 1)) && !/[\\^_{}=]/.test(text.slice(contentStart, contentEnd))) return null;
  }
  // `$$ ... $$` within a line is inline for Markdown and display for its readers.
  const kind = display || sign > 1 ? 'display' : 'inline';
  while (contentStart < contentEnd && /\s/.test(text.charAt(contentStart))) contentStart += 1;
  while (contentEnd > contentStart && /\s/.test(text.charAt(contentEnd - 1))) contentEnd -= 1;
  return latexRegion(text, start, end, contentStart, contentEnd, kind);
}

function latexRegion(text: string, start: number, end: number, contentStart: number, contentEnd: number, kind: Region['kind']): Region {
  const content = text.slice(contentStart, contentEnd);
  const environment = /^\\begin\{(\w+\*?)\}/.exec(content)?.[1];
  const [label, tag] = labelsOf(content);
  return { start, end, contentStart, contentEnd, kind, ...(environment ? { environment } : {}), ...(label === undefined ? {} : { label }), ...(tag === undefined ? {} : { tag }), language: 'latex', formulas: formulasOf(text, contentStart, contentEnd, environment && /^(?:align|gather|eqnarray|cases)/.test(environment) ? environment : null) };
}

function codeRegions(text: string, start: number, end: number, lang: string): readonly Region[] {
  const fence = /^(`{3,}|~{3,})/.exec(text.slice(start, start + 40))?.[1];
  if (fence === undefined) return [];
  const line = text.indexOf('\n', start);
  const contentStart = line < 0 ? end : line + 1;
  const closing = text.lastIndexOf('\n', end - 1);
  const closed = closing >= contentStart - 1 && text.slice(closing + 1, end).trim().startsWith(fence);
  const contentEnd = Math.max(contentStart, closed ? closing : end);
  // Quarto and R Markdown name the language in braces: ```{python}.
  const language = (/^\{?\.?([\w+#-]+)/.exec(lang)?.[1] ?? '').toLowerCase();
  if (language === 'math' || language === 'latex' || language === 'tex') {
    const inner = latexRegions(text, contentStart, contentEnd);
    if (language !== 'math' && inner.length > 0) return inner;
    if (language === 'math') return [latexRegion(text, start, end, contentStart, contentEnd, 'display')];
  }
  return [{ start, end, contentStart, contentEnd, kind: 'code', language, formulas: [] }];
}

function htmlComments(text: string, start: number, end: number): readonly Comment[] {
  const out: Comment[] = [];
  for (let at = text.indexOf('<!--', start); at >= 0 && at < end; at = text.indexOf('<!--', at + 4)) {
    const close = text.indexOf('-->', at + 4);
    const stop = close < 0 ? end : close;
    out.push({ start: at, end: close < 0 ? end : close + 3, contentStart: at + 4, contentEnd: stop, block: true });
    if (close < 0) break;
    at = close - 1;
  }
  return out;
}

/** `\(...\)`, `\[...\]`, `\\(...\\)`, `\\[...\\]` and display environments in running text. */
function backslashMath(text: string, from: number, to: number, known: readonly Region[]): readonly Region[] {
  const out: Region[] = [];
  const pattern = /(\\{1,2})([([])|\\begin\{((?:equation|align|gather|multline|eqnarray|alignat|displaymath)\*?)\}/g;
  pattern.lastIndex = from;
  const stretch = text.slice(0, to);
  for (let found = pattern.exec(stretch); found; found = pattern.exec(stretch)) {
    const at = found.index;
    if (known.some((r) => r.start <= at && at < r.end)) continue;
    const [whole, slashes = '', bracket] = found;
    const environment = found[3];
    const closer = environment === undefined ? `${slashes}${bracket === '(' ? ')' : ']'}` : `\\end{${environment}}`;
    const contentStart = environment === undefined ? at + whole.length : at;
    const close = stretch.indexOf(closer, at + whole.length);
    if (close < 0) continue;
    const end = close + closer.length;
    out.push(latexRegion(text, at, end, contentStart, environment === undefined ? close : end, bracket === '(' ? 'inline' : 'display'));
    pattern.lastIndex = end;
  }
  return out;
}
