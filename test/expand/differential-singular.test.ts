/** Differential equations at regular singular points: handbook series and the equation's own answer. */
import { describe, expect, test } from 'vitest';
import { partialSum } from '../../src/expand/index.ts';
import { expectSum, solve, solved } from './differential-tools.ts';
import { plain, same } from './tools.ts';

describe('power series for given values', () => {
  test('Lane-Emden, any index: 1 - x^2/6 + n x^4/120 - n(8n-5) x^6/15120 (Chandrasekhar, Stellar Structure, ch. IV, from memory)', () => {
    const wanted = '1 - x^2/6 + n*x^4/120 - n*(8*n-5)*x^6/15120';
    expectSum(solved("y''(x) + \\frac{2}{x}y'(x) + y(x)^n = 0, y(0)=1, y'(0)=0"), wanted);
    expectSum(solved("\\frac{1}{x^2}\\frac{d}{dx}\\left(x^2\\frac{dy}{dx}\\right) = -y^n, y(0)=1"), wanted);
  });
  test('Lane-Emden, n = 0: exactly 1 - x^2/6', () => {
    const found = solved("y'' + \\frac{2}{x}y' + 1 = 0, y(0)=1");
    expectSum(found, '1 - x^2/6');
    expect(found.exact).toBe(true);
  });
  test('Bessel J_0: DLMF 10.2.2', () => {
    expectSum(solved("x y'' + y' + x y = 0, y(0)=1"), '1 - x^2/4 + x^4/64 - x^6/2304');
  });
  test('y\'\' + y\'/x = e^y: -2 log(1 - x^2/8) (Frank-Kamenetskii on a disc, checked by substitution)', () => {
    expectSum(solved("y'' + \\frac{1}{x} y' = e^{y}, y(0)=0"), 'x^2/4 + x^4/64 + x^6/768 + x^8/8192');
  });
  test('hypergeometric: DLMF 15.2.1', () => {
    expectSum(solved("x(1-x) y'' + (c - (a+b+1)x) y' - a b y = 0, y(0)=1", { terms: 3 }), '1 + a*b*x/c + a*(a+1)*b*(b+1)*x^2/(2*c*(c+1))');
  });
  test('values that contradict the equation are refused', () => {
    const found = solve("y'' + \\frac{2}{x}y' + y^5 = 0, y(0)=1, y'(0)=1");
    expect(found.ok ? '' : found.error.message).toContain('first derivative');
  });
  test.each(["y' = \\frac{1}{y}, y(0)=0", "y y' = x + \\sqrt{y}, y(0)=0", "x y' = |y|, y(0)=0"])('%s is no power series and is declined', (text) => {
    expect(solve(text).ok).toBe(false);
  });
  test('where logarithms are needed the values are refused', () => {
    const found = solve("x y' = y + x, y(0)=0");
    expect(found.ok ? '' : found.error.message).toContain('logarithms');
  });
});

describe('Frobenius solutions', () => {
  const branches = (text: string, terms = 4, point?: string) => {
    const found = solved(text, { unknown: 'y', terms, ...(point ? { point } : {}) });
    return found.branches ?? [found];
  };
  test('Bessel of symbolic order: x^nu (1 - x^2/(4(nu+1)) + ...), DLMF 10.2.2', () => {
    const [up, down] = branches("x^2 y'' + x y' + (x^2-n^2) y = 0", 2);
    expect(up && same(partialSum(up), plain('x^n - x^(n+2)/(4*(n+1))'))).toBe(true);
    expect(down && same(partialSum(down), plain('x^(-n) - x^(2-n)/(4*(1-n))'))).toBe(true);
  });
  test('a logarithm where exponents coincide: Y_0\'s companion, DLMF 10.8.2 without multiples of J_0', () => {
    const [, second] = branches("x y'' + y' + x y = 0", 3);
    expect(second && same(partialSum(second), plain('log(x) - x^2*log(x)/4 + x^2/4'))).toBe(true);
    expect(second?.assumptions).toContain('x > 0');
  });
  test('a logarithm where exponents differ by a whole number: x y\'\' + y = 0 by substitution', () => {
    const [, second] = branches("x y'' + y = 0", 4);
    expect(second && same(partialSum(second), plain('1 - x*log(x) + x^2*log(x)/2 - 3*x^2/4'))).toBe(true);
  });
  test('Laguerre and Legendre polynomials end: DLMF 18.5.12, 18.5.7', () => {
    const [laguerre] = branches("x y'' + (1-x) y' + 3 y = 0");
    expect(laguerre?.exact).toBe(true);
    expect(laguerre && same(partialSum(laguerre), plain('1 - 3*x + 3*x^2/2 - x^3/6'))).toBe(true);
    const [legendre] = branches("(1-x^2) y'' - 2x y' + 6 y = 0", 4, '1');
    expect(legendre?.exact).toBe(true);
    expect(legendre && same(partialSum(legendre), plain('(3*x^2-1)/2'))).toBe(true);
  });
  test('a right side gives a particular solution first', () => {
    const [particular, free] = branches("x y' = y + x");
    expect(particular && same(partialSum(particular), plain('x*log(x)'))).toBe(true);
    expect(free && same(partialSum(free), plain('x'))).toBe(true);
  });
  test('irregular singular points are declined', () => {
    const found = solve("x^3 y'' + y = 0", { unknown: 'y' });
    expect(found.ok ? '' : found.error.message).toContain('irregular');
  });
});
