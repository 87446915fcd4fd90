/** Enclosures of expression trees over any arithmetic. */
import { type Expression, rationalOf } from '../expression/index.ts';
import { build, Q, substitute } from '../expression/index.ts';
import { type Arithmetic, ELEMENTARY, type ElementaryName, type RealArithmetic } from './arithmetic.ts';
import { ballArithmetic } from './ball-arithmetic.ts';
import type { Ball, ComplexBall, Interval } from './ball.types.ts';
import { arithmetic as complexBalls } from './complex.ts';
import { complexArithmetic, type ComplexArithmetic } from './complex-arithmetic.ts';
import type { Rectangle } from './complex-field.ts';
import { fromBall, isFinite, toBall } from './interval.ts';
import { intervalArithmetic } from './interval-arithmetic.ts';

/** What an enclosure needs of a function's description (src/functions/description.ts fits). */
export interface EnclosableFunction {
  readonly definition?: (args: readonly Expression[]) => Expression;
  readonly enclose?: (args: readonly ComplexBall[], precision: number) => ComplexBall | null;
  readonly encloseReal?: (args: readonly Ball[], precision: number) => Ball | null;
}
export type Describe = (id: string) => EnclosableFunction | null | undefined;

/** A number type with what trees need beyond arithmetic. */
export interface TreeArithmetic<T> {
  readonly a: Arithmetic<T>;
  /** The imaginary unit, where there is one. */
  readonly i: T | null;
  /** Real n-th root of `\sqrt[n]{}`; null where undefined. */
  root(x: T, n: number): T | null;
  /** |x|, sign and the like; null where not defined (or not one value) on the whole set. */
  special(id: string, args: readonly T[]): T | null;
  /** A described function at sets; null where the description has no enclosure there. */
  described(f: EnclosableFunction, args: readonly T[]): T | null;
}

const ELEMENTARY_SET: ReadonlySet<string> = new Set(ELEMENTARY);
export const isElementaryName = (id: string): id is ElementaryName => ELEMENTARY_SET.has(id);

/** Sums over an index are added term by term up to this many terms. */
const MOST_TERMS = 20_000;

/** The value of the tree for all choices of the symbols inside their sets; null where it is not defined on all of them, or a symbol or function is unknown. */
export function evaluateTree<T>(e: Expression, environment: ReadonlyMap<string, T>, n: TreeArithmetic<T>, describe?: Describe): T | null {
  const { a } = n;
  const known = new Map<Expression, T | null>();
  const visit = (node: Expression): T | null => {
    const seen = known.get(node);
    if (seen !== undefined) return seen;
    const value = compute(node);
    known.set(node, value);
    return value;
  };
  const fold = (members: readonly Expression[], start: T, combine: (x: T, y: T) => T): T | null => {
    let result: T | null = null;
    for (const member of members) {
      const value = visit(member);
      if (value === null) return null;
      result = result === null ? value : combine(result, value);
    }
    return result ?? start;
  };
  const compute = (node: Expression): T | null => {
    switch (node.kind) {
      case 'number':
        return a.fromRational(node.value);
      case 'constant':
        if (node.name === 'i') return n.i;
        return node.name === 'infinity' ? null : a.constant(node.name);
      case 'symbol':
        return environment.get(node.name) ?? null;
      case 'negation': {
        const value = visit(node.operand);
        return value === null ? null : a.negate(value);
      }
      case 'sum':
        return fold(node.terms, a.zero, (x, y) => a.add(x, y));
      case 'product':
        return fold(node.factors, a.one, (x, y) => a.multiply(x, y));
      case 'quotient': {
        const numerator = visit(node.numerator);
        const denominator = visit(node.denominator);
        return numerator === null || denominator === null ? null : a.divide(numerator, denominator);
      }
      case 'power':
        return power(node.base, node.exponent);
      case 'root': {
        const degree = node.degree.kind === 'number' && Q.isInteger(node.degree.value) ? Number(node.degree.value.num) : null;
        const radicand = visit(node.radicand);
        return degree === null || degree < 1 || degree > 1000 || radicand === null ? null : n.root(radicand, degree);
      }
      case 'call':
        return call(node.function, node.args);
      case 'indexedSum':
      case 'indexedProduct':
        return indexed(node);
      default:
        return null;
    }
  };
  const power = (base: Expression, exponent: Expression): T | null => {
    if (base.kind === 'constant' && base.name === 'e') {
      const value = visit(exponent);
      return value === null ? null : a.exp(value);
    }
    const value = visit(base);
    if (value === null) return null;
    const q = rationalOf(exponent);
    if (q !== null) {
      if (Q.equal(q, Q.HALF)) return a.sqrt(value);
      return a.powerRational(value, q);
    }
    const raised = visit(exponent);
    return raised === null ? null : a.power(value, raised);
  };
  const call = (id: string, args: readonly Expression[]): T | null => {
    const values: T[] = [];
    for (const arg of args) {
      const value = visit(arg);
      if (value === null) return null;
      values.push(value);
    }
    const [first] = values;
    if (first !== undefined && values.length === 1 && isElementaryName(id)) return a[id](first);
    const special = n.special(id, values);
    if (special !== null) return special;
    const description = describe?.(id);
    if (!description) return null;
    if (description.encloseReal || description.enclose) {
      const direct = n.described(description, values);
      if (direct !== null) return direct;
    }
    return description.definition ? visit(description.definition(args)) : null;
  };
  const indexed = (node: Extract<Expression, { kind: 'indexedSum' | 'indexedProduct' }>): T | null => {
    const [from, to] = [rationalOf(node.lower), rationalOf(node.upper)];
    if (from === null || to === null || !Q.isInteger(from) || !Q.isInteger(to) || to.num - from.num > MOST_TERMS || node.index.kind !== 'symbol') return null;
    let result = node.kind === 'indexedSum' ? a.zero : a.one;
    for (let k = from.num; k <= to.num; k += 1n) {
      const value = visit(substitute(node.body, node.index.name, build.number(k)));
      if (value === null) return null;
      result = node.kind === 'indexedSum' ? a.add(result, value) : a.multiply(result, value);
    }
    return result;
  };
  return visit(e);
}

