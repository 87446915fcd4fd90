/**
 * Local models of special functions at regular points: f(u) = sum a_k d^k, d = u - u(0).
 * The coefficients come from Cauchy's integral by the trapezoidal rule on |d| = R/2, whose error is B 2^-M/(1 - 2^-M) per (R/2)^k for M points and B = max |f| on |d| = R
 * (Trefethen & Weideman, SIAM Rev. 56 (2014), theorem 2.1); the rest of the series is at most B (D/R)^K/(1 - D/R) on |d| <= D. Both need f analytic on |d| <= R:
 * the list below says where each function is, from its definition.
 */
import { build, type Expression, structureKey } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Ball, complex, type ComplexBall, enclose, interval, type Model, type ModelArithmetic, real } from '../rigorous/index.ts';
import { type CircleSeries, circleSeries } from './circleSeries.ts';
import { polygammaSeries } from './gammaSeries.ts';
import { equationSeries, hasEquation, hypergeometricAtZero, polylogAtZero, type RealSeries } from './holonomic.ts';
import { hornerWithTail, withoutConstant } from './horner.ts';
import { isJacobi, jacobiSeries } from './jacobi.ts';
import { hasRecurrence, recurrenceSeries } from './nonlinear.ts';
import type { Numbers } from './numbers.ts';
import { thirdKindSeries } from './thirdKind.ts';
import { zetaSeries } from './zetaSeries.ts';

/** Where f is analytic in its varying argument: everywhere, off (-inf, end], or off [end, inf). */
type Domain = { readonly kind: 'entire' } | { readonly kind: 'offLeft'; readonly end: number } | { readonly kind: 'offRight'; readonly end: number } | { readonly kind: 'offPoint'; readonly end: number };
const entire: Domain = { kind: 'entire' };
const offLeft = (end: number): Domain => ({ kind: 'offLeft', end });
const offRight = (end: number): Domain => ({ kind: 'offRight', end });

const isInteger = (e: Expression | undefined): boolean => e !== undefined && (e.kind === 'number' ? e.value.den === 1n : e.kind === 'negation' && isInteger(e.operand));

function domainOf(id: string, args: readonly Expression[], index: number): Domain | null {
  switch (id) {
    case 'erf':
    case 'erfc':
    case 'erfi':
    case 'dawson':
    case 'fresnelS':
    case 'fresnelC':
    case 'sinIntegral':
    case 'cin':
    case 'ein':
    case 'sinhIntegral':
    case 'airyAi':
    case 'airyBi':
    case 'airyAiPrime':
    case 'airyBiPrime':
      return entire;
    case 'logGamma':
    case 'cosIntegral':
    case 'coshIntegral':
    case 'expIntegralEi':
      return offLeft(0);
    case 'expIntegralE':
    case 'besselY':
    case 'besselK':
      return index === 1 ? offLeft(0) : null;
    case 'besselJ':
    case 'besselI':
      return index === 1 ? (isInteger(args[0]) ? entire : offLeft(0)) : null;
    case 'struveH':
    case 'struveL':
      return index === 1 ? offLeft(0) : null;
    case 'kummerU':
      return index === 2 ? offLeft(0) : null;
    case 'lambertW':
      // Slightly right of -1/e.
      return index === 1 && args[0]?.kind === 'number' && args[0].value.num === 0n ? offLeft(-0.36787) : null;
    case 'zeta':
      return { kind: 'offPoint', end: 1 };
    case 'hurwitzZeta':
      return index === 1 ? offLeft(0) : null;
    case 'polylog':
      return index === 1 ? offRight(1) : null;
    case 'ellipticKParameter':
    case 'ellipticEParameter':
      return offRight(1);
    default:
      return null;
  }
}

/** Room between u0 and the nearest singularity that the list allows, as a double rounded down. */
function roomOf(domain: Domain, centre: number): number {
  switch (domain.kind) {
    case 'entire':
      return Infinity;
    case 'offLeft':
      return (centre - domain.end) * (1 - 1e-9);
    case 'offRight':
      return (domain.end - centre) * (1 - 1e-9);
    case 'offPoint':
      return Math.abs(centre - domain.end) * (1 - 1e-9);
  }
}

