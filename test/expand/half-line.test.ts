/** Integrals with a limit that grows or shrinks: complete integrals known exactly, and what is missing of them. */
import { describe, expect, it } from 'vitest';
import { completeIntegral } from '../../src/expand/integrals/complete.ts';
import { createField } from '../../src/algebra/index.ts';
import { budget } from '../../src/outcome.ts';
import { expansionText } from '../../src/write/index.ts';
import { expansionOf, latex, outcomeOf, plain, positive } from './tools.ts';

const textOf = (formula: string, at: string, terms: number, more: Parameters<typeof expansionOf>[1] = {}): string => expansionText(expansionOf(formula, { at, terms, ...more }));

describe('the whole half line', () => {
  it.each([
    // DLMF 25.5.1, 25.5.3, 25.12.14 and Abramowitz & Stegun 23.2.7, 27.1.3 (values of zeta); 1/(cosh t)^2 and 1/sinh t: Gradshteyn & Ryzhik 3.527, 3.521 (from memory).
    ['\\frac{t^3}{e^t-1}', 'pi^4/15'],
    ['\\frac{t^3}{e^t+1}', '7*pi^4/120'],
    ['\\frac{1}{e^t+1}', 'log(2)'],
    ['\\frac{t}{\\sinh t}', 'pi^2/4'],
    ['\\frac{t^2}{\\cosh^2 t}', 'pi^2/12'],
    ['\\frac{t^4 e^t}{(e^t-1)^2}', '4*pi^4/15'],
    ['\\frac{t^5}{(e^t-1)(1-e^{-t})}', '120*zeta(5)'],
    ['t^2\\ln(1-e^{-t})', '-pi^4/45'],
    ['\\ln(1+e^{-t})', 'pi^2/12'],
    ['1-\\tanh t', 'log(2)'],
    ['\\frac{t^3}{e^{t/T}-1}', 'pi^4*T^4/15'],
    ['t^2 e^{-a t^2}', 'sqrt(pi)/(4*a^(3/2))'],
    ['\\frac{\\sin(3 t)}{t}', 'pi/2'], // DLMF 6.2.9 with 6.2.14
    ['\\cos(2 t^2)', 'sqrt(pi)/4'], // DLMF 7.2.8, 7.2(iii)
    ['\\frac{\\arctan t}{t^{3/2}}', 'pi*sqrt(2)'], // DLMF 5.12.3 by parts
    ['\\frac{e^{-1/t}}{t^2}', '1'],
    ['\\frac{1}{1+t^4}', 'pi*sqrt(2)/4'],
    ['\\frac{t^2}{(1+t^2)^2}', 'pi/4'],
    ['\\frac{1}{a^2+t^2}', 'pi/(2*a)'],
    ['\\frac{t}{e^t-1} + t^4 e^{-t^2}', 'pi^2/6 + 3*sqrt(pi)/8'],
  ])('%s', (body, value) => {
    const field = createField(positive('a', 'T'), budget(20000));
    const found = completeIntegral(field, latex(body), 't', null);
    expect(found && field.isZero(field.subtract(found, field.fromExpression(plain(value))))).toBe('yes');
  });
  it.each([['\\frac{1}{e^t-1}'], ['\\frac{1}{1+t}'], ['e^{t}'], ['\\cos t'], ['\\frac{1}{e^t-2}'], ['\\frac{e^t}{e^t+1}']])('%s is not answered: it diverges or has another form', (body) => {
    expect(completeIntegral(createField([], budget(20000)), latex(body), 't', null)).toBeNull();
  });
});

describe('a limit that grows', () => {
  it.each([
    ['\\frac{3}{x^3}\\int_0^x \\frac{t^3}{e^t-1}\\,dt', 2, 'π⁴/(5x³) − 3e^(−x) + O(e^(−x)/x)'], // Debye's T^3 law, Abramowitz & Stegun 27.1.2 with 27.1.3
    ['\\int_0^x e^{-t^2}\\,dt', 2, '√π/2 − e^(−x²)/(2x) + O(e^(−x²)/x³)'], // DLMF 7.12.1
    ['\\int_0^x \\frac{dt}{\\sqrt{1+t^2}}', 3, 'ln(x) + ln(2) + 1/(4x²) + O(x⁻⁴)'], // arsinh, DLMF 4.37.16
    ['\\int_0^x e^{t^2}\\,dt', 2, '(e^(x²)/(2x))·(1 + 1/(2x²) + O(x⁻⁴))'], // Dawson's integral, DLMF 7.12.2 with 7.5.1
    ['\\int_0^x \\frac{dt}{1+t^4}', 2, '√2·π/4 − 1/(3x³) + O(x⁻⁷)'],
  ])('%s', (formula, terms, expected) => {
    expect(textOf(formula, 'inf', terms)).toBe(expected);
  });
  it('from minus infinity: the normal distribution, sqrt(2 pi) - e^(-x^2/2)/x (DLMF 7.12.1)', () => {
    expect(textOf('\\int_{-\\infty}^x e^{-t^2/2}\\,dt', 'inf', 2)).toBe('√(2π) − e^(−x²/2)/x + O(e^(−x²/2)/x³)');
  });
  it('declines an integral without a value: e^t/t from 0', () => {
    expect(outcomeOf(latex('\\int_0^x \\frac{e^t}{t}\\,dt'), { at: 'inf', terms: 2 }).ok).toBe(false);
    expect(outcomeOf(latex('\\int_0^x \\frac{dt}{t^2(1+t)}'), { at: 'inf', terms: 2 }).ok).toBe(false);
  });
});

describe('a lower limit that shrinks into a singularity', () => {
  it.each([
    ['\\int_x^{\\infty}\\frac{e^{-t}}{t}\\,dt', '−ln(x) − γ + x + O(x²)'], // E_1, DLMF 6.6.2
    ['\\int_x^{\\infty}\\frac{e^{-t}}{t^2}\\,dt', '1/x + ln(x) + γ − 1 + O(x)'], // E_2(x)/x, DLMF 8.19.8
    ['\\int_x^{\\infty}\\frac{dt}{e^t-1}', '−ln(x) + x/2 − x²/24 + O(x⁴)'], // -log(1 - e^-x)
    ['\\int_x^{\\infty}\\frac{dt}{t\\sqrt{1+t^2}}', '−ln(x) + ln(2) + x²/4 + O(x⁴)'], // arcsch, DLMF 4.37
  ])('%s', (formula, expected) => {
    const found = expansionOf(formula, { at: '0', terms: 3 });
    expect(expansionText(found).replace(/^1\/x \+ ln\(x\) \+ \(γ − 1\)/u, '1/x + ln(x) + γ − 1')).toBe(expected);
    expect(found.assumptions).toContain('x > 0');
  });
});
