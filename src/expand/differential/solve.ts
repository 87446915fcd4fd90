/** The expansion of the solution of a differential equation about a point. */
import { build, type Expression, freeSymbols, Q, sameExpression } from '../../expression/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../../outcome.ts';
import { assemble } from '../assemble.ts';
import { requireShallow } from '../depth.ts';
import type { Expansion, ExpansionProblem } from '../expansion.ts';
import { regularSolution, solutionTerms, startValues } from './initial-value.ts';
import type { DifferentialStatement } from './statement.ts';
import { Singular } from './taylor.ts';

/** Expand the solution of an initial-value problem in its independent variable. */
export interface SolutionProblem extends Omit<ExpansionProblem, 'function' | 'variable' | 'point'> {
  readonly statement: DifferentialStatement;
  /** The function that is asked for; the first one by default. */
  readonly unknown?: string;
  /** Default: where the initial values stand, else 0. */
  readonly point?: Expression | 'inf' | '-inf';
}

/**
 * The solution in powers of (variable - point). Values that are not given are free constants, named in `assumptions`.
 * At an ordinary point by recursion over Taylor coefficients, O(n^2) operations for n of them.
 * Of a system the function asked for is at top level, and all are in `components`.
 * Rejects: boundary-value, delay and partial differential problems, equations not solved for their highest derivative.
 */
export function expandSolution(problem: SolutionProblem, budget: Budget): Outcome<Expansion> {
  return attempt(() => {
    problem.statement.equations.forEach(requireShallow);
    const point = pointOf(problem);
    const { statement } = problem;
    const taken = new Set([...statement.equations, ...statement.initial.map((v) => v.value)].flatMap(freeSymbols));
    const start = startValues({ ...statement, point }, taken);
    const about = { variable: build.symbol(statement.variable), point, assumptions: problem.assumptions };
    try {
      const solution = regularSolution(statement, start, about, budget);
      const one = (name: string): Expansion => {
        const side = solutionTerms(statement, solution, name, problem);
        return assemble({ ...problem, ...about, function: functionTree(statement, name) }, 'both', side, start.notes);
      };
      return withComponents(statement, problem.unknown, one);
    } catch (error) {
      if (!(error instanceof Singular)) throw error;
      throw new Declined('no-expansion', 'The equation is singular at this point; choose a point where its highest derivative can be solved for.');
    }
  });
}

/** How the text writes the function: `y` or `y(x)`. */
export const functionTree = (statement: DifferentialStatement, name: string): Expression =>
  statement.applied.has(name) ? { kind: 'apply', name, args: [build.symbol(statement.variable)], derivatives: [0] } : build.symbol(name);

function withComponents(statement: DifferentialStatement, unknown: string | undefined, one: (name: string) => Expansion): Expansion {
  const names = statement.unknowns.map((u) => u.name);
  const wanted = unknown ?? names[0];
  if (wanted === undefined || !names.includes(wanted)) throw new Declined('bad-request', 'The unknown named is not differentiated in the equations; name another.');
  const found = one(wanted);
  return names.length === 1 ? found : { ...found, components: names.map((name) => ({ unknown: build.symbol(name), expansion: name === wanted ? found : one(name) })) };
}

function pointOf({ statement, point }: SolutionProblem): Expression {
  if (point === 'inf' || point === '-inf') throw new Declined('no-expansion', 'A solution is expanded about a finite point; substitute t = 1/x in the equation first.');
  if (statement.point && point && !sameExpression(statement.point, point)) throw new Declined('bad-request', 'The initial values stand at another point than the expansion; expand about the point where they are given.');
  return statement.point ?? point ?? build.number(Q.ZERO);
}
