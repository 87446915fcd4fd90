/** Values on the cut, for arguments that are exactly real: the limits from above that DLMF takes as principal. */
import { describe as group, expect, test } from 'vitest';
import { describe, type FunctionDescription } from '../../src/functions/index.ts';
import { complex, type ComplexBall, real } from '../../src/rigorous/index.ts';
import { budget, Declined } from '../../src/outcome.ts';

const BITS = 100;
const a = complex.arithmetic(BITS);
const number = (num: number, den = 1): ComplexBall => a.fromRational({ num: BigInt(num), den: BigInt(den) });
const described = (id: string): FunctionDescription => {
  const found = describe(id);
  if (!found) throw new Error(`${id} is gone`);
  return found;
};
function value(id: string, ...args: readonly ComplexBall[]): ComplexBall {
  const found = described(id).enclose?.(args, BITS);
  if (!found) throw new Error(`${id} has no enclosure there`);
  return found;
}
const pi = a.constant('pi');
const timesI = (z: ComplexBall): ComplexBall => a.multiply(a.i, z);
function expectEqual(left: ComplexBall, right: ComplexBall): void {
  expect(complex.overlaps(left, right)).toBe(true);
  for (const part of [left.re, left.im, right.re, right.im]) expect(real.toDouble(real.radius(part))).toBeLessThan(1e-20);
}

group('principal values on the negative axis and beyond 1', () => {
  test.each([[1, 3], [1, 1], [7, 2]])('K_0(-x) = K_0(x) - i pi I_0(x), DLMF 10.34.2, x = %i/%i', (num, den) => {
    const zero = number(0);
    const expected = a.subtract(value('besselK', zero, number(num, den)), timesI(a.multiply(pi, value('besselI', zero, number(num, den)))));
    expectEqual(value('besselK', zero, number(-num, den)), expected);
  });
  test.each([[1, 3], [5, 2]])('Y_0(-x) = Y_0(x) + 2 i J_0(x), DLMF 10.11.2, x = %i/%i', (num, den) => {
    const zero = number(0);
    const expected = a.add(value('besselY', zero, number(num, den)), timesI(a.multiply(number(2), value('besselJ', zero, number(num, den)))));
    expectEqual(value('besselY', zero, number(-num, den)), expected);
  });
  test.each([[3, 2], [3, 1], [40, 1]])('Li_2(x) = pi^2/3 - log(x)^2/2 - Li_2(1/x) - i pi log x, DLMF 25.12.4 continued from below, x = %i/%i', (num, den) => {
    const logarithm = a.log(number(num, den));
    if (!logarithm) throw new Error('log');
    const square = a.divide(a.multiply(logarithm, logarithm), number(2));
    const third = a.divide(a.multiply(pi, pi), number(3));
    if (!square || !third) throw new Error('division');
    const expected = a.subtract(a.subtract(a.subtract(third, square), value('polylog', number(2), number(den, num))), timesI(a.multiply(pi, logarithm)));
    expectEqual(value('polylog', number(2), number(num, den)), expected);
  });
  test('log Gamma(-1/3) has the imaginary part -pi: log Gamma(z + 1) = log z + log Gamma(z), DLMF 5.5.1', () => {
    expectEqual(value('logGamma', number(-1, 3)), a.subtract(value('logGamma', number(2, 3)), a.log(number(-1, 3)) ?? number(0)));
  });
  test('Kelvin functions with a cut say nothing on it', () => {
    expect(described('kelvinKer').enclose?.([number(0), number(-1, 3)], BITS) ?? null).toBeNull();
  });
  test('atan and asinh of real numbers are exactly real', () => {
    for (const f of [a.atan, a.asinh]) expect(complex.isReal(f(number(1, 3)) ?? a.i)).toBe(true);
  });
});

test('a long enclosure stops when the time is up', () => {
  const time = budget(-1);
  expect(() => described('polylog').enclose?.([number(2), number(3, 2)], 20000, () => time.check())).toThrow(Declined);
  expect(() => described('zeta').encloseReal?.([real.fromRational({ num: 7n, den: 5n }, 20000)], 20000, () => time.check())).toThrow(Declined);
});
