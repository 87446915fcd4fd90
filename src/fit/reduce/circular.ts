/** sin and cos of c x + d: x = k T + r with T = pi / (2 c); four quarters, two polynomials. */
import { build, type Expression, Q, type Rational, substitute } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { type Ball, encloseInterval, interval, real } from '../../rigorous/index.ts';
import { describe } from '../../functions/index.ts';
import { powerOfTwo } from '../format.ts';
import { piecesOf } from './assembled.ts';
import { arithmeticOf, fitKernel, greater, inParts, kernelStatements, lesser, let_, REDUCED, type Reduced, type ReductionProblem, relation, requireSolid, tooSmall } from './kernel.ts';
import { nearestInteger, type Period, reduced, roundedUp, splitPeriod } from './parts.ts';
import { CONSTANT_BITS, constantBall } from './recognise.ts';

const SHARE = Q.rational(1, 16);

export function reduceCircular(problem: ReductionProblem, rate: Expression, quarter: Expression, budget: Budget): Reduced {
  const { whole, row, parameter } = problem;
  const { low, high, measure, format, variable } = whole;
  const arithmetic = arithmeticOf(whole);
  const c = constantBall(rate);
  const period = c && real.divide(real.scaleByPowerOfTwo(real.pi(CONSTANT_BITS), -1), c, CONSTANT_BITS);
  if (!c || !period) throw new Declined('bad-request', 'The rate of this sine or cosine is zero or not known; give it as an exact number.');
  const r = build.symbol(REDUCED);
  const [f, g] = [substitute(whole.function, variable, r), substitute(quarter, variable, r)];
  const speed = roundedUp(Q.absolute(real.upper(real.absolute(c))));
  const u = powerOfTwo(-format.precision);
  // |f| <= A with A^2 = f(0)^2 + f(T)^2, and |f'| <= |c| A.
  const amplitude = amplitudeOf(f, g);
  const least = measure === 'absolute' ? Q.ONE : awayFromZeros(problem, period, amplitude);
  const goal = whole.tolerance ?? (measure === 'ulp' ? Q.ONE : u);
  const absoluteGoal = measure === 'absolute' ? goal : Q.multiply(Q.multiply(goal, least), measure === 'ulp' ? u : Q.ONE);
  const split = splitPeriod(period, low, high, arithmetic, Q.divide(Q.multiply(absoluteGoal, SHARE), Q.multiply(speed, amplitude)), 'a quarter period');
  const moved = Q.multiply(Q.multiply(speed, amplitude), split.error);
  if (whole.tolerance && Q.compare(moved, absoluteGoal) >= 0) throw tooSmall(whole, whole.tolerance);
  // Nothing is lost of arguments in the quarter about zero; elsewhere |f| is at least `least`.
  const shared = { low: Q.negate(split.reach), high: split.reach, measure, inherited: { absolute: moved, relative: measure === 'absolute' ? Q.ZERO : movedShare(problem, period, split, [f, g], { speed, amplitude }) ?? roundedUp(Q.divide(moved, least)) }, ...(whole.tolerance ? { tolerance: whole.tolerance } : {}) };
  const even = fitKernel(problem, { ...shared, function: f }, budget);
  const odd = fitKernel(problem, { ...shared, function: g }, budget);
  for (const kernel of [even, odd]) requireSolid(kernel, amplitude, format);
  const total = greater(even.found.error.total, odd.found.error.total);
  const [approximation, rounding] = [greater(even.found.error.approximation, odd.found.error.approximation), greater(even.found.error.rounding, odd.found.error.rounding)];
  const subnormal = even.found.error.subnormal && odd.found.error.subnormal ? greater(even.found.error.subnormal, odd.found.error.subnormal) : (even.found.error.subnormal ?? odd.found.error.subnormal);
  const [k, q, n] = [build.symbol('k'), build.symbol('q'), build.symbol('n')];
  const nearest = (y: Expression): Expression => nearestInteger(y, row, arithmetic.operations);
  const [first, second] = [kernelStatements(even.found.writtenProgram), kernelStatements(odd.found.writtenProgram)];
  const rounded = row.family === 'javascript';
  return {
    kernels: [even, odd],
    body: [
      let_('k', nearest(build.product(build.symbol(parameter), build.number(split.inverse)))),
      let_(REDUCED, reduced(build.symbol(parameter), k, split.parts)),
      // k modulo 4 in -2..2; its square tells odd quarters, and 1 - q^2 / 2 is the sign of even ones.
      let_('q', build.sum(k, build.negation(build.product(build.number(4), nearest(build.product(k, build.number(Q.rational(1, 4)))))))),
      let_('n', build.product(q, q)),
      { kind: 'if', condition: relation(n, '=', Q.ONE), then: [...second.steps, { kind: 'return', value: build.product(q, second.value), rounded }] },
      ...first.steps,
      { kind: 'return', value: build.product(build.sum(build.number(1), build.negation(build.product(build.number(Q.HALF), n))), first.value), rounded },
    ],
    error: inParts(total, Q.compare(approximation, total) < 0 ? approximation : total, rounding, subnormal),
    method: `${parameter} = k T + r with T = ${Q.toDouble(real.lower(period)).toPrecision(6)}, a quarter period, in ${split.parts.length} ${split.parts.length === 1 ? 'part' : 'parts'}; |r| <= ${Q.toDouble(split.reach).toPrecision(4)}, r off by at most ${Q.toDouble(split.error).toExponential(2)}; result by k modulo 4`,
  };
}

