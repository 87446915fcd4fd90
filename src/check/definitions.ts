/** Names and what they stand for, as far as the document says. */
import { type Expression, mapChildren, sameExpression, substitute } from '../expression/index.ts';
import type { CompanionFile } from '../protocol.ts';
import type { Formula, MacroTable } from '../read/index.ts';
import { definitionOf, sameName } from './claims.ts';
import { type FoundFormula, formulasOf } from './formulas.ts';
import { type CheckMemory, movedTree } from './memory.ts';

interface Definition {
  readonly at: number;
  /** By how much the places in `value` have moved. */
  readonly by: number;
  readonly name: Expression;
  readonly value: Expression;
}
export interface Definitions {
  readonly own: readonly Definition[];
  /** Those of the files that the document refers to; read when the document itself has none of a name. */
  readonly elsewhere: () => readonly Definition[];
}

export function definitionsOf(formulas: readonly FoundFormula[], files: readonly CompanionFile[], options: { readonly macros: MacroTable; readonly memory?: CheckMemory }): Definitions {
  let read: readonly Definition[] | null = null;
  return {
    own: definitionsIn(formulas),
    elsewhere: () => (read ??= files.flatMap((file) => definitionsIn(formulasOf(file.text, 'latex', { ...options, wanted: maybeDefinition }).found).map((d) => ({ ...d, by: 0, value: withoutPlaces(d.value) })))),
  };
}

/** A short left side before an equals sign. */
const maybeDefinition = (written: string): boolean => /^[^=]{1,80}=|^[^=]{1,80}\\(?:equiv|coloneqq|triangleq)/.test(written);

/** Places of another file mean nothing in this one. */
function withoutPlaces(e: Expression): Expression {
  const { span: _span, ...rest } = mapChildren(e, withoutPlaces);
  return rest as Expression;
}

/** Definitions in a formula as it was read first. */
const known = new WeakMap<Formula, readonly Omit<Definition, 'at' | 'by'>[]>();

function definitionsIn(formulas: readonly FoundFormula[]): readonly Definition[] {
  return formulas.flatMap(({ still, by, span }) => {
    let own = known.get(still);
    if (!own) {
      own = [still.expression, ...still.conditions].flatMap((e) => (e.kind === 'relation' ? [definitionOf(e)] : [])).filter((d) => d !== null);
      known.set(still, own);
    }
    return own.map((d) => ({ at: span.start, by, ...d }));
  });
}

/** Values of a name, the nearest definition before the place first. T'(x) is the derivative of T(x); T(2h) is T(h) at 2h. */
export function resolve(definitions: Definitions, name: Expression, at: number): readonly Expression[] {
  const base: Expression = name.kind === 'apply' ? { ...name, derivatives: name.derivatives.map(() => 0) } : name;
  const own = definitions.own.filter((d) => sameName(d.name, base));
  const known = own.length > 0 ? own : definitions.elsewhere().filter((d) => sameName(d.name, base)).map((d) => ({ ...d, at: -1 }));
  const before = known.filter((d) => d.at < at).reverse();
  const after = known.filter((d) => d.at >= at);
  return [...before, ...after].map((d) => applied(d, name)).filter((e) => e !== null);
}

function applied(definition: Definition, name: Expression): Expression | null {
  const defined = definition.by === 0 ? definition.value : movedTree(definition.value, definition.by);
  if (name.kind !== 'apply') return defined;
  const [argument] = name.args;
  const times = name.derivatives.reduce((a, b) => a + b, 0);
  const own = definition.name.kind === 'apply' ? definition.name.args[0] : argument;
  if (name.args.length !== 1 || !argument || own?.kind !== 'symbol') return times === 0 ? defined : null;
  const value: Expression = times === 0 ? defined : { kind: 'derivative', body: defined, variable: own, times };
  if (sameExpression(argument, own)) return value;
  return times === 0 ? substitute(value, own.name, argument) : null;
}
