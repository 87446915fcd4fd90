/**
 * The expression under the cursor or selection, in any document.
 *
 * The rule at a cursor in a formula: the side of the relation in which the cursor stands. If that side is a sum and the cursor stands in one
 * of its terms, the term alone is meant if no other term holds the small quantity of that term (or, where it is not plain, any of its symbols):
 * terms that hold the same small quantity are expanded together, because they may cancel. A side that is itself a truncated expansion, or only a name,
 * stands for the side of which it is the expansion. So on `\sin x` inside `\frac{\sin x}{x}` the whole quotient is meant.
 * A selection is taken exactly as it is.
 */
import { dependsOn, type Expression, freeSymbols, mapChildren, type OrderNode, type Span, walk } from '../expression/index.ts';
import { failure, type Outcome, success } from '../outcome.ts';
import { candidates } from './candidates.ts';
import { CodeReader, type CodeReading } from './code/index.ts';
import { readDocument, type DocumentContent, type FormulaPlace, type Region } from './document/index.ts';
import { languageOf } from './languages.ts';
import { type MacroTable, NO_MACROS } from './math/macros.ts';
import { type Formula, readFormula, type ReadOptions } from './math/read.ts';
import { orderMacros } from './style.ts';
import { isBareName, isTruncated, orderTerms, principalSide } from './truncated.ts';

/** What stands around a located expression. */
export interface LocatedContext {
  /** The formula it belongs to, as one tree; the expression itself in code. */
  readonly formula: Expression;
  /** Index of its side in the formula's chain; null where the formula is no relation or the selection is not one side. */
  readonly side: number | null;
  /** O- and o-terms already written in the formula. */
  readonly orders: readonly OrderNode[];
  /** How the O is written there: `O`, `\mathcal{O}`, `\order`, ...; null where there is none. */
  readonly orderMacro: string | null;
  readonly conditions: readonly Expression[];
  /** The symbol before a colon, for which the equation is to be solved. */
  readonly unknown: string | null;
  readonly region: Region | null;
  /** Place of the formula in the document. */
  readonly place: Span;
  readonly label: string | null;
  readonly macros: MacroTable;
  /** Up to 300 characters of running text before and after the formula. */
  readonly before: string;
  readonly after: string;
  /** What the reader of code tells beyond the tree. */
  readonly code: CodeReading | null;
}

export interface Located {
  readonly expression: Expression;
  /** UTF-16 offsets of the document. */
  readonly start: number;
  readonly end: number;
  /** `latex`, `plain`, or a language of code. */
  readonly language: string;
  readonly context: LocatedContext;
}

export interface LocateOptions {
  readonly fileName?: string;
  readonly macros?: MacroTable;
  /** Names that are quantities: variable and parameters of a request. */
  readonly symbols?: readonly string[];
  /** A document read before, with the same text. */
  readonly content?: DocumentContent;
  /** With its grammars loaded; without one, code is read by operator precedence. */
  readonly codeReader?: CodeReader;
}

const AROUND = 300;

export function locate(text: string, language: string, selection: Span, options: LocateOptions = {}): Outcome<Located> {
  const entry = languageOf(language, options.fileName);
  const range = { start: Math.max(0, Math.min(selection.start, text.length)), end: Math.max(0, Math.min(selection.end, text.length)) };
  if (entry.reader === 'code') return locateInCode(text, entry.id, range, options);
  const content = options.content ?? readDocument(text, language, options);
  const at = trimmedSelection(text, range);
  const region = content.regions.find((r) => r.start <= at.start && at.end <= r.end && (at.start < at.end || at.start <= r.end));
  if (region?.kind === 'code') {
    const inner = locate(text.slice(region.contentStart, region.contentEnd), region.language, { start: range.start - region.contentStart, end: range.end - region.contentStart }, { ...options, content: undefined });
    return inner.ok ? success(shifted(inner.value, region.contentStart, region)) : { ok: false, error: { ...inner.error, ...(inner.error.start === undefined ? {} : { start: inner.error.start + region.contentStart, end: (inner.error.end ?? inner.error.start) + region.contentStart }) } };
  }
  const notation = region?.language === 'plain' || (entry.reader === 'plain' && !text.includes('\\')) ? 'plain' : 'latex';
  const base: ReadOptions = { macros: content.macros, ...(options.symbols ? { symbols: options.symbols } : {}) };
  const place = region ? formulaAt(region, at) : bareFormula(text, content.regions, at);
  if (!place) return failure('bad-request', 'There is no formula at the cursor; put it into a formula or select one.', at);
  const options0: ReadOptions = { ...base, start: place.start, end: place.end, joinRows: true };
  const formula = readFormula(text, notation, options0);
  const surrounding = (expression: Expression, side: number | null, of: Formula | null): LocatedContext => ({
    formula: of?.expression ?? expression,
    side,
    orders: of ? orderTerms(of.expression) : [],
    orderMacro: orderMacroIn(text.slice(place.start, place.end), content.macros),
    conditions: of?.conditions ?? [],
    unknown: of?.unknown ?? null,
    region: region ?? null,
    place: { start: place.start, end: place.end },
    label: labelOf(place) ?? region?.label ?? null,
    macros: content.macros,
    before: text.slice(Math.max(0, (region?.start ?? place.start) - AROUND), region?.start ?? place.start),
    after: text.slice(region?.end ?? place.end, (region?.end ?? place.end) + AROUND),
    code: null,
  });
  if (at.start < at.end) {
    const inside = withoutDelimiters(text, at);
    const selected = readFormula(text, notation, { ...base, ...inside, joinRows: true, around: { start: place.start, end: place.end } });
    if (!selected.ok) return selected;
    const chosen = chooseSide(selected.value.expression);
    const expression = chosen.expression;
    const whole = formula.ok ? formula.value : selected.value;
    const span = expression.span ?? inside;
    const bounds = chosen.side === null ? inside : span;
    return success({ expression, start: bounds.start, end: bounds.end, language: notation, context: surrounding(expression, chosen.side ?? sideAt(whole.expression, at.start), whole) });
  }
  if (!formula.ok) return formula;
  const found = atCursor(formula.value, at.start);
  if (!found) return failure('bad-request', 'There is nothing to expand at the cursor; select a function or a quotient.', at);
  const span = found.expression.span ?? place;
  return success({ expression: found.expression, start: span.start, end: span.end, language: notation, context: surrounding(found.expression, found.side, formula.value) });
}

