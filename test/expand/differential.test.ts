/** Initial-value problems: series of handbooks, and the series put back into its equation. */
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { expand, partialSum } from '../../src/expand/index.ts';
import { build } from '../../src/expression/index.ts';
import { budget } from '../../src/outcome.ts';
import { expectSum, residuals, solve, solved, statementOf } from './differential-tools.ts';

describe('published series', () => {
  test('Airy: w\'\' = z w, DLMF 9.4.1 (the two series in front of Ai(0) and Ai\'(0))', () => {
    expectSum(solved("y'' = x y, y(0)=1, y'(0)=0"), '1 + x^3/6 + 4*x^6/720 + 28*x^9/362880');
    expectSum(solved("y'' = x y, y(0)=0, y'(0)=1"), 'x + 2*x^4/24 + 10*x^7/5040 + 80*x^10/3628800');
  });
  test('Riccati y\' = x^2 + y^2, y(0) = 1 (Ince, Ordinary Differential Equations, by successive derivatives: y\'\' = 2x + 2yy\', ...)', () => {
    expectSum(solved("\\frac{dy}{dx} = x^2 + y^2,\\; y(0) = 1", { terms: 6 }), '1 + x + x^2 + 4*x^3/3 + 7*x^4/6 + 6*x^5/5');
  });
  test('pendulum from rest: theta_0 - (g/2l) sin(theta_0) t^2 + (g^2/24 l^2) sin(theta_0) cos(theta_0) t^4 (by differentiating the equation twice)', () => {
    const found = solved('\\ddot\\theta = -a\\sin\\theta, \\theta(0)=b, \\dot\\theta(0)=0', { terms: 3 });
    expectSum(found, 'b - a*sin(b)*t^2/2 + a^2*sin(b)*cos(b)*t^4/24');
  });
  test('tangent: y\' = 1 + y^2, DLMF 4.19.3', () => {
    expectSum(solved("y' = 1 + y^2, y(0)=0"), 'x + x^3/3 + 2*x^5/15 + 17*x^7/315');
  });
  test('van der Pol from (a, 0): x\'\'\' (0) = mu (1 - a^2) (-a)', () => {
    expectSum(solved('\\ddot x - m(1-x^2)\\dot x + x = 0, x(0)=a, \\dot x(0)=0', { terms: 3 }), 'a - a*t^2/2 - m*(1 - a^2)*a*t^3/6');
  });
  test('a special function of the unknown: y\'\' = J_0(y), J_0\' = -J_1 (DLMF 10.6.3)', () => {
    const found = solved("y'' = J_0(y), y(0)=1, y'(0)=0", { terms: 2 });
    expect(found.remainder?.power).toEqual(build.number(4));
  });
});

describe('what the text may look like', () => {
  const cosine = '1 - x^2/2 + x^4/24 - x^6/720';
  test.each([
    "y'' + y = 0, y(0)=1, y'(0)=0",
    "y'' + y = 0 \\text{ with } y(0)=1, \\quad y'(0)=0",
    "\\frac{d^2y}{dx^2} = -y; \\; y(0)=1,\\ y'(0)=0",
    "\\frac{\\mathrm{d}^2 y}{\\mathrm{d}x^2} + y = 0, y(0)=1, \\frac{\\mathrm{d}y}{\\mathrm{d}x}(0)=0",
    "y''(x) + y(x) = 0, y(0)=1, y'(0)=0",
    "y(0)=1, y'(0)=0, y''+y=0",
    "\\begin{aligned} y'' &= -y, & y(0)&=1, & y'(0)&=0\\end{aligned}",
  ])('%s', (text) => {
    expectSum(solved(text), cosine);
  });
  test('a system: all its functions are in components', () => {
    const found = solved('\\begin{aligned} \\dot x &= y, & x(0)&=1 \\\\ \\dot y &= -x, & y(0)&=0\\end{aligned}');
    expectSum(found, '1 - t^2/2 + t^4/24 - t^6/720');
    const second = found.components?.[1];
    expect(second?.unknown).toEqual(build.symbol('y'));
    if (second) expectSum(second.expansion, '-t + t^3/6 - t^5/120 + t^7/5040');
  });
  test('a point other than zero, and symbols as initial values', () => {
    expectSum(solved("y' = y, y(a)=b", { terms: 3 }), 'b + b*(x - a) + b*(x-a)^2/2');
  });
  test('values that are not given are free constants and named', () => {
    const found = solved("y'' + x y = 0", { unknown: 'y' });
    expect(found.assumptions).toEqual(['y_0 = y(0) is a free constant', "y'_0 = y'(0) is a free constant"]);
  });
  test('a solution that is a polynomial is exact', () => {
    expect(solved("y' = 2x, y(0)=1").exact).toBe(true);
    expect(solved("y' = \\sqrt{y}, y(0)=1").exact).toBe(true);
    expect(solved("y' = y, y(0)=1").exact).toBe(false);
  });
});

describe('declined with the reason', () => {
  test.each([
    ["y'' + y = 0, y(0)=0, y(1)=1", 'boundary'],
    ["y' = \\sqrt{y}, y(0)=0", 'not analytic'],
    ["y' = |y|, y(0)=0", 'not analytic'],
    ["y' = y, y(0)=1, y'(0)=1", 'follows from the equation'],
    ["y' = y(x-1), y(0)=1", 'delay'],
  ])('%s: %s', (text, reason) => {
    const found = (() => {
      try {
        return solve(text, { unknown: 'y' });
      } catch (error) {
        return { ok: false as const, error: { message: error instanceof Error ? error.message : '' } };
      }
    })();
    expect(found.ok ? '' : found.error.message).toContain(reason);
  });
});

describe('put back into the equation', () => {
  const integer = fc.integer({ min: -3, max: 3 });
  test('random second-order equations: the residual of n terms starts at the power that n terms leave', () => {
    const rights = ['x y', 'y^2', "x^2 y'", '\\sin y', "y y'", 'e^{y}', '\\frac{1}{2+x}', "\\frac{y}{1+x^2}", '\\cos x', "\\sqrt{4+y'^2}"];
    fc.assert(
      fc.property(fc.subarray(rights, { minLength: 1, maxLength: 3 }), integer, integer, (parts, a, b) => {
        const text = `y'' = ${parts.join(' + ')}, y(0)=${a}, y'(0)=${b}`;
        const found = solved(text, { terms: 6 });
        if (found.exact) return;
        const power = found.remainder?.power;
        const order = power?.kind === 'number' ? Number(power.value.num) : NaN;
        const statement = statementOf(text);
        const [residual] = residuals(statement, new Map([['y', partialSum(found)]]));
        const back = expand({ function: residual ?? build.number(1), variable: build.symbol('x'), point: build.number(0), side: 'right', terms: 1, assumptions: [] }, budget(20000));
        if (!back.ok) throw new Error(`${text}: ${back.error.message}`);
        const first = back.value.terms[0]?.power;
        expect(first === undefined || (first.kind === 'number' && Number(first.value.num) >= order - 2), `${text}: ${order}`).toBe(true);
      }),
      { numRuns: 25 },
    );
  });
  test('fewer terms are a prefix of more', () => {
    for (const text of ["y' = x + \\sin y, y(0)=1", "y'' = y^3 - x, y(0)=1, y'(0)=2"]) {
      expect(solved(text, { terms: 6 }).terms.slice(0, 5)).toEqual(solved(text, { terms: 5 }).terms);
    }
  });
});
