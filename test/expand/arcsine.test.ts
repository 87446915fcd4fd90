/** Inverse circular functions at their branch points, and those that are equal. */
import { describe, expect, it } from 'vitest';
import { expansionOf, expectExpansion } from './tools.ts';

describe('squares of inverse functions are analytic at the branch point', () => {
  it.each([
    // arccos^2 and arcosh^2 by the series of arcsin^2 (DLMF 4.24.1 squared; Abramowitz & Stegun 15.1.6 with 15.4, from memory): (arcsin s)^2 = s^2 + s^4/3 + 8 s^6/45, arccos x = 2 arcsin sqrt((1 - x)/2).
    ['(\\arccos x)^2', '1', '-2*(x-1) + (x-1)^2/3 - 4*(x-1)^3/45', '4'],
    ['(\\pi-\\arccos x)^2', '-1', '2*(x+1) + (x+1)^2/3 + 4*(x+1)^3/45', '4'],
    ['\\operatorname{arcosh}^2 x', '1', '2*(x-1) - (x-1)^2/3 + 4*(x-1)^3/45', '4'],
    ['\\arccos(1-x)^2', '0', '2*x + x^2/3 + 4*x^3/45', '4'],
  ])('%s at %s', (formula, at, sum, power) => {
    const found = expansionOf(formula, { at, terms: 3 });
    expect(found.side).toBe('both');
    expect(found.left).toBeUndefined();
    expectExpansion(found, sum, power);
  });
  it('odd powers stay one-sided', () => {
    expect(expansionOf('\\arccos x', { at: '1', terms: 2 }).side).not.toBe('both');
  });
});

describe('arctan(x/sqrt(1 - x^2)) is arcsin x (DLMF 4.24(iii))', () => {
  it.each([
    ['\\arcsin x - \\arctan\\frac{x}{\\sqrt{1-x^2}}', '0', '0'],
    ['\\arcsin x - \\arctan\\frac{x}{\\sqrt{1-x^2}}', '1/2', '0'],
    ['\\arccos x + \\arctan\\frac{x}{\\sqrt{1-x^2}}', '1/3', 'pi/2'],
  ])('%s at %s', (formula, at, value) => {
    expectExpansion(expansionOf(formula, { at, terms: 3 }), value, null);
  });
});
