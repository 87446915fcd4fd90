/** A log(c x) for any x > 0: x = m 2^e with m about 1, f(x) = f(m) + e A ln 2. A log(1 + x) likewise: 1 + x = m 2^e, by a polynomial in m - 1, which is x itself where e = 0. */
import { build, type Expression, Q, type Rational, substitute } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { real } from '../../rigorous/index.ts';
import { binaryExponent, type FloatFormat, powerOfTwo, roundTo, ulp } from '../format.ts';
import type { Statement } from '../../write/index.ts';
import { assembledError, piecesOf } from './assembled.ts';
import { arithmeticOf, choice, fitKernel, greater, inParts, kernelStatements, lastRounded, largestIn, leastIn, lesser, absoluteOf, allowedOff, let_, REDUCED, type Reduced, type ReductionProblem, relation, requireSolid, tooSmall, valueRange } from './kernel.ts';
import { halfUlp, roundedUp } from './parts.ts';
import { CONSTANT_BITS, constantBall } from './recognise.ts';

/** Significands above this are halved: sqrt(2) with eight bits. */
export const HALVED_ABOVE = Q.rational(181, 128);

/** x = m 2^e, exactly: m in (HALVED_ABOVE / 2, HALVED_ABOVE] named `r`, e named `e`. Subnormal numbers are first made normal. */
export function decomposed(x: Expression, low: Rational, { emin, precision }: FloatFormat): readonly Statement[] {
  const small = Q.compare(low, powerOfTwo(emin)) < 0;
  const v = small ? build.symbol('v') : x;
  const isSmall = relation(x, '<', powerOfTwo(emin));
  const s = build.symbol('s');
  const large = relation(s, '>', HALVED_ABOVE);
  const exponent = build.call('binary-exponent', v);
  return [
    ...(small ? [let_('v', choice([isSmall, build.product(x, build.number(powerOfTwo(precision)))], [null, x])), let_('d', choice([isSmall, build.number(-precision)], [null, build.number(0)]))] : []),
    let_('s', build.call('significand', v)),
    let_('c', small ? build.sum(exponent, build.symbol('d')) : exponent),
    let_(REDUCED, choice([large, build.product(s, build.number(Q.HALF))], [null, s])),
    let_('e', choice([large, build.sum(build.symbol('c'), build.number(1))], [null, build.symbol('c')])),
  ];
}

/** b = 1 + x as computed, b = m 2^e; r = m - 1, or x itself where e = 0. */
function decomposedSum(x: Expression, low: Rational, operations: FloatFormat): readonly Statement[] {
  const statements = decomposed(build.symbol(SUM), low, operations);
  const m = build.symbol('m');
  return [
    let_(SUM, build.sum(build.number(1), x)),
    ...statements.map((s) => (s.kind === 'let' && s.name === REDUCED ? { ...s, name: 'm' } : s)),
    let_(REDUCED, choice([relation(build.symbol('e'), '=', Q.ZERO), x], [null, build.sum(m, build.number(-1))])),
  ];
}

/** Exponents e of x = m 2^e on [low, high]. */
export function exponentRange(low: Rational, high: Rational): readonly [number, number] {
  const exponent = (x: Rational): number => {
    const e = binaryExponent(x);
    return Q.compare(Q.divide(x, powerOfTwo(e)), HALVED_ABOVE) > 0 ? e + 1 : e;
  };
  return [exponent(low), exponent(high)];
}

/** Exponents e for which the sum is bounded piece by piece, and the pieces. */
const NEAR_ZERO = 3;
const PIECES = 64;

/** The argument of the logarithm. */
const SUM = 'b';

