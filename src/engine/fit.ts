/** `fit`: text -> a polynomial for a program, its proven error, and its code. */
import { termsNeeded } from '../bound/index.ts';
import { expand } from '../expand/index.ts';
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import { countOperations, estimatedSpeed, type Fit, fit, type FitProblem, type FloatFormat, formatByName, type SecondVariable } from '../fit/index.ts';
import { describe } from '../functions/index.ts';
import { budget, type Budget, failure, type Outcome, success } from '../outcome.ts';
import type { CoefficientAnswer, ExpandRequest, FitAnswer, FitPieceAnswer, FitReductionAnswer, FitRequest, FitSpeedAnswer } from '../protocol.ts';
import { codeLanguage as isCode, readExact } from '../read/index.ts';
import { encloseReal, real } from '../rigorous/index.ts';
import { hexFloat, shortestDecimal, toPlain } from '../write/index.ts';
import { withAssumedNumbers } from './conditions.ts';
import { filledConstants, sourceOf } from './constants.ts';
import { fitPlot } from './fitPlot.ts';
import { functionOf, variableOf } from './question.ts';
import type { EngineTools } from './resources.ts';
import type { SourceFormula } from './source.ts';

const DEFAULT_LANGUAGE = 'c';
/** Bits of an interval end that is no rational number; it is moved outward by its last one. */
const END_BITS = 192;
const DIGITS = 6;
/** Most of the time that the count of terms of a truncated expansion may take: it is a comparison beside the answer. Several times what the slowest series that converge need. */
const COMPARISON_MS = 2000;
/** Share of the request's time that it may take; the answer itself is there already. */
const COMPARISON_SHARE = 0.8;

export async function askFit(request: FitRequest, tools: EngineTools, time: Budget): Promise<Outcome<FitAnswer>> {
  const source = await sourceOf(request, tools, 'values');
  if (!source.ok) return source;
  const filled = withAssumedNumbers(functionOf(source.value.expression), request.assume, request.variable);
  if (!filled.ok) return filled;
  const target = filled.value.function;
  const variable = variableIn(request, target, source.value);
  if (!variable.ok) return variable;
  const problem = problemOf(request, target, variable.value, source.value);
  if (!problem.ok) return problem;
  const found = fit(problem.value, time);
  if (!found.ok) return found;
  return success(answerOf(found.value, problem.value, request, [...filledConstants(source.value), ...filled.value.used], time));
}

function variableIn(request: FitRequest, target: Expression, source: SourceFormula): Outcome<string> {
  const [named] = Object.keys(request.intervals ?? {});
  if (named !== undefined) {
    const read = source.readSymbol(named);
    return read.ok && read.value.kind === 'symbol' ? success(read.value.name) : failure('bad-request', `The variable "${named}" of the intervals cannot be read; write it as in the text.`);
  }
  const { text, language, variable } = request;
  const asked: ExpandRequest = { ask: 'expand', text, language, ...(variable === undefined ? {} : { variable }) };
  const found = variableOf(asked, target, source);
  if (!found.ok) return found.error.code === 'bad-request' ? failure('bad-request', found.error.message.replace('symbol to expand in', 'symbol to fit in').replace('could be expanded in', 'could be fitted in')) : found;
  const { variable: quantity } = found.value;
  return quantity.kind === 'symbol' ? success(quantity.name) : failure('bad-request', `A fit is made in one symbol, not in ${toPlain(quantity)}; write a new symbol for it.`);
}

/** The other variable of a function of two, with its interval; null where there is none. */
function secondOf({ intervals }: FitRequest, source: SourceFormula): Outcome<SecondVariable | null> {
  const [, entry] = Object.entries(intervals ?? {});
  if (!entry) return success(null);
  const [name, ends] = entry;
  const read = source.readSymbol(name);
  if (!read.ok || read.value.kind !== 'symbol') return failure('bad-request', `The variable "${name}" of the intervals cannot be read; write it as in the text.`);
  const low = intervalEnd(ends[0], -1);
  if (!low.ok) return low;
  const high = intervalEnd(ends[1], 1);
  if (!high.ok) return high;
  if (Q.compare(low.value, high.value) > 0) return failure('bad-request', `The interval of ${name} needs its smaller end first.`);
  return success({ variable: read.value.name, low: low.value, high: high.value, intervalText: [plainEnd(ends[0]), plainEnd(ends[1])] });
}

