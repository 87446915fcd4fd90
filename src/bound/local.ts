/** Models of f, of the sum and of the remainder on a segment. */
import { build, type Expression, Q, type Rational, rationalOf, substitute } from '../expression/index.ts';
import { type Expansion, partialSum } from '../expand/index.ts';
import { describe } from '../functions/index.ts';
import { Declined } from '../outcome.ts';
import { type LogModel, logModelOfTree, type Model, type ModelArithmetic, modelArithmetic } from '../rigorous/index.ts';
import type { Numbers } from './numbers.ts';
import { isExactlyZero, normalForm, type Segment } from './region.ts';
import { besselSeriesModel } from './besselAtZero.ts';
import { envelopeModel } from './enveloping.ts';
import { kelvinSeriesModel } from './kelvinAtZero.ts';
import { lambertBranchModel } from './lambertBranch.ts';
import { parameterIntegral } from './parameterIntegral.ts';
import { rewriteCall } from './rewrite.ts';
import { specialModel } from './special.ts';

/** A model in s on a sub-interval of its unit domain. */
export interface Local<T> {
  readonly m: ModelArithmetic<T>;
  readonly f: LogModel<T>;
  /** The model of the variable itself. */
  readonly leaf: Model<T>;
  /** s in [from, to]. */
  readonly from: T;
  readonly to: T;
  /** t = scale * s^denominator. */
  readonly scale: T;
  readonly denominator: number;
  /** Sign of t on this segment in the expansion's own local variable. */
  readonly sign: 1 | -1;
}

const PARAMETER_LIMIT = 5000;

function parameterModels<T>(n: Numbers<T>, m: ModelArithmetic<T>): Map<string, Model<T>> {
  return new Map([...n.parameters].map(([name, value]) => [name, m.constant(value)] as const));
}

/** The model of a tree without logarithms of s. */
export function modelOf<T>(e: Expression, n: Numbers<T>, m: ModelArithmetic<T>, variable: string, leaf: Model<T>, vanishes?: (e: Expression) => boolean, check?: () => void): Model<T> | null {
  const value = logModelOf(e, n, m, variable, leaf, vanishes, check);
  return value !== null && value.length === 1 ? (value[0] ?? null) : null;
}

export function logModelOf<T>(e: Expression, n: Numbers<T>, m: ModelArithmetic<T>, variable: string, leaf: Model<T>, vanishes?: (e: Expression) => boolean, check?: () => void): LogModel<T> | null {
  const environment = new Map([...parameterModels(n, m), [variable, leaf] as const]);
  if (environment.size > PARAMETER_LIMIT) return null;
  const within = (tree: Expression, symbols: ReadonlyMap<string, Model<T>>, proof?: (e: Expression) => boolean): LogModel<T> | null =>
    logModelOfTree(tree, {
      m,
      trees: n.trees,
      real: n.r,
      describe,
      environment: symbols,
      vanishes: proof,
      check,
      call: (id, args, models, isConstant) => envelopeModel(id, args, models, n, m) ?? besselSeriesModel(id, args, models, n, m) ?? kelvinSeriesModel(id, args, models, n, m) ?? lambertBranchModel(id, models, n, m) ?? specialModel(id, args, models, n, m, isConstant, check),
      rewrite: (id, args, models) => rewriteCall(id, args, models, n, m),
      integral: (node, beside) => parameterIntegral(node, beside, n, m, (body, around) => within(body, around)),
      simplify: (part) => (n.r.isPositive(leaf.range) ? normalForm(part, variable, '>') : n.r.isNegative(leaf.range) ? normalForm(part, variable, '<') : part),
    });
  return within(e, environment, vanishes);
}

/** Nothing but powers of t and of its logarithm. */
export const isPowerSum = (expansion: Expansion): boolean =>
  expansion.remainder === null || (expansion.remainder.power !== null && rationalOf(expansion.remainder.power) !== null && expansion.prefactor === null && expansion.remainder.scale === null && expansion.terms.every((t) => t.scale === null));

/** The least q that makes every power of the expansion a whole multiple of 1/q; null where a power is not a rational number. */
export function denominatorOf(expansion: Expansion): number | null {
  let q = 1n;
  const powers = [...expansion.terms.map((t) => t.power), ...(expansion.remainder?.power ? [expansion.remainder.power] : [])];
  for (const power of powers) {
    const value = rationalOf(power);
    if (value === null) return null;
    q = (q * value.den) / Q.gcd(q, value.den);
  }
  return q > 60n ? null : Number(q);
}

