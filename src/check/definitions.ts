/** Names and what they stand for, as far as the document says. */
import { type Expression, sameExpression, substitute } from '../expression/index.ts';
import { definitionOf, sameName } from './claims.ts';
import type { FoundFormula } from './formulas.ts';

interface Definition {
  readonly at: number;
  readonly name: Expression;
  readonly value: Expression;
}
export type Definitions = readonly Definition[];

export function definitionsIn(formulas: readonly FoundFormula[]): Definitions {
  const out: Definition[] = [];
  for (const { formula, span } of formulas) {
    for (const e of [formula.expression, ...formula.conditions]) {
      const found = e.kind === 'relation' ? definitionOf(e) : null;
      if (found) out.push({ at: span.start, ...found });
    }
  }
  return out;
}

/** Values of a name, the nearest definition before the place first. T'(x) is the derivative of T(x); T(2h) is T(h) at 2h. */
export function resolve(definitions: Definitions, name: Expression, at: number): readonly Expression[] {
  const base: Expression = name.kind === 'apply' ? { ...name, derivatives: name.derivatives.map(() => 0) } : name;
  const known = definitions.filter((d) => sameName(d.name, base));
  const before = known.filter((d) => d.at < at).reverse();
  const after = known.filter((d) => d.at >= at);
  return [...before, ...after].map((d) => applied(d, name)).filter((e) => e !== null);
}

function applied(definition: Definition, name: Expression): Expression | null {
  if (name.kind !== 'apply') return definition.value;
  const [argument] = name.args;
  const times = name.derivatives.reduce((a, b) => a + b, 0);
  const own = definition.name.kind === 'apply' ? definition.name.args[0] : argument;
  if (name.args.length !== 1 || !argument || own?.kind !== 'symbol') return times === 0 ? definition.value : null;
  const value: Expression = times === 0 ? definition.value : { kind: 'derivative', body: definition.value, variable: own, times };
  if (sameExpression(argument, own)) return value;
  return times === 0 ? substitute(value, own.name, argument) : null;
}
