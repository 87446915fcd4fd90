/** The formulas of a document that may hold claims: mathematics, Markdown, comments of code, plain lines. */
import { type ApplyNode, type Expression, type Span, type SymbolNode, walk } from '../expression/index.ts';
import { type DocumentContent, type Formula, languageOf, type MacroTable, readDocument, readFormula, type Region } from '../read/index.ts';
import { type CheckMemory, macrosUsed, movedTree } from './memory.ts';

export interface PlacedFormula {
  readonly span: Span;
  readonly notation: 'latex' | 'plain';
  readonly formula: Formula;
  /** Stands in running text. */
  readonly inline: boolean;
  readonly label: string | null;
}
/** A formula as it was read first, and by how much its places have moved since. */
export interface FoundFormula extends PlacedFormula {
  readonly still: Formula;
  readonly by: number;
}

/** Places are moved only where they are asked for. */
function foundFormula(place: Omit<PlacedFormula, 'formula'>, still: Formula, by: number): FoundFormula {
  let moved: Formula | null = by === 0 ? still : null;
  return {
    ...place,
    still,
    by,
    get formula() {
      return (moved ??= movedTree(still, by));
    },
  };
}
export interface UnreadFormula extends Span {
  readonly reason: string;
  /** A command or function in it is not known. */
  readonly unknown?: boolean;
}
export interface Formulas {
  readonly found: readonly FoundFormula[];
  readonly unread: readonly UnreadFormula[];
  readonly content: DocumentContent;
}

/** Formulas in order of appearance. A text without any mathematics marked as such is read as one formula. */
export function formulasOf(text: string, language: string, options: { readonly fileName?: string; readonly macros?: MacroTable; readonly memory?: CheckMemory; /** Formulas whose text it refuses are left out. */ readonly wanted?: (written: string) => boolean }): Formulas {
  const content = readDocument(text, language, options);
  const found: FoundFormula[] = [];
  const unread: UnreadFormula[] = [];
  const read = (span: Span, notation: 'latex' | 'plain', inline: boolean, label: string | null, quiet: boolean, source = text): boolean => {
    const written = source.slice(span.start, span.end);
    if (options.wanted?.(written) === false) return false;
    const key = options.memory ? `${notation}\n${macrosUsed(written, content.macros)}\n${written}` : '';
    const known = options.memory?.formulas.recallStill(key);
    if (known) {
      found.push(foundFormula({ span, notation, inline, label }, known.value, span.start - known.start));
      return true;
    }
    const outcome = readFormula(source, notation, { start: span.start, end: span.end, macros: content.macros, joinRows: true });
    const mixed = outcome.ok ? foreignText(text, span, outcome.value.expression) : null;
    if (mixed !== null) {
      if (!quiet) unread.push({ ...span, reason: mixed });
      return false;
    }
    if (outcome.ok) {
      options.memory?.formulas.keep(key, span.start, outcome.value);
      found.push(foundFormula({ span, notation, inline, label }, outcome.value, 0));
      return true;
    }
    if (!quiet) unread.push({ start: outcome.error.start ?? span.start, end: Math.max(outcome.error.end ?? span.end, (outcome.error.start ?? span.start) + 1), reason: outcome.error.message, ...(outcome.error.code === 'unknown-function' ? { unknown: true } : {}) });
    return false;
  };
  for (const region of content.regions) {
    if (region.kind === 'code') continue;
    if (region.kind === 'comment') for (const place of commentFormulas(text, region)) read({ start: place.start, end: place.end }, place.notation, true, null, true, place.source);
    else if (region.kind === 'text') for (const place of proseFormulas(text, region.contentStart, region.contentEnd)) read(place, 'plain', true, null, true);
    else for (const place of region.formulas) read({ start: place.start, end: place.end }, region.language === 'plain' ? 'plain' : 'latex', region.kind === 'inline', place.label ?? region.label ?? place.tag ?? region.tag ?? null, false);
  }
  if (found.length === 0 && unread.length === 0 && content.regions.length === 0 && text.trim() !== '' && !(isCode(language, options.fileName) && text.trim().includes('\n'))) {
    const whole = { start: 0, end: endOfFormula(text) };
    const notation = language === 'plain' && !text.includes('\\') ? 'plain' : 'latex';
    // Running text of which only a stretch is a formula.
    if (!read(whole, notation, false, null, true)) for (const place of language === 'latex' ? [] : proseFormulas(text, 0, text.length)) read({ start: place.start, end: place.end }, place.notation, true, null, true, place.source);
    if (found.length === 0) read(whole, notation, false, null, false);
  }
  return { found, unread, content };
}

