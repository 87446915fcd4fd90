/** Exact values and the way they are written. Sources beside each group; "common practice" where it is only how people write. */
import { describe, expect, it } from 'vitest';
import { createField } from '../../src/algebra/index.ts';
import { build as b, Q, type Assumption, type Expression } from '../../src/expression/index.ts';
import { budget } from '../../src/outcome.ts';
import { text } from './write.ts';

const n = b.number;
const s = b.symbol;
const pi = b.constant('pi');
const i = b.constant('i');
const sq = b.squareRoot;
const r = (p: number, q: number): Expression => n(Q.rational(p, q));
const angle = (p: number, q: number): Expression => b.product(r(p, q), pi);
const positive = (...names: string[]): Assumption[] => names.map((x) => ({ kind: 'relation', left: s(x), relation: '>', right: n(0) }));
const integer = (name: string): Assumption => ({ kind: 'domain', symbol: name, domain: 'integer' });
const simplify = (e: Expression, assume: Assumption[] = []): string => {
  const f = createField(assume, budget(5000));
  return text(f.toExpression(f.fromExpression(e)));
};
const isZero = (e: Expression, assume: Assumption[] = []): string => {
  const f = createField(assume, budget(5000));
  return f.isZero(f.fromExpression(e));
};

describe('sines of rational multiples of pi', () => {
  // DLMF table 4.17.1.
  it.each([
    [b.call('sin', angle(1, 12)), '(sqrt(6) - sqrt(2))/4'],
    [b.call('sin', angle(1, 6)), '1/2'],
    [b.call('sin', angle(1, 4)), 'sqrt(2)/2'],
    [b.call('sin', angle(1, 3)), 'sqrt(3)/2'],
    [b.call('cos', angle(5, 6)), '-sqrt(3)/2'],
    [b.call('tan', angle(1, 12)), '(2 - sqrt(3))'],
    [b.call('tan', angle(1, 6)), 'sqrt(3)/3'],
    [b.call('tan', angle(5, 12)), '(2 + sqrt(3))'],
    [b.call('cot', angle(1, 3)), 'sqrt(3)/3'],
    [b.call('sec', angle(1, 12)), '(sqrt(6) - sqrt(2))'],
    [b.call('csc', angle(3, 4)), 'sqrt(2)'],
    // Pentagon and octagon: Euclid XIII.9; half angles DLMF 4.21.22.
    [b.call('cos', angle(1, 5)), '(1 + sqrt(5))/4'],
    [b.call('sin', angle(1, 10)), '(sqrt(5) - 1)/4'],
    [b.call('tan', angle(1, 8)), '(sqrt(2) - 1)'],
    [b.call('sin', angle(1, 8)), 'sqrt(2 - sqrt(2))/2'],
    // Other angles stay what they are.
    [b.call('sin', angle(1, 7)), 'sin(pi/7)'],
    [b.call('cos', angle(15, 7)), 'cos(pi/7)'],
    [b.call('sin', angle(1, 24)), 'sin(pi/24)'],
    [b.product(b.call('tan', angle(1, 25)), b.call('cot', angle(1, 25))), '1'],
    [b.product(b.call('tan', angle(1, 9)), b.call('tan', angle(2, 9)), b.call('tan', angle(4, 9))), 'sqrt(3)'],
  ])('%#', (e, expected) => expect(simplify(e)).toBe(expected));

  it.each([
    // cos(pi/7) cos(2pi/7) cos(3pi/7) = 1/8 (Morrie's law, DLMF 4.21.37-like product; from memory).
    [b.difference(b.product(b.call('cos', angle(1, 7)), b.call('cos', angle(2, 7)), b.call('cos', angle(3, 7))), r(1, 8))],
    // DLMF 4.21.35: sin(n z) = 2^(n-1) prod sin(z + k pi/n) at n = 5, z = pi/30.
    [b.difference(b.product(n(16), ...[0, 1, 2, 3, 4].map((k) => b.call('sin', angle(1 + 6 * k, 30)))), r(1, 2))],
    [b.difference(b.product(b.call('sin', angle(1, 5)), b.call('sin', angle(2, 5))), b.quotient(sq(n(5)), n(4)))],
    // exp(i pi/7)^7 = -1.
    [b.sum(b.power(b.power(b.constant('e'), b.product(i, angle(1, 7))), 7), n(1))],
    [b.difference(b.power(b.call('sin', angle(1, 9)), 2), b.difference(n(1), b.power(b.call('cos', angle(1, 9)), 2)))],
  ])('identity %#', (e) => expect(isZero(e)).toBe('yes'));
});

