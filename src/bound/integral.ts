/**
 * Definite integrals enclosed: local models are integrated term by term, their remainder factors with the exact weight of the powers they stand beside.
 * Ends (singular or not, infinite too) through x = a +- h s^q or x = A s^-q with powers of log s; the rest by two-sided models on pieces.
 */
import { build, type Assumption, type Expression, freeSymbols, mapChildren, Q, type Rational, substitute } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { type Ball, encloseReal, type Model, modelArithmetic, real } from '../rigorous/index.ts';
import { logModelOf } from './local.ts';
import { ballNumbers, type Numbers, type ParameterBalls } from './numbers.ts';
import { compareReal, isExactlyZero, parameterBalls } from './region.ts';
import { exactNear } from './exactNear.ts';

export interface IntegralValue {
  /** Decimals rounded outward. */
  readonly low: string;
  readonly high: string;
  readonly proof: readonly string[];
}

type N = Numbers<Ball>;
interface Context {
  readonly n: N;
  readonly variable: string;
  readonly body: Expression;
  readonly length: number;
  readonly check: () => void;
  /** Widest error allowed to one piece. */
  readonly tolerance: Ball;
  pieces: number;
}

const MOST_PIECES = 3000;
const DENOMINATORS = [1, 2, 3, 4, 6];

/** The value of an expression with definite integrals in it, to an absolute tolerance. */
export function integralValue(expression: Expression, tolerance: Rational, assumptions: readonly Assumption[], budget: Budget): IntegralValue {
  const names = freeSymbols(expression);
  const parameters = parameterBalls(names, assumptions);
  const missing = names.filter((name) => !parameters.has(name));
  if (missing.length > 0) throw new Declined('needs-assumption', `The value needs a range for ${missing.join(', ')}; add an assumption such as 0.9 <= ${missing[0] ?? 'c'} <= 1.1.`);
  const bits = Math.max(20, -Math.floor(Math.log2(Math.max(1e-300, Q.toDouble(tolerance)))));
  let best: Ball | null = null;
  let pieces = 0;
  for (let round = 0; round < 4; round += 1) {
    const precision = bits + 60 + 40 * round;
    const target = real.scaleByPowerOfTwo(real.fromRational(tolerance, 40), -4 - 6 * round);
    const counter = { pieces: 0 };
    const value = valueOf(expression, parameters, precision, target, counter, () => budget.check(), assumptions);
    pieces = counter.pieces;
    best = best === null ? value : (real.intersection(best, value, precision) ?? value);
    const width = real.upper(real.scaleByPowerOfTwo(real.radius(best), 1));
    if (Q.compare(width, tolerance) <= 0 || parameters.size > 0) break;
  }
  if (best === null) throw new Declined('undecided', 'The integral could not be enclosed.');
  const digits = Math.max(6, Math.ceil(bits * 0.302) + Math.max(0, Math.ceil(real.exponentOf(best) * 0.302)) + 2);
  return {
    low: real.toDecimalDown(best, digits),
    high: real.toDecimalUp(best, digits),
    proof: [`Integrated term by term over ${pieces} pieces with local models; the remainder of each model is enclosed on its whole piece.`],
  };
}