function amplitudeOf(f: Expression, g: Expression): Rational {
  const at = (e: Expression): Rational => {
    const value = constantBall(substitute(e, REDUCED, build.number(0)));
    if (!value) throw new Declined('bad-request', 'The amplitude of this function is not known; give its constants as exact numbers.');
    return real.upper(real.absolute(value));
  };
  const square = Q.add(Q.power(at(f), 2), Q.power(at(g), 2));
  const root = real.sqrt(real.fromRational(square, 96), 96);
  if (!root) throw new Declined('undecided', 'The amplitude of this function could not be bounded.');
  return roundedUp(real.upper(root));
}

/** Quarters that are looked at one by one, and the pieces of each. */
const FEW_QUARTERS = 8;
const QUARTER_PIECES = 64;

/** sup |f'/f| times what r is off by, quarter by quarter; null where there are many or a piece cannot be told from a zero. */
function movedShare({ whole: { low, high } }: ReductionProblem, period: Ball, split: Period, [f, g]: readonly [Expression, Expression], { speed, amplitude }: { readonly speed: Rational; readonly amplitude: Rational }): Rational | null {
  if (split.most - split.least > FEW_QUARTERS) return null;
  let worst = Q.ZERO;
  for (let k = split.least; k <= split.most; k += 1) {
    if (k === 0) continue;
    const turns = real.multiply(real.fromRational(Q.rational(k), CONSTANT_BITS), period, CONSTANT_BITS);
    const from = greater(Q.negate(split.reach), Q.subtract(low, real.upper(turns)));
    const to = lesser(split.reach, Q.subtract(high, real.lower(turns)));
    if (Q.compare(from, to) >= 0) continue;
    const [own, slope] = k % 2 === 0 ? [f, g] : [g, f];
    for (const r of piecesOf(from, to, QUARTER_PIECES)) {
      const [value, rate] = [own, slope].map((e) => encloseInterval(e, new Map([[REDUCED, r]]), describe));
      const size = value ? interval.leastSize(value) : 0;
      if (!rate || !(size > 0)) return null;
      const off = split.errorAt(Math.abs(k), Q.fromDouble(interval.size(r)));
      // Between r and what is computed for it.
      const steepest = Q.add(Q.fromDouble(interval.size(rate)), Q.multiply(Q.multiply(speed, amplitude), off));
      worst = greater(worst, Q.divide(Q.multiply(Q.multiply(off, speed), steepest), Q.fromDouble(size)));
    }
  }
  return roundedUp(worst);
}

const PIECES = 256;

/** In a relative measure: |f| outside the quarter about zero must stay away from zero; its least size there. */
function awayFromZeros({ whole }: ReductionProblem, period: Parameters<typeof real.lower>[0], amplitude: Rational): Rational {
  const { low, high } = whole;
  const inner = Q.multiply(Q.absolute(Q.divide(Q.add(real.lower(period), real.upper(period)), Q.rational(2))), Q.rational(7, 16));
  let least = amplitude;
  const look = (from: Rational, to: Rational): void => {
    if (Q.compare(from, to) >= 0) return;
    const step = Q.divide(Q.subtract(to, from), Q.rational(PIECES));
    for (let k = 0; k < PIECES; k += 1) {
      const x = { lo: interval.fromRational(Q.add(from, Q.multiply(step, Q.rational(k)))).lo, hi: interval.fromRational(Q.add(from, Q.multiply(step, Q.rational(k + 1)))).hi };
      const value = encloseInterval(whole.function, new Map([[whole.variable, x]]), describe);
      const size = value ? interval.leastSize(value) : 0;
      if (!(size > 0)) throw new Declined('bad-request', 'The function has zeros on this interval that are no floats, where no relative error can be kept; ask for the absolute measure or leave those points out.');
      least = Q.compare(Q.fromDouble(size), least) < 0 ? Q.fromDouble(size) : least;
    }
  };
  look(low, Q.compare(high, Q.negate(inner)) < 0 ? high : Q.negate(inner));
  look(Q.compare(low, inner) > 0 ? low : inner, high);
  return least;
}
