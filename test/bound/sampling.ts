/**
 * Random bounds, each judged by 50 samples of |f - sum|: points of the interval, its ends, and a search around the largest. Functions of one real variable that MPFR has are taken from it
 * with 256 bits (gmp-wasm, development only), where the whole function is one call; all others from 256-bit balls, which test/rigorous and test/functions judge by MPFR.
 */
import { build, dependsOn, type Expression, mapChildren, Q, type Rational, structureKey } from '../../src/expression/index.ts';
import { boundRemainder, type Measure } from '../../src/bound/index.ts';
import { expand, type Expansion, partialSum } from '../../src/expand/index.ts';
import { describe } from '../../src/functions/index.ts';
import { budget } from '../../src/outcome.ts';
import { type Ball, encloseReal, real } from '../../src/rigorous/index.ts';
import type { UnaryName } from '../rigorous/mpfr.ts';
import { type Family, rareFamilies } from './families.ts';

const { call, number, power, product, quotient, sum } = build;
export const x = build.symbol('x');
const BITS = 256;

export interface Trial {
  readonly text: string;
  readonly outcome: 'held' | 'violated' | 'declined' | 'unbounded' | 'not expanded';
  /** Bound over the largest sample; lower bound over the largest sample. */
  readonly ratio: number;
  readonly lowerRatio: number;
  readonly milliseconds: number;
  readonly reason?: string;
}

export const inner = ['exp', 'sin', 'cos', 'tan', 'sinh', 'cosh', 'tanh', 'atan', 'asinh', 'asin', 'expm1', 'log1p', 'erf'];

function randomTree(random: () => number, depth: number): Expression {
  if (depth === 0) return random() < 0.8 ? x : number(Math.ceil(random() * 3));
  const kind = random();
  if (kind < 0.5) return call(inner[Math.floor(random() * inner.length)] ?? 'exp', randomTree(random, depth - 1));
  if (kind < 0.62) return sum(randomTree(random, depth - 1), randomTree(random, depth - 1));
  if (kind < 0.74) return product(randomTree(random, depth - 1), randomTree(random, depth - 1));
  if (kind < 0.82) return quotient(randomTree(random, depth - 1), sum(number(1), power(randomTree(random, depth - 1), 2)));
  if (kind < 0.88) return quotient(call('sin', randomTree(random, depth - 1)), x);
  if (kind < 0.94) return power(sum(number(2), call('sin', randomTree(random, depth - 1))), number({ num: BigInt(Math.ceil(random() * 5)) * (random() < 0.5 ? -1n : 1n), den: BigInt(Math.ceil(random() * 3)) }));
  if (kind < 0.97) return call('log', sum(number(1), power(randomTree(random, depth - 1), 2)));
  return product(x, call('log', x));
}

