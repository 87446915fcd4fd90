/** Roots and logarithms of products and quotients stay what the author wrote, whatever the signs of the parameters. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createField, type Element, type Field } from '../../src/algebra/index.ts';
import { build as b, Q, type Assumption, type Expression } from '../../src/expression/index.ts';
import { budget } from '../../src/outcome.ts';
import { text } from './write.ts';

const n = b.number;
const s = b.symbol;
const pi = b.constant('pi');
const sq = b.squareRoot;
const log = (e: Expression): Expression => b.call('log', e);
const positive = (...names: string[]): Assumption[] => names.map((x) => ({ kind: 'relation', left: s(x), relation: '>', right: n(0) }));
const fieldOf = (assume: Assumption[] = []): Field => createField(assume, budget(5000));
const simplify = (e: Expression, assume: Assumption[] = []): string => {
  const f = fieldOf(assume);
  return text(f.toExpression(f.fromExpression(e)));
};

describe('roots of quotients', () => {
  it.each([
    // Period of the pendulum, 2 pi sqrt(L/g): Landau & Lifshitz, Mechanics, problem 11.1 (from memory).
    [b.product(n(2), pi, sq(b.quotient(s('L'), s('g')))), [], '2*pi*sqrt(L/g)'],
    [b.product(n(2), pi, sq(b.quotient(s('L'), s('g')))), positive('L', 'g'), '2*pi*sqrt(L/g)'],
    [b.product(n(2), pi, sq(b.quotient(s('L'), s('g')))), positive('g'), '2*pi*sqrt(L/g)'],
    // Speed of long waves, sqrt(g h): Lamb, Hydrodynamics, art. 170 (from memory).
    [sq(b.product(s('g'), s('h'))), [], 'sqrt(g*h)'],
    [sq(b.product(s('g'), s('h'))), positive('g', 'h'), 'sqrt(g*h)'],
    // Common practice.
    [sq(b.quotient(b.product(n(2), s('E')), s('m'))), [], 'sqrt(2*E/m)'],
    [b.quotient(n(1), sq(b.quotient(s('k'), s('m')))), [], '1/sqrt(k/m)'],
    [b.power(b.quotient(s('a'), s('d')), Q.rational(-3, 2)), [], 'd/(a*sqrt(a/d))'],
    [sq(b.quotient(s('k'), b.product(n(2), s('m')))), [], 'sqrt(k/(2*m))'],
    [b.call('sin', sq(b.quotient(b.sum(s('a'), s('c')), s('d')))), [], 'sin(sqrt((a + c)/d))'],
  ] as [Expression, Assumption[], string][])('%#', (e, assume, expected) => expect(simplify(e, assume)).toBe(expected));

  it('are equal where they are the same function', () => {
    const f = fieldOf();
    const root = (e: Expression): Element => f.fromExpression(sq(e));
    const [L, g] = [s('L'), s('g')];
    expect(f.equal(f.multiply(root(b.quotient(L, g)), root(b.quotient(L, g))), f.fromExpression(b.quotient(L, g)))).toBe('yes');
    // For L/g < 0 both are imaginary and the product is -1.
    expect(f.equal(f.multiply(root(b.quotient(L, g)), root(b.quotient(g, L))), Q.ONE)).toBe('no');
    const p = fieldOf(positive('L', 'g'));
    expect(p.equal(p.multiply(p.fromExpression(sq(b.quotient(L, g))), p.fromExpression(sq(b.quotient(g, L)))), Q.ONE)).toBe('yes');
  });
});

describe('logarithms of products', () => {
  const scale = b.quotient(b.product(n(4), pi, b.power(s('mu'), 2)), s('Delta'));
  it.each([
    // Dimensional regularisation, ln(4 pi mu^2/Delta): Peskin & Schroeder, eq. (10.21) (from memory).
    [log(scale), [], 'log(4*pi*mu^2/Delta)'],
    [log(scale), positive('mu', 'Delta'), 'log(4*pi*mu^2/Delta)'],
    [b.power(b.difference(log(scale), b.constant('eulerGamma')), 2), [], '(eulerGamma - log(4*pi*mu^2/Delta))^2'],
    [b.power(scale, s('epsilon')), [], '(4*pi*mu^2/Delta)^epsilon'],
    // Bethe's stopping power, ln(2 m c^2/I): Jackson, eq. (13.14) (from memory).
    [log(b.quotient(b.product(n(2), s('m'), b.power(s('c'), 2)), s('I'))), [], 'log(2*m*c^2/I)'],
    // Common practice.
    [b.sum(log(s('a')), log(s('c'))), positive('a', 'c'), '(log(a) + log(c))'],
    [b.difference(log(b.product(s('a'), s('c'))), log(s('c'))), positive('a', 'c'), 'log(a)'],
    [log(n(Q.rational(9, 4))), [], '2*log(3/2)'],
  ] as [Expression, Assumption[], string][])('%#', (e, assume, expected) => expect(simplify(e, assume)).toBe(expected));

  it('equal the sum of the logarithms', () => {
    const f = fieldOf(positive('a', 'c'));
    expect(f.equal(f.fromExpression(log(b.product(s('a'), s('c')))), f.fromExpression(b.sum(log(s('a')), log(s('c')))))).toBe('yes');
  });

  it('read back as what they were', () => {
    const factor = fc.tuple(fc.constantFrom('a', 'c', 'd'), fc.integer({ min: -3, max: 3 }));
    fc.assert(
      fc.property(fc.array(factor, { minLength: 1, maxLength: 4 }), fc.integer({ min: 1, max: 12 }), fc.boolean(), fc.integer({ min: 1, max: 3 }), (factors, c, known, power) => {
        const f = fieldOf(known ? positive('a', 'd') : []);
        const inner = b.product(n(c), ...factors.map(([name, e]) => b.power(s(name), e)));
        for (const e of [b.power(b.sum(log(inner), b.constant('eulerGamma')), power), sq(inner), b.quotient(n(1), sq(inner)), b.power(inner, s('q'))]) {
          const value = f.fromExpression(e);
          expect(f.equal(f.fromExpression(f.toExpression(value)), value)).toBe('yes');
        }
      }),
      { numRuns: 60 },
    );
  });
});

describe('inverse functions of numbers', () => {
  // DLMF 4.23(iv), 4.23.19: the principal range decides the multiple of pi.
  it.each([
    [b.call('asin', b.call('sin', n(1))), '1'],
    [b.call('asin', b.call('sin', n(2))), '(pi - 2)'],
    [b.call('acos', b.call('sin', n(1))), '(pi/2 - 1)'],
    [b.call('acos', b.call('cos', n(4))), '(2*pi - 4)'],
    [b.call('acos', b.call('cos', n(-3))), '3'],
    [b.call('atan', b.call('tan', n(2))), '(2 - pi)'],
    [b.call('tanh', b.call('atanh', s('x'))), 'x'],
    [sq(b.difference(n(1), b.power(b.call('sin', n(1)), 2))), 'cos(1)'],
  ] as [Expression, string][])('%#', (e, expected) => expect(simplify(e)).toBe(expected));
});

describe('constants of special functions are told apart from numbers', () => {
  // erf 1 = 0.84270, Gamma(1/4) = 3.62560, J_0(1) = 0.76519: Abramowitz & Stegun, tables 7.1, 6.1, 9.1.
  it.each([
    [b.call('erf', n(1)), 8427, 10000],
    [b.call('gamma', n(Q.rational(1, 4))), 36256, 10000],
    [b.call('besselJ', n(0), n(1)), 7652, 10000],
  ] as [Expression, number, number][])('%#', (e, p, q) => {
    const f = fieldOf();
    expect(f.isZero(f.subtract(f.fromExpression(e), Q.rational(p, q)))).toBe('no');
  });
});

describe('zeros of cubics', () => {
  it('solve the polynomial exactly, and the real one is real', () => {
    // x^3 - x - 1 (plastic ratio 1.324717957..., OEIS A060006, from memory), x^3 - 2x - 5 (Wallis: 2.0945514815...), and two of no name.
    for (const coefficients of [[-1, -1, 0, 1], [-5, -2, 0, 1], [3, 1, 2, 5], [-1, 0, 1, 1]]) {
      const f = fieldOf();
      const zeros = f.zeros(coefficients.map((c) => Q.rational(c)));
      expect(zeros?.map((z) => z.real)).toEqual([true, false, false]);
      for (const zero of zeros ?? []) {
        const value = coefficients.reduceRight<Element>((sum, c) => f.add(f.multiply(sum, zero.value), Q.rational(c)), Q.ZERO);
        expect(f.isZero(value)).toBe('yes');
        expect(f.isReal(zero.value)).toBe(zero.real ? 'yes' : 'no');
        expect(f.equal(f.fromExpression(f.toExpression(zero.value)), zero.value)).toBe('yes');
      }
    }
  });
  it('lie where they are known to lie', () => {
    for (const [coefficients, value] of [[[-1, -1, 0, 1], Q.rational(132471795, 100000000)], [[-5, -2, 0, 1], Q.rational(209455148, 100000000)]] as const) {
      const f = fieldOf();
      const real = f.zeros(coefficients.map((c) => Q.rational(c)))?.[0]?.value;
      if (!real) throw new Error('no zero');
      expect(f.compare(real, value)).toBe(1);
      expect(f.compare(real, Q.add(value, Q.rational(1, 100000000)))).toBe(-1);
    }
  });
  it('are real radicals in a parameter whose sign leaves one real zero, and not written otherwise', () => {
    const f = fieldOf(positive('a'));
    const [c0, c1, c2, c3] = [Q.ONE, f.fromExpression(s('a')), Q.ZERO, Q.ONE];
    const zeros = f.zeros([c0, c1, c2, c3]) ?? [];
    expect(zeros.map((z) => z.real)).toEqual([true, false, false]);
    for (const { value } of zeros.slice(0, 1)) expect(f.isZero(f.add(f.add(f.power(value, Q.rational(3)), f.multiply(c1, value)), Q.ONE))).toBe('yes');
    const open = fieldOf();
    expect(open.zeros([Q.ONE, open.fromExpression(s('a')), Q.ZERO, Q.ONE])).toBeNull();
  });
});

describe('conditions of being non-zero', () => {
  // Common practice: a condition names the quantity, without numbers, signs and factors that cannot vanish.
  it.each([
    [b.negation(b.quotient(b.product(n(2), s('m'), b.power(s('c'), 2)), s('I'))), [], ['m', 'c', 'I']],
    [b.product(n(2), s('omega')), [], ['omega']],
    [b.product(pi, s('a'), b.difference(s('a'), n(1))), positive('a'), ['(a - 1)']],
    [b.product(b.power(b.constant('e'), s('a')), sq(b.quotient(s('L'), s('g')))), [], ['g', 'L']],
    [n(3), [], []],
  ] as [Expression, Assumption[], string[]][])('%#', (e, assume, expected) => {
    const f = fieldOf(assume);
    expect(f.factorsThatMayVanish(f.fromExpression(e)).map((u) => text(f.toExpression(u))).sort()).toEqual([...expected].sort());
  });
});

describe('inverse functions of functions of a parameter', () => {
  // asin(sin x) = x holds only for |x| <= pi/2 (principal values, DLMF 4.23(ii), from memory): a parameter may be anywhere.
  it.each([
    ['asin', b.call('sin', s('x'))],
    ['acos', b.call('cos', s('x'))],
    ['atan', b.call('tan', s('x'))],
    ['acos', b.call('sin', sq(s('x')))],
    ['asin', b.call('cos', b.power(s('x'), 2))],
  ] as const)('%s of a function is not undone', (inverse, inner) => {
    expect(simplify(b.call(inverse, inner), positive('x'))).toMatch(/a(sin|cos|tan)/);
  });
});
