/** What an expand request asks, as exact data: function, variable, point, side, assumptions. */
import { dependsOn, type Assumption, type Expression, freeSymbols, walk } from '../expression/index.ts';
import { failure, type Outcome, success } from '../outcome.ts';
import type { ExpandRequest, Side } from '../protocol.ts';
import { readExact } from '../read/index.ts';
import { toLatex } from '../write/index.ts';
import { readAllAssumptions } from './assumptions.ts';
import type { SourceFormula } from './source.ts';

export interface Question {
  readonly function: Expression;
  readonly variable: Expression;
  readonly point: Expression | 'inf' | '-inf';
  readonly side: Side;
  readonly assumptions: readonly Assumption[];
}

/** `0`, `inf`, `-inf` or an exact expression in plain or LaTeX notation. */
export function readPoint(text: string): Outcome<Expression | 'inf' | '-inf'> {
  const plain = text.replace(/\s/g, '');
  if (/^\+?(inf|infinity|oo|∞|\\infty)$/.test(plain)) return success('inf');
  if (/^[-−](inf|infinity|oo|∞|\\infty)$/.test(plain)) return success('-inf');
  return readExact(text);
}

const isTruncation = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'order' || n.kind === 'dots');
const isName = (e: Expression): boolean => e.kind === 'symbol' || e.kind === 'apply';

/** The side of a chain `T = f(x) \approx 1 + x` that is to be expanded: the first that is neither a mere name nor an expansion already. */
export function functionOf(formula: Expression): Expression {
  if (formula.kind !== 'relation') return formula;
  const worth = formula.sides.filter((side) => !isName(side));
  return worth.find((side) => !isTruncation(side)) ?? worth[0] ?? formula.sides[formula.sides.length - 1] ?? formula;
}

/** The equation lhs - rhs of a relation to be solved; a lone expression stands for expression = 0. */
export function equationOf(formula: Expression): Expression {
  if (formula.kind !== 'relation') return formula;
  const [left, right] = formula.sides;
  if (!left || !right) return formula;
  if (right.kind === 'number' && right.value.num === 0n) return left;
  return { kind: 'sum', terms: [left, { kind: 'negation', operand: right }] };
}

/** The variable named in the request, or the only symbol there is. */
export function variableOf(request: ExpandRequest, target: Expression, source: SourceFormula): Outcome<Expression> {
  if (request.variable !== undefined) {
    const read = source.readSymbol(request.variable);
    if (!read.ok) return failure('bad-request', `The variable "${request.variable}" cannot be read: ${read.error.message}`);
    return read;
  }
  const free = freeSymbols(target).filter((name) => name !== source.unknown);
  const [only] = free;
  if (free.length === 1 && only !== undefined) return success({ kind: 'symbol', name: only });
  if (free.length === 0) return failure('bad-request', 'This expression contains no symbol to expand in; choose one that does.');
  const [likely] = source.likely;
  if (source.likely.length === 1 && likely && freeSymbols(likely).every((name) => dependsOn(target, name))) return success(likely);
  return failure('bad-request', `This could be expanded in ${listed(free.map((name) => toLatex({ kind: 'symbol', name })))}; say in which one.`);
}

function listed(names: readonly string[]): string {
  const shown = names.slice(0, 8);
  const last = shown.pop() ?? '';
  return shown.length === 0 ? last : `${shown.join(', ')} or ${last}`;
}

export function questionOf(request: ExpandRequest, source: SourceFormula): Outcome<Question> {
  const target = functionOf(source.expression);
  const variable = variableOf(request, target, source);
  if (!variable.ok) return variable;
  const point = readPoint(request.point ?? '0');
  if (!point.ok) return failure('bad-request', `The point "${request.point ?? ''}" cannot be read: ${point.error.message}`);
  const assumptions = readAllAssumptions(request.assume);
  if (!assumptions.ok) return assumptions;
  return success({ function: target, variable: variable.value, point: point.value, side: request.side ?? 'both', assumptions: assumptions.value });
}
