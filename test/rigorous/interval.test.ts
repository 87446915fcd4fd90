/** Double intervals against MPFR and against balls (which have their own MPFR test): points, extremes, wide intervals, overflow and underflow. */
import { describe, expect, test } from 'vitest';
import { type Ball, ELEMENTARY, type ElementaryName, interval, type Interval, intervalArithmetic, real } from '../../src/rigorous/index.ts';
import { judge, type UnaryName } from './mpfr.ts';
import { generator } from './random.ts';

const oracle = await judge(140);
const random = generator(4711);
const inOracle: Partial<Record<ElementaryName, UnaryName>> = { exp: 'exp', log: 'ln', sqrt: 'sqrt', sin: 'sin', cos: 'cos', tan: 'tan', sinh: 'sinh', cosh: 'cosh', tanh: 'tanh', asin: 'asin', acos: 'acos', atan: 'atan', asinh: 'asinh', acosh: 'acosh', atanh: 'atanh' };
const truth = (name: ElementaryName, x: number): Ball | null => {
  const mpfr = inOracle[name];
  const point = real.fromDouble(x);
  if (mpfr) return oracle(mpfr, point);
  return name === 'expm1' ? real.expm1(point, 140) : real.log1p(point, 140);
};
/** Doubles of all sizes, with the dangerous ones mixed in. */
const double = (): number => {
  const kind = random();
  const sign = random() < 0.5 ? -1 : 1;
  if (kind < 0.5) return sign * random() * 4;
  if (kind < 0.7) return sign * 2 ** (random() * 80 - 60) * (1 + random());
  if (kind < 0.8) return sign * (1 - 2 ** (-random() * 50));
  if (kind < 0.9) return sign * Math.round(random() * 1000) * (Math.PI / 4) * (1 + (random() - 0.5) * 2 ** -50);
  return sign * 2 ** (random() * 2000 - 1000);
};
const holds = (x: Interval, value: Ball): boolean => {
  const low = x.lo === -Infinity || real.compare(real.fromDouble(x.lo), value) !== 1;
  const high = x.hi === Infinity || real.compare(real.fromDouble(x.hi), value) !== -1;
  return low && high;
};

describe.each(ELEMENTARY)('%s', (name) => {
  const f = intervalArithmetic[name];
  test('at doubles', () => {
    let counted = 0;
    for (let i = 0; i < 1500; i += 1) {
      const x = double();
      const value = f(interval.fromDouble(x));
      if (value === null) continue;
      const exact = truth(name, x);
      if (exact === null) throw new Error(`${name}(${x}) is not a number, yet was enclosed`);
      if (!holds(value, exact)) throw new Error(`${name}(${x}) is ${real.toDecimalDown(exact, 20)}, enclosed by [${value.lo}, ${value.hi}]`);
      if (name !== 'tan' && Math.abs(value.lo) > 2 ** -1000 && Math.abs(x) < 2 ** 40) expect(value.hi - value.lo).toBeLessThanOrEqual(Math.abs(value.lo) * 2 ** -43 + (name === 'sin' || name === 'cos' ? 2 ** -50 : 0));
      counted += 1;
    }
    expect(counted).toBeGreaterThan(200);
  });
  test('on intervals', () => {
    for (let i = 0; i < 600; i += 1) {
      const x = double();
      const w = random() < 0.5 ? random() * 5 : Math.abs(x) * 2 ** (-random() * 50);
      const whole = { lo: x, hi: x + w };
      const value = f(whole);
      if (value === null || !Number.isFinite(w)) continue;
      for (const y of [whole.lo, whole.hi, whole.lo + random() * (whole.hi - whole.lo), whole.lo + random() * (whole.hi - whole.lo)]) {
        if (!(y >= whole.lo && y <= whole.hi)) continue;
        const exact = truth(name, y);
        if (exact === null || !holds(value, exact)) throw new Error(`${name} at ${y} of [${whole.lo}, ${whole.hi}] enclosed by [${value.lo}, ${value.hi}]`);
      }
    }
  });
});

test('arithmetic contains the exact results, at every scale', () => {
  const r = (x: number): Ball => real.fromDouble(x);
  for (let i = 0; i < 4000; i += 1) {
    const [a, b, c, d] = [double(), double(), double(), double()];
    const x = { lo: Math.min(a, b), hi: Math.max(a, b) };
    const y = { lo: Math.min(c, d), hi: Math.max(c, d) };
    for (const p of [x.lo, x.hi]) {
      for (const q of [y.lo, y.hi]) {
        expect(holds(interval.add(x, y), real.add(r(p), r(q), 200))).toBe(true);
        expect(holds(interval.subtract(x, y), real.subtract(r(p), r(q), 200))).toBe(true);
        expect(holds(interval.multiply(x, y), real.multiply(r(p), r(q), 200))).toBe(true);
        const quotient = interval.divide(x, y);
        const exact = q === 0 ? null : real.divide(r(p), r(q), 200);
        if (quotient && exact) expect(holds(quotient, exact)).toBe(true);
      }
    }
    for (const n of [2, 3, 5, -2, -3]) {
      const power = interval.powerInteger(x, n);
      const exact = real.powerInteger(r(x.hi), n, 200);
      if (power && exact) expect(holds(power, exact)).toBe(true);
    }
    for (const n of [3, 5, 7]) {
      const root = interval.root(x, n);
      const exact = real.root(r(x.lo), n, 200);
      if (root && exact) expect(holds(root, exact)).toBe(true);
    }
  }
});

test('conversion from balls is outward, at the limits too', () => {
  for (const x of [{ mid: (1n << 70n) + 1n, rad: 3n, exp: -1100 }, { mid: -5n, rad: 0n, exp: -1075 }, { mid: 1n, rad: 0n, exp: 1024 }, { mid: -(1n << 60n) - 1n, rad: 0n, exp: 960 }, { mid: 1n, rad: 0n, exp: -5000 }]) {
    const box = interval.fromBall(x);
    expect(holds(box, real.lowerEnd(x)) && holds(box, real.upperEnd(x))).toBe(true);
  }
});
