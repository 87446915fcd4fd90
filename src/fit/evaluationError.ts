/**
 * What rounding does to one evaluation of an expression tree in a float format, for every argument in an interval.
 * Each operation rounds to nearest: computed = exact op (computed operands) + d, |d| at most half an ulp of the result's binade
 * (Higham, Accuracy and Stability of Numerical Algorithms, ch. 2 and 3, cited from memory). Bounds are carried as doubles rounded up.
 *
 * Contraction: a sum with a product in it may be computed with one rounding less. The bound of the uncontracted evaluation covers that,
 * since it only drops a rounding whose bound stays in the sum; the tests hold it against both.
 */
import type { Expression } from '../expression/index.ts';
import { Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { type Interval, interval } from '../rigorous/index.ts';
import { type FloatFormat, isRepresentable } from './format.ts';

export interface RoundedValue {
  /** Encloses the exact value of the tree (exact operations on the exact argument). */
  readonly exact: Interval;
  /** |computed - exact| at most this, where nothing overflows. */
  readonly absolute: number;
  /** |computed - exact| <= relative * |exact| wherever |exact| >= relativeFrom; Infinity where no such bound is known. */
  readonly relative: number;
  /** 0 where underflow cannot spoil the relative bound. */
  readonly relativeFrom: number;
}

/** What is known before the result is rounded. */
type Unrounded = RoundedValue;

const { up } = interval;
const addUp = (a: number, b: number): number => (a === 0 ? b : b === 0 ? a : up(a + b));
const mulUp = (a: number, b: number): number => (a === 0 || b === 0 ? 0 : up(a * b));

/** Half an ulp at the largest magnitude that a result can have; 0 for a result that is always 0. */
function halfUlp(magnitude: number, format: FloatFormat): number {
  if (magnitude === 0) return 0;
  let e = Math.max(Math.floor(Math.log2(magnitude)), format.emin);
  // The logarithm is only a guess: settle it by exact powers of two.
  while (2 ** (e + 1) <= magnitude) e += 1;
  while (e > format.emin && 2 ** e > magnitude) e -= 1;
  // Half of the smallest subnormal double is no double: round it up.
  return Math.max(2 ** (e - format.precision), Number.MIN_VALUE);
}

/** Rounding of a result: absolute part by binade (it covers underflow), relative part u for results of normal size. */
function rounded({ exact, absolute, relative, relativeFrom }: Unrounded, format: FloatFormat): RoundedValue {
  const magnitude = addUp(interval.size(exact), absolute);
  const limit = 2 ** format.emax * (2 - 2 ** (1 - format.precision));
  if (!(magnitude <= limit)) throw new Declined('bad-request', `The evaluation can overflow ${format.name} on this interval; take a smaller interval.`);
  const u = 2 ** -format.precision;
  const total = addUp(absolute, halfUlp(magnitude, format));
  const viaAbsolute = interval.leastSize(exact) > 0 ? up(total / interval.leastSize(exact)) : Infinity;
  const viaRelative = relative < 0.5 ? addUp(addUp(relative, u), mulUp(relative, u)) : Infinity;
  if (viaAbsolute <= viaRelative) return { exact, absolute: total, relative: viaAbsolute, relativeFrom: 0 };
  // Twice the smallest normal number: the computed result is then normal too.
  return { exact, absolute: total, relative: viaRelative, relativeFrom: Math.max(relativeFrom, 2 ** (format.emin + 1)) };
}

function unroundedProduct(a: RoundedValue, b: RoundedValue, exact: Interval): Unrounded {
  const absolute = addUp(addUp(mulUp(interval.size(a.exact), b.absolute), mulUp(interval.size(b.exact), a.absolute)), mulUp(a.absolute, b.absolute));
  const relative = a.relative === Infinity || b.relative === Infinity ? Infinity : addUp(addUp(a.relative, b.relative), mulUp(a.relative, b.relative));
  // |ab| >= r implies |a| >= r / max|b|.
  return { exact, absolute, relative, relativeFrom: Math.max(mulUp(a.relativeFrom, interval.size(b.exact)), mulUp(b.relativeFrom, interval.size(a.exact))) };
}

function unroundedSum(a: RoundedValue, b: RoundedValue): Unrounded {
  const exact = interval.add(a.exact, b.exact);
  const absolute = addUp(a.absolute, b.absolute);
  // Same signs: the relative error of a sum is at most the larger of the two, where both bounds hold without condition.
  const sameSign = (a.exact.lo >= 0 && b.exact.lo >= 0) || (a.exact.hi <= 0 && b.exact.hi <= 0);
  const known = sameSign && a.relativeFrom === 0 && b.relativeFrom === 0;
  return { exact, absolute, relative: known ? Math.max(a.relative, b.relative) : Infinity, relativeFrom: 0 };
}

/** Multiplying by one or minus one rounds nothing. */
const isExactFactor = (e: Expression): boolean => e.kind === 'number' && Q.isOne(Q.absolute(e.value));

/**
 * Bounds for the value and the rounding error of the tree, the argument being any float of `argument`. Sums and products are taken from left to right, two at a time, as code does.
 * Allowed nodes: the symbol `variable` (an exact float), numbers of the format, sums, products, quotients, negations, integer powers written as products, fma calls, square roots.
 */
export function evaluationError(tree: Expression, variable: string, argument: Interval, format: FloatFormat): RoundedValue {
  const visit = (e: Expression): RoundedValue => {
    switch (e.kind) {
      case 'symbol':
        if (e.name !== variable) throw new Declined('bad-request', `The symbol ${e.name} has no value here.`);
        return { exact: argument, absolute: 0, relative: 0, relativeFrom: 0 };
      case 'number':
        if (!isRepresentable(e.value, format)) throw new Declined('bad-request', 'A coefficient is not a number of the format.');
        return { exact: interval.fromRational(e.value), absolute: 0, relative: 0, relativeFrom: 0 };
      case 'negation': {
        const inner = visit(e.operand);
        return { ...inner, exact: interval.negate(inner.exact) };
      }
      case 'sum':
        return e.terms.map(visit).reduce((a, b) => rounded(unroundedSum(a, b), format));
      case 'product': {
        const [first, ...rest] = e.factors;
        if (!first) throw new Declined('bad-request', 'An empty product has no evaluation.');
        let left = { value: visit(first), node: first };
        for (const node of rest) {
          const value = visit(node);
          const same = left.node.kind === 'symbol' && node.kind === 'symbol' && left.node.name === node.name;
          const exact = same ? interval.square(left.value.exact) : interval.multiply(left.value.exact, value.exact);
          const whole = unroundedProduct(left.value, value, exact);
          left = { value: isExactFactor(node) || isExactFactor(left.node) ? whole : rounded(whole, format), node: e };
        }
        return left.value;
      }
      case 'quotient': {
        const [a, b] = [visit(e.numerator), visit(e.denominator)];
        const exact = interval.divide(a.exact, b.exact);
        const least = interval.leastSize(b.exact) - b.absolute;
        if (!exact || !(least > 0)) throw new Declined('bad-request', 'A divisor can be zero on this interval.');
        const absolute = up(addUp(a.absolute, mulUp(interval.size(exact), b.absolute)) / interval.down(least));
        const unconditional = a.relativeFrom === 0 && b.relativeFrom === 0 && b.relative < 1 && a.relative !== Infinity;
        const relative = unconditional ? up(addUp(a.relative, b.relative) / interval.down(1 - b.relative)) : Infinity;
        return rounded({ exact, absolute, relative, relativeFrom: 0 }, format);
      }
      case 'call': {
        const [x, y, z] = e.args.map(visit);
        if (e.function === 'fma' && x && y && z) {
          const inner = unroundedProduct(x, y, interval.multiply(x.exact, y.exact));
          return rounded(unroundedSum(inner, z), format);
        }
        throw new Declined('bad-request', `The call of ${e.function} is not part of a polynomial.`);
      }
      default:
        throw new Declined('bad-request', 'Only sums, products and quotients of floats can be bounded.');
    }
  };
  return visit(tree);
}
