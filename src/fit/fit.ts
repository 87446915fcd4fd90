/** A fit as asked for: the polynomial, the program in the target language, what was proved, what was assumed. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { attempt, budget as newBudget, type Budget, Declined, type Outcome } from '../outcome.ts';
import { real } from '../rigorous/index.ts';
import { codeLanguage, parameterIn, type PolynomialTerm, type Statement, toPlain } from '../write/index.ts';
import { codeFormat, type FitCodeText, fitCode, functionName, fusing, machineArithmetic, type ParameterRange, rowFor, wholeFunction } from './code.ts';
import { fixedCode, requireIntegers } from './fixedCode.ts';
import { fitFixedPoint } from './fixedFit.ts';
import type { FixedFormat, FloatFormat, NumberFormat } from './format.ts';
import { fitRational } from './rationalFit.ts';
import { splitFit } from './pieces.ts';
import { type PolynomialFit, fitPolynomial, type PolynomialProblem } from './polynomialFit.ts';
import type { Program } from './program.ts';
import type { FitMeasure, ProvedError } from './proof.ts';
import { LOCALS, needsHighDegree, notReducible, PAIR_LOCALS, recognisePair, reducePair, type Reduced, reduce, reducible, type ReductionProblem } from './reduce/index.ts';
import type { Basis } from './search.ts';
import { filledLines } from './wrap.ts';

export interface FitProblem {
  readonly function: Expression;
  readonly variable: string;
  /** Rational ends; irrational ones are rounded outward by the caller. */
  readonly low: Rational;
  readonly high: Rational;
  readonly measure: FitMeasure;
  /** Exactly one of the two; a tolerance is in the measure. */
  readonly tolerance?: Rational;
  readonly degree?: number;
  readonly format: NumberFormat;
  /** Target language of the code. */
  readonly language: string;
  readonly form: 'horner' | 'estrin';
  readonly contraction: 'any' | 'none' | 'fma';
  readonly method: 'minimax' | 'taylor' | 'economized' | 'rational';
  readonly pieces: number | 'auto';
  readonly basis?: Basis;
  /** Leading coefficients of the expansion at 0 that are kept as they are; 0 must lie in the interval. */
  readonly exact?: number;
  /** Floats that the leading coefficient is the sum of (two terms of one power); absent: two where the tolerance is not kept with one. */
  readonly words?: 1 | 2;
  /** Whether the argument is reduced first: `auto` (default) where a plain polynomial would need a high degree for the tolerance; the degree asked for is then that on the small interval. */
  readonly reduction?: 'auto' | 'none' | 'always';
  /** How the interval is written in the comment. */
  readonly intervalText: readonly [string, string];
  readonly result?: 'function' | 'expression';
  /** The function asserts that its arguments lie in the interval. */
  readonly assertion?: boolean;
  /** Of hypot(x, y) and atan2(y, x): the other variable; `variable` is either of the two. */
  readonly second?: SecondVariable;
}

export interface SecondVariable {
  readonly variable: string;
  readonly low: Rational;
  readonly high: Rational;
  readonly intervalText: readonly [string, string];
}

export interface Fit {
  readonly terms: readonly PolynomialTerm[];
  /** Of a rational form; its numerator is `terms`. */
  readonly denominator?: readonly PolynomialTerm[];
  readonly format: NumberFormat;
  readonly degree: number;
  /** The polynomial is in x - centre. */
  readonly centre: Rational;
  readonly program: Program;
  readonly error: ProvedError;
  /** In ascending order where the interval was split; `terms`, `centre` and `program` are then those of the first one, `error` and `degree` the largest. */
  readonly pieces?: readonly PieceFit[];
  /** Where the argument is reduced first: how, and the polynomials on the small interval in r; `terms` and `centre` are those of the first one. */
  readonly reduction?: { readonly method: string; readonly kernels: readonly KernelFit[] };
  /** Of a function of two variables: these in the order of the function's parameters. */
  readonly arguments?: readonly string[];
  /** How it was proved, in words. */
  readonly method: string;
  readonly code: FitCodeText;
  readonly assumptions: readonly string[];
}