/** The model of a described function of one varying argument at a regular point; null where its singularities are too near, or nothing is known of them. */
export function specialModel<T>(id: string, args: readonly Expression[], models: readonly Model<T>[], n: Numbers<T>, m: ModelArithmetic<T>, isConstant: (e: Expression) => boolean, check?: () => void): Model<T> | null {
  const { r } = n;
  const index = args.findIndex((arg) => !isConstant(arg));
  const argument = models[index];
  if (argument === undefined || args.filter((arg) => !isConstant(arg)).length !== 1) return null;
  if (id === 'digamma' || id === 'polygamma') return polygammaModel(id, args, argument, n, m);
  if (id === 'expIntegralE' && index === 1) {
    const value = exponentialIntegralModel(args, argument, n, m);
    if (value !== null) return value;
  }
  const u = m.regular(argument);
  if (u === null) return null;
  const byNeighbours = neighbourModel(id, args, index, u, n, m);
  if (byNeighbours !== null) return byNeighbours;
  const byEquation = equationModel(id, args, index, argument, u, n, m);
  if (byEquation !== null) return byEquation;
  const byRecurrence = id === 'zeta' ? zetaModel(u, n, m) : hasRecurrence(id) && index === args.length - 1 ? recurrenceModel(id, args, u, n, m) : null;
  if (byRecurrence !== null) return byRecurrence;
  const domain = domainOf(id, args, index);
  if (domain === null || !describe(id)?.enclose) return null;
  // With an equation whose only singular point is that end, a shorter piece serves better than values on a circle.
  if (domain.kind === 'offLeft' && hasEquation(id, args, index)) return null;
  const centre = u.coefficients[0] ?? r.zero;
  const ball = n.toBall(centre);
  const parameters: ComplexBall[] = [];
  for (const [k, arg] of args.entries()) {
    if (k === index) continue;
    const value = enclose(arg, new Map([...n.parameters].flatMap(([name, set]) => (n.toBall(set) ? [[name, complex.fromReal(n.toBall(set) ?? real.ZERO)] as const] : []))), 128, describe);
    if (value === null) return null;
    parameters.push(value);
  }
  if (ball === null) return null;
  const offset = withoutConstant(m, u);
  const spread = m.rangeOf(offset);
  if (spread === null) return null;
  const reach = n.toBall(r.upperEnd(r.absolute(spread)));
  if (reach === null) return null;
  const D = up(real.toDouble(real.upperEnd(reach)));
  if (D === 0) {
    const value = n.value(build.call(id, ...args.map((arg, k) => (k === index ? build.symbol('argument') : arg))), new Map([['argument', centre]]));
    return value === null ? null : m.constant(value);
  }
  const room = roomOf(domain, real.toDouble(ball));
  const precision = n.precision <= 53 ? 64 : n.precision;
  for (const factor of [4, 2.5, 1.6, 1.25]) {
    // Powers of two where there is room: neighbouring questions then share their series.
    const wanted = 2 ** Math.ceil(Math.log2(Math.max(factor * D, 0.25)));
    const radius = Math.min(domain.kind === 'entire' ? wanted : Math.max(factor * D, Math.min(0.5 * room, 4)), 0.97 * room);
    if (!(radius > 1.1 * D)) continue;
    const series = circleSeries(id, parameters, index, ball, radius, precision, m.length, check);
    if (series === null) continue;
    return composed(series, offset, D, n, m);
  }
  return null;
}

const up = (x: number): number => interval.up(x);

