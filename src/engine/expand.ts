/** `expand`: text -> expansion, bound, terms needed, and the details asked for. */
import { dependsOn, type Expression, freeSymbols, literalRational, type Rational, structureKey } from '../expression/index.ts';
import { expand, expandRoot, expandSmall, isScalarFormula, type Expansion, type ExpansionProblem } from '../expand/index.ts';
import { type Budget, failure, type Outcome, success } from '../outcome.ts';
import type { ExpandAnswer, ExpandRequest, Failure } from '../protocol.ts';
import { readExact, readSmall } from '../read/index.ts';
import { readAllAssumptions } from './assumptions.ts';
import { withBounds } from './bounds.ts';
import { expansionAnswer } from './expansionAnswer.ts';
import { targetOf } from './conditions.ts';
import { equationAnswer } from './differential.ts';
import { filledConstants, measuredConstants, sourceOf } from './constants.ts';
import type { Expander } from './expander.ts';
import { equationOf, functionOf, pointOf, questionOf, readPoint, variableOf } from './question.ts';
import { insertionAnswer } from './insertion.ts';
import { integralAnswer } from './integralValue.ts';
import { readingAnswer } from './reading.ts';
import type { EngineTools } from './resources.ts';
import { candidatesOf, type SourceFormula } from './source.ts';

const DEFAULT_TERMS = 4;

/** How many terms, as the problem wants it. */
function extent(request: ExpandRequest): Outcome<{ readonly terms: number } | { readonly order: Rational }> {
  if (request.order === undefined) return success({ terms: request.terms ?? DEFAULT_TERMS });
  const read = readExact(String(request.order));
  const value = read.ok ? literalRational(read.value) : null;
  return value ? success({ order: value }) : failure('bad-request', `The order "${request.order}" must be a rational number such as 6 or 7/2.`);
}

function expanderOf(request: ExpandRequest, source: SourceFormula, time: Budget): Outcome<Expander> {
  const size = extent(request);
  if (!size.ok) return size;
  const run = (solve: (size: { readonly terms?: number; readonly order?: Rational }) => Outcome<Expansion>): Outcome<Expander> => {
    const first = solve(size.value);
    if (!first.ok) return first;
    return success({ first: first.value, withTerms: (terms) => solve({ terms }) });
  };
  if (request.small) return smallOf(request, request.small, source, run, time);
  if (request.unknown !== undefined || (source.unknown !== undefined && source.expression.kind === 'relation')) return rootOf(request, source, run, time);
  const question = questionOf(request, source);
  if (!question.ok) return question;
  const { stated, ...problem } = question.value;
  const withStated = (outcome: Outcome<Expansion>): Outcome<Expansion> =>
    outcome.ok && stated.length > 0 ? success({ ...outcome.value, assumptions: [...outcome.value.assumptions, ...stated.filter((s) => !outcome.value.assumptions.includes(s))] }) : outcome;
  // A hover asks for details but has no room for the radius; every other answer states it, and where no number of terms serves it is the reach.
  const radius = request.details === undefined || request.details.includes('ladder') || (request.tolerance !== undefined && request.interval !== undefined);
  return run((n) => withStated(expand({ ...problem, radius, ...n } satisfies ExpansionProblem, time)));
}

type Run = (solve: (size: { readonly terms?: number; readonly order?: Rational }) => Outcome<Expansion>) => Outcome<Expander>;

function smallOf(request: ExpandRequest, small: readonly string[], source: SourceFormula, run: Run, time: Budget): Outcome<Expander> {
  const read = readSmall(small);
  if (!read.ok) return read;
  const assumptions = readAllAssumptions(request.assume);
  if (!assumptions.ok) return assumptions;
  const points = new Map<string, Expression>();
  for (const [name, text] of Object.entries(request.points ?? {})) {
    const point = readExact(text);
    const symbol = source.readSymbol(name);
    if (!point.ok || !symbol.ok) return failure('bad-request', `The base point "${name}: ${text}" cannot be read; write a symbol and an exact value.`);
    points.set(structureKey(symbol.value), point.value);
  }
  const quantities = read.value.map(({ quantity, weight }) => {
    const point = points.get(structureKey(quantity));
    return { symbol: quantity, weight, ...(point ? { point } : {}) };
  });
  // `y << x`: larger quantities first.
  const below = (a: Expression, b: Expression): boolean => read.value.some((q) => structureKey(q.quantity) === structureKey(a) && q.below.some((other) => structureKey(other) === structureKey(b)));
  const iterated = read.value.some((q) => q.below.length > 0);
  const ordered = iterated ? [...quantities].sort((a, b) => (below(a.symbol, b.symbol) ? 1 : below(b.symbol, a.symbol) ? -1 : 0)) : quantities;
  return run((size) => expandSmall({ function: functionOf(source.expression), quantities: ordered, iterated, assumptions: assumptions.value, ...size }, time));
}

