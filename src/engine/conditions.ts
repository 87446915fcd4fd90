/** What the words and formulas behind an expression (`, \quad a > 0`, `c - a - b = \tfrac12`, `x \to 0`) say about its parameters. */
import { type Assumption, build, dependsOn, type Expression, freeSymbols, substitute } from '../expression/index.ts';
import { type Outcome, success } from '../outcome.ts';
import { toPlain } from '../write/index.ts';
import { readAllAssumptions } from './assumptions.ts';

const ORDERED = ['<', '<=', '>', '>=', '!='] as const;
type Ordered = (typeof ORDERED)[number];
const isOrdered = (relation: string): relation is Ordered => (ORDERED as readonly string[]).includes(relation);

export interface StatedConditions {
  readonly assumptions: readonly Assumption[];
  /** Symbols that an equation determines, with their values. */
  readonly values: ReadonlyMap<string, Expression>;
  /** The conditions used, in plain notation: a result rests on them. */
  readonly used: readonly string[];
}

/** Conditions on parameters only: those that hold the variable speak of where an expansion is used, not of what it is. */
export function statedConditions(conditions: readonly Expression[], variable: Expression): StatedConditions {
  const assumptions: Assumption[] = [];
  const values = new Map<string, Expression>();
  const used: string[] = [];
  const moving = freeSymbols(variable);
  for (const condition of conditions) {
    if (condition.kind !== 'relation' || moving.some((name) => dependsOn(condition, name))) continue;
    condition.relations.forEach((relation, k) => {
      const [left, right] = [condition.sides[k], condition.sides[k + 1]];
      if (!left || !right) return;
      if (isOrdered(relation)) {
        assumptions.push({ kind: 'relation', left, relation, right });
        used.push(`${toPlain(left)} ${relation} ${toPlain(right)}`);
      } else if (relation === '=') {
        const solved = solvedSymbol(left, right);
        if (!solved) return;
        values.set(solved.name, solved.value);
        used.push(`${toPlain(left)} = ${toPlain(right)}`);
      }
    });
  }
  return { assumptions, values, used };
}

/** The equation solved for a symbol that stands in it once, as a term by itself; the first such symbol. */
function solvedSymbol(left: Expression, right: Expression): { readonly name: string; readonly value: Expression } | null {
  const terms = [...termsOf(left, false), ...termsOf(right, true)];
  for (const { negative, term } of terms) {
    if (term.kind !== 'symbol') continue;
    const others = terms.filter((t) => t.term !== term);
    if (others.some((t) => dependsOn(t.term, term.name))) continue;
    // symbol * (+-1) + others = 0.
    const rest = others.map((t) => (t.negative === negative ? build.negation(t.term) : t.term));
    return { name: term.name, value: build.sum(...rest) };
  }
  return null;
}

function termsOf(e: Expression, negative: boolean): readonly { readonly negative: boolean; readonly term: Expression }[] {
  if (e.kind === 'sum') return e.terms.flatMap((t) => termsOf(t, negative));
  if (e.kind === 'negation') return termsOf(e.operand, !negative);
  return [{ negative, term: e }];
}

/** Puts the determined symbols in. */
export const withValues = (e: Expression, { values }: StatedConditions): Expression => [...values].reduce((tree, [name, value]) => substitute(tree, name, value), e);

/** A function for a program needs numbers: symbols that assumptions such as `a = 2` determine, put in, and those assumptions. The variable is none of them. */
export function withAssumedNumbers(e: Expression, texts: readonly string[] | undefined, variable: string | undefined): Outcome<{ readonly function: Expression; readonly used: readonly string[] }> {
  const assumed = readAllAssumptions(texts);
  if (!assumed.ok) return assumed;
  const equations = assumed.value.flatMap((a): Expression[] => (a.kind === 'relation' && a.relation === '=' ? [{ kind: 'relation', sides: [a.left, a.right], relations: ['='] }] : []));
  const stated = statedConditions(equations, build.symbol(variable ?? ''));
  const { values } = stated;
  const known = [...values].filter(([name]) => dependsOn(e, name));
  return success({ function: withValues(e, stated), used: known.map(([name, value]) => `${name} = ${toPlain(value)}`) });
}

/** The target of `y \to 0` among the conditions, for a symbol. */
export function targetOf(conditions: readonly Expression[], symbol: Expression): Expression | null {
  if (symbol.kind !== 'symbol') return null;
  for (const condition of conditions) {
    if (condition.kind !== 'relation' || condition.relations[0] !== 'to') continue;
    const [left, right] = condition.sides;
    if (left?.kind === 'symbol' && left.name === symbol.name && right) return right;
  }
  return null;
}
