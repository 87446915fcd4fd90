/** What an expand request asks, as exact data: function, variable, point, side, assumptions. */
import type { Assumption, Expression, LimitNode } from '../expression/index.ts';
import { operatorNames } from '../expand/index.ts';
import { failure, type Outcome, success } from '../outcome.ts';
import type { ExpandRequest, Side } from '../protocol.ts';
import { principalSide, readExact } from '../read/index.ts';
import { toLatex } from '../write/index.ts';
import { readAllAssumptions } from './assumptions.ts';
import { statedConditions, withValues } from './conditions.ts';
import { candidatesOf, type SourceFormula } from './source.ts';

export type Point = Expression | 'inf' | '-inf';
export interface Question {
  readonly function: Expression;
  readonly variable: Expression;
  readonly point: Point;
  readonly side: Side;
  readonly assumptions: readonly Assumption[];
  /** Conditions of the text that were used, in plain notation. */
  readonly stated: readonly string[];
}

/** `0`, `inf`, `-inf` or an exact expression in plain or LaTeX notation. */
export function readPoint(text: string): Outcome<Point> {
  const plain = text.replace(/\s/g, '');
  if (/^\+?(inf|infinity|∞|\\infty)$/.test(plain)) return success('inf');
  if (/^[-−](inf|infinity|∞|\\infty)$/.test(plain)) return success('-inf');
  const read = readExact(text);
  return read.ok ? success(pointOf(read.value)) : failure('bad-request', `The point "${text}" cannot be read: ${read.error.message}`);
}

export function pointOf(e: Expression): Point {
  if (e.kind === 'constant' && e.name === 'infinity') return 'inf';
  if (e.kind === 'negation' && e.operand.kind === 'constant' && e.operand.name === 'infinity') return '-inf';
  return e;
}

/** The side of a chain `T = f(x) \approx 1 + x` that is to be expanded. */
export function functionOf(formula: Expression): Expression {
  if (formula.kind !== 'relation') return formula;
  return formula.sides[principalSide(formula) ?? formula.sides.length - 1] ?? formula;
}

/** The equation lhs - rhs of a relation to be solved; a lone expression stands for expression = 0. */
export function equationOf(formula: Expression): Expression {
  if (formula.kind !== 'relation') return formula;
  const [left, right] = formula.sides;
  if (!left || !right) return formula;
  if (right.kind === 'number' && right.value.num === 0n) return left;
  return { kind: 'sum', terms: [left, { kind: 'negation', operand: right }] };
}

/** The variable named in the request, or the one that the text leaves no doubt about, with the point that goes with it. */
export function variableOf(request: ExpandRequest, target: Expression, source: SourceFormula, assumptions: readonly Assumption[] = []): Outcome<{ readonly variable: Expression; readonly point: Point }> {
  const asked = request.point === undefined ? null : readPoint(request.point);
  if (asked && !asked.ok) return asked;
  if (request.variable !== undefined) {
    const read = source.readSymbol(request.variable);
    if (!read.ok) return failure('bad-request', `The variable "${request.variable}" cannot be read: ${read.error.message}`);
    return success({ variable: read.value, point: asked?.value ?? ZERO });
  }
  const { found, list } = candidatesOf(source, target);
  if (found && !isUnknown(found.variable.expression, source)) return success({ variable: found.variable.expression, point: asked?.value ?? pointOf(found.point) });
  const operators = operatorNames(target, assumptions);
  const isOperator = (e: Expression): boolean => (e.kind === 'symbol' || e.kind === 'vector') && operators.includes(e.name ?? '');
  const movable = list.filter((c) => !isUnknown(c.expression, source));
  const scalars = movable.filter((c) => !isOperator(c.expression));
  const others = scalars.length > 0 ? scalars : movable;
  const [only] = others;
  if (only && others.length === 1) return success({ variable: only.expression, point: asked?.value ?? ZERO });
  if (others.length === 0) return failure('bad-request', 'This expression contains no symbol to expand in; choose one that does.');
  return failure('bad-request', `This could be expanded in ${listed(others.map((c) => toLatex(c.expression)))}; say in which one.`);
}

const ZERO: Expression = { kind: 'number', value: { num: 0n, den: 1n } };
const isUnknown = (e: Expression, source: SourceFormula): boolean => e.kind === 'symbol' && e.name === source.unknown;

function listed(names: readonly string[]): string {
  const shown = names.slice(0, 8);
  const last = shown.pop() ?? '';
  return shown.length === 0 ? last : `${shown.join(', ')} or ${last}`;
}

/** A limit is the leading term at its target: `0^+` and `0^-` tell the side. */
function limitQuestion(request: ExpandRequest, limit: LimitNode): Outcome<Question> {
  const assumptions = readAllAssumptions(request.assume);
  if (!assumptions.ok) return assumptions;
  const { target } = limit;
  const mark = target.kind === 'power' && target.exponent.kind === 'symbol' ? target.exponent.name : null;
  const sided = target.kind === 'power' && (mark === '+' || mark === '-') ? target.base : target;
  const side = mark === '+' ? 'right' : mark === '-' ? 'left' : (request.side ?? 'both');
  return success({ function: limit.body, variable: limit.variable, point: pointOf(sided), side, assumptions: assumptions.value, stated: [] });
}

export function questionOf(request: ExpandRequest, source: SourceFormula): Outcome<Question> {
  const written = functionOf(source.expression);
  if (written.kind === 'limit' && request.variable === undefined) return limitQuestion(request, written);
  const target = written;
  const assumptions = readAllAssumptions(request.assume);
  if (!assumptions.ok) return assumptions;
  const variable = variableOf(request, target, source, assumptions.value);
  if (!variable.ok) return variable;
  const stated = statedConditions(source.conditions, variable.value.variable);
  return success({
    function: withValues(target, stated),
    ...variable.value,
    side: request.side ?? 'both',
    assumptions: [...assumptions.value, ...stated.assumptions],
    stated: stated.used,
  });
}
