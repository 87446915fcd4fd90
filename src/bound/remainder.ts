/** sup |f - sum| over an interval, with proof: local model at the point, pieces elsewhere; doubles first, balls where digits cancel. */
import { build, freeSymbols, Q, type Rational, walk } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { Declined } from '../outcome.ts';
import { describe } from '../functions/index.ts';
import { enclose, real } from '../rigorous/index.ts';
import { isExactOn } from './exactSum.ts';
import { scaleOut } from './homogeneous.ts';
import { sumOf } from './local.ts';
import { atPoint, byDifference, type Memory, type ModelCache, reachesLocalEnd, ruleOfThumb, wholeTask } from './near.ts';
import { isMonotoneIn } from './monotone.ts';
import { ballNumbers, doubles, type Numbers, type ParameterBalls, withValues } from './numbers.ts';
import { atCorners, overParameters, type Result } from './parameters.ts';
import { type PieceTask, refinePieces, remainderAt } from './pieces.ts';
import { parameterBalls, type Segment, segmentsOf } from './region.ts';
import { settledOf, type SharpProblem, slackOf } from './sharp.ts';
import { provenPlace } from './singular.ts';
import type { Measure, RemainderBound } from './types.ts';

export type { ModelCache } from './near.ts';

const DIGITS = 7;

export function bound(problem: SharpProblem, cache: ModelCache = new Map(), lengthHint = 0): RemainderBound {
  const { expansion, assumptions, budget } = problem;
  if (expansion.exact && !expansion.left) {
    const name = variableName(expansion);
    // Refuses an interval on a side that is not served, or with its ends the wrong way round.
    segmentsOf(expansion, problem.interval, assumptions);
    if (!isExactOn(expansion, problem.interval, name, parameterBalls(freeSymbols(expansion.function).filter((symbol) => symbol !== name), assumptions))) {
      throw new Declined('undecided', 'The sum equals the function near the point; that it does so on the whole interval could not be proved. Choose a smaller interval.');
    }
    return { value: '0', lower: '0', upperRational: Q.ZERO, lowerRational: Q.ZERO, method: 'the sum is the function', proof: ['The sum equals the function on the whole interval.'] };
  }
  const variable = variableName(expansion);
  const names = freeSymbols(expansion.function).filter((name) => name !== variable);
  const parameters = parameterBalls(names, assumptions);
  const unspecified = [...walk(expansion.function)].find((node) => node.kind === 'apply');
  if (unspecified?.kind === 'apply') throw new Declined('unknown-function', `A bound needs to know what ${unspecified.name} is; write its formula in place of it, or leave out the interval.`);
  const missing = names.filter((name) => !parameters.has(name));
  for (const name of missing) {
    const scaled = scaleOut(problem, name, variable);
    if (scaled === null) continue;
    const inner = bound({ ...scaled.problem, settled: problem.settled }, new Map(), lengthHint);
    const factor = inner.factor ? build.product(scaled.factor, inner.factor) : scaled.factor;
    const free = build.isOneNumber(factor);
    return { ...inner, ...(free ? {} : { factor }), proof: [`f, the sum and the interval scale alike in ${name}; the bound is that for ${name} = 1${free ? '' : ' times the factor'}.`, ...inner.proof] };
  }
  if (missing.length > 0) throw new Declined('needs-assumption', `A bound needs a range for ${missing.join(', ')}; add an assumption such as 0.9 <= ${missing[0] ?? 'c'} <= 1.1.`);
  const segments = segmentsOf(expansion, problem.interval, assumptions);
  let best: Result | null = null;
  const improve = (next: Result | null): void => {
    if (next === null) return;
    if (best === null) {
      best = next;
      return;
    }
    const upper = best.upper === null ? next.upper : next.upper === null || real.compare(best.upper, next.upper) === -1 ? best.upper : next.upper;
    const lower = real.compare(best.lower, next.lower) === 1 ? best.lower : next.lower;
    best = { ...next, upper, lower };
  };
  const check = (): void => budget.check();
  requireReal(segments, variable, parameters);
  const settled = (result: Result | null): boolean => result !== null && (result.unbounded === true || (result.upper !== null && ratioOf(result) <= settledOf(problem)));
  const memory = { cache, lengthHint };
  const inBox = (box: ParameterBalls): Result | null => run(doubles(box), segments, problem, variable, check, { cache: new Map(), lengthHint });
  if (parameters.size > 0 && [...parameters.keys()].every((name) => isMonotoneIn(name, segments, problem.measure, variable, parameters, doubles, check))) improve(atCorners(parameters, inBox));
  if (settled(best)) return answer(best);
  improve(run(doubles(parameters), segments, problem, variable, check, memory));
  let precision = 128;
  for (let round = 0; round < (parameters.size > 0 && best !== null ? 0 : 4) && !settled(best); round += 1) {
    if (round > 0 && best !== null && (best as Result).upper === null) break;
    const before: Result | null = best;
    try {
      improve(run(ballNumbers(precision, parameters), segments, problem, variable, check, memory));
    } catch (error) {
      if (error instanceof Declined && error.failure.code === 'over-budget' && before !== null && (before as Result).upper !== null) break;
      throw error;
    }
    precision *= 2;
  }
  if (parameters.size > 0 && !settled(best)) best = overParameters(parameters, best, inBox);
  return answer(best);
}