/** One part of a split interval, both ends inclusive. */
export interface PieceFit {
  readonly low: Rational;
  readonly high: Rational;
  readonly terms: readonly PolynomialTerm[];
  readonly degree: number;
  readonly centre: Rational;
  readonly error: ProvedError;
}

/** A polynomial in r, the reduced argument: what it stands for (an expression in r) and where. */
export interface KernelFit {
  readonly function: Expression;
  readonly low: Rational;
  readonly high: Rational;
  readonly terms: readonly PolynomialTerm[];
  readonly degree: number;
  readonly centre: Rational;
}

/** Fails with bad-request (what cannot be fitted and why), undecided (nothing could be proved), over-budget. */
export const fit = (problem: FitProblem, budget: Budget): Outcome<Fit> => attempt(() => fitted(problem, budget));

function fitted(problem: FitProblem, budget: Budget): Fit {
  const { format, language, contraction, method } = problem;
  const row = rowFor(language);
  if (format.kind === 'fixed') return fixedPoint(problem, format, budget);
  const written = codeFormat(language, format);
  const fused = contraction === 'fma' ? fusing(language, written) : 'never';
  if (contraction === 'fma' && fused === 'never') throw new Declined('bad-request', `${row.title} has no fused multiply-add; ask for the contraction any or none.`);
  const shared = { ...problem, format, ...withOperations(language, format), fma: fused === 'exactly', writtenFma: contraction === 'fma' };
  if (method === 'rational') return rational(problem, { ...shared, method: 'minimax' }, format, budget);
  const whole: PolynomialProblem = { ...shared, method };
  if (problem.second) return pair(problem, problem.second, whole, written, budget);
  const { reduction = 'auto' } = problem;
  if (reduction === 'always' && (problem.pieces !== 1 || problem.result === 'expression')) throw new Declined('bad-request', 'Reduced arguments are written as one function; leave pieces and result out.');
  if (reduction === 'none' || problem.pieces !== 1 || problem.result === 'expression') return plain(problem, whole, written, budget);
  const asked: ReductionProblem = { whole, row, parameter: LOCALS.includes(parameterName(problem)) ? 'x' : parameterName(problem) };
  const shape = reducible(asked);
  const viaReduction = (time: Budget): Fit => {
    if (!shape) throw notReducible();
    return reducedFit(problem, [asked.parameter], whole, reduce(asked, shape, time), written);
  };
  if (reduction === 'always') return viaReduction(budget);
  const viaPolynomial = (time: Budget): Fit => plain(problem, whole, written, time);
  if (!shape || !problem.tolerance || problem.basis || problem.exact) return viaPolynomial(budget);
  return needsHighDegree(asked, budget) ? firstOf(viaReduction, viaPolynomial, budget) : firstOf(viaPolynomial, viaReduction, budget);
}

type Way = (time: Budget) => Fit;
/** Share of the time left that the second way may take: it is mostly declined as well. */
const SECOND_SHARE = 0.3;

/** The first way that is not declined; the reason of the first where neither is open. */
function firstOf(way: Way, other: Way, time: Budget): Fit {
  try {
    return way(time);
  } catch (declined) {
    if (!(declined instanceof Declined) || declined.failure.code === 'over-budget' || declined.failure.code === 'needs-assumption') throw declined;
    try {
      return other(newBudget(SECOND_SHARE * time.remaining(), () => -time.remaining(), () => (time.check(), false)));
    } catch (second) {
      if (second instanceof Declined) throw declined;
      throw second;
    }
  }
}

