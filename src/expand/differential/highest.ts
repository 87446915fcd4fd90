/** Equations solved for their highest derivatives. */
import { build, dependsOn, type Expression, Q, substitute } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { type DifferentialStatement, slot, type UnknownFunction } from './statement.ts';

const isZero = (e: Expression): boolean => e.kind === 'number' && Q.isZero(e.value);
const times = (...factors: readonly Expression[]): Expression => (factors.some(isZero) ? build.number(0) : build.product(...factors.filter((f) => !build.isOneNumber(f))));
const plus = (terms: readonly Expression[]): Expression => build.sum(...terms.filter((t) => !isZero(t)));

/** The highest derivatives enter linearly: matrix * highest + rest = 0. */
export interface LinearInHighest {
  readonly matrix: readonly (readonly Expression[])[];
  readonly rest: readonly Expression[];
}

export const top = (u: UnknownFunction): string => slot(u.name, u.order);

/** Null where a highest derivative does not enter linearly. */
export function linearInHighest(statement: Pick<DifferentialStatement, 'equations' | 'unknowns'>): LinearInHighest | null {
  const { equations, unknowns } = statement;
  if (equations.length !== unknowns.length) {
    throw new Declined('bad-request', equations.length < unknowns.length ? 'There are fewer equations than unknown functions; add the missing ones.' : 'There are more equations than unknown functions; leave out those that follow from the others, or write initial values as y(0) = 1.');
  }
  const tops = unknowns.map(top);
  const matrix = equations.map((f) => tops.map((t) => differentiate(f, t)));
  const known: Expression[][] = [];
  for (const row of matrix) {
    const cells: Expression[] = [];
    for (const cell of row) {
      if (!cell || tops.some((t) => dependsOn(cell, t))) return null;
      cells.push(cell);
    }
    known.push(cells);
  }
  const rest = equations.map((f) => tops.reduce((tree, t) => substitute(tree, t, build.number(0)), f));
  return { matrix: known, rest };
}

/** By Cramer's rule: numerator and common denominator of each highest derivative. */
export function solvedForHighest(system: LinearInHighest): readonly { readonly numerator: Expression; readonly denominator: Expression }[] {
  const { matrix, rest } = system;
  const denominator = determinant(matrix);
  if (isZero(denominator)) throw new Declined('no-expansion', 'The equations cannot be solved for the highest derivatives (they depend on each other, or one holds none); rewrite them with one highest derivative each.');
  return matrix.map((_, i) => ({ numerator: determinant(matrix.map((row, k) => row.map((cell, j) => (j === i ? build.negation(rest[k] as Expression) : cell)))), denominator }));
}

const MOST_UNKNOWNS = 6;

function determinant(m: readonly (readonly Expression[])[]): Expression {
  if (m.length > MOST_UNKNOWNS) throw new Declined('bad-request', `Systems of up to ${MOST_UNKNOWNS} equations are solved; split this one.`);
  const [row] = m;
  if (!row) return build.number(1);
  return plus(
    row.map((cell, j) => {
      if (isZero(cell)) return cell;
      const minor = determinant(m.slice(1).map((r) => r.filter((_, k) => k !== j)));
      const value = times(cell, minor);
      return j % 2 === 0 || isZero(value) ? value : build.negation(value);
    }),
  );
}
