/** Random bounds, each judged by 50 samples of |f - sum| in 256-bit balls: points of the interval, its ends, and a search around the largest. */
import { build, type Expression, Q, type Rational, structureKey } from '../../src/expression/index.ts';
import { boundRemainder, type Measure } from '../../src/bound/index.ts';
import { expand, type Expansion, partialSum } from '../../src/expand/index.ts';
import { describe } from '../../src/functions/index.ts';
import { budget } from '../../src/outcome.ts';
import { type Ball, encloseReal, real } from '../../src/rigorous/index.ts';

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

const inner = ['exp', 'sin', 'cos', 'tan', 'sinh', 'cosh', 'tanh', 'atan', 'asinh', 'asin', 'expm1', 'log1p', 'erf'];

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

function remainderAt(expansion: Expansion, at: Rational, measure: Measure): Ball | null {
  const point = expansion.point;
  const onLeft = point !== 'inf' && point !== '-inf' && point.kind === 'number' && Q.compare(at, point.value) < 0;
  const side = onLeft && expansion.left ? expansion.left : expansion;
  const environment = new Map([['x', real.fromRational(at, BITS + 64)]]);
  const [f, s] = [encloseReal(side.function, environment, BITS, describe), encloseReal(partialSum(side), environment, BITS, describe)];
  if (f === null || s === null) return null;
  const difference = real.subtract(f, s, BITS);
  return measure === 'absolute' ? real.absolute(difference) : real.divide(real.absolute(difference), real.absolute(f), BITS);
}

export function judge(setting: Setting, random: () => number, milliseconds = 4000): Trial {
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
    const value = remainderAt(expansion, at, measure);
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