function pair(problem: FitProblem, second: SecondVariable, whole: PolynomialProblem, written: FloatFormat, budget: Budget): Fit {
  const found = recognisePair(problem.function);
  if (!found || ![problem.variable, second.variable].every((v) => found.variables.includes(v))) throw new Declined('bad-request', 'Functions of two variables are fitted for hypot(x, y), sqrt(x^2 + y^2) and atan2(y, x); give values for the other symbols.');
  if (whole.method !== 'minimax' || problem.reduction === 'none' || problem.pieces !== 1 || problem.result === 'expression' || (whole.format.name !== 'binary32' && whole.format.name !== 'binary64')) throw new Declined('bad-request', 'Functions of two variables are fitted by reduction, as one function in binary32 or binary64; leave method, reduction, pieces and result out.');
  const boxes = found.variables.map((v) => (v === problem.variable ? { low: problem.low, high: problem.high } : { low: second.low, high: second.high }));
  const names = found.variables.map((v) => parameterIn(v, rowFor(problem.language))).map((v) => (/^[A-Za-z][A-Za-z0-9]*$/.test(v) && !rowFor(problem.language).reserved.includes(v) && !PAIR_LOCALS.includes(v) ? v : null));
  const [a, b] = boxes;
  const [first, other] = names.every((n) => n !== null) && names[0] !== names[1] ? names : found.kind === 'hypot' ? ['x', 'y'] : ['y', 'x'];
  if (!a || !b || !first || !other) throw new RangeError('two variables');
  const reduced = reducePair({ kind: found.kind, whole, row: rowFor(problem.language), parameters: [first, other], boxes: [a, b] }, budget);
  return { ...reducedFit(problem, [first, other], whole, reduced, written, found.kind), arguments: found.variables };
}

function reducedFit(problem: FitProblem, parameters: readonly string[], whole: PolynomialProblem, { kernels, body, error, method }: Reduced, written: FloatFormat, word?: string): Fit {
  const row = rowFor(problem.language);
  const [first] = kernels;
  if (!first) throw new RangeError('no polynomial');
  const { format } = whole;
  const assumptions = assumptionsOf(problem, format);
  const comment = commentOf(problem, format, error, assumptions, `By reduction: ${method}.`);
  const code = wholeFunction({ name: functionName(word === undefined ? wordsFor(problem.function) : [word, 'approximation'], row.id), parameters, body, language: problem.language, format: written, comment, ...rangesOf(problem, parameters) });
  const list = kernels.map(({ function: f, low, high, found }): KernelFit => ({ function: f, low, high, terms: found.terms, degree: found.degree, centre: found.centre }));
  return {
    terms: first.found.terms,
    format,
    degree: Math.max(...list.map((k) => k.degree)),
    centre: first.found.centre,
    program: asProgram(body),
    error,
    reduction: { method, kernels: list },
    method: `${methodText(problem)}; error of the reduced argument and of the reconstruction included (${method})`,
    code,
    assumptions,
  };
}

/** The statements of the longest way through a body as steps: for counting operations. */
function asProgram(body: readonly Statement[]): Program {
  const steps = body.flatMap((s) => (s.kind === 'let' ? [{ name: s.name, value: s.value }] : []));
  const last = body.at(-1);
  return { steps, result: last?.kind === 'return' ? last.value : build.number(0) };
}

function plain(problem: FitProblem, whole: PolynomialProblem, written: FloatFormat, budget: Budget): Fit {
  const { language, format: named } = problem;
  if (named.kind === 'fixed') throw new RangeError('fixed point has its own way');
  const format: FloatFormat = named;
  const parts = problem.pieces === 1 ? [{ low: problem.low, high: problem.high, found: fitPolynomial(whole, budget) }] : splitFit(whole, problem.pieces, budget);
  const [first] = parts;
  if (!first) throw new RangeError('no part was fitted');
  const error = parts.map((p) => p.found.error).reduce(worse);
  const assumptions = assumptionsOf(problem, format);
  const variable = parameterName(problem);
  const programOf = ({ writtenProgram }: PolynomialFit): Program => (variable === problem.variable ? writtenProgram : renamed(writtenProgram, problem.variable, variable));
  const comment = commentOf(problem, format, error, assumptions);
  const code = fitCode({
    branches: parts.map(({ high, found }) => ({ below: high, program: programOf(found) })),
    variable,
    language,
    format: written,
    name: functionName(wordsFor(problem.function), language),
    comment,
    expression: problem.result === 'expression',
    ...rangesOf(problem, [variable]),
  });
  const degree = Math.max(...parts.map((p) => p.found.degree));
  const pieces = parts.length === 1 ? {} : { pieces: parts.map(({ low, high, found }) => ({ low, high, terms: found.terms, degree: found.degree, centre: found.centre, error: found.error })) };
  return { terms: first.found.terms, format, degree, centre: first.found.centre, program: first.found.writtenProgram, error, ...pieces, method: methodText(problem), code, assumptions };
}

