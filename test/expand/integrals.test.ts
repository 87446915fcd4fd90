/** Integrals with a parameter (Watson's lemma, moments), radii of convergence, complex quantities at cuts. Sources beside the rows; all from memory. */
import { describe, expect, test } from 'vitest';
import { build } from '../../src/expression/index.ts';
import { expansionOf, expectExpansion, latex, outcomeOf, plain, positive, same } from './tools.ts';

describe('large and small parameters in an integrand', () => {
  test.each([
    ['\\int_0^\\infty\\frac{e^{-t}}{1+xt}\\,dt', '0', 4, '1 - x + 2*x^2 - 6*x^3', '4'], // Stieltjes; Bender & Orszag 3.8
    ['\\int_0^\\infty\\frac{e^{-xt}}{\\sqrt{1+t}}\\,dt', 'inf', 3, '1/x - 1/(2*x^2) + 3/(4*x^3)', '4'], // Olver 3.3
    ['\\int_0^{10}\\frac{e^{-xt}}{1+t}\\,dt', 'inf', 3, '1/x - 1/x^2 + 2/x^3', '4'], // Bender & Orszag 6.4
    ['\\int_0^{\\pi/2}e^{-x\\sin t}\\,dt', 'inf', 3, '1/x + 1/x^3 + 9/x^5', '7'],
    ['\\int_{-\\infty}^{\\infty}e^{-xt^2}\\cos t\\,dt', 'inf', 3, 'sqrt(pi)*(x^(-1/2) - x^(-3/2)/4 + x^(-5/2)/32)', '7/2'], // exactly sqrt(pi/x) e^(-1/(4x))
    ['\\int_0^1\\frac{dt}{1+xt^2}', '0', 3, '1 - x/3 + x^2/5', '3'], // arctan(sqrt x)/sqrt x
    ['\\frac{1}{\\sqrt{2\\pi}}\\int_{-\\infty}^{\\infty}e^{-t^2/2-xt^4/24}\\,dt', '0', 3, '1 - x/8 + 35*x^2/384', '3'], // zero-dimensional quartic theory
  ] as const)('%s at %s', (text, at, terms, sum, power) => {
    expectExpansion(expansionOf(text, { at, side: at === '0' ? 'right' : 'both', terms }), sum, power, 0, positive('x'));
  });
  test('K_0 from its integral over cosh (DLMF 10.32.9, 10.40.2): prefactor and ratio', () => {
    const found = expansionOf('\\int_0^\\infty e^{-x\\cosh t}\\,dt', { at: 'inf', terms: 3 });
    expect(found.terms.map((t) => t.coefficient).map((e, k) => same(e, plain(['1', '-1/8', '9/128'][k] ?? '0')))).toEqual([true, true, true]);
    expect(found.divergent).toBe(true);
  });
  test('an exponentially small rest is not called exact; a Gaussian over the half line is', () => {
    const cut = expansionOf('\\int_{-1}^{1}e^{-xt^2}\\,dt', { at: 'inf' });
    expect(cut.exact).toBe(false);
    expect(cut.remainder).not.toBeNull();
    expect(expansionOf('\\int_0^\\infty e^{-xt^2}\\,dt', { at: 'inf' }).exact).toBe(true);
  });
  test.each([
    ['\\int_0^{3\\pi} e^{-x(\\cos t+\\cos(2t))}\\,dt', /monotone/],
    ['\\int_0^\\infty\\frac{e^{-xt}}{1-t}\\,dt', /regular/],
    ['\\int_0^\\infty e^{-x\\ln(1+t)}e^{t^2}\\,dt', /converge/],
    ['\\int_0^\\infty e^{-t}e^{xt^2}\\,dt', /kind/],
  ] as const)('%s is declined: the conditions of the lemma are not proven', (text, message) => {
    const found = outcomeOf(latex(text), text.includes('xt^2') ? { side: 'right' } : { at: 'inf' });
    expect(found.ok ? null : found.error.code).toBe('no-expansion');
    if (!found.ok) expect(found.error.message).toMatch(message);
  });
  test('a dropped part never survives a cancellation: I_(1/2)(x) - sqrt(2/(pi x)) sinh x', () => {
    const found = outcomeOf(latex('I_{1/2}(x)-\\sqrt{\\frac{2}{\\pi x}}\\sinh x'), { at: 'inf' });
    if (found.ok) expect(found.value.terms).toHaveLength(0);
  });
});

describe('radius of convergence', () => {
  test.each([
    ['\\ln(1+x)', '0', '1'],
    ['\\tan x', '0', 'pi/2'],
    ['\\tan x', '100', '100 - 63*pi/2'], // the nearest of infinitely many poles (2k + 1) pi/2
    ['\\frac{1}{1+x^2}', '1', 'sqrt(2)'],
    ['\\frac{x}{e^x-1}', '0', '2*pi'], // the pole at 0 is removable
    ['\\cot x', '0', 'pi'],
    ['\\frac{\\sin x}{x(1-x)}', '0', '1'],
    ['\\sqrt{1-x+x^2}', '0', '1'],
  ] as const)('%s at %s', (text, at, radius) => {
    expect(expansionOf(text, { at }).radius).toBeUndefined();
    const found = expansionOf(text, { at, radius: true });
    expect(found.radius).toBeDefined();
    expect(same(found.radius?.value ?? build.number(0), plain(radius))).toBe(true);
  });
  test('infinite for an entire function, zero for a divergent series', () => {
    expect(expansionOf('e^{\\sin x}', { radius: true }).radius).toEqual({ value: null });
    expect(expansionOf('\\psi(x)', { at: 'inf' }).divergent).toBe(true);
    expect(expansionOf('\\int_0^\\infty\\frac{e^{-t}}{1+xt}\\,dt', { side: 'right' }).radius?.value).toBeUndefined();
  });
});

describe('principal values', () => {
  test('sqrt and log on their cuts are continuous from above (DLMF 4.2)', () => {
    const i = build.constant('i');
    expect(same(expansionOf('\\sqrt{x}', { at: '-1', terms: 1 }).terms[0]?.coefficient ?? build.number(0), i)).toBe(true);
    expect(same(expansionOf('\\ln x', { at: '-1', terms: 1 }).terms[0]?.coefficient ?? build.number(0), build.product(i, build.constant('pi')))).toBe(true);
  });
  test('from below the cut the argument is -pi: sqrt(-1 - i x) leads with -i for x > 0 and with i for x < 0', () => {
    const found = expansionOf('\\sqrt{-1-ix}', { terms: 1 });
    expect(same(found.terms[0]?.coefficient ?? build.number(0), build.negation(build.constant('i')))).toBe(true);
    expect(same(found.left?.terms[0]?.coefficient ?? build.number(0), build.constant('i'))).toBe(true);
  });
});

describe('poles of constants', () => {
  test.each(['x+\\zeta(1)', 'x+\\Gamma(-1)', 'x+K(1)', 'x+\\psi(x-x)'])('%s has no value', (text) => {
    const found = outcomeOf(latex(text));
    expect(found.ok).toBe(false);
  });
});
