/** A (c x)^(n/d) for x >= 0: x = m 2^e, e = d h + j, so that f(x) = 2^(n h) 2^(n j/d) f(m). */
import { build, type Expression, Q, type Rational, substitute } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { encloseReal, real } from '../../rigorous/index.ts';
import { describe } from '../../functions/index.ts';
import type { Statement } from '../../write/index.ts';
import { binaryExponent, powerOfTwo, roundTo } from '../format.ts';
import { arithmeticOf, choice, fitKernel, inParts, kernelStatements, largestIn, let_, monotoneSize, overflowing, REDUCED, type Reduced, type ReductionProblem, relation, requireSolid, scaledStatements, tooSmall, underflow, valueRange, vanishing, withUnderflow } from './kernel.ts';
import { decomposed, exponentRange, HALVED_ABOVE } from './logarithm.ts';
import { nearestInteger, roundedUp } from './parts.ts';
import { CONSTANT_BITS } from './recognise.ts';

/** Entries of the table of 2^(n j/d) that a choice may hold. */
const MOST_DENOMINATOR = 16n;

export function reducePower(problem: ReductionProblem, exponent: Rational, budget: Budget): Reduced {
  const { whole, row, parameter } = problem;
  const { low, high, measure, format, variable } = whole;
  const arithmetic = arithmeticOf(whole);
  const { operations } = arithmetic;
  if (Q.signOf(low) < 0) throw new Declined('bad-request', 'This power has no real value for negative numbers; take an interval of positive ones.');
  if (exponent.den > MOST_DENOMINATOR) throw new Declined('bad-request', `The exponent ${Q.toText(exponent)} needs a table of ${exponent.den} roots of two; at most ${MOST_DENOMINATOR} are written: round the exponent, or take an interval within one or two powers of two.`);
  const fromZero = Q.isZero(low);
  if (fromZero && Q.signOf(exponent) < 0) throw new Declined('bad-request', 'This power has no value at zero; take an interval of positive numbers.');
  // Zero itself is answered exactly, and so are, to half the smallest subnormal number, arguments whose value vanishes beside it.
  const start = firstArgument(whole, exponent);
  const cut = Q.compare(start, low) > 0;
  const size = monotoneSize(whole.function, variable, start, high);
  if (overflowing(size.most, format)) throw new Declined('bad-request', `The function reaches ${Q.toDouble(size.most).toExponential(2)}, beyond the largest ${format.name} number; take a smaller interval or a wider format.`);
  const [n, d] = [Number(exponent.num), Number(exponent.den)];
  const [first, last] = exponentRange(start, high);
  const [from, to] = [Math.floor(first / d) - 1, Math.ceil(last / d) + 1];
  const f = substitute(whole.function, variable, build.symbol(REDUCED));
  const window = { low: Q.divide(HALVED_ABOVE, Q.rational(2)), high: HALVED_ABOVE };
  // The polynomial, the root of two and their product round by (1 + total)(1 + u)^2 - 1.
  const [u, v] = [powerOfTwo(-operations.precision), powerOfTwo(-format.precision)];
  const factor = Q.multiply(Q.add(Q.ONE, u), Q.add(Q.ONE, v));
  const perUlp = measure === 'ulp' ? powerOfTwo(format.precision) : measure === 'absolute' ? roundedUp(size.most) : Q.ONE;
  const least = underflow(size.least, format);
  const spared = !least.reached ? Q.ZERO : measure === 'absolute' ? Q.divide(least.half, perUlp) : v;
  const goal = whole.tolerance && Q.subtract(Q.divide(Q.add(Q.ONE, Q.subtract(Q.divide(whole.tolerance, perUlp), spared)), factor), Q.ONE);
  if (goal && Q.signOf(goal) <= 0) throw tooSmall(whole, whole.tolerance ?? Q.ZERO);
  const kernel = fitKernel(problem, { function: f, ...window, measure: 'relative', ...(goal ? { tolerance: goal } : {}) }, budget);
  const { error } = kernel.found;
  const total = Q.subtract(Q.multiply(Q.add(Q.ONE, error.total), factor), Q.ONE);
  const [k, h, e] = [build.symbol(n === 1 ? 'g' : 'k'), build.symbol('g'), build.symbol('e')];
  const nearest = (y: Expression): Expression => nearestInteger(y, row, operations);
  const inverse = roundTo(Q.rational(1, d), format) ?? Q.ONE;
  const roots: (readonly [Expression | null, Expression])[] = [];
  for (let j = -Math.floor(d / 2); j <= Math.floor(d / 2); j += 1) {
    if (j === 0) continue;
    const root = encloseReal(build.power(build.number(2), Q.rational(n * j, d)), new Map(), CONSTANT_BITS, describe);
    const value = root && roundTo(real.lower(root), format);
    if (!value) throw new Declined('bad-request', `A root of two is out of range in ${format.name}; take another format or exponent.`);
    roots.push([relation(build.symbol('b'), '=', Q.rational(j)), build.number(value)]);
  }
  const { steps, value } = kernelStatements(kernel.found.writtenProgram);
  const product = d === 1 ? value : build.product(value, build.symbol('w'));
  const ends = [window.low, window.high].map((x) => valueRange(f, REDUCED, x));
  const bounds = ends.map((b) => (b ? largestIn(b) : Q.ZERO));
  const spread = powerOfTwo(Math.ceil(Math.abs(n) / 2) + 1);
  const inside = { most: Q.multiply(bounds.reduce((a, b) => (Q.compare(a, b) > 0 ? a : b)), spread), least: Q.divide(bounds.reduce((a, b) => (Q.compare(a, b) < 0 ? a : b)), spread) };
  requireSolid(kernel, inside.least, format);
  const multiples = [from * n, to * n];
  const scaled = scaledStatements(product, k, Math.min(...multiples), Math.max(...multiples), inside, (m) => nearest(build.product(m, build.number(Q.HALF))), operations);
  const x = build.symbol(parameter);
  const rounded = row.family === 'javascript';
  const zero: readonly Statement[] = cut ? [{ kind: 'if', condition: relation(x, '<', start), then: [{ kind: 'return', value: build.number(0), rounded }] }] : [];
  const inMeasure = (q: Rational): Rational => Q.multiply(q, perUlp);
  return {
    kernels: [kernel],
    body: [
      ...zero,
      ...decomposed(x, start, operations),
      let_('g', nearest(build.product(e, build.number(inverse)))),
      let_('b', build.sum(e, build.negation(build.product(build.number(d), h)))),
      ...(n === 1 ? [] : [let_('k', build.product(build.number(n), h))]),
      ...(d === 1 ? [] : [let_('w', choice(...roots, [null, build.number(1)]))]),
      ...steps,
      ...scaled.statements,
      { kind: 'return', value: scaled.value, rounded },
    ],
    error: withUnderflow(inParts(inMeasure(total), inMeasure(error.approximation), inMeasure(error.rounding)), measure, least, format),
    method: `${parameter} = r 2^e exactly, ${Q.toText(window.low)} < r <= ${Q.toText(window.high)}, e = ${d} h + j; result 2^(${n} h) times the stored 2^(${n} j/${d}) times p(r)`,
  };
}

/** The smallest argument that the reduction must serve: of [0, ...], the smallest float, or the power of two below which the value vanishes. */
function firstArgument({ function: f, variable, low, high, format }: ReductionProblem['whole'], exponent: Rational): Rational {
  const smallest = powerOfTwo(format.emin - format.precision + 1);
  let start = Q.compare(low, smallest) > 0 ? low : smallest;
  if (Q.signOf(exponent) < 0) return start;
  for (let e = Math.min(binaryExponent(high), format.emax); e > format.emin - format.precision; e -= 1) {
    const x = powerOfTwo(e);
    if (Q.compare(x, start) <= 0) break;
    const value = valueRange(f, variable, x);
    if (value && Q.compare(largestIn(value), vanishing(format)) <= 0) {
      start = x;
      break;
    }
  }
  return start;
}