/** The variable where it is an identifier of the language, else x. */
function parameterName({ variable, language }: FitProblem): string {
  const name = parameterIn(variable, rowFor(language));
  return /^[A-Za-z][A-Za-z0-9]*$/.test(name) && !rowFor(language).reserved.includes(name) ? name : 'x';
}

function rational(problem: FitProblem, shared: PolynomialProblem, format: FloatFormat, budget: Budget): Fit {
  if (problem.pieces !== 1) throw new Declined('bad-request', 'Rational functions are fitted on one interval; ask for each piece by itself.');
  const { language } = problem;
  const found = fitRational(shared, budget);
  const assumptions = assumptionsOf(problem, format);
  const variable = parameterName(problem);
  const program = variable === problem.variable ? found.writtenProgram : renamed(found.writtenProgram, problem.variable, variable);
  const comment = commentOf(problem, format, found.error, assumptions);
  const code = fitCode({ branches: [{ below: problem.high, program }], variable, language, format: codeFormat(language, format), name: functionName(wordsFor(problem.function), language), comment, expression: problem.result === 'expression', ...rangesOf(problem, [variable]) });
  return { terms: found.numerator, denominator: found.denominator, format, degree: found.degree, centre: found.centre, program: found.writtenProgram, error: found.error, method: methodText(problem), code, assumptions };
}

function fixedPoint(problem: FitProblem, format: FixedFormat, budget: Budget): Fit {
  const { language } = problem;
  requireIntegers(language, format);
  if (problem.assertion) throw new Declined('bad-request', 'Fixed-point code is written without an assertion; leave the assertion out.');
  if (problem.method !== 'minimax') throw new Declined('bad-request', 'Fixed-point coefficients are fitted by the method minimax only; leave the method out.');
  if (problem.pieces !== 1) throw new Declined('bad-request', 'Fixed-point fits are made on one interval; ask for each piece by itself.');
  if (problem.result === 'expression') throw new Declined('bad-request', 'Fixed-point code is a function with a helper; ask for the result function.');
  const found = fitFixedPoint(problem, format, budget);
  const { fractionBits: n, integerBits: m } = format;
  const assumptions = [`argument and result are integers that stand for multiples of 2^-${n}`, 'a right shift of a negative number rounds down', `no value overflows: proved for every intermediate result (|value| < 2^${m})`];
  const variable = /^[a-z][A-Za-z0-9]*$/.test(problem.variable) && !['a', 'b'].includes(problem.variable) ? problem.variable : 'x';
  const program = variable === problem.variable ? found.program : renamed(found.program, problem.variable, variable);
  const code = fixedCode(program, variable, format, language, functionName(wordsFor(problem.function), language), commentOf(problem, { name: `fixed point with ${n} bits behind the point`, argument: `multiple of 2^-${n}` }, found.error, assumptions));
  return { terms: found.terms, format, degree: found.degree, centre: Q.ZERO, program, error: found.error, method: methodText(problem), code, assumptions };
}

/** What the code asserts of its parameters, where that was asked for; of two, in the order of the function's arguments. */
function rangesOf(problem: FitProblem, parameters: readonly string[]): { readonly ranges?: readonly ParameterRange[] } {
  if (!problem.assertion) return {};
  const { second } = problem;
  const swapped = second && recognisePair(problem.function)?.variables[0] === second.variable;
  const quantities = second ? (swapped ? [second, problem] : [problem, second]) : [problem];
  return { ranges: quantities.map(({ low, high, intervalText }, k) => ({ name: parameters[k] ?? 'x', low, high, text: `[${intervalText.join(', ')}]` })) };
}

const greater = (a: Rational, b: Rational): Rational => (Q.compare(a, b) >= 0 ? a : b);
/** The larger of each part; the total is that of the worst piece. */
function worse(a: ProvedError, b: ProvedError): ProvedError {
  return {
    approximation: greater(a.approximation, b.approximation),
    rounding: greater(a.rounding, b.rounding),
    evaluation: greater(a.evaluation, b.evaluation),
    total: greater(a.total, b.total),
    lower: greater(a.lower, b.lower),
    subnormal: a.subnormal && b.subnormal ? greater(a.subnormal, b.subnormal) : (a.subnormal ?? b.subnormal),
  };
}

