/** A sinh(c x), A cosh(c x) and A tanh(c x) on wide intervals by e^(c |x|) with a reduced argument (DLMF 4.28.1, 4.28.2, 4.28.4), near zero by a polynomial of their own. */
import { build, type Expression, Q, type Rational, substitute } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { real } from '../../rigorous/index.ts';
import type { Statement } from '../../write/index.ts';
import { binaryExponent, powerOfTwo, roundTo } from '../format.ts';
import type { ProvedError } from '../proof.ts';
import { reduceExponential } from './exponential.ts';
import { allowedOff, arithmeticOf, choice, fitKernel, greater, inParts, type Kernel, kernelStatements, largestIn, lastRounded, leastIn, lesser, let_, REDUCED, type Reduced, type ReductionProblem, relation, scaledError, tooSmall, valueRange } from './kernel.ts';
import { roundedUp, shortened } from './parts.ts';
import { constantBall } from './recognise.ts';

export type HyperbolicName = 'sinh' | 'cosh' | 'tanh';

/** c |x| up to which the odd functions have their own polynomial; beyond it little cancels. */
const NEAR: Readonly<Record<HyperbolicName, Rational>> = { sinh: Q.ONE, tanh: Q.rational(5, 8), cosh: Q.ZERO };
const SIGNIFICANT = 8;
/** Names of |x|, of the exponential and of the result without its sign. */
const SIZE = 'a';
const EXPONENTIAL = 'y';
const UNSIGNED = 'v';

export interface Hyperbolic {
  readonly of: HyperbolicName;
  /** f = factor * of(rate x); the rate is positive. */
  readonly factor: Expression;
  readonly rate: Expression;
}

export function reduceHyperbolic(problem: ReductionProblem, shape: Hyperbolic, budget: Budget): Reduced {
  const { whole, row, parameter } = problem;
  const { of, factor, rate } = shape;
  const { low, high, measure, variable } = whole;
  const [a, c] = [constantBall(factor), constantBall(rate)];
  if (!a || !c || real.sign(a) === 0) throw new Declined('bad-request', 'The constants of this hyperbolic function are zero or not known; give them as exact numbers.');
  const inside = Q.signOf(low) <= 0 && Q.signOf(high) >= 0;
  const [least, most] = [inside ? Q.ZERO : lesser(Q.absolute(low), Q.absolute(high)), greater(Q.absolute(low), Q.absolute(high))];
  const cut = of === 'cosh' ? Q.ZERO : shortened(Q.divide(NEAR[of], real.upper(c)), SIGNIFICANT);
  if (Q.compare(most, cut) <= 0) throw new Declined('bad-request', 'A polynomial serves this interval; leave the reduction out.');
  const near = of !== 'cosh' && Q.compare(least, cut) <= 0 ? fitKernel(problem, { function: substitute(whole.function, variable, build.symbol(REDUCED)), low: Q.negate(cut), high: cut, measure, ...(whole.tolerance ? { tolerance: whole.tolerance } : {}) }, budget) : null;
  const far: Far = { problem, shape, start: greater(least, cut), end: most };
  const { kernels, statements, value, total, approximation, method } = of === 'tanh' ? farTangent(far, budget) : farSum(far, budget);
  const x = build.symbol(parameter);
  const negative = relation(x, '<', Q.ZERO);
  const rounded = row.family === 'javascript';
  const opposite = of !== 'cosh' && Q.signOf(low) < 0;
  return {
    kernels: [...(near ? [near] : []), ...kernels],
    body: [
      let_(SIZE, Q.signOf(low) < 0 ? choice([negative, build.negation(x)], [null, x]) : x),
      ...(near ? [nearStatements(near, x, cut, rounded)] : []),
      ...statements,
      ...(opposite ? [let_(UNSIGNED, value), let_('w', choice([negative, build.negation(build.symbol(UNSIGNED))], [null, build.symbol(UNSIGNED)])), { kind: 'return' as const, value: build.symbol('w'), rounded }] : [{ kind: 'return' as const, value, rounded }]),
    ],
    error: joined(near, total, approximation),
    method: `${near ? `a polynomial up to |${parameter}| = ${Q.toDouble(cut)}, beyond it ` : ''}${method}`,
  };
}

function nearStatements(near: Kernel, x: Expression, cut: Rational, rounded: boolean): Statement {
  const { steps, value } = kernelStatements(near.found.writtenProgram);
  return { kind: 'if', condition: relation(build.symbol(SIZE), '<=', cut), then: [let_(REDUCED, x), ...steps, { kind: 'return', value, rounded }] };
}

