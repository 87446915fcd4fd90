/** Requests whose text is a differential equation: which of its solution's expansions is asked for. */
import { type Assumption, build, dependsOn, type Expression, freeSymbols, Q, type Rational, walk } from '../expression/index.ts';
import { type DifferentialStatement, differentialStatement, expandPerturbation, expandSolution, type Expansion, standsForUnknown } from '../expand/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, Declined, failure, type Outcome, success } from '../outcome.ts';
import type { ExpandAnswer, ExpandRequest } from '../protocol.ts';
import { isBareName, isTruncated, readAssumption } from '../read/index.ts';
import { encloseReal, real } from '../rigorous/index.ts';
import { readAllAssumptions } from './assumptions.ts';
import { statedConditions, withValues } from './conditions.ts';
import { expansionAnswer } from './expansionAnswer.ts';
import { inPlaceAnswer } from './inPlace.ts';
import { functionOf, type Point, readPoint } from './question.ts';
import { readingAnswer } from './reading.ts';
import type { SourceFormula } from './source.ts';

type Size = { readonly terms?: number; readonly order?: Rational };

/** What a differential text asks for. */
export interface DifferentialQuestion {
  readonly statement: DifferentialStatement;
  readonly kind: 'solution' | 'perturbation' | 'in-place';
  /** The unknown function asked for. */
  readonly unknown?: string;
  /** The quantity to expand in, where it is not the independent variable. */
  readonly variable?: Expression;
  readonly assumptions: readonly Assumption[];
  /** Conditions of the text that were used, in plain notation. */
  readonly stated: readonly string[];
  readonly point?: Point;
}

/**
 * Null where the text holds no differential equation, or a function at shifted arguments and no `unknown`. Three kinds:
 * - with initial values, or with `unknown`: the solution, in powers of the independent variable, or of another variable that is named (a small parameter);
 * - without both, and a `variable` that is not the independent one: the equation simplified in place, in that variable (often the unknown function itself);
 * - with neither and no variable: the solution with free constants, if the equation is linear in its unknown; else in place for a small unknown.
 */
function differentialQuestion(request: ExpandRequest, source: SourceFormula): Outcome<DifferentialQuestion> | null {
  const pieces = [source.formula ?? source.expression, ...source.conditions];
  if (request.unknown === undefined && pieces.some(hasShift)) return null;
  const named = request.variable === undefined ? null : source.readSymbol(request.variable);
  const variable = named?.ok ? named.value : undefined;
  const unknownRead = request.unknown === undefined ? null : source.readSymbol(request.unknown);
  const unknownTree = unknownRead?.ok ? unknownRead.value : null;
  const unknown = unknownTree?.kind === 'symbol' || unknownTree?.kind === 'apply' ? unknownTree.name : source.unknown;
  const asked = { ...(unknown === undefined ? {} : { unknown }), ...(variable?.kind === 'symbol' ? { variable: variable.name } : {}) };
  try {
    const first = differentialStatement(pieces, asked);
    if (!first) return null;
    const split = splitAssumptions(request.assume ?? [], first);
    if (!split.ok) return split;
    const whole = split.value.pieces.length > 0 ? differentialStatement([...pieces, ...split.value.pieces], asked) : first;
    if (!whole) return null;
    return questionOf(request, whole, { unknown, variable }, split.value.assumptions);
  } catch (error) {
    if (error instanceof Declined) return { ok: false, error: error.failure };
    throw error;
  }
}

/** A function at a shifted argument (`f(x+h)`, `y(t - \\tau)`): a difference formula, which is expanded in the shift. */
const hasShift = (piece: Expression): boolean => [...walk(piece)].some((e) => e.kind === 'apply' && e.args.some((a) => a.kind === 'sum' && freeSymbols(a).length > 0));

