/** Laplace's method with maxima inside the interval, powers as exponentials, and maxima that move with the parameter. */
import { describe, expect, it } from 'vitest';
import { expansionText } from '../../src/write/index.ts';
import { expansionOf, positive } from './tools.ts';

const textOf = (formula: string, variable: string, terms = 3): string => expansionText(expansionOf(formula, { at: 'inf', variable, terms, assumptions: positive(variable) }));

describe('stationary points inside the interval', () => {
  it.each([
    // Each is a known function: 2 K_1(2x) (DLMF 10.32.10 with 10.40.2); the two wells of a double well (Zinn-Justin, from memory; checked by quadrature with mpmath 1.3.0); e^(2x) K_(1/3)-type integral of a cubic.
    ['\\int_0^\\infty e^{-x(t+1/t)}\\,dt', '(√π·e^(−2x)/√x)·(1 + 3/(16x) − 15/(512x²) + O(x⁻³))'],
    ['\\int_{-\\infty}^{\\infty} e^{-x(t^2-1)^2}\\,dt', '√π/√x + 3√π/(16x^(3/2)) + 105√π/(512x^(5/2)) + O(x^(−7/2))'],
    // 3 pi I_0 without what is exponentially small beside it: DLMF 10.32.1, 10.40.1.
    ['\\int_0^{3\\pi} e^{-x\\cos t}\\,dt', '(3√(2π)·e^x/(2√x))·(1 + 1/(8x) + 9/(128x²) + O(x⁻³))'],
    ['\\int_0^\\infty e^{-x(t^3-3t)}\\,dt', '(√(3π)·e^(2x)/(3√x))·(1 + 5/(144x) + 385/(41472x²) + O(x⁻³))'],
  ])('%s', (formula, expected) => {
    expect(textOf(formula, 'x')).toBe(expected);
  });
});

describe('large powers', () => {
  it.each([
    // Wallis's integrals are ratios of gamma functions (DLMF 5.12.2, 5.11.13); the beta function B(n + 1, 2n + 1) by Stirling (DLMF 5.11.3).
    ['\\int_0^{\\pi/2}\\cos^n\\theta\\,d\\theta', '√(2π)/(2√n) − √(2π)/(8n^(3/2)) + √(2π)/(64n^(5/2)) + O(n^(−7/2))'],
    ['\\int_0^1 (1-t^2)^n\\,dt', '√π/(2√n) − 3√π/(16n^(3/2)) + 25√π/(256n^(5/2)) + O(n^(−7/2))'],
    ['\\int_0^1 \\frac{t^n}{1+t}\\,dt', '1/(2n) − 1/(4n²) + 1/(8n⁴) + O(n⁻⁶)'],
    ['\\int_0^1 t^n(1-t)^{2n}\\,dt', '(2√(3π)·(4/27)ⁿ/(9√n))·(1 − 17/(72n) + 865/(10368n²) + O(n⁻³))'],
  ])('%s', (formula, expected) => {
    expect(textOf(formula, 'n')).toBe(expected);
  });
});

describe('maxima that move', () => {
  it.each([
    // Stirling: DLMF 5.11.3. 2 sqrt(x) K_1(2 sqrt x): DLMF 10.32.10, 10.40.2.
    ['\\int_0^\\infty e^{-t} t^{x}\\,dt', '√(2π)·√x·x^x·e^(−x)·(1 + 1/(12x) + 1/(288x²) + O(x⁻³))'],
    ['\\int_0^\\infty e^{-t-x/t}\\,dt', '√π·x^(1/4)·e^(−2√x)·(1 + 3/(16√x) − 15/(512x) + O(x^(−3/2)))'],
    // The Gamow peak of thermonuclear rates (common practice), exponent 3 (x/2)^(2/3).
    ['\\int_0^\\infty e^{-t-x/\\sqrt{t}}\\,dt', '(√(3π)·4^(1/3)·x^(1/3)·e^(−3·2^(1/3)·x^(2/3)/2)/3)·(1 + 5·4^(1/3)/(36x^(2/3)) − 35·2^(1/3)/(1296x^(4/3)) + O(x⁻²))'],
  ])('%s', (formula, expected) => {
    expect(textOf(formula, 'x')).toBe(expected);
  });
});
