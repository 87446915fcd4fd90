/** `expand`: text -> expansion, bound, terms needed, and the details asked for. */
import type { Expression, Rational } from '../expression/index.ts';
import { expand, type Expansion, type ExpansionProblem } from '../expand/index.ts';
import { type Budget, failure, type Outcome, success } from '../outcome.ts';
import type { ExpandAnswer, ExpandRequest } from '../protocol.ts';
import { rationalOf, readExact, readSmall } from '../read/index.ts';
import { readAllAssumptions } from './assumptions.ts';
import { withBounds } from './bounds.ts';
import { expansionAnswer } from './expansionAnswer.ts';
import { equationOf, functionOf, questionOf, readPoint, variableOf } from './question.ts';
import { insertionAnswer } from './insertion.ts';
import { readingAnswer } from './reading.ts';
import type { EngineTools } from './resources.ts';
import { type SourceFormula, sourceFormula } from './source.ts';

const DEFAULT_TERMS = 4;

/** How many terms, as the problem wants it. */
function extent(request: ExpandRequest): Outcome<{ readonly terms: number } | { readonly order: Rational }> {
  if (request.order === undefined) return success({ terms: request.terms ?? DEFAULT_TERMS });
  const read = readExact(String(request.order));
  const value = read.ok ? rationalOf(read.value) : null;
  return value ? success({ order: value }) : failure('bad-request', `The order "${request.order}" must be a rational number such as 6 or 7/2.`);
}

/** Finds the expansion with the number of terms asked for; also how to ask for another number. */
export interface Expander {
  readonly first: Expansion;
  readonly withTerms: (terms: number) => Outcome<Expansion>;
}

function expanderOf(request: ExpandRequest, source: SourceFormula, time: Budget): Outcome<Expander> {
  const size = extent(request);
  if (!size.ok) return size;
  const run = (solve: (size: { readonly terms?: number; readonly order?: Rational }) => Outcome<Expansion>): Outcome<Expander> => {
    const first = solve(size.value);
    if (!first.ok) return first;
    return success({ first: first.value, withTerms: (terms) => solve({ terms }) });
  };
  if (request.small || request.unknown !== undefined) return failure('undecided', 'Not in this build.');
  const question = questionOf(request, source);
  if (!question.ok) return question;
  return run((n) => expand({ ...question.value, ...n } satisfies ExpansionProblem, time));
}

export async function askExpand(request: ExpandRequest, tools: EngineTools, time: Budget): Promise<Outcome<ExpandAnswer>> {
  const source = await sourceFormula(request, tools);
  if (!source.ok) return source;
  const expander = expanderOf(request, source.value, time);
  if (!expander.ok) return expander;
  const answer = expansionAnswer(expander.value.first);
  const reading = request.details?.includes('reading') ? { reading: readingAnswer(request, source.value, expander.value.first) } : {};
  const place = { document: request.text, language: request.language, expression: request.text.slice(source.value.start, source.value.end) };
  const insertion = request.details?.includes('insertion') ? { insertion: insertionAnswer(expander.value.first, place) } : {};
  return withBounds({ ...answer, ...reading, ...insertion }, expander.value, request, time);
}