const pick = <T>(random: () => number, list: readonly T[], otherwise: T): T => list[Math.floor(random() * list.length)] ?? otherwise;
const one = (id: string, ...before: readonly Expression[]): (() => Expression) => () => call(id, ...before, x);
const ordered = (id: string, orders: readonly Rational[]): ((random: () => number) => Expression) => (random) => call(id, number(pick(random, orders, Q.ZERO)), x);
const orders = [Q.ZERO, Q.ONE, Q.rational(2), Q.HALF, Q.rational(1, 3)];
const wide = { low: -3, high: 3 };
const right = { low: 0, high: 4 };
const unit = { low: -0.9, high: 0.9 };
/** Functions of the registry in shapes that are real near the point named. */
export const families: readonly Family[] = [
  ...rareFamilies,
  ...['erf', 'erfc', 'erfi', 'dawson', 'fresnelS', 'fresnelC', 'sinIntegral', 'sinhIntegral', 'cin', 'ein', 'normalCdf', 'softplus', 'logistic', 'gudermannian', 'langevin', 'sinc', 'expm1', 'exp2', 'cosm1', 'sinpi', 'haversin'].map((id): Family => ({ make: one(id), points: [0, 0, 1, -0.5], ...wide })),
  ...['tan', 'sec', 'tanh', 'sech', 'asinh', 'atan', 'cbrt'].map((id): Family => ({ make: one(id), points: [0, 1], low: -1.2, high: 1.2 })),
  ...['asin', 'acos', 'atanh', 'ellipticK', 'ellipticE', 'log1p'].map((id): Family => ({ make: one(id), points: [0, 0.5], ...unit })),
  ...['cot', 'csc', 'coth', 'csch', 'gamma', 'digamma', 'cosIntegral', 'expIntegralEi', 'coshIntegral', 'log', 'sqrt'].map((id): Family => ({ make: one(id), points: [0, 1, 2], low: 0, high: 2.5 })),
  ...['logGamma', 'harmonic', 'factorial'].map((id): Family => ({ make: () => call(id, sum(x, number(1))), points: [0, 1], low: -0.5, high: 3 })),
  ...['logGamma', 'digamma', 'harmonic', 'erfc', 'cosIntegral', 'sinIntegral', 'fresnelS', 'airyAi', 'expIntegralEi', 'atan', 'tanh'].map((id): Family => ({ make: one(id), points: ['inf'], low: 2, high: 30 })),
  ...['besselJ', 'besselY', 'besselK', 'besselI'].map((id): Family => ({ make: ordered(id, orders), points: ['inf'], low: 3, high: 30 })),
  { make: (random) => call('expIntegralE', number(Math.ceil(random() * 3)), x), points: ['inf'], low: 3, high: 30 },
  { make: (random) => call('polygamma', number(Math.ceil(random() * 3)), x), points: ['inf', 1], low: 1, high: 30 },
  ...['besselJ', 'besselI', 'struveH', 'sphericalJ'].map((id): Family => ({ make: ordered(id, orders), points: [0, 1, 2], ...right })),
  ...['besselY', 'besselK'].map((id): Family => ({ make: ordered(id, orders), points: [0, 1], low: 0, high: 2 })),
  ...['airyAi', 'airyBi', 'airyAiPrime', 'airyBiPrime'].map((id): Family => ({ make: one(id), points: [0, 1, -1], low: -2, high: 2 })),
  ...['kelvinBer', 'kelvinBei'].map((id): Family => ({ make: one(id), points: [0], low: 0, high: 2 })),
  { make: (random) => call('polylog', number(Math.ceil(random() * 3) + 1), x), points: [0], ...unit },
  { make: one('zeta'), points: [2, 3], low: 1.5, high: 5 },
  { make: one('lambertW', number(0)), points: [0, 1], low: -0.3, high: 3 },
  { make: (random) => call('hypergeometric', number(2), number(1), number(pick(random, orders.slice(3), Q.HALF)), number(pick(random, orders.slice(1), Q.ONE)), number({ num: 4n, den: 3n }), x), points: [0], low: -0.8, high: 0.8 },
  { make: (random) => call('hypergeometric', number(1), number(1), number(pick(random, orders.slice(1), Q.ONE)), number({ num: 3n, den: 2n }), x), points: [0, 1], low: -2, high: 2 },
  // Puiseux and logarithmic expansions.
  { make: (random) => call(pick(random, ['sin', 'exp', 'cos', 'erf', 'log1p'], 'sin'), build.squareRoot(x)), points: [0], ...right },
  { make: (random) => product(power(x, { num: BigInt(Math.ceil(random() * 4)), den: 3n }), call(pick(random, ['cos', 'exp', 'atan'], 'cos'), x)), points: [0], ...right },
  { make: (random) => sum(product(power(x, Math.ceil(random() * 2)), call('log', x)), call(pick(random, ['exp', 'sin', 'cosh'], 'exp'), x)), points: [0], ...right },
  { make: () => power(x, x), points: [0], low: 0, high: 1 },
  { make: (random) => call('log', sum(x, power(x, Math.ceil(random() * 2) + 1))), points: [0], low: 0, high: 0.8 },
  { make: () => call('acos', build.difference(number(1), x)), points: [0], low: 0, high: 1 },
];

/** A function of the registry by itself. */
function registrySetting(random: () => number): Setting {
  const family = pick(random, families, families[0] ?? { make: () => x, points: [0], ...wide });
  const f = family.make(random);
  const p = pick(random, family.points, 0);
  const terms = Math.ceil(random() * 8);
  const measure: Measure = random() < 0.25 ? 'relative' : 'absolute';
  if (p === 'inf') {
    const start = dyadic(family.low + random() * 10);
    return { f, point: 'inf', terms, lower: start, upper: random() < 0.6 ? 'inf' : Q.add(start, dyadic(1 + random() * 20)), measure };
  }
  const lower = dyadic(Math.max(family.low, p - random() * 1.2));
  const upper = dyadic(Math.min(family.high, p + random() * 1.2));
  return { f, point: number(Q.fromDouble(p)), terms, lower, upper: Q.compare(lower, upper) < 0 ? upper : Q.add(lower, Q.rational(1, 4)), measure };
}

