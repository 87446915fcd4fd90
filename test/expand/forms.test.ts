/** O-terms, derivatives, integrals, sums, unspecified functions, several small quantities, roots. Sources beside the rows; all from memory. */
import { describe, expect, test } from 'vitest';
import { expandRoot, expandSmall, type Expansion, partialSum } from '../../src/expand/index.ts';
import { build, Q } from '../../src/expression/index.ts';
import { budget } from '../../src/outcome.ts';
import { expansionOf, expectExpansion, latex, plain, positive, same } from './tools.ts';

describe('O-terms absorb', () => {
  test.each([
    ['\\sin x + O(x^5)', 'x - x^3/6', '5', 0],
    ['e^{x+O(x^3)}', '1 + x + x^2/2', '3', 0],
    ['\\frac{1}{1+x+O(x^2)}', '1 - x', '2', 0],
    ['(1+x+O(x^3))^2', '1 + 2*x + x^2', '3', 0],
    ['\\frac{O(x^2)}{x} + x^2', '0', '1', 0],
  ] as const)('%s', (text, sum, power, log) => {
    expectExpansion(expansionOf(text, { terms: 6 }), sum, power, log);
  });
  test('a smaller logarithm is absorbed, a larger one is kept', () => {
    expectExpansion(expansionOf('x\\ln x + x\\ln^2 x + O(x\\ln x)', { side: 'right', terms: 6 }), 'x*log(x)^2', '1', 1, positive('x'));
  });
});

describe('derivatives and integrals', () => {
  test.each([
    ['\\frac{d}{dx}\\frac{\\sin x}{x}', '0', '-x/3 + x^3/30', '5'],
    ['\\int_0^x \\frac{\\sin t}{t}\\,dt', '0', 'x - x^3/18', '5'], // DLMF 6.6.5
    ['\\frac{3}{x^3}\\int_0^x\\frac{t^3}{e^t-1}\\,dt', '0', '1 - 3*x/8', '2'], // A&S 27.1.1
    ['e^{x^2/2}\\int_x^\\infty e^{-t^2/2}\\,dt', 'inf', '1/x - 1/x^3', '5'], // Mills' ratio, A&S 26.2.12
    ['\\int_x^\\infty\\frac{e^{-t}}{t}\\,dt\\cdot e^x', 'inf', '1/x - 1/x^2', '3'], // DLMF 6.12.1
  ] as const)('%s at %s', (text, at, sum, power) => {
    expectExpansion(expansionOf(text, { at, terms: 2 }), sum, power, 0, positive('x'));
  });
  test('x log x - x is the exact integral of log', () => {
    expectExpansion(expansionOf('\\int_0^x \\ln t\\,dt', { side: 'right' }), 'x*log(x) - x', null, 0, positive('x'));
  });
  test('1/log is integrated to a divergent series (DLMF 6.12.2 for li)', () => {
    const found = expansionOf('\\int_0^x\\frac{dt}{\\ln t}', { side: 'right', terms: 3 });
    expectExpansion(found, 'x/log(x) + x/log(x)^2 + 2*x/log(x)^3', '1', -4, positive('x'));
    expect(found.divergent).toBe(true);
  });
  test('the logarithm between two moving limits is not lost: declined rather than wrong', () => {
    expect(() => expansionOf('\\int_x^{2x}\\frac{dt}{t}')).toThrow(/no-expansion/);
  });
});

describe('sums over an index', () => {
  test.each([
    ['\\sum_{k=1}^{n}\\frac1k', 3, 'log(n) + euler + 1/(2*n)', '2'], // DLMF 5.11.2
    ['\\sum_{k=1}^{n}\\frac{1}{k^2}', 3, 'pi^2/6 - 1/n + 1/(2*n^2)', '3'], // DLMF 25.11.43
    ['\\sum_{k=1}^{n}k^3', 9, 'n^4/4 + n^3/2 + n^2/4', null], // Faulhaber
    ['\\sum_{k=1}^{n}\\frac{1}{k(k+1)}', 3, '1 - 1/n + 1/n^2', '3'],
    ['\\sum_{k=n}^{2n}\\frac1k', 2, 'log(2) + 3/(4*n)', '2'],
    ['\\sum_{k=1}^{n}k\\ln k', 5, 'n^2*log(n)/2 - n^2/4 + n*log(n)/2 + log(n)/12 + log(glaisher)', '2'], // DLMF 5.17.5
  ] as const)('%s', (text, terms, sum, power) => {
    expectExpansion(expansionOf(text, { variable: 'n', at: 'inf', terms }), sum, power, 0, positive('n'));
  });
  test('n! as a product is Stirling (DLMF 5.11.3)', () => {
    const found = expansionOf('\\prod_{k=1}^{n}k', { variable: 'n', at: 'inf', terms: 3 });
    expect(same(found.terms[2]?.coefficient ?? build.number(0), plain('1/288'))).toBe(true);
  });
});

