/** Local models: the value of the function at points of the domain lies in polynomial + tail; removable singularities, poles and branch points included. */
import { describe, expect, test } from 'vitest';
import { build, type Expression, structureKey } from '../../src/expression/index.ts';
import { type Ball, ballArithmetic, encloseReal, type Interval, intervalArithmetic, intervalTrees, type Model, modelArithmetic, modelOfTree, real, realBallTrees } from '../../src/rigorous/index.ts';
import { generator } from './random.ts';

const random = generator(2024);
const x = build.symbol('x');
const { call, number, power, product, quotient, sum, negation, difference } = build;
const precision = 160;
const balls = ballArithmetic(precision);

function valueOf(model: Model<Ball>, s: Ball): Ball {
  let value = model.tail;
  for (let k = model.coefficients.length - 1; k >= 0; k -= 1) value = balls.add(model.coefficients[k] ?? balls.zero, balls.multiply(s, value));
  const scale = balls.powerInteger(s, model.valuation);
  if (scale === null) throw new Error('s is zero');
  return balls.multiply(value, scale);
}
const toBall = (i: Interval): Ball => real.union(real.fromDouble(i.lo), real.fromDouble(i.hi));
const lift = (m: Model<Interval>): Model<Ball> => ({ ...m, coefficients: m.coefficients.map(toBall), tail: toBall(m.tail), range: toBall(m.range) });

/** f at x = p + h s^q for s in [0, 1] (or [-1, 1]), modelled in both arithmetics and compared with direct values. */
function check(f: Expression, p: number, h: number, q: number, length: number, twoSided = false): { readonly relative: number } | null {
  const domain = twoSided ? { lo: -1, hi: 1 } : { lo: 0, hi: 1 };
  const m = modelArithmetic(intervalArithmetic, domain, length, !twoSided);
  const leaf = (value: number): Interval => ({ lo: value, hi: value });
  const coefficients = [leaf(p), ...Array.from({ length: q - 1 }, () => leaf(0)), leaf(h)];
  const rough = modelOfTree(f, { m, trees: intervalTrees, real: intervalArithmetic, environment: new Map([['x', m.polynomial(coefficients)]]) });
  const mb = modelArithmetic(balls, twoSided ? real.withRadius(real.ZERO, real.ONE) : { mid: 1n, rad: 1n, exp: -1 }, length, !twoSided);
  const fine = modelOfTree(f, { m: mb, trees: realBallTrees(precision), real: balls, environment: new Map([['x', mb.polynomial(coefficients.map(toBall))]]) });
  if (rough === null || fine === null) return null;
  for (let i = 0; i < 6; i += 1) {
    const s = real.fromDouble(i === 0 ? 1 : Math.max(2 ** -20, random()) * (twoSided && random() < 0.5 ? -1 : 1));
    const place = real.add(real.fromDouble(p), real.multiply(real.fromDouble(h), real.powerInteger(s, q, 400) ?? real.ONE, 400), 400);
    const exact = encloseReal(f, new Map([['x', place]]), 400);
    if (!exact) continue;
    const where = `${structureKey(f)} at x = ${p} + ${h} s^${q}, s = ${real.toDouble(s)}, ${length} coefficients`;
    if (!real.overlaps(valueOf(fine, s), exact)) throw new Error(`balls: ${where}`);
    if (!real.overlaps(valueOf(lift(rough), s), exact)) throw new Error(`intervals: ${where}`);
  }
  const size = (b: Ball): number => Math.abs(real.toDouble(real.absoluteUpper(b)));
  return { relative: size(fine.tail) / size(fine.range) };
}

const log1p = call('log', sum(number(1), x));
const named: readonly (readonly [string, Expression, number, number, number, number])[] = [
  ['sin x / x', quotient(call('sin', x), x), 0, 1, 1, 1e-9],
  ['(1 - cos x)/x^2', quotient(difference(number(1), call('cos', x)), power(x, 2)), 0, 0.5, 1, 1e-9],
  ['(e^x - 1 - x)/x^2', quotient(sum(call('exp', x), number(-1), negation(x)), power(x, 2)), 0, -0.5, 1, 1e-9],
  ['log(1+x)/x', quotient(log1p, x), 0, 0.25, 1, 1e-5],
  ['1/sin x - 1/x', difference(quotient(number(1), call('sin', x)), quotient(number(1), x)), 0, 0.5, 1, 1e-5],
  ['sqrt x', power(x, { num: 1n, den: 2n }), 0, 0.7, 2, 1e-300],
  ['acos(1 - x)', call('acos', difference(number(1), x)), 0, 0.5, 2, 1e-5],
  ['x^(1/3) exp(x)', product(build.root(3, x), call('exp', x)), 0, 0.5, 3, 1e-2],
  ['atan x', call('atan', x), 0, 0.5, 1, 1e-2],
  ['tanh(x)/sin(x)', quotient(call('tanh', x), call('sin', x)), 0, 0.5, 1, 1e-3],
];
test.each(named)('%s', (_, f, p, h, q, tail) => {
  const result = check(f, p, h, q, 18);
  expect(result).not.toBeNull();
  expect(result?.relative).toBeLessThan(tail);
});

const unary = ['exp', 'expm1', 'log', 'log1p', 'sqrt', 'sin', 'cos', 'tan', 'sinh', 'cosh', 'tanh', 'asin', 'acos', 'atan', 'asinh', 'acosh', 'atanh', 'abs'];
function tree(depth: number): Expression {
  if (depth === 0) return random() < 0.75 ? x : number(Math.ceil(random() * 3));
  const kind = random();
  if (kind < 0.45) return call(unary[Math.floor(random() * unary.length)] ?? 'exp', tree(depth - 1));
  if (kind < 0.6) return sum(tree(depth - 1), negation(tree(depth - 1)));
  if (kind < 0.75) return product(tree(depth - 1), tree(depth - 1));
  if (kind < 0.9) return quotient(tree(depth - 1), tree(depth - 1));
  return power(tree(depth - 1), number({ num: BigInt(Math.ceil(random() * 5)), den: BigInt(Math.ceil(random() * 3)) }));
}
describe('random trees', () => {
  test('values lie in the model, about regular and singular points', () => {
    let compared = 0;
    for (let i = 0; i < 1500; i += 1) {
      const p = random() < 0.5 ? 0 : Math.round(random() * 8) / 8;
      const result = check(tree(3), p, (random() < 0.3 ? -1 : 1) * 2 ** -Math.ceil(random() * 5), random() < 0.7 ? 1 : 2, 4 + Math.floor(random() * 12), random() < 0.3);
      compared += result ? 1 : 0;
    }
    expect(compared).toBeGreaterThan(500);
  });
});
