/** Shared by the tests of differential equations: statements from text, solutions, and the residual of a solution put back. */
import { expect } from 'vitest';
import { type DifferentialStatement, differentialStatement, expandSolution, type Expansion, partialSum } from '../../src/expand/index.ts';
import { build, type Expression, substitute } from '../../src/expression/index.ts';
import { budget, type Outcome } from '../../src/outcome.ts';
import { readFormula } from '../../src/read/index.ts';
import { plain, positive, same } from './tools.ts';

export interface Asked {
  readonly unknown?: string;
  readonly variable?: string;
  readonly terms?: number;
  readonly point?: string;
  readonly positive?: readonly string[];
}

export function statementOf(text: string, asked: Asked = {}): DifferentialStatement {
  const read = readFormula(text, 'latex');
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  const statement = differentialStatement([read.value.expression, ...read.value.conditions], asked);
  if (!statement) throw new Error(`${text}: not read as a differential equation`);
  return statement;
}

export function solve(text: string, asked: Asked = {}): Outcome<Expansion> {
  const statement = statementOf(text, asked);
  return expandSolution({ statement, side: 'both', terms: asked.terms ?? 4, assumptions: positive(...(asked.positive ?? [])), ...(asked.unknown ? { unknown: asked.unknown } : {}), ...(asked.point ? { point: plain(asked.point) } : {}) }, budget(20000));
}

export function solved(text: string, asked: Asked = {}): Expansion {
  const found = solve(text, asked);
  if (!found.ok) throw new Error(`${text} ${found.error.code}: ${found.error.message}`);
  return found.value;
}

/** The partial sum is the given one, in plain notation with the symbols' canonical names. */
export function expectSum(found: Expansion, sum: Expression | string): void {
  const wanted = typeof sum === 'string' ? plain(sum) : sum;
  expect(same(partialSum(found), wanted), JSON.stringify(found.terms, (_, v: unknown) => (typeof v === 'bigint' ? String(v) : v))).toBe(true);
}

/** The left side of each equation with the partial sums in the place of the functions, as a tree in the variable. */
export function residuals(statement: DifferentialStatement, solutions: ReadonlyMap<string, Expression>): readonly Expression[] {
  return statement.equations.map((equation) => {
    let tree = equation;
    for (const u of statement.unknowns) {
      let value = solutions.get(u.name) ?? build.number(0);
      for (let k = 0; k <= u.order; k += 1) {
        tree = substitute(tree, `${u.name}~${k}`, value);
        value = { kind: 'derivative', body: value, variable: build.symbol(statement.variable), times: 1 };
      }
    }
    return tree;
  });
}
