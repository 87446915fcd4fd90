/** A tan(c x) between its poles: x = k T + r with T = pi / (2 c); f = A tan(c r) for even k, -A / tan(c r) for odd k (DLMF 4.21.10 shifted by quarter periods). */
import { build, type Expression, Q, type Rational, substitute } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { type Ball, real } from '../../rigorous/index.ts';
import { binaryExponent, powerOfTwo, roundTo } from '../format.ts';
import { allowedOff, arithmeticOf, fitKernel, greater, inParts, kernelStatements, largestIn, lesser, let_, REDUCED, type Reduced, type ReductionProblem, relation, requireSolid, scaledError, tooSmall, valueRange } from './kernel.ts';
import { nearestInteger, type Period, reduced, roundedUp, splitPeriod } from './parts.ts';
import { CONSTANT_BITS, constantBall } from './recognise.ts';

const SHARE = Q.rational(1, 16);
/** More than 2 / sin(2 t), the relative slope of tan t, for t from 3/4 to a little more than pi/4. */
const RELATIVE_SLOPE = Q.rational(33, 16);
/** More than tan t and 1 + tan^2 t for the reduced t. */
const LARGEST = Q.rational(5, 4);
const STEEPEST = Q.rational(11, 4);

export function reduceTangent(problem: ReductionProblem, factor: Expression, rate: Expression, budget: Budget): Reduced {
  const { whole, row, parameter } = problem;
  const { low, high, measure, format, variable } = whole;
  const arithmetic = arithmeticOf(whole);
  const { operations } = arithmetic;
  const [a, c] = [constantBall(factor), constantBall(rate)];
  const period = c && real.divide(real.scaleByPowerOfTwo(real.pi(CONSTANT_BITS), -1), c, CONSTANT_BITS);
  if (!a || !c || !period || real.sign(a) === 0) throw new Declined('bad-request', 'The constants of this tangent are zero or not known; give them as exact numbers.');
  const square = roundTo(real.upper(real.multiply(a, a, CONSTANT_BITS)), format);
  if (!square || binaryExponent(square) * 2 < format.emin || binaryExponent(square) * 2 > format.emax) throw new Declined('bad-request', `The constant factor of this function is too large or too small for ${format.name}; take it out.`);
  const [speed, size] = [roundedUp(real.upper(c)), roundedUp(real.upper(real.absolute(a)))];
  const u = powerOfTwo(-format.precision);
  const goal = Q.multiply(whole.tolerance ?? u, whole.tolerance && measure === 'ulp' ? u : Q.ONE);
  const closest = clearance(period, low, high, measure === 'absolute');
  const ends = [low, high].map((x) => valueRange(whole.function, variable, x));
  const most = roundedUp(ends.reduce((m, v) => (v ? greater(m, largestIn(v)) : m), Q.ZERO));
  const relativeGoal = measure === 'absolute' ? Q.divide(goal, greater(most, Q.ONE)) : goal;
  const split = splitPeriod(period, low, high, arithmetic, Q.divide(Q.multiply(relativeGoal, Q.multiply(SHARE, lesser(Q.ONE, closest.odd))), Q.multiply(speed, speed)), 'a quarter period', closest.odd);
  const [odd, even] = [closest.odd, closest.even].map((distance) => movedShare(rate, distance, speed, split));
  if (!odd || (!even && measure !== 'absolute')) throw tooSmall(whole, whole.tolerance ?? Q.ZERO);
  const moved = Q.multiply(Q.multiply(split.error, speed), Q.multiply(size, STEEPEST));
  const here = lesser(most, Q.multiply(size, LARGEST));
  const shifted = split.least < 0 || split.most > 0;
  const turned = [split.least, split.least + 1].some((k) => Math.abs(k % 2) === 1 && k <= split.most);
  /** Of the polynomial's relative error, its own last rounding included. */
  const totalOf = (e: Rational): Rational => {
    const direct = measure === 'absolute' ? Q.add(Q.multiply(e, Q.add(here, moved)), shifted ? moved : Q.ZERO) : Q.multiply(Q.add(e, shifted && even ? Q.multiply(even, Q.add(Q.ONE, e)) : Q.ZERO), measure === 'ulp' ? powerOfTwo(format.precision) : Q.ONE);
    const off = Q.add(e, Q.multiply(odd, Q.add(Q.ONE, e)));
    // The square of the factor rounds as well.
    const inverse = Q.compare(off, Q.HALF) < 0 ? Q.add(Q.divide(off, Q.subtract(Q.ONE, off)), Q.multiply(u, Q.rational(2))) : Q.ONE;
    return turned ? greater(direct, scaledError(build.isOneNumber(factor) ? Q.divide(off, Q.subtract(Q.ONE, lesser(off, Q.HALF))) : inverse, most, measure, arithmetic)) : direct;
  };
  const asked = whole.tolerance && allowedOff(totalOf, whole.tolerance, Q.rational(1, 8));
  if (whole.tolerance && asked && Q.isZero(asked)) throw tooSmall(whole, whole.tolerance);
  const kernel = fitKernel(problem, { function: substitute(whole.function, variable, build.symbol(REDUCED)), low: Q.negate(split.reach), high: split.reach, measure: 'relative', ...(asked ? { tolerance: asked } : {}) }, budget);
  requireSolid(kernel, size, format);
  const { error } = kernel.found;
  const total = totalOf(error.total);
  const [k, q, n, y] = ['k', 'q', 'n', 'y'].map(build.symbol);
  if (!k || !q || !n || !y) throw new RangeError('names');
  const nearest = (e: Expression): Expression => nearestInteger(e, row, operations);
  const { steps, value } = kernelStatements(kernel.found.writtenProgram);
  const rounded = row.family === 'javascript';
  const inMeasure = (part: Rational): Rational => (measure === 'absolute' ? Q.multiply(part, most) : measure === 'ulp' ? Q.multiply(part, powerOfTwo(format.precision)) : part);
  const approximation = lesser(total, inMeasure(error.approximation));
  return {
    kernels: [kernel],
    body: [
      let_('k', nearest(build.product(build.symbol(parameter), build.number(split.inverse)))),
      let_(REDUCED, reduced(build.symbol(parameter), k, split.parts)),
      ...steps,
      let_('y', value),
      // k modulo 2 in -1..1; its square tells odd quarters.
      let_('q', build.sum(k, build.negation(build.product(build.number(2), nearest(build.product(k, build.number(Q.HALF))))))),
      let_('n', build.product(q, q)),
      { kind: 'if', condition: relation(n, '=', Q.ONE), then: [{ kind: 'return', value: build.quotient(build.number(Q.negate(square)), y), rounded }] },
      { kind: 'return', value: y, rounded },
    ],
    error: inParts(total, approximation, lesser(inMeasure(error.rounding), Q.subtract(total, approximation)), measure === 'absolute' ? null : error.subnormal),
    method: `${parameter} = k T + r with T = ${Q.toDouble(real.lower(period)).toPrecision(6)}, a quarter period, in ${split.parts.length} ${split.parts.length === 1 ? 'part' : 'parts'}; |r| <= ${Q.toDouble(split.reach).toPrecision(4)}, r off by at most ${Q.toDouble(split.error).toExponential(2)}; result p(r) or its negative reciprocal by k modulo 2`,
  };
}

