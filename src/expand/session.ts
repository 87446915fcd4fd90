/** What one evaluation of trees shares: the multiseries context, what the symbols stand for, and results already found. */
import type { Expression } from '../expression/index.ts';
import type { Context, Multi, Series } from '../series/index.ts';

export interface Session {
  readonly context: Context;
  /** Symbols that vary, and what they stand for. All others are parameters. */
  readonly bindings: ReadonlyMap<string, Multi>;
  /** By node. */
  readonly memo: Map<Expression, Multi>;
  readonly varying: Map<Expression, boolean>;
  /** Calls by their varying argument, then by function and constant arguments: equations for a function refer to itself. */
  readonly calls: WeakMap<Series, Map<string, Multi>>;
  /** Calls of constants whose value was found finite, or is being looked at: local forms name the value they start from. */
  readonly finiteCalls: Set<string>;
  readonly depth: { value: number };
  readonly fresh: { value: number };
}

/** Tree -> series, as the whole evaluation does it: handed down to where sub-trees are met. */
export type Evaluate = (s: Session, e: Expression) => Multi;

export const openSession = (context: Context, bindings: ReadonlyMap<string, Multi>): Session => ({
  context,
  bindings,
  memo: new Map(),
  varying: new Map(),
  calls: new WeakMap(),
  finiteCalls: new Set(),
  depth: { value: 0 },
  fresh: { value: 0 },
});

/** The same session with more symbols bound. */
export const bind = (s: Session, entries: Iterable<readonly [string, Multi]>): Session => ({
  ...s,
  bindings: new Map([...s.bindings, ...entries]),
  memo: new Map(),
  varying: new Map(),
});

/** A symbol name that no reader produces. */
export function freshSymbol(s: Session, stem: string): string {
  s.fresh.value += 1;
  return `${stem}'${s.fresh.value}`;
}

/** Whether a condition `... != 0` speaks of such a symbol: it excludes single values of a variable that is integrated or put in later, where what is found holds by continuity. */
export const excludesValuesOfFresh = (condition: string): boolean => /'\d/.test(condition) && condition.endsWith('!= 0');
