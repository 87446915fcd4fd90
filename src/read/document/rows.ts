/** Rows of aligned formulas: where one formula ends and the next begins. */
import { groupEnd } from '../math/macros.ts';
import type { FormulaPlace } from './regions.ts';

/** Environments all of whose rows are one formula. */
const ONE_FORMULA = /^(?:multline|split|displaymath|math|dmath)\*?$/;
const CONTINUES = /^(?:[&\s]|\\[,;:!> ]|\\q?quad(?![A-Za-z])|\\left(?![A-Za-z])|\{\})*(?:[=+*/<>≈≃∼≤≥≠×·−-]|\\(?:approx|simeq|sim|cong|equiv|le|leq|leqslant|ge|geq|geqslant|lt|gt|ne|neq|propto|to|rightarrow|longrightarrow|times|cdot|pm|mp|div|asymp|doteq|ll|gg|cdots|ldots|dots|coloneqq)(?![A-Za-z]))/;
const OPEN_END = /(?:[=+*/(<-]|\\(?:approx|simeq|sim|times|cdot|left\(|left\[|bigl?\(|Bigl?\(|le|ge|leq|geq))\s*&?\s*$/;

/** The formulas between `from` and `to` of the text, for an environment name or null. Linear. */
export function formulasOf(text: string, from: number, to: number, environment: string | null): readonly FormulaPlace[] {
  const whole = text.slice(from, to);
  if (!whole.includes('\\\\')) {
    const [label, tag] = labelsOf(whole);
    const place = trimPlace(text, { start: from, end: to, ...(label === undefined ? {} : { label }), ...(tag === undefined ? {} : { tag }), rows: 1 });
    return place.start < place.end ? [place] : [];
  }
  const single = environment !== null && ONE_FORMULA.test(environment);
  const out: { start: number; end: number; label?: string; tag?: string; rows: number }[] = [];
  /** Brackets still open in the last formula. */
  let open = 0;
  const quoted = /^\s*>/.test(whole);
  for (const row of splitRows(text, from, to)) {
    const written = text.slice(row.start, row.end);
    // In a Markdown quotation the marks at the line starts are no relation signs.
    const content = quoted ? written.replace(/(^|\n)[ \t]*>[ \t>]*/g, '$1') : written;
    if (content.replace(/%[^\n]*/g, '').trim() === '') continue;
    const [label, tag] = labelsOf(content);
    const last = out[out.length - 1];
    const continued = last !== undefined && (single || open > 0 || CONTINUES.test(content) || endsOpen(text, last.start, last.end));
    if (continued) {
      last.end = row.end;
      last.rows += 1;
      if (label !== undefined) last.label = label;
      if (tag !== undefined) last.tag = tag;
      open += openBrackets(content);
    } else {
      out.push({ start: row.start, end: row.end, ...(label === undefined ? {} : { label }), ...(tag === undefined ? {} : { tag }), rows: 1 });
      open = openBrackets(content);
    }
  }
  return out.map((f) => trimPlace(text, f));
}

/** Texts of `\label` and `\tag`, looked for only where such a command stands. */
export function labelsOf(content: string): readonly [string | undefined, string | undefined] {
  const label = content.includes('\\label') ? /\\label\s*\{([^}]*)\}/.exec(content)?.[1] : undefined;
  const tag = content.includes('\\tag') ? /\\tag\*?\s*\{([^}]*)\}/.exec(content)?.[1] : undefined;
  return [label, tag];
}

function trimPlace<T extends { start: number; end: number }>(text: string, place: T): T {
  let { start, end } = place;
  while (start < end && /\s/.test(text.charAt(start))) start += 1;
  while (end > start && /\s/.test(text.charAt(end - 1))) end -= 1;
  return { ...place, start, end };
}

/** The row ends in an operator or relation sign, numbering commands aside: it goes on in the next. */
function endsOpen(text: string, start: number, end: number): boolean {
  let tail = text.slice(Math.max(start, end - 200), end);
  if (/\\(?:label|tag|no)/.test(tail)) tail = tail.replace(/\\(?:label|tag)\s*\{[^}]*\}|\\nonumber|\\notag/g, '');
  tail = tail.trimEnd().slice(-16);
  return /[=+*/(<&\-\[a-z]$/.test(tail) && OPEN_END.test(tail);
}

/** Brackets opened less brackets closed, escaped ones counted alike. */
function openBrackets(text: string): number {
  let depth = 0;
  for (let i = 0; i < text.length; i += 1) {
    const c = text.charAt(i);
    if (c === '(' || c === '[') depth += 1;
    else if (c === ')' || c === ']') depth -= 1;
  }
  return depth;
}

/** Places of the rows, split at `\\` outside braces and inner environments. */
export function splitRows(text: string, from: number, to: number): readonly { readonly start: number; readonly end: number }[] {
  const rows: { start: number; end: number }[] = [];
  let start = from;
  let braces = 0;
  let inner = 0;
  for (let i = from; i < to; i += 1) {
    const c = text.charCodeAt(i);
    if (c === 37) {
      const line = text.indexOf('\n', i);
      i = line < 0 ? to : line;
    } else if (c === 123) braces += 1;
    else if (c === 125) braces -= 1;
    else if (c === 92) {
      const next = text.charCodeAt(i + 1);
      if (next === 92) {
        if (braces === 0 && inner === 0) {
          rows.push({ start, end: i });
          i += 1;
          const size = /^\*?\s*\[\s*-?[\d.]+\s*[a-z]+\s*\]/.exec(text.slice(i + 1, i + 30));
          i += size ? size[0].length : text.charAt(i + 1) === '*' ? 1 : 0;
          start = i + 1;
        } else i += 1;
      } else if (next === 98 && text.startsWith('\\begin{', i)) {
        const end = groupEnd(text, i + 6);
        // Inner environments that only group rows (`split`, `aligned`) are looked through; `cases` and matrices are one piece.
        if (end > 0 && !/^(?:split|aligned|gathered)$/.test(text.slice(i + 7, end))) inner += 1;
        i = end > 0 ? end : i + 6;
      } else if (next === 101 && text.startsWith('\\end{', i)) {
        const end = groupEnd(text, i + 4);
        if (end > 0 && !/^(?:split|aligned|gathered)$/.test(text.slice(i + 5, end))) inner = Math.max(0, inner - 1);
        i = end > 0 ? end : i + 4;
      } else i += 1;
    }
  }
  rows.push({ start, end: to });
  return rows;
}