/** Of a selected chain the side that is no name and no expansion; anything else as it is. */
function chooseSide(e: Expression): { readonly expression: Expression; readonly side: number | null } {
  if (e.kind !== 'relation') return { expression: e, side: null };
  const side = isEquation(e) ? null : principalSide(e);
  const chosen = side === null ? undefined : e.sides[side];
  return chosen ? { expression: chosen, side } : { expression: e, side: null };
}

/** An equation to be solved: one equality sign and a side that is a number, with no truncated side. */
export function isEquation(e: Expression): boolean {
  return e.kind === 'relation' && e.relations.length === 1 && e.relations[0] === '=' && e.sides.some((side) => side.kind === 'number') && !e.sides.some(isTruncated) && e.sides.some((side) => !isBareName(side));
}

function sideAt(e: Expression, offset: number): number | null {
  if (e.kind !== 'relation') return null;
  let best: number | null = null;
  e.sides.forEach((side, i) => {
    if (side.span && side.span.start <= offset && (best === null || side.span.start >= (e.sides[best]?.span?.start ?? 0))) best = i;
  });
  return best ?? 0;
}

/** The rule of this file for a cursor; null where the formula holds nothing to expand. */
function atCursor(formula: Formula, offset: number): { readonly expression: Expression; readonly side: number | null } | null {
  const whole = formula.expression;
  if (formula.unknown !== undefined || isEquation(whole)) return { expression: whole, side: null };
  const inCondition = formula.conditions.find((c) => c.span && c.span.start <= offset && offset <= c.span.end && !(whole.span && whole.span.start <= offset && offset <= whole.span.end));
  const relation = inCondition?.kind === 'relation' && principalSide(inCondition) !== null && !isBound(inCondition) ? inCondition : whole;
  let side = sideAt(relation, offset);
  let expression: Expression = relation;
  if (relation.kind === 'relation') {
    const here = relation.sides[side ?? 0];
    if (!here || isTruncated(here) || isBareName(here)) side = nearestSide(relation, side ?? 0);
    const chosen = side === null ? undefined : relation.sides[side];
    if (!chosen) return null;
    expression = chosen;
  }
  if (isBareName(expression)) return null;
  return { expression: termAt(expression, offset), side };
}

const isBound = (e: Expression): boolean => e.kind === 'relation' && e.relations.some((r) => r === '<' || r === '<=' || r === '>' || r === '>=' || r === 'to' || r === 'll' || r === 'gg');

/** The nearest side that is neither a name nor an expansion, those before first. */
function nearestSide(e: Extract<Expression, { kind: 'relation' }>, from: number): number | null {
  const good = (i: number): boolean => {
    const side = e.sides[i];
    return side !== undefined && !isTruncated(side) && !isBareName(side);
  };
  for (let i = from - 1; i >= 0; i -= 1) if (good(i)) return i;
  for (let i = from + 1; i < e.sides.length; i += 1) if (good(i)) return i;
  // Nothing but names and expansions: the expansion itself, where it is more than a name.
  const here = e.sides[from];
  return here && !isBareName(here) ? from : e.sides.findIndex((s) => !isBareName(s)) >= 0 ? e.sides.findIndex((s) => !isBareName(s)) : null;
}

/** Whether a tree holds more than polynomials in its symbols. */
export function isWorthExpanding(e: Expression): boolean {
  for (const n of walk(e)) {
    switch (n.kind) {
      case 'call':
      case 'root':
      case 'integral':
      case 'indexedSum':
      case 'indexedProduct':
      case 'apply':
        return true;
      case 'quotient':
        if (freeSymbols(n.denominator).length > 0) return true;
        break;
      case 'power':
        if (!(n.exponent.kind === 'number' && n.exponent.value.den === 1n)) return true;
        break;
      default:
    }
  }
  return false;
}

