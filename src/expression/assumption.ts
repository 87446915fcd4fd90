/** What is known of parameters, as data. Reading it from text is the readers' work. */
import type { Expression } from './expression.ts';

export type AssumptionRelation = '<' | '<=' | '>' | '>=' | '!=' | '=';

/** A relation between two expressions, or the set a symbol lies in (symbols are real unless said otherwise; an `operator` does not commute with other operators). A chain `0.9 <= c <= 1.1` is two relations. */
export type Assumption =
  | { readonly kind: 'relation'; readonly left: Expression; readonly relation: AssumptionRelation; readonly right: Expression }
  | { readonly kind: 'domain'; readonly symbol: string; readonly domain: 'integer' | 'real' | 'complex' | 'operator' };
