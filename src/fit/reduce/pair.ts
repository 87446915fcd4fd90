/** hypot(x, y) and atan2(y, x) by the quotient of the smaller and the larger argument: one polynomial on a small interval serves every pair of finite floats. */
import { build, type Expression, Q, type Rational } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { real } from '../../rigorous/index.ts';
import type { Statement } from '../../write/index.ts';
import { powerOfTwo } from '../format.ts';
import type { PolynomialProblem } from '../polynomialFit.ts';
import type { LanguageRow } from '../../write/index.ts';
import { FIRST_OCTANT, type TwoWords, WINDOW } from './arctangent.ts';
import { absoluteOf, allowedOff, arithmeticOf, choice, fitKernel, greater, inParts, kernelStatements, lastRounded, let_, overflowing, REDUCED, type Reduced, relation, tooSmall } from './kernel.ts';
import { halfUlp, roundedUp } from './parts.ts';
import { CONSTANT_BITS } from './recognise.ts';

/** Both intervals closed. */
export interface Box {
  readonly low: Rational;
  readonly high: Rational;
}
export type PairKind = 'hypot' | 'atan2';

export interface PairProblem {
  readonly kind: PairKind;
  /** Measure, tolerance or degree, formats; its function and interval are not looked at. */
  readonly whole: PolynomialProblem;
  readonly row: LanguageRow;
  /** Names in the code: of hypot either argument, of atan2 the ordinate first. */
  readonly parameters: readonly [string, string];
  readonly boxes: readonly [Box, Box];
}

/** Names that the code uses itself. */
export const PAIR_LOCALS: readonly string[] = ['r', 'a', 'b', 'c', 'd', 'q', 'n', 'm', 's', 'g', 'h', 'z', 'w', 'u', 'uu', 't', 'tt'];

/** hypot(x, y), sqrt(x^2 + y^2) or atan2(y, x) of two symbols; null for anything else. */
export function recognisePair(f: Expression): { readonly kind: PairKind; readonly variables: readonly [string, string] } | null {
  if (f.kind === 'call' && (f.function === 'hypot' || f.function === 'atan2') && f.args.length === 2) {
    const [a, b] = f.args;
    return a?.kind === 'symbol' && b?.kind === 'symbol' && a.name !== b.name ? { kind: f.function, variables: [a.name, b.name] } : null;
  }
  const radicand = f.kind === 'call' && f.function === 'sqrt' ? f.args[0] : f.kind === 'power' && f.exponent.kind === 'number' && Q.equal(f.exponent.value, Q.HALF) ? f.base : null;
  if (radicand?.kind !== 'sum' || radicand.terms.length !== 2) return null;
  const [a, b] = radicand.terms.map(squaredSymbol);
  return a && b && a !== b ? { kind: 'hypot', variables: [a, b] } : null;
}

function squaredSymbol(e: Expression): string | null {
  if (e.kind === 'power' && e.base.kind === 'symbol' && e.exponent.kind === 'number' && Q.equal(e.exponent.value, Q.rational(2))) return e.base.name;
  const [a, b] = e.kind === 'product' && e.factors.length === 2 ? e.factors : [];
  return a?.kind === 'symbol' && b?.kind === 'symbol' && a.name === b.name ? a.name : null;
}

export const reducePair = (problem: PairProblem, budget: Budget): Reduced => (problem.kind === 'hypot' ? reduceHypot(problem, budget) : reduceAtan2(problem, budget));

const holdsZero = ({ low, high }: Box): boolean => Q.signOf(low) <= 0 && Q.signOf(high) >= 0;
const sizeOf = ({ low, high }: Box): Rational => greater(Q.absolute(low), Q.absolute(high));
const below = (left: Expression, right: Expression): Expression => ({ kind: 'relation', sides: [left, right], relations: ['<'] });
const absolute = (name: string, x: Expression): Statement => let_(name, choice([relation(x, '<', Q.ZERO), build.negation(x)], [null, x]));
const symbol = build.symbol;

/** c = |first|, d = |second|, a and b the larger and the smaller of them; zero for two zeros; q = b/a. */
function quotientStatements({ parameters, boxes, row }: PairProblem): readonly Statement[] {
  const [first, second] = parameters.map(symbol);
  const [c, d, a, b] = ['c', 'd', 'a', 'b'].map(symbol);
  if (!first || !second || !c || !d || !a || !b) throw new RangeError('two parameters');
  const origin: readonly Statement[] = boxes.every(holdsZero) ? [{ kind: 'if', condition: relation(a, '=', Q.ZERO), then: [{ kind: 'return', value: build.number(0), rounded: row.family === 'javascript' }] }] : [];
  return [absolute('c', first), absolute('d', second), let_('a', choice([below(c, d), d], [null, c])), let_('b', choice([below(c, d), c], [null, d])), ...origin, let_('q', build.quotient(b, a))];
}