function problemOf(request: FitRequest, target: Expression, variable: string, source: SourceFormula): Outcome<FitProblem> {
  const second = secondOf(request, source);
  if (!second.ok) return second;
  const first = Object.values(request.intervals ?? {})[0] ?? request.interval;
  const low = intervalEnd(first[0], -1);
  if (!low.ok) return low;
  const high = intervalEnd(first[1], 1);
  if (!high.ok) return high;
  if (Q.compare(low.value, high.value) >= 0) return failure('bad-request', 'The interval of a fit needs two different ends, the smaller one first.');
  const tolerance = request.tolerance === undefined ? null : Q.fromDecimal(String(request.tolerance).trim());
  if (request.tolerance !== undefined && (!tolerance || tolerance.num <= 0n)) return failure('bad-request', `The tolerance "${request.tolerance}" must be a positive number such as 1e-6.`);
  if (tolerance && request.degree !== undefined) return failure('bad-request', 'Ask for a tolerance or for a degree, not for both.');
  if (!tolerance && request.degree === undefined) return failure('bad-request', 'A fit needs a tolerance (1e-6) or a degree.');
  const named = request.format ?? source.code?.format.format ?? 'binary64';
  const format = formatByName(named);
  if (!format) return failure('bad-request', `The format "${named}" is not known; choose binary32, binary64, binary16, bfloat16 or fixed:m.n.`);
  const language = request.emit ?? (isCode(request.language) ? request.language : DEFAULT_LANGUAGE);
  return success({
    function: target,
    variable,
    low: low.value,
    high: high.value,
    measure: request.measure ?? 'absolute',
    ...(tolerance ? { tolerance } : {}),
    ...(request.degree === undefined ? {} : { degree: request.degree }),
    format,
    language,
    form: request.form ?? 'horner',
    contraction: request.contraction ?? 'any',
    method: request.method ?? 'minimax',
    pieces: request.pieces ?? 1,
    ...(second.value ? { second: second.value } : {}),
    ...(request.assertion ? { assertion: true } : {}),
    ...(request.words ? { words: request.words } : {}),
    ...(request.reduction ? { reduction: request.reduction } : {}),
    intervalText: [plainEnd(first[0]), plainEnd(first[1])],
    ...(request.basis ? { basis: request.basis } : {}),
    ...(request.exact ? { exact: request.exact } : {}),
    ...(request.result ? { result: request.result } : {}),
  });
}

const plainEnd = (text: string): string => {
  const read = readExact(text);
  return read.ok ? toPlain(read.value) : text;
};

/** An exact end as a rational number; one that is irrational is moved outward by less than one part in 10^50. */
function intervalEnd(text: string, direction: 1 | -1): Outcome<Rational> {
  const read = readExact(text);
  if (!read.ok) return failure('bad-request', `The end "${text}" of the interval cannot be read; write an exact value such as 1/2 or pi/4.`);
  const exact = rationalOf(read.value);
  if (exact) return success(exact);
  const ball = encloseReal(read.value, new Map(), END_BITS, describe);
  if (!ball) return failure('bad-request', `The end "${text}" of the interval must be a finite real number.`);
  return success(direction < 0 ? real.lower(ball) : real.upper(ball));
}

const up = (q: Rational): string => real.rationalToDecimal(q, DIGITS, 1);

function coefficients(terms: Fit['terms'], format: FitProblem['format']): CoefficientAnswer[] {
  return terms.map(({ power, value }) =>
    format.kind === 'float'
      ? { power, value: shortestDecimal(value, format.name), hex: hexFloat(value, format.name) }
      : { power, value: real.rationalToDecimal(value, 40, 1), hex: integerHex(value, format.fractionBits) },
  );
}

/** The integer that stands for a fixed-point number. */
function integerHex(value: Rational, fractionBits: number): string {
  const scaled = (value.num << BigInt(fractionBits)) / value.den;
  return `${scaled < 0n ? '-' : ''}0x${(scaled < 0n ? -scaled : scaled).toString(16)}`;
}

