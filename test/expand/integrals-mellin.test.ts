/** Integrals over the half line that expand with logarithms: residues of Mellin transforms, and Watson's lemma with logarithms at the end. */
import { describe, expect, it } from 'vitest';
import { expansionText } from '../../src/write/index.ts';
import { expansionOf, latex, outcomeOf, positive } from './tools.ts';

const textOf = (formula: string, at: string, terms = 4): string => expansionText(expansionOf(formula, { at, side: at === '0' ? 'right' : 'both', terms }));

describe('two scales on the half line', () => {
  it.each([
    // e^x E_1(x) and e^(1/x) E_1(1/x)/x: DLMF 6.2.1, 6.6.2, 6.12.1.
    ['\\int_0^\\infty \\frac{e^{-t}}{x+t}\\,dt', '0', '−ln(x) − γ − x·ln(x) + (1 − γ)·x + O(x²·ln(x))'],
    ['\\int_0^\\infty \\frac{e^{-t}}{x+t}\\,dt', 'inf', '1/x − 1/x² + 2/x³ − 6/x⁴ + O(x⁻⁵)'],
    ['\\int_0^\\infty \\frac{e^{-t}}{1+x t}\\,dt', 'inf', 'ln(x)/x − γ/x + ln(x)/x² + (1 − γ)/x² + O(ln(x)/x³)'],
    // e^x Gamma(1/2, x): DLMF 8.7.3.
    ['\\int_0^\\infty \\frac{e^{-t}}{\\sqrt{x+t}}\\,dt', '0', '√π − 2√x + √π·x − 4x^(3/2)/3 + O(x²)'],
    // 2 sqrt(x) K_1(2 sqrt x) and 2 K_0(2 sqrt x): DLMF 10.32.10, 10.31.1, 10.31.2.
    ['\\int_0^\\infty e^{-t-x/t}\\,dt', '0', '1 + x·ln(x) + (2γ − 1)·x + x²·ln(x)/2 + O(x²)'],
    ['\\int_0^\\infty e^{-t-x/t}\\,\\frac{dt}{t}', '0', '−ln(x) − 2γ − x·ln(x) + (2 − 2γ)·x + O(x²·ln(x))'],
    // log(x)/(x - 1), by partial fractions.
    ['\\int_0^\\infty \\frac{dt}{(1+t)(x+t)}', '0', '−ln(x) − x·ln(x) − x²·ln(x) − x³·ln(x) + O(x⁴·ln(x))'],
    // pi/2 e^(-x): DLMF 1.14(vii).
    ['\\int_0^\\infty \\frac{\\cos(x t)}{1+t^2}\\,dt', '0', 'π/2 − πx/2 + πx²/4 − πx³/12 + O(x⁴)'],
    // The auxiliary functions f and g of the sine and cosine integrals: DLMF 6.7.13, 6.7.14, 6.12.3, 6.12.4.
    ['\\int_0^\\infty \\frac{\\sin t}{x+t}\\,dt', 'inf', '1/x − 2/x³ + 24/x⁵ − 720/x⁷ + O(x⁻⁹)'],
    ['\\int_0^\\infty \\frac{\\cos t}{x+t}\\,dt', 'inf', '1/x² − 6/x⁴ + 120/x⁶ − 5040/x⁸ + O(x⁻¹⁰)'],
    ['\\int_0^\\infty \\frac{\\sin t}{x+t}\\,dt', '0', 'π/2 + x·ln(x) + (γ − 1)·x − πx²/4 + O(x³·ln(x))'],
    // K(sqrt(1 - x^2)): DLMF 19.2.20 with 19.12.1.
    ['\\int_0^\\infty \\frac{dt}{\\sqrt{(t^2+1)(t^2+x^2)}}', '0', '−ln(x) + 2ln(2) − x²·ln(x)/4 + (2ln(2) − 1)·x²/4 + O(x⁴·ln(x))'],
    // Compared with quadrature by mpmath 1.3.0 at x = 1/4 ... 1/300.
    ['\\int_0^\\infty \\frac{\\ln t\\, e^{-t}}{x+t}\\,dt', '0', '−ln²(x)/2 + γ²/2 − π²/12 − x·ln²(x)/2 + (12 − 12γ + 6γ² − π²)·x/12 + O(x²·ln²(x))'],
    ['\\int_0^\\infty \\frac{t}{(e^t-1)(x+t)}\\,dt', '0', '−ln(x) − x·ln(x)/2 + (ln(2π) − γ)·x/2 − x²·ln(x)/12 + O(x²)'],
    ['\\int_0^\\infty \\frac{1-\\cos(x t)}{t^2(1+t)}\\,dt', '0', '−x²·ln(x)/2 + (3 − 2γ)·x²/4 + πx³/12 + x⁴·ln(x)/24 + O(x⁴)'],
    ['\\int_0^\\infty \\frac{\\arctan(x t)}{1+t^2}\\,dt', '0', '−x·ln(x) + x − x³·ln(x)/3 + x³/9 + O(x⁵·ln(x))'],
  ])('%s at %s', (formula, at, expected) => {
    expect(textOf(formula, at)).toBe(expected);
  });
  it('tells a divergent series from a convergent one', () => {
    expect(expansionOf('\\int_0^\\infty \\frac{e^{-t}}{x+t}\\,dt', { at: 'inf' }).divergent).toBe(true);
    expect(expansionOf('\\int_0^\\infty \\frac{e^{-t}}{x+t}\\,dt', { side: 'right' }).divergent).toBe(false);
  });
  it.each([['\\int_0^\\infty \\frac{1}{x+t}\\,dt'], ['\\int_0^\\infty \\frac{e^{t}}{x+t}\\,dt'], ['\\int_0^\\infty \\frac{e^{-t}}{t(x+t)}\\,dt'], ['\\int_0^\\infty \\frac{e^{-t}}{x-t}\\,dt']])('%s has no value', (formula) => {
    expect(outcomeOf(latex(formula), { side: 'right' }).ok).toBe(false);
  });
});

