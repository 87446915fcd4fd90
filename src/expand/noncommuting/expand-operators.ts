/** Expansions of formulas in operators: coefficients are sums of words, or of commutators where they are Lie elements. */
import { createField } from '../../algebra/index.ts';
import type { Element, Field } from '../../algebra/types.ts';
import { type Assumption, build, type Expression, freeSymbols, mapChildren, Q, type Rational } from '../../expression/index.ts';
import { describe } from '../../functions/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import type { Expansion, ExpansionProblem, ExpansionTerm, SmallProblem } from '../expansion.ts';
import { asCommutators, type Bracket } from './commutators.ts';
import { type Evaluation, evaluateOperators, ordered, STEP } from './evaluate.ts';
import { letterName, type Letters } from './letters.ts';
import { type OperatorSeries, TooNarrow } from './series.ts';
import { plainText } from '../../series/index.ts';
import type { Sum } from './words.ts';

/** The scalar engine, for functions of one commuting argument. */
export type ScalarExpand = (problem: ExpansionProblem) => Expansion;

interface Job {
  readonly function: Expression;
  /** Power of s that each moving symbol carries. */
  readonly weights: ReadonlyMap<string, number>;
  readonly scalarOf: (name: string) => Expression | null;
  readonly assumptions: readonly Assumption[];
  readonly terms?: number;
  readonly order?: Rational;
}

/** Widest series that is tried before the coefficients count as undecided. */
const WIDEST = 64;

interface Result {
  readonly terms: readonly { readonly power: number; readonly coefficient: Expression }[];
  readonly remainder: number | null;
  readonly assumptions: readonly string[];
}

/** In a scalar, or in an operator that is small. */
export function expandOperators(problem: ExpansionProblem, letters: Letters, budget: Budget, scalar: ScalarExpand): Expansion {
  const name = letterName(problem.variable);
  if (name === null) throw new Declined('bad-request', 'Beside operators the variable is one symbol; name it.');
  if (letters.identity && name === letterName(letters.identity)) throw new Declined('bad-request', 'The identity does not vary; name another symbol.');
  const large = problem.point === 'inf' || problem.point === '-inf';
  const { point } = problem;
  const atZero = typeof point === 'object' && point.kind === 'number' && Q.isZero(point.value);
  if (letters.operators.has(name) && !atZero) throw new Declined('bad-request', 'An operator is expanded where it is small; write A_0 + \\epsilon B for an operator near another one.');
  if (!freeSymbols(problem.function).includes(name) && !letters.operators.has(name)) throw new Declined('bad-request', 'The variable does not occur in the formula; name one that does.');
  const step = build.symbol(STEP);
  const value = typeof point !== 'object' ? (point === '-inf' ? build.negation(build.power(step, -1)) : build.power(step, -1)) : atZero ? step : build.sum(point, step);
  const weights = letters.operators.has(name) ? new Map([[name, 1]]) : new Map([[name, 1], [STEP, 1]]);
  const found = solve({ ...problem, weights, scalarOf: (n) => (n === name ? value : null) }, letters, budget, scalar);
  const v = letters.operators.has(name) ? build.number(1) : problem.variable;
  const local = typeof point !== 'object' ? build.quotient(build.number(1), point === '-inf' ? build.negation(v) : v) : atZero ? v : build.difference(v, point);
  const isOperator = letters.operators.has(name);
  const size = isOperator ? ({ kind: 'vector', operation: 'norm', args: [problem.variable] } as const) : local;
  return {
    function: problem.function,
    variable: problem.variable,
    point,
    side: large ? 'right' : 'both',
    local: size,
    logarithm: build.call('log', size),
    prefactor: null,
    terms: found.terms.map((t): ExpansionTerm => ({ coefficient: t.coefficient, power: build.number(isOperator ? 0 : t.power), log: 0, scale: null, ...(isOperator ? { weight: build.number(t.power) } : {}) })),
    remainder: found.remainder === null ? null : { power: build.number(found.remainder), log: 0, scale: null },
    exact: found.remainder === null,
    divergent: false,
    oscillating: false,
    assumptions: found.assumptions,
  };
}

