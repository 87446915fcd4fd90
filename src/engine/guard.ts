/** `guard`: text -> an accurate replacement for an expression that cancels or is 0/0 near a point, its proof, and its code. */
import { type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import { formatByName } from '../fit/index.ts';
import { describe } from '../functions/index.ts';
import { decimal, guard, type Guarded, type GuardProblem } from '../guard/index.ts';
import { type Budget, failure, type Outcome, success } from '../outcome.ts';
import type { ExpandRequest, GuardAnswer, GuardRequest } from '../protocol.ts';
import { codeLanguage as isCode, readExact } from '../read/index.ts';
import { encloseReal, real } from '../rigorous/index.ts';
import { codeLanguage, shortestDecimal, toPlain } from '../write/index.ts';
import { withAssumedNumbers } from './conditions.ts';
import { filledConstants, sourceOf } from './constants.ts';
import { libraryPrefix } from './insertion.ts';
import { functionOf, type Point, readPoint, variableOf } from './question.ts';
import type { EngineTools } from './resources.ts';
import type { SourceFormula } from './source.ts';

const DEFAULT_LANGUAGE = 'c';
/** Bits of an interval end that is no rational number; it is moved outward by its last one. */
const END_BITS = 192;

export async function askGuard(request: GuardRequest, tools: EngineTools, time: Budget): Promise<Outcome<GuardAnswer>> {
  const source = await sourceOf(request, tools, 'values');
  if (!source.ok) return source;
  const filled = withAssumedNumbers(functionOf(source.value.expression), request.assume, request.variable);
  if (!filled.ok) return filled;
  const target = filled.value.function;
  const place = placeOf(request, target, source.value);
  if (!place.ok) return place;
  const problem = problemOf(request, target, place.value, source.value);
  if (!problem.ok) return problem;
  const found = guard(problem.value, time);
  if (!found.ok) return found;
  const answer = answerOf(found.value, problem.value);
  return success({ ...answer, assumptions: [...filledConstants(source.value), ...filled.value.used, ...answer.assumptions] });
}

function placeOf(request: GuardRequest, target: Expression, source: SourceFormula): Outcome<{ readonly variable: string; readonly point: Rational | 'inf' | '-inf' }> {
  const { text, language, variable, point } = request;
  const asked: ExpandRequest = { ask: 'expand', text, language, ...(variable === undefined ? {} : { variable }), ...(point === undefined ? {} : { point }) };
  const found = variableOf(asked, target, source);
  if (!found.ok) return found.error.code === 'bad-request' ? failure('bad-request', found.error.message.replace('symbol to expand in', 'symbol to guard').replace('could be expanded in', 'could be guarded in')) : found;
  if (found.value.variable.kind !== 'symbol') return failure('bad-request', `A guard is made for one symbol, not for ${toPlain(found.value.variable)}; write a new symbol for it.`);
  const exact = pointOf(found.value.point);
  return exact === null ? failure('bad-request', 'A guard needs a point that is a rational number, such as 0 or 1, or inf; choose the nearest number of the format.') : success({ variable: found.value.variable.name, point: exact });
}

const pointOf = (p: Point): Rational | 'inf' | '-inf' | null => (p === 'inf' || p === '-inf' ? p : rationalOf(p));

function problemOf(request: GuardRequest, target: Expression, { variable, point }: { readonly variable: string; readonly point: Rational | 'inf' | '-inf' }, source: SourceFormula): Outcome<GuardProblem> {
  const language = request.emit ?? (isCode(request.language) ? request.language : DEFAULT_LANGUAGE);
  const row = codeLanguage(language);
  const named = request.format ?? source.code?.format.format ?? (row && !row.calls.binary64 ? 'binary32' : 'binary64');
  const format = formatByName(named);
  if (!format) return failure('bad-request', `The format "${named}" is not known; choose binary32 or binary64.`);
  if (format.kind !== 'float') return failure('bad-request', 'A guard is made for a floating-point format; choose binary32 or binary64.');
  const tolerance = request.tolerance === undefined ? null : Q.fromDecimal(String(request.tolerance).trim());
  if (request.tolerance !== undefined && (!tolerance || tolerance.num <= 0n)) return failure('bad-request', `The tolerance "${request.tolerance}" must be a positive number such as 1e-6.`);
  const interval = intervalOf(request.interval);
  if (!interval.ok) return interval;
  return success({
    function: target,
    variable,
    point,
    ...(interval.value ? { interval: interval.value } : {}),
    ...(request.interval ? { intervalText: [plainEnd(request.interval[0]), plainEnd(request.interval[1])] } : {}),
    format,
    language,
    library: request.library ?? 1,
    ...libraryPrefix(request.text.slice(source.start, source.end), request.text, language),
    ...(tolerance ? { tolerance } : {}),
    ...(request.derivative ? { derivative: true } : {}),
  });
}

const plainEnd = (text: string): string => {
  const read = readExact(text);
  return read.ok ? toPlain(read.value) : text;
};

function intervalOf(ends: readonly [string, string] | undefined): Outcome<{ readonly low: Rational | null; readonly high: Rational | null } | null> {
  if (!ends) return success(null);
  const low = intervalEnd(ends[0], -1);
  if (!low.ok) return low;
  const high = intervalEnd(ends[1], 1);
  if (!high.ok) return high;
  return success({ low: low.value, high: high.value });
}

/** An exact end as a rational number, null for an infinite one on its own side; one that is irrational is moved outward by less than one part in 10^50. */
function intervalEnd(text: string, direction: 1 | -1): Outcome<Rational | null> {
  const read = readPoint(text);
  if (!read.ok) return failure('bad-request', `The end "${text}" of the interval cannot be read; write an exact value such as 1/2, pi/4 or inf.`);
  if (read.value === 'inf' || read.value === '-inf') return (read.value === 'inf') === direction > 0 ? success(null) : failure('bad-request', 'The interval needs two different ends, the smaller one first.');
  const exact = rationalOf(read.value);
  if (exact) return success(exact);
  const ball = encloseReal(read.value, new Map(), END_BITS, describe);
  if (!ball) return failure('bad-request', `The end "${text}" of the interval must be a real number or inf.`);
  return success(direction < 0 ? real.lower(ball) : real.upper(ball));
}

function answerOf(found: Guarded, { format, tolerance }: Pick<GuardProblem, 'format' | 'tolerance'>): GuardAnswer {
  const kept = tolerance === undefined || Q.compare(Q.fromDouble(found.bound.whole), tolerance) <= 0;
  const shown = (x: number | null): string | null => (x === null ? null : decimal(x));
  return {
    ok: true,
    forms: found.forms.map((f) => ({ text: f.text, bound: decimal(f.bound), identities: f.identities })),
    ranges: found.ranges.map((r) => ({ ...r, bound: decimal(r.bound) })),
    switch: found.switch && shortestDecimal(found.switch, format.name),
    terms: found.terms,
    bound: { series: shown(found.bound.series), direct: shown(found.bound.direct), whole: decimal(found.bound.whole) },
    code: found.code,
    imports: found.imports,
    assumptions: kept ? found.assumptions : [...found.assumptions, 'the tolerance is not reached in this format: the bound shown is the least that was proved'],
    interval: found.interval,
    format: format.name,
    ...(found.derivative ? { derivative: answerOf(found.derivative, { format }) } : {}),
  };
}
