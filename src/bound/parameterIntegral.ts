/**
 * Local models of definite integrals over a parameter: int_a^b g(x, t) dt by Gauss's quadrature of the models of g(x, t_i).
 * With t = a + (b - a) u every coefficient c(u) of the model, and its remainder factor at each s, is analytic on the ellipse E with foci 0 and 1 and sum of semi-axes 1 (rho = 2),
 * proved and bounded by M with models over complex rectangles that cover its upper half (on the lower one values are conjugate). Its Chebyshev coefficients are at most 2 M rho^-k,
 * the rule is exact below degree 2N, its weights are positive with sum 1: the error is at most the sum of 4 M rho^-k, k >= 2N, that is 8 M 4^-N.
 */
import { build, type Expression, freeSymbols, type IntegralNode, Q, type Rational, rationalOf, substitute, walk } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Interval, interval, type LogModel, type Model, type ModelArithmetic, modelArithmetic, logModelOfTree, real, type Rectangle, rectangleTrees } from '../rigorous/index.ts';
import { gaussLegendre } from './gaussLegendre.ts';
import type { Numbers } from './numbers.ts';
import { normalForm } from './region.ts';

type Z = Rectangle<Interval>;
const PLACE = 'place between the limits';
const DEEPEST = 4;
const COLUMNS = 6;
/** The ellipse lies in re [-1/8, 9/8], |im| <= 3/8. */
const [LEFT, RIGHT, HEIGHT] = [-0.125, 1.125, 0.375];

/** Null where the integrand has no model on the ellipse of every part: singular limits, infinite ones, functions that have no complex models. */
export function parameterIntegral<T>(node: IntegralNode, environment: ReadonlyMap<string, Model<T>>, n: Numbers<T>, m: ModelArithmetic<T>, modelled: (e: Expression, environment: ReadonlyMap<string, Model<T>>) => LogModel<T> | null): Model<T> | null {
  const { lower, upper, variable, body } = node;
  if (!lower || !upper || variable.kind !== 'symbol' || isInfinite(lower) || isInfinite(upper)) return null;
  const started = fromLowerLimit(node, variable.name, environment, m, modelled);
  if (started !== null) return started;
  const width = build.difference(upper, lower);
  const integrand = build.product(substitute(body, variable.name, build.sum(lower, build.product(width, build.symbol(PLACE)))), width);
  const around = complexEnvironment(environment, n, m);
  if (around === null) return null;
  /** The parts of the way that have models on their ellipses: all of these are found before anything is computed at nodes. */
  const split = (whole: Expression, from: Rational, to: Rational, depth: number): readonly Part[] | null => {
    const length = Q.subtract(to, from);
    const scaled = substitute(whole, PLACE, build.sum(build.number(from), build.product(build.number(length), build.symbol(PLACE))));
    const boxes = onEllipse(scaled, around);
    if (boxes !== null) return [{ integrand: scaled, boxes, length }];
    if (depth === 0) return null;
    const middle = Q.divide(Q.add(from, to), Q.rational(2));
    const first = split(whole, from, middle, depth - 1);
    const second = first && split(whole, middle, to, depth - 1);
    return second && [...first, ...second];
  };
  const sumOfParts = (parts: readonly Part[]): Model<T> | null => {
    let total: Model<T> = m.constant(n.r.zero);
    for (const { integrand: scaled, boxes, length } of parts) {
      const value = quadrature(scaled, boxes, environment, around, n, m, modelled);
      if (value === null) return null;
      total = m.add(total, m.scale(value, n.r.fromRational(length)));
    }
    return total;
  };
  const plain = split(integrand, Q.ZERO, Q.ONE, DEEPEST);
  if (plain !== null) return sumOfParts(plain);
  if (![...walk(body)].some(hasBranch)) return null;
  // A root of the distance from the lower limit goes away with u = v^q, du = q v^(q-1) dv.
  for (const q of [2, 3]) {
    const v = build.symbol(PLACE);
    const rooted = normalForm(build.product(build.number(q), build.power(v, q - 1), substitute(integrand, PLACE, build.power(v, q))), PLACE, '>');
    const parts = split(rooted, Q.ZERO, Q.ONE, 1);
    if (parts !== null) return sumOfParts(parts);
  }
  return null;
}

