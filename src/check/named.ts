/** Claims of which one side is only a name: what it stands for in the document, or by the custom of the trade. */
import { build, children, dependsOn, type Expression, freeSymbols, sameExpression, walk } from '../expression/index.ts';
import type { Finding } from '../protocol.ts';
import { candidates } from '../read/index.ts';
import { symbolsOf } from './asked.ts';
import type { Claim } from './claims.ts';
import { type Definitions, resolve } from './definitions.ts';
import { findingOf } from './findings.ts';
import { isGridName } from './normalise.ts';
import { quantitiesNamed } from './quantities.ts';
import { type Asked, exponentOf } from './setting.ts';
import { lastSentence, SENTENCE } from './statements.ts';
import { hasMarks } from './truncated.ts';
import { type Place, unresolved } from './verdicts.ts';

export function checkClaim(claim: Claim, given: Expression | null, definitions: Definitions, asked: Asked, place: Place): readonly Finding[] {
  const printedName = claim.function ? wordOf(claim.function, place.text) : null;
  if (claim.function && printedName === null) return findingOf(claim, claim.function, asked, place);
  if (given) return findingOf(claim, given, asked, place);
  const own = claim.name ?? claim.function;
  if (!own) return [];
  if (isGridName(own)) return findingOf(claim, own, asked, place, { lenient: 'values of a function on a grid' });
  if (isAnsatz(own, claim.side)) return asked.variable && isTruncatedIn(claim.side, asked.variable) ? [unresolved(claim, place)] : [];
  if (speaksOfItself(own, claim.side)) return findingOf(claim, own, asked, place);
  let failed: readonly Finding[] = [];
  const values = resolve(definitions, own, place.formula.span.start).filter((value) => !sameExpression(value, claim.side));
  for (const value of values) {
    const found = findingOf(claim, value, asked, place, { resolved: true });
    if (found[0]?.verdict === 'holds') return found;
    if (failed.length === 0) failed = found;
  }
  if (failed.length > 0) return failed;
  const printed = printedName ?? place.text.slice(own.span?.start ?? 0, own.span?.end ?? 0).replace(/\s/g, '');
  for (const quantity of quantitiesNamed(printed, symbolsOf(claim.side))) {
    const variable = asked.variable ?? build.symbol(quantity.variable);
    const found = findingOf(claim, quantity.value, { ...asked, variable, point: asked.point ?? build.number(0) }, place, { lenient: quantity.title });
    if (found[0]?.verdict === 'holds') return found;
  }
  if (values.length > 0 && !hasMarks(claim.side)) return [];
  return isMeant(claim, asked, place) ? [unresolved(claim, place)] : [];
}

/** The words by which running text says that what it prints is cut off. */
const CUT_OFF = /\bexpan(?:d\w*|sions?)\b|\bseries\b|\bapproximat\w+|\bperturbat\w+|\basymptotic\w*|\b(?:leading|lowest|first|second|third|next)[-\s]order\b|\b(?:to|up to|at) order\b|\bneglect\w*|\bsmall\b|\\ll(?![a-z])|≪/i;
/** Letters that the trade keeps for what is small. */
const SMALL_LETTER = /^(?:\\(?:var)?epsilon|ε|ϵ)(?:_|$)/;

/**
 * Whether what is printed for a name is meant as cut off, and not as the name's definition: a remainder mark, an approximation sign, a quantity that the request
 * names, or one that is small by its letter or by what is said beside it in a text that speaks of expansions. x = x_0 + v t is none of these.
 */
function isMeant({ side, relation, name }: Claim, asked: Asked, { around }: Place): boolean {
  if (hasMarks(side) || (relation === 'about' && isSeriesLike(side))) return true;
  if (relation !== '=' && relation !== 'tilde') return false;
  if (asked.variable) return isTruncatedIn(side, asked.variable);
  const next = around.after.search(SENTENCE);
  const spoken = CUT_OFF.test(around.before.slice(lastSentence(around.before))) || CUT_OFF.test(next < 0 ? around.after : around.after.slice(0, next));
  const found = candidates(side, { conditions: around.conditions, before: around.before, after: around.after }).found;
  const small = found && (found.from === 'condition' || (found.from === 'text' && spoken)) ? [found.variable.expression] : [];
  // D = \\epsilon E + P: the letter alone says little.
  const shown = (letter: string): boolean => spoken || (name?.kind === 'apply' && name.args.some((a) => dependsOn(a, letter))) || new Set(powersIn(side, letter)).size > 2;
  return [...small, ...freeSymbols(side).filter((letter) => SMALL_LETTER.test(letter) && shown(letter)).map((letter) => build.symbol(letter))].some((variable) => isTruncatedIn(side, variable));
}

/** A sum in at least two powers of the variable, or of the first symbol of a ratio. */
function isTruncatedIn(side: Expression, variable: Expression): boolean {
  const name = freeSymbols(variable).find((n) => dependsOn(side, n));
  return name !== undefined && ![...walk(side)].some((n) => n.kind === 'call' && dependsOn(n, name)) && new Set(powersIn(side, name)).size > 1;
}

/** The powers of the symbol in the terms of a sum, products with sums multiplied out. */
function powersIn(e: Expression, name: string): readonly (number | null)[] {
  if (e.kind === 'sum' || e.kind === 'negation') return children(e).flatMap((c) => powersIn(c, name));
  const inner = e.kind === 'product' ? e.factors.find((factor) => factor.kind === 'sum') : undefined;
  if (e.kind !== 'product' || !inner) return [exponentOf(e, name)];
  const rest = exponentOf(build.product(...e.factors.filter((factor) => factor !== inner)), name);
  return powersIn(inner, name).map((p) => (p === null || rest === null ? null : p + rest));
}

const baseName = (e: Expression): string | null => (e.kind === 'symbol' || e.kind === 'apply' ? e.name.replace(/'+$/, '').replace(/_.*$/, '') : null);

/** y = y_0 + \epsilon y_1 + ...: names the coefficients of an expansion and claims nothing. */
function isAnsatz(name: Expression, side: Expression): boolean {
  const base = baseName(name)?.toLowerCase();
  return base !== undefined && [...walk(side)].some((n) => (n.kind === 'symbol' || n.kind === 'apply') && /_/.test(n.name) && /\d/.test(n.name) && baseName(n)?.toLowerCase() === base);
}

/** f'(x) beside f(x + h): an expansion of an unspecified function. */
function speaksOfItself(name: Expression, side: Expression): boolean {
  const base = baseName(name);
  return base !== null && [...walk(side)].some((n) => n.kind === 'apply' && n.name === base && n.args.some((a) => a.kind !== 'symbol' && a.kind !== 'number'));
}

/** A sum, a common factor looked through. */
const isSeriesLike = (e: Expression): boolean => e.kind === 'sum' || ((e.kind === 'product' || e.kind === 'negation') && children(e).some(isSeriesLike));

/** Capital letters without a gap (KE) that were read as a product are one name. */
export function wordOf(e: Expression, text: string, by = 0): string | null {
  if (e.kind !== 'product' || !e.span || !e.factors.every((f) => f.kind === 'symbol' && /^[A-Z]$/.test(f.name))) return null;
  const written = text.slice(e.span.start + by, e.span.end + by);
  return /^[A-Z]{2,}$/.test(written) ? written : null;
}