interface Clearance {
  /** Least |x - k T| on the interval over odd k (poles), and over even k other than 0 (zeros). */
  readonly odd: Rational;
  readonly even: Rational;
}

/** Throws Declined for a pole in the interval, and, unless zeros may be there, for a zero that is no float. */
function clearance(period: Ball, low: Rational, high: Rational, zeros: boolean): Clearance {
  const [lower, upper] = [real.lower(period), real.upper(period)];
  const index = (x: Rational): number => Number(Q.floor(Q.divide(x, lower)));
  const [first, last] = [index(low) - 1, index(high) + 2];
  let [odd, even] = [lower, lower];
  for (let k = first; k <= Math.min(last, first + 8); k += 1) {
    if (k === 0) continue;
    const places = [Q.multiply(Q.rational(k), lower), Q.multiply(Q.rational(k), upper)];
    const [from, to] = [places.reduce(lesser), places.reduce(greater)];
    const gap = greater(Q.subtract(low, to), Q.subtract(from, high));
    if (k % 2 === 0) {
      even = lesser(even, greater(gap, Q.ZERO));
      if (Q.signOf(gap) <= 0 && !zeros) throw new Declined('bad-request', `The function has a zero near ${Q.toDouble(from)} that is no float, where no relative error can be kept; ask for the absolute measure or leave that point out.`);
    } else {
      odd = lesser(odd, gap);
      if (Q.signOf(gap) <= 0) throw new Declined('bad-request', `The tangent has a pole near ${Q.toDouble(from)}; take an interval between two poles.`);
    }
  }
  return { odd, even };
}

/** Bands of |r| by powers of two, each with its own rounding of r. */
const MOST_BANDS = 40;

/** sup |f'/f| times what r is off by, for |r| from `distance` on; null where r is off by too much of itself. */
function movedShare(rate: Expression, distance: Rational, speed: Rational, split: Period): Rational | null {
  const count = Math.max(Math.abs(split.least), Math.abs(split.most), 1);
  let worst = Q.ZERO;
  let to = split.reach;
  for (let band = 0; band < MOST_BANDS && Q.compare(to, distance) >= 0; band += 1) {
    const error = split.errorAt(count, to);
    const start = Q.subtract(greater(distance, Q.divide(to, Q.rational(2))), error);
    if (Q.signOf(start) <= 0) return null;
    // 2 / sin(2 t) falls up to pi/4, and is little more than 2 up to the largest reduced t.
    const slope = valueRange(build.quotient(build.number(2), build.call('sin', build.product(build.number(2), rate, build.symbol(REDUCED)))), REDUCED, lesser(start, Q.divide(Q.rational(3, 4), speed)));
    const share = slope && Q.multiply(Q.multiply(error, speed), greater(RELATIVE_SLOPE, largestIn(slope)));
    // Between r and what is computed for it f grows by less than a thousandth.
    if (!share || Q.compare(share, powerOfTwo(-11)) >= 0) return null;
    worst = greater(worst, Q.multiply(share, Q.rational(1025, 1024)));
    to = Q.divide(to, Q.rational(2));
  }
  return Q.compare(to, distance) >= 0 ? null : roundedUp(worst);
}
