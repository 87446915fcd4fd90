/** One side of a point: the function as a multiseries in t -> 0+, and its first terms. */
import { type Expression, Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { addElements, compareExponents, type Context, type Multi, negateElement, plainText } from '../series/index.ts';
import { evaluate } from './evaluate.ts';
import type { ExpansionProblem } from './expansion.ts';
import { type RawTerm, rawTerms } from './flatten.ts';
import { withGammaShiftsJoined } from './gamma-shifts.ts';
import { type Direction, openSide } from './open-side.ts';

export interface SideResult {
  readonly context: Context;
  readonly series: Multi;
  readonly terms: readonly RawTerm[];
  /** The first term not kept; null where the sum is exact. */
  readonly remainder: RawTerm | null;
  /** From a tree in the context's symbol to one in the variable. */
  readonly toVariable: (e: Expression) => Expression;
}

export function expandSide(problem: ExpansionProblem, direction: Direction, budget: Budget): SideResult {
  const { context, session, fromVariable, toVariable } = openSide(problem, direction, budget);
  const series = evaluate(session, fromVariable(withGammaShiftsJoined(problem.function)));
  return { context, series, ...takeTerms(context, series, problem.terms, problem.order), toVariable };
}

/** Terms above t^order that are waited for before the request is refused as asking for infinitely many. */
const MOST_ABOVE_ORDER = 400;

export function takeTerms(c: Context, series: Multi, count: number | undefined, order: Rational | undefined): { terms: RawTerm[]; remainder: RawTerm | null } {
  const terms: RawTerm[] = [];
  let leadFactors: RawTerm | null = null;
  for (const term of rawTerms(c, series)) {
    leadFactors ??= term;
    const full = count !== undefined ? terms.length >= count : isBelow(c, term, leadFactors, order as Rational);
    if (full || term.order) return { terms, remainder: shownSize(c, term, terms[terms.length - 1]) };
    terms.push(term);
    if (count === undefined && terms.length > MOST_ABOVE_ORDER) {
      throw new Declined('bad-request', `Infinitely many terms that differ by powers of ${slowScale(terms)} lie above that power; ask for a number of terms instead.`);
    }
  }
  return { terms, remainder: null };
}

/** What the terms of one power are a series in. */
function slowScale(terms: readonly RawTerm[]): string {
  const last = terms[terms.length - 1];
  const before = terms[terms.length - 2];
  const factor = last?.factors.find((f) => !before?.factors.some((g) => g.element === f.element && f.exponent === g.exponent));
  const text = factor && last?.log === before?.log ? plainText(factor.element.kind === 'logarithm' && factor.element.expression.kind === 'power' ? factor.element.expression.base : factor.element.expression) : null;
  // Symbols of the local chart say nothing to the reader.
  return text !== null && !text.includes("'") ? text : 'the logarithm';
}

/** What was dropped beyond all powers is stated as the next power of t behind the last term. */
function shownSize(c: Context, term: RawTerm, last: RawTerm | undefined): RawTerm {
  if (!term.order || !last || !term.factors.some((f) => f.element.beyond)) return term;
  return { ...last, power: addElements(c, last.power, Q.ONE), log: 0, oscillation: null, order: true };
}

/** Whether the term is not above t^order; where a prefactor is taken out, powers count inside it. */
function isBelow(c: Context, term: RawTerm, lead: RawTerm, order: Rational): boolean {
  for (const f of term.factors) {
    if (f.element.rank <= c.scale.local.rank) continue;
    const own = lead.factors.find((g) => g.element === f.element)?.exponent ?? Q.ZERO;
    const sign = compareExponents(c, f.exponent, own);
    if (sign !== 0) return sign > 0;
  }
  for (const g of lead.factors) {
    if (g.element.rank > c.scale.local.rank && !term.factors.some((f) => f.element === g.element)) return compareExponents(c, Q.ZERO, g.exponent) > 0;
  }
  const inside = lead.factors.length > 0 && !lead.oscillation ? addElements(c, term.power, negateElement(c, lead.power)) : term.power;
  return compareExponents(c, inside, order) >= 0;
}
