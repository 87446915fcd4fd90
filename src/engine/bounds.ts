/** Bound, terms needed, ladder, reach and value at an argument, added to an expansion's answer. */
import type { Assumption, Rational } from '../expression/index.ts';
import { boundRemainder, type ClosedInterval, ladder, leastTerm, type NeededProblem, reachFor, type RemainderBound, termsNeeded, type TermsNeeded, valueAt } from '../bound/index.ts';
import { type Expansion, prefix } from '../expand/index.ts';
import { Q } from '../expression/index.ts';
import { type Budget, failure, type Outcome, success } from '../outcome.ts';
import type { BoundAnswer, ExpandAnswer, ExpandRequest, LadderRow, NeededAnswer, ReachRow } from '../protocol.ts';
import { readExact } from '../read/index.ts';
import { remainderText, toPlain } from '../write/index.ts';
import { readAllAssumptions } from './assumptions.ts';
import type { MeasuredConstants } from './constants.ts';
import type { Expander } from './expander.ts';
import { plotAnswer } from './plot.ts';

/** Tolerance of the reverse question where none is given: common practice for plotting accuracy and single-digit percentages of parts per thousand. */
const DEFAULT_TOLERANCE = Q.rational(1, 1000);
const REACH_TERMS = [2, 3, 4];
const LADDER_ROWS = 8;

export function withBounds(answer: ExpandAnswer, expander: Expander, request: ExpandRequest, constants: MeasuredConstants, time: Budget): Outcome<ExpandAnswer> {
  const told = readAllAssumptions(request.assume);
  if (!told.ok) return told;
  const assumptions = [...told.value, ...constants.values];
  const interval = intervalOf(request);
  if (interval && !interval.ok) return interval;
  const tolerance = toleranceOf(request.tolerance);
  if (!tolerance.ok) return tolerance;
  const measure = request.measure ?? 'absolute';
  const details = new Set(request.details ?? []);
  const shared = { measure, assumptions, budget: time };
  let result: ExpandAnswer = answer;
  if (interval) {
    const bound = boundRemainder({ expansion: expander.first, interval: interval.value, ...shared });
    if (!bound.ok) return bound;
    result = { ...result, bound: boundAnswer(bound.value) };
    const problem: NeededProblem = { expansionWithTerms: expander.withTerms, interval: interval.value, ...shared };
    if (tolerance.value) {
      const needed = termsNeeded(problem, tolerance.value);
      if (!needed.ok) return needed;
      result = { ...result, needed: neededAnswer(needed.value) };
    }
    if (details.has('ladder')) {
      const rows = Math.max(LADDER_ROWS, Math.min(24, answer.terms.length + 2, 24));
      const found = ladder(problem, Math.max(rows, Math.min(24, (result.needed?.terms ?? 0) + 1)));
      if (found.ok) result = { ...result, ladder: found.value.map((entry): LadderRow => ({ terms: entry.terms, order: remainderText(entry.expansion), bound: entry.bound.value })) };
    }
    if (details.has('plot')) result = { ...result, plot: plotAnswer(expander.first, interval.value) };
  }
  if (details.has('reach')) result = { ...result, reach: reachRows(expander, REACH_TERMS, shared, tolerance.value ?? DEFAULT_TOLERANCE) };
  // A tolerance without an interval asks how far these terms serve; callers that name their details ask for the table instead.
  else if (tolerance.value && !interval && request.details === undefined) result = { ...result, reach: reachRows(expander, [expander.first.terms.length], shared, tolerance.value) };
  if (request.at !== undefined) {
    const argument = readExact(request.at);
    if (!argument.ok) return failure('bad-request', `The argument "${request.at}" cannot be read: ${argument.error.message}`);
    const value = valueAt(expander.first, argument.value, assumptions, time);
    if (!value.ok) return value;
    const { value: f, sum, error, percentage } = value.value;
    result = { ...result, at: { argument: toPlain(argument.value), function: middle(f), sum: middle(sum), error: middle(error), percent: percentage ? middle(percentage) : null, enclosures: value.value } };
    const least = expander.first.divergent ? leastTerm(expander.withTerms, argument.value, assumptions, time) : null;
    if (least?.ok && least.value) result = { ...result, leastTerm: least.value };
  }
  const measured = result.bound !== undefined || result.reach !== undefined || result.at !== undefined;
  return success(measured && constants.stated.length > 0 ? { ...result, assumptions: [...result.assumptions, ...constants.stated] } : result);
}