const dyadic = (value: number): Rational => Q.fromDouble(Math.round(value * 64) / 64);

export interface Setting {
  readonly f: Expression;
  readonly point: Expression | 'inf';
  readonly terms: number;
  readonly lower: Rational;
  readonly upper: Rational | 'inf';
  readonly measure: Measure;
}

export function randomSetting(random: () => number): Setting {
  if (random() < 0.5) return registrySetting(random);
  const f = randomTree(random, random() < 0.5 ? 2 : 3);
  const terms = Math.ceil(random() * 10);
  const measure: Measure = random() < 0.25 ? 'relative' : 'absolute';
  if (random() < 0.1) {
    const start = dyadic(2 + random() * 10);
    return { f, point: 'inf', terms, lower: start, upper: random() < 0.5 ? 'inf' : Q.add(start, dyadic(1 + random() * 20)), measure };
  }
  const p = random() < 0.6 ? 0 : Math.round((random() * 4 - 1) * 8) / 8;
  const left = random() < 0.4 ? 0 : random() * 1.2;
  const right = random() < 0.1 ? 0 : random() * 1.2;
  const lower = dyadic(p - left);
  const upper = dyadic(p + right);
  return { f, point: number(Q.fromDouble(p)), terms, lower, upper: Q.compare(lower, upper) < 0 ? upper : Q.add(lower, Q.rational(1, 2)), measure };
}

/** A tree whose parts without x are named, with their enclosures: they are the same at every sample. */
interface Prepared {
  readonly tree: Expression;
  readonly constants: ReadonlyMap<string, Ball>;
}
function prepared(tree: Expression): Prepared {
  const constants = new Map<string, Ball>();
  const named = (e: Expression): Expression => {
    if (dependsOn(e, 'x')) return e.kind === 'symbol' ? e : mapChildren(e, named);
    if (e.kind === 'number') return e;
    const value = encloseReal(e, new Map(), BITS + 64, describe);
    if (value === null) return e;
    const name = `constant${constants.size}`;
    constants.set(name, value);
    return build.symbol(name);
  };
  return { tree: named(tree), constants };
}
const sums = new WeakMap<Expansion, Prepared>();
function preparedSum(side: Expansion): Prepared {
  const known = sums.get(side) ?? prepared(partialSum(side));
  sums.set(side, known);
  return known;
}

function remainderAt(expansion: Expansion, at: Rational, measure: Measure, mpfr: ((name: UnaryName, at: Ball) => Ball | null) | null): Ball | null {
  const point = expansion.point;
  const onLeft = point !== 'inf' && point !== '-inf' && point.kind === 'number' && Q.compare(at, point.value) < 0;
  const side = onLeft && expansion.left ? expansion.left : expansion;
  const environment = new Map([['x', real.fromRational(at, BITS + 64)]]);
  const own = preparedSum(side);
  const name = mpfrName(side.function);
  // Only arguments that MPFR can be given exactly.
  const exact = at.den > 0n && (at.den & (at.den - 1n)) === 0n;
  const [f, s] = [name && mpfr && exact ? mpfr(name, real.fromRational(at, 4096)) : encloseReal(side.function, environment, BITS, describe), encloseReal(own.tree, new Map([...environment, ...own.constants]), BITS, describe)];
  if (f === null || s === null) return null;
  const difference = real.subtract(f, s, BITS);
  return measure === 'absolute' ? real.absolute(difference) : real.divide(real.absolute(difference), real.absolute(f), BITS);
}