interface Part {
  readonly integrand: Expression;
  readonly boxes: readonly Model<Z>[];
  readonly length: Rational;
}
const hasBranch = (e: Expression): boolean => e.kind === 'root' || (e.kind === 'call' && e.function === 'sqrt') || (e.kind === 'power' && rationalOf(e.exponent)?.den !== 1n);

/** Where only the upper limit varies, and starts at the lower one: the integral of the model of g along that of the limit, removable singularities of g at the start included. */
function fromLowerLimit<T>(node: IntegralNode, variable: string, environment: ReadonlyMap<string, Model<T>>, m: ModelArithmetic<T>, modelled: (e: Expression, environment: ReadonlyMap<string, Model<T>>) => LogModel<T> | null): Model<T> | null {
  const { lower, upper, body } = node;
  const free = new Set(freeSymbols(body));
  if (!lower || !upper || [...environment].some(([name, f]) => name !== variable && free.has(name) && !isConstant(f, m))) return null;
  const only = (value: LogModel<T> | null): Model<T> | null => (value?.length === 1 ? (value[0] ?? null) : null);
  const [from, to] = [only(modelled(lower, environment)), only(modelled(upper, environment))];
  const u = to && m.regular(to);
  if (!from || !u || !isConstant(from, m)) return null;
  const start = m.a.subtract(u.coefficients[0] ?? m.a.zero, from.coefficients[0] ?? m.a.zero);
  if (!m.a.isZero(start)) return null;
  const along = (f: Model<T>): Model<T> | null => only(modelled(body, new Map([...environment, [variable, f] as const])));
  // Starting at the lower limit in its own power of s, so that a removable singularity there divides out.
  const first = u.coefficients.findIndex((c) => !m.a.isZero(c));
  const zeros = m.a.isZero(from.coefficients[0] ?? m.a.zero) ? Math.max(0, first) : 0;
  const slope = along(m.polynomial(u.coefficients.slice(zeros), zeros));
  const regular = slope && m.regular(slope);
  if (!regular) return null;
  const whole = m.a.isZero(u.tail) ? null : along(m.constant(m.a.union(u.range, m.polynomialPart(u).range)));
  return m.integrate(u, m.a.zero, regular, whole && m.rangeOf(whole));
}
const isConstant = <T>(f: Model<T>, m: ModelArithmetic<T>): boolean => m.a.isZero(f.tail) && f.valuation >= 0 && (f.coefficients.length === 0 || (f.valuation === 0 && f.coefficients.slice(1).every((c) => m.a.isZero(c))));

const isInfinite = (e: Expression): boolean => (e.kind === 'constant' && e.name === 'infinity') || (e.kind === 'negation' && isInfinite(e.operand));

interface ComplexSide {
  readonly m: ModelArithmetic<Z>;
  readonly environment: ReadonlyMap<string, Model<Z>>;
}

/** The models of the symbols over rectangles; null where one of their numbers is not finite. */
function complexEnvironment<T>(environment: ReadonlyMap<string, Model<T>>, n: Numbers<T>, m: ModelArithmetic<T>): ComplexSide | null {
  let finite = true;
  const lift = (x: T): Z => {
    const ball = n.toBall(x);
    if (ball === null) finite = false;
    return { re: interval.fromBall(ball ?? real.ZERO), im: { lo: 0, hi: 0 } };
  };
  const models = [...environment].map(([name, f]) => [name, { valuation: f.valuation, coefficients: f.coefficients.map(lift), tail: lift(f.tail), range: lift(f.range) }] as const);
  const domain = lift(m.domain);
  return finite ? { m: modelArithmetic(rectangles.a, domain, m.length, n.r.isNonNegative(m.domain)), environment: new Map(models) } : null;
}
const rectangles = rectangleTrees(true);

/** Models on rectangles that cover the upper half of the ellipse. */
function onEllipse(e: Expression, side: ComplexSide): readonly Model<Z>[] | null {
  const boxes: Model<Z>[] = [];
  const step = (RIGHT - LEFT) / COLUMNS;
  for (let k = 0; k < COLUMNS; k += 1) {
    const box: Z = { re: { lo: LEFT + k * step - 2 ** -40, hi: LEFT + (k + 1) * step + 2 ** -40 }, im: { lo: 0, hi: HEIGHT } };
    const value = onRectangle(e, box, side);
    if (value === null) return null;
    boxes.push(value);
  }
  return boxes;
}