function joined(near: Kernel | null, total: Rational, approximation: Rational): ProvedError {
  const own = near?.found.error;
  const whole = own ? greater(own.total, total) : total;
  const part = lesser(whole, own ? greater(own.approximation, approximation) : approximation);
  return inParts(whole, part, own ? lesser(own.rounding, Q.subtract(whole, part)) : Q.ZERO, own?.subnormal ?? null);
}

interface Far {
  readonly problem: ReductionProblem;
  readonly shape: Hyperbolic;
  /** Of |x|. */
  readonly start: Rational;
  readonly end: Rational;
}

interface FarPart {
  readonly kernels: readonly Kernel[];
  readonly statements: readonly Statement[];
  readonly value: Expression;
  readonly total: Rational;
  readonly approximation: Rational;
  readonly method: string;
}

/** The exponential e in |x|, with a relative error that keeps `totalOf` of it within the tolerance. */
function exponential({ problem, start, end }: Far, e: Expression, rate: Expression, totalOf: (relative: Rational) => Rational, budget: Budget): { readonly reduced: Reduced; readonly statements: readonly Statement[]; readonly relative: Rational } {
  const { whole } = problem;
  const goal = whole.tolerance && allowedOff(totalOf, whole.tolerance, Q.rational(1, 8));
  if (whole.tolerance && goal && Q.isZero(goal)) throw tooSmall(whole, whole.tolerance);
  const { tolerance: _, ...rest } = whole;
  const reduced = reduceExponential({ ...problem, parameter: SIZE, whole: { ...rest, function: e, low: start, high: end, measure: 'relative', ...(goal ? { tolerance: goal } : {}) } }, rate, budget);
  const last = reduced.body.at(-1);
  if (reduced.error.subnormal || last?.kind !== 'return' || reduced.body.some((s) => s.kind === 'if')) throw new Declined('bad-request', `The constant factor of this function is too small for ${whole.format.name}; take it out or take a wider format.`);
  return { reduced, statements: [...reduced.body.slice(0, -1), let_(EXPONENTIAL, last.value)], relative: reduced.error.total };
}

/** y + q/y or y - q/y with y = A/2 e^(c |x|) and q = A^2/4. */
function farSum(far: Far, budget: Budget): FarPart {
  const { problem, shape: { of, factor, rate }, start, end } = far;
  const { whole } = problem;
  const { format, variable } = whole;
  const arithmetic = arithmeticOf(whole);
  const a = constantBall(factor);
  const square = a && Q.multiply(real.upper(real.multiply(a, a, 256)), Q.rational(1, 4));
  const product = square && roundTo(square, format);
  if (!product || binaryExponent(product) * 2 < format.emin || binaryExponent(product) * 2 > format.emax) throw new Declined('bad-request', `The constant factor of this function is too large or too small for ${format.name}; take it out.`);
  // q and the quotient round once each.
  const rounding = Q.add(powerOfTwo(-arithmetic.operations.precision), powerOfTwo(-format.precision));
  const slope = of === 'sinh' ? reciprocalOf('tanh', rate, start) : Q.ONE;
  const most = roundedUp(largestIn(valueRange(whole.function, variable, end) ?? { low: Q.ZERO, high: Q.ZERO }));
  /**
   * With Y = y exactly and Z = q/Y the error is (Y -+ Z) e + Z u beside Y +- Z: for the sum at most the larger of e and u/2, for the difference e coth + u (coth - 1)/2;
   * products of errors are less than 8 times the square of their sum.
   */
  const offOf = (e: Rational): Rational => {
    const both = Q.add(e, rounding);
    const first = of === 'cosh' ? greater(e, Q.multiply(rounding, Q.HALF)) : Q.add(Q.multiply(e, slope), Q.multiply(Q.multiply(rounding, Q.HALF), Q.subtract(slope, Q.ONE)));
    return Q.add(first, Q.multiply(Q.multiply(Q.rational(8), slope), Q.multiply(both, both)));
  };
  const totalOf = (e: Rational): Rational => scaledError(offOf(e), most, whole.measure, arithmetic);
  const e = build.product(build.quotient(factor, build.number(2)), build.call('exp', build.product(rate, build.symbol(variable))));
  const { reduced, statements, relative } = exponential(far, e, rate, totalOf, budget);
  const y = build.symbol(EXPONENTIAL);
  const quotient = build.quotient(build.number(product), y);
  const total = totalOf(relative);
  return { kernels: reduced.kernels, statements, value: build.sum(y, of === 'cosh' ? quotient : build.negation(quotient)), total, approximation: lesser(total, scaledBy(reduced.error.approximation, total, relative)), method: `y ${of === 'cosh' ? '+' : '-'} ${Q.toDouble(product)}/y with y half the exponential of the size: ${reduced.method}` };
}

