/** e^(c x + d) on any interval: x = k T + r with T = ln 2 / c, f(x) = 2^k f(r). */
import { build, type Expression, Q, type Rational, substitute } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { real } from '../../rigorous/index.ts';
import { powerOfTwo, roundTo } from '../format.ts';
import type { ProvedError } from '../proof.ts';
import { arithmeticOf, fitKernel, inParts, kernelStatements, let_, monotoneSize, overflowing, REDUCED, type Reduced, relation, requireSolid, vanishing, type ReductionProblem, scaledStatements, underflow, valueRange, largestIn, withUnderflow } from './kernel.ts';
import { nearestInteger, reduced, roundedUp, splitPeriod } from './parts.ts';
import { CONSTANT_BITS, constantBall } from './recognise.ts';

/** Share of the tolerance that the reduction of the argument may take. */
const SHARE = Q.rational(1, 16);

export function reduceExponential(problem: ReductionProblem, rate: Expression, budget: Budget): Reduced {
  const { whole, row, parameter } = problem;
  const { measure, format } = whole;
  const arithmetic = arithmeticOf(whole);
  const c = constantBall(rate);
  const period = c && real.divide(real.logTwo(CONSTANT_BITS), c, CONSTANT_BITS);
  if (!c || !period) throw new Declined('bad-request', 'The rate of this exponential is zero or not known; give it as an exact number.');
  const { low, high, cut } = withoutVanishing(whole);
  const size = monotoneSize(whole.function, whole.variable, low, high);
  if (overflowing(size.most, format)) throw new Declined('bad-request', `The function reaches ${Q.toDouble(size.most).toExponential(2)}, beyond the largest ${format.name} number; take a smaller interval or a wider format.`);
  const speed = roundedUp(Q.absolute(real.upper(real.absolute(c))));
  const u = powerOfTwo(-format.precision);
  // In a relative measure: of the polynomial on the small interval.
  const goal = whole.tolerance && (measure === 'absolute' ? Q.divide(whole.tolerance, roundedUp(size.most)) : measure === 'ulp' ? Q.multiply(whole.tolerance, u) : whole.tolerance);
  const least = underflow(size.least, format);
  const allowed = Q.divide(Q.multiply(goal ?? u, SHARE), speed);
  const split = splitPeriod(period, low, high, arithmetic, allowed, 'the halving length');
  // |f(y)/f(x) - 1| <= e^d - 1 <= d + d^2 for d = c |y - x| <= 1.
  const distance = Q.multiply(speed, split.error);
  const relative = Q.add(distance, Q.multiply(distance, distance));
  const inner = measure === 'absolute' ? 'relative' : measure;
  const f = substitute(whole.function, whole.variable, build.symbol(REDUCED));
  const spared = !least.reached ? Q.ZERO : measure === 'ulp' ? Q.HALF : measure === 'relative' ? u : Q.divide(least.half, roundedUp(size.most));
  const asked = whole.tolerance && Q.subtract(measure === 'absolute' ? (goal ?? Q.ZERO) : whole.tolerance, spared);
  const kernel = fitKernel(problem, { function: f, low: Q.negate(split.reach), high: split.reach, measure: inner, inherited: { absolute: Q.ZERO, relative }, ...(asked ? { tolerance: asked } : {}) }, budget);
  const { error } = kernel.found;
  const scale = (e: ProvedError): ProvedError => {
    if (measure !== 'absolute') return e;
    const by = roundedUp(size.most);
    return inParts(Q.multiply(e.total, by), Q.multiply(e.approximation, by), Q.multiply(e.rounding, by));
  };
  const { steps, value } = kernelStatements(kernel.found.writtenProgram);
  const ends = [Q.negate(split.reach), split.reach].map((x) => valueRange(f, REDUCED, x));
  const bounds = ends.map((e) => (e ? largestIn(e) : Q.ZERO));
  const inside = { most: Q.multiply(bounds.reduce((a, b) => (Q.compare(a, b) > 0 ? a : b)), Q.rational(2)), least: Q.multiply(bounds.reduce((a, b) => (Q.compare(a, b) < 0 ? a : b)), Q.HALF) };
  requireSolid(kernel, inside.least, format);
  const k = build.symbol('k');
  const scaled = scaledStatements(value, k, split.least, split.most, inside, (n) => nearestInteger(build.product(n, build.number(Q.HALF)), row, arithmetic.operations), arithmetic.operations);
  const x = build.symbol(parameter);
  return {
    kernels: [kernel],
    body: [
      ...(cut ? [{ kind: 'if' as const, condition: relation(x, cut.sign, cut.at), then: [{ kind: 'return' as const, value: build.number(0), rounded: row.family === 'javascript' }] }] : []),
      let_('k', nearestInteger(build.product(x, build.number(split.inverse)), row, arithmetic.operations)),
      let_(REDUCED, reduced(x, k, split.parts)),
      ...steps,
      ...scaled.statements,
      { kind: 'return', value: scaled.value, rounded: row.family === 'javascript' },
    ],
    error: withUnderflow(scale(error), measure, least, format),
    method: `${parameter} = k T + r with T = ${Q.toDouble(real.lower(period)).toPrecision(6)} the step of one power of two, in ${split.parts.length} ${split.parts.length === 1 ? 'part' : 'parts'}; |r| <= ${Q.toDouble(split.reach).toPrecision(4)}, r off by at most ${Q.toDouble(split.error).toExponential(2)}; result 2^k p(r)`,
  };
}

/** The part of the interval whose values do not vanish beside half the smallest subnormal number; zero is the answer beyond `cut`. */
function withoutVanishing({ function: f, variable, low, high, format }: ReductionProblem['whole']): { readonly low: Rational; readonly high: Rational; readonly cut: { readonly sign: '<' | '>'; readonly at: Rational } | null } {
  const gone = (x: Rational): boolean => {
    const value = valueRange(f, variable, x);
    return value !== null && Q.compare(largestIn(value), vanishing(format)) <= 0;
  };
  const [below, above] = [gone(low), gone(high)];
  if (below === above) return { low, high, cut: null };
  let [zero, other] = below ? [low, high] : [high, low];
  for (let k = 0; k < 40; k += 1) {
    const middle = roundTo(Q.divide(Q.add(zero, other), Q.rational(2)), format);
    if (!middle) break;
    if (gone(middle)) zero = middle;
    else other = middle;
  }
  const at = roundTo(zero, format) ?? zero;
  if (!gone(at)) return { low, high, cut: null };
  return below ? { low: at, high, cut: { sign: '<', at } } : { low, high: at, cut: { sign: '>', at } };
}
