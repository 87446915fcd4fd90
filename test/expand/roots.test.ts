/** Roots of equations: algebraic starts, equations with fractions, counted roots, roots at the ends of the real line. */
import { describe, expect, it } from 'vitest';
import { expandRoot, type Expansion, partialSum } from '../../src/expand/index.ts';
import { build, dependsOn, type Expression, substitute } from '../../src/expression/index.ts';
import { describe as describeFunction } from '../../src/functions/index.ts';
import { budget, type Outcome } from '../../src/outcome.ts';
import { complex, complexBallTrees, evaluateTree, real } from '../../src/rigorous/index.ts';
import { expansionText } from '../../src/write/index.ts';
import { expectExpansion, latex, plain } from './tools.ts';

interface Asked {
  readonly terms?: number;
  readonly at?: string;
  readonly near?: string;
  readonly complex?: boolean;
}
const asked = (text: string, unknown: string, variable: string, { terms = 3, at = '0', near, complex: all = false }: Asked = {}): Outcome<Expansion> =>
  expandRoot(
    { equation: latex(text), unknown: build.symbol(unknown), variable: build.symbol(variable), point: at === 'inf' ? at : plain(at), side: 'both', terms, assumptions: [], complex: all, ...(near === undefined ? {} : { near: near === 'inf' ? near : plain(near) }) },
    budget(20000),
  );
const rootsOf = (text: string, unknown: string, variable: string, more: Asked = {}): readonly Expansion[] => {
  const found = asked(text, unknown, variable, more);
  if (!found.ok) throw new Error(`${text}: ${found.error.message}`);
  return found.value.branches ?? [found.value];
};

/** log2 of |F| at the partial sum for the variable 2^-k: it falls with k as the first term left out does. */
function residual(text: string, unknown: string, variable: string, root: Expansion, k: number): number {
  const equation = latex(text);
  const f = equation.kind === 'relation' ? build.difference(equation.sides[0] as Expression, equation.sides[1] as Expression) : equation;
  const small = build.number({ num: 1n, den: 2n ** BigInt(k) });
  const tree = substitute(substitute(f, unknown, partialSum(root)), variable, small);
  expect(dependsOn(tree, unknown)).toBe(false);
  const value = evaluateTree(tree, new Map(), complexBallTrees(300), describeFunction);
  if (!value) throw new Error(`${text} has no value`);
  return real.exponentOf(real.absoluteUpper(complex.absolute(value, 60)));
}

describe('starts that solve irreducible equations of degree three and more', () => {
  // The residual judges: it must fall as epsilon^3 after three terms (perturbation theory of simple roots, Bender & Orszag 7.1, from memory).
  it.each([
    ['x^3 - 3x + 1 + \\epsilon = 0', 3, 3],
    ['x^3 - 4x + 1 + \\epsilon x^2 = 0', 3, 3],
    ['x^5 - x - 1 + \\epsilon = 0', 1, 5],
    ['2x^4 - 4x + 1 + \\epsilon \\sin x = 0', 2, null],
    ['(x^2 - 2)(x^3 - x - 1) = \\epsilon x', 3, 5],
    ['x^6 - 4x^2 + 1 = \\epsilon', 4, 6],
  ])('%s', (text, realRoots, all) => {
    const roots = rootsOf(text, 'x', '\\epsilon', all === null ? {} : { complex: true });
    expect(roots).toHaveLength(all ?? realRoots);
    if (all !== null) expect(rootsOf(text, 'x', '\\epsilon')).toHaveLength(realRoots);
    for (const root of roots) {
      expect(root.side).toBe('both');
      const fall = residual(text, 'x', '\\epsilon', root, 20) - residual(text, 'x', '\\epsilon', root, 40);
      expect(fall).toBeGreaterThan(57);
      expect(fall).toBeLessThan(63);
    }
  });
  it('names the number and says which it is (1.16730397826...: OEIS A160155, from memory)', () => {
    const [root] = rootsOf('x^5 - x - 1 + \\epsilon = 0', 'x', '\\epsilon', { terms: 1 });
    expect(root && expansionText(root)).toBe('x₁ + O(ϵ)');
    expect(root?.assumptions).toEqual(['x_1 = 1.16730397826..., the real root of x^5 - x - 1 = 0']);
  });
  it('keeps clear of a symbol of that name', () => {
    const [root] = rootsOf('x^5 - x - 1 + \\epsilon x_1 = 0', 'x', '\\epsilon', { terms: 2 });
    expect(root && expansionText(root)).toMatch(/^ξ₁ /u);
  });
  it('splits double roots: (x^3 - 4x + 1)^2 = epsilon has two roots of opposite slope at each', () => {
    expect(rootsOf('(x^3 - 4x + 1)^2 = \\epsilon', 'x', '\\epsilon', { terms: 2 })).toHaveLength(6);
  });
  it('declines a cubic with a parameter of unknown sign, and says what to assume', () => {
    const found = asked('x^3 + a x + 1 + \\epsilon = 0', 'x', '\\epsilon');
    expect(!found.ok && found.error.message).toContain('a > 0');
  });
});

