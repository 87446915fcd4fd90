/** The door's function: both sides of a point, merged where they agree. */
import { build, dependsOn, type Expression, Q } from '../expression/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../outcome.ts';
import { addElements, isRational, multiplyElements, plainText } from '../series/index.ts';
import { assemble } from './assemble.ts';
import { inCompound } from './compound.ts';
import { requireShallow } from './depth.ts';
import type { Expansion, ExpansionProblem } from './expansion.ts';
import type { Direction } from './open-side.ts';
import { radiusOf } from './radius.ts';
import { expandSide, type SideResult } from './side.ts';

/**
 * The expansion of problem.function in problem.variable (a symbol, or a quantity like v/c taken as one) at the point, to `terms` terms or to `order`.
 * Rejects: unknown functions, essential singularities and unbounded oscillation at finite points ('no-expansion'), signs that assumptions do not decide ('needs-assumption'), zero tests without an answer ('undecided').
 */
export function expand(problem: ExpansionProblem, budget: Budget): Outcome<Expansion> {
  return attempt(() => {
    requireShallow(problem.function);
    if (problem.variable.kind !== 'symbol') return inCompound(problem, (inner) => expandSymbol(inner, budget));
    return expandSymbol(problem, budget);
  });
}

function expandSymbol(problem: ExpansionProblem, budget: Budget): Expansion {
  validate(problem);
  if (problem.point === 'inf' || problem.point === '-inf') return oneSide(problem, problem.point, budget);
  return withRadius(problem, problem.side === 'both' ? bothSides(problem, budget) : oneSide(problem, problem.side, budget), budget);
}

/** The radius of a power or Laurent series; 0 where it diverges. */
function withRadius(problem: ExpansionProblem, found: Expansion, budget: Budget): Expansion {
  if (found.divergent) return { ...found, radius: { value: build.number(0) } };
  const powers = [...found.terms, ...(found.remainder ? [found.remainder] : [])];
  const laurent = powers.every((t) => t.log === 0 && t.scale === null && t.power?.kind === 'number' && t.power.value.den === 1n);
  if (!laurent || found.prefactor || found.exact || found.left) return found;
  const radius = radiusOf(problem, budget);
  return radius ? { ...found, radius } : found;
}

function validate(problem: ExpansionProblem): void {
  if ((problem.terms === undefined) === (problem.order === undefined)) throw new Declined('bad-request', 'Ask for a number of terms or for an order, not both.');
  if (problem.terms !== undefined && !(Number.isInteger(problem.terms) && problem.terms >= 1 && problem.terms <= 100000)) {
    throw new Declined('bad-request', 'The number of terms must be a whole number from 1 to 100000.');
  }
  if (problem.variable.kind !== 'symbol') throw new Declined('bad-request', 'The variable must be one symbol.');
  if (typeof problem.point === 'object' && dependsOn(problem.point, problem.variable.name)) throw new Declined('bad-request', 'The point must not contain the variable; name another point.');
}

const oneSide = (problem: ExpansionProblem, direction: Direction, budget: Budget): Expansion => assemble(problem, direction, expandSide(problem, direction, budget), []);

/** A result, or the reason why this side has none. */
function trySide(problem: ExpansionProblem, direction: Direction, budget: Budget): SideResult | Declined {
  try {
    return expandSide(problem, direction, budget);
  } catch (error) {
    if (error instanceof Declined && error.failure.code === 'no-expansion') return error;
    throw error;
  }
}

function bothSides(problem: ExpansionProblem, budget: Budget): Expansion {
  const right = trySide(problem, 'right', budget);
  if (!(right instanceof Declined) && !right.context.notes.sided) return assemble(problem, 'both', right, []);
  const left = trySide(problem, 'left', budget);
  if (right instanceof Declined && left instanceof Declined) throw right;
  refuseEssential(right);
  refuseEssential(left);
  if (left instanceof Declined) return assemble(problem, 'right', right as SideResult, [sideAssumption(problem, '>')]);
  if (right instanceof Declined) return assemble(problem, 'left', left, [sideAssumption(problem, '<')]);
  if (agree(right, left)) return assemble(problem, 'both', right, []);
  const rightReal = isReal(right);
  const leftReal = isReal(left);
  if (rightReal && !leftReal) return assemble(problem, 'right', right, [sideAssumption(problem, '>')]);
  if (leftReal && !rightReal) return assemble(problem, 'left', left, [sideAssumption(problem, '<')]);
  return { ...assemble(problem, 'right', right, []), left: assemble(problem, 'left', left, []) };
}

const sideAssumption = (problem: ExpansionProblem, relation: '>' | '<'): string => `${plainText(problem.variable)} ${relation} ${plainText(problem.point as Expression)}`;

/** Exponential scales at a finite point differ between the sides: an essential singularity. */
function refuseEssential(side: SideResult | Declined): void {
  if (side instanceof Declined) return;
  const exponential = [...side.terms, ...(side.remainder ? [side.remainder] : [])].some((t) => t.factors.some((f) => f.element.kind === 'exponential' && f.element.rank > side.context.scale.local.rank));
  if (exponential) throw new Declined('no-expansion', 'The point is an essential singularity and the function behaves differently on its two sides; ask for the right or the left side.');
}

function isReal(side: SideResult): boolean {
  return side.terms.every((t) => isRational(t.coefficient) || side.context.field.isReal(t.coefficient) !== 'no');
}

/** Whether the left terms (in a - x) are the right ones (in x - a) read with t negative and L = log|t|. */
function agree(right: SideResult, left: SideResult): boolean {
  if (right.terms.length !== left.terms.length || (right.remainder === null) !== (left.remainder === null)) return false;
  const pairs = right.terms.map((t, k) => [t, left.terms[k]] as const);
  const same = pairs.every(([r, l]) => {
    if (!l || r.factors.length > 0 || l.factors.length > 0 || r.oscillation || l.oscillation || r.log !== l.log) return false;
    if (!isRational(r.power) || !isRational(l.power) || !Q.equal(r.power, l.power) || r.power.den !== 1n) return false;
    const sign = r.power.num % 2n === 0n ? 1 : -1;
    const { field } = right.context;
    const other = field.fromExpression(left.context.field.toExpression(l.coefficient));
    return field.isZero(addElements(right.context, r.coefficient, multiplyElements(right.context, Q.rational(-sign), other))) === 'yes';
  });
  if (!same) return false;
  if (!right.remainder || !left.remainder) return true;
  const a = right.remainder;
  const b = left.remainder;
  return a.factors.length === 0 && b.factors.length === 0 && a.log === b.log && isRational(a.power) && isRational(b.power) && Q.equal(a.power, b.power);
}

