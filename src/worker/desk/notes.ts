/**
 * `leading-order:` notes: comments in plain words that say how the next formula, or the rest of the file, is expanded.
 *
 *     leading-order: small x, on |x| <= 0.5, within 1e-6, assume a > 0
 *
 * Clauses are separated by commas outside brackets. A note that cannot be read keeps its place and says why.
 */
import type { NoteReading, Question } from './types.ts';

const OPENING: Readonly<Record<string, RegExp>> = {
  latex: /%[ \t%]*$/,
  markdown: /<!--\s*$/,
  python: /#[ \t#]*$/,
  julia: /#[ \t#]*$/,
  r: /#[ \t#']*$/,
  fortran: /![ \t!]*$/,
  matlab: /%[ \t%]*$/,
  plain: /(%|#|!|\/\/|<!--)\s*$/,
};
const CURLY = /(\/\/[\/! \t]*|\/\*+[ \t]*|^[ \t]*\*[ \t]*)$/;

export function readNotes(text: string, language: string): readonly NoteReading[] {
  const opening = OPENING[language] ?? CURLY;
  const found: NoteReading[] = [];
  for (const match of text.matchAll(/leading-order:([^\n]*)/g)) {
    const lineStart = text.lastIndexOf('\n', match.index) + 1;
    if (!opening.test(text.slice(lineStart, match.index))) continue;
    const body = (match[1] ?? '').replace(/(-->|\*\/).*$/, '').replace(/\r$/, '');
    const end = match.index + 'leading-order:'.length + body.trimEnd().length;
    found.push({ start: match.index, end, ...readNote(body) });
  }
  return found;
}

type Read = Omit<NoteReading, 'start' | 'end'>;
interface Draft {
  variable?: string;
  small?: readonly string[];
  point?: string;
  side?: Question['side'];
  interval?: readonly [string, string];
  tolerance?: string;
  measure?: Question['measure'];
  terms?: number;
  order?: string;
  assume?: string[];
}

export function readNote(body: string): Read {
  const draft: Draft = {};
  let skip = false;
  let label: string | undefined;
  let assuming = false;
  const fail = (problem: string): Read => ({ question: {}, skip: false, problem });
  const clauses = splitClauses(body);
  if (clauses.length === 0) return fail('This note is empty; write for instance "small x, on |x| <= 0.5, within 1e-6".');
  for (const clause of clauses) {
    const [, word = '', rest = ''] = /^(\S+)\s*([^]*)$/.exec(clause) ?? [];
    const value = rest.trim();
    if (word === 'skip' && value === '') skip = true;
    else if (word === 'small' || word === 'large') {
      if (value === '') return fail(`Say what is ${word}, for instance "${word} x".`);
      if (draft.variable !== undefined || draft.small !== undefined) return fail('Only one clause of a note may say what is small, large or near.');
      if (word === 'small' && /~|<<|\\ll|,|\band\b/.test(value)) draft.small = value.split(/\s*(?:,|\band\b)\s*/);
      else Object.assign(draft, { variable: value, point: word === 'small' ? '0' : 'inf' });
    } else if (word === 'near') {
      const [, variable, point] = /^(.+?)\s*=\s*(.+)$/.exec(value) ?? [];
      if (!variable || !point) return fail('Write the point as in "near x = 1".');
      const side = /^(.*?)\s+from\s+(above|below)$/.exec(point);
      Object.assign(draft, { variable, point: side?.[1] ?? point });
      if (side) draft.side = side[2] === 'above' ? 'right' : 'left';
    } else if (word === 'on') {
      const interval = readInterval(value);
      if (!interval) return fail('Write the interval as in "on |x| <= 0.5", "on 0 <= x <= 1" or "on [0, 1]".');
      draft.interval = interval;
    } else if (word === 'within') {
      const [, number, unit] = /^([0-9.]+(?:[eE][-+]?\d+)?)\s*(%|relative)?$/.exec(value) ?? [];
      if (!number || !(Number(number) > 0)) return fail('Write the tolerance as in "within 1e-6", "within 1e-6 relative" or "within 2 %".');
      draft.tolerance = unit === '%' ? String(Number((Number(number) / 100).toPrecision(15))) : number;
      if (unit) draft.measure = 'relative';
    } else if (word === 'assume') {
      if (value === '') return fail('Say what is assumed, for instance "assume a > 0".');
      draft.assume = [...(draft.assume ?? []), value];
    } else if (word === 'implements') {
      if (!/^\S+$/.test(value)) return fail('Name one equation label, for instance "implements eq:sag".');
      label = value;
    } else if (/^\d+$/.test(word) && /^terms?$/.test(value)) draft.terms = Number(word);
    else if (word === 'order' && /^-?\d+(\/\d+)?$/.test(value)) draft.order = value;
    else if (word === 'to' && /^order\s+-?\d+(\/\d+)?$/.test(value)) draft.order = value.replace(/^order\s+/, '');
    else if (word === 'from' && (value === 'above' || value === 'below')) draft.side = value === 'above' ? 'right' : 'left';
    else if (assuming && /[<>=]|\binteger\b/.test(clause)) draft.assume = [...(draft.assume ?? []), clause];
    else return fail(`"${clause}" is not understood here; a note knows small, large, near, on, within, assume, terms, order, implements and skip.`);
    assuming = word === 'assume' || (assuming && !/^(small|large|near|on|within|skip|implements|order)$/.test(word));
  }
  return { question: draft, skip, problem: null, ...(label === undefined ? {} : { implements: label }) };
}

/** At commas outside brackets. */
function splitClauses(body: string): readonly string[] {
  const parts = [''];
  let depth = 0;
  for (const character of body) {
    if ('([{'.includes(character)) depth += 1;
    if (')]}'.includes(character)) depth = Math.max(0, depth - 1);
    if ((character === ',' || character === ';') && depth === 0) parts.push('');
    else parts[parts.length - 1] += character;
  }
  return parts.map((part) => part.trim()).filter((part) => part !== '');
}

function readInterval(value: string): readonly [string, string] | null {
  const bracket = /^\[([^]*)\]$/.exec(value)?.[1];
  if (bracket !== undefined) {
    const ends = splitClauses(bracket);
    return ends.length === 2 && ends[0] && ends[1] ? [ends[0], ends[1]] : null;
  }
  const within = /^(?:\||\\lvert|abs\()\s*(.+?)\s*(?:\||\\rvert|\))\s*(?:<=|<|≤|\\leq?)\s*(.+)$/.exec(value);
  if (within?.[2]) return [negated(within[2]), within[2]];
  const between = /^(.+?)\s*(?:<=|<|≤|\\leq?)\s*[^<≤]+?\s*(?:<=|<|≤|\\leq?)\s*(.+)$/.exec(value);
  if (between?.[1] && between[2]) return [between[1], between[2]];
  const least = /^[A-Za-z\\][\w\\]*\s*(?:>=|>|≥|\\geq?)\s*(.+)$/.exec(value);
  return least?.[1] ? [least[1], 'inf'] : null;
}

const negated = (end: string): string => (/^[\w./]+$/.test(end) ? `-${end}` : `-(${end})`);
