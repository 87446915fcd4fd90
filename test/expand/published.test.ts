/** Published expansions, exact coefficients and remainders. All quoted from memory: DLMF 4.6, 4.19, 4.24, 4.33, 4.38, 4.39; Abramowitz & Stegun (A&S) 3.6, 4.1, 4.3, 4.5, 4.6; others where named. */
import { describe, expect, test } from 'vitest';
import { build } from '../../src/expression/index.ts';
import { expansionText } from '../../src/write/index.ts';
import { expansionOf, expectExpansion, latex, outcomeOf, positive, type Request, same } from './tools.ts';

type Row = readonly [text: string, request: Request, sum: string, power: string | null, log?: number];

const regular: readonly Row[] = [
  ['\\tan^2 x', { terms: 3 }, 'x^2 + 2*x^4/3 + 17*x^6/45', '8'],
  ['\\frac{1}{1+x^2}', { terms: 5 }, '1 - x^2 + x^4 - x^6 + x^8', '10'],
  ['\\tan x', { terms: 4 }, 'x + x^3/3 + 2*x^5/15 + 17*x^7/315', '9'], // DLMF 4.19.3
  ['\\sec x', { terms: 4 }, '1 + x^2/2 + 5*x^4/24 + 61*x^6/720', '8'], // DLMF 4.19.5
  ['\\arcsin x', { terms: 4 }, 'x + x^3/6 + 3*x^5/40 + 5*x^7/112', '9'], // DLMF 4.24.1
  ['\\tan(\\sin x) - \\sin(\\tan x)', { terms: 2 }, 'x^7/30 + 29*x^9/756', '11'],
  ['e^{\\sin x}', { terms: 5 }, '1 + x + x^2/2 - x^4/8 - x^5/15', '6'], // A&S 4.5.67 and composition
  ['\\frac{x}{e^x-1}', { terms: 5 }, '1 - x/2 + x^2/12 - x^4/720 + x^6/30240', '8'], // DLMF 24.2.1
  ['\\sqrt{1+x}', { order: { num: 4n, den: 1n } }, '1 + x/2 - x^2/8 + x^3/16', '4'], // A&S 3.6.11
  ['\\arctan x', { at: '1', terms: 4 }, 'pi/4 + (x-1)/2 - (x-1)^2/4 + (x-1)^3/12', '5'],
  ['\\sin x', { at: 'pi/4', terms: 3 }, 'sqrt(2)/2*(1 + (x-pi/4) - (x-pi/4)^2/2)', '3'],
  ['(1+x)^{100}', { terms: 3 }, '1 + 100*x + 4950*x^2', '3'],
];
const singular: readonly Row[] = [
  ['\\frac{\\cos x}{x^2}', {}, '1/x^2 - 1/2 + x^2/24 - x^4/720', '6'],
  ['\\cot x', { terms: 3 }, '1/x - x/3 - x^3/45', '5'], // DLMF 4.19.6
  ['\\frac{1}{\\sin^2 x} - \\frac{1}{x^2}', { terms: 2 }, '1/3 + x^2/15', '4'],
  ['\\frac{1}{x}', {}, '1/x', null],
  ['\\frac{x^3+x^2}{x+1}', {}, 'x^2', null],
  ['\\operatorname{arcosh}(1+x)', { side: 'right', terms: 3 }, 'sqrt(2)*x^(1/2) - sqrt(2)/12*x^(3/2) + 3*sqrt(2)/160*x^(5/2)', '7/2'], // DLMF 4.38.4
  ['\\arccos x', { at: '1', side: 'left', terms: 2 }, 'sqrt(2)*(1-x)^(1/2) + sqrt(2)/12*(1-x)^(3/2)', '5/2'], // DLMF 4.24.2
  ['\\sqrt{1-\\cos x}', { side: 'right', terms: 2 }, 'sqrt(2)/2*x - sqrt(2)/48*x^3', '5'],
  ['\\ln\\sin x', { side: 'right', terms: 3 }, 'log(x) - x^2/6 - x^4/180', '6'], // A&S 4.3.71
  ['x^x', { side: 'right', terms: 3 }, '1 + x*log(x) + x^2*log(x)^2/2', '3', 3],
  ['\\frac{1}{1+\\ln x}', { side: 'right', terms: 2 }, '1/log(x) - 1/log(x)^2', '0', -3],
];
const infinite: readonly Row[] = [
  ['\\operatorname{arsinh} x', { at: 'inf', terms: 3 }, 'log(x) + log(2) + 1/(4*x^2)', '4'], // DLMF 4.38.2
  ['\\arctan x', { at: 'inf', terms: 3 }, 'pi/2 - 1/x + 1/(3*x^3)', '5'], // A&S 4.4.42
  ['\\sqrt{x^2+x+1}', { at: '-inf', terms: 3 }, '-x - 1/2 - 3/(8*x)', '2'],
  ['\\ln(x+\\ln x)', { at: 'inf', terms: 2 }, 'log(x) + log(x)/x', '2', 2],
  ['\\coth x - \\frac1x', { at: 'inf', terms: 3 }, '1 - 1/x + 2*exp(-2*x)', '0'],
  ['\\left(1+\\frac1x\\right)^x', { at: 'inf', terms: 3 }, 'exp(1)*(1 - 1/(2*x) + 11/(24*x^2))', '3'],
  ['\\frac{\\Gamma(x+a)}{\\Gamma(x+b)}', { at: 'inf', terms: 2 }, 'x^(a-b) + (a-b)*(a+b-1)/2*x^(a-b-1)', '2 + b - a'], // DLMF 5.11.13, whatever the sign of a - b
  ['\\frac{e^{1/x} - 1}{1/x}', { at: 'inf', terms: 3 }, '1 + 1/(2*x) + 1/(6*x^2)', '3'],
];