describe('unspecified functions', () => {
  test('central difference', () => {
    const found = expansionOf(latex('\\frac{f(x+h)-f(x-h)}{2h}', { functions: ['f'] }), { variable: 'h', terms: 2 });
    const third = { kind: 'apply', name: 'f', args: [build.symbol('x')], derivatives: [3] } as const;
    expect(same(found.terms[1]?.coefficient ?? build.number(0), build.quotient(third, build.number(6)))).toBe(true);
    expect(found.remainder?.power).toEqual(build.number(4));
  });
});

describe('several small quantities', () => {
  const small = (text: string, weights: Readonly<Record<string, number>>, terms: number, iterated = false): Expansion => {
    const found = expandSmall({ function: latex(text), quantities: Object.entries(weights).map(([s, w]) => ({ symbol: build.symbol(s), weight: Q.rational(w) })), terms, assumptions: [], iterated }, budget(5000));
    if (!found.ok) throw new Error(found.error.message);
    return found.value;
  };
  test('equal weights: total order', () => {
    const found = small('\\sqrt{\\frac{1+v^2}{1+u^2}}', { u: 1, v: 1 }, 2);
    expect(same(partialSum(found), plain('1 + (v^2 - u^2)/2'))).toBe(true);
    expect(found.remainder?.power).toEqual(build.number(4));
  });
  test('epsilon ~ theta^2', () => {
    const found = small('\\frac{1}{1+y+z^2}', { y: 2, z: 1 }, 3);
    expect(same(partialSum(found), plain('1 - y - z^2 + (y+z^2)^2'))).toBe(true);
  });
  test('1/(x+y): homogeneous, with the zero of the denominator excluded; iterated, in powers of y/x', () => {
    expect(small('\\frac{1}{x+y}', { x: 1, y: 1 }, 2).assumptions).toContain('x + y != 0');
    expect(same(partialSum(small('\\frac{1}{x+y}', { x: 1, y: 1 }, 2, true)), plain('1/x - y/x^2'))).toBe(true);
  });
});

describe('roots of equations', () => {
  const root = (text: string, unknown: string, variable: string, at: string, terms: number, near?: string): Expansion => {
    const found = expandRoot(
      { equation: latex(text), unknown: build.symbol(unknown), variable: build.symbol(variable), point: at === 'inf' ? at : plain(at), side: 'both', terms, assumptions: [], ...(near ? { near: near === 'inf' ? near : plain(near) } : {}) },
      budget(10000),
    );
    if (!found.ok) throw new Error(found.error.message);
    return found.value;
  };
  test.each([
    ['y^3+y=x', '0', 3, undefined, 'x - x^3 + 3*x^5', '7', 0], // Lagrange inversion
    ['y e^{y^2}=x', '0', 3, undefined, 'x - x^3 + 5/2*x^5', '7', 0],
    ['y^5+y=x', 'inf', 3, undefined, 'x^(1/5) - 1/5*x^(-3/5) - 1/25*x^(-7/5)', '11/5', 0],
    ['y+\\ln y=x', 'inf', 3, undefined, 'x - log(x) + log(x)/x', '2', 2], // Wright's omega
    ['y e^y=x', 'inf', 2, undefined, 'log(x) - log(log(x))', '0', -1], // DLMF 4.13.10
    ['y^2-\\ln y=x', 'inf', 2, 'inf', 'x^(1/2) + log(x)/(4*x^(1/2))', '3/2', 2], // Olver
    ['\\cos y=x', '0', 2, 'pi/2', 'pi/2 - x', '3', 0],
  ] as const)('%s at %s', (text, at, terms, near, sum, power, log) => {
    expectExpansion(root(text, 'y', 'x', at, terms, near), sum, power, log, positive('x'));
  });
  test('the equation of Kepler u - s sin u = m in the eccentricity s', () => {
    expectExpansion(root('u-s\\sin u=m', 'u', 's', '0', 3), 'm + s*sin(m) + s^2*sin(2*m)/2', '3');
  });
  test('all real branches of t^5 - e t^3 + e^3 = 0, Newton polygon', () => {
    const found = root('t^5-s t^3+s^3=0', 't', 's', '0', 2);
    const sums = (found.branches ?? []).map((b) => partialSum(b));
    const wanted = ['-s^(1/2) - s/2', 's^(2/3) + s/3', 's^(1/2) - s/2'].map(plain);
    expect(sums).toHaveLength(3);
    wanted.forEach((w) => expect(sums.some((s) => same(s, w, positive('s')))).toBe(true));
    expect(found.left).toBeDefined();
  });
  test('a double root splits in square roots', () => {
    const found = root('(y-1)^2=x(y+2)', 'y', 'x', '0', 2);
    expect(found.branches).toHaveLength(2);
    expect(same(partialSum(found), plain('1 - sqrt(3)*x^(1/2)'), positive('x'))).toBe(true);
  });
  test('an equation for a limit that no exact number solves is declined, not guessed', () => {
    expect(() => root('\\cos y - y=x', 'y', 'x', '0', 2)).toThrow(/name the value/);
  });
});