/** a sqrt(1 + q^2). */
function reduceHypot(problem: PairProblem, budget: Budget): Reduced {
  const { whole, row, boxes } = problem;
  const { measure, format } = whole;
  const { operations } = arithmeticOf(whole);
  const squares = Q.add(Q.power(sizeOf(boxes[0]), 2), Q.power(sizeOf(boxes[1]), 2));
  const root = real.sqrt(real.fromRational(squares, 96), 96);
  const most = root && roundedUp(real.upper(root));
  if (!most || overflowing(most, format)) throw new Declined('bad-request', `The hypotenuse can be beyond the largest ${format.name} number; take smaller intervals or a wider format.`);
  const u = powerOfTwo(-operations.precision);
  // q off by u q changes sqrt(1 + q^2) by u q^2/(1 + q^2) <= u/2; where q underflows by less than the smallest subnormal number.
  const relative = Q.add(Q.multiply(u, Q.rational(513, 1024)), powerOfTwo(operations.emin - operations.precision));
  const perUnit = measure === 'ulp' ? powerOfTwo(format.precision) : measure === 'absolute' ? most : Q.ONE;
  const goal = whole.tolerance && Q.subtract(Q.divide(Q.add(Q.ONE, Q.divide(whole.tolerance, perUnit)), Q.add(Q.ONE, u)), Q.ONE);
  if (goal && Q.signOf(goal) <= 0) throw tooSmall(whole, whole.tolerance ?? Q.ZERO);
  const f = build.squareRoot(build.sum(build.number(1), build.power(symbol(REDUCED), 2)));
  const kernel = fitKernel({ whole, row, parameter: '' }, { function: f, low: Q.MINUS_ONE, high: Q.ONE, measure: 'relative', inherited: { absolute: Q.ZERO, relative }, ...(goal ? { tolerance: goal } : {}) }, budget);
  const { error } = kernel.found;
  const total = Q.subtract(Q.multiply(Q.add(Q.ONE, error.total), Q.add(Q.ONE, u)), Q.ONE);
  const { steps, value } = kernelStatements(kernel.found.writtenProgram);
  const by = (q: Rational): Rational => Q.multiply(q, perUnit);
  // Below the smallest normal number the product rounds to a multiple of the smallest subnormal number.
  const small = powerOfTwo(format.emin - format.precision);
  const inMeasure = inParts(measure === 'relative' ? total : measure === 'ulp' ? Q.add(by(total), Q.HALF) : Q.add(by(total), small), by(error.approximation), by(error.rounding));
  return {
    kernels: [kernel],
    body: [...quotientStatements(problem), let_(REDUCED, symbol('q')), ...steps, { kind: 'return', value: build.product(symbol('a'), value), rounded: row.family === 'javascript' }],
    error: { ...inMeasure, subnormal: measure === 'absolute' || !boxes.every(holdsZero) ? null : Q.add(Q.multiply(total, powerOfTwo(format.emin)), small) },
    method: 'r = smaller over larger size, 0 <= r <= 1; result larger size times p(r)',
  };
}

/** pi/4 as a float whose multiples by 0..4 are exact, and the rest. */
function quarters(precision: number): TwoWords {
  const value = real.scaleByPowerOfTwo(real.pi(CONSTANT_BITS), -2);
  const middle = Q.divide(Q.add(real.lower(value), real.upper(value)), Q.rational(2));
  const unit = powerOfTwo(2 - precision);
  const high = Q.multiply(Q.rational(Q.floor(Q.divide(middle, unit))), unit);
  const rest = Q.subtract(middle, high);
  const least = powerOfTwo(2 - 2 * precision);
  const low = Q.multiply(Q.rational(Q.floor(Q.divide(rest, least))), least);
  return { high, low, missing: Q.add(Q.absolute(Q.subtract(rest, low)), Q.subtract(real.upper(value), real.lower(value))) };
}

