/** Integrals over a finite interval whose integrand is regular in the small quantity, and those that are integrated first. Sources beside the rows; all from memory. */
import { describe, expect, test } from 'vitest';
import { partialSum } from '../../src/expand/index.ts';
import { type Expression, type IntegralNode } from '../../src/expression/index.ts';
import { encloseInterval, interval } from '../../src/rigorous/index.ts';
import { describe as describeFunction } from '../../src/functions/index.ts';
import { expansionOf, expectExpansion, latex, outcomeOf, positive } from './tools.ts';

describe('expanded term by term', () => {
  test.each([
    ['\\int_0^{\\pi/2}\\frac{d\\theta}{\\sqrt{1-x^2\\sin^2\\theta}}', 'pi/2*(1 + x^2/4 + 9*x^4/64 + 25*x^6/256)', '8'], // K, DLMF 19.5.1
    ['\\int_0^{\\pi/2}\\sqrt{1-x^2\\sin^2\\theta}\\,d\\theta', 'pi/2*(1 - x^2/4 - 3*x^4/64 - 5*x^6/256)', '8'], // E, DLMF 19.5.2
    ['\\int_0^{2\\pi}\\frac{d\\phi}{1+x\\cos\\phi}', '2*pi*(1 + x^2/2 + 3*x^4/8 + 5*x^6/16)', '8'], // 2 pi/sqrt(1 - x^2), A&S 4.3.131
    ['\\int_0^{\\pi}e^{x\\cos\\theta}\\,d\\theta', 'pi*(1 + x^2/4 + x^4/64 + x^6/2304)', '8'], // pi I_0, DLMF 10.32.1, 10.25.2
    ['\\int_0^{\\pi}\\sin(x\\sin t)\\sin t\\,dt', 'pi*(x/2 - x^3/16 + x^5/384 - x^7/18432)', '9'], // pi J_1, DLMF 10.9.2, 10.2.2
    ['\\int_0^1\\frac{t^2}{1+xt}\\,dt', '1/3 - x/4 + x^2/5 - x^3/6', '4'],
    ['\\int_0^1 e^{-xt^2}\\,dt', '1 - x/3 + x^2/10 - x^3/42', '4'],
    ['\\int_0^1\\cos(xt)\\sqrt{t}\\,dt', '2/3 - x^2/7 + x^4/132 - x^6/5400', '8'],
    ['\\int_0^1\\frac{e^{xt}}{\\sqrt{t}}\\,dt', '2 + 2*x/3 + x^2/5 + x^3/21', '4'], // an integrable end
    ['\\int_0^1\\frac{\\sin(xt)}{t}\\,dt', 'x - x^3/18 + x^5/600 - x^7/35280', '9'], // Si, DLMF 6.6.5
    ['\\int_0^1\\frac{1-\\cos(xt)}{t^2}\\,dt', 'x^2/2 - x^4/72 + x^6/3600 - x^8/282240', '10'], // the cosine series, term by term
    ['\\int_0^1\\ln(t)\\,e^{xt}\\,dt', '-1 - x/4 - x^2/18 - x^3/96', '4'], // -sum x^n/(n! (n + 1)^2)
    ['\\int_0^1\\frac{\\ln(t)^2}{1+xt}\\,dt', '2 - x/4 + 2*x^2/27 - x^3/32', '4'], // the integral of t^n log(t)^2 is 2/(n + 1)^3
    ['\\int_1^2\\frac{e^{xt}}{t}\\,dt', 'log(2) + x + 3*x^2/4 + 7*x^3/18', '4'],
    ['\\int_0^1\\frac{dt}{2+t+x}', 'log(3/2) - x/6 + 5*x^2/72 - 19*x^3/648', '4'], // log(3 + x) - log(2 + x)
  ] as const)('%s', (text, sum, power) => {
    expectExpansion(expansionOf(text), sum, power);
  });
  test('the period of a pendulum in its amplitude: 1 + a^2/16 + 11 a^4/3072 (common practice)', () => {
    const period = expansionOf('4\\sqrt{\\frac{L}{g}}\\int_0^{\\pi/2}\\frac{d\\phi}{\\sqrt{1-\\sin^2(x/2)\\sin^2\\phi}}', { terms: 3 });
    expectExpansion(period, '2*pi*sqrt(L/g)*(1 + x^2/16 + 11*x^4/3072)', '6');
  });
  test('a limit and a coefficient without a value', () => {
    expectExpansion(expansionOf('\\int_0^L\\sqrt{1+x^2\\cos^2 t}\\,dt', { terms: 2 }), 'L + x^2*(L/4 + sin(2*L)/8)', '4');
    expectExpansion(expansionOf('\\int_0^1\\sqrt{a^2+xt}\\,dt', { terms: 3, assumptions: positive('a') }), 'a + x/(4*a) - x^2/(24*a^3)', '3', 0, positive('a'));
  });
  test('a small quantity that is no power', () => {
    const found = expansionOf('\\int_0^{\\pi}\\frac{\\sin^2 t}{1+x\\ln(x)\\cos t}\\,dt', { side: 'right', terms: 2 });
    expectExpansion(found, 'pi/2 + pi*x^2*log(x)^2/8', '4', 4, positive('x'));
  });
});