/** A program of several lines is no formula. */
const isCode = (language: string, fileName: string | undefined): boolean => languageOf(language, fileName).reader === 'code';

/** Where words go on behind a formula that stands alone: `... as x \to \infty`. Only behind a relation, and outside of braces. */
function endOfFormula(text: string): number {
  for (const match of text.matchAll(/[\s,;](?:as|for|when|where|if|near|around|provided|valid)\s+(?=[\w\\|$])/g)) {
    const before = text.slice(0, match.index);
    const depth = (before.match(/\{/g)?.length ?? 0) - (before.match(/\}/g)?.length ?? 0);
    if (depth === 0 && RELATION.test(before)) return match.index;
  }
  return text.length;
}

/** Dollar signs or whole words inside what was taken for one formula: its delimiters are not paired as they look. */
function foreignText(text: string, span: Span, e: Expression): string | null {
  if (/(?<!\\)\$/.test(text.slice(span.start, span.end))) return 'The signs that open and close mathematics are not paired here; write each formula between its own.';
  const words = [...walk(e)].some((n) => n.kind === 'product' && n.factors.length >= 6 && n.span && longestRun(n.factors, text) >= 6);
  return words ? 'Words of running text stand in this formula; set them in \\text{} or outside.' : null;
}

/** Longest run of factors that are single letters standing side by side. */
function longestRun(factors: readonly Expression[], text: string): number {
  let longest = 0;
  let run = 0;
  factors.forEach((factor, i) => {
    const before = factors[i - 1];
    const letter = factor.kind === 'symbol' && factor.span !== undefined && /^[A-Za-z]$/.test(text.slice(factor.span.start, factor.span.end));
    run = letter ? (before?.span && before.span.end === factor.span?.start ? run + 1 : 1) : 0;
    longest = Math.max(longest, run);
  });
  return longest;
}

interface Place extends Span {
  readonly notation: 'latex' | 'plain';
  /** The text with the marks between joined lines blanked out, where the formula goes on over several; offsets are those of the text. */
  readonly source?: string;
}