/** The common leading digits of an enclosure, for reading; the enclosure itself is in the answer beside it. */
const middle = ({ low, high }: { readonly low: string; readonly high: string }): string => (low === high ? low : Math.abs(Number(low)) < Math.abs(Number(high)) ? low : high);

function intervalOf(request: ExpandRequest): Outcome<ClosedInterval> | null {
  if (!request.interval) return null;
  const [lower, upper] = request.interval.map((end) => readExact(end));
  if (!lower?.ok || !upper?.ok) {
    const bad = !lower?.ok ? request.interval[0] : request.interval[1];
    return failure('bad-request', `The end "${bad}" of the interval cannot be read; write an exact value such as 1/2 or pi/4.`);
  }
  return success({ lower: lower.value, upper: upper.value });
}

function toleranceOf(value: number | string | undefined): Outcome<Rational | null> {
  if (value === undefined) return success(null);
  const exact = Q.fromDecimal(String(value).trim());
  return exact && exact.num > 0n ? success(exact) : failure('bad-request', `The tolerance "${value}" must be a positive number such as 1e-6.`);
}

function boundAnswer(bound: RemainderBound): BoundAnswer {
  return {
    value: bound.value,
    lower: bound.lower,
    method: bound.method,
    ...(bound.factor ? { factor: toPlain(bound.factor) } : {}),
    ...(bound.place ? { place: toPlain(bound.place) } : {}),
    proof: bound.proof,
  };
}

function neededAnswer(needed: TermsNeeded): NeededAnswer {
  return {
    terms: needed.terms,
    ...(needed.expansion ? { order: orderText(needed.expansion) } : {}),
    ...(needed.bound?.value ? { bound: needed.bound.value } : {}),
    ...(needed.minimal === undefined ? {} : { minimal: needed.minimal }),
    ...(needed.reason === undefined ? {} : { reason: needed.reason }),
    ...(needed.estimate === undefined ? {} : { estimate: needed.estimate }),
    ...(needed.best ? { best: needed.best } : {}),
    ...(needed.reach ? { reach: needed.reach } : {}),
    ...(needed.fittedDegree === undefined ? {} : { fittedDegree: needed.fittedDegree }),
  };
}

const orderText = (expansion: Expansion): string => (expansion.remainder?.power ? toPlain(expansion.remainder.power) : expansion.remainder ? remainderText(expansion) : 'exact');

function reachRows(expander: Expander, counts: readonly number[], shared: { readonly measure: 'absolute' | 'relative'; readonly assumptions: readonly Assumption[]; readonly budget: Budget }, tolerance: Rational): readonly ReachRow[] {
  const rows: ReachRow[] = [];
  for (const terms of counts) {
    // What was expanded already need only be cut.
    const expansion = terms < expander.first.terms.length ? success(prefix(expander.first, terms)) : terms === expander.first.terms.length ? success(expander.first) : expander.withTerms(terms);
    if (!expansion.ok) break;
    if (expansion.value.exact) {
      rows.push({ terms: expansion.value.terms.length, order: 'exact', distance: 'inf' });
      break;
    }
    const found = reachFor({ expansion: expansion.value, ...shared }, tolerance);
    rows.push({ terms, order: remainderText(expansion.value), distance: found.ok ? (found.value?.distance ?? null) : null });
  }
  return rows;
}
