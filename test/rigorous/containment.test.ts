/** Enclosures of real balls against MPFR: random points, small and large, near extremes, poles and ends of the domain; narrow and wide balls. */
import { describe, expect, test } from 'vitest';
import { type Ball, real } from '../../src/rigorous/index.ts';
import { judge, type UnaryName } from './mpfr.ts';
import { dyadic, generator, inside } from './random.ts';

const oracle = await judge(420);

interface Case {
  readonly name: UnaryName;
  readonly f: (x: Ball, precision: number) => Ball | null;
  /** Magnitudes 2^low .. 2^high of random arguments. */
  readonly low: number;
  readonly high: number;
  readonly accept: (x: Ball) => boolean;
  /** Special places to come near to. */
  readonly near: readonly Ball[];
}
const always = (): boolean => true;
const positive = (x: Ball): boolean => real.isPositive(x);
const unit = (x: Ball): boolean => real.compare(real.absolute(x), real.ONE) === -1;
const integer = (n: number): Ball => real.fromInteger(n);
const halfPi = real.midpoint(real.scaleByPowerOfTwo(real.pi(100), -1));
const cases: readonly Case[] = [
  { name: 'exp', f: real.exp, low: -300, high: 12, accept: always, near: [integer(0), integer(1)] },
  { name: 'ln', f: real.log, low: -400, high: 400, accept: positive, near: [integer(1), integer(2), integer(4)] },
  { name: 'sqrt', f: real.sqrt, low: -300, high: 300, accept: (x) => real.isNonNegative(x), near: [integer(0), integer(4)] },
  { name: 'cbrt', f: (x, p) => real.root(x, 3, p), low: -300, high: 300, accept: always, near: [integer(0), integer(8)] },
  { name: 'sin', f: real.sin, low: -300, high: 200, accept: always, near: [integer(0), halfPi, real.pi(90)] },
  { name: 'cos', f: real.cos, low: -300, high: 200, accept: always, near: [integer(0), halfPi, real.pi(90)] },
  { name: 'tan', f: real.tan, low: -300, high: 100, accept: always, near: [integer(0), halfPi, real.pi(90)] },
  { name: 'sinh', f: real.sinh, low: -300, high: 10, accept: always, near: [integer(0)] },
  { name: 'cosh', f: real.cosh, low: -300, high: 10, accept: always, near: [integer(0)] },
  { name: 'tanh', f: real.tanh, low: -300, high: 12, accept: always, near: [integer(0)] },
  { name: 'asin', f: real.asin, low: -300, high: 1, accept: unit, near: [integer(1), integer(-1), integer(0)] },
  { name: 'acos', f: real.acos, low: -300, high: 1, accept: unit, near: [integer(1), integer(-1), integer(0)] },
  { name: 'atan', f: real.atan, low: -300, high: 300, accept: always, near: [integer(1), integer(-1), integer(0)] },
  { name: 'asinh', f: real.asinh, low: -300, high: 300, accept: always, near: [integer(0)] },
  { name: 'acosh', f: real.acosh, low: 0, high: 300, accept: (x) => real.compare(x, real.ONE) === 1, near: [integer(1)] },
  { name: 'atanh', f: real.atanh, low: -300, high: 1, accept: unit, near: [integer(1), integer(-1), integer(0)] },
];

describe.each(cases)('$name', ({ name, f, low, high, accept, near }) => {
  const random = generator(name.length * 7919 + name.charCodeAt(1));
  const argument = (i: number): Ball => {
    const place = near[Math.floor(random() * near.length)];
    const wide = dyadic(random, low, random() < 0.5 ? 3 : high);
    return i % 3 === 0 && place ? real.add(place, dyadic(random, -200, -2), 4000) : wide;
  };
  const close = (value: Ball | null, truth: Ball | null): void => {
    if (truth === null) return;
    expect(value).not.toBeNull();
    if (value) expect(real.overlaps(value, truth)).toBe(true);
  };

  test('exact arguments are enclosed, to the precision asked for', () => {
    for (let i = 0; i < 150; i += 1) {
      const x = real.midpoint(argument(i));
      if (!accept(x)) continue;
      const precision = [40, 64, 113, 300][i % 4] ?? 64;
      const value = f(x, precision);
      close(value, oracle(name, x));
      if (value && value.mid !== 0n && real.relativeAccuracy(value) <= precision - 12) throw new Error(`${name} of ${x.mid} 2^${x.exp} at ${precision}: ${real.relativeAccuracy(value)}`);
    }
  });

  test('every point of a ball is enclosed, and no ball that is wholly inside the domain is refused', () => {
    for (let i = 0; i < 150; i += 1) {
      const centre = real.midpoint(argument(i));
      const x = real.withRadius(centre, dyadic(random, -120, i % 2 ? 3 : -10));
      const value = f(x, 128);
      const whole = accept(real.lowerEnd(x)) && accept(real.upperEnd(x));
      if (whole && name !== 'tan') expect(value).not.toBeNull();
      if (value === null) continue;
      expect(whole || ['asin', 'acos'].includes(name)).toBe(true);
      for (let k = 0; k < 4; k += 1) close(value, oracle(name, inside(random, x)));
    }
  });
});

test('a narrow ball gives a result about as narrow as the derivative allows', () => {
  const x = real.withRadius(real.fromDouble(0.75), { mid: 1n, rad: 0n, exp: -60 });
  for (const f of [real.exp, real.log, real.sin, real.cos, real.tan, real.atan, real.asin, real.acos, real.atanh, real.asinh, real.sqrt, real.sinh, real.cosh, real.tanh]) {
    const value = f(x, 200);
    expect(value).not.toBeNull();
    if (value) expect(real.exponentOf(real.radius(value))).toBeLessThan(-55);
  }
});

test('poles and ends of the domain are refused, not guessed', () => {
  const wide = real.withRadius(real.ZERO, real.ONE);
  expect(real.log(wide, 64)).toBeNull();
  expect(real.divide(real.ONE, wide, 64)).toBeNull();
  expect(real.sqrt(wide, 64)).toBeNull();
  expect(real.tan(real.withRadius(real.fromDouble(1.5), real.fromDouble(0.1)), 64)).toBeNull();
  expect(real.atanh(real.fromInteger(1), 64)).toBeNull();
  expect(real.asin(real.fromDouble(1.0000001), 64)).toBeNull();
  expect(real.acosh(real.fromDouble(0.9999999), 64)).toBeNull();
});

test('arcosh of 3 2^(10^9) is log 6 + 10^9 log 2 to its last bit', () => {
  const value = real.acosh({ mid: 3n, rad: 0n, exp: 1e9 }, 128);
  const expected = real.add(real.log(real.fromInteger(6), 160) ?? real.ZERO, real.multiply(real.fromInteger(1e9), real.log(real.fromInteger(2), 160) ?? real.ZERO, 160), 160);
  expect(value !== null && real.overlaps(value, expected)).toBe(true);
});
