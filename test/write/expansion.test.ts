import { describe, expect, it } from 'vitest';
import { build, PLAIN_STYLE } from '../../src/expression/index.ts';
import { continuationLatex, expansionLatex, expansionNumeric, expansionText, remainderLatex } from '../../src/write/index.ts';
import { about, atInfinity, expansionOf, n, x } from './samples.ts';

const { call, constant, power, product, quotient, squareRoot, sum, symbol } = build;
const sin = call('sin', x);

/** tan^2 x (DLMF 4.19.3 squared). */
const tanSquared = expansionOf(power(call('tan', x), 2), [[1, 2], [[2, 3], 4], [[17, 45], 6]], [8]);
const v = symbol('v');
const c = symbol('c');
/** The Lorentz factor (common practice): coefficients 1, 1/2, 3/8, 5/16 in v/c. */
const lorentz = expansionOf(sin, [[1, 0], [quotient(n(1), product(n(2), power(c, 2))), 2], [quotient(n(3), product(n(8), power(c, 4))), 4], [quotient(n(5), product(n(16), power(c, 6))), 6]], [8], { variable: v, local: v });
/** ln x about a (DLMF 4.6.1). */
const a = symbol('a');
const logAbout = expansionOf(call('log', x), [[call('log', a), 0], [quotient(n(1), a), 1], [quotient(n(-1), product(n(2), power(a, 2))), 2]], [3], about(a));
/** Stirling (DLMF 5.11.3). */
const stirling = expansionOf(call('gamma', x), [[1, 0], [[1, 12], 1], [[1, 288], 2], [[-139, 51840], 3]], [4], {
  ...atInfinity(),
  divergent: true,
  prefactor: product(squareRoot(quotient(product(n(2), constant('pi')), x)), power(quotient(x, constant('e')), x)),
});

describe('expansions in LaTeX', () => {
  it.each([
    ['sin', expansionOf(sin, [[1, 1], [[-1, 6], 3], [[1, 120], 5]], [7]), 'x - \\frac{x^3}{6} + \\frac{x^5}{120} + O(x^7)'],
    ['tan^2', tanSquared, 'x^2 + \\frac{2x^4}{3} + \\frac{17x^6}{45} + O(x^8)'],
    ['Lorentz factor', lorentz, '1 + \\frac{v^2}{2c^2} + \\frac{3v^4}{8c^4} + \\frac{5v^6}{16c^6} + O(v^8)'],
    ['cos x / x^2', expansionOf(sin, [[1, -2], [[-1, 2], 0], [[1, 24], 2]], [4]), '\\frac{1}{x^2} - \\frac{1}{2} + \\frac{x^2}{24} + O(x^4)'],
    ['Puiseux', expansionOf(sin, [[squareRoot(n(2)), [1, 2]], [quotient(product(n(-1), squareRoot(n(2))), n(12)), [3, 2]]], [[5, 2]]), '\\sqrt{2x} - \\frac{\\sqrt{2} x^{3/2}}{12} + O(x^{5/2})'],
    ['log about a', logAbout, '\\ln a + \\frac{x - a}{a} - \\frac{(x - a)^2}{2a^2} + O((x - a)^3)'],
    ['Stirling', stirling, '\\sqrt{\\frac{2\\pi}{x}} \\left(\\frac{x}{e}\\right)^x \\left(1 + \\frac{1}{12x} + \\frac{1}{288x^2} - \\frac{139}{51840x^3} + O(x^{-4})\\right)'],
    ['digamma at infinity', expansionOf(sin, [[1, 0, 1], [[-1, 2], 1], [[-1, 12], 2]], [4], atInfinity()), '\\ln x - \\frac{1}{2x} - \\frac{1}{12x^2} + O(x^{-4})'],
    ['a local variable with a fraction stays outside', expansionOf(sin, [[quotient(squareRoot(n(2)), n(2)), 0], [quotient(squareRoot(n(2)), n(2)), 1]], [2], about(quotient(constant('pi'), n(4)))), '\\frac{\\sqrt{2}}{2} + \\frac{\\sqrt{2}}{2} \\left(x - \\frac{\\pi}{4}\\right) + O\\left(\\left(x - \\frac{\\pi}{4}\\right)^2\\right)'],
    ['a local variable that is a sum stays together', expansionOf(sin, [[1, 0], [1, 1]], [2], about(n(1))), '1 + (x - 1) + O((x - 1)^2)'],
    ['logarithms in the remainder', expansionOf(sin, [[1, 1, 1]], [2, 2], atInfinity()), '\\frac{\\ln x}{x} + O\\left(\\frac{\\ln^2 x}{x^2}\\right)'],
    // Stirling's prefactor as an engine finds it, and as it is printed (DLMF 5.11.3).
    ['e^(x ln x - x)', { ...stirling, prefactor: product(squareRoot(n(2)), squareRoot(constant('pi')), squareRoot(quotient(n(1), x)), power(constant('e'), product(x, sum(call('log', x), n(-1))))), terms: stirling.terms.slice(0, 2) }, '\\frac{\\sqrt{2\\pi} x^x e^{-x}}{\\sqrt{x}} \\left(1 + \\frac{1}{12x} + O(x^{-4})\\right)'],
    // Central binomial coefficients (common practice): 4^n / sqrt(pi n).
    ['e^(2 n ln 2)', expansionOf(x, [[1, 0], [[-1, 8], 1]], [2], { ...atInfinity(symbol('n')), prefactor: quotient(power(constant('e'), product(n(2), symbol('n'), call('log', n(2)))), product(squareRoot(constant('pi')), squareRoot(symbol('n')))) }), '\\frac{4^n}{\\sqrt{\\pi n}} \\left(1 - \\frac{1}{8n} + O(n^{-2})\\right)'],
    ['a coefficient with fractions inside', expansionOf(x, [[sum(quotient(product(n(3), call('log', n(2))), n(8)), n(3, 16)), 1]], [2]), '\\frac{3(2\\ln 2 + 1) x}{16} + O(x^2)'],
    ['negative powers of e', expansionOf(x, [[power(constant('e'), -1), 1]], [2]), '\\frac{x}{e} + O(x^2)'],
    ['exact', expansionOf(quotient(n(1), x), [[1, -1]], null), '\\frac{1}{x}'],
  ])('%s', (_, expansion, latex) => {
    expect(expansionLatex(expansion)).toBe(latex);
  });

  it('follows the document', () => {
    const style = { ...PLAIN_STYLE, order: { macro: '\\mathcal{O}', little: 'o', argument: 'growing' as const }, coefficient: 'outside' as const, fraction: '\\tfrac' as const };
    expect(expansionLatex(tanSquared, style)).toBe('x^2 + \\tfrac{2}{3} x^4 + \\tfrac{17}{45} x^6 + \\mathcal{O}\\left(x^8\\right)');
    expect(expansionLatex(tanSquared, { ...PLAIN_STYLE, fraction: 'slash', ending: 'dots' })).toBe('x^2 + 2x^4/3 + 17x^6/45 + \\cdots');
    expect(continuationLatex(tanSquared, { ...PLAIN_STYLE, ending: 'none' })).toBe('\\approx x^2 + \\frac{2x^4}{3} + \\frac{17x^6}{45}');
    expect(remainderLatex(tanSquared, { ...PLAIN_STYLE, order: { macro: '\\order', little: 'o', argument: 'braces' } })).toBe('\\order{x^8}');
  });
});