function quadrature<T>(e: Expression, boxes: readonly Model<Z>[], environment: ReadonlyMap<string, Model<T>>, side: ComplexSide, n: Numbers<T>, m: ModelArithmetic<T>, modelled: (e: Expression, environment: ReadonlyMap<string, Model<T>>) => LogModel<T> | null): Model<T> | null {
  const { r } = n;
  const count = 8 + Math.ceil(n.precision / 2);
  const rule = gaussLegendre(count, n.precision + 8);
  if (rule === null) return null;
  const models: Model<T>[] = [];
  for (const node of rule.nodes) {
    const place = n.fromBall(real.scaleByPowerOfTwo(real.add(node, real.ONE, n.precision + 8), -1));
    const [value, ...logs] = modelled(e, new Map([...environment, [PLACE, m.constant(place)] as const])) ?? [];
    if (value === undefined || logs.length > 0) return null;
    models.push(value);
  }
  // One shape for all: powers of s from `valuation` to `end`, the rest in the tail.
  const inexact = [...models.filter((f) => !r.isZero(f.tail)), ...boxes.filter((f) => !rectangles.a.isZero(f.tail))];
  const valuation = Math.min(...[...models, ...boxes].map((f) => f.valuation));
  const last = Math.max(...[...models, ...boxes].map((f) => f.valuation + f.coefficients.length));
  const end = Math.max(valuation, Math.min(last, ...inexact.map((f) => f.valuation + f.coefficients.length)));
  const sizes = boxes.map((f) => shaped(f, valuation, end, side.m));
  const values = models.map((f) => shaped(f, valuation, end, m));
  const weights = rule.weights.map((w) => n.fromBall(real.scaleByPowerOfTwo(w, -1)));
  const total: T[] = [];
  for (let k = 0; k <= end - valuation; k += 1) {
    let largest = 0;
    for (const size of sizes) {
      const z = size[k];
      if (z === undefined) return null;
      largest = Math.max(largest, sizeOf(z));
    }
    if (!Number.isFinite(largest)) return null;
    const error = n.fromBall(real.scaleByPowerOfTwo(real.fromDouble(largest), 3 - 2 * count));
    let sum = r.union(r.negate(error), error);
    if (largest === 0) sum = r.zero;
    for (const [i, value] of values.entries()) sum = r.add(sum, r.multiply(weights[i] ?? r.zero, value[k] ?? r.zero));
    total.push(sum);
  }
  const tail = total.pop() ?? r.zero;
  const polynomial = m.polynomial(total, valuation);
  return r.isZero(tail) ? polynomial : m.add(polynomial, { valuation: end, coefficients: [], tail, range: tail });
}

/** |z| is at most |re| + |im|. */
const sizeOf = (z: Z): number => interval.up(interval.size(z.re) + interval.size(z.im));

function onRectangle(e: Expression, box: Z, { m, environment }: ComplexSide): Model<Z> | null {
  const [value, ...logs] = logModelOfTree(e, { m, trees: rectangles, real: null, describe, environment: new Map([...environment, [PLACE, m.constant(box)] as const]) }) ?? [];
  return value === undefined || logs.length > 0 ? null : value;
}

/** Coefficients of s^valuation .. s^(end-1), then the tail of s^end. */
function shaped<T>(f: Model<T>, valuation: number, end: number, m: ModelArithmetic<T>): readonly T[] {
  const { a } = m;
  const list: T[] = [];
  for (let k = valuation; k < end; k += 1) list.push(f.coefficients[k - f.valuation] ?? a.zero);
  let tail = f.tail;
  const from = Math.max(0, end - f.valuation);
  for (let k = f.coefficients.length - 1; k >= from; k -= 1) tail = a.add(f.coefficients[k] ?? a.zero, a.multiply(m.domain, tail));
  for (let k = end; k < f.valuation; k += 1) tail = a.multiply(m.domain, tail);
  list.push(tail);
  return list;
}
