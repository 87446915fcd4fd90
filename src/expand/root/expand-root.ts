/** Expansions of the roots of an equation. */
import { createField } from '../../algebra/index.ts';
import { build, dependsOn, type Expression, Q } from '../../expression/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../../outcome.ts';
import { compareEventually, type Context, growth, isRational, isRealMulti, isZero, monomialOf, type Multi, negateElement, plainText, Series, split } from '../../series/index.ts';
import { assemble } from '../assemble.ts';
import { requireShallow } from '../depth.ts';
import type { Expansion, ExpansionProblem, RootProblem } from '../expansion.ts';
import { type Direction, openSide } from '../open-side.ts';
import { type SideResult, takeTerms } from '../side.ts';
import { startsOf } from './branches.ts';
import { indexedEquation } from './indexed.ts';
import type { Start } from './start.ts';
import { withRootsNamed } from './named-roots.ts';
import { refine } from './newton.ts';
import { clearedOfDenominators } from './rational.ts';
import { type Curve, openCurve, taylorAt } from './taylor.ts';

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
    if (!dependsOn(problem.equation, problem.variable.name)) return indexed(problem, problem.unknown.name, budget);
    return solved(problem, budget);
  });
}

function solved(problem: RootProblem, budget: Budget, assumptions: readonly string[] = []): Expansion {
  const direction = problem.point === 'inf' || problem.point === '-inf' ? problem.point : problem.side;
  return direction === 'both' ? bothSides(problem, budget) : join(problem, direction, branchesOn(problem, direction, budget), assumptions);
}

/** The variable counts the roots. */
function indexed(problem: RootProblem, unknown: string, budget: Budget): Expansion {
  const equation = problem.point === 'inf' ? indexedEquation(functionOf(problem.equation), unknown) : null;
  if (equation) {
    const field = createField(problem.assumptions, budget);
    const argument = field.fromExpression(equation.argument);
    const angle = build.call('atan', field.toExpression(field.fromExpression(equation.tangent)));
    const stated = `${plainText(field.toExpression(argument))} = ${plainText(build.sum(build.product(problem.variable, build.constant('pi')), angle))}, which counts the roots`;
    return solved({ ...problem, equation: build.sum(equation.argument, build.negation(angle), build.negation(build.product(problem.variable, build.constant('pi')))) }, budget, [stated]);
  }
  throw new Declined('bad-request', `The equation does not contain the variable ${plainText(problem.variable)}; name the variable that the root depends on, or write the equation of the n-th root with n in it, such as x - arctan x = n pi.`);
}

function bothSides(problem: RootProblem, budget: Budget): Expansion {
  const right = attempt(() => branchesOn(problem, 'right', budget));
  const left = attempt(() => branchesOn(problem, 'left', budget));
  const assumption = (relation: string): string => `${plainText(problem.variable)} ${relation} ${plainText(problem.point as Expression)}`;
  if (right.ok && left.ok && right.value.length === left.value.length && right.value.every(isRegular)) return join(problem, 'both', right.value);
  const joined = right.ok && left.ok ? joinedSides(problem, right.value, left.value) : null;
  if (joined) return joined;
  if (right.ok && left.ok) return { ...join(problem, 'right', right.value), left: join(problem, 'left', left.value) };
  if (right.ok) return join(problem, 'right', right.value, [assumption('>')]);
  if (left.ok && right.error.code === 'no-expansion') return join(problem, 'left', left.value, [assumption('<')]);
  throw new Declined(right.error.code, right.error.message);
}

/** One answer where every root has the same terms and error on both sides, in integer powers. */
function joinedSides(problem: RootProblem, right: readonly SideResult[], left: readonly SideResult[]): Expansion | null {
  if (right.length !== left.length || ![...right, ...left].every(hasIntegerPowers)) return null;
  const [over, under] = [join(problem, 'right', right), join(problem, 'left', left)];
  const same = (a: Expansion, b: Expansion, side: SideResult): boolean => {
    const { field } = side.context;
    const equal = (p: Expression, q: Expression): boolean => field.isZero(field.fromExpression(build.difference(p, q))) === 'yes';
    if (a.exact !== b.exact || a.terms.length !== b.terms.length || !equal(a.remainder?.power ?? build.number(0), b.remainder?.power ?? build.number(0))) return false;
    return a.terms.every((t, k) => {
      const u = b.terms[k];
      const odd = t.power.kind === 'number' && t.power.value.num % 2n !== 0n;
      return u !== undefined && equal(t.power, u.power) && equal(t.coefficient, odd ? build.negation(u.coefficient) : u.coefficient);
    });
  };
  const [overs, unders] = [over.branches ?? [over], under.branches ?? [under]];
  const agree = overs.every((a, k) => {
    const [b, side] = [unders[k], right[k]];
    return b !== undefined && side !== undefined && same(a, b, side);
  });
  return agree ? join(problem, 'both', right) : null;
}

/** Integer powers without logarithms or other scales: a root analytic (or with a pole) at the point, the same on both sides. */
function isRegular(side: SideResult): boolean {
  return !side.context.notes.sided && hasIntegerPowers(side);
}

const hasIntegerPowers = (side: SideResult): boolean =>
  [...side.terms, ...(side.remainder ? [side.remainder] : [])].every((t) => t.factors.length === 0 && t.log === 0 && !t.oscillation && isRational(t.power) && t.power.den === 1n);

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
  const written = side.fromVariable(functionOf(problem.equation));
  const cleared = clearedOfDenominators(written, unknown);
  const curve = openCurve(side, cleared?.numerator ?? written, unknown);
  const near = problem.near === undefined ? null : problem.near === 'inf' ? 1 : problem.near === '-inf' ? -1 : c.field.fromExpression(problem.near);
  const starts = startsOf(curve, near, problem.complex ?? false);
  if (starts.length === 0) throw new Declined('no-expansion', 'No real root was found near the point; name the value that the root tends to.');
  const roots = starts
    .map((start) => ({ start, y: start.exact ? start.value : refine(start.tree ? { ...curve, tree: start.tree } : curve, start.value, (y) => hasEnough(problem, c, y)) }))
    .filter((root) => !cleared || !vanishesAt(curve, cleared.denominator, root));
  if (roots.length === 0) throw new Declined('no-expansion', 'No real root was found near the point; name the value that the root tends to.');
  return order(c, roots).map(({ start, y }) => {
    const taken = takeTerms(c, y, problem.terms, problem.order);
    const assumptions = start.multiplicity > 1 ? [`multiplicity ${start.multiplicity}`] : [];
    const notes = { ...c.notes, assumptions: new Set([...c.notes.assumptions, ...assumptions]) };
    return { context: { ...c, notes }, series: y, ...taken, toVariable: side.toVariable };
  });
}

/** Whether a factor below the fraction bar vanishes for the root as far as it is known: then the equation has no value there. */
function vanishesAt(curve: Curve, denominator: Expression, { start, y }: Root): boolean {
  const { context: c } = curve.side;
  const [value = Q.ZERO] = taylorAt({ ...curve, tree: denominator }, y, 1).coefficients;
  if (!(value instanceof Series) && isZero(c, value)) return true;
  if (value instanceof Series && monomialOf(c, value) === null) {
    if (start.exact) return true;
    throw new Declined('undecided', 'A root could not be told from a pole of the equation; cancel common factors first.');
  }
  return false;
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