describe('radicals', () => {
  it.each([
    [sq(n(8)), '2*sqrt(2)'],
    [b.quotient(n(1), sq(n(2))), 'sqrt(2)/2'],
    [b.quotient(n(1), b.sum(n(1), sq(n(2)))), '(sqrt(2) - 1)'],
    [b.quotient(n(1), b.sum(n(1), b.root(3, n(2)))), '(1 - 2^(1/3) + 4^(1/3))/3'],
    [b.root(3, n(-16)), '-2*2^(1/3)'],
    [b.power(n(-8), Q.rational(1, 3)), '(1 + i*sqrt(3))'],
    // Borodin, Fagin, Hopcroft, Tompa, "Decreasing the nesting depth of expressions involving square roots" (1985), and classical examples.
    [sq(b.sum(n(3), b.product(n(2), sq(n(2))))), '(1 + sqrt(2))'],
    [sq(b.sum(n(5), b.product(n(2), sq(n(6))))), '(sqrt(3) + sqrt(2))'],
    [sq(b.sum(n(2), sq(n(3)))), '(sqrt(2) + sqrt(6))/2'],
    [sq(b.sum(n(10), b.product(n(2), sq(n(6))), b.product(n(2), sq(n(10))), b.product(n(2), sq(n(15))))), '(sqrt(5) + sqrt(3) + sqrt(2))'],
    [b.root(3, b.sum(n(2), sq(n(5)))), '(1 + sqrt(5))/2'],
    [b.root(3, b.sum(n(7), b.product(n(5), sq(n(2))))), '(1 + sqrt(2))'],
    [sq(b.sum(n(1), sq(n(2)))), 'sqrt(1 + sqrt(2))'],
    [sq(b.sum(n(3), b.product(n(4), i))), '(2 + i)'],
    [sq(b.difference(n(3), b.product(n(4), i))), '(2 - i)'],
    [sq(i), 'sqrt(2)*(1 + i)/2'],
  ])('%#', (e, expected) => expect(simplify(e)).toBe(expected));
});

describe('branches', () => {
  // DLMF 4.8(i), 4.2(iv): principal values.
  it.each([
    [sq(b.power(s('a'), 2)), [], 'abs(a)'],
    [sq(b.power(s('a'), 2)), positive('a'), 'a'],
    [sq(b.product(s('a'), s('c'))), [], 'sqrt(a*c)'],
    [b.product(sq(s('a')), sq(s('c'))), positive('a', 'c'), 'sqrt(a*c)'],
    [b.product(sq(s('a')), sq(s('c'))), [], 'sqrt(a)*sqrt(c)'],
    [b.quotient(b.call('abs', s('a')), b.power(s('a'), 4)), [], '1/abs(a)^3'],
    [b.power(b.power(s('a'), 3), Q.rational(1, 3)), positive('a'), 'a'],
    [sq(b.sum(b.power(s('a'), 2), b.product(n(2), s('a')), n(1))), [], 'abs(a + 1)'],
    [b.power(b.power(b.call('abs', s('a')), 2), Q.ONE), [], 'a^2'],
    [sq(n(-4)), [], '2*i'],
    [b.call('log', n(-4)), [], '(2*log(2) + i*pi)'],
    [b.call('log', b.product(s('a'), s('c'))), positive('a', 'c'), 'log(a*c)'],
    [b.call('log', b.product(s('a'), s('c'))), [], 'log(a*c)'],
    [b.call('log', b.product(s('a'), s('c'))), positive('a'), 'log(a*c)'],
    [b.call('log', b.power(s('a'), 2)), [], '2*log(abs(a))'],
    [b.call('log', b.sum(n(1), i)), [], '(log(2)/2 + i*pi/4)'],
    [b.call('log', r(9, 4)), [], '2*log(3/2)'],
    [b.power(i, i), [], 'e^(-pi/2)'],
    [b.power(n(-1), s('n')), [integer('n')], '-1^n'],
    [b.power(n(-1), b.sum(b.product(n(2), s('n')), n(1))), [integer('n')], '-1'],
    [b.call('sin', b.product(s('n'), pi)), [integer('n')], '0'],
    [b.call('cos', b.sum(s('x'), pi)), [], '-cos(x)'],
    [b.call('sin', b.sum(s('x'), angle(1, 2))), [], 'cos(x)'],
    [b.call('exp', b.call('log', s('a'))), [], 'a'],
    [b.call('exp', b.product(n(2), b.call('log', n(3)))), [], '9'],
    [b.call('asin', r(1, 2)), [], 'pi/6'],
    [b.call('acos', r(-1, 2)), [], '2*pi/3'],
    [b.call('atan', sq(n(3))), [], 'pi/3'],
    [b.call('atan', b.difference(sq(n(2)), n(1))), [], 'pi/8'],
    [b.call('acos', b.quotient(b.sum(n(1), sq(n(5))), n(4))), [], 'pi/5'],
    [b.call('asinh', n(1)), [], 'log(1 + sqrt(2))'],
    [b.call('acosh', n(2)), [], 'log(2 + sqrt(3))'],
    [b.call('atanh', r(1, 2)), [], 'log(3)/2'],
    [b.call('tanh', b.call('log', n(2))), [], '3/5'],
    [b.call('sin', b.call('acos', s('x'))), [], 'sqrt(1 - x^2)'],
    [b.call('sin', b.product(i, s('a'))), [], 'i*sinh(a)'],
    [b.call('cosh', b.product(i, angle(1, 2))), [], '0'],
    [b.call('sinh', b.product(i, angle(1, 6))), [], 'i/2'],
    [b.call('tanh', b.product(i, angle(1, 4))), [], 'i'],
  ] as [Expression, Assumption[], string][])('%#', (e, assume, expected) => expect(simplify(e, assume)).toBe(expected));
});