/** Where `plusOne`, f = A log(1 + x), else f = A log(c x). */
export function reduceLogarithm(problem: ReductionProblem, factor: Expression, plusOne: boolean, budget: Budget): Reduced {
  const { whole, row, parameter } = problem;
  const { measure, format, variable } = whole;
  const origin = plusOne ? Q.ONE : Q.ZERO;
  // Of the argument of the logarithm, which is a float: 1 + x rounds to one.
  const [low, high] = [Q.add(whole.low, origin), Q.add(whole.high, origin)];
  if (Q.signOf(low) <= 0) throw new Declined('bad-request', 'The logarithm has no real value at an end of the interval; take an interval of positive numbers.');
  const arithmetic = arithmeticOf(whole);
  const { operations, result } = arithmetic;
  const a = constantBall(factor);
  const step = a && real.multiply(a, real.logTwo(CONSTANT_BITS), CONSTANT_BITS);
  if (!a || !step) throw new Declined('bad-request', 'The factor of this logarithm is not known; give it as an exact number.');
  const [least, most] = plusOne ? exponentRange(roundTo(low, operations) ?? low, roundTo(high, operations) ?? high) : exponentRange(low, high);
  const count = Math.max(Math.abs(least), Math.abs(most), 1);
  const middle = Q.divide(Q.add(real.lower(step), real.upper(step)), Q.rational(2));
  const unit = powerOfTwo(binaryExponent(middle) - (format.precision - count.toString(2).length) + 1);
  // e times the first part is exact.
  const first = Q.multiply(Q.rational(Q.floor(Q.add(Q.divide(middle, unit), Q.HALF))), unit);
  const second = roundTo(Q.subtract(middle, first), format) ?? Q.ZERO;
  const missing = Q.add(Q.absolute(Q.subtract(middle, Q.add(first, second))), Q.subtract(real.upper(step), real.lower(step)));
  const f = substitute(whole.function, variable, build.symbol(REDUCED));
  const significands = { low: Q.divide(HALVED_ABOVE, Q.rational(2)), high: HALVED_ABOVE };
  // Where 1 + x rounds to an end of the significands, x lies a little beyond it.
  const beside = plusOne ? powerOfTwo(-operations.precision) : Q.ZERO;
  const window = { low: Q.subtract(Q.subtract(significands.low, origin), beside), high: Q.add(Q.subtract(significands.high, origin), beside) };
  const largest = roundedUp([window.low, window.high].map((x) => valueRange(f, REDUCED, x)).reduce((m, v) => (v ? greater(m, largestIn(v)) : m), Q.ZERO));
  const ends = [whole.low, whole.high].map((x) => valueRange(whole.function, variable, x));
  const [atLow, atHigh] = ends;
  const atOne = valueRange(f, REDUCED, Q.subtract(Q.ONE, origin));
  if (!atLow || !atHigh || !atOne) throw new Declined('bad-request', 'The function has no real value at an end of the interval; take an interval of positive numbers.');
  const size = greater(largestIn(atLow), largestIn(atHigh));
  const zeroAtOne = Q.isZero(atOne.low) && Q.isZero(atOne.high);
  const leastAtEnds = Q.signOf(atLow.low) * Q.signOf(atHigh.high) > 0 && Q.signOf(atLow.high) * Q.signOf(atHigh.low) > 0 ? greater(Q.ZERO, Q.compare(leastIn(atLow), leastIn(atHigh)) < 0 ? leastIn(atLow) : leastIn(atHigh)) : Q.ZERO;
  const relative = measure !== 'absolute';
  if (relative && !zeroAtOne && Q.isZero(leastAtEnds)) throw new Declined('bad-request', 'The function has a zero on this interval other than 1, where no relative error can be kept after the reduction; ask for the absolute measure.');
  const inner = relative && zeroAtOne ? measure : 'absolute';
  // |f| where e = n is not zero.
  const leastFor = (n: number): Rational => greater(leastAtEnds, zeroAtOne ? Q.subtract(Q.multiply(Q.rational(Math.abs(n)), Q.absolute(Q.subtract(middle, unit))), largest) : Q.ZERO);
  // The rounding of 1 + x, by a relative u at most, where e is not zero.
  const moved = plusOne ? roundedUp(Q.multiply(Q.multiply(real.upper(real.absolute(a)), powerOfTwo(-operations.precision)), Q.rational(1025, 1024))) : Q.ZERO;
  /** What everything but the polynomial is off by. */
  const spent = (n: number, kernelError: Rational): Rational => {
    const lowPart = Q.multiply(Q.rational(Math.abs(n)), Q.absolute(second));
    return Q.add(Q.add(Q.add(moved, Q.multiply(Q.rational(Math.abs(n)), missing)), Q.multiply(lowPart, powerOfTwo(-operations.precision))), halfUlp(Q.add(Q.multiply(Q.add(lowPart, largest), Q.rational(17, 16)), kernelError), operations));
  };
  const whenExponent = (n: number, kernelError: Rational): Rational => {
    const off = Q.add(kernelError, spent(n, kernelError));
    const reach = Q.add(Q.multiply(Q.rational(Math.abs(n)), Q.absolute(middle)), largest);
    return lastRounded(off, leastFor(n), Q.compare(reach, size) < 0 ? reach : size, measure, arithmetic);
  };
  const exponents = Array.from({ length: most - least + 1 }, (_, k) => least + k).filter((n) => n !== 0);
  const whenOff = (kernelError: Rational): Rational => exponents.reduce((worst, n) => greater(worst, whenExponent(n, kernelError)), Q.ZERO);
  const whenZero = (kernelError: Rational): Rational => {
    if (least > 0 || most < 0) return Q.ZERO;
    return inner === measure ? kernelError : Q.divide(kernelError, measure === 'ulp' ? ulp(leastAtEnds, result) : leastAtEnds);
  };
  const totalOf = (kernelError: Rational): Rational => greater(whenOff(absoluteOf(kernelError, inner, largest, format)), whenZero(kernelError));
  const goal = whole.tolerance && allowedOff(totalOf, whole.tolerance, relative && inner === 'absolute' ? Q.multiply(whole.tolerance, size) : whole.tolerance);
  if (whole.tolerance && goal && Q.isZero(goal)) throw tooSmall(whole, whole.tolerance);
  const kernel = fitKernel(problem, { function: f, ...window, measure: inner, ...(goal ? { tolerance: goal } : {}) }, budget);
  requireSolid(kernel, largest, format);
  const { error } = kernel.found;
  const { steps, value } = kernelStatements(kernel.found.writtenProgram);
  const summed = (polynomial: Expression, lowPart: Expression, highPart: Expression): Expression => build.sum(Q.isZero(second) ? polynomial : build.sum(lowPart, polynomial), highPart);
  const uniform = absoluteOf(error.total, inner, largest, format);
  const certified = kernel.found.certified;
  const kernelMissing = inner === 'absolute' ? certified : Q.multiply(certified, largest);
  const shifted = (y: Rational, n: number): Rational => Q.subtract(Q.divide(y, powerOfTwo(n)), origin);
  /** Piece by piece near the zero of f, where the uniform bound is loose. */
  const whenSmall = (n: number): Rational => {
    const bound = whenExponent(n, uniform);
    if (Math.abs(n) > NEAR_ZERO) return bound;
    const [from, to] = [n === least ? greater(window.low, shifted(low, n)) : window.low, n === most ? lesser(window.high, shifted(high, n)) : window.high];
    const whole = build.number(n);
    const result = summed(kernel.found.program.result, build.product(whole, build.number(second)), build.number(Q.multiply(Q.rational(n), first)));
    const sharp = assembledError({ program: { steps: kernel.found.program.steps, result }, variable: REDUCED, pieces: piecesOf(from, to, PIECES), missing: () => Q.add(Q.add(kernelMissing, moved), Q.multiply(Q.rational(Math.abs(n)), missing)) }, measure, arithmetic);
    return sharp && Q.compare(sharp, bound) < 0 ? sharp : bound;
  };
  const total = exponents.map(whenSmall).reduce(greater, whenZero(error.total));
  const e = build.symbol('e');
  const times = (part: Rational): Expression => build.product(e, build.number(part));
  const approximation = inner === measure ? error.approximation : Q.ZERO;
  return {
    kernels: [kernel],
    body: [...(plusOne ? decomposedSum(build.symbol(parameter), low, operations) : decomposed(build.symbol(parameter), low, operations)), ...steps, { kind: 'return', value: summed(value, times(second), times(first)), rounded: row.family === 'javascript' }],
    error: inParts(total, Q.compare(approximation, total) < 0 ? approximation : total, Q.ZERO, error.subnormal),
    method: `${plusOne ? `1 + ${parameter} = (1 + r) 2^e but for one rounding, which r = ${parameter} spares where e = 0` : `${parameter} = r 2^e exactly`}, ${Q.toText(significands.low)} < ${plusOne ? '1 + r' : 'r'} <= ${Q.toText(significands.high)}, e in ${least}..${most}; result p(r) + e T, T = ${Q.toDouble(middle).toPrecision(6)} in two parts, the first times e exact`,
  };
}