describe('expansions as one line', () => {
  it.each([
    [expansionOf(sin, [[1, 1], [[-1, 6], 3]], [5]), 'x − x³/6 + O(x⁵)'],
    [tanSquared, 'x² + 2x⁴/3 + 17x⁶/45 + O(x⁸)'],
    [lorentz, '1 + v²/(2c²) + 3v⁴/(8c⁴) + 5v⁶/(16c⁶) + O(v⁸)'],
    [expansionOf(sin, [[1, [-3, 2]]], [[1, 2]]), 'x^(−3/2) + O(√x)'],
    [logAbout, 'ln(a) + (x − a)/a − (x − a)²/(2a²) + O((x − a)³)'],
    [stirling, '√(2π/x)·(x/e)^x·(1 + 1/(12x) + 1/(288x²) − 139/(51840x³) + O(x⁻⁴))'],
  ])('%#', (expansion, text) => {
    expect(expansionText(expansion)).toBe(text);
  });
});

describe('expansions for a numeric check', () => {
  it('sum, scale and symbols', () => {
    expect(expansionNumeric(tanSquared)).toEqual({ syntax: 'mpmath', sum: 'x**2 + 2*x**4/3 + 17*x**6/45', scale: 'fabs(x)**8', symbols: { x: 'x' } });
    expect(expansionNumeric(stirling)).toEqual({
      syntax: 'mpmath',
      sum: 'sqrt(2*pi/x)*(x/exp(1))**x*(1 + 1/(12*x) + 1/(288*x**2) - 139/(51840*x**3))',
      scale: 'fabs(x)**(-4)*fabs(sqrt(2*pi/x)*(x/exp(1))**x)',
      symbols: { x: 'x' },
    });
  });
  it('gives every symbol a name of its own that is no name of mpmath or Python', () => {
    const names = ['\\epsilon', 'v_0', '\\lambda', '\\gamma', 'e', 'I', '\\lambda_', "x'", 'k_B', 'v_{max}', 'v_max'];
    const many = expansionOf(sin, [[1, 0], [product(...names.map(symbol)), 1]], [2]);
    const { symbols } = expansionNumeric(many);
    expect(symbols).toMatchObject({ epsilon: '\\epsilon', v_0: 'v_0', lambda_: '\\lambda', gamma_: '\\gamma', e_: 'e', I_: 'I', k_B: 'k_B' });
    expect(Object.keys(symbols)).toHaveLength(names.length + 1);
  });
  it('an oscillating factor counts by its envelope', () => {
    const phase = sum(x, quotient(product(n(-1), constant('pi')), n(4)));
    const bessel = expansionOf(sin, [[1, 0, 0, call('cos', phase)]], [1, 0, call('sin', phase)], { ...atInfinity(), oscillating: true, prefactor: squareRoot(quotient(n(2), product(constant('pi'), x))) });
    expect(expansionNumeric(bessel).scale).toBe('fabs(x)**(-1)*fabs(sqrt(2/(pi*x)))');
  });
});