function answerOf(found: Fit, problem: FitProblem, request: FitRequest, constants: readonly string[], time: Budget): FitAnswer {
  const { error } = found;
  return {
    ok: true,
    coefficients: coefficients(found.terms, found.format),
    degree: found.degree,
    bound: {
      approximation: up(error.approximation),
      rounding: up(error.rounding),
      evaluation: up(error.evaluation),
      total: up(error.total),
      method: found.method,
      measure: problem.measure,
      ...(error.subnormal ? { subnormal: up(error.subnormal) } : {}),
    },
    code: found.code.code,
    imports: found.code.imports,
    taylorDegree: problem.second ? null : taylorDegree(found, problem, request, time),
    assumptions: [...constants, ...found.assumptions],
    operations: countOperations(found.program),
    ...speedOf(found, problem),
    ...(found.reduction ? { reduction: reductionAnswer(found, found.reduction) } : {}),
    ...(found.arguments ? { arguments: asNamed(found.arguments, problem, request) } : {}),
    ...(request.details?.includes('plot') && !found.reduction ? { plot: fitPlot(found, problem, time) } : {}),
    ...centreOf(found.centre, found.format),
    ...(found.denominator ? { denominator: coefficients(found.denominator, found.format) } : {}),
    ...(found.pieces ? { pieces: found.pieces.map((piece): FitPieceAnswer => ({ from: endText(piece.low, problem.low, problem, 0), to: endText(piece.high, problem.high, problem, 1), coefficients: coefficients(piece.terms, found.format), degree: piece.degree, bound: up(piece.error.total), ...centreOf(piece.centre, found.format) })) } : {}),
  };
}

/** Variables under the names that the request gave them. */
function asNamed(variables: readonly string[], { variable }: FitProblem, { intervals }: FitRequest): string[] {
  const [first, other] = Object.keys(intervals ?? {});
  return variables.map((name) => (name === variable ? first : other) ?? name);
}

const centreOf = (centre: Rational, format: FitProblem['format']): { readonly centre?: string } => (Q.isZero(centre) ? {} : { centre: format.kind === 'float' ? shortestDecimal(centre, format.name) : up(centre) });

const reductionAnswer = ({ format }: Fit, { method, kernels }: NonNullable<Fit['reduction']>): FitReductionAnswer => ({
  method,
  kernels: kernels.map(({ function: f, low, high, terms, degree, centre }) => ({ function: toPlain(f), from: Q.toText(low), to: Q.toText(high), coefficients: coefficients(terms, format), degree, ...centreOf(centre, format) })),
});

function speedOf({ program, format }: Fit, problem: FitProblem): { readonly speed?: FitSpeedAnswer } {
  const speed = estimatedSpeed(problem.function, program, format.name, problem.language);
  return speed ? { speed } : {};
}

/** A cut as the shortest decimal of its float; an end of the whole interval as it was written. */
const endText = (end: Rational, whole: Rational, { intervalText, format }: FitProblem, k: 0 | 1): string =>
  Q.equal(end, whole) ? intervalText[k] : format.kind === 'float' ? shortestDecimal(end, format.name) : Q.toText(end);

/** Degree of the truncated expansion that keeps the same bound; null where none was proved to. */
function taylorDegree(found: Fit, problem: FitProblem, request: FitRequest, time: Budget): number | null {
  if (problem.method === 'taylor') return found.degree;
  const { low, high, measure, format } = problem;
  const tolerance = problem.tolerance ?? found.error.approximation;
  if (tolerance.num <= 0n) return null;
  const inside = Q.compare(low, found.centre) <= 0 && Q.compare(found.centre, high) <= 0;
  const asked = request.point === undefined ? null : readExact(request.point);
  const point = asked?.ok ? asked.value : build.number(inside ? found.centre : Q.divide(Q.add(low, high), Q.rational(2)));
  const short: Budget = budget(Math.min(COMPARISON_MS, Math.max(1, COMPARISON_SHARE * time.remaining())));
  const needed = termsNeeded(
    {
      expansionWithTerms: (terms) => expand({ function: problem.function, variable: build.symbol(problem.variable), point, side: 'both', assumptions: [], terms }, short),
      interval: { lower: build.number(low), upper: build.number(high) },
      measure: measure === 'absolute' ? 'absolute' : 'relative',
      assumptions: [],
      budget: short,
    },
    measure === 'ulp' ? Q.multiply(tolerance, relativeUlp(format)) : tolerance,
  );
  if (!needed.ok || needed.value.terms === null || !needed.value.expansion) return null;
  const powers = needed.value.expansion.terms.map((t) => rationalOf(t.power));
  if (!powers.every((p): p is Rational => p !== null && p.den === 1n && p.num >= 0n) || needed.value.expansion.terms.some((t) => t.log !== 0 || t.scale)) return null;
  return powers.reduce((most, p) => Math.max(most, Number(p.num)), 0);
}

/** One ulp relative to the value, at least. */
const relativeUlp = (format: FitProblem['format']): Rational => {
  const precision = (format as Partial<FloatFormat>).precision ?? 53;
  return Q.rational(1n, 1n << BigInt(precision));
};