describe('kernels that become singular at an end or inside a finite range', () => {
  it.each([
    // By partial fractions: log((1+x)/x); the dilogarithm Li_2(-1/x): DLMF 25.12.1, 25.12.4.
    ['\\int_0^1 \\frac{\\ln t}{x+t}\\,dt', '0', '−ln²(x)/2 − π²/6 + x − x²/4 + O(x³)'],
    // arsinh(1/x) + arsinh(2/x): DLMF 4.37.16.
    ['\\int_{-1}^{2} \\frac{dt}{\\sqrt{x^2+t^2}}', '0', '−2ln(x) + 3ln(2) + 5x²/16 − 51x⁴/512 + O(x⁶)'],
    // cos x (Ci(1+x) - Ci x) + sin x (Si(1+x) - Si x): DLMF 6.2.9, 6.2.11.
    ['\\int_0^1 \\frac{\\cos t}{x+t}\\,dt', '0', '−ln(x) + Ci(1) − γ + (cos(1) + Si(1))·x + x²·ln(x)/2 + O(x²)'],
    // Compared with quadrature by mpmath 1.3.0 at x = 0.1, 0.02, 0.004.
    ['\\int_0^1\\frac{e^t}{x^2+t^2}\\,dt', '0', 'π/(2x) − ln(x) + 1 − γ + Ei(1) − e − πx/4 + O(x²·ln(x))'],
    ['\\int_0^1 \\frac{\\cos t}{1+x t}\\,dt', 'inf', 'ln(x)/x + (Ci(1) − γ)/x + (cos(1) + Si(1))/x² − ln(x)/(2x³) + O(x⁻³)'],
    ['\\int_0^1 \\frac{e^{-t}}{\\sqrt{x+t}}\\,dt', '0', '√π·erf(1) − 2√x + e^(−1)·(√π·e·erf(1) + 1)·x − 4x^(3/2)/3 + O(x²)'],
    ['\\int_1^2 \\frac{e^t}{x+t-1}\\,dt', '0', '−e·ln(x) + e·(Ei(1) − γ) + e·x·ln(x) + e·(e − Ei(1) + γ − 1)·x + O(x²·ln(x))'],
    ['\\int_0^1 \\frac{\\ln^2 t}{x^2+t^2}\\,dt', '0', 'π·ln²(x)/(2x) + π³/(8x) − 2 + 2x²/27 + O(x⁴)'],
  ])('%s at %s', (formula, at, expected) => {
    expect(textOf(formula, at)).toBe(expected);
  });
  it.each([['\\int_0^1 \\frac{\\cos t}{x-t}\\,dt'], ['\\int_0^1 \\frac{\\cos t}{t(x+t)}\\,dt'], ['\\int_0^1 \\frac{\\cos t\\,\\cos(t/x)}{x+t}\\,dt']])('%s is declined', (formula) => {
    expect(outcomeOf(latex(formula), { side: 'right' }).ok).toBe(false);
  });
});