function questionOf(request: ExpandRequest, whole: DifferentialStatement, asked: { readonly unknown: string | undefined; readonly variable: Expression | undefined }, assumptions: readonly Assumption[]): Outcome<DifferentialQuestion> {
  const small = asked.variable ?? smallCondition(whole);
  const isUnknown = small?.kind === 'symbol' && whole.unknowns.some((u) => u.name === small.name);
  const independent = small === undefined || (small.kind === 'symbol' && small.name === whole.variable);
  const solving = asked.unknown !== undefined || whole.initial.length > 0;
  const kind = isUnknown && asked.unknown === undefined ? 'in-place' : solving ? (independent ? 'solution' : 'perturbation') : !independent ? 'in-place' : small === undefined && !isLinear(whole) ? 'in-place' : 'solution';
  const stated = statedConditions(whole.conditions, build.symbol(whole.variable));
  const statement: DifferentialStatement = {
    ...whole,
    equations: whole.equations.map((e) => withValues(e, stated)),
    initial: whole.initial.map((v) => ({ ...v, value: withValues(v.value, stated) })),
  };
  const point = request.point === undefined ? null : readPoint(request.point);
  if (point && !point.ok) return point;
  const [first] = whole.unknowns;
  const variable = independent && kind === 'in-place' && first ? build.symbol(first.name) : independent ? undefined : small;
  return success({
    statement,
    kind,
    assumptions: [...assumptions, ...stated.assumptions],
    stated: stated.used,
    ...(asked.unknown === undefined ? {} : { unknown: asked.unknown }),
    ...(variable ? { variable } : {}),
    ...(point ? { point: point.value } : {}),
  });
}

/** `\epsilon \ll 1` or `\epsilon \to 0` beside the equation. */
function smallCondition(statement: DifferentialStatement): Expression | undefined {
  for (const condition of statement.conditions) {
    if (condition.kind !== 'relation' || (condition.relations[0] !== 'll' && condition.relations[0] !== 'to')) continue;
    const [left] = condition.sides;
    const bare = left?.kind === 'call' && left.function === 'abs' ? left.args[0] : left;
    if (bare?.kind === 'symbol' && statement.equations.some((e) => freeSymbols(e).includes(bare.name))) return bare;
  }
  return undefined;
}

/** Whether functions and derivatives stand in sums and products only: nothing is left to be simplified in place. */
function isLinear(statement: DifferentialStatement): boolean {
  return statement.equations.every((equation) => [...walk(equation)].every((e) => e.kind !== 'call' || !freeSymbols(e).some(standsForUnknown)));
}

