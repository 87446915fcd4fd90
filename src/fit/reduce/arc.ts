/** A asin(x) and A acos(x) up to |x| = 1: asin x = pi/2 - 2 asin s and acos x = 2 asin s with s = sqrt((1 - x)/2) (DLMF 4.24.1 with 4.21.10, half-angle form). */
import { build, type Expression, Q, type Rational } from '../../expression/index.ts';
import { attempt, type Budget, Declined } from '../../outcome.ts';
import { type Interval, interval, real } from '../../rigorous/index.ts';
import type { Statement } from '../../write/index.ts';
import { powerOfTwo } from '../format.ts';
import type { Program } from '../program.ts';
import { twoWords, type TwoWords } from './arctangent.ts';
import { assembledError, piecesOf } from './assembled.ts';
import { absoluteOf, allowedOff, arithmeticOf, choice, fitKernel, greater, inParts, type Kernel, kernelStatements, lastRounded, lesser, let_, REDUCED, type Reduced, type ReductionProblem, relation, requireSolid, tooSmall, toleranceFor } from './kernel.ts';
import { halfUlp, roundedUp } from './parts.ts';
import { constantBall } from './recognise.ts';

/** More than 1/sqrt(1 - s^2), the slope of asin, for s up to a little more than 1/2. */
const STEEPEST = Q.rational(297, 256);
/** More than asin(1/2) = pi/6. */
const LARGEST = Q.rational(135, 256);
const PIECES = 64;
const MINUS_HALF = Q.negate(Q.HALF);

/** One range of x: the sum `words` + `times` p(r), and the r that it takes. */
interface Range {
  readonly words: TwoWords;
  readonly times: 1 | -1 | -2;
  readonly low: Rational;
  readonly high: Rational;
  /** r is the square root, rounded once, not x itself. */
  readonly rooted: boolean;
  /** Bounds of |f / A| there. */
  readonly least: Rational;
  readonly most: Rational;
}

export function reduceArc(problem: ReductionProblem, of: 'asin' | 'acos', factor: Expression, budget: Budget): Reduced {
  const { whole, row, parameter } = problem;
  const { low, high, measure, format } = whole;
  if (Q.compare(low, Q.MINUS_ONE) < 0 || Q.compare(high, Q.ONE) > 0) throw new Declined('bad-request', `${of} has no real value at an end of the interval; take an interval inside [-1, 1].`);
  if (row.family === 'glsl' || row.family === 'hlsl') throw new Declined('bad-request', 'Shading languages do not promise a square root that rounds correctly, which this reduction needs; take an interval inside [-1/2, 1/2].');
  const arithmetic = arithmeticOf(whole);
  const { operations } = arithmetic;
  const a = constantBall(factor);
  const size = a && roundedUp(real.upper(real.absolute(a)));
  const smallest = a && real.lower(real.absolute(a));
  if (!a || !size || !smallest || Q.signOf(smallest) <= 0) throw new Declined('bad-request', 'The factor of this inverse function is zero or not known; give it as an exact number.');
  const u = powerOfTwo(-operations.precision);
  const asin = build.call('asin', build.symbol(REDUCED));
  const f = build.isOneNumber(factor) ? asin : build.product(factor, asin);
  const largest = roundedUp(Q.multiply(size, LARGEST));
  const half = twoWords(Q.HALF, a, format);
  const full = twoWords(Q.ONE, a, format);
  const beyond = Q.compare(high, Q.HALF) > 0 || (of === 'asin' && Q.compare(low, MINUS_HALF) < 0);
  // 1 - |x| and its half are exact beyond 1/2, so that s is off by one rounding.
  const moved = { absolute: Q.multiply(Q.multiply(size, STEEPEST), Q.multiply(u, Q.HALF)), relative: Q.multiply(STEEPEST, u) };
  const rooted = { low: Q.ZERO, high: Q.HALF, rooted: true, times: -2 as const };
  const ranges: readonly Range[] = of === 'asin'
    ? beyond ? [{ ...rooted, words: half, least: Q.HALF, most: Q.rational(11, 7) }] : []
    : [
        ...(Q.compare(low, MINUS_HALF) < 0 ? [{ ...rooted, words: full, least: Q.rational(2), most: Q.rational(22, 7) }] : []),
        ...(Q.compare(low, Q.HALF) <= 0 && Q.compare(high, MINUS_HALF) >= 0 ? [{ words: half, times: -1 as const, low: greater(low, MINUS_HALF), high: lesser(high, Q.HALF), rooted: false, least: Q.ONE, most: Q.rational(15, 7) }] : []),
      ];
  const roundOff = (r: Range, kernelError: Rational): Rational => {
    const by = Q.rational(Math.abs(r.times));
    const inner = Q.add(Q.absolute(r.words.low), Q.multiply(by, Q.add(largest, kernelError)));
    const off = Q.add(Q.add(Q.multiply(by, Q.add(kernelError, r.rooted ? moved.absolute : Q.ZERO)), r.words.missing), halfUlp(inner, operations));
    return lastRounded(off, Q.multiply(smallest, r.least), Q.multiply(size, r.most), measure, arithmetic);
  };
  // The polynomial is the result itself near zero (asin), or half of it near one (acos).
  const direct = of === 'asin' || beyond;
  const doubled = of === 'acos' && measure === 'absolute' ? Q.rational(2) : Q.ONE;
  const totalOf = (kernelError: Rational): Rational => ranges.reduce((worst, r) => greater(worst, roundOff(r, absoluteOf(kernelError, measure, largest, format))), direct ? Q.multiply(doubled, kernelError) : Q.ZERO);
  const goal = whole.tolerance && allowedOff(totalOf, whole.tolerance, greater(whole.tolerance, toleranceFor(Q.multiply(whole.tolerance, largest), measure, largest, format)));
  const within = (sought: Rational | undefined): Kernel => fitKernel(problem, { function: f, low: MINUS_HALF, high: Q.HALF, measure, ...(of === 'acos' ? { inherited: moved } : {}), ...(sought ? { tolerance: sought } : {}) }, budget);
  const everywhere = goal && !Q.isZero(goal) ? attempt(() => within(goal)) : null;
  // Where the bound that is the same everywhere leaves nothing, or less than the polynomial itself can keep, the one by pieces may still do.
  const kernel = everywhere?.ok ? everywhere.value : within(whole.tolerance && Q.divide(whole.tolerance, Q.rational(3)));
  requireSolid(kernel, largest, format);
  const { error, certified, program } = kernel.found;
  const sharp = (r: Range): Rational => {
    const uniform = roundOff(r, absoluteOf(error.total, measure, largest, format));
    const by = Q.rational(Math.abs(r.times));
    const missing = (piece: Interval): Rational => {
      const reach = Q.fromDouble(interval.size(piece));
      const polynomial = measure === 'absolute' ? certified : Q.multiply(certified, lesser(largest, Q.multiply(Q.multiply(size, STEEPEST), reach)));
      return Q.add(Q.multiply(by, Q.add(polynomial, r.rooted ? Q.multiply(Q.multiply(size, STEEPEST), Q.multiply(u, reach)) : Q.ZERO)), r.words.missing);
    };
    const bound = assembledError({ program: { steps: program.steps, result: outside(r, program.result) }, variable: REDUCED, pieces: piecesOf(r.low, r.high, PIECES), missing }, measure, arithmetic);
    return bound && Q.compare(bound, uniform) < 0 ? bound : uniform;
  };
  const total = ranges.reduce((worst, r) => greater(worst, sharp(r)), direct ? Q.multiply(doubled, error.total) : Q.ZERO);
  if (whole.tolerance && Q.compare(total, whole.tolerance) > 0) throw tooSmall(whole, whole.tolerance);
  const approximation = lesser(Q.multiply(doubled, error.approximation), total);
  const body = code(of, parameter, half, full, kernel.found.writtenProgram, low, row.family === 'javascript');
  // Beside its zero acos takes multiples of the root of an ulp: never a subnormal number.
  const subnormal = of === 'asin' ? error.subnormal : null;
  return {
    kernels: [kernel],
    body,
    error: inParts(total, approximation, lesser(error.rounding, Q.subtract(total, approximation)), subnormal),
    method: `r = sqrt((1 - |${parameter}|)/2) beyond 1/2, r = ${parameter} up to there; p(r) for asin, with multiples of pi/2 in two parts; the square root is correctly rounded`,
  };
}