describe('integrated first where the integrand becomes singular', () => {
  test.each([
    ['\\int_0^1\\frac{dt}{\\sqrt{t^2+x^2}}', '-log(x) + log(2) + x^2/4', '4'], // arsinh(1/x), DLMF 4.37.1
    ['\\int_0^1\\frac{dt}{t+x}', '-log(x) + x - x^2/2', '3'], // log(1 + 1/x)
    ['\\int_0^1\\ln(t+x)\\,dt', '-1 - x*log(x) + x', '2'], // (1 + x) log(1 + x) - x log x - 1
    ['\\int_0^1\\frac{x}{t^2+x^2}\\,dt', 'pi/2 - x + x^3/3', '5'], // arctan(1/x)
    ['\\int_0^1\\frac{x^2\\,dt}{(t^2+x^2)^{3/2}}', '1 - x^2/2 + 3*x^4/8', '6'], // 1/sqrt(1 + x^2)
  ] as const)('%s', (text, sum, power) => {
    expectExpansion(expansionOf(text, { side: 'right', terms: 3 }), sum, power, 0, positive('x'));
  });
  test('the two sides of arctan(1/x) differ', () => {
    const found = expansionOf('\\int_0^1\\frac{x}{t^2+x^2}\\,dt', { terms: 2 });
    expect(found.side).toBe('right');
    expect(found.left).toBeDefined();
  });
});

describe('what is not proven is declined', () => {
  test.each([
    '\\int_0^1\\frac{dt}{t-x}', // a pole inside for small x > 0
    '\\int_{-1}^1\\frac{dt}{t+x}',
    '\\int_0^1\\frac{1+xt}{t}\\,dt', // diverges at 0
    '\\int_0^{\\pi}\\frac{dt}{x+\\cos t}', // a pole at pi/2
    '\\int_0^{\\pi}\\sqrt{\\cos^2 t+x}\\,dt', // a branch point that comes near
    '\\int_0^{\\pi}\\frac{e^{xt}}{\\cos t}\\,dt',
    '\\int_0^1\\frac{dt}{c+t+x}', // c may be -1/2
    '\\int_{-1}^1\\frac{e^{xt}}{t^2}\\,dt',
    '\\int_0^1\\frac{\\ln t}{t+x^2t^2}\\,dt', // diverges at 0
    '\\int_0^1\\frac{\\sin(xt)}{t^2}\\,dt', // vanishes once only
    '\\int_0^1\\frac{\\cos(xt)-1}{t^3}\\,dt',
    '\\int_0^1\\frac{\\sin(x\\sqrt{t})}{t^2}\\,dt',
    '\\int_{-1}^1 e^{xt}\\sqrt{t}\\,dt',
  ])('%s', (text) => {
    const found = outcomeOf(latex(text), { side: 'right' });
    expect(found.ok).toBe(false);
    if (!found.ok) expect(found.error.message).not.toMatch(/'\d/);
  });
});

/** Gauss-Legendre with five nodes (A&S 25.4.30) on each of many panels. */
function quadrature(f: (t: number) => number, low: number, high: number): number {
  const nodes = [[0, 128 / 225], ...[1, -1].flatMap((sign) => [-1, 1].map((s) => [(s * Math.sqrt(5 + sign * 2 * Math.sqrt(10 / 7))) / 3, (322 - sign * 13 * Math.sqrt(70)) / 900]))] as [number, number][];
  const panels = 60;
  const h = (high - low) / panels / 2;
  let total = 0;
  for (let k = 0; k < panels; k += 1) for (const [x, w] of nodes) total += w * h * f(low + h * (2 * k + 1 + x));
  return total;
}

const valueAt = (e: Expression, at: Readonly<Record<string, number>>): number => {
  const found = encloseInterval(e, new Map(Object.entries(at).map(([name, x]) => [name, interval.fromDouble(x)])), describeFunction);
  if (!found) throw new Error('no value');
  return interval.midpoint(found);
};

describe('against quadrature', () => {
  const outer = ['f', '\\frac{1}{1+f/2}', '\\sqrt{2+f}', 'e^{f}', '\\cos(1+f)', '\\ln(3+f)', '\\frac{1}{(2-f)^{3/2}}', '\\arctan f', '\\sinh(f)^2'];
  const inner = ['x\\cos t', 'x t^2', 'x^2\\sin^2 t', 'xe^{-t}', 'x t\\sin t', 'x+x^2t'];
  const weight = ['1', 't', '\\sin(t)', 'e^{-t}\\cos(t)', '\\sin(t)^3'];
  const ends = [['0', '1'], ['0', '\\pi'], ['-\\frac{1}{2}', '\\frac{3}{4}'], ['\\frac{\\pi}{3}', '2']] as const;
  test.each(outer.flatMap((f, i) => inner.map((u, j) => [f, u, weight[(i + j) % weight.length] ?? '1', ends[(i + 2 * j) % ends.length] ?? ends[0]] as const)))('%s of f = %s, weight %s over %s', (f, u, w, [low, high]) => {
    const integrand = f.replace(/(?<![a-z])f(?![a-z])/u, `\\left(${u}\\right)`);
    const tree = latex(`\\int_{${low}}^{${high}} ${w}\\left(${integrand}\\right)dt`) as IntegralNode;
    const sum = partialSum(expansionOf(tree, { terms: 5 }));
    const [from, to] = [valueAt(tree.lower as Expression, {}), valueAt(tree.upper as Expression, {})];
    // The error falls at least like x^5 where five terms stand.
    const error = (x: number): number => Math.abs(valueAt(sum, { x }) - quadrature((t) => valueAt(tree.body, { t, x }), from, to));
    expect(error(1e-3)).toBeLessThan(1e-10);
    expect(error(0.02)).toBeLessThan(1e-6);
  });
});