/** Refuses at once what is not real at an end or in the middle of the interval. */
function requireReal(segments: readonly Segment[], variable: string, parameters: ParameterBalls): void {
  const n = ballNumbers(80, parameters);
  for (const segment of segments) {
    const ends = [segment.lower, segment.upper].map((end) => (end === null ? null : n.value(end)));
    const [a, b] = ends;
    const inner = a && b ? [1, 3, 5, 7].map((k) => real.add(a, real.multiply(real.subtract(b, a, 80), { mid: BigInt(k), rad: 0n, exp: -3 }, 80), 80)) : [];
    // A local end may be a singular point, where values are neither needed nor cheap.
    const far = segment.local === 'lower' ? [ends[1]] : segment.local === 'upper' ? [ends[0]] : ends;
    for (const x of [...far, ...inner]) {
      if (!x || n.value(segment.expansion.function, new Map([[variable, x]])) !== null) continue;
      const environment = new Map([...parameters, [variable, x] as const].map(([name, ball]) => [name, { re: ball, im: real.ZERO }] as const));
      const value = enclose(segment.expansion.function, environment, 80, describe);
      if (value !== null && !real.containsZero(value.im)) throw new Declined('bad-request', `The function is not real at ${variable} = ${real.toDecimalDown(x, 6)}; choose an interval on which it is real.`);
    }
  }
}

export function variableName(expansion: Expansion): string {
  if (expansion.variable.kind !== 'symbol') throw new Declined('bad-request', 'The variable must be one symbol.');
  return expansion.variable.name;
}

function ratioOf(result: Result): number {
  if (result.upper === null || !real.isPositive(result.lower)) return Infinity;
  const quotient = real.divide(result.upper, result.lower, 60);
  return quotient === null ? Infinity : real.toDouble(quotient);
}

function answer(result: Result | null): RemainderBound {
  if (result === null) throw new Declined('undecided', 'No bound could be proved on this interval; try a smaller one.');
  if (result.upper === null) {
    if (result.unbounded) return { value: null, lower: null, upperRational: null, lowerRational: null, method: result.method, proof: result.steps, place: result.place };
    throw new Declined('undecided', 'No bound could be proved on this interval; try a smaller one.');
  }
  const [upper, lower] = [roundedUp(real.upper(result.upper)), real.lower(result.lower)];
  return {
    value: real.rationalToDecimal(upper, DIGITS, 1),
    lower: real.rationalToDecimal(lower, DIGITS, -1),
    upperRational: upper,
    lowerRational: lower,
    method: result.method,
    proof: result.steps,
  };
}
const roundedUp = (q: Rational): Rational => (q.num < 0n ? Q.ZERO : q);

/** Coefficients can be trees of thousands of nodes; here each is evaluated once and stands as a symbol in the sum. */
function withKnownCoefficients<T>(numbers: Numbers<T>, given: readonly Segment[]): { readonly n: Numbers<T>; readonly segments: readonly Segment[] } {
  const values = new Map<string, T>();
  const replaced = new Map<Expansion, Expansion>();
  for (const { expansion } of given) {
    if (replaced.has(expansion)) continue;
    const terms = expansion.terms.map((term, k) => {
      if (term.coefficient.kind === 'number') return term;
      const value = numbers.value(term.coefficient);
      const name = `coefficient ${replaced.size}.${k}`;
      if (value === null) return term;
      values.set(name, value);
      return { ...term, coefficient: build.symbol(name) };
    });
    replaced.set(expansion, { ...expansion, terms });
  }
  if (values.size === 0) return { n: numbers, segments: given };
  return { n: withValues(numbers, values), segments: given.map((segment) => ({ ...segment, expansion: replaced.get(segment.expansion) ?? segment.expansion })) };
}