const withOperations = (language: string, format: FloatFormat): { readonly operations?: FloatFormat } => {
  const { operations } = machineArithmetic(language, format);
  return operations.name === format.name ? {} : { operations };
};

function renamed({ steps, result }: Program, from: string, to: string): Program {
  const rename = (e: Expression): Expression => (e.kind === 'symbol' && e.name === from ? { kind: 'symbol', name: to } : mapNode(e, rename));
  return { steps: steps.map((s) => ({ ...s, value: rename(s.value) })), result: rename(result) };
}

function mapNode(e: Expression, f: (e: Expression) => Expression): Expression {
  switch (e.kind) {
    case 'sum':
      return { ...e, terms: e.terms.map(f) };
    case 'product':
      return { ...e, factors: e.factors.map(f) };
    case 'quotient':
      return { ...e, numerator: f(e.numerator), denominator: f(e.denominator) };
    case 'negation':
      return { ...e, operand: f(e.operand) };
    case 'call':
      return { ...e, args: e.args.map(f) };
    default:
      return e;
  }
}

/** `sin approximation` for a call of one function, else only `approximation`. */
function wordsFor(f: Expression): readonly string[] {
  const name = f.kind === 'call' ? f.function : f.kind === 'power' && f.base.kind === 'constant' && f.base.name === 'e' ? 'exp' : f.kind === 'power' && f.exponent.kind === 'number' && Q.equal(f.exponent.value, Q.HALF) ? 'sqrt' : '';
  return [...(/^[a-z]\w*$/i.test(name) ? [name] : []), 'approximation'];
}

const METHODS = { minimax: 'best polynomial, coefficients rounded together', taylor: 'truncated expansion', economized: 'economized expansion', rational: 'best rational function' } as const;
const methodText = ({ method }: FitProblem): string => `${METHODS[method]}; local models with proven remainders; rounding bounded operation by operation`;

function assumptionsOf({ language, contraction }: FitProblem, format: FloatFormat): string[] {
  const { name } = format;
  const { operations } = machineArithmetic(language, format);
  const row = codeLanguage(language);
  const list = ['round to nearest, subnormal numbers kept', 'no optimisation that changes values (such as fast-math)'];
  list.push(operations.name === name ? `each operation rounded to ${name}` : `operations in ${operations.name}, then one rounding of the result to ${name}${row?.floats[name] ? '' : ' where it is stored'}`);
  if (contraction === 'fma') list.push('holds whether or not further products are fused with sums');
  else list.push('holds with and without fusing of products and sums (a*b + c)');
  if (row?.id === 'glsl' || row?.id === 'hlsl') list.push('the device rounds additions and multiplications correctly');
  return list;
}

const MEASURES: Readonly<Record<FitMeasure, string>> = { absolute: 'absolute error', relative: 'relative error', ulp: 'error in ulp' };

function commentOf(problem: FitProblem, format: { readonly name: string; readonly argument?: string }, error: ProvedError, assumptions: readonly string[], way?: string): string[] {
  const where = [problem, ...(problem.second ? [problem.second] : [])].map(({ variable, intervalText: [low, high] }) => `${variable.replace(/\\/g, '')} in [${low}, ${high}]`).join(', ');
  const total = real.rationalToDecimal(error.total, 4, 1);
  const subnormal = error.subnormal ? ` (where the function is below the smallest normal number: absolute error at most ${real.rationalToDecimal(error.subnormal, 4, 1)})` : '';
  const unit = problem.measure === 'ulp' ? ' ulp' : '';
  return [
    `${toPlain(problem.function)} for ${where}, ${format.name}.`,
    `Proven for every ${format.argument ?? `${format.name} argument`} in the interval, evaluation included: ${MEASURES[problem.measure].replace(' in ulp', '')} at most ${total}${unit}${subnormal}.`,
    ...(way === undefined ? [] : [way]),
    `Assumes: ${assumptions.join('; ')}.`,
    'Valid only on this interval and in this format. In safety-related code follow your own standards and have it reviewed by qualified people.',
  ].flatMap(filledLines);
}
