/** The expansion of the solution of a differential equation about a point. */
import { build, type Expression, freeSymbols, Q, sameExpression } from '../../expression/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../../outcome.ts';
import { assemble } from '../assemble.ts';
import { requireShallow } from '../depth.ts';
import type { Expansion, ExpansionProblem } from '../expansion.ts';
import { openSide } from '../open-side.ts';
import { exponentsOf, frobeniusTerms, homogeneousSolutions, isAnalytic, particularSolution } from './frobenius.ts';
import { plainName, plainPoint, regularSolution, solutionTerms, startValues } from './initial-value.ts';
import { eulerForm, linearEquation } from './linear.ts';
import { powerSeriesSolution } from './singular.ts';
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
 * At an ordinary point by recursion over Taylor coefficients, O(n^2) operations for n of them. At a singular point with given values the solution that is a
 * power series; without values the Frobenius solutions of a linear equation, in `branches`.
 * Of a system the function asked for is at top level, and all are in `components`.
 * Rejects: boundary-value, delay and partial differential problems, irregular singular points.
 */
export function expandSolution(problem: SolutionProblem, budget: Budget): Outcome<Expansion> {
  return attempt(() => {
    problem.statement.equations.forEach(requireShallow);
    const point = pointOf(problem);
    const about = { variable: build.symbol(problem.statement.variable), point, assumptions: problem.assumptions };
    try {
      return atRegularPoint(problem, about, budget);
    } catch (error) {
      if (!(error instanceof Singular)) throw error;
      return atSingularPoint(problem, about, budget);
    }
  });
}

interface About {
  readonly variable: Expression;
  readonly point: Expression;
  readonly assumptions: ExpansionProblem['assumptions'];
}

const shape = (problem: SolutionProblem, about: About, name: string): ExpansionProblem => ({ ...problem, ...about, function: functionTree(problem.statement, name) });

function atRegularPoint(problem: SolutionProblem, about: About, budget: Budget): Expansion {
  const { statement } = problem;
  const taken = new Set([...statement.equations, ...statement.initial.map((v) => v.value)].flatMap(freeSymbols));
  const start = startValues({ ...statement, point: about.point }, taken);
  const solution = regularSolution(statement, start, about, budget);
  const one = (name: string): Expansion => assemble(shape(problem, about, name), 'both', solutionTerms(statement, solution, name, problem), start.notes);
  return withComponents(statement, problem.unknown, one);
}

function atSingularPoint(problem: SolutionProblem, about: About, budget: Budget): Expansion {
  const { statement } = problem;
  const [unknown] = statement.unknowns;
  if (!unknown) throw new Declined('bad-request', 'The equation holds no unknown function; name it.');
  if (statement.initial.length > 0) {
    const given = (derivative: number): Expression | null => statement.initial.find((v) => v.name === unknown.name && v.derivative === derivative)?.value ?? null;
    const solution = powerSeriesSolution(statement, given, about, budget);
    const side = solutionTerms(statement, solution, unknown.name, problem);
    return assemble(shape(problem, about, unknown.name), 'both', side, [`the point is a singular point of the equation; this is its solution that is a power series there`]);
  }
  return frobeniusBranches(problem, about, unknown.name, budget);
}

/** All independent solutions of a linear equation, each with leading coefficient 1; with a right side, a particular solution comes first. */
function frobeniusBranches(problem: SolutionProblem, about: About, name: string, budget: Budget): Expansion {
  const { statement } = problem;
  const linear = linearEquation(statement);
  if (!linear) throw new Declined('needs-assumption', 'The point is singular for this equation, which is not linear; give the value of the solution there.');
  const direction = problem.side === 'left' ? 'left' : 'right';
  if (direction === 'left') throw new Declined('no-expansion', 'At a singular point solutions are given on the right side; replace the variable by its negative for the left one.');
  const side = openSide(about, direction, budget);
  const c = side.context;
  const form = eulerForm(side, linear);
  const particular = particularSolution(c, form);
  const exponents = exponentsOf(c, form.operator(0));
  const homogeneous = homogeneousSolutions(c, { ...form, right: () => Q.ZERO, rightLowest: null }, exponents);
  const generic = exponents.some((e) => c.field.parameters(e.value).length > 0) ? ['no two exponents of the equation differ by a whole number'] : [];
  const branches = [...(particular ? [{ solution: particular, note: 'a particular solution; add multiples of the others' }] : []), ...homogeneous.map((solution) => ({ solution, note: 'times a free constant' }))];
  const all = branches.map(({ solution, note }) => {
    const found = frobeniusTerms(side, form, solution, problem);
    const sided = !isAnalytic(found);
    const conditions = sided ? [`${plainName(statement.variable)} > ${plainPoint(about.point)}`] : [];
    return assemble(shape(problem, about, name), sided ? 'right' : 'both', found, [note, ...generic, ...conditions]);
  });
  const [first] = all;
  if (!first) throw new Declined('no-expansion', 'The equation has no solution of this form at the point; choose another point.');
  return all.length > 1 ? { ...first, branches: all } : first;
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