/** A - 2A/(y + 1) with y = e^(2 c |x|); where that is A but for an eighth of a rounding, |x| counts no further. */
function farTangent(far: Far, budget: Budget): FarPart {
  const { problem, shape: { factor, rate }, start, end } = far;
  const { whole } = problem;
  const { format, variable, measure } = whole;
  const arithmetic = arithmeticOf(whole);
  const [a, c] = [constantBall(factor), constantBall(rate)];
  const nearest = a && roundTo(Q.divide(Q.add(real.lower(a), real.upper(a)), Q.rational(2)), format);
  if (!a || !c || !nearest || binaryExponent(nearest) * 2 < format.emin || binaryExponent(nearest) * 2 > format.emax) throw new Declined('bad-request', `The constant factor of this function is too large or too small for ${format.name}; take it out.`);
  const size = roundedUp(real.upper(real.absolute(a)));
  const off = Q.add(Q.absolute(Q.subtract(real.upper(a), nearest)), Q.subtract(real.upper(a), real.lower(a)));
  // 2 e^(-2 c B) <= 2^(1 - p - 4) where 2 c B >= (p + 4) ln 2.
  const bound = shortened(Q.divide(Q.multiply(Q.rational(format.precision + 4), Q.rational(3, 4)), Q.multiply(Q.rational(2), real.lower(c))), SIGNIFICANT);
  const clamped = Q.compare(end, bound) > 0;
  if (Q.compare(start, bound) >= 0) throw new Declined('bad-request', 'The function is constant on this interval but for less than a rounding; write the constant in its place.');
  const left = clamped ? powerOfTwo(-format.precision - 3) : Q.ZERO;
  const u = powerOfTwo(-arithmetic.operations.precision);
  const range = valueRange(whole.function, variable, start);
  const least = range ? leastIn(range) : Q.ZERO;
  const complement = roundedUp(Q.subtract(Q.ONE, Q.divide(least, size)));
  const totalOf = (e: Rational): Rational => {
    const quotient = Q.add(e, Q.multiply(u, Q.rational(2)));
    const shared = Q.add(Q.multiply(complement, Q.add(quotient, Q.multiply(Q.rational(2), Q.multiply(quotient, quotient)))), left);
    return lastRounded(Q.add(Q.multiply(size, shared), off), least, size, measure, arithmetic);
  };
  const doubled = build.product(build.number(2), rate);
  const { reduced, statements, relative } = exponential({ ...far, end: clamped ? bound : end }, build.call('exp', build.product(doubled, build.symbol(variable))), doubled, totalOf, budget);
  const total = totalOf(relative);
  const [x, y] = [build.symbol(SIZE), build.symbol(EXPONENTIAL)];
  const quotient = build.quotient(build.number(Q.multiply(nearest, Q.rational(2))), build.sum(y, build.number(1)));
  const limited = clamped ? [let_('b', choice([relation(x, '>', bound), build.number(bound)], [null, x]))] : [];
  return {
    kernels: reduced.kernels,
    statements: [...limited, ...(clamped ? renamed(statements, SIZE, 'b') : statements)],
    value: build.sum(build.number(nearest), build.negation(quotient)),
    total,
    approximation: lesser(total, scaledBy(reduced.error.approximation, total, relative)),
    method: `${Q.toDouble(nearest)} - ${Q.toDouble(Q.multiply(nearest, Q.rational(2)))}/(y + 1) with y the exponential of twice the size${clamped ? `, which counts up to ${Q.toDouble(bound)}` : ''}: ${reduced.method}`,
  };
}

const renamed = (statements: readonly Statement[], from: string, to: string): readonly Statement[] => statements.map((s) => (s.kind === 'let' ? { ...s, value: substitute(s.value, from, build.symbol(to)) } : s));

/** The share of a total that one part of the exponential's error has, in the measure of the total. */
const scaledBy = (part: Rational, total: Rational, relative: Rational): Rational => (Q.isZero(relative) ? Q.ZERO : roundedUp(Q.multiply(total, Q.divide(part, relative))));

/** An upper bound of 1 / g(c x). */
function reciprocalOf(of: HyperbolicName, rate: Expression, x: Rational): Rational {
  const value = valueRange(build.call(of, build.product(rate, build.symbol(REDUCED))), REDUCED, x);
  if (!value || Q.signOf(value.low) <= 0) throw new Declined('undecided', 'The size of this function could not be bounded; take another interval.');
  return roundedUp(Q.reciprocal(value.low));
}
