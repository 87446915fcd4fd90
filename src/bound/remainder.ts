/** sup |f - sum| over an interval, with proof: local model at the point, pieces elsewhere; doubles first, balls where digits cancel. */
import { build, type Expression, freeSymbols, Q, type Rational } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { Declined } from '../outcome.ts';
import { describe } from '../functions/index.ts';
import { type Ball, enclose, type LogModel, logRange, type Model, real } from '../rigorous/index.ts';
import { isExactOn } from './exactSum.ts';
import { scaleOut } from './homogeneous.ts';
import { denominatorOf, isPowerSum, type Local, localDomain, localModel, logModelOf, remainderAtPoint, sumOf } from './local.ts';
import { ballNumbers, doubles, type Numbers, type ParameterBalls, withValues } from './numbers.ts';
import { type PieceTask, refinePieces, remainderAt } from './pieces.ts';
import { provenPlace } from './singular.ts';
import { parameterBalls, type Segment, segmentsOf } from './region.ts';
import { supremumOfModel } from './supremum.ts';
import { waveDifference } from './waves.ts';
import type { BoundProblem, Measure, RemainderBound } from './types.ts';

/** Upper over lower bound that counts as settled. */
const SETTLED = 1.001;
const EXTRA = 14;
const DIGITS = 7;

interface Result {
  /** Null: no finite bound. */
  readonly upper: Ball | null;
  readonly lower: Ball;
  readonly steps: readonly string[];
  readonly place?: Expression;
  /** The place is proven to be one where the remainder is unbounded. */
  readonly unbounded?: boolean;
  readonly method: string;
}

/** Local models serve every number of terms; a ladder keeps them between its rows. */
export type ModelCache = Map<string, { readonly length: number; readonly local: unknown }>;

/** A bound problem with the ratio of upper to lower bound to stop at, where the usual one does not decide. */
export type SharpProblem = BoundProblem & { readonly settled?: number };
const settledOf = (problem: SharpProblem): number => problem.settled ?? SETTLED;
/** Relative slack of suprema: the rest of what is allowed is left to tails and rounding. */
const slackOf = (problem: SharpProblem): number => 0.4 * (settledOf(problem) - 1);
const limitOf = <T>(r: Numbers<T>['r'], lower: T, problem: SharpProblem): T => r.multiply(lower, r.fromRational(Q.fromDouble(1 + 0.9995 * (settledOf(problem) - 1))));

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
  if (parameters.size > 0 && !settled(best)) best = overParameters(parameters, best, (box) => run(doubles(box), segments, problem, variable, check, { cache: new Map(), lengthHint }));
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

const MOST_BOXES = 64;
const BOX_SLACK = 1.0008;

/** The supremum over the parameters too: lower bounds at the corners of their box, upper bounds on halves of it where the two differ. */
function overParameters(parameters: ParameterBalls, start: Result | null, solve: (box: ParameterBalls) => Result | null): Result | null {
  let lower = start?.lower ?? real.ZERO;
  for (const corner of cornersOf(parameters)) {
    const at = solve(corner);
    if (at !== null) lower = real.maximum(lower, at.lower);
  }
  const open: { readonly box: ParameterBalls; readonly result: Result | null }[] = [{ box: parameters, result: start }];
  const worse = (a: Result | null, b: Result | null): boolean => (a?.upper ? b !== null && (b.upper === null || real.compare(b.upper, a.upper) === 1) : false);
  for (let count = 1; count < MOST_BOXES; count += 1) {
    let worst = 0;
    for (let k = 1; k < open.length; k += 1) if (worse(open[worst]?.result ?? null, open[k]?.result ?? null)) worst = k;
    const item = open[worst];
    if (!item) break;
    const { result } = item;
    if (result?.upper && real.compare(result.upper, real.multiply(lower, real.fromDouble(BOX_SLACK), 64)) !== 1) break;
    const [name, ball] = [...item.box].reduce((a, b) => (real.compare(real.radius(b[1]), real.radius(a[1])) === 1 ? b : a));
    const middle = real.midpoint(ball);
    const halves = [real.fromEnds(real.lowerEnd(ball), middle, 128), real.fromEnds(middle, real.upperEnd(ball), 128)].map((part) => new Map([...item.box, [name, part] as const]));
    const [left, right] = halves.map((box) => ({ box, result: solve(box) }));
    if (!left || !right) break;
    open[worst] = left;
    open.push(right);
  }
  let upper: Ball | null = real.ZERO;
  for (const { result } of open) upper = upper === null || !result?.upper ? null : real.maximum(upper, real.upperEnd(result.upper));
  const shown = start ?? open.find(({ result }) => result !== null)?.result ?? null;
  return shown === null ? null : { ...shown, upper: upper === null ? null : real.upperEnd(upper), lower, steps: [...shown.steps, `Parameters: ${open.length} boxes.`] };
}