const groups: readonly (readonly [name: string, rows: readonly Row[]])[] = [
  ['regular points', regular],
  ['poles, branch points, logarithms', singular],
  ['infinity', infinite],
];
for (const [name, rows] of groups) {
  describe(name, () => {
    for (const [text, request, sum, power, log] of rows) {
      test(`${text} at ${request.at ?? '0'}`, () => {
        const assumptions = request.side === 'right' || request.at === 'inf' ? positive('x') : [];
        expectExpansion(expansionOf(text, request), sum, power, log ?? 0, assumptions);
      });
    }
  });
}

// (3 n)!/(n! (2 n)!) by Stirling's formula (DLMF 5.11.3): powers of the variable stand beside exponentials, so that no logarithm is left in an exponent.
test('binomial(3x, x) at infinity', () => {
  const found = expansionOf('\\binom{3x}{x}', { at: 'inf', terms: 2 });
  expectExpansion(found, '(27/4)^x*sqrt(3/(pi*x))/2*(1 - 7/(72*x))', '2', 0, positive('x'));
  expect(expansionText(found)).toBe('((27/4)^x·√(3/π)/(2√x))·(1 − 7/(72x) + O(x⁻²))');
});

describe('parameters', () => {
  test('1/sqrt(1 - v^2/c^2) in v', () => {
    expectExpansion(expansionOf('\\frac{1}{\\sqrt{1-v^2/c^2}}', { variable: 'v' }), '1 + v^2/(2*c^2) + 3*v^4/(8*c^4) + 5*v^6/(16*c^6)', '8');
  });
  test('ln x at a', () => {
    expectExpansion(expansionOf('\\ln x', { at: 'a', terms: 3, assumptions: positive('a') }), 'log(a) + (x-a)/a - (x-a)^2/(2*a^2)', '3', 0, positive('a'));
  });
  test('sqrt(a^2 + x^2) is |a| + ... until a has a sign', () => {
    const free = expansionOf('\\sqrt{a^2+x^2}', { terms: 2 });
    expect(same(free.terms[0]?.coefficient ?? build.number(0), build.call('abs', build.symbol('a')))).toBe(true);
    expect(free.assumptions).toContain('a != 0');
    expectExpansion(expansionOf('\\sqrt{a^2+x^2}', { terms: 2, assumptions: positive('a') }), 'a + x^2/(2*a)', '4', 0, positive('a'));
  });
  test('x^a (1+x)^b: symbolic exponents', () => {
    const found = expansionOf('x^a(1+x)^b', { side: 'right', terms: 2 });
    expect(same(found.terms[1]?.power ?? build.number(0), build.sum(build.symbol('a'), build.number(1)))).toBe(true);
    expect(same(found.terms[1]?.coefficient ?? build.number(0), build.symbol('b'))).toBe(true);
  });
  test('e^(a x) at infinity needs the sign of a', () => {
    const found = outcomeOf(latex('e^{ax}'), { at: 'inf' });
    expect(found.ok ? null : found.error.code).toBe('needs-assumption');
  });
  test('a compound variable', () => {
    const found = expansionOf('\\left(\\frac{1}{\\sqrt{1-v^2/c^2}}-1\\right)mc^2', { variable: '\\frac{v}{c}', terms: 2 });
    expectExpansion(found, 'm*v^2/2 + 3*m*v^4/(8*c^2)', '6');
    expect(same(found.local, latex('\\frac{v}{c}'))).toBe(true);
  });
});

