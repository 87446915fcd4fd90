/** Enclosures of trees: containment of values at points in enclosures over ranges, for balls, double intervals and rectangles; refusals. */
import { expect, test } from 'vitest';
import { build, type Expression } from '../../src/expression/index.ts';
import { enclose, encloseInterval, encloseReal, encloseRectangle, interval, real } from '../../src/rigorous/index.ts';
import { generator } from './random.ts';

const random = generator(99);
const x = build.symbol('x');
const { call, number, power, product, quotient, sum, squareRoot, constant, negation } = build;
const unary = ['exp', 'sin', 'cos', 'tanh', 'atan', 'asinh', 'sqrt', 'log', 'cosh', 'expm1', 'abs'];

function tree(depth: number): Expression {
  if (depth === 0) return random() < 0.6 ? x : number(Math.ceil(random() * 5));
  const kind = random();
  if (kind < 0.4) return call(unary[Math.floor(random() * unary.length)] ?? 'exp', tree(depth - 1));
  if (kind < 0.6) return sum(tree(depth - 1), negation(tree(depth - 1)));
  if (kind < 0.8) return product(tree(depth - 1), tree(depth - 1));
  if (kind < 0.9) return quotient(tree(depth - 1), sum(number(1), power(tree(depth - 1), 2)));
  return power(sum(number(2), call('sin', tree(depth - 1))), tree(0));
}

test('the enclosure over a range contains the value at every point of it, in every arithmetic', () => {
  let compared = 0;
  for (let i = 0; i < 400; i += 1) {
    const f = tree(4);
    const low = random() * 2 - 0.5;
    const high = low + random() ** 3;
    const point = low + random() * (high - low);
    const exact = encloseReal(f, new Map([['x', real.fromDouble(point)]]), 200);
    if (exact === null) continue;
    const box = encloseInterval(f, new Map([['x', { lo: low, hi: high }]]));
    const ball = encloseReal(f, new Map([['x', real.union(real.fromDouble(low), real.fromDouble(high))]]), 100);
    const flat = { re: real.fromDouble(point), im: real.ZERO };
    const complexValue = enclose(f, new Map([['x', flat]]), 100);
    const rectangle = encloseRectangle(f, new Map([['x', { re: { lo: low, hi: high }, im: { lo: -0.01, hi: 0.01 } }]]));
    if (box) expect(real.compare(real.fromDouble(box.lo), exact) !== 1 && real.compare(real.fromDouble(box.hi), exact) !== -1).toBe(true);
    if (ball) expect(real.overlaps(ball, exact)).toBe(true);
    if (complexValue) expect(real.overlaps(complexValue.re, exact)).toBe(true);
    if (rectangle) expect(real.compare(real.fromDouble(rectangle.re.lo), exact) !== 1 && real.compare(real.fromDouble(rectangle.re.hi), exact) !== -1).toBe(true);
    compared += box && ball ? 1 : 0;
  }
  expect(compared).toBeGreaterThan(150);
});

test('what is not defined on the whole set is refused', () => {
  const zeroToOne = new Map([['x', interval.fromEnds(0, 1)]]);
  expect(encloseInterval(quotient(number(1), x), zeroToOne)).toBeNull();
  expect(encloseInterval(call('log', x), zeroToOne)).toBeNull();
  expect(encloseInterval(squareRoot(sum(x, number(-2))), zeroToOne)).toBeNull();
  expect(encloseInterval(call('nowhereDescribed', x), zeroToOne)).toBeNull();
  expect(encloseInterval(build.symbol('y'), zeroToOne)).toBeNull();
  expect(encloseReal(constant('i'), new Map(), 60)).toBeNull();
});

test('odd roots are real, x^(1/3) is principal', () => {
  const minusEight = new Map([['x', { re: real.fromInteger(-8), im: real.ZERO }]]);
  const rootValue = enclose(build.root(3, x), minusEight, 80);
  expect(rootValue && real.contains(rootValue.re, { num: -2n, den: 1n })).toBe(true);
  const principal = enclose(power(x, { num: 1n, den: 3n }), minusEight, 80);
  expect(principal && real.contains(principal.re, { num: 1n, den: 1n }) && real.isPositive(principal.im)).toBe(true);
});
