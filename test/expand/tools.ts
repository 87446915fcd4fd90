/** Shared by the tests of this room: formulas from text, and exact comparison of expansions. */
import { expect } from 'vitest';
import { createField } from '../../src/algebra/index.ts';
import { type Expansion, type ExpansionProblem, expand, partialSum } from '../../src/expand/index.ts';
import { type Assumption, build, type Expression, Q, substitute } from '../../src/expression/index.ts';
import { describe } from '../../src/functions/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact, readExpression } from '../../src/read/index.ts';

export function latex(text: string, names: { readonly functions?: readonly string[]; readonly exact?: boolean } = {}): Expression {
  const read = readExpression(text, 'latex', names);
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  return read.value;
}

export function plain(text: string): Expression {
  const read = readExact(text);
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  return substitute(substitute(read.value, 'euler', build.constant('eulerGamma')), 'glaisher', build.constant('glaisher'));
}

export const positive = (...names: readonly string[]): Assumption[] => names.map((n) => ({ kind: 'relation', left: build.symbol(n), relation: '>', right: build.number(0) }));

export type Request = Partial<Omit<ExpansionProblem, 'function' | 'variable' | 'point'>> & { readonly at?: string; readonly variable?: string };

export function problemOf(f: Expression, request: Request = {}): ExpansionProblem {
  const { at = '0', variable = 'x', ...rest } = request;
  const count = rest.terms === undefined && rest.order === undefined ? { terms: 4 } : {};
  return { function: f, variable: variable.includes('\\frac') ? latex(variable) : build.symbol(variable), point: at === 'inf' || at === '-inf' ? at : plain(at), side: 'both', assumptions: [], ...count, ...rest };
}

export const outcomeOf = (f: Expression, request: Request = {}) => expand(problemOf(f, request), budget(20000));

export function expansionOf(f: Expression | string, request: Request = {}): Expansion {
  const tree = typeof f === 'string' ? latex(f) : f;
  const found = outcomeOf(tree, request);
  if (!found.ok) throw new Error(`${typeof f === 'string' ? f : ''} ${found.error.code}: ${found.error.message}`);
  return found.value;
}

/** Exact equality of two trees under assumptions, by the field's normal form. */
export function same(a: Expression, b: Expression, assumptions: readonly Assumption[] = []): boolean {
  const field = createField(assumptions, budget(20000), describe);
  return field.isZero(field.fromExpression(build.difference(a, b))) === 'yes';
}

/** The partial sum is exactly the given plain text, and the remainder's power and power of L are as given. */
export function expectExpansion(found: Expansion, sum: string, power: string | null, log = 0, assumptions: readonly Assumption[] = []): void {
  const tree = partialSum(found);
  expect(same(tree, plain(sum), assumptions), `sum ${sum}`).toBe(true);
  if (power === null) {
    expect(found.remainder).toBeNull();
    expect(found.exact).toBe(true);
    return;
  }
  expect(found.remainder?.log).toBe(log);
  expect(same(found.remainder?.power ?? build.number(0), plain(power)), `O-power ${power}`).toBe(true);
}

export { Q };
