/** A atan(x) on any interval, by octants: atan x = pi/4 n + atan t with t = x, (x-1)/(x+1) or -1/x (DLMF 4.24.15 and 4.24.16). */
import { build, Q, type Rational, substitute } from '../../expression/index.ts';
import type { Expression } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { type Ball, type Interval, real } from '../../rigorous/index.ts';
import type { Statement } from '../../write/index.ts';
import { type FloatFormat, powerOfTwo, roundTo } from '../format.ts';
import type { Arithmetic } from '../program.ts';
import type { FitMeasure } from '../proof.ts';
import { assembledError, piecesOf } from './assembled.ts';
import { absoluteOf, allowedOff, arithmeticOf, choice, fitKernel, greater, inParts, type Kernel, kernelStatements, lastRounded, lesser, let_, leastIn, largestIn, REDUCED, type Reduced, type ReductionProblem, relation, requireSolid, tooSmall, valueRange } from './kernel.ts';
import { halfUlp, roundedUp } from './parts.ts';
import { CONSTANT_BITS, constantBall } from './recognise.ts';

/** About tan(pi/8) and tan(3 pi/8), with eight bits. */
export const FIRST_OCTANT = Q.rational(53, 128);
const SECOND_OCTANT = Q.rational(309, 128);
/** |t| after the reduction: the largest of both thresholds' images. */
export const WINDOW = Q.rational(3395, 8192);

/** A constant as two floats, and what they miss. */
export interface TwoWords {
  readonly high: Rational;
  readonly low: Rational;
  readonly missing: Rational;
}

/** A pi times a rational. */
export function twoWords(multiple: Rational, a: Ball, format: FloatFormat): TwoWords {
  const value = real.multiply(a, real.multiply(real.fromRational(multiple, CONSTANT_BITS), real.pi(CONSTANT_BITS), CONSTANT_BITS), CONSTANT_BITS);
  const middle = Q.divide(Q.add(real.lower(value), real.upper(value)), Q.rational(2));
  const high = roundTo(middle, format) ?? Q.ZERO;
  const low = roundTo(Q.subtract(middle, high), format) ?? Q.ZERO;
  return { high, low, missing: Q.add(Q.absolute(Q.subtract(middle, Q.add(high, low))), Q.subtract(real.upper(value), real.lower(value))) };
}

interface Reconstruction {
  readonly low: Rational;
  readonly high: Rational;
  readonly measure: FitMeasure;
  readonly arithmetic: Arithmetic;
  /** What the exact polynomial misses. */
  readonly missing: Rational;
}

/** |x| beyond which -1/x is looked at as a whole. */
const FAR = Q.rational(64);
const PIECES = 48;

/** The outer octants by the very operations of the code; null where a piece has no bound in the measure. */
function piecewise({ found }: Kernel, [quarter, half]: readonly TwoWords[], { low, high, measure, arithmetic, missing }: Reconstruction): Rational | null {
  const x = build.symbol('x');
  const largest = greater(Q.absolute(low), Q.absolute(high));
  const { steps, result } = found.program;
  const bound = (words: TwoWords, r: Expression, pieces: readonly Interval[]): Rational | null =>
    assembledError({ program: { steps: [{ name: REDUCED, value: r }, ...steps], result: build.sum(build.number(words.high), build.sum(build.number(words.low), result)) }, variable: 'x', pieces, missing: () => Q.add(missing, words.missing) }, measure, arithmetic);
  const middle = quarter && Q.compare(largest, FIRST_OCTANT) > 0 ? bound(quarter, build.quotient(build.sum(x, build.number(Q.MINUS_ONE)), build.sum(x, build.number(1))), piecesOf(FIRST_OCTANT, lesser(largest, SECOND_OCTANT), PIECES)) : Q.ZERO;
  const outer = half && Q.compare(largest, SECOND_OCTANT) > 0 ? bound(half, build.quotient(build.number(Q.MINUS_ONE), x), [...piecesOf(SECOND_OCTANT, lesser(largest, FAR), PIECES), ...(Q.compare(largest, FAR) > 0 ? piecesOf(FAR, largest, 1) : [])]) : Q.ZERO;
  return middle && outer && greater(middle, outer);
}