function run<T>(numbers: Numbers<T>, given: readonly Segment[], problem: SharpProblem, variable: string, check: () => void, memory: Memory): Result | null {
  const { n, segments } = withKnownCoefficients(numbers, given);
  const { r } = n;
  const { measure } = problem;
  const length = n.precision <= 53 ? 14 : Math.min(40, 14 + Math.floor(n.precision / 16));
  const options = { variable, measure, slack: slackOf(problem), most: n.precision <= 53 ? 400 : 120, length, check };
  let lower = r.zero;
  let upper: T = r.zero;
  const steps: string[] = [];
  const methods = new Set<string>();
  let omitted: T | null = null;
  const tasks: PieceTask<T>[] = [];
  const raise = (x: T): void => {
    lower = r.lowerEnd(r.maximum(lower, x));
  };
  // Values at the ends first: they are lower bounds, and often the maximum.
  for (const segment of segments) {
    for (const end of segment.local === 'lower' ? [segment.upper] : segment.local === 'upper' ? [segment.lower] : [segment.lower, segment.upper]) {
      const x = end === null ? null : n.value(end);
      const y = x === null ? null : remainderAt(x, { expansion: segment.expansion, sum: sumOf(segment.expansion) }, n, options);
      if (y !== null) raise(r.lowerEnd(r.absolute(y)));
    }
  }
  // Where the remainder oscillates its largest value may be anywhere in the first periods.
  for (const segment of segments) if (segment.expansion.oscillating) for (const y of samplesNear(segment, n, options)) raise(r.lowerEnd(r.absolute(y)));
  const show = (x: T): string => {
    const ball = n.toBall(x);
    return ball === null ? '?' : real.toDecimalUp(ball, 5);
  };
  for (const segment of segments) {
    const sum = sumOf(segment.expansion);
    if (segment.local === 'none') {
      const task = wholeTask(segment, sum, n);
      if (task === null) return null;
      tasks.push(task);
      continue;
    }
    const near =
      (segment.atPoint ? atPoint(segment, n, problem, variable, lower, check, memory) : null) ?? byDifference(segment, sum, n, problem, variable, lower, check);
    if (near === null) {
      // Nothing is known at the local end; where the interval does not reach it, pieces serve the whole.
      const task = reachesLocalEnd(segment) ? null : wholeTask(segment, sum, n);
      if (task === null) return null;
      tasks.push(task);
      continue;
    }
    if (near.kind === 'unbounded') return { upper: null, lower: n.toBall(r.zero) ?? real.ZERO, steps: near.steps, place: near.place, unbounded: true, method: 'leading term of the remainder' };
    raise(near.lower);
    upper = r.upperEnd(r.maximum(upper, near.upper));
    steps.push(...near.steps(show));
    methods.add('local series with proven remainder factor');
    if (near.rest) tasks.push(near.rest);
    if (near.omitted !== null) omitted = omitted === null ? near.omitted : r.maximum(omitted, near.omitted);
  }
  if (tasks.length > 0) {
    const result = refinePieces(tasks, lower, n, options);
    raise(result.lower);
    steps.push(`${result.pieces} pieces with Taylor models of ${length} coefficients, ${n.precision} bits.`);
    methods.add('Taylor models on pieces');
    if (result.upper !== null) upper = r.upperEnd(r.maximum(upper, result.upper));
    else {
      const trouble = result.trouble;
      const width = trouble ? r.toDouble(r.absolute(r.subtract(trouble.x1, trouble.x0))) : 0;
      const whole = trouble && tasks.find((task) => !r.isNegative(r.subtract(trouble.x0, task.x0)) && !r.isPositive(r.subtract(trouble.x1, task.x1)));
      const place = trouble && whole ? provenPlace(r.midpoint(r.union(trouble.x0, trouble.x1)), whole, 4 * width, n, variable, measure) : null;
      if (place !== null) {
        const what = measure === 'absolute' ? 'f - sum is unbounded there (negative leading power of its local series)' : 'f has a zero there and f - sum has none';
        return { upper: null, lower: real.ZERO, steps: [`At the place named: ${what}.`], place, unbounded: true, method: 'local series at the singular place' };
      }
      return { upper: null, lower: n.toBall(lower) ?? real.ZERO, steps, method: [...methods].join(' and ') };
    }
  }
  if (omitted !== null && !n.wide) steps.push(...ruleOfThumb(omitted, upper, measure, n, show));
  const [u, l] = [n.toBall(upper), n.toBall(lower)];
  return u === null || l === null ? null : { upper: u, lower: l, steps, method: [...methods].join(' and ') };
}

const SAMPLES = 40;
/** f - sum at arguments from the finite end of a segment on, as far as three times its distance from zero. */
function samplesNear<T>(segment: Segment, n: Numbers<T>, options: { readonly variable: string; readonly measure: Measure }): readonly T[] {
  const { r } = n;
  const [lower, upper] = [segment.lower, segment.upper].map((end) => (end === null ? null : n.value(end)));
  const start = lower ?? upper;
  if (!start) return [];
  const task = { expansion: segment.expansion, sum: sumOf(segment.expansion) };
  const values: T[] = [];
  for (let k = 1; k <= SAMPLES; k += 1) {
    const x = lower && upper ? r.add(lower, r.multiply(r.subtract(upper, lower), r.fromRational(Q.rational(k, SAMPLES + 1)))) : r.multiply(start, r.fromRational(Q.rational(2 * k + SAMPLES, SAMPLES)));
    const y = remainderAt(r.midpoint(x), task, n, options);
    if (y !== null) values.push(y);
  }
  return values;
}