/** high + (low + times y), as the code has it. */
function outside({ words, times }: Pick<Range, 'words' | 'times'>, y: Expression): Expression {
  const part = build.negation(times === -2 ? build.product(build.number(2), y) : y);
  return build.sum(build.number(words.high), build.sum(build.number(words.low), part));
}

function code(of: 'asin' | 'acos', parameter: string, half: TwoWords, full: TwoWords, program: Program, low: Rational, rounded: boolean): readonly Statement[] {
  const x = build.symbol(parameter);
  const signed = Q.signOf(low) < 0;
  const [a, y, v, w] = [signed ? build.symbol('a') : x, build.symbol('y'), build.symbol('v'), build.symbol('w')];
  const far = relation(a, '>', Q.HALF);
  const root = build.squareRoot(build.product(build.number(Q.HALF), build.sum(build.number(1), build.negation(a))));
  const { steps, value } = kernelStatements(program);
  const shared = (r: Expression): Statement[] => [
    ...(signed ? [let_('a', choice([relation(x, '<', Q.ZERO), build.negation(x)], [null, x]))] : []),
    let_(REDUCED, choice([far, root], [null, r])),
    ...steps,
    let_('y', value),
  ];
  if (of === 'asin') {
    const folded = choice([far, outside({ words: half, times: -2 }, y)], [null, y]);
    const whole: readonly Statement[] = signed ? [let_('v', folded), let_('w', choice([relation(x, '<', Q.ZERO), build.negation(v)], [null, v]))] : [let_('w', folded)];
    return [...shared(a), ...whole, { kind: 'return', value: w, rounded }];
  }
  const branches = choice([relation(x, '>', Q.HALF), build.product(build.number(2), y)], ...(signed ? [[relation(x, '<', MINUS_HALF), outside({ words: full, times: -2 }, y)] as const] : []), [null, outside({ words: half, times: -1 }, y)]);
  return [...shared(x), let_('w', branches), { kind: 'return', value: w, rounded }];
}
