/** Two-sided claims are made only where they are proved. */
import { describe, expect, test } from 'vitest';
import { build } from '../../src/expression/index.ts';
import { expansionOf, expectExpansion, plain, positive, same } from './tools.ts';

describe('one answer for both sides', () => {
  test.each([
    ['\\cos\\sqrt{x}', '1 - x/2', '2', 0],
    ['\\frac{\\sin\\sqrt{x}}{\\sqrt{x}}', '1 - x/6', '2', 0],
    ['J_0(2\\sqrt{x})', '1 - x', '2', 0], // DLMF 10.2.2
    ['\\Gamma(x)', '1/x - euler', '1', 0], // DLMF 5.7.1
    ['\\arctan(1/x^2)', 'pi/2 - x^2', '6', 0],
  ] as const)('%s', (text, sum, power, log) => {
    const found = expansionOf(text, { terms: 2 });
    expect(found.side).toBe('both');
    expect(found.left).toBeUndefined();
    expectExpansion(found, sum, power, log, positive('x'));
  });
  test('log x^2 is 2 log|x|', () => {
    const found = expansionOf('\\sin(x)\\ln(x^2)', { terms: 1 });
    expect([found.side, found.left, found.terms[0]?.log]).toEqual(['both', undefined, 1]);
  });
});

describe('two answers, or one with its condition', () => {
  test.each(['\\cos x+|x|^{9}', '\\sqrt{1-\\cos x}', '\\cos x+x^2|x|^7'])('%s differs behind the shown terms', (text) => {
    const found = expansionOf(text, { terms: 2 });
    expect(found.side).toBe('right');
    expect(found.left?.side).toBe('left');
  });
  test('the cut of Y_0 and of Li_2 lies on one side', () => {
    for (const text of ['Y_0(x)', '\\operatorname{Li}_2(1-x)']) {
      const found = expansionOf(text, { terms: 2 });
      expect(found.side === 'right' && (found.left !== undefined || found.assumptions.includes('x > 0'))).toBe(true);
    }
  });
  test('a symbolic power is real on the right side only', () => {
    const found = expansionOf('x^{\\alpha}\\sin x', { terms: 2 });
    expect(found.side).toBe('right');
    expect(found.left).toBeUndefined();
    expect(found.assumptions).toContain('x > 0');
  });
});

test('sin of an imaginary quantity grows: sin(2x/arccos x) = -i sinh(2x/arcosh x) for x > 1', () => {
  const found = expansionOf('\\sin\\left(\\frac{2x}{\\arccos x}\\right)', { at: 'inf', terms: 2 });
  expect(found.oscillating).toBe(false);
  expect(found.prefactor).not.toBeNull();
});

test('an order counts inside the prefactor (E_1, DLMF 6.12.1)', () => {
  const found = expansionOf('E_1(x)', { at: 'inf', terms: undefined, order: { num: 5n, den: 1n } });
  expect(found.terms).toHaveLength(5);
  expect(same(found.terms[4]?.coefficient ?? build.number(0), plain('24'))).toBe(true);
  expect(same(found.remainder?.power ?? build.number(0), plain('5'))).toBe(true);
});

test('a function on the real line is expanded on the side where its argument is real', () => {
  const found = expansionOf('\\operatorname{Ei}(\\arccos x)', { at: '1', terms: 1 });
  expect(found.side).toBe('left');
  expect(found.assumptions).toContain('x < 1');
});