/** The variable about the local end of a segment, with the whole segment as domain: s = 1 at the far end. */
export function localDomain<T>(segment: Segment, n: Numbers<T>, length: number, q: number): Omit<Local<T>, 'f'> | null {
  const { r } = n;
  const infinite = segment.local === 'upper' ? segment.upper === null || segment.expansion.point === 'inf' : segment.lower === null || segment.expansion.point === '-inf';
  const m = modelArithmetic(r, n.unitRight, length, true, r);
  const sideSign = segment.local === 'lower' ? 1 : -1;
  const zeros = Array.from({ length: q - 1 }, () => r.zero);
  if (infinite) {
    const far = segment.local === 'upper' ? segment.lower : segment.upper;
    const near = segment.local === 'upper' ? segment.upper : segment.lower;
    const start = far && n.value(far);
    if (start === null || r.containsZero(start)) return null;
    // x = start / s^q; the end nearer to infinity is s = (start/near)^(1/q).
    const leaf = m.polynomial([start], -q);
    const scale = r.divide(r.one, start);
    if (scale === null) return null;
    const nearValue = near === null ? null : n.value(near);
    const ratio = nearValue === null ? r.zero : r.divide(start, nearValue);
    const from = ratio === null ? null : q === 1 ? ratio : r.root(r.maximum(ratio, r.zero), q);
    return from === null ? null : { m, leaf, from, to: r.one, scale: r.absolute(scale), denominator: q, sign: r.isPositive(scale) ? 1 : -1 };
  }
  const centreTree = segment.local === 'lower' ? segment.lower : segment.upper;
  const farTree = segment.local === 'lower' ? segment.upper : segment.lower;
  if (centreTree === null || farTree === null) return null;
  const [centre, far] = [n.value(centreTree), n.value(farTree)];
  if (centre === null || far === null) return null;
  const scale = r.absolute(r.subtract(far, centre));
  const leaf = m.polynomial([centre, ...zeros, sideSign > 0 ? scale : r.negate(scale)]);
  const sign = segment.expansion.side === 'left' ? (sideSign > 0 ? -1 : 1) : sideSign;
  return { m, leaf, from: r.zero, to: r.one, scale, denominator: q, sign };
}

/** Proof that a tree tends to zero: its normal form in 1/x is zero at zero. */
function vanishesAtInfinity(e: Expression, variable: string, sign: 1 | -1): boolean {
  const inner = normalForm(substitute(e, variable, build.quotient(build.number(1), build.symbol(variable))), variable, sign > 0 ? '>' : '<');
  return isExactlyZero(substitute(inner, variable, build.number(0)), []);
}

/** f about the local end of a segment, on its local domain. */
export function localModel<T>(segment: Segment, n: Numbers<T>, variable: string, length: number, q: number, check: () => void): Local<T> | null {
  const domain = localDomain(segment, n, length, q);
  if (domain === null) return null;
  const infinite = domain.leaf.valuation < 0;
  const place = infinite ? null : segment.local === 'lower' ? segment.lower : segment.upper;
  const vanishes = place ? (e: Expression): boolean => isExactlyZero(substitute(e, variable, place), []) : infinite ? (e: Expression): boolean => vanishesAtInfinity(e, variable, domain.sign) : undefined;
  const f = logModelOf(segment.expansion.function, n, domain.m, variable, domain.leaf, vanishes, check);
  return f && { ...domain, f };
}

/**
 * The model of f - sum where the local end is the point of expansion: the terms of the sum are coefficients of f, so what is left is the rest of them.
 * Below the remainder's power the coefficients are dropped (after a check that they agree); at that power, where logarithms may stand on both sides, they are subtracted.
 */
export function remainderAtPoint<T>(local: Local<T>, expansion: Expansion, n: Numbers<T>): LogModel<T> | null {
  const { m, f } = local;
  const { r } = n;
  if (expansion.remainder === null) return [m.constant(r.zero)];
  const order = expansion.remainder.power === null ? null : rationalOf(expansion.remainder.power);
  if (order === null || !isPowerSum(expansion)) return null;
  const first = ceilingOf(Q.multiply(order, { num: BigInt(local.denominator), den: 1n }));
  const expected = expectedCoefficients(local, expansion, n);
  if (expected === null) return null;
  const components = Math.max(f.length, ...[...expected.values()].map((list) => list.length));
  const rest: Model<T>[] = [];
  for (let j = 0; j < components; j += 1) {
    const component = f[j] ?? m.constant(r.zero);
    const nothing = component.coefficients.length === 0 && r.isZero(component.tail);
    const end = nothing ? Infinity : r.isZero(component.tail) ? Infinity : component.valuation + component.coefficients.length;
    if (end < first) return null;
    for (let k = Math.min(component.valuation, ...expected.keys()); k < first; k += 1) {
      const have = component.coefficients[k - component.valuation] ?? r.zero;
      const want = expected.get(k)?.[j] ?? r.zero;
      if (!r.containsZero(r.subtract(have, want))) throw new Declined('undecided', 'The expansion and the coefficients of the function disagree, so no bound was derived; please report this expression.');
    }
    const valuation = nothing ? first : Math.max(first, component.valuation);
    const kept = component.coefficients.slice(Math.max(0, first - component.valuation));
    const atFirst = expected.get(first)?.[j];
    if (atFirst !== undefined && valuation === first) {
      if (kept.length === 0 && !nothing) return null;
      const left = r.subtract(kept[0] ?? r.zero, atFirst);
      // Above the remainder's power of the logarithm the terms are the coefficients too.
      kept[0] = j > expansion.remainder.log && r.containsZero(left) ? r.zero : left;
    } else if (atFirst !== undefined) kept.unshift(r.negate(atFirst), ...Array.from({ length: valuation - first - 1 }, () => r.zero));
    const from = atFirst !== undefined ? first : valuation;
    const polynomial = m.polynomial(kept, from);
    rest.push(r.isZero(component.tail) ? polynomial : withTail(m, kept, component.tail, from));
  }
  while (rest.length > 1) {
    const last = rest[rest.length - 1];
    if (last === undefined || last.coefficients.length > 0 || !r.isZero(last.tail)) break;
    rest.pop();
  }
  return rest;
}