/** Initial values among the assumptions are part of the problem. */
function splitAssumptions(texts: readonly string[], statement: DifferentialStatement): Outcome<{ readonly pieces: readonly Expression[]; readonly assumptions: readonly Assumption[] }> {
  const names = new Set(statement.unknowns.map((u) => u.name));
  const pieces: Expression[] = [];
  const others: string[] = [];
  for (const text of texts) {
    const read = readAssumption(text);
    if (!read.ok) return failure('bad-request', `The assumption "${text}" cannot be read: ${read.error.message}`);
    const values = read.value.flatMap((a): Expression[] => (a.kind === 'relation' && a.relation === '=' ? [{ kind: 'relation', sides: [a.left, a.right], relations: ['='] }] : []));
    const speaks = values.some((v) => [...walk(v)].some((e) => (e.kind === 'apply' && names.has(e.name)) || (e.kind === 'symbol' && (names.has(e.name) || /^\\d{0,3}dot\{/.test(e.name)))));
    if (speaks) pieces.push(...values);
    else others.push(text);
  }
  const assumptions = readAllAssumptions(others);
  return assumptions.ok ? success({ pieces, assumptions: assumptions.value }) : assumptions;
}

/** The solution that the question asks for, with so many terms or to an order. */
function solutionOf(question: DifferentialQuestion, size: Size, time: Budget): Outcome<Expansion> {
  const { statement, assumptions, stated, unknown, point, variable } = question;
  if (question.kind === 'perturbation' && variable) {
    if (point !== undefined && !(typeof point === 'object' && point.kind === 'number' && point.value.num === 0n)) return failure('bad-request', 'A solution is expanded in a parameter that tends to 0; substitute a parameter that does.');
    return withStated(expandPerturbation({ statement, variable, assumptions, ...size }, time), stated);
  }
  return withStated(expandSolution({ statement, side: 'both', assumptions, ...(unknown === undefined ? {} : { unknown }), ...(point === undefined ? {} : { point }), ...size }, time), stated);
}

const withStated = (outcome: Outcome<Expansion>, stated: readonly string[]): Outcome<Expansion> =>
  outcome.ok && stated.length > 0 ? success({ ...outcome.value, assumptions: [...outcome.value.assumptions, ...stated] }) : outcome;

const UNPROVEN = 'no error bound is proven for the solution of a differential equation; interval, tolerance and at are left aside';

/** The answer to a text that holds a differential equation, or another equation that is to be simplified in place; null for every other text. */
export function equationAnswer(request: ExpandRequest, source: SourceFormula, size: Size, time: Budget): Outcome<ExpandAnswer> | null {
  const question = differentialQuestion(request, source);
  if (question && !question.ok) return question;
  if (question && question.value.kind !== 'in-place') {
    const found = solutionOf(question.value, size, time);
    if (!found.ok) return found;
    const answer = expansionAnswer(found.value);
    const left = request.interval !== undefined || request.tolerance !== undefined || request.at !== undefined ? [UNPROVEN] : [];
    const reading = request.details?.includes('reading') ? { reading: readingAnswer(request, source, found.value) } : {};
    return success({ ...answer, ...reading, assumptions: [...answer.assumptions, ...left] });
  }
  const formula = source.formula ?? source.expression;
  const named = request.variable === undefined ? null : source.readSymbol(request.variable);
  const variable = question?.value.variable ?? (named?.ok ? named.value : undefined);
  if (!variable || (!question && (source.unknown !== undefined || !isPlainEquation(request, formula, variable)))) return null;
  return inPlaceAnswer(request, formula, variable, size, time);
}

/**
 * Whether an equation without derivatives is to be simplified in place rather than a side of it expanded: it is set to zero, or the side that would be expanded
 * does not hold the variable, or functions of the variable stand on both sides that are not two ways to write one function. A name = formula stays a formula.
 */
function isPlainEquation(request: ExpandRequest, formula: Expression, variable: Expression): boolean {
  if (request.unknown !== undefined || formula.kind !== 'relation' || variable.kind !== 'symbol' || hasShift(formula)) return false;
  const [left, right] = formula.sides;
  if (!left || !right || formula.sides.length !== 2 || formula.relations[0] !== '=' || isTruncated(left) || isTruncated(right)) return false;
  const isZero = (e: Expression): boolean => e.kind === 'number' && e.value.num === 0n;
  const holds = (e: Expression): boolean => dependsOn(e, variable.name);
  if (isZero(left) || isZero(right)) return true;
  if (isBareName(left) && !(left.kind === 'symbol' && left.name === variable.name)) return false;
  if (holds(left) !== holds(right)) return !holds(functionOf(formula)) || holds(left);
  return holds(left) && request.selection === undefined && differSurely(left, right);
}

const TRIAL_BITS = 64;
/** Arguments of no special meaning: an identity holds at all of them. */
const TRIALS = [Q.rational(3, 7), Q.rational(9, 8), Q.rational(-2, 7), Q.rational(17, 6)];

/** Whether two sides have provably different values somewhere, every symbol taken as some number: then they are no two ways to write one function. */
function differSurely(left: Expression, right: Expression): boolean {
  const names = [...new Set([...freeSymbols(left), ...freeSymbols(right)])];
  return TRIALS.some((_, k) => {
    const values = new Map(names.map((name, i) => [name, real.fromRational(TRIALS[(k + i) % TRIALS.length] ?? Q.ONE, TRIAL_BITS)]));
    const [a, b] = [left, right].map((side) => encloseReal(side, values, TRIAL_BITS, describe));
    return a !== null && a !== undefined && b !== null && b !== undefined && !real.overlaps(a, b);
  });
}