function realSpecial<T>(r: RealArithmetic<T>, id: string, args: readonly T[]): T | null {
  const [x, y] = args;
  if (x === undefined) return null;
  switch (id) {
    case 'abs':
      return r.absolute(x);
    case 'sign':
      return r.isPositive(x) ? r.one : r.isNegative(x) ? r.negate(r.one) : r.isZero(x) ? r.zero : null;
    case 'floor':
    case 'ceil':
    case 'trunc': {
      const towardsZero = id === 'trunc' && r.isNegative(x);
      const value = r.floor(id === 'ceil' || towardsZero ? r.negate(x) : x);
      return value === null ? null : r.fromInteger(id === 'ceil' || towardsZero ? -value : value);
    }
    case 'max':
      return args.reduce((a, b) => r.maximum(a, b));
    case 'min':
      return args.reduce((a, b) => r.minimum(a, b));
    case 'atan2':
      return y === undefined ? null : r.atan2(x, y);
    default:
      return null;
  }
}

export function realBallTrees(precision: number): TreeArithmetic<Ball> {
  const a = ballArithmetic(precision);
  return {
    a,
    i: null,
    root: (x, n) => a.root(x, n),
    special: (id, args) => realSpecial(a, id, args),
    described: (f, args) => f.encloseReal?.(args, precision) ?? null,
  };
}

export function complexBallTrees(precision: number, analytic = false): TreeArithmetic<ComplexBall> {
  const a = complexBalls(precision, analytic);
  return {
    a,
    i: a.i,
    root: (x, n) => complexRoot(a, x, n, analytic),
    special: (id, args) => complexSpecial(a, id, args, analytic),
    described: (f, args) => {
      if (f.encloseReal && !analytic && args.every((z) => a.real.isZero(z.im))) {
        const value = f.encloseReal(args.map((z) => z.re), precision);
        if (value) return a.fromReal(value);
      }
      return f.enclose?.(args, precision) ?? null;
    },
  };
}

function complexRoot<T>(a: ComplexArithmetic<T>, x: Rectangle<T>, n: number, analytic: boolean): Rectangle<T> | null {
  if (n % 2 === 1 && a.real.isZero(x.im) && !analytic) {
    const value = a.real.root(x.re, n);
    if (value !== null) return a.fromReal(value);
  }
  if (n % 2 === 1 && a.real.isNegative(x.re)) {
    // The real root on the left half line continues analytically as -(-x)^(1/n).
    const value = a.powerRational(a.negate(x), { num: 1n, den: BigInt(n) });
    return value === null ? null : a.negate(value);
  }
  if (n % 2 === 1 && !a.real.isPositive(x.re)) return null;
  return a.powerRational(x, { num: 1n, den: BigInt(n) });
}

