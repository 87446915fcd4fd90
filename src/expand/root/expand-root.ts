/** Expansions of the roots of an equation. */
import { build, dependsOn, type Expression, Q } from '../../expression/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../../outcome.ts';
import { compareEventually, type Context, growth, isRational, isRealMulti, type Multi, negateElement, plainText, split } from '../../series/index.ts';
import { assemble } from '../assemble.ts';
import { requireShallow } from '../depth.ts';
import type { Expansion, ExpansionProblem, RootProblem } from '../expansion.ts';
import { type Direction, openSide } from '../open-side.ts';
import { type SideResult, takeTerms } from '../side.ts';
import { startsOf } from './branches.ts';
import type { Start } from './start.ts';
import { withRootsNamed } from './named-roots.ts';
import { refine } from './newton.ts';
import { openCurve } from './taylor.ts';

/**
 * The root in `unknown` near the point: without `near` all real branches that can be found, the first at top level and all in `branches`,
 * ordered by limit (finite ones by size, negative first, then infinite; ties by their first differing term).
 * Newton's polygon for polynomials and at finite limits, leading balances for separated equations at infinity, then Newton's iteration.
 */
export function expandRoot(problem: RootProblem, budget: Budget): Outcome<Expansion> {
  return attempt(() => {
    requireShallow(problem.equation);
    if (problem.unknown.kind !== 'symbol' || problem.variable.kind !== 'symbol') throw new Declined('bad-request', 'The unknown and the variable must be one symbol each.');
    if (!dependsOn(problem.equation, problem.unknown.name)) throw new Declined('bad-request', 'The equation does not contain the unknown; name another unknown.');
    if (problem.point === 'inf' || problem.point === '-inf') return join(problem, problem.point, branchesOn(problem, problem.point, budget));
    if (problem.side !== 'both') return join(problem, problem.side, branchesOn(problem, problem.side, budget));
    return bothSides(problem, budget);
  });
}

function bothSides(problem: RootProblem, budget: Budget): Expansion {
  const right = attempt(() => branchesOn(problem, 'right', budget));
  const left = attempt(() => branchesOn(problem, 'left', budget));
  const assumption = (relation: string): string => `${plainText(problem.variable)} ${relation} ${plainText(problem.point as Expression)}`;
  if (right.ok && left.ok && right.value.length === left.value.length && right.value.every(isRegular)) return join(problem, 'both', right.value);
  if (right.ok && left.ok) return { ...join(problem, 'right', right.value), left: join(problem, 'left', left.value) };
  if (right.ok) return join(problem, 'right', right.value, [assumption('>')]);
  if (left.ok && right.error.code === 'no-expansion') return join(problem, 'left', left.value, [assumption('<')]);
  throw new Declined(right.error.code, right.error.message);
}

/** Integer powers without logarithms or other scales: a root analytic (or with a pole) at the point, the same on both sides. */
function isRegular(side: SideResult): boolean {
  return !side.context.notes.sided && [...side.terms, ...(side.remainder ? [side.remainder] : [])].every((t) => t.factors.length === 0 && t.log === 0 && !t.oscillation && isRational(t.power) && t.power.den === 1n);
}

/** F of F = 0. */
function functionOf(equation: Expression): Expression {
  if (equation.kind !== 'relation') return equation;
  const [left, right, more] = equation.sides;
  if (!left || !right || more || equation.relations[0] !== '=') throw new Declined('bad-request', 'An equation has two sides with one equals sign between them; correct it.');
  return build.difference(left, right);
}

function branchesOn(problem: RootProblem, direction: Direction, budget: Budget): SideResult[] {
  const side = openSide(problem, direction, budget);
  const c = side.context;
  const unknown = problem.unknown.kind === 'symbol' ? problem.unknown.name : '';
  const curve = openCurve(side, side.fromVariable(functionOf(problem.equation)), unknown);
  const near = problem.near === undefined ? null : problem.near === 'inf' ? 1 : problem.near === '-inf' ? -1 : c.field.fromExpression(problem.near);
  const starts = startsOf(curve, near, problem.complex ?? false);
  if (starts.length === 0) throw new Declined('no-expansion', 'No real root was found near the point; name the value that the root tends to.');
  const roots = starts.map((start) => ({ start, y: start.exact ? start.value : refine(start.tree ? { ...curve, tree: start.tree } : curve, start.value, (y) => hasEnough(problem, c, y)) }));
  return order(c, roots).map(({ start, y }) => {
    const taken = takeTerms(c, y, problem.terms, problem.order);
    const assumptions = start.multiplicity > 1 ? [`multiplicity ${start.multiplicity}`] : [];
    const notes = { ...c.notes, assumptions: new Set([...c.notes.assumptions, ...assumptions]) };
    return { context: { ...c, notes }, series: y, ...taken, toVariable: side.toVariable };
  });
}

function hasEnough(problem: RootProblem, c: Context, y: Multi): boolean {
  const { terms, remainder } = takeTerms(c, y, problem.terms === undefined ? undefined : problem.terms + 1, problem.order);
  if (problem.terms !== undefined) return terms.length > problem.terms;
  return remainder !== null && !remainder.order;
}

interface Root {
  readonly start: Start;
  readonly y: Multi;
}

function order(c: Context, roots: readonly Root[]): Root[] {
  const limitOf = (y: Multi): { infinite: boolean; size: Multi; value: Multi } => {
    if (growth(c, y) === 'large') return { infinite: true, size: Q.ZERO, value: y };
    const { constant } = split(c, y);
    const sign = isRational(constant) ? Q.signOf(constant) : c.field.sign(constant);
    return { infinite: false, size: sign === -1 ? negateElement(c, constant) : constant, value: y };
  };
  return [...roots].sort((a, b) => {
    if (!isRealMulti(c, a.y) || !isRealMulti(c, b.y)) return Number(!isRealMulti(c, a.y)) - Number(!isRealMulti(c, b.y));
    const p = limitOf(a.y);
    const q = limitOf(b.y);
    if (p.infinite !== q.infinite) return p.infinite ? 1 : -1;
    const bySize = p.infinite ? 0 : quietly(() => compareEventually(c, p.size, q.size));
    return bySize !== 0 ? bySize : quietly(() => compareEventually(c, a.start.value, b.start.value));
  });
}

/** An order that needs an undecided sign is left as found. */
function quietly(compare: () => -1 | 0 | 1 | 'complex'): number {
  try {
    const sign = compare();
    return sign === 'complex' ? 0 : sign;
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return 0;
    throw error;
  }
}

function join(problem: RootProblem, direction: Direction | 'both', sides: readonly SideResult[], assumptions: readonly string[] = []): Expansion {
  const whole: ExpansionProblem = { ...problem, function: problem.unknown };
  const all = withRootsNamed(sides.map((s) => assemble(whole, direction, s, assumptions)), problem.equation, problem.unknown);
  const [first] = all;
  if (!first) throw new Declined('no-expansion', 'No real root was found near the point; name the value that the root tends to.');
  return all.length > 1 ? { ...first, branches: all } : first;
}