function rootOf(request: ExpandRequest, source: SourceFormula, run: Run, time: Budget): Outcome<Expander> {
  const name = request.unknown ?? source.unknown ?? '';
  const unknown = source.readSymbol(name);
  if (!unknown.ok) return failure('bad-request', `The unknown "${name}" cannot be read: ${unknown.error.message}`);
  if (source.expression.kind === 'relation' && source.expression.relations.some((r) => /^(?:[<>]=?|!=|ll|gg|propto)$/.test(r))) return failure('bad-request', 'An unknown is solved for in an equation; write an equals sign between its two sides.');
  const equation = equationOf(source.expression);
  const variable = variableOf(request, equation, { ...source, unknown: unknown.value.kind === 'symbol' ? unknown.value.name : name });
  if (!variable.ok) return variable;
  const told = targetOf(source.conditions, unknown.value);
  const near = request.near === undefined ? (told ? success(pointOf(told)) : null) : readPoint(request.near);
  if (near && !near.ok) return near;
  const assumptions = readAllAssumptions(request.assume);
  if (!assumptions.ok) return assumptions;
  const isSystem = source.conditions.some((c) => c.kind === 'relation' && c.relations.includes('=') && freeSymbols(unknown.value).some((n) => dependsOn(c, n)));
  if (isSystem) return failure('bad-request', 'More than one equation for the unknown stands here, and systems are not solved; eliminate the other unknowns and give one equation.');
  const problem = { equation, unknown: unknown.value, ...variable.value, side: request.side ?? 'both', assumptions: assumptions.value, complex: request.complex ?? false, ...(near ? { near: near.value } : {}) };
  return run((size) => expandRoot({ ...problem, ...size }, time));
}

export async function askExpand(request: ExpandRequest, tools: EngineTools, time: Budget): Promise<Outcome<ExpandAnswer>> {
  const source = await sourceOf(request, tools, 'symbols');
  if (!source.ok) return source;
  const value = integralAnswer(functionOf(source.value.expression), request, time);
  if (value) return value;
  const size = extent(request);
  if (!size.ok) return size;
  const equation = request.small ? null : equationAnswer(request, source.value, size.value, time);
  if (equation) return equation.ok ? equation : placed(equation.error, request, source.value);
  const expander = expanderOf(request, source.value, time);
  if (!expander.ok) return placed(expander.error, request, source.value);
  const found = expansionAnswer(expander.value.first);
  const answer = { ...found, assumptions: [...filledConstants(source.value), ...found.assumptions] };
  const reading = request.details?.includes('reading') ? { reading: readingAnswer(request, source.value, expander.value.first) } : {};
  const place = { document: request.text, language: request.language, expression: request.text.slice(source.value.start, source.value.end) };
  const insertion = request.details?.includes('insertion') ? { insertion: insertionAnswer(expander.value.first, place) } : {};
  const assumptions = readAllAssumptions(request.assume);
  if (!isScalarFormula(expander.value.first.function, assumptions.ok ? assumptions.value : [])) {
    const measured = request.interval !== undefined || request.tolerance !== undefined || request.at !== undefined;
    return measured ? failure('bad-request', 'Bounds and values are given for formulas in numbers; leave out the interval, or write vectors and operators by components.') : success({ ...answer, ...reading, ...insertion });
  }
  return withBounds({ ...answer, ...reading, ...insertion }, expander.value, request, measuredConstants(source.value), time);
}

/** In a document a failure names the place of the expression, and what it could be expanded in. */
function placed(error: Failure, request: ExpandRequest, source: SourceFormula): Outcome<never> {
  if (!request.selection) return { ok: false, error };
  const names = candidatesOf(source, functionOf(source.expression)).list.map((candidate) => candidate.name);
  return { ok: false, error: { start: source.start, end: source.end, ...error, ...(names.length > 0 ? { candidates: names } : {}) } };
}