/** By the function's own differential equation, or its hypergeometric series where the argument tends to zero. */
function equationModel<T>(id: string, args: readonly Expression[], index: number, argument: Model<T>, u: Model<T>, n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const { r } = n;
  const precision = n.precision <= 53 ? 64 : n.precision;
  const atZero = argument.valuation > 0;
  if (atZero && id !== 'hypergeometric' && id !== 'polylog') return null;
  const offset = atZero ? argument : withoutConstant(m, u);
  const spread = m.rangeOf(offset);
  const [centre, reach] = [n.toBall(u.coefficients[0] ?? r.zero), spread && n.toBall(r.upperEnd(r.absolute(spread)))];
  if (centre === null || reach === null) return null;
  let series: RealSeries | null;
  if (atZero) series = (id === 'polylog' ? polylogAtZero : hypergeometricAtZero)(args, reach, precision, Math.max(2, Math.ceil(m.length / argument.valuation) + 1));
  else {
    const environment = new Map<string, Ball>();
    for (const [name, set] of n.parameters) {
      const ball = n.toBall(set);
      if (ball !== null) environment.set(name, ball);
    }
    const constants = args.map((arg, k) => (k === index ? '' : structureKey(arg)));
    const values = [...environment].map(([name, ball]) => (constants.some((c) => c.includes(name)) ? `${name}=${ball.mid},${ball.rad},${ball.exp}` : '')).filter((v) => v !== '');
    series = equationSeries(id, args, index, centre, reach, environment, `${id}|${index}|${constants.join(';')}|${values.join(';')}`, precision, m.length);
  }
  return series && hornerWithTail(series.coefficients.map((c) => n.fromBall(c)), n.fromBall(series.remainder), offset, n, m);
}

/** zeta(u) = 1/(u - 1) + the Taylor series of an entire function. */
function zetaModel<T>(u: Model<T>, n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const { r } = n;
  const offset = withoutConstant(m, u);
  const spread = m.rangeOf(offset);
  const [centre, reach] = [n.toBall(u.coefficients[0] ?? r.zero), spread && n.toBall(r.upperEnd(r.absolute(spread)))];
  const series = centre && reach && zetaSeries(centre, reach, n.precision <= 53 ? 64 : n.precision, m.length);
  const pole = series && m.divide(m.constant(r.one), m.subtract(u, m.constant(r.one)));
  const regular = pole && hornerWithTail(series.coefficients.map((c) => n.fromBall(c)), n.fromBall(series.remainder), offset, n, m);
  return regular && m.add(pole, regular);
}

/** By the function's own nonlinear differential equation. */
function recurrenceModel<T>(id: string, args: readonly Expression[], u: Model<T>, n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const { r } = n;
  const precision = n.precision <= 53 ? 64 : n.precision;
  const offset = withoutConstant(m, u);
  const spread = m.rangeOf(offset);
  const [centre, reach] = [n.toBall(u.coefficients[0] ?? r.zero), spread && n.toBall(r.upperEnd(r.absolute(spread)))];
  const hull = spread && n.toBall(r.add(u.coefficients[0] ?? r.zero, r.union(r.zero, spread)));
  const others: Ball[] = [];
  for (const arg of args.slice(0, -1)) {
    const value = n.value(arg);
    const ball = value === null ? null : n.toBall(value);
    if (ball === null) return null;
    others.push(ball);
  }
  const series = centre && reach && hull && recurrenceSeries(id, others, centre, hull, reach, precision, m.length);
  return series ? hornerWithTail(series.coefficients.map((c) => n.fromBall(c)), n.fromBall(series.remainder), offset, n, m) : null;
}

/** By equations that tie the function to others: Jacobian elliptic functions, the elliptic integral of the third kind. */
function neighbourModel<T>(id: string, args: readonly Expression[], index: number, u: Model<T>, n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const { r } = n;
  const jacobi = isJacobi(id) && index === 0;
  if (!jacobi && !(id === 'ellipticPiParameter' && index === 1)) return null;
  const other = args[1 - index];
  const constant = other && n.value(other);
  const offset = withoutConstant(m, u);
  const spread = m.rangeOf(offset);
  const [fixed, centre, reach] = [constant && n.toBall(constant), n.toBall(u.coefficients[0] ?? r.zero), spread && n.toBall(r.upperEnd(r.absolute(spread)))];
  if (!fixed || !centre || !reach) return null;
  const precision = n.precision <= 53 ? 64 : n.precision;
  const series = jacobi ? jacobiSeries(id, fixed, centre, reach, precision, m.length) : thirdKindSeries(fixed, centre, reach, precision, m.length);
  return series && hornerWithTail(series.coefficients.map((c) => n.fromBall(c)), n.fromBall(series.remainder), offset, n, m);
}

