/** Causes of wrong, late or missing answers that random compositions of functions brought to light; each case stands for its cause. Values by the identities named. */
import { describe, expect, test } from 'vitest';
import { expectExpansion, expansionOf, latex, outcomeOf, plain, same } from './tools.ts';
import { partialSum } from '../../src/expand/index.ts';
import { build } from '../../src/expression/index.ts';
import { describe as describeFunction } from '../../src/functions/index.ts';
import { complex, enclose } from '../../src/rigorous/index.ts';

describe('what cancels by form is gone', () => {
  test('a constant written with the variable stays a constant', () => {
    expectExpansion(expansionOf('\\operatorname{artanh}(x-\\pi-x)', { at: '1' }), '-atanh(pi)', null);
    expectExpansion(expansionOf('\\operatorname{arcosh}(\\frac13-x+x)'), 'i*acos(1/3)', null);
    expectExpansion(expansionOf('\\frac{1}{1-x+x}'), '1', null);
  });
});

describe('values at fractions do not ask for themselves', () => {
  test('Ai(0) = 3^(-2/3)/Gamma(2/3), -Ai\'(0) = 3^(-1/3)/Gamma(1/3) (DLMF 9.2.3, 9.2.4)', () => {
    expectExpansion(expansionOf('\\operatorname{Ai}(x)', { terms: 3 }), '3^(-2/3)/gamma(2/3) - x*3^(-1/3)/gamma(1/3) + x^3*3^(-2/3)/(6*gamma(2/3))', '4');
  });
  test('a call of a constant beside the variable', () => {
    expectExpansion(expansionOf('x+\\Gamma\\left(\\frac13\\right)'), 'x + gamma(1/3)', null);
  });
});

describe('inverse functions of their functions, outside the principal range', () => {
  test.each([
    ['\\arcsin(\\sin x)', '2', 'pi - x'],
    ['\\arccos(\\cos x)', '4', '2*pi - x'],
    ['\\arctan(\\tan x)', '-2', 'x + pi'],
    ['\\arccos(\\sin x)', '3', 'x - pi/2'],
    ['\\operatorname{arcosh}(\\cosh(3+x))', '0', '3 + x'],
    ['\\operatorname{arcosh}(\\cosh x)', '-1', '-x'],
    ['\\operatorname{arcosh}(\\sin(1+x))', '2', 'i*(x + 1 - pi/2)'],
    ['\\arcsin(\\cosh x)', '1', 'pi/2 - i*x'],
  ])('%s at %s', (text, at, expected) => {
    const found = expansionOf(text, { at });
    expect(found.exact).toBe(true);
    expect(same(partialSum(found), plain(expected))).toBe(true);
  });
  test('arccos(cosh x) is i|x|', () => {
    const found = expansionOf('\\arccos(\\cosh x)');
    expect(same(partialSum(found), plain('i*x'))).toBe(true);
    expect(found.left && same(partialSum(found.left), plain('-i*x'))).toBe(true);
  });
});

test('a difference is found to vanish through its derivative: the Gudermannian in two forms (DLMF 4.23.42)', () => {
  expectExpansion(expansionOf('\\arctan(\\sinh x)-2\\arctan(\\tanh\\frac{x}{2})'), '0', null);
});

test('the side of a cut is that of the part that tends to zero most slowly', () => {
  const found = outcomeOf(latex('\\operatorname{arcosh}(\\ln\\ln x)'), { at: '1', side: 'left', terms: 2 });
  expect(found.ok).toBe(true);
});

test('the sign of a constant that is real by construction', () => {
  const found = expansionOf('\\operatorname{artanh}\\left(\\arctan\\frac{x}{3}\\right)', { at: '1', terms: 1 });
  expect(same(partialSum(found), plain('atanh(atan(1/3))'))).toBe(true);
});

describe('roots of products with a factor of their own', () => {
  // By f'' = -(g'' (1 - g^2) + g g'^2)/(1 - g^2)^(3/2) for f = acos g.
  test('arccos((b - x) x) at 1', () => {
    const found = expansionOf('\\arccos((b-x)x)', { at: '1', terms: 3 });
    expect(same(partialSum(found), plain('pi/2 - asin(b - 1) + (2 - b)*(x - 1)/sqrt(b*(2 - b)) + (b^2 - b + 2)*(x - 1)^2/(2*b*sqrt(b*(2 - b)))'))).toBe(true);
  });
  test('sums over denominators b and b (2 - b)', () => {
    expect(same(plain('(b - 2)*(-(b - 1)/(b*sqrt(b*(2 - b)))) - 2/sqrt(b*(2 - b)) + 1/(b - 2) - 1/(b*(b - 2))'), plain('-(b^2 - b + 2)/(b*sqrt(b*(2 - b))) + (b - 1)/(b*(b - 2))'))).toBe(true);
  });
});

test('a function is not expanded towards its cut by the form that holds on it: Ei of a complex argument', () => {
  const found = outcomeOf(latex('\\operatorname{Ei}\\left(\\operatorname{Li}_2(x)\\right)'), { at: 'inf' });
  expect(found.ok).toBe(false);
  if (!found.ok) expect(found.error.code).toBe('no-expansion');
});

describe('values on the imaginary axis and of complex constants', () => {
  const contains = (difference: ReturnType<typeof build.difference>): boolean => {
    const ball = enclose(difference, new Map(), 200, describeFunction);
    return ball !== null && complex.containsZero(ball);
  };
  // arcosh(-i) = log(1 + sqrt 2) - i pi/2, the principal value of DLMF 4.37.19.
  test('arcosh(-i x) at 1', () => {
    const found = expansionOf('\\operatorname{arcosh}(-ix)', { at: '1', terms: 1 });
    expect(contains(build.difference(found.terms[0]?.coefficient ?? build.number(0), plain('log(1 + sqrt(2)) - i*pi/2')))).toBe(true);
  });
  // A root of -1/a^2 is i/a or -i/a: as a kernel of its own it would hide a zero, and the term in 1/x would be lost.
  test('arccos of a quotient by a complex constant keeps its terms or is declined', () => {
    const found = outcomeOf(latex('\\arccos\\frac{2x^2+x}{\\operatorname{arcosh}(\\tan 2)}'), { at: 'inf', terms: 3 });
    if (found.ok) expect(found.value.terms.map((t) => (t.power.kind === 'number' ? Number(t.power.value.num) : NaN))).toEqual([0, 0, 1]);
    else expect(found.error.code).toBe('undecided');
  });
  test('the square of a root of -1/a^2 for a complex constant a', () => {
    expect(same(plain('acosh(tan(2))^2*sqrt(-1/acosh(tan(2))^2)^2'), plain('-1'))).toBe(true);
  });
});
