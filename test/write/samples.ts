/** Expansions as the engine answers them, built by hand from published values. */
import { build, Q, type Expression } from '../../src/expression/index.ts';
import type { Expansion, ExpansionTerm } from '../../src/expand/expansion.ts';

export const x = build.symbol('x');
export const n = (value: number | bigint, den: number | bigint = 1): Expression => build.number(Q.rational(value, den));

type TermSpec = readonly [coefficient: Expression | number | readonly [number, number], power: number | readonly [number, number], log?: number, scale?: Expression];
const exact = (value: Expression | number | readonly [number, number]): Expression =>
  typeof value === 'number' ? n(value) : 'kind' in value ? value : n(value[0], value[1]);

export function expansionOf(
  f: Expression,
  terms: readonly TermSpec[],
  remainder: readonly [power: number | readonly [number, number], log?: number, scale?: Expression] | null,
  more: Partial<Expansion> = {},
): Expansion {
  const term = ([coefficient, power, log = 0, scale]: TermSpec): ExpansionTerm => ({ coefficient: exact(coefficient), power: exact(power), log, scale: scale ?? null });
  const variable = more.variable ?? x;
  return {
    function: f,
    variable,
    point: n(0),
    side: 'both',
    local: variable,
    logarithm: build.call('log', build.call('abs', variable)),
    prefactor: null,
    terms: terms.map(term),
    remainder: remainder && { power: exact(remainder[0]), log: remainder[1] ?? 0, scale: remainder[2] ?? null },
    exact: remainder === null,
    divergent: false,
    oscillating: false,
    assumptions: [],
    ...more,
  };
}

export const atInfinity = (variable: Expression = x): Partial<Expansion> => ({
  point: 'inf',
  side: 'right',
  variable,
  local: build.quotient(n(1), variable),
  logarithm: build.call('log', variable),
});
export const about = (point: Expression, variable: Expression = x): Partial<Expansion> => ({ point, variable, local: build.difference(variable, point) });
