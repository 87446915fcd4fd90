/** General terms and power series given as sums. The general term is compared with twelve coefficients that come from the expansion itself. */
import { describe, expect, test } from 'vitest';
import { partialSum } from '../../src/expand/index.ts';
import { build, type Expression, mapChildren, substitute } from '../../src/expression/index.ts';
import { expansionOf, expectExpansion, latex, positive, same } from './tools.ts';

/** (a)_n = a (a + 1) ... (a + n - 1). */
const risingWrittenOut = (a: Expression, n: number): Expression => build.product(...Array.from({ length: n }, (_, j) => build.sum(a, build.number(j))));

/** binomial(a, n) = a (a - 1) ... (a - n + 1)/n!. */
function writtenOut(e: Expression): Expression {
  const [b, m] = e.kind === 'call' && e.function === 'pochhammer' ? e.args : [];
  if (b && m?.kind === 'number') return risingWrittenOut(b, Number(m.value.num));
  const [a, n] = e.kind === 'call' && e.function === 'binomial' ? e.args : [];
  if (!a || n?.kind !== 'number') return mapChildren(e, writtenOut);
  return build.product(...Array.from({ length: Number(n.value.num) }, (_, j) => build.quotient(build.difference(a, build.number(j)), build.number(j + 1))));
}

describe('general terms', () => {
  test.each([
    ['e^{-x^2}', '0'],
    ['e^{x}', '2'],
    ['x^2\\sin(3x)', '0'],
    ['\\frac{\\cos x}{x^2}', '0'],
    ['\\sinh x', '0'],
    ['\\cosh\\sqrt{x}', '0'],
    ['\\ln(1-x)', '0'],
    ['\\ln x', '1'],
    ['\\arctan(x^2)', '0'],
    ['\\operatorname{artanh} x', '0'],
    ['\\arcsin x', '0'],
    ['\\frac{1}{1-x}', '0'],
    ['\\frac{x}{2+3x^2}', '0'],
    ['\\frac{1}{x}', '3'],
    ['\\frac{1}{\\sqrt{1-4x}}', '0'],
    ['(1+x)^{1/3}', '0'],
    ['e^x+\\frac{1}{1-x}', '0'],
    ['e^{1/x}', 'inf'],
    ['\\operatorname{erf} x', '0'],
    ['J_1(x)', '0'],
    ['{}_2F_1(\\tfrac13,\\tfrac12;\\tfrac54;x)', '0'],
    ['{}_2F_1(1,\\tfrac13;\\tfrac43;-x^3)', '0'],
    ['M(\\tfrac12,\\tfrac32,-x^2)', '0'],
  ] as const)('%s at %s', (text, at) => {
    const found = expansionOf(text, { at, terms: 12 });
    const { general } = found;
    expect(general).toBeDefined();
    if (!general) return;
    const summed = build.sum(...Array.from({ length: 12 }, (_, k) => writtenOut(substitute(general, 'k', build.number(k)))));
    expect(same(summed, partialSum(found), positive('x'))).toBe(true);
  });
  test('elliptic integrals in the modulus k, with the index j (DLMF 19.5.1, 19.5.2)', () => {
    for (const text of ['K(k)', 'E(k)']) {
      const found = expansionOf(text, { variable: 'k', terms: 8 });
      const { general } = found;
      if (!general) throw new Error(text);
      expect(same(build.sum(...Array.from({ length: 8 }, (_, j) => substitute(general, 'j', build.number(j)))), partialSum(found), positive('k'))).toBe(true);
    }
  });
  // Every fourth coefficient vanishes: k = 0, 4 of the sine, 2, 6, 10 of the cosine.
  test.each([
    ['e^{-x}\\sin x', 6, 8],
    ['\\frac{e^{x}\\cos x}{x}', 9, 12],
    ['e^{-\\sqrt{3}x}\\sin x', 5, 6],
  ] as const)('an exponential times a sine or cosine: %s', (text, terms, indices) => {
    const found = expansionOf(text, { terms });
    const { general } = found;
    if (!general) throw new Error('none');
    expect(same(build.sum(...Array.from({ length: indices }, (_, k) => substitute(general, 'k', build.number(k)))), partialSum(found), positive('x'))).toBe(true);
  });
  test('with a symbolic power', () => {
    const found = expansionOf('(1+x)^{\\alpha}', { terms: 4 });
    expect(found.general && same(found.general, latex('\\binom{\\alpha}{k}x^k'))).toBe(true);
  });
  test.each(['\\tan x', '\\frac{1}{1+x+x^2}', '\\sin x+\\cos x', 'e^{\\sin x}', '\\ln(2+x)', '|x|e^x'])('none is claimed for %s', (text) => {
    expect(expansionOf(text, { terms: 3 }).general).toBeUndefined();
  });
});

describe('power series given as sums', () => {
  test.each([
    ['\\sum_{k=0}^{\\infty}\\frac{x^k}{k!}', '1 + x + x^2/2', '3'],
    ['\\sum_{k=1}^{\\infty}\\frac{(-1)^{k+1}x^{k}}{k^2}', 'x - x^2/4 + x^3/9', '4'],
    ['\\sum_{k=0}^{\\infty}\\frac{(-1)^k x^{2k+1}}{(2k+1)!}', 'x - x^3/6 + x^5/120', '7'], // DLMF 4.19.1
    ['\\frac{1}{x}\\sum_{k=1}^{\\infty}\\frac{(2k)!}{(k!)^2}x^k', '2 + 6*x + 20*x^2', '3'],
  ] as const)('%s', (text, sum, power) => {
    expectExpansion(expansionOf(text, { terms: 3 }), sum, power);
  });
  test('a divergent one is declined', () => {
    expect(() => expansionOf('\\sum_{k=0}^{\\infty}k!x^k')).toThrow(/diverges/);
  });
});
