/** `expand`: text -> expansion, bound, terms needed, and the details asked for. */
import { type Expression, Q } from '../expression/index.ts';
import { expand, expandRoot, expandSmall, type Expansion, type ExpansionProblem } from '../expand/index.ts';
import { type Budget, failure, type Outcome, success } from '../outcome.ts';
import type { ExpandAnswer, ExpandRequest } from '../protocol.ts';
import { readExact, readSmall } from '../read/index.ts';
import { withBounds } from './bounds.ts';
import { integralValue } from './integralValue.ts';
import { expansionAnswer } from './expansionAnswer.ts';
import { equationOf, functionOf, questionOf, readAllAssumptions, readPoint, variableOf } from './question.ts';
import { readingAnswer } from './reading.ts';
import type { EngineResources } from './resources.ts';
import { type SourceFormula, sourceFormula } from './source.ts';

const DEFAULT_TERMS = 4;

/** How many terms, as the problem wants it. */
function extent(request: ExpandRequest): Outcome<{ readonly terms: number } | { readonly order: ReturnType<typeof Q.rational> }> {
  if (request.order === undefined) return success({ terms: request.terms ?? DEFAULT_TERMS });
  const read = readExact(String(request.order));
  const value = read.ok ? rationalValue(read.value) : null;
  return value ? success({ order: value }) : failure('bad-request', `The order "${request.order}" must be a rational number such as 6 or 7/2.`);
}

function rationalValue(e: Expression): ReturnType<typeof Q.rational> | null {
  if (e.kind === 'number') return e.value;
  if (e.kind === 'negation') {
    const inner = rationalValue(e.operand);
    return inner && Q.negate(inner);
  }
  if (e.kind === 'quotient') {
    const [a, b] = [rationalValue(e.numerator), rationalValue(e.denominator)];
    return a && b && !Q.isZero(b) ? Q.divide(a, b) : null;
  }
  return null;
}

/** Finds the expansion with the number of terms asked for; also how to ask for another number. */
export interface Expander {
  readonly first: Expansion;
  readonly withTerms: (terms: number) => Outcome<Expansion>;
}

function expanderOf(request: ExpandRequest, source: SourceFormula, time: Budget): Outcome<Expander> {
  const size = extent(request);
  if (!size.ok) return size;
  const run = (solve: (size: { readonly terms?: number; readonly order?: ReturnType<typeof Q.rational> }) => Outcome<Expansion>): Outcome<Expander> => {
    const first = solve(size.value);
    if (!first.ok) return first;
    return success({ first: first.value, withTerms: (terms) => solve({ terms }) });
  };
  if (request.small) {
    const small = readSmall(request.small);
    if (!small.ok) return small;
    const assumptions = readAllAssumptions(request.assume);
    if (!assumptions.ok) return assumptions;
    const points: Record<string, Expression> = {};
    for (const [name, text] of Object.entries(request.points ?? {})) {
      const read = readExact(text);
      if (!read.ok) return failure('bad-request', `The base point "${text}" cannot be read: ${read.error.message}`);
      points[name] = read.value;
    }
    const target = functionOf(source.expression);
    return run((n) => expandSmall({ function: target, small: small.value, points, assumptions: assumptions.value, ...n }, time));
  }
  const unknown = request.unknown ?? source.unknown;
  if (unknown !== undefined && (request.unknown !== undefined || source.expression.kind === 'relation')) {
    const unknownSymbol = source.readSymbol(unknown);
    if (!unknownSymbol.ok) return failure('bad-request', `The unknown "${unknown}" cannot be read: ${unknownSymbol.error.message}`);
    const equation = equationOf(source.expression);
    const variable = variableOf(request, equation, { ...source, unknown: unknownSymbol.value.kind === 'symbol' ? unknownSymbol.value.name : unknown });
    if (!variable.ok) return variable;
    const point = readPoint(request.point ?? '0');
    if (!point.ok) return failure('bad-request', `The point "${request.point ?? ''}" cannot be read: ${point.error.message}`);
    const near = request.near === undefined ? null : readPoint(request.near);
    if (near && !near.ok) return failure('bad-request', `The value "${request.near ?? ''}" cannot be read: ${near.error.message}`);
    const assumptions = readAllAssumptions(request.assume);
    if (!assumptions.ok) return assumptions;
    return run((n) =>
      expandRoot(
        {
          equation,
          unknown: unknownSymbol.value,
          variable: variable.value,
          point: point.value,
          side: request.side ?? 'both',
          assumptions: assumptions.value,
          complex: request.complex ?? false,
          ...(near ? { near: near.value } : {}),
          ...n,
        },
        time,
      ),
    );
  }
  const question = questionOf(request, source);
  if (!question.ok) return question;
  return run((n) => expand({ ...question.value, ...n } satisfies ExpansionProblem, time));
}

export async function askExpand(request: ExpandRequest, resources: EngineResources, time: Budget): Promise<Outcome<ExpandAnswer>> {
  const source = await sourceFormula(request, resources);
  if (!source.ok) return source;
  const value = integralValue(request, source.value, time);
  if (value) return value;
  const expander = expanderOf(request, source.value, time);
  if (!expander.ok) return expander;
  const answer = expansionAnswer(expander.value.first);
  const reading = request.details?.includes('reading') ? { reading: readingAnswer(request, source.value, expander.value.first) } : {};
  return withBounds({ ...answer, ...reading }, expander.value, request, time);
}