describe('fractions, roots, and one-to-one functions', () => {
  it('does not take a pole for a root', () => {
    // Cleared of the fraction the equation has the root 1 as well.
    const roots = rootsOf('\\frac{x^2 - 1}{x - 1} = 3 + \\epsilon', 'x', '\\epsilon');
    expect(roots).toHaveLength(1);
    expectExpansion(roots[0] as Expansion, '2 + epsilon'.replace('epsilon', '\\epsilon'), null);
  });
  it('the degree of ionisation, x^2/(1-x) = s for large s (Saha; common practice): 1 - 1/s + 2/s^2', () => {
    expectExpansion(rootsOf('\\frac{x^2}{1-x} = s', 'x', 's', { at: 'inf' })[0] as Expansion, '1 - 1/s + 2/s^2', '3');
  });
  it('sqrt(x) + epsilon x = 1: 1 - 2 epsilon + 5 epsilon^2 (Catalan numbers, solved as a quadratic)', () => {
    expect(rootsOf('\\sqrt{x} + \\epsilon x = 1', 'x', '\\epsilon').map(expansionText)).toEqual(['1 − 2ϵ + 5ϵ² + O(ϵ³)']);
  });
  it('gives one answer for both sides where they agree: x^2 + epsilon x^{5/2} = 1', () => {
    const [root] = rootsOf('x^2 + \\epsilon x^{5/2} = 1', 'x', '\\epsilon');
    expect(root?.side).toBe('both');
  });
});

describe('counted roots', () => {
  it('tan x = x, the zeros of J_{3/2} (McMahon: DLMF 10.21.19 with nu = 3/2): n pi + pi/2 - 1/(n pi)', () => {
    const [root] = rootsOf('\\tan x = x', 'x', 'n', { at: 'inf' });
    expectExpansion(root as Expansion, 'n*pi + pi/2 - 1/(n*pi)', '2');
    expect(root?.assumptions).toEqual(['x = n*pi + atan(x), which counts the roots']);
  });
  it('x = cot x: n pi + 1/(n pi) - 4/(3 (n pi)^3) (x tan x = 1: heat conduction, Carslaw & Jaeger, from memory)', () => {
    expectExpansion(rootsOf('x = \\cot x', 'x', 'n', { at: 'inf' })[0] as Expansion, 'n*pi + 1/(n*pi) - 4/(3*(n*pi)^3)', '5');
    expectExpansion(rootsOf('x\\tan x = 1', 'x', 'n', { at: 'inf' })[0] as Expansion, 'n*pi + 1/(n*pi) - 4/(3*(n*pi)^3)', '5');
  });
  it('declines where the variable is absent and nothing can be counted', () => {
    const found = asked('x^2 = 2', 'x', 'n', { at: 'inf' });
    expect(!found.ok && found.error.code).toBe('bad-request');
  });
});

describe('roots at the ends of the real line', () => {
  it('e^{-x} = epsilon x is W(1/epsilon): L - log L + log L/L with L = log(1/epsilon) (DLMF 4.13.10)', () => {
    expectExpansion(rootsOf('e^{-x} = \\epsilon x', 'x', '\\epsilon')[0] as Expansion, '-log(e) - log(-log(e)) - log(-log(e))/log(e)'.replace(/\be\b/g, '\\epsilon'), '0', -2);
  });
  it('epsilon e^x = x^2 has two small roots and a large one', () => {
    expect(rootsOf('\\epsilon e^{x} = x^2', 'x', '\\epsilon')).toHaveLength(3);
  });
  it('1/(1 + x^4) = epsilon: plus and minus epsilon^(-1/4)', () => {
    expect(rootsOf('\\frac{1}{1+x^4} = \\epsilon', 'x', '\\epsilon').map((r) => expansionText(r).slice(0, 9))).toEqual(['−ϵ^(−1/4)', 'ϵ^(−1/4) ']);
  });
});