export function reduceArctangent(problem: ReductionProblem, factor: Expression, budget: Budget): Reduced {
  const { whole, row, parameter } = problem;
  const { low, high, measure, format, variable } = whole;
  const arithmetic = arithmeticOf(whole);
  const { operations } = arithmetic;
  const a = constantBall(factor);
  const size = a && roundedUp(Q.absolute(real.upper(real.absolute(a))));
  if (!a || !size || real.sign(a) === 0) throw new Declined('bad-request', 'The factor of this arctangent is not known; give it as an exact number.');
  const u = powerOfTwo(-operations.precision);
  const ranges = [Q.rational(1, 4), Q.HALF].map((n) => twoWords(n, a, format));
  const [quarter, half] = ranges;
  if (!quarter || !half) throw new RangeError('two ranges');
  const f = substitute(whole.function, variable, build.symbol(REDUCED));
  const largest = roundedUp(Q.multiply(size, WINDOW));
  // t by three rounded operations at most, or one that can underflow.
  const moved = Q.multiply(size, Q.add(Q.multiply(WINDOW, Q.multiply(u, Q.rational(25, 8))), powerOfTwo(operations.emin - operations.precision)));
  const sizeAt = (x: Rational): { readonly low: Rational; readonly high: Rational } => valueRange(whole.function, variable, x) ?? { low: Q.ZERO, high: size };
  const ends = [roundedUp(largestIn(sizeAt(FIRST_OCTANT))), roundedUp(largestIn(sizeAt(SECOND_OCTANT)))];
  const most = greater(largestIn(sizeAt(low)), largestIn(sizeAt(high)));
  const leastOf = [leastIn(sizeAt(FIRST_OCTANT)), leastIn(sizeAt(SECOND_OCTANT))];
  const outside = (kernelError: Rational): Rational =>
    ranges.reduce((worst, { low: lowPart, missing }, i) => {
      const off = Q.add(Q.add(Q.add(kernelError, moved), missing), halfUlp(Q.add(Q.multiply(Q.add(Q.absolute(lowPart), largest), Q.rational(17, 16)), kernelError), operations));
      const top = i === 0 ? (ends[1] ?? most) : Q.multiply(size, Q.rational(11, 7));
      return greater(worst, lastRounded(off, leastOf[i] ?? Q.ZERO, top, measure, arithmetic));
    }, Q.ZERO);
  const totalOf = (kernelError: Rational): Rational => greater(kernelError, outside(absoluteOf(kernelError, measure, largest, format)));
  const goal = whole.tolerance && allowedOff(totalOf, whole.tolerance, whole.tolerance);
  if (whole.tolerance && goal && Q.isZero(goal)) throw tooSmall(whole, whole.tolerance);
  const kernel = fitKernel(problem, { function: f, low: Q.negate(WINDOW), high: WINDOW, measure, ...(goal ? { tolerance: goal } : {}) }, budget);
  requireSolid(kernel, largest, format);
  const { error } = kernel.found;
  const uniform = outside(absoluteOf(error.total, measure, largest, format));
  const sharp = piecewise(kernel, ranges, { low, high, measure, arithmetic, missing: measure === 'absolute' ? kernel.found.certified : Q.multiply(kernel.found.certified, largest) });
  const total = greater(error.total, sharp && Q.compare(sharp, uniform) < 0 ? sharp : uniform);
  const x = build.symbol(parameter);
  const signed = Q.signOf(low) < 0;
  const [size_, h, l, y] = ['a', 'h', 'l', 'y'].map(build.symbol);
  const argument = signed ? size_ : x;
  if (!argument || !h || !l || !y) throw new RangeError('names');
  const [far, middle] = [relation(argument, '>', SECOND_OCTANT), relation(argument, '>', FIRST_OCTANT)];
  const pick = (of: (w: TwoWords) => Rational): Expression => choice([far, build.number(of(half))], [middle, build.number(of(quarter))], [null, build.number(Q.ZERO)]);
  const { steps, value } = kernelStatements(kernel.found.writtenProgram);
  const rounded = row.family === 'javascript';
  const whenSigned: readonly Statement[] = [let_('y', build.sum(h, build.sum(l, value))), let_('w', choice([relation(x, '<', Q.ZERO), build.negation(y)], [null, y])), { kind: 'return', value: build.symbol('w'), rounded }];
  return {
    kernels: [kernel],
    body: [
      ...(signed ? [let_('a', choice([relation(x, '<', Q.ZERO), build.negation(x)], [null, x]))] : []),
      let_(REDUCED, choice([far, build.quotient(build.number(Q.MINUS_ONE), argument)], [middle, build.quotient(build.sum(argument, build.number(Q.MINUS_ONE)), build.sum(argument, build.number(1)))], [null, argument])),
      let_('h', pick((w) => w.high)),
      let_('l', pick((w) => w.low)),
      ...steps,
      ...(signed ? whenSigned : [{ kind: 'return' as const, value: build.sum(h, build.sum(l, value)), rounded }]),
    ],
    error: inParts(total, Q.compare(error.approximation, total) < 0 ? error.approximation : total, error.rounding, error.subnormal),
    method: `atan by octants: r = ${parameter}, (${parameter} - 1)/(${parameter} + 1) or -1/${parameter}, |r| <= ${Q.toDouble(WINDOW).toPrecision(4)}, with the multiple of pi/4 in two parts`,
  };
}
