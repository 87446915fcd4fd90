/** Integrals of waves with a large parameter: stationary points and ends of the interval. */
import { describe, expect, it } from 'vitest';
import { expansionText } from '../../src/write/index.ts';
import { expansionOf, latex, outcomeOf } from './tools.ts';

const textOf = (formula: string, terms = 4): string => expansionText(expansionOf(formula, { at: 'inf', terms }));

describe('stationary phase', () => {
  it.each([
    // Fresnel integrals: DLMF 7.2.7, 7.2.8, 7.5.3, 7.12.2, 7.12.3.
    ['\\int_0^\\infty \\cos(x t^2)\\,dt', '√(2π)/(4√x)'],
    ['\\int_0^1 \\cos(x t^2)\\,dt', '√(2π)/(4√x) + sin(x)/(2x) − cos(x)/(4x²) − 3sin(x)/(8x³) + O(x⁻⁴)'],
    // pi J_0: DLMF 10.9.1, 10.17.3.
    ['\\int_0^\\pi \\cos(x \\sin t)\\,dt', '√π·sin(x)/√x + √π·cos(x)/√x + √π·sin(x)/(8x^(3/2)) − √π·cos(x)/(8x^(3/2)) + O(x^(−5/2))'],
    // (pi/2) H_0: DLMF 11.5.1, 11.6.1.
    ['\\int_0^{\\pi/2} \\sin(x\\cos t)\\,dt', '√π·sin(x)/(2√x) − √π·cos(x)/(2√x) + 1/x − √π·sin(x)/(16x^(3/2)) + O(x^(−3/2))'],
    // pi x^(-1/3) Ai(-x^(2/3)): DLMF 9.5.1, 9.7.9.
    ['\\int_0^\\infty \\cos(x(t^3/3-t))\\,dt', '√(2π)·sin(2x/3)/(2√x) + √(2π)·cos(2x/3)/(2√x) + 5√(2π)·sin(2x/3)/(96x^(3/2)) − 5√(2π)·cos(2x/3)/(96x^(3/2)) + O(x^(−5/2))'],
    // Re E_2(ix): DLMF 8.19.3, 8.20.2.
    ['\\int_1^\\infty \\frac{\\cos(x t)}{t^2}\\,dt', '−sin(x)/x + 2cos(x)/x² + 6sin(x)/x³ − 24cos(x)/x⁴ + O(x⁻⁵)'],
    // Compared with quadrature by mpmath 1.3.0 at x = 8 ... 170.
    ['\\int_0^1 \\frac{\\sin(x t)}{1+t}\\,dt', '1/x − cos(x)/(2x) − sin(x)/(4x²) + cos(x)/(4x³) + O(x⁻³)'],
    ['\\int_0^1 \\ln(t)\\cos(x t)\\,dt', '−π/(2x) + cos(x)/x² + sin(x)/x³ − 2cos(x)/x⁴ + O(x⁻⁵)'],
    ['\\int_0^1 \\cos(x t^3)\\,dt', '√3·Γ(1/3)/(6x^(1/3)) + sin(x)/(3x) − 2cos(x)/(9x²) − 10sin(x)/(27x³) + O(x⁻⁴)'],
  ])('%s', (formula, expected) => {
    expect(textOf(formula)).toBe(expected);
  });
  it('is marked as oscillating', () => {
    expect(expansionOf('\\int_0^1 \\cos(x t^2)\\,dt', { at: 'inf' }).oscillating).toBe(true);
  });
  it.each([
    // Exponentially small: pi x^(-1/3) Ai(x^(2/3)), DLMF 9.5.1, 9.7.5.
    ['\\int_0^\\infty \\cos(x(t^3/3+t))\\,dt'],
    ['\\int_0^\\infty t\\cos(x t)\\,dt'],
    ['\\int_0^1 \\frac{\\cos(x t)}{t}\\,dt'],
    ['\\int_0^2 \\frac{\\cos(x t)}{1-t}\\,dt'],
  ])('%s is declined', (formula) => {
    expect(outcomeOf(latex(formula), { at: 'inf' }).ok).toBe(false);
  });
});

describe('waves over a limit that grows', () => {
  it.each([
    // Si and Ci: DLMF 6.2.10, 6.2.13, 6.12.3, 6.12.4; Re E_2(ix)/x: DLMF 8.20.2; the Fresnel integral: DLMF 7.5.3, 7.12.2; the square of the sine through Si(2x).
    ['\\int_0^x \\frac{\\sin t}{t}\\,dt', 'π/2 − cos(x)/x − sin(x)/x² + 2cos(x)/x³ + O(x⁻⁴)'],
    ['\\int_x^\\infty \\frac{\\cos t}{t}\\,dt', '−sin(x)/x + cos(x)/x² + 2sin(x)/x³ − 6cos(x)/x⁴ + O(x⁻⁵)'],
    ['\\int_x^\\infty \\frac{\\cos t}{t^2}\\,dt', '−sin(x)/x² + 2cos(x)/x³ + 6sin(x)/x⁴ − 24cos(x)/x⁵ + O(x⁻⁶)'],
    ['\\int_0^x \\cos(t^2)\\,dt', '√(2π)/4 + sin(x²)/(2x) − cos(x²)/(4x³) − 3sin(x²)/(8x⁵) + O(x⁻⁷)'],
    ['\\int_x^\\infty \\frac{\\sin^2 t}{t^2}\\,dt', '1/(2x) + sin(2x)/(4x²) − cos(2x)/(4x³) − 3sin(2x)/(8x⁴) + O(x⁻⁵)'],
    // Compared with quadrature by mpmath 1.3.0 at x = 8 ... 170.
    ['\\int_x^\\infty \\frac{\\ln t\\cos t}{t^2}\\,dt', '−ln(x)·sin(x)/x² + 2ln(x)·cos(x)/x³ − cos(x)/x³ + 6ln(x)·sin(x)/x⁴ + O(x⁻⁴)'],
    ['\\int_x^{2x} \\frac{\\sin t}{t}\\,dt', 'cos(x)/x − cos(2x)/(2x) + sin(x)/x² − sin(2x)/(4x²) + O(x⁻³)'],
  ])('%s', (formula, expected) => {
    expect(textOf(formula)).toBe(expected);
  });
  it('has no value where it does not converge', () => {
    expect(outcomeOf(latex('\\int_x^\\infty t\\cos t\\,dt'), { at: 'inf' }).ok).toBe(false);
  });
});
