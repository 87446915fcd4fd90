/** Intervals of the variable that a text states: |x| < c, a <= x <= b, [a, b], and x < c for a small quantity. */
import { build, dependsOn, type Expression } from '../expression/index.ts';
import { readExact, readFormula } from '../read/index.ts';

export interface Ends {
  readonly low: Expression;
  readonly high: Expression;
}

/** An interval as words state it: what is proved must hold on `whole`; what is refuted must be refuted on `least`, which every reading of the words contains. */
export interface StatedInterval {
  readonly whole: Ends;
  readonly least: Ends;
}

/** Whatever two signs of mathematics enclose: which of them open it is not known where a window starts. */
const MARKED = /\$(?=([^$]{1,80})\$)/g;
const RELATIONS = /((?:\|[^|\n]{1,40}\||[\w\\.\-/+ ]{1,30}(?:<=?|\\leq?|≤)\s*[\w\\]{1,20})\s*(?:<=?|\\leq?(?![a-z])|≤)\s*[\w\\./{}^-]+)/g;
/** Brackets behind a word that announces an interval: a bare [1, 2] may refer to the literature. */
const BRACKETS = /(?:\b(?:on|in|over|interval|range|domain|inside|for|throughout)(?:\s+the)?(?:\s+(?:closed|open|whole|entire))?(?:\s+(?:interval|range|domain))?|\\in|∈)\s*\$?\s*(?:[\w\\]{1,12}\s*(?:\\in|∈|in)\s*)?(?:\\left)?[[(]\s*([^[\](),;\n$]{1,24}?)\s*(?:,|;|\.\.)\s*([^[\](),;\n$]{1,24}?)\s*(?:\\right)?[\])]/gi;
const BETWEEN = /\b(?:between|from)\s+\$?([^\s$]{1,16})\$?\s+(?:and|to)\s+\$?([^\s$]{1,16}?)\$?(?=[,;:)]|\.?(?:\s|$))/gi;

/** The interval that stands nearest to the offset `near`; conditions of the formula itself come first. `small`: the claim is about the variable near 0. */
export function intervalNear(conditions: readonly Expression[], words: string, variable: string, near: number, small: boolean): StatedInterval | null {
  for (const condition of conditions) {
    const found = stated(condition, variable, small);
    if (found) return found;
  }
  let best: { readonly found: StatedInterval; readonly distance: number } | null = null;
  const offer = (at: number, length: number, read: () => StatedInterval | null): void => {
    const distance = at >= near ? at - near : near - at - length;
    if (best && best.distance <= distance) return;
    const found = read();
    if (found) best = { found, distance };
  };
  for (const pattern of [MARKED, RELATIONS]) for (const match of words.matchAll(pattern)) offer(match.index, (match[1] ?? '').length, () => fromPiece((match[1] ?? '') + degreesAt(words, match.index + match[0].length + (pattern === MARKED ? (match[1] ?? '').length + 1 : 0)), variable, small));
  for (const pattern of [BRACKETS, BETWEEN]) for (const match of words.matchAll(pattern)) offer(match.index, match[0].length, () => (degreesAt(words, match.index + match[0].length) === '' ? fromEnds(match[1] ?? '', match[2] ?? '') : null));
  return (best as { readonly found: StatedInterval } | null)?.found ?? null;
}

/** An interval of the variable that running words state by a relation. */
export function intervalIn(words: string, variable: string): Ends | null {
  for (const pattern of [MARKED, RELATIONS])
    for (const match of words.matchAll(pattern)) {
      const found = fromPiece(match[1] ?? '', variable, false);
      if (found) return found.whole;
    }
  return null;
}

/** Degrees named behind a number. */
const DEGREES = /\^\s*\{?\s*\\(?:circ|degree)(?![a-z])\s*\}?|\s*°|\s*\bdegrees?\b/g;
const degreesAt = (words: string, at: number): string => (/^\$?[\s~]*(?:°|degrees?\b)/.test(words.slice(at, at + 20)) ? '°' : '');

function fromPiece(written: string, variable: string, small: boolean): StatedInterval | null {
  const piece = written.replace(/[.,;]+$/, '').trim();
  for (const candidate of new Set([piece.replace(/^(?:(?:for|when|if|where|all|in|on|over)\s+)+/i, ''), piece])) {
    const latex = candidate.includes('\\');
    const read = readFormula(candidate.replace(DEGREES, latex ? '\\cdot\\pi/180' : '*pi/180'), latex ? 'latex' : 'plain', { symbols: [variable] });
    const found = read.ok ? stated(read.value.expression, variable, small) : null;
    if (found) return found;
  }
  return null;
}

function fromEnds(first: string, second: string): StatedInterval | null {
  const [low, high] = [readExact(first), readExact(second)];
  return low.ok && high.ok ? both({ low: low.value, high: high.value }) : null;
}

const both = (ends: Ends): StatedInterval => ({ whole: ends, least: ends });

function stated(e: Expression, variable: string, small: boolean): StatedInterval | null {
  const ends = intervalOf(e, variable);
  if (ends) return both(ends);
  if (!small || e.kind !== 'relation' || e.sides.length !== 2 || (e.relations[0] !== '<' && e.relations[0] !== '<=')) return null;
  const [first, second] = e.sides;
  if (first?.kind !== 'symbol' || first.name !== variable || !second || dependsOn(second, variable)) return null;
  // x < c of a small x is a bound of its size; whether negative values are meant is left open.
  return { whole: { low: build.negation(second), high: second }, least: { low: build.number(0), high: second } };
}

/** |x| < c, |x - a| <= c, a < x < b, a <= x <= b. */
export function intervalOf(e: Expression, variable: string): Ends | null {
  if (e.kind !== 'relation' || !e.relations.every((r) => r === '<' || r === '<=')) return null;
  const [first, second, third] = e.sides;
  if (!first || !second) return null;
  const isVariable = (x: Expression): boolean => x.kind === 'symbol' && x.name === variable;
  if (e.sides.length === 3 && third && isVariable(second) && !dependsOn(first, variable) && !dependsOn(third, variable)) return { low: first, high: third };
  if (e.sides.length !== 2 || dependsOn(second, variable)) return null;
  if (first.kind === 'call' && first.function === 'abs' && first.args[0]) {
    const inner = first.args[0];
    if (isVariable(inner)) return { low: build.negation(second), high: second };
    const shift = inner.kind === 'sum' && inner.terms.length === 2 && inner.terms[0] && isVariable(inner.terms[0]) && inner.terms[1]?.kind === 'negation' ? inner.terms[1].operand : null;
    return shift && { low: build.difference(shift, second), high: build.sum(shift, second) };
  }
  return null;
}
