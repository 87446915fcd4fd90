/** One side of a point: the function as a multiseries in t -> 0+, and its first terms. */
import { createField } from '../algebra/index.ts';
import type { Field } from '../algebra/types.ts';
import { type Assumption, build, type Expression, Q, type Rational, substitute } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { compareExponents, type Context, createScale, finiteStream, type Multi, Series } from '../series/index.ts';
import { evaluate } from './evaluate.ts';
import type { ExpansionProblem } from './expansion.ts';
import { type RawTerm, rawTerms } from './flatten.ts';
import { openSession, type Session } from './session.ts';

export interface SideResult {
  readonly context: Context;
  readonly series: Multi;
  readonly terms: readonly RawTerm[];
  /** The first term not kept; null where the sum is exact. */
  readonly remainder: RawTerm | null;
  /** From a tree in the context's symbol to one in the variable. */
  readonly toVariable: (e: Expression) => Expression;
}

export type Direction = 'right' | 'left' | 'inf' | '-inf';

/** The positive symbol w that trees are written in: w = x - a, a - x, x or -x. */
interface Chart {
  readonly symbol: string;
  /** The variable in w. */
  readonly variable: Expression;
  /** w in the variable. */
  readonly inverse: Expression;
  readonly infinite: boolean;
}

function chartOf(problem: Pick<ExpansionProblem, 'variable' | 'point'>, direction: Direction): Chart {
  const { variable, point } = problem;
  const name = variable.kind === 'symbol' ? variable.name : null;
  const infinite = direction === 'inf' || direction === '-inf';
  const atZero = point !== 'inf' && point !== '-inf' && point.kind === 'number' && Q.isZero(point.value);
  if (name !== null && (direction === 'inf' || (direction === 'right' && atZero))) return { symbol: name, variable, inverse: variable, infinite };
  const symbol = "w'";
  const w = build.symbol(symbol);
  if (direction === '-inf' || (direction === 'left' && atZero)) return { symbol, variable: build.negation(w), inverse: build.negation(variable), infinite };
  if (infinite) return { symbol, variable: w, inverse: variable, infinite };
  const a = point as Expression;
  return direction === 'right'
    ? { symbol, variable: build.sum(a, w), inverse: build.difference(variable, a), infinite }
    : { symbol, variable: build.difference(a, w), inverse: build.difference(a, variable), infinite };
}

export function openContext(field: Field, budget: Budget, symbol: string, local: Expression, largeLogarithm: Expression, oscillation: boolean): Context {
  return {
    field,
    budget,
    scale: createScale(local, largeLogarithm),
    local: symbol,
    oscillation,
    notes: { sided: false, divergent: false, subdominantDropped: false, assumptions: new Set() },
    patience: { value: 16 },
  };
}

export interface OpenSide {
  readonly context: Context;
  /** The variable bound to its series. */
  readonly session: Session;
  /** A tree in the variable, rewritten in the context's symbol. */
  readonly fromVariable: (e: Expression) => Expression;
  readonly toVariable: (e: Expression) => Expression;
}

/** A context for one side of a point: field, scale of powers of t, and the variable as a series. The variable must be one symbol; compound variables are replaced before. */
export function openSide(problem: Pick<ExpansionProblem, 'variable' | 'point' | 'assumptions'>, direction: Direction, budget: Budget): OpenSide {
  const name = problem.variable.kind === 'symbol' ? problem.variable.name : null;
  if (name === null) throw new Declined('bad-request', 'The variable must be one symbol here.');
  const chart = chartOf(problem, direction);
  const w = build.symbol(chart.symbol);
  const positive: Assumption = { kind: 'relation', left: w, relation: '>', right: build.number(0) };
  const field: Field = createField([...problem.assumptions, positive], budget, describe);
  const local = chart.infinite ? build.quotient(build.number(1), w) : w;
  const largeLogarithm = chart.infinite ? build.call('log', w) : build.negation(build.call('log', w));
  const context = openContext(field, budget, chart.symbol, local, largeLogarithm, chart.infinite);
  const exponent = chart.infinite ? Q.MINUS_ONE : Q.ONE;
  const base = new Series(context.scale.local, finiteStream([{ exponent, coefficient: Q.ONE }]), () => w);
  const same = chart.symbol === name;
  return {
    context,
    session: openSession(context, new Map([[chart.symbol, base]])),
    fromVariable: same ? (e) => e : (e) => substitute(e, name, chart.variable),
    toVariable: same ? (e) => e : (e) => substitute(e, chart.symbol, chart.inverse),
  };
}

export function expandSide(problem: ExpansionProblem, direction: Direction, budget: Budget): SideResult {
  const { context, session, fromVariable, toVariable } = openSide(problem, direction, budget);
  const series = evaluate(session, fromVariable(problem.function));
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
    if (full || term.order) return { terms, remainder: term };
    terms.push(term);
    if (count === undefined && terms.length > MOST_ABOVE_ORDER) {
      throw new Declined('bad-request', 'Infinitely many terms on a slower scale lie above that power; ask for a number of terms instead.');
    }
  }
  return { terms, remainder: null };
}

/** Whether the term is not above t^order times the leading prefactor. */
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
  return compareExponents(c, term.power, order) >= 0;
}