describe('written as an author writes', () => {
  // Common practice.
  it.each([
    [b.quotient(n(3), b.product(n(8), b.power(s('c'), 4))), '3/(8*c^4)'],
    [b.product(s('alpha'), b.sum(s('alpha'), n(-1)), r(1, 2)), 'alpha*(alpha - 1)/2'],
    [b.product(s('alpha'), b.sum(s('alpha'), n(-1)), b.sum(s('alpha'), n(-2)), r(1, 6)), 'alpha*(alpha - 1)*(alpha - 2)/6'],
    [b.quotient(b.difference(b.power(s('a'), 2), b.power(s('c'), 2)), n(2)), '(a^2 - c^2)/2'],
    [b.quotient(n(1), b.power(b.sum(s('a'), n(1)), 3)), '1/(a + 1)^3'],
    [b.power(b.difference(n(1), b.power(s('v'), 2)), Q.rational(-1, 2)), '1/sqrt(1 - v^2)'],
    [b.power(b.difference(n(1), b.power(s('v'), 2)), Q.rational(-3, 2)), '1/(1 - v^2)^(3/2)'],
    [b.product(s('alpha'), b.power(s('a'), b.difference(s('alpha'), n(1)))), 'alpha*a^(alpha - 1)'],
    [b.quotient(sq(b.product(n(2), pi)), n(12)), 'sqrt(2*pi)/12'],
    [b.product(r(1, 2), b.call('log', b.product(n(2), pi))), 'log(2*pi)/2'],
    [sq(b.quotient(n(2), pi)), 'sqrt(2/pi)'],
    [b.quotient(n(2), sq(pi)), '2/sqrt(pi)'],
    [b.quotient(b.sum(b.call('log', n(2)), n(1), b.negation(b.constant('eulerGamma'))), n(4)), '(log(2) - eulerGamma + 1)/4'],
    [b.sum(b.product(n(-2), b.call('log', n(2))), b.product(n(2), b.constant('eulerGamma')), n(-1)), '(2*eulerGamma - 2*log(2) - 1)'],
    [b.call('tan', s('a')), 'tan(a)'],
    [b.quotient(n(1), b.power(b.call('cos', s('a')), 2)), '1/cos(a)^2'],
    [b.product(b.constant('e'), b.power(b.constant('e'), s('a'))), 'e^(a + 1)'],
    [b.sum(b.quotient(pi, n(2)), b.call('log', n(2))), '(pi/2 + log(2))'],
    [b.difference(n(1), s('a')), '(1 - a)'],
    [b.power(b.sum(s('a'), s('c')), 2), '(a + c)^2'],
  ])('%#', (e, expected) => expect(simplify(e)).toBe(expected));
});
