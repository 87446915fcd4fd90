/** The door's function: both sides of a point, merged where they provably agree. */
import { build, dependsOn, type Expression, Q, walk } from '../expression/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../outcome.ts';
import { addElements, isRational, isRealMulti, multiplyElements, plainText } from '../series/index.ts';
import { assemble } from './assemble.ts';
import { inCompound } from './compound.ts';
import { requireShallow } from './depth.ts';
import type { Expansion, ExpansionProblem } from './expansion.ts';
import type { Direction } from './open-side.ts';
import { isEvenInRoot } from './even-root.ts';
import { generalTerm } from './general.ts';
import { radiusOf } from './radius.ts';
import { expandSide, type SideResult } from './side.ts';
import { commutingCapitals, expandOperators, type Letters, lettersOf } from './noncommuting/index.ts';
import { expandVectors, hasVectors, isVectorFormula, requireLinearInFunctions } from './vectors/index.ts';

/**
 * The expansion of problem.function in problem.variable (a symbol, or a quantity like v/c taken as one) at the point, to `terms` terms or to `order`.
 * Rejects: unknown functions, essential singularities and unbounded oscillation at finite points ('no-expansion'), signs that assumptions do not decide ('needs-assumption'), zero tests without an answer ('undecided').
 */
export function expand(problem: ExpansionProblem, budget: Budget): Outcome<Expansion> {
  return attempt(() => {
    requireShallow(problem.function);
    return inLetters(problem, budget);
  });
}

/** Operators and vectors have rules of their own; what they leave to do is scalar. */
function inLetters(problem: ExpansionProblem, budget: Budget): Expansion {
  const scalar = (inner: ExpansionProblem): Expansion => inVariable(inner, budget);
  requireLinearInFunctions(problem.function);
  const vectors = hasVectors(problem.function);
  const letters = vectors && isVectorFormula(problem.function) ? null : lettersOf(problem.function, problem.assumptions);
  if (letters && letters.operators.size === 1 && !vectors) return oneOperator(problem, letters, budget);
  if (letters) return expandOperators(problem, letters, budget, scalar);
  if (vectors) return expandVectors(problem, budget, scalar);
  const capitals = commutingCapitals(problem.function, problem.variable);
  const found = scalar(problem);
  return capitals.length === 0 ? found : withAssumption(found, `${capitals.join(', ')} commute (assume "${capitals.join(', ')} do not commute" if they are operators)`);
}

const withAssumption = (x: Expansion, assumption: string): Expansion => ({ ...x, assumptions: [...x.assumptions, assumption], ...(x.left ? { left: withAssumption(x.left, assumption) } : {}) });

/** Everything made of one operator commutes: what has no expansion in words is left to the commuting rules. */
function oneOperator(problem: ExpansionProblem, letters: Letters, budget: Budget): Expansion {
  const scalar = (inner: ExpansionProblem): Expansion => inVariable(inner, budget);
  try {
    return expandOperators(problem, letters, budget, scalar);
  } catch (error) {
    if (!(error instanceof Declined) || error.failure.code !== 'no-expansion' || [...walk(problem.function)].some((n) => n.kind === 'vector')) throw error;
    return scalar(problem);
  }
}

/** A formula without vectors and operators, in a symbol or a compound quantity. */
export function inVariable(problem: ExpansionProblem, budget: Budget): Expansion {
  if (problem.variable.kind !== 'symbol') return inCompound(problem, (inner) => expandSymbol(inner, budget));
  return expandSymbol(problem, budget);
}

function expandSymbol(problem: ExpansionProblem, budget: Budget): Expansion {
  validate(problem);
  if (problem.point === 'inf' || problem.point === '-inf') return withGeneral(problem, oneSide(problem, problem.point, budget), budget);
  const found = problem.side === 'both' ? bothSides(problem, budget) : oneSide(problem, problem.side, budget);
  return withRadius(problem, withGeneral(problem, found, budget), budget);
}

function withGeneral(problem: ExpansionProblem, found: Expansion, budget: Budget): Expansion {
  const general = generalTerm(problem, found, budget);
  return general ? { ...found, general } : found;
}

/** The radius of a power or Laurent series; 0 where it diverges. */
function withRadius(problem: ExpansionProblem, found: Expansion, budget: Budget): Expansion {
  if (found.divergent) return { ...found, radius: { value: build.number(0) } };
  const powers = [...found.terms, ...(found.remainder ? [found.remainder] : [])];
  const laurent = powers.every((t) => t.log === 0 && t.scale === null && t.power?.kind === 'number' && t.power.value.den === 1n);
  if (!problem.radius || !laurent || found.prefactor || found.exact || found.left) return found;
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
  if (agreeExactly(right, left) || isEvenInRoot(problem, budget)) return assemble(problem, 'both', right, []);
  if (isReal(right) && isNotReal(left)) return assemble(problem, 'right', right, [sideAssumption(problem, '>')]);
  if (isReal(left) && isNotReal(right)) return assemble(problem, 'left', left, [sideAssumption(problem, '<')]);
  return { ...assemble(problem, 'right', right, []), left: assemble(problem, 'left', left, []) };
}

const sideAssumption = (problem: ExpansionProblem, relation: '>' | '<'): string => `${plainText(problem.variable)} ${relation} ${plainText(problem.point as Expression)}`;

/** Exponential scales at a finite point differ between the sides: an essential singularity. */
function refuseEssential(side: SideResult | Declined): void {
  if (side instanceof Declined) return;
  const exponential = [...side.terms, ...(side.remainder ? [side.remainder] : [])].some((t) => t.factors.some((f) => f.element.kind === 'exponential' && f.element.rank > side.context.scale.local.rank));
  if (exponential) throw new Declined('no-expansion', 'The point is an essential singularity and the function behaves differently on its two sides; ask for the right or the left side.');
}

/** By construction. */
const isReal = (side: SideResult): boolean => isRealMulti(side.context, side.series);

/** Whether a coefficient is not real, or real for special values of its parameters only. */
function isNotReal(side: SideResult): boolean {
  const { field } = side.context;
  return side.terms.some((t) => !isRational(t.coefficient) && (field.isReal(t.coefficient) === 'no' || (field.isReal(t.coefficient) === 'undecided' && field.parameters(t.coefficient).length > 0)));
}

/** Whether both sides are finite sums and the left one (in a - x) is the right one (in x - a) read with t negative and L = log|t|. */
function agreeExactly(right: SideResult, left: SideResult): boolean {
  if (right.remainder || left.remainder || right.terms.length !== left.terms.length) return false;
  const pairs = right.terms.map((t, k) => [t, left.terms[k]] as const);
  return pairs.every(([r, l]) => {
    if (!l || r.factors.length > 0 || l.factors.length > 0 || r.oscillation || l.oscillation || r.log !== l.log) return false;
    if (!isRational(r.power) || !isRational(l.power) || !Q.equal(r.power, l.power) || r.power.den !== 1n) return false;
    const sign = r.power.num % 2n === 0n ? 1 : -1;
    const { field } = right.context;
    const other = field.fromExpression(left.context.field.toExpression(l.coefficient));
    return field.isZero(addElements(right.context, r.coefficient, multiplyElements(right.context, Q.rational(-sign), other))) === 'yes';
  });
}