/** Up to 8 choices of both ends of every parameter. */
function cornersOf(parameters: ParameterBalls): readonly ParameterBalls[] {
  let corners: Map<string, Ball>[] = [new Map()];
  for (const [name, ball] of parameters) {
    if (corners.length >= 8) {
      corners = corners.map((corner) => new Map([...corner, [name, real.midpoint(ball)] as const]));
      continue;
    }
    // The rounded ball may stick out a little; its ends are drawn in so that they are values of the parameter.
    const inset = real.fromDouble(1 - 2 ** -40);
    const half = real.multiply(real.radius(ball), inset, 80);
    const ends = [real.subtract(real.midpoint(ball), half, 128), real.add(real.midpoint(ball), half, 128)].map(real.midpoint);
    corners = corners.flatMap((corner) => ends.map((end) => new Map([...corner, [name, end] as const])));
  }
  return corners;
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

interface Memory {
  readonly cache: ModelCache;
  readonly lengthHint: number;
}

/** The local model of f on a part, from memory where it is long enough. */
function remembered<T>(part: Segment, key: string, n: Numbers<T>, variable: string, length: number, q: number, check: () => void, memory: Memory): Local<T> | null {
  const full = `${key}|${n.precision}|${q}`;
  const known = memory.cache.get(full);
  if (known && known.length >= length) return known.local as Local<T> | null;
  const wanted = known ? Math.max(length, memory.lengthHint) : length;
  const local = localModel(part, n, variable, wanted, q, check);
  memory.cache.set(full, { length: wanted, local });
  return local;
}

function wholeTask<T>(segment: Segment, sum: Expression, n: Numbers<T>): PieceTask<T> | null {
  if (segment.lower === null || segment.upper === null) return null;
  const [x0, x1] = [n.value(segment.lower), n.value(segment.upper)];
  return x0 === null || x1 === null ? null : { x0, x1, expansion: segment.expansion, sum, touches: 'upper' };
}

interface Near<T> {
  readonly kind: 'bounded';
  readonly upper: T;
  readonly lower: T;
  readonly steps: (show: (x: T) => string) => readonly string[];
  readonly rest: PieceTask<T> | null;
}
interface Unbounded {
  readonly kind: 'unbounded';
  readonly place: Expression;
  readonly steps: readonly string[];
}

/** The segment that starts at the point of expansion: the whole of it by the local model, or a part of it with the rest left to pieces. */
function atPoint<T>(segment: Segment, n: Numbers<T>, problem: SharpProblem, variable: string, lower: T, check: () => void, memory: Memory): Near<T> | Unbounded | null {
  const { r } = n;
  const base = denominatorOf(segment.expansion);
  if (base === null || !isPowerSum(segment.expansion)) return null;
  const count = Math.max(2, segment.expansion.terms.length);
  let settledLower = lower;
  cuts: for (let cut = 0; cut < 24; cut += 1) {
    const part = cutSegment(segment, cut);
    for (const factor of [1, 2, 3]) {
      const q = base * factor;
      let length = neededLength(segment.expansion, q, count) + EXTRA;
      for (let attempt = 0; attempt < 3; attempt += 1) {
        check();
        const local = remembered(part.near, `${segment.local}${segment.expansion.side}${cut}`, n, variable, length, q, check, memory);
        if (local === null) break;
        const rest = remainderAtPoint(local, segment.expansion, n);
        if (rest === null) {
          length += EXTRA;
          continue;
        }
        if (rest.length > 1 || (problem.measure === 'relative' && local.f.length > 1)) {
          if (problem.measure === 'absolute' && growsAtPoint(r, rest)) {
            return { kind: 'unbounded', place: pointExpression(segment), steps: ['The leading term of f - sum at the point of expansion is unbounded: the sum does not contain every term that is.'] };
          }
          const coarse = withLogarithms(r, rest, local.f, problem.measure);
          if (coarse === null) break;
          // Enough where it is below what is known from elsewhere; else the part is made smaller.
          if (cut < 20 && r.isPositive(r.subtract(coarse, settledLower))) continue cuts;
          return {
            kind: 'bounded',
            upper: coarse,
            lower: settledLower,
            rest: part.rest === null ? null : wholeTask(part.rest, sumOf(segment.expansion), n),
            steps: (show) => [`Next to the point, t <= ${show(local.scale)}: f - sum is a sum of s^k (log s)^j with enclosed coefficients; with |s^k log^j s| <= (j/(k e))^j it is at most ${show(coarse)}.`],
          };
        }
        const [remainder, f] = [rest[0], local.f[0]];
        const g = remainder === undefined || f === undefined ? null : problem.measure === 'absolute' ? remainder : local.m.divide(remainder, f);
        if (g === null) break;
        if (g.valuation < 0) {
          const lead = g.coefficients[0];
          if (lead === undefined || r.containsZero(lead)) {
            length += EXTRA;
            continue;
          }
          const place = pointExpression(segment);
          return { kind: 'unbounded', place, steps: ['The remainder has a pole at the point of expansion: the sum does not contain every term with a negative power.'] };
        }
        const result = supremumOfModel(r, g, { from: local.from, to: local.to, floor: settledLower, slack: slackOf(problem) / 4, check });
        settledLower = r.lowerEnd(r.maximum(settledLower, result.lower));
        const limit = limitOf(r, settledLower, problem);
        // Sets of parameter values widen every coefficient; there the tail decides, and the box of parameters is divided instead.
        const good = n.wide ? !tailMatters(r, result, problem) : !r.isPositive(r.subtract(result.upper, limit));
        if (!good && attempt < 2 && tailMatters(r, result, problem)) {
          length += EXTRA;
          continue;
        }
        if (!good && cut < 10) break;
        return {
          kind: 'bounded',
          upper: result.upper,
          lower: settledLower,
          rest: part.rest === null ? null : wholeTask(part.rest, sumOf(segment.expansion), n),
          steps: (show) => [...describeLocal(local, g.valuation, result.upper, result.tail, n, show, cut), ...ruleOfThumb(g, result.upper, cut, n, show)],
        };
      }
    }
  }
  return null;
}

/** Whether the leading term s^k (log s)^j has k < 0, or k = 0 < j, and a coefficient that is not zero. */
function growsAtPoint<T>(r: Numbers<T>['r'], rest: LogModel<T>): boolean {
  const parts = rest.map((g, j) => ({ g, j })).filter(({ g }) => g.coefficients.length > 0 || !r.isZero(g.tail));
  const least = Math.min(...parts.map(({ g }) => g.valuation));
  const [first] = parts.filter(({ g }) => g.valuation === least).sort((a, b) => b.j - a.j);
  const lead = first?.g.coefficients[0];
  return first !== undefined && lead !== undefined && !r.containsZero(lead) && (least < 0 || (least === 0 && first.j > 0));
}

/** An upper bound of |f - sum| (or of its ratio to f) over s in (0, 1] from the components of powers of log s. */
function withLogarithms<T>(r: Numbers<T>['r'], rest: LogModel<T>, f: LogModel<T>, measure: Measure): T | null {
  if (measure === 'absolute') {
    const range = logRange(r, rest);
    return range === null ? null : r.upperEnd(r.absolute(range));
  }
  // Divide both by the leading power of f, whose leading component must be free of logarithms and dominate the others.
  const [lead] = f;
  if (lead === undefined || lead.coefficients.length === 0) return null;
  const shift = (g: Model<T>): Model<T> => ({ ...g, valuation: g.valuation - lead.valuation });
  const numerator = logRange(r, rest.map(shift));
  // log s <= 0: where (-1)^j f_j have one sign, no power of the logarithm makes |f| smaller.
  const signs = f.filter((g) => g.coefficients.length > 0 || !r.isZero(g.tail)).map((g) => (r.isPositive(g.range) ? 1 : r.isNegative(g.range) ? -1 : 0) * (f.indexOf(g) % 2 === 0 ? 1 : -1));
  const denominator = f.length > 1 && signs[0] !== 0 && signs.every((sign) => sign === signs[0]) ? lead.range : logRange(r, f.map(shift));
  const quotient = numerator === null || denominator === null ? null : r.divide(numerator, denominator);
  return quotient === null ? null : r.upperEnd(r.absolute(quotient));
}

function tailMatters<T>(r: Numbers<T>['r'], result: { readonly upper: T; readonly tail: T }, problem: SharpProblem): boolean {
  return r.isPositive(r.subtract(r.multiply(result.tail, r.fromInteger(Math.round(20 / (settledOf(problem) - 1)))), result.upper));
}

function describeLocal<T>(local: Local<T>, order: number, upper: T, tail: T, n: Numbers<T>, show: (x: T) => string, cut: number): readonly string[] {
  const power = local.denominator === 1 ? 't' : `t^(1/${local.denominator})`;
  return [
    `With s = ${power}/h, t <= ${show(local.scale)}${cut > 0 ? ' (the part next to the point)' : ''}: f - sum = s^${order} (r_0 + r_1 s + ... ), ${local.m.length} coefficients enclosed with ${n.precision} bits.`,
    `The rest of that series is at most ${show(tail)} in absolute value for all 0 <= s <= 1 (residual of the truncated series in the differential equations of the functions); the whole is at most ${show(upper)}.`,
  ];
}

/** Common practice, beside the proof: the first omitted term at the far end, and whether it would have misled. */
function ruleOfThumb<T>(g: Model<T>, upper: T, cut: number, n: Numbers<T>, show: (x: T) => string): readonly string[] {
  const [lead] = g.coefficients;
  if (lead === undefined || cut > 0) return [];
  const size = n.r.absolute(lead);
  const ratio = n.r.divide(upper, n.r.upperEnd(size));
  if (ratio === null) return [];
  const factor = n.r.toDouble(ratio);
  const verdict = factor > 1.1 ? `too small here by a factor of ${factor.toPrecision(3)}` : factor < 0.9 ? `larger than the truth here by a factor of ${(1 / factor).toPrecision(3)}` : 'near the truth here';
  return [`Rule of thumb (common practice, no proof): the first omitted term is ${show(size)} at the far end, ${verdict}.`];
}

const pointExpression = (segment: Segment): Expression => {
  const point = segment.expansion.point;
  if (point === 'inf') return build.constant('infinity');
  return point === '-inf' ? build.negation(build.constant('infinity')) : point;
};

/** Coefficients needed to reach past the remainder's order from the leading power. */
function neededLength(expansion: Expansion, q: number, count: number): number {
  const powers = expansion.terms.map((t) => t.power).concat(expansion.remainder?.power ?? []);
  let [low, high] = [0, 0];
  for (const power of powers) {
    if (power.kind !== 'number' && !(power.kind === 'negation' && power.operand.kind === 'number')) continue;
    const value = power.kind === 'number' ? Q.toDouble(power.value) : power.operand.kind === 'number' ? -Q.toDouble(power.operand.value) : 0;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  return Math.max(count, Math.ceil((high - low) * q) + 1);
}

/** The first 2^-cut of the segment from its local end, and what is left of it. */
function cutSegment(segment: Segment, cut: number): { readonly near: Segment; readonly rest: Segment | null } {
  if (cut === 0) return { near: segment, rest: null };
  const factor = build.number(1n << BigInt(cut));
  const [lower, upper] = [segment.lower, segment.upper];
  const infinite = segment.expansion.point === 'inf' || segment.expansion.point === '-inf';
  if (segment.local === 'upper' && (upper === null || infinite)) {
    const middle = build.product(lower ?? build.number(1), factor);
    return { near: { ...segment, lower: middle }, rest: { ...segment, upper: middle, local: 'none', atPoint: false } };
  }
  if (segment.local === 'lower' && (lower === null || infinite)) {
    const middle = build.product(upper ?? build.number(-1), factor);
    return { near: { ...segment, upper: middle }, rest: { ...segment, lower: middle, local: 'none', atPoint: false } };
  }
  const [a, b] = [lower ?? build.number(0), upper ?? build.number(0)];
  const part = build.quotient(build.difference(b, a), factor);
  const middle = segment.local === 'lower' ? build.sum(a, part) : build.difference(b, part);
  return segment.local === 'lower'
    ? { near: { ...segment, upper: middle }, rest: { ...segment, lower: middle, local: 'none', atPoint: false } }
    : { near: { ...segment, lower: middle }, rest: { ...segment, upper: middle, local: 'none', atPoint: false } };
}

/** The local end belongs to the segment: infinity itself, or the finite point. */
function reachesLocalEnd(segment: Segment): boolean {
  const { point } = segment.expansion;
  if (segment.atPoint && (point === 'inf' || point === '-inf')) return (segment.local === 'upper' ? segment.upper : segment.lower) === null;
  return true;
}

/** f and the sum by models at the local end and their difference, coarse: for infinite ends that are not the point, and for expansions with a prefactor or on another scale. */
function byDifference<T>(segment: Segment, sum: Expression, n: Numbers<T>, problem: SharpProblem, variable: string, lower: T, check: () => void): Near<T> | Unbounded | null {
  const { r } = n;
  const settled = (x: T): boolean => !r.isPositive(r.subtract(x, lower));
  if (problem.measure === 'relative' && segment.expansion.prefactor !== null) {
    const scaled = inPrefactor(segment.expansion, segment.expansion.prefactor);
    const near = byDifference({ ...segment, expansion: scaled }, sumOf(scaled), n, problem, variable, lower, check);
    if (near === null || near.kind === 'unbounded') return near;
    // The rest is of f and its own sum again.
    return { ...near, rest: near.rest && { ...near.rest, expansion: segment.expansion, sum }, steps: (show) => ['f and the sum are divided by the prefactor.', ...near.steps(show)] };
  }
  if (segment.expansion.oscillating && problem.measure === 'absolute') return byWaves(segment, sum, n, variable, lower, check);
  for (let cut = 0; cut < 12; cut += 1) {
    const part = cutSegment(segment, cut);
    for (const q of [1, 2, 3, 4]) {
      check();
      const local = localModel(part.near, n, variable, 30, q, check);
      if (local === null) continue;
      const s = logModelOf(sum, n, local.m, variable, local.leaf, undefined, check);
      if (s === null) continue;
      const difference = Array.from({ length: Math.max(local.f.length, s.length) }, (_, j) => local.m.subtract(local.f[j] ?? local.m.constant(r.zero), s[j] ?? local.m.constant(r.zero)));
      const [main, ...logs] = difference;
      const [f, ...logsOfF] = local.f;
      if (main === undefined || f === undefined) continue;
      const rest = part.rest === null ? null : wholeTask(part.rest, sum, n);
      const done = (upper: T, found: T): Near<T> => ({ kind: 'bounded', upper, lower: r.lowerEnd(r.maximum(lower, found)), rest, steps: (show) => [`At the local end f and the sum are enclosed separately: their difference is at most ${show(upper)} there.`] });
      if (logs.length > 0 || logsOfF.length > 0) {
        const coarse = withLogarithms(r, difference, local.f, problem.measure);
        if (coarse === null) continue;
        if (settled(coarse) || cut === 11) return done(coarse, r.zero);
        break;
      }
      const g = problem.measure === 'absolute' ? main : local.m.divide(main, f);
      if (g === null) continue;
      if (g.valuation < 0) {
        const lead = g.coefficients[0];
        if (lead === undefined || r.containsZero(lead)) continue;
        const infinity = build.constant('infinity');
        const place = segment.upper === null ? infinity : segment.lower === null ? build.negation(infinity) : pointExpression(segment);
        return { kind: 'unbounded', place, steps: ['f - sum grows without bound at the end of the interval.'] };
      }
      const result = supremumOfModel(r, g, { from: local.from, to: local.to, floor: lower, slack: slackOf(problem) / 4, check });
      const limit = limitOf(r, r.maximum(lower, result.lower), problem);
      if (!r.isPositive(r.subtract(result.upper, limit)) || cut === 11) return done(result.upper, result.lower);
      break;
    }
  }
  return null;
}

/** The far part of an interval that ends at infinity, where f and the sum oscillate: the amplitudes of their difference, cut off where they are below what is known from the near part. */
function byWaves<T>(segment: Segment, sum: Expression, n: Numbers<T>, variable: string, lower: T, check: () => void): Near<T> | null {
  const { r } = n;
  for (let cut = 0; cut < 10; cut += 1) {
    const part = cutSegment(segment, cut);
    for (const q of [1, 2, 4]) {
      check();
      const domain = localDomain(part.near, n, 30, q);
      const found = domain && waveDifference(segment.expansion.function, sum, n, domain.m, variable, domain.leaf, check);
      if (!found) continue;
      if (r.isPositive(r.subtract(found, lower)) && cut < 9) break;
      const rest = part.rest === null ? null : wholeTask(part.rest, sum, n);
      return { kind: 'bounded', upper: found, lower, rest, steps: (show) => [`Beyond ${part.rest === null ? 'the start of the interval' : `2^${cut} times its start`} f - sum = A + B cos(phi) + C sin(phi) with enveloping series as amplitudes (DLMF 6.12(ii), 7.12(ii), 9.7(iii), 10.17(iii)); |A| + sqrt(B^2 + C^2) is at most ${show(found)} there.`] };
    }
  }
  return null;
}

/** f over its prefactor, and the sum without it: their ratio is that of f and the sum. */
const inPrefactor = (expansion: Expansion, prefactor: Expression): Expansion => ({ ...expansion, function: build.quotient(expansion.function, prefactor), prefactor: null });