/** In several small quantities, operators or scalars, each with a whole weight. */
export function expandSmallOperators(problem: SmallProblem, letters: Letters, budget: Budget, scalar: ScalarExpand): Expansion {
  const weights = new Map<string, number>();
  for (const q of problem.quantities) {
    const name = letterName(q.symbol);
    const zero = q.point === undefined || (q.point.kind === 'number' && Q.isZero(q.point.value));
    if (name === null || !Q.isInteger(q.weight) || problem.iterated || !zero) throw new Declined('bad-request', 'Beside operators every small quantity is one symbol that tends to zero, with a whole number as its weight.');
    weights.set(name, Number(q.weight.num));
  }
  const found = solve({ ...problem, weights, scalarOf: () => null }, letters, budget, scalar);
  const sizes = problem.quantities.map((q) => {
    const isOperator = letters.operators.has(letterName(q.symbol) ?? '');
    const size: Expression = isOperator ? { kind: 'vector', operation: 'norm', args: [q.symbol] } : build.call('abs', q.symbol);
    return Q.isOne(q.weight) ? size : build.power(size, Q.reciprocal(q.weight));
  });
  const local = sizes.length === 1 && sizes[0] ? sizes[0] : build.call('max', ...sizes);
  return {
    function: problem.function,
    variable: problem.quantities[0]?.symbol ?? build.number(0),
    point: build.number(0),
    side: 'both',
    local,
    logarithm: build.call('log', local),
    prefactor: null,
    terms: found.terms.map((t): ExpansionTerm => ({ coefficient: t.coefficient, power: build.number(0), log: 0, scale: null, weight: build.number(t.power) })),
    remainder: found.remainder === null ? null : { power: build.number(found.remainder), log: 0, scale: null },
    exact: found.remainder === null,
    divergent: false,
    oscillating: false,
    assumptions: found.assumptions,
  };
}

/** Widens the series until the terms asked for and the first one left out are known. */
function solve(job: Job, letters: Letters, budget: Budget, scalar: ScalarExpand): Result {
  const assumptions = job.assumptions.filter((a) => !(a.kind === 'domain' && a.domain === 'operator'));
  const field = createField(assumptions, budget, describe);
  const wanted = job.terms ?? Math.ceil(Number(job.order?.num ?? 1n) / Number(job.order?.den ?? 1n));
  for (let width = Math.max(2, wanted + 2); ; width *= 2) {
    const v: Evaluation = {
      field,
      budget,
      width,
      letters: [...letters.operators.keys()],
      nodes: new Map(letters.operators),
      identity: letters.identity ? letterName(letters.identity) : null,
      weights: job.weights,
      scalarOf: job.scalarOf,
      traces: new Map(),
      inverted: new Set(),
      treeOf: (evaluation, sum) => sumTree(evaluation, sum, field),
      scalar: (f, variable, order) => scalar({ function: f, variable: build.symbol(variable), point: build.number(0), side: 'right', order: Q.rational(order), assumptions }),
    };
    try {
      const series = evaluateOperators(v, job.function);
      const cut = cutOff(series, job);
      if (cut) return { ...written(v, series, cut, field), assumptions: [...field.needed, ...[...v.inverted].map((name) => `${plainText(asProducts(v.nodes.get(name) ?? build.symbol(name)))} invertible`)] };
    } catch (error) {
      if (!(error instanceof TooNarrow)) throw error;
    }
    if (width >= WIDEST) throw new Declined('undecided', 'Too many terms of this expression in operators cancel; simplify it first.');
  }
}

/** Words as products and letters as symbols, for a line of plain text. */
function asProducts(e: Expression): Expression {
  if (e.kind === 'vector' && e.operation === 'ordered') return build.product(...e.args.map(asProducts));
  const name = e.kind === 'vector' ? letterName(e) : null;
  return name === null ? mapChildren(e, asProducts) : build.symbol(name);
}