/** Names of MPFR for calls of the tree. */
const MPFR_NAMES: Readonly<Record<string, UnaryName>> = {
  exp: 'exp', log: 'ln', sin: 'sin', cos: 'cos', tan: 'tan', sinh: 'sinh', cosh: 'cosh', tanh: 'tanh', asin: 'asin', acos: 'acos', atan: 'atan', asinh: 'asinh', acosh: 'acosh', atanh: 'atanh',
  gamma: 'gamma', logGamma: 'lngamma', digamma: 'digamma', erf: 'erf', erfc: 'erfc', expIntegralEi: 'eint', zeta: 'zeta', airyAi: 'ai',
};
function mpfrName(f: Expression): UnaryName | null {
  if (f.kind !== 'call') return null;
  const [first, second] = f.args;
  if (f.args.length === 1 && first?.kind === 'symbol') return MPFR_NAMES[f.function] ?? null;
  if (second?.kind !== 'symbol' || first?.kind !== 'number' || first.value.den !== 1n || first.value.num < 0n || first.value.num > 1n) return null;
  if (f.function === 'besselJ') return first.value.num === 0n ? 'j0' : 'j1';
  return f.function === 'besselY' ? (first.value.num === 0n ? 'y0' : 'y1') : null;
}

export function judge(setting: Setting, random: () => number, milliseconds = 4000, mpfr: ((name: UnaryName, at: Ball) => Ball | null) | null = null): Trial {
  const { f, point, terms, lower, upper, measure } = setting;
  const text = `${structureKey(f)} at ${point === 'inf' ? point : structureKey(point)}, ${terms} terms, [${Q.toText(lower)}, ${upper === 'inf' ? 'inf' : Q.toText(upper)}] ${measure}`;
  const blank = { text, ratio: NaN, lowerRatio: NaN, milliseconds: NaN };
  const expanded = expand({ function: f, variable: x, point, side: 'both', terms, assumptions: [] }, budget(milliseconds));
  if (!expanded.ok) return { ...blank, outcome: 'not expanded', reason: expanded.error.message };
  const expansion = expanded.value;
  const start = performance.now();
  const bound = boundRemainder({ expansion, interval: { lower: number(lower), upper: upper === 'inf' ? build.constant('infinity') : number(upper) }, measure, assumptions: [], budget: budget(milliseconds) });
  const elapsed = performance.now() - start;
  if (!bound.ok) return { ...blank, outcome: 'declined', reason: `${bound.error.code}: ${bound.error.message}`, milliseconds: elapsed };
  const { upperRational, lowerRational } = bound.value;
  if (upperRational === null || lowerRational === null) return { ...blank, outcome: 'unbounded', milliseconds: elapsed };
  const stop = upper === 'inf' ? Q.multiply(lower, Q.rational(1000)) : upper;
  const width = Q.subtract(stop, lower);
  const values: { readonly s: number; readonly value: Ball }[] = [];
  const sample = (s: number): void => {
    const at = Q.add(lower, Q.multiply(width, Q.fromDouble(s)));
    const value = remainderAt(expansion, at, measure, mpfr);
    if (value !== null) values.push({ s, value });
  };
  sample(0);
  sample(1);
  for (let k = 0; k < 28; k += 1) sample(k % 2 === 0 ? random() : (k + random()) / 28.5);
  const largest = (): { readonly s: number; readonly value: Ball } | undefined => values.reduce<{ readonly s: number; readonly value: Ball } | undefined>((a, b) => (a && real.compare(a.value, b.value) !== -1 ? a : b), undefined);
  let step = 0.03;
  for (let k = 0; k < 10; k += 1) {
    const best = largest();
    if (!best) break;
    for (const side of [-1, 1]) {
      const s = best.s + side * step;
      if (s >= 0 && s <= 1) sample(s);
    }
    step /= 2.5;
  }
  const top = largest();
  if (!top) return { ...blank, outcome: 'held', milliseconds: elapsed };
  const upperBall = real.fromRational(upperRational, BITS);
  // Violated only where the whole enclosure of the sample lies above the bound; the lower bound is a bound of the supremum, which samples can only miss.
  const violated = values.some(({ value }) => real.compare(value, upperBall) === 1);
  const ratio = real.divide(upperBall, top.value, 64);
  const lowerRatio = real.divide(real.fromRational(lowerRational, BITS), top.value, 64);
  return { text, outcome: violated ? 'violated' : 'held', ratio: ratio === null ? NaN : real.toDouble(ratio), lowerRatio: lowerRatio === null ? NaN : real.toDouble(lowerRatio), milliseconds: elapsed };
}