/** The angle as n pi/4 + s atan r with n in 0..4, s = 1 or -1, and the sign of the ordinate. */
function reduceAtan2(problem: PairProblem, budget: Budget): Reduced {
  const { whole, row, boxes, parameters } = problem;
  const { measure, format } = whole;
  const arithmetic = arithmeticOf(whole);
  const { operations } = arithmetic;
  const u = powerOfTwo(-operations.precision);
  const tiny = powerOfTwo(operations.emin - operations.precision);
  const { high, low, missing } = quarters(format.precision);
  const r = symbol(REDUCED);
  const largest = roundedUp(WINDOW);
  // q rounds once; (q - 1)/(q + 1) moves by at most half of that, and rounds three times.
  const moved = Q.add(Q.multiply(u, Q.add(Q.HALF, Q.multiply(WINDOW, Q.rational(25, 8)))), tiny);
  /** |angle| is above 0.39 for one quarter and above 1.17 for more. */
  const outside = (kernelError: Rational): Rational =>
    [1, 2, 3, 4].reduce((worst, n) => {
      const part = Q.multiply(Q.rational(n), low);
      const off = Q.add(Q.add(Q.add(kernelError, moved), Q.multiply(Q.rational(n), missing)), Q.add(Q.multiply(part, u), halfUlp(Q.add(Q.multiply(Q.add(part, largest), Q.rational(17, 16)), kernelError), operations)));
      return greater(worst, lastRounded(off, n === 1 ? Q.rational(39, 100) : Q.rational(117, 100), Q.rational(22 * n + 12, 28), measure, arithmetic));
    }, Q.ZERO);
  const totalOf = (kernelError: Rational): Rational => greater(kernelError, outside(absoluteOf(kernelError, measure, largest, format)));
  const goal = whole.tolerance && allowedOff(totalOf, whole.tolerance, whole.tolerance);
  if (whole.tolerance && goal && Q.isZero(goal)) throw tooSmall(whole, whole.tolerance);
  const inherited = { absolute: Q.add(Q.multiply(WINDOW, Q.multiply(u, Q.rational(17, 16))), tiny), relative: Q.multiply(u, Q.rational(17, 16)) };
  const kernel = fitKernel({ whole, row, parameter: '' }, { function: build.call('atan', r), low: Q.negate(WINDOW), high: WINDOW, measure, inherited, ...(goal ? { tolerance: goal } : {}) }, budget);
  const { error } = kernel.found;
  const total = totalOf(error.total);
  const { steps, value } = kernelStatements(kernel.found.writtenProgram);
  const [ordinate, abscissa] = parameters.map(symbol);
  if (!ordinate || !abscissa) throw new RangeError('two parameters');
  const [q, c, d, g, n, m, s, h, z] = ['q', 'c', 'd', 'g', 'n', 'm', 's', 'h', 'z'].map(symbol);
  if (!q || !c || !d || !g || !n || !m || !s || !h || !z) throw new RangeError('names');
  const diagonal = relation(q, '>', FIRST_OCTANT);
  const steep = below(d, c);
  const one = build.number(1);
  const minus = (x: Expression): Expression => build.negation(x);
  const left = Q.signOf(boxes[1].low) < 0;
  const isLeft = relation(abscissa, '<', Q.ZERO);
  const [turns, side] = left ? [n, s] : [m, h];
  const angle = build.sum(build.product(turns, build.number(high)), build.sum(build.product(turns, build.number(low)), build.product(side, value)));
  const rounded = row.family === 'javascript';
  const signed = Q.signOf(boxes[0].low) < 0;
  return {
    kernels: [kernel],
    body: [
      ...quotientStatements(problem),
      let_(REDUCED, choice([diagonal, build.quotient(build.sum(q, minus(one)), build.sum(q, one))], [null, q])),
      let_('g', choice([diagonal, one], [null, build.number(0)])),
      let_('m', choice([steep, build.sum(build.number(2), minus(g))], [null, g])),
      let_('h', choice([steep, build.number(-1)], [null, one])),
      ...(left ? [let_('n', choice([isLeft, build.sum(build.number(4), minus(m))], [null, m])), let_('s', choice([isLeft, minus(h)], [null, h]))] : []),
      ...steps,
      ...(signed ? [let_('z', angle), let_('w', choice([relation(ordinate, '<', Q.ZERO), minus(z)], [null, z])), { kind: 'return' as const, value: symbol('w'), rounded }] : [{ kind: 'return' as const, value: angle, rounded }]),
    ],
    error: { ...inParts(total, Q.compare(error.approximation, total) < 0 ? error.approximation : total, error.rounding), subnormal: measure === 'absolute' ? null : Q.add(error.subnormal ?? Q.ZERO, Q.multiply(powerOfTwo(format.emin - format.precision), Q.rational(2))) },
    method: `q = smaller over larger size, r = q or (q - 1)/(q + 1), |r| <= ${Q.toDouble(WINDOW).toPrecision(4)}; result n pi/4 + s p(r), pi/4 in two parts, the first times n exact; a zero ordinate counts as positive`,
  };
}