/** The value of an expression with definite integrals whose limits and integrands are numbers, to about the precision; null where there is none to enclose. */
export function encloseWithIntegrals(expression: Expression, parameters: ParameterBalls, precision: number, budget: Budget): Ball | null {
  try {
    return valueOf(expression, parameters, precision + 40, real.scaleByPowerOfTwo(real.ONE, -precision), { pieces: 0 }, () => budget.check(), []);
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}

function valueOf(expression: Expression, parameters: ParameterBalls, precision: number, tolerance: Ball, counter: { pieces: number }, check: () => void, assumptions: readonly Assumption[]): Ball {
  const found = new Map<string, Ball>();
  const visit = (e: Expression): Expression => {
    if (e.kind !== 'integral') return mapChildren(e, visit);
    const name = `integral ${found.size}`;
    found.set(name, integrate(e, parameters, precision, tolerance, counter, check, assumptions));
    return build.symbol(name);
  };
  const outer = visit(expression);
  const value = encloseReal(outer, new Map([...parameters, ...found]), precision, describe);
  if (value === null) throw new Declined('undecided', 'The factors beside the integral have no real value.');
  return value;
}

const infinite = (e: Expression): 1 | -1 | 0 => (e.kind === 'constant' && e.name === 'infinity' ? 1 : e.kind === 'negation' && infinite(e.operand) === 1 ? -1 : 0);

function integrate(node: Extract<Expression, { kind: 'integral' }>, parameters: ParameterBalls, precision: number, tolerance: Ball, counter: { pieces: number }, check: () => void, assumptions: readonly Assumption[]): Ball {
  if (!node.lower || !node.upper || node.variable.kind !== 'symbol') throw new Declined('bad-request', 'Only a definite integral has a value; give both limits.');
  const n = ballNumbers(precision, parameters);
  const context: Context = { n, variable: node.variable.name, body: node.body, length: Math.min(90, Math.max(16, Math.round(precision / 3.2))), check, tolerance, pieces: 0 };
  const [from, to] = [infinite(node.lower), infinite(node.upper)];
  let result: Ball;
  if (from === 0 && to === 0) {
    const order = parameters.size > 0 ? -1 : compareReal(node.lower, node.upper, assumptions);
    if (order === 0) return real.ZERO;
    result = order < 0 ? finite(node.lower, node.upper, context) : real.negate(finite(node.upper, node.lower, context));
  } else if (from === to) return real.ZERO;
  else if (from > 0 || to < 0) return real.negate(integrate({ ...node, lower: node.upper, upper: node.lower }, parameters, precision, tolerance, counter, check, assumptions));
  else result = whole(node.lower, node.upper, from, to, context);
  counter.pieces += context.pieces;
  return result;
}

/** One or both ends infinite: cut where the outer part is well enclosed. */
function whole(lower: Expression, upper: Expression, from: number, to: number, c: Context): Ball {
  const { r } = c.n;
  const zero = build.number(0);
  const start = from === 0 ? lower : to === 0 ? upper : zero;
  let total = real.ZERO;
  const outward = (sign: 1 | -1): void => {
    const base = build.sum(build.call('abs', start), build.number(1));
    for (let k = 0; ; k += 1) {
      c.check();
      if (k > 14) throw new Declined('undecided', 'The integral up to infinity could not be enclosed: the integrand must fall off without oscillating.');
      const size = build.product(base, build.number(1n << BigInt(k)));
      const cut = sign > 0 ? size : build.negation(size);
      const outer = outerPart(cut, c);
      if (outer === null || (k < 12 && tooWide(outer, c))) continue;
      const inner = sign > 0 ? finite(start, cut, c) : finite(cut, start, c);
      total = r.add(total, r.add(inner, outer));
      return;
    }
  };
  if (to > 0) outward(1);
  if (from < 0) outward(-1);
  return total;
}
const tooWide = (x: Ball, c: Context): boolean => real.compare(real.radius(x), c.tolerance) === 1;

/** int over |x| from |A| to infinity on the side of A: x = A s^-q, dx = -q A s^(-q-1) ds. */
function outerPart(cut: Expression, c: Context): Ball | null {
  const { n } = c;
  const { r } = n;
  const A = n.value(cut);
  if (A === null) return null;
  for (const q of DENOMINATORS) {
    const m = modelArithmetic(r, n.unitRight, c.length, true, r);
    const body = logModelOf(c.body, n, m, c.variable, m.polynomial([A], -q), undefined, c.check);
    if (body === null) continue;
    c.pieces += 1;
    const value = integrateLocal(body, -q, n);
    return value === null ? null : r.multiply(value, r.multiply(r.fromInteger(q), r.absolute(A)));
  }
  return null;
}

/** int_0^1 s^(shift-1) sum_j (log s)^j f_j(s) ds; int_0^1 s^(p-1) (log s)^j ds = (-1)^j j!/p^(j+1). Null where it diverges or cannot be told. */
function integrateLocal(f: readonly Model<Ball>[], shift: number, n: N): Ball | null {
  const { r } = n;
  let total = real.ZERO;
  for (const [j, g] of f.entries()) {
    if (g.coefficients.length === 0 && r.isZero(g.tail)) continue;
    const weight = (p: number): Ball | null => {
      if (p <= 0) return null;
      let w = r.one;
      for (let i = 1; i <= j; i += 1) w = r.divideInteger(r.multiply(w, r.fromInteger(-i)), p);
      return r.divideInteger(w, p);
    };
    for (const [k, coefficient] of g.coefficients.entries()) {
      if (r.isZero(coefficient)) continue;
      const w = weight(g.valuation + k + shift);
      if (w === null) return null;
      total = r.add(total, r.multiply(w, coefficient));
    }
    if (r.isZero(g.tail)) continue;
    const w = weight(g.valuation + g.coefficients.length + shift);
    if (w === null) return null;
    total = r.add(total, r.multiply(w, g.tail));
  }
  return total;
}

/** Both ends through their own local variable, meeting in the middle. */
function finite(lower: Expression, upper: Expression, c: Context): Ball {
  const middle = build.quotient(build.sum(lower, upper), build.number(2));
  return c.n.r.add(fromEnd(lower, middle, 1, c), fromEnd(upper, middle, -1, c));
}

/** int between an end and a far point (in increasing x), sign 1 for a lower end. */
function fromEnd(end: Expression, far: Expression, sign: 1 | -1, c: Context): Ball {
  const { n } = c;
  const { r } = n;
  const [a, b] = [n.value(end), n.value(far)];
  if (a === null || b === null) throw new Declined('undecided', 'A limit of the integral has no real value.');
  const vanishes = (e: Expression): boolean => isExactlyZero(substitute(e, c.variable, end), []);
  for (let cut = 0; cut < 40; cut += 1) {
    c.check();
    const h = real.scaleByPowerOfTwo(r.absolute(r.subtract(b, a)), -cut);
    for (const q of DENOMINATORS) {
      const m = modelArithmetic(r, n.unitRight, c.length, true, r);
      const leaf = m.polynomial([a, ...Array.from({ length: q - 1 }, () => r.zero), sign > 0 ? h : r.negate(h)]);
      const body = logModelOf(c.body, n, m, c.variable, leaf, vanishes, c.check);
      if (body === null) continue;
      const unit = integrateLocal(body, q, n);
      if (unit === null) {
        if (diverges(body, q, n)) throw new Declined('bad-request', 'The integral diverges at one of its limits.');
        continue;
      }
      const value = r.multiply(unit, r.multiply(r.fromInteger(q), h));
      if (tooWide(value, c) && cut < 38) break;
      c.pieces += 1;
      const near = r.midpoint(sign > 0 ? r.add(a, h) : r.subtract(a, h));
      // The models were built with h as a set; the seam between the two parts is corrected by the width of that set.
      const seam = r.subtract(sign > 0 ? r.add(a, h) : r.subtract(a, h), near);
      const rest = cut === 0 ? real.ZERO : sign > 0 ? pieces(near, r.midpoint(b), c) : pieces(r.midpoint(b), near, c);
      return r.add(r.add(value, rest), slack(near, seam, b, c));
    }
  }
  throw new Declined('undecided', 'The integral could not be enclosed at one of its limits.');
}

/** What lies between the rounded seams and the exact ones: at most width times the largest value there. */
function slack(near: Ball, seam: Ball, far: Ball, c: Context): Ball {
  const { r } = c.n;
  const bound = (at: Ball, width: Ball): Ball => {
    if (width.rad === 0n && width.mid === 0n) return real.ZERO;
    const place = r.add(at, width);
    const value = c.n.value(c.body, new Map([[c.variable, r.union(at, place)]]));
    if (value === null) throw new Declined('undecided', 'The integrand could not be enclosed between two pieces.');
    const size = r.absolute(r.multiply(value, width));
    return r.union(r.negate(size), size);
  };
  return r.add(bound(near, seam), bound(r.midpoint(far), r.subtract(far, r.midpoint(far))));
}

/** A power of s that is not integrable, with a coefficient that is not zero. */
function diverges(f: readonly Model<Ball>[], shift: number, n: N): boolean {
  const present = f.filter((g) => g.coefficients.length > 0);
  const least = Math.min(...present.map((g) => g.valuation));
  const top = present.filter((g) => g.valuation === least).pop();
  const lead = top?.coefficients[0];
  return least + shift <= 0 && lead !== undefined && !n.r.containsZero(lead);
}

/** [x0, x1] with exact ends by two-sided models, halved until the errors are small. */
function pieces(x0: Ball, x1: Ball, c: Context): Ball {
  const { r } = c.n;
  const sign = real.compare(x0, x1);
  if (sign === 0) return real.ZERO;
  if (sign === 1) return real.negate(pieces(x1, x0, c));
  const stack: { readonly a: Ball; readonly b: Ball; readonly depth: number }[] = [{ a: x0, b: x1, depth: 0 }];
  let total = real.ZERO;
  for (let piece = stack.pop(); piece !== undefined; piece = stack.pop()) {
    c.check();
    const { a, b, depth } = piece;
    const value = piecewise(a, b, c);
    if (value !== null && (!tooWide(value, c) || depth > 36)) {
      total = r.add(total, value);
      c.pieces += 1;
      continue;
    }
    if (c.pieces + stack.length > MOST_PIECES || depth > 44) {
      const place = insidePlace(a, b, c);
      if (place !== null) {
        total = r.add(total, place);
        continue;
      }
      throw new Declined('undecided', 'The integrand has a singularity inside the interval that could not be integrated; split the integral there.');
    }
    const middle = r.midpoint(r.union(a, b));
    stack.push({ a, b: middle, depth: depth + 1 }, { a: middle, b, depth: depth + 1 });
  }
  return total;
}

/** A small piece around a singular place of the usual shapes: both sides of it as ends. */
function insidePlace(a: Ball, b: Ball, c: Context): Ball | null {
  const { n } = c;
  const { r } = n;
  const width = real.toDouble(r.subtract(b, a));
  for (const place of exactNear(real.toDouble(r.midpoint(r.union(a, b))), Math.max(width, 1e-14))) {
    const p = n.value(place);
    if (p === null || real.compare(p, a) === -1 || real.compare(p, b) === 1) continue;
    const [left, right] = [build.number(real.lower(a)), build.number(real.lower(b))];
    const [below, above] = [real.compare(p, a) === 0, real.compare(p, b) === 0];
    return r.add(below ? real.ZERO : fromEnd(place, left, -1, c), above ? real.ZERO : fromEnd(place, right, 1, c));
  }
  return null;
}

function piecewise(a: Ball, b: Ball, c: Context): Ball | null {
  const { n } = c;
  const { r } = n;
  const m = modelArithmetic(r, n.unitBoth, c.length, false, r);
  const centre = real.scaleByPowerOfTwo(real.addExact(a, b), -1);
  const half = real.scaleByPowerOfTwo(real.subtractExact(b, a), -1);
  const leaf = m.withRange(m.polynomial([centre, half]), r.union(a, b));
  const body = logModelOf(c.body, n, m, c.variable, leaf, undefined, c.check);
  const [f, ...logs] = body ?? [];
  const g = f && logs.length === 0 ? m.regular(f) : null;
  if (g === null) return null;
  let total = real.ZERO;
  for (const [k, coefficient] of g.coefficients.entries()) if (k % 2 === 0) total = r.add(total, r.divideInteger(coefficient, k + 1));
  total = real.scaleByPowerOfTwo(total, 1);
  const size = g.coefficients.length;
  if (!r.isZero(g.tail)) {
    const spread = size % 2 === 0 ? g.tail : r.union(g.tail, r.negate(g.tail));
    total = r.add(total, real.scaleByPowerOfTwo(r.divideInteger(spread, size + 1), 1));
  }
  return r.multiply(total, half);
}