/** The whole sum, or the one term of it at the cursor if its small quantity stands in no other term. */
function termAt(side: Expression, offset: number): Expression {
  if (side.kind !== 'sum') return side;
  const term = side.terms.find((t) => t.span && t.span.start <= offset && offset <= t.span.end);
  if (!term || !isWorthExpanding(term)) return side;
  const { found, list } = candidates(term);
  const names = found ? freeSymbols(found.variable.expression) : list[0]?.kind === 'ratio' ? freeSymbols(list[0].expression).slice(0, 1) : freeSymbols(term);
  const shared = side.terms.some((t) => t !== term && names.some((name) => dependsOn(t, name)));
  if (shared) return side;
  return term.kind === 'negation' ? term.operand : term;
}

/** The formula of a region at the cursor: the one that holds it, else the nearest before, else the first. */
function formulaAt(region: Region, at: Span): FormulaPlace | Span | null {
  if (region.formulas.length === 0) return region.kind === 'comment' ? { start: region.contentStart, end: region.contentEnd } : null;
  const holding = region.formulas.find((f) => f.start <= at.start && at.end <= f.end);
  if (holding) return holding;
  const before = [...region.formulas].reverse().find((f) => f.start <= at.start);
  return before ?? region.formulas[0] ?? null;
}

const labelOf = (place: FormulaPlace | Span): string | null => ('label' in place ? (place.label ?? null) : null);

/** A text without delimiters is one formula: `\sin x` in a request, or a fragment. In running text between regions there is none. */
function bareFormula(text: string, regions: readonly Region[], at: Span): Span | null {
  if (regions.some((r) => r.kind !== 'text')) return at.start < at.end ? at : null;
  return text.trim() === '' ? null : { start: 0, end: text.length };
}

function trimmedSelection(text: string, range: Span): Span {
  let { start, end } = range;
  if (start >= end) return range;
  while (start < end && /\s/.test(text.charAt(start))) start += 1;
  while (end > start && /\s/.test(text.charAt(end - 1))) end -= 1;
  return start < end ? { start, end } : { start: range.start, end: range.start };
}

/** Dollar signs, `\(`, `\[` and an `&` at the ends of a selection do not belong to the formula. */
function withoutDelimiters(text: string, at: Span): Span {
  const selected = text.slice(at.start, at.end);
  const lead = /^(?:\s|\$|&|\\[([])*/.exec(selected)?.[0].length ?? 0;
  const tail = /(?:\s|\$|&|\\[)\]]|(?<![\\])[.,;])*$/.exec(selected.slice(lead))?.[0].length ?? 0;
  return { start: at.start + lead, end: Math.max(at.start + lead, at.end - tail) };
}

/** The spelling of the first O in a formula: `O`, `\mathcal{O}`, `\mathcal O`, `\order`, or a macro of the document before a bracket. */
export function orderMacroIn(formula: string, macros: MacroTable = NO_MACROS): string | null {
  const own = orderMacros(macros).find(([name]) => new RegExp(`${name.replace(/\\/g, '\\\\')}(?![A-Za-z])`).test(formula));
  if (own) return own[0];
  const match = /(\\mathcal\s*\{O\}|\\mathcal\s+O|\\mathscr\s*\{O\}|\\mathrm\s*\{O\}|\{\\cal\s+O\}|\\[A-Za-z]*[oO](?:rder|rd|of)?(?![A-Za-z])|(?<![A-Za-z\\])[O])\s*(?:\\!|\\left|\\[bB]igg?l?)?\s*[({[]/.exec(formula);
  return match?.[1] ?? null;
}

function locateInCode(text: string, language: string, range: Span, options: LocateOptions): Outcome<Located> {
  const reader = options.codeReader ?? new CodeReader(null);
  const read = reader.readCodeAt(text, language, range);
  if (!read.ok) return read;
  const { expression, span } = read.value;
  return success({
    expression,
    start: span.start,
    end: span.end,
    language,
    context: { formula: expression, side: null, orders: [], orderMacro: null, conditions: [], unknown: null, region: null, place: read.value.statement ?? span, label: null, macros: new Map(), before: text.slice(Math.max(0, span.start - AROUND), span.start), after: text.slice(span.end, span.end + AROUND), code: read.value },
  });
}

/** A reading of a piece of a document, moved to the document's offsets. */
function shifted(located: Located, by: number, region: Region): Located {
  return { ...located, expression: mapSpans(located.expression, by), start: located.start + by, end: located.end + by, context: { ...located.context, formula: mapSpans(located.context.formula, by), region, place: { start: located.context.place.start + by, end: located.context.place.end + by } } };
}

/** The same tree with every span moved. Depth is that of the tree, which readers cap. */
export function mapSpans(e: Expression, by: number): Expression {
  const move = (span: Span): Span => ({ start: span.start + by, end: span.end + by });
  const inner = mapChildren(e, (child) => mapSpans(child, by));
  const placed: Expression = inner.span ? { ...inner, span: move(inner.span) } : inner;
  return placed.kind === 'relation' && placed.relationSpans ? { ...placed, relationSpans: placed.relationSpans.map(move) } : placed;
}