describe('logarithms at the end that matters', () => {
  it.each([
    // Gamma'(1) = -gamma: DLMF 5.4.12; Wong, Asymptotic Approximations of Integrals, ch. 2 (from memory).
    ['\\int_0^\\infty e^{-x t}\\ln t\\,dt', '−ln(x)/x − γ/x'],
    ['\\int_0^\\infty e^{-x t}\\ln^2 t\\,dt', 'ln²(x)/x + 2γ·ln(x)/x + (π² + 6γ²)/(6x)'],
    // Compared with quadrature by mpmath 1.3.0 at x = 8 ... 170.
    ['\\int_0^1 e^{-x t^2}\\ln(t)\\cos t\\,dt', '−√π·ln(x)/(4√x) − √π·(γ + 2ln(2))/(4√x) + √π·ln(x)/(16x^(3/2)) + √π·(γ + 2ln(2) − 2)/(16x^(3/2)) + O(ln(x)/x^(5/2))'],
  ])('%s', (formula, expected) => {
    expect(textOf(formula, 'inf')).toBe(expected);
  });
});

describe('smoothed steps: degenerate electrons at low temperature', () => {
  it.each([
    // Sommerfeld's expansion: Ashcroft & Mermin, Solid State Physics, eq. (2.70) and appendix C (from memory); Fermi-Dirac integrals: DLMF 25.12(iii).
    ['\\int_0^\\infty \\frac{\\sqrt{t}}{e^{(t-\\mu)/T}+1}\\,dt', '2μ^(3/2)/3 + π²T²/(12√μ) + 7π⁴T⁴/(960μ^(5/2)) + 31π⁶T⁶/(4608μ^(9/2)) + O(T⁸)'],
    ['\\int_0^\\infty \\frac{t^2}{e^{(t-\\mu)/T}+1}\\,dt', 'μ³/3 + π²μT²/3 + O(T³)'],
    // By parts three times the row before.
    ['\\int_0^\\infty \\frac{t^3 e^{(t-\\mu)/T}}{T(e^{(t-\\mu)/T}+1)^2}\\,dt', 'μ³ + π²μT² + O(T³)'],
    // T log(1 + e^(1/T)).
    ['\\int_0^\\infty \\frac{dt}{e^{(t-1)/T}+1}', '1 + O(T)'],
  ])('%s', (formula, expected) => {
    expect(expansionText(expansionOf(formula, { variable: 'T', side: 'right', assumptions: positive('\\mu') }))).toBe(expected);
  });
  it.each([['\\int_0^\\infty \\frac{\\sqrt{t}}{e^{(t-1)/T}-1}\\,dt'], ['\\int_0^\\infty \\frac{e^{t^2}}{e^{(t-1)/T}+1}\\,dt'], ['\\int_0^\\infty \\frac{1}{t(e^{(t-1)/T}+1)}\\,dt']])('%s has no value', (formula) => {
    expect(outcomeOf(latex(formula), { variable: 'T', side: 'right' }).ok).toBe(false);
  });
});