/** The powers that are kept and the first one left out (null: none); null as a whole where more terms are needed. */
function cutOff(series: OperatorSeries, job: Job): { readonly kept: readonly number[]; readonly remainder: number | null } | null {
  const powers = series.terms.flatMap((t, k) => (t.size > 0 ? [series.start + k] : []));
  const order = job.order ? Number(job.order.num) / Number(job.order.den) : null;
  const kept = order === null ? powers.slice(0, job.terms ?? 1) : powers.filter((p) => p < order);
  const next = powers[kept.length];
  if (next !== undefined) return { kept, remainder: next };
  return series.exact ? { kept, remainder: null } : null;
}

function written(v: Evaluation, series: OperatorSeries, cut: { readonly kept: readonly number[]; readonly remainder: number | null }, field: Field): Omit<Result, 'assumptions'> {
  const back = (e: Expression): Expression => (e.kind === 'symbol' ? (v.traces.get(e.name) ?? e) : mapChildren(e, back));
  const terms = cut.kept.map((power) => ({ power, coefficient: back(sumTree(v, series.terms[power - series.start] ?? new Map(), field)) }));
  return { terms, remainder: cut.remainder };
}

interface Piece {
  readonly coefficient: Element;
  readonly body: Expression | null;
}

/** The sum as a tree: by length of the words, commutators where every part of two letters or more is made of them, a common rational factor in front. */
function sumTree(v: Evaluation, a: Sum, field: Field): Expression {
  const lengths = [...new Set([...a.values()].map((s) => s.word.length))].sort((x, y) => x - y);
  const parts = lengths.map((n) => new Map([...a].filter(([, s]) => s.word.length === n)));
  const brackets = parts.map((p) => asCommutators(field, p));
  const lie = parts.every((p, k) => brackets[k] !== null || [...p.values()].every((s) => s.word.length < 2));
  const pieces = parts.flatMap((p, k): readonly Piece[] => {
    const found = lie ? brackets[k] : null;
    if (found) return found.map((t) => ({ coefficient: t.coefficient, body: bracketTree(v, t.bracket) }));
    return [...p.values()].sort((x, y) => (compareWords(x.word, y.word))).map((s) => ({ coefficient: s.coefficient, body: s.word.length === 0 ? identityTree(v) : ordered(v, s.word) }));
  });
  const [first] = pieces;
  if (!first) return build.number(0);
  // Rational multiples of one coefficient share it.
  const ratios = pieces.map((p) => field.asRational(field.divide(p.coefficient, first.coefficient)));
  if (pieces.length > 1 && ratios.every((r) => r !== null) && pieces.every((p) => p.body !== null)) {
    const denominator = ratios.reduce((l, r) => (l / Q.gcd(l, r.den)) * r.den, 1n);
    const factor = field.divide(first.coefficient, Q.rational(denominator));
    const members = pieces.map((p, k) => scaledTree(build.number(Q.multiply(ratios[k] as Rational, Q.rational(denominator))), p.body));
    return scaledTree(field.toExpression(factor), build.sum(...members));
  }
  return build.sum(...pieces.map((p) => scaledTree(field.toExpression(p.coefficient), p.body)));
}

const compareWords = (a: readonly number[], b: readonly number[]): number => {
  for (let k = 0; k < a.length; k += 1) if (a[k] !== b[k]) return Math.abs(a[k] as number) - Math.abs(b[k] as number) || (b[k] as number) - (a[k] as number);
  return 0;
};

const identityTree = (v: Evaluation): Expression | null => (v.identity === null ? null : { kind: 'vector', operation: 'ordered', args: [v.nodes.get(v.identity) ?? build.symbol(v.identity)] });

function scaledTree(factor: Expression, body: Expression | null): Expression {
  if (!body || build.isOneNumber(body)) return factor;
  if (build.isOneNumber(factor)) return body;
  if (factor.kind === 'number' && factor.value.num < 0n) return build.negation(scaledTree(build.number(Q.negate(factor.value)), body));
  return build.product(factor, body);
}

function bracketTree(v: Evaluation, b: Bracket): Expression {
  if (typeof b === 'number') return v.nodes.get(v.letters[b - 1] ?? '') ?? build.symbol(v.letters[b - 1] ?? '');
  return { kind: 'vector', operation: 'commutator', args: [bracketTree(v, b[0]), bracketTree(v, b[1])] };
}