/** Horner's rule in the offset, with the rest of the series as a tail of its K-th power. */
function composed<T>(series: CircleSeries, offset: Model<T>, D: number, n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const { r } = n;
  const K = series.coefficients.length;
  const ratio = real.divide(real.fromDouble(D), real.fromDouble(series.radius), 60);
  const gap = ratio && real.lowerEnd(real.subtract(real.ONE, ratio, 60));
  const power = real.powerInteger(real.fromDouble(series.radius), K, 60);
  const size = gap && power && real.divide(series.bound, real.multiply(gap, power, 60), 60);
  if (!size || !real.isNonNegative(size)) return null;
  const factor = n.fromBall(real.upperEnd(size));
  const unit = r.union(r.negate(r.one), r.one);
  return hornerWithTail(series.coefficients.map((c) => n.fromBall(c)), r.multiply(factor, unit), offset, n, m);
}

/** psi and its derivatives by Hurwitz zeta values; the argument must stay positive. */
function polygammaModel<T>(id: string, args: readonly Expression[], argument: Model<T>, n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const { r } = n;
  const [order] = args;
  const degree = id === 'digamma' ? 0 : order?.kind === 'number' && order.value.den === 1n ? Number(order.value.num) : -1;
  const u = m.regular(argument);
  if (u === null || degree < 0 || degree > 60) return null;
  const hull = r.union(u.range, u.coefficients[0] ?? r.zero);
  const [centre, lowest] = [n.toBall(u.coefficients[0] ?? r.zero), n.toBall(r.lowerEnd(hull))];
  if (centre === null || lowest === null || !real.isPositive(lowest)) return null;
  const precision = n.precision <= 53 ? 64 : n.precision;
  const series = polygammaSeries(degree, centre, lowest, precision, m.length);
  if (series === null) return null;
  const offset = withoutConstant(m, u);
  return hornerWithTail(series.coefficients.map((c) => n.fromBall(c)), n.fromBall(series.remainder), offset, n, m);
}

/** E_k for whole k >= 1 on positive arguments through E_k' = -E_(k-1), E_0 = e^-u/u (DLMF 8.19.13). */
function exponentialIntegralModel<T>(args: readonly Expression[], argument: Model<T>, n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  const { r } = n;
  const [order] = args;
  const degree = order?.kind === 'number' && order.value.den === 1n ? Number(order.value.num) : 0;
  const u = m.regular(argument);
  if (u === null || degree < 1 || degree > 8 || !r.isPositive(u.range)) return null;
  const P = m.polynomialPart(u);
  const hull = r.union(u.range, P.range);
  if (!r.isPositive(hull)) return null;
  const start = (k: number): T | null => n.value(build.call('expIntegralE', build.number(k), build.symbol('argument')), new Map([['argument', u.coefficients[0] ?? r.zero]]));
  const chain = (argumentModel: Model<T>, k: number): Model<T> | null => {
    if (k === 0) {
      const e = m.elementary('exp', m.negate(argumentModel));
      return e && m.divide(e, argumentModel);
    }
    const slope = chain(argumentModel, k - 1);
    const value = start(k);
    return slope === null || value === null ? null : m.integrate(argumentModel, value, m.negate(slope), null);
  };
  const slope = chain(P, degree - 1);
  const value = start(degree);
  if (slope === null || value === null) return null;
  // |E_(k-1)(x)| <= e^-x/x on the hull, for the part that the polynomial leaves out.
  const e = r.exp(r.negate(hull));
  const size = e && r.divide(e, hull);
  return m.integrate(u, value, m.negate(slope), size && r.negate(r.union(r.zero, size)));
}