/** Coefficients of s^k (log s)^j in the sum: index k, then j. t^p L^l with t = h s^q and L = log|t| (or log|x| at infinity) = a + b log s. */
function expectedCoefficients<T>(local: Local<T>, expansion: Expansion, n: Numbers<T>): Map<number, T[]> | null {
  const { scale, denominator, sign } = local;
  const { r } = n;
  const atInfinity = expansion.point === 'inf' || expansion.point === '-inf';
  const expected = new Map<number, T[]>();
  const logScale = expansion.terms.some((t) => t.log !== 0) ? r.log(scale) : r.zero;
  if (logScale === null) return null;
  const a = atInfinity ? r.negate(logScale) : logScale;
  const b = r.fromInteger(atInfinity ? -denominator : denominator);
  for (const term of expansion.terms) {
    const power = rationalOf(term.power);
    if (power === null || (sign < 0 && power.den !== 1n)) return null;
    const index = Number(Q.multiply(power, { num: BigInt(denominator), den: 1n }).num);
    const value = n.value(term.coefficient);
    const size = r.powerRational(scale, power);
    if (value === null || size === null || term.log < 0) return null;
    const whole = r.multiply(sign < 0 && power.num % 2n !== 0n ? r.negate(value) : value, size);
    const list = expected.get(index) ?? [];
    let binomial = 1;
    for (let j = 0; j <= term.log; j += 1) {
      const factors = [r.powerInteger(a, term.log - j), r.powerInteger(b, j)];
      const [x, y] = factors;
      if (!x || !y) return null;
      list[j] = r.add(list[j] ?? r.zero, r.multiply(r.multiply(whole, r.fromInteger(binomial)), r.multiply(x, y)));
      binomial = (binomial * (term.log - j)) / (j + 1);
    }
    for (let j = 0; j < list.length; j += 1) list[j] ??= r.zero;
    expected.set(index, list);
  }
  return expected;
}

function withTail<T>(m: ModelArithmetic<T>, kept: readonly T[], tail: T, from: number): Model<T> {
  return { valuation: from, coefficients: kept, tail, range: rangeWithTail(m, kept, tail, kept.length) };
}

function rangeWithTail<T>(m: ModelArithmetic<T>, c: readonly T[], tail: T, steps: number): T {
  let value = tail;
  for (let k = steps - 1; k >= 0; k -= 1) value = m.a.add(c[k] ?? m.a.zero, m.a.multiply(m.domain, value));
  return value;
}

const ceilingOf = (q: Rational): number => -Number(Q.floor(Q.negate(q)));

/** f - sum about the middle of [x0, x1], s in [-1, 1]. */
export function middleModel<T>(expansion: Expansion, sum: Expression, x0: T, x1: T, n: Numbers<T>, variable: string, length: number, check: () => void): { readonly f: Model<T>; readonly remainder: Model<T>; readonly m: ModelArithmetic<T> } | null {
  const { r } = n;
  const m = modelArithmetic(r, n.unitBoth, length, false, r);
  const whole = r.union(x0, x1);
  const centre = r.midpoint(whole);
  const half = r.upperEnd(r.absolute(r.subtract(whole, centre)));
  const leaf = m.withRange(m.polynomial([centre, half]), whole);
  const f = modelOf(expansion.function, n, m, variable, leaf, undefined, check);
  if (f === null) return null;
  const s = modelOf(sum, n, m, variable, leaf, undefined, check);
  if (s === null) return null;
  const remainder = m.regular(m.subtract(f, s));
  const regularF = m.regular(f);
  return remainder === null || regularF === null ? null : { f: regularF, remainder, m };
}

export const sumOf = (expansion: Expansion): Expression => (expansion.terms.length === 0 ? build.number(0) : partialSum(expansion));
