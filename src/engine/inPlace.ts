/** The answer for an equation simplified in place. */
import { boundRemainder, valueAt } from '../bound/index.ts';
import { type Assumption, build, type Expression, type Rational } from '../expression/index.ts';
import { type Expansion, type InPlace, simplifyInPlace } from '../expand/index.ts';
import { type Budget, failure, type Outcome, success } from '../outcome.ts';
import type { ExpandAnswer, ExpandRequest, NumericAnswer, ReplacedAnswer } from '../protocol.ts';
import { readExact } from '../read/index.ts';
import { expansionTree, NumericSymbols, toLatex, toMpmath, toPlain, toUnicode } from '../write/index.ts';
import { readAllAssumptions } from './assumptions.ts';
import { expansionAnswer } from './expansionAnswer.ts';
import { equationOf, readPoint } from './question.ts';

/** Leading terms that a function is replaced by where the request does not say how many. */
const LEADING_TERMS = 2;

export function inPlaceAnswer(request: ExpandRequest, formula: Expression, variable: Expression, size: { readonly terms?: number; readonly order?: Rational }, time: Budget): Outcome<ExpandAnswer> {
  const read = readAllAssumptions(request.assume);
  if (!read.ok) return read;
  const point = request.point === undefined ? success(build.number(0)) : readPoint(request.point);
  if (!point.ok) return point;
  const wanted = request.terms === undefined && request.order === undefined ? { terms: LEADING_TERMS } : size;
  const found = simplifyInPlace({ formula, variable, point: point.value, side: request.side ?? 'both', assumptions: read.value, ...wanted }, time);
  if (!found.ok) return found;
  const { replaced, formula: rebuilt } = found.value;
  const pieces: ReplacedAnswer[] = [];
  for (const piece of replaced) {
    const error = relativeError(request, piece.expansion, read.value, time);
    if (!error.ok) return error;
    pieces.push({ from: toLatex(piece.from), to: toLatex(expansionTree(piece.expansion)), ...(error.value ? { relativeError: error.value } : {}) });
  }
  const tree = rebuilt((expansion) => expansionTree(expansion));
  const assumptions = [...new Set(replaced.flatMap((r) => r.expansion.assumptions))];
  const [only] = replaced;
  const shown = { latex: toLatex(tree), text: toUnicode(tree), equation: toLatex(tree), replaced: pieces, assumptions };
  if (only && replaced.length === 1) return success({ ...expansionAnswer(only.expansion), ...shown });
  return success({ ok: true, terms: [], remainder: null, exact: replaced.every((r) => r.expansion.exact), numeric: residual(found.value, variable), ...shown });
}

/** Left side minus right side with the pieces replaced, and the size of what all of them leave out together. */
function residual(found: InPlace, variable: Expression): NumericAnswer {
  const symbols = new NumericSymbols();
  const sum = toMpmath(equationOf(found.formula((expansion) => expansionTree(expansion, 'none'))), symbols);
  const scales = found.replaced.map((r) => expansionAnswer(r.expansion).numeric.scale).filter((scale) => scale !== '0');
  symbols.nameOf(variable.kind === 'symbol' ? variable.name : toPlain(variable));
  return { syntax: 'mpmath', sum, scale: scales.length === 0 ? '0' : [...new Set(scales)].join(' + '), symbols: symbols.table() };
}

/** The proven supremum of |piece - replacement|/|piece| on the interval, and its value at the amplitude asked for; null where neither is asked. */
function relativeError(request: ExpandRequest, expansion: Expansion, assumptions: readonly Assumption[], budget: Budget): Outcome<NonNullable<ReplacedAnswer['relativeError']> | null> {
  if (request.interval === undefined && request.at === undefined) return success(null);
  let result: NonNullable<ReplacedAnswer['relativeError']> = {};
  if (request.at !== undefined) {
    const argument = readExact(request.at);
    if (!argument.ok) return failure('bad-request', `The argument "${request.at}" cannot be read: ${argument.error.message}`);
    const value = valueAt(expansion, argument.value, assumptions, budget);
    if (!value.ok) return value;
    result = { ...result, percent: value.value.percentage?.high ?? null };
  }
  if (request.interval !== undefined) {
    const [lower, upper] = request.interval.map((end) => readExact(end));
    if (!lower?.ok || !upper?.ok) return failure('bad-request', 'The ends of the interval cannot be read; write exact values such as -1/2 and 1/2.');
    const bound = boundRemainder({ expansion, interval: { lower: lower.value, upper: upper.value }, measure: 'relative', assumptions, budget });
    if (!bound.ok) return bound;
    result = { ...result, bound: bound.value.value, lower: bound.value.lower };
  }
  return success(result);
}
