/** Exact forms of an expression: the expression as it stands and those that identities make of it. */
import { type Expression, walk } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import type { LanguageRow } from '../write/index.ts';

export interface ExactForm {
  readonly tree: Expression;
  /** In words, the identities that made it; empty for the expression itself. */
  readonly identities: readonly string[];
  /** Operations, calls counted several times: for choices only. */
  readonly cost: number;
}

export const costOf = (e: Expression): number => [...walk(e)].reduce((n, node) => n + (node.kind === 'call' ? 6 : node.kind === 'number' || node.kind === 'symbol' ? 0 : 1), 0);

export function exactForms(f: Expression, _variable: string, _row: LanguageRow, _budget: Budget): readonly ExactForm[] {
  return [{ tree: f, identities: [], cost: costOf(f) }];
}