function complexSpecial<T>(a: ComplexArithmetic<T>, id: string, args: readonly Rectangle<T>[], analytic: boolean): Rectangle<T> | null {
  const [x] = args;
  if (x === undefined || (analytic && !args.every((z) => a.isPoint(z)))) {
    // abs and its kin agree with analytic functions only where the real part keeps its sign.
    if (x === undefined || args.length !== 1) return null;
    if (id === 'abs') return a.real.isPositive(x.re) ? x : a.real.isNegative(x.re) ? a.negate(x) : null;
    if (id === 'sign') return a.real.isPositive(x.re) ? a.one : a.real.isNegative(x.re) ? a.negate(a.one) : null;
    return null;
  }
  if (args.every((z) => a.real.isZero(z.im))) {
    const value = realSpecial(a.real, id, args.map((z) => z.re));
    if (value !== null) return a.fromReal(value);
  }
  return id === 'abs' ? a.fromReal(a.modulus(x)) : null;
}

/** Special functions are enclosed through balls of 64 bits. */
const DESCRIBED_PRECISION = 64;

export const intervalTrees: TreeArithmetic<Interval> = {
  a: intervalArithmetic,
  i: null,
  root: (x, n) => intervalArithmetic.root(x, n),
  special: (id, args) => realSpecial(intervalArithmetic, id, args),
  described: (f, args) => {
    const balls: Ball[] = [];
    for (const arg of args) {
      const ball = toBall(arg);
      if (ball === null) return null;
      balls.push(ball);
    }
    const value = f.encloseReal?.(balls, DESCRIBED_PRECISION);
    if (!value) return null;
    const box = fromBall(value);
    return isFinite(box) ? box : null;
  },
};

/** Real enclosure of a tree; environment maps symbols to balls. Null where the value is not real and defined on the whole environment. */
export function encloseReal(e: Expression, environment: ReadonlyMap<string, Ball>, precision: number, describe?: Describe): Ball | null {
  return evaluateTree(e, environment, realBallTrees(precision), describe);
}

/** Complex enclosure with principal values; with `analytic`, a non-null result proves the tree analytic on the whole environment. */
export function enclose(e: Expression, environment: ReadonlyMap<string, ComplexBall>, precision: number, describe?: Describe, analytic = false): ComplexBall | null {
  return evaluateTree(e, environment, complexBallTrees(precision, analytic), describe);
}

/** Real enclosure by double intervals: about a hundred times cheaper than balls, about 50 bits at best. */
export function encloseInterval(e: Expression, environment: ReadonlyMap<string, Interval>, describe?: Describe): Interval | null {
  const value = evaluateTree(e, environment, intervalTrees, describe);
  return value !== null && isFinite(value) ? value : null;
}

const complexIntervals = { false: complexArithmetic(intervalArithmetic), true: complexArithmetic(intervalArithmetic, true) };
/** Trees over complex rectangles of double intervals; with `analytic`, null at cuts. */
export function rectangleTrees(analytic = false): TreeArithmetic<Rectangle<Interval>> {
  const a = complexIntervals[analytic ? 'true' : 'false'];
  return {
    a,
    i: a.i,
    root: (x, n) => complexRoot(a, x, n, analytic),
    special: (id, args) => complexSpecial(a, id, args, analytic),
    described: (f, args) => {
      const balls: ComplexBall[] = [];
      for (const arg of args) {
        const [re, im] = [toBall(arg.re), toBall(arg.im)];
        if (re === null || im === null) return null;
        balls.push({ re, im });
      }
      const value = f.enclose?.(balls, DESCRIBED_PRECISION);
      return value ? { re: fromBall(value.re), im: fromBall(value.im) } : null;
    },
  };
}

/** Complex rectangles of double intervals. */
export function encloseRectangle(e: Expression, environment: ReadonlyMap<string, Rectangle<Interval>>, describe?: Describe, analytic = false): Rectangle<Interval> | null {
  return evaluateTree(e, environment, rectangleTrees(analytic), describe);
}
