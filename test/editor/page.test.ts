/** Numbers behind the page: ticks, validity range, the command that asks the same, intervals as typed. */
import { describe, expect, it } from 'vitest';
import { splitInterval } from '../../src/editor/interval.ts';
import { escapeMarkdown, table } from '../../src/editor/markdown.ts';
import { requestCommand } from '../../src/editor/requestCommand.ts';
import { constantsText, shortened } from '../../src/webview/figures.ts';
import { decades, errors, ordinate, pathThrough, powerOfTen, signedSpan, ticks, validity, worst } from '../../src/webview/plotMath.ts';

describe('plots', () => {
  it('has round ticks inside the range', () => expect(ticks({ low: -0.3, high: 0.3 }, 4)).toEqual([-0.2, 0, 0.2]));
  it('has no ticks where there is no range', () => expect(ticks({ low: 1, high: 1 }, 4)).toEqual([]));
  it('thins decades', () => expect(decades({ low: -14.2, high: -5.9 }, 4)).toEqual([-12, -9, -6]));
  it('writes powers of ten', () => expect([powerOfTen(-12), powerOfTen(0), powerOfTen(3)]).toEqual(['10⁻¹²', '1', '10³']));
  it('finds the longest run within the tolerance', () => expect(validity([0, 1, 2, 3, 4, 5], [1, 0.1, 0.1, 0.1, 1, 0.1], 0.5)).toEqual({ low: 1, high: 3 }));
  it('is not interrupted by one missing value', () => expect(validity([0, 1, 2], [0.1, null, 0.1], 0.5)).toEqual({ low: 0, high: 2 }));
  it('finds none where there is none', () => expect(validity([0, 1], [1, null], 0.5)).toBeNull());
  it('measures relative errors, and none at a zero', () => expect(errors({ x: [0, 1], f: [0, 2], sum: [0, 1] }, true)).toEqual([null, 0.5]));
  it('breaks a curve at missing values', () => expect(pathThrough([0, 1, 2, 3], [0, 1, null, 1], (x) => x, (y) => y, { low: 0, high: 1 })).toBe('M0.0 0.0L1.0 1.0M3.0 1.0'));
  it('shows bound and samples of a fit, and the tolerance where it is near', () => {
    const plot = { x: [0, 1, 2], error: [0.1, null, -0.4], bound: 0.5, tolerance: 1, measure: 'ulp' } as const;
    expect(signedSpan(plot)).toEqual({ low: -1.15, high: 1.15 });
    expect(signedSpan({ ...plot, tolerance: 100 }).high).toBeCloseTo(0.575);
    expect(signedSpan({ ...plot, error: [], bound: 0, tolerance: null })).toEqual({ low: -1.15, high: 1.15 });
    expect(worst(plot.x, plot.error)).toEqual({ at: 2, error: -0.4 });
    expect(worst([0], [null])).toBeNull();
  });
  it('shows all of the function', () => {
    const { low, high } = ordinate({ x: [0, 1], f: [-1, 1], sum: [-100, 100] });
    expect(low).toBeLessThan(-1);
    expect(high).toBeGreaterThan(1);
    expect(high).toBeLessThan(2);
  });
});

describe('figures', () => {
  it.each([
    ['5.427808e-12', 'above', '5.428e-12'],
    ['0.00006764483', 'above', '6.765e-5'],
    ['0.01506765', 'above', '0.01507'],
    ['0.01506765', 'below', '0.01506'],
    ['0.99999', 'above', '1'],
    ['0.5', 'below', '0.5'],
    ['12345', 'below', '1.234e4'],
    ['1234', 'above', '1234'],
    ['0', 'above', '0'],
    ['sqrt(2)', 'above', 'sqrt(2)'],
  ] as const)('%s from %s is %s', (decimal, side, expected) => expect(shortened(decimal, side)).toBe(expected));
});

describe('constants of the code', () => {
  const named = ['a', 'b', 'c', 'd'].map((name, i) => ({ name, value: String(i) }));
  it('names the first few', () => expect(constantsText(named)).toBe('a = 0, b = 1, c = 2 (+1)'));
  it('names one', () => expect(constantsText(named.slice(0, 1))).toBe('a = 0'));
});

describe('text', () => {
  it('splits intervals at the outer comma', () => {
    expect(splitInterval('-1/2, 1/2')).toEqual(['-1/2', '1/2']);
    expect(splitInterval('[0, max(1, 2)]')).toEqual(['0', 'max(1, 2)']);
    expect(splitInterval('1')).toBeNull();
    expect(splitInterval('1,,2')).toBeNull();
  });
  it('escapes what Markdown would read', () => expect(escapeMarkdown('a*b_c [d](e) <f> | O(x⁵)')).toBe('a\\*b\\_c \\[d\\]\\(e\\) &lt;f&gt; \\| O\\(x⁵\\)'));
  it('writes tables', () => expect(table(['a', 'b'], [['1', '2']])).toBe('| a | b |\n| :-- | :-- |\n| 1 | 2 |'));
  it('quotes for a shell', () =>
    expect(requestCommand("\\frac{y'}{x}", 'latex', { variable: 'x', interval: ['-1', '1'], assume: ['a > 0'] })).toBe("leading-order expand '\\frac{y'\\''}{x}' --language=latex --variable=x --interval=-1,1 --assume='a > 0'"));
});