describe('sides', () => {
  test('both sides differ: right at top, left beside it', () => {
    const found = expansionOf('\\sqrt{1-\\cos x}', { terms: 1 });
    expect(found.side).toBe('right');
    expectExpansion(found, 'sqrt(2)/2*x', '3');
    expectExpansion(found.left ?? found, '-sqrt(2)/2*x', '3');
  });
  test('a function that is real on one side only is answered there', () => {
    const found = expansionOf('\\sqrt{x}', {});
    expect(found.side).toBe('right');
    expect(found.assumptions).toContain('x > 0');
    expect(expansionOf('\\sqrt{1-x}', { at: '1' }).assumptions).toContain('x < 1');
  });
  test('log|x| serves both sides with L = log|x|', () => {
    const found = expansionOf('\\ln|x|', {});
    expect(found.side).toBe('both');
    expect(found.exact).toBe(true);
  });
  test('the cube root sign is real on both sides', () => {
    expectExpansion(expansionOf('\\sqrt[3]{x}', {}).left ?? expansionOf('x'), '-(-x)^(1/3)', null);
  });
});

describe('declined with a reason', () => {
  test.each([
    ['e^{1/x}', {}, 'no-expansion', /essential singularity/],
    ['\\sin(1/x)', {}, 'no-expansion', /oscillates/],
    ['\\frac{1}{\\sin x}', { at: 'inf' }, 'no-expansion', /oscillating/],
    ['\\frac{1}{\\ln x}', { side: 'right', order: { num: 2n, den: 1n } }, null, /./],
    ['\\frac{1}{1+\\ln x}', { side: 'right', order: { num: 2n, den: 1n } }, 'bad-request', /terms/],
    ['\\frac{1}{x-x}', {}, 'no-expansion', /zero/],
  ] as const)('%s %o', (text, request, code, message) => {
    const found = outcomeOf(latex(text), request as Request);
    expect(found.ok ? null : found.error.code).toBe(code);
    if (!found.ok) expect(found.error.message).toMatch(message);
  });
  test('100 000 nested signs get one plain sentence', () => {
    let tree = latex('x');
    for (let k = 0; k < 100000; k += 1) tree = build.negation(tree);
    const found = outcomeOf(tree);
    expect(found.ok ? null : found.error.code).toBe('bad-request');
  });
  test('e^(1/x) from the right is its own exact scale', () => {
    const found = expansionOf('e^{1/x}', { side: 'right' });
    expect(found.exact).toBe(true);
    expect(found.prefactor).not.toBeNull();
  });
});