/** Formulas in a comment: marked LaTeX where there is any, else lines with a relation. */
function commentFormulas(text: string, region: Region): readonly Place[] {
  const out: Place[] = [];
  const content = text.slice(region.contentStart, region.contentEnd);
  for (const match of content.matchAll(/\$\$([\s\S]+?)\$\$|\$([^$\n]+)\$|\\\(([\s\S]+?)\\\)|\\\[([\s\S]+?)\\\]|\\f\$([^\n]+?)\\f\$|:math:`([^`]+)`/g)) {
    const inner = match.slice(1).find((g) => g !== undefined) ?? '';
    const start = region.contentStart + match.index + match[0].indexOf(inner);
    out.push({ start, end: start + inner.length, notation: 'latex' });
  }
  return out.length > 0 ? out : proseFormulas(text, region.contentStart, region.contentEnd);
}

/** Marks of documentation around what is said: code in backquotes or `{@code ...}`, tags such as `<summary>`, bold and list marks. They become spaces, so that offsets stay. */
const DRESSING = /`+|\{@(?:code|literal|link)\s|(?<=\{@(?:code|literal|link)\s[^{}]*)\}|<\/?(?:[a-z][a-z\d]*)(?:\s[^<>\n]*)?\/?>|(?<=^|\s)\*\*(?=\S)|(?<=\S)\*\*(?=[\s.,;:]|$)|@(?:brief|details|note|return|returns|remarks?|approx)\b|\\(?:brief|details|note|returns?|remark)\b|(?<![\w.])(?:Math|math|np|numpy|std::|Mathf|MathF)(?:\.(?=[a-z])|(?<=::)(?=[a-z]))/g;

function undressed(text: string, from: number, to: number): string {
  const piece = text.slice(from, to);
  const plain = piece.replace(DRESSING, (mark) => ' '.repeat(mark.length));
  return plain === piece ? text : text.slice(0, from) + plain + text.slice(to);
}

const RELATION = /~=|≈|∼|≃|(?<![<>=!:+\-*/])=(?!=)|\\approx|\\sim(?:eq)?(?![a-z])|(?<=\s)~(?=\s)/;

/** Running text that goes on behind a formula. */
const WORDS_AFTER = /\s(?:for|when|where|if|with|near|around|which|so|and|using|gives?|since|because|valid|while|within|accurate|correct|to avoid|to within|better than|on|is|has)\s/;

/** In each line with a relation, the longest stretch that is a formula; lines that start with a relation or a sign go on with the one before. */
function proseFormulas(written: string, from: number, to: number): readonly Place[] {
  const text = undressed(written, from, to);
  const out: Place[] = [];
  const lines: Span[] = [];
  for (let start = from; start < to; ) {
    const newline = text.indexOf('\n', start);
    const end = newline < 0 || newline > to ? to : newline;
    lines.push({ start, end });
    start = end + 1;
  }
  for (let i = 0; i < lines.length; i += 1) {
    const first = lines[i] as Span;
    let last = i;
    while (lines[last + 1] && last - i < MOST_JOINED && CONTINUES.test(text.slice(lines[last + 1]?.start, lines[last + 1]?.end))) last += 1;
    const joined = last > i ? joinedSource(text, lines.slice(i, last + 1)) : text;
    const place = formulaInLine(joined, first.start, lines[last]?.end ?? first.end) ?? (last > i ? formulaInLine(text, first.start, first.end) : null);
    if (place) out.push(joined === written ? place : { ...place, source: joined });
    i = last;
  }
  return out;
}

const MOST_JOINED = 12;
const LEAD = /^[\s*/!#%;>]*/;
const CONTINUES = /^[\s*/!#%;>]*(?:=(?!=)|≈|~=|\\approx|\+|[-−](?=\s*[\w(\\]))/;

/** The text with line ends and comment marks between the lines turned into spaces. */
function joinedSource(text: string, lines: readonly Span[]): string {
  let out = text;
  lines.slice(1).forEach((line) => {
    const lead = LEAD.exec(text.slice(line.start, line.end))?.[0].length ?? 0;
    out = `${out.slice(0, line.start - 1)}${' '.repeat(lead + 1)}${out.slice(line.start + lead)}`;
  });
  return out;
}

function formulaInLine(text: string, start: number, end: number): Place | null {
  const line = text.slice(start, end);
  const relation = RELATION.exec(line);
  if (!relation || line.length > 2000) return null;
  const notation = line.includes('\\') ? 'latex' : 'plain';
  const lead = /^[\s*/!#%;>]*(?:(?:-|\d+[.)])\s+)?/.exec(line)?.[0].length ?? 0;
  const starts = [lead, ...[...line.slice(lead, relation.index).matchAll(/[:;,]\s+|\s+|(?<=\w)\(/g)].map((m) => lead + m.index + m[0].length)];
  const words = WORDS_AFTER.exec(line.slice(relation.index));
  const ends = words ? [start + relation.index + words.index, end] : [end];
  for (const to of ends) {
    for (const at of new Set(starts)) {
      if (at >= relation.index || WORD_FIRST.test(line.slice(at, at + 16))) continue;
      const outcome = readFormula(text, notation, { start: start + at, end: to });
      if (outcome.ok && outcome.value.expression.kind === 'relation' && !isWordy(outcome.value.expression, text)) return { start: start + at, end: to, notation };
    }
  }
  return null;
}

/** Words that lead to a formula and are none of its letters. */
const WORD_FIRST = /^(?:of|the|errors?|by|to|in|we|use|as|with|for|that|formula)\s/i;

/** Words about formulas: one of them suffices to tell running text. */
const ENGLISH = /^(?:the|errors?|formula|approximations?|approximate|use|expansion|series|that|with|for|and|where|when)$/i;

/** Words of running text that were read as symbols. */
function isWordy(e: Expression, text: string): boolean {
  const words = [...walk(e)].filter((n): n is SymbolNode | ApplyNode => (n.kind === 'symbol' || n.kind === 'apply') && /^[A-Za-z]{3,}$/.test(n.name) && n.span !== undefined && /^[A-Za-z]{3,}$/.test(text.slice(n.span.start, n.span.start + n.name.length)));
  const [first] = words;
  const leads = e.span && first?.span?.start === e.span.start && /^[A-Za-z]+\s+[A-Za-z(\\]/.test(text.slice(first.span.start, first.span.start + 60));
  return leads === true || words.length > 1 || words.some((n) => ENGLISH.test(n.name));
}
