/** Complex balls: inverse identities, principal ranges (DLMF 4.2.2, 4.23(ii), 4.37(ii)), cuts, and containment of points in wide rectangles. */
import { describe, expect, test } from 'vitest';
import { type Ball, complex, type ComplexBall, real } from '../../src/rigorous/index.ts';
import { dyadic, generator, inside } from './random.ts';

const random = generator(77);
const point = (low = -8, high = 4): ComplexBall => ({ re: dyadic(random, low, high), im: dyadic(random, low, high) });
const rectangle = (): ComplexBall => {
  const z = point(-3, 2);
  return { re: real.withRadius(z.re, dyadic(random, -30, -1)), im: real.withRadius(z.im, dyadic(random, -30, -1)) };
};
const pick = (z: ComplexBall): ComplexBall => ({ re: inside(random, z.re), im: inside(random, z.im) });
const names = ['exp', 'expm1', 'log', 'log1p', 'sqrt', 'sin', 'cos', 'tan', 'sinh', 'cosh', 'tanh', 'asin', 'acos', 'atan', 'asinh', 'acosh', 'atanh'] as const;

const inverses = [
  ['log', 'exp'], ['asin', 'sin'], ['acos', 'cos'], ['atan', 'tan'], ['asinh', 'sinh'], ['acosh', 'cosh'], ['atanh', 'tanh'], ['log1p', 'expm1'],
] as const;
describe.each(inverses)('%s', (inverse, f) => {
  test(`${f}(${inverse}(z)) is z`, () => {
    for (let i = 0; i < 100; i += 1) {
      const z = point(-20, 6);
      const w = complex[inverse](z, 200);
      expect(w).not.toBeNull();
      const back = w && complex[f](w, 200);
      expect(back && complex.overlaps(back, z)).toBe(true);
      if (back) expect(real.relativeAccuracy(back.re)).toBeGreaterThan(60);
    }
  });
});

test('principal ranges', () => {
  const halfPi = real.scaleByPowerOfTwo(real.pi(100), -1);
  const within = (x: Ball, low: Ball, high: Ball): boolean => real.compare(x, low) !== -1 && real.compare(x, high) !== 1;
  for (let i = 0; i < 100; i += 1) {
    const z = point();
    for (const name of ['asin', 'atan'] as const) {
      const w = complex[name](z, 100);
      expect(w && within(w.re, real.negate(halfPi), halfPi)).toBe(true);
    }
    const c = complex.acos(z, 100);
    expect(c && within(c.re, real.ZERO, real.pi(100))).toBe(true);
    const h = complex.acosh(z, 100);
    expect(h && !real.isNegative(h.re)).toBe(true);
    const s = complex.sqrt(z, 100);
    expect(s && !real.isNegative(s.re)).toBe(true);
  }
});

test.each(names)('%s: values at points of a rectangle lie in the enclosure of the rectangle', (name) => {
  for (let i = 0; i < 150; i += 1) {
    const z = rectangle();
    const whole = complex[name](z, 80);
    if (whole === null) continue;
    for (let k = 0; k < 5; k += 1) {
      const value = complex[name](pick(z), 120);
      expect(value).not.toBeNull();
      if (value) expect(complex.overlaps(whole, value)).toBe(true);
    }
  }
});

test('a rectangle across a cut contains both sides, and is refused where analyticity is asked for', () => {
  const small: Ball = { mid: 0n, rad: 1n, exp: -20 };
  const across = (re: number): ComplexBall => ({ re: real.fromDouble(re), im: small });
  const cases: readonly (readonly [(typeof names)[number], number])[] = [
    ['log', -2], ['sqrt', -2], ['log1p', -3], ['asin', 2], ['asin', -2], ['acos', 2], ['atanh', 3], ['atanh', -3], ['acosh', -2],
  ];
  for (const [name, re] of cases) {
    expect(complex[name](across(re), 80, true)).toBeNull();
    const both = complex[name](across(re), 80);
    if (both === null) throw new Error(`${name}(${re})`);
    for (const side of [1, -1]) {
      const value = complex[name]({ re: real.fromDouble(re), im: { mid: BigInt(side), rad: 0n, exp: -30 } }, 80);
      expect(both && value && complex.overlaps(both, value)).toBe(true);
    }
  }
  expect(complex.log({ re: small, im: small }, 80)).toBeNull();
});

test('on the cut itself log and sqrt take the value from above (DLMF 4.2.7, 4.2.27)', () => {
  const minusOne = complex.fromInteger(-1);
  const value = complex.log(minusOne, 80);
  expect(value && real.overlaps(value.im, real.pi(80)) && real.isPositive(value.im)).toBe(true);
  const root = complex.sqrt(complex.fromInteger(-4), 80);
  expect(root && real.contains(root.im, { num: 2n, den: 1n })).toBe(true);
});
