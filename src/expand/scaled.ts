/** One bookkeeping parameter: symbols become powers of s times themselves, the formula is expanded in s -> 0+, then s = 1. */
import { createField } from '../algebra/index.ts';
import type { Element } from '../algebra/types.ts';
import { type Assumption, build, dependsOn, type Expression, Q, type Rational, substitute } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { add, addElements, compareExponents, type Context, exactOf, monomial, type Multi, scaleBy } from '../series/index.ts';
import { evaluate } from './evaluate.ts';
import type { Expansion, ExpansionTerm, SmallProblem } from './expansion.ts';
import { type RawTerm, rawTerms } from './flatten.ts';
import { openSession } from './session.ts';
import { openContext } from './open-side.ts';

const LOCAL = "s'";

/** A symbol that stands for point + s^weight symbol; `weight` is negative for what grows. */
export interface ScaledSymbol {
  readonly name: string;
  readonly weight: Rational;
  readonly point?: Expression;
  /** It stands for s^weight alone. */
  readonly unit?: boolean;
}
export interface ScaledProblem extends Pick<SmallProblem, 'function' | 'terms' | 'order' | 'assumptions'> {
  readonly scaled: readonly ScaledSymbol[];
}
/** Blocks of equal power of s at s = 1, and what is left out. */
export interface ScaledResult {
  readonly terms: readonly ExpansionTerm[];
  readonly remainder: Expansion['remainder'];
  readonly divergent: boolean;
  readonly assumptions: readonly string[];
}

/** The expansion in s -> 0+ after every scaled symbol q has become point + s^weight q. */
export function expandScaled(problem: ScaledProblem, budget: Budget): ScaledResult {
  const s = build.symbol(LOCAL);
  const positive: Assumption = { kind: 'relation', left: s, relation: '>', right: build.number(0) };
  const field = createField([...problem.assumptions, positive], budget, describe);
  const c = openContext(field, budget, LOCAL, s, build.negation(build.call('log', s)), false);
  const bindings = new Map<string, Multi>();
  const offsets = new Map<string, Expression>();
  for (const { name, weight, point, unit } of problem.scaled) {
    const offset = point ? `${name}'` : name;
    if (point) offsets.set(offset, build.difference(build.symbol(name), point));
    const moving = scaleBy(c, monomial(c, c.scale.local, weight), unit ? Q.ONE : field.fromExpression(build.symbol(offset)));
    bindings.set(name, point ? add(c, field.fromExpression(point), moving) : moving);
  }
  const series = evaluate(openSession(c, bindings), problem.function);
  const { blocks, remainder } = takeBlocks(c, series, problem);
  const back = (e: Expression): Expression => [...offsets].reduce((tree, [name, value]) => substituteSymbol(tree, name, value), e);
  return {
    terms: blocks.map((b) => ({ coefficient: back(exactOf(c, b.coefficient)), power: build.number(0), log: 0, scale: null, weight: exactOf(c, b.power) })),
    remainder: remainder ? { power: exactOf(c, remainder.power), log: remainder.log, scale: null } : null,
    divergent: c.notes.divergent && remainder !== null,
    assumptions: [...new Set([...c.notes.assumptions, ...[...field.needed].filter((a) => !a.includes(LOCAL))])],
  };
}

const substituteSymbol = (e: Expression, name: string, value: Expression): Expression => (dependsOn(e, name) ? substitute(e, name, value) : e);

interface Block {
  readonly power: Element;
  readonly coefficient: Element;
}

/** Terms of equal power of s together; powers of log s vanish at s = 1 and only count in the remainder. */
function takeBlocks(c: Context, series: Multi, problem: Pick<SmallProblem, 'terms' | 'order'>): { blocks: Block[]; remainder: RawTerm | null } {
  const blocks: Block[] = [];
  for (const term of rawTerms(c, series)) {
    if (term.factors.length > 0 || term.oscillation) throw new Declined('no-expansion', 'The function has an essential singularity where the small quantities vanish; expand it in one of them.');
    const last = blocks[blocks.length - 1];
    const same = last !== undefined && compareExponents(c, last.power, term.power) === 0;
    if (term.order) return { blocks, remainder: term };
    const full = problem.terms !== undefined ? blocks.length >= problem.terms && !same : compareExponents(c, term.power, problem.order ?? Q.ZERO) >= 0;
    if (full) return { blocks, remainder: term };
    const coefficient = term.log === 0 ? term.coefficient : Q.ZERO;
    if (same) blocks[blocks.length - 1] = { power: last.power, coefficient: addElements(c, last.coefficient, coefficient) };
    else blocks.push({ power: term.power, coefficient });
  }
  return { blocks, remainder: null };
}
