/** Bessel functions whose order grows: alone, or together with the argument. Published coefficients, and values computed with mpmath 1.3.0 to 20 digits. */
import { describe, expect, it } from 'vitest';
import { partialSum } from '../../src/expand/index.ts';
import { build, type Expression, mapChildren, Q } from '../../src/expression/index.ts';
import { valueOf } from '../read/evaluate.ts';
import { expansionOf, expectExpansion, latex, outcomeOf, positive } from './tools.ts';

const atInfinity = { variable: 'n', at: 'inf' } as const;

describe('published coefficients', () => {
  // Abramowitz & Stegun 9.3.31, 9.3.32, from memory: a (1 - 1/(225 n^2)) - b/(70 n^(4/3)) + ..., with 1213/1023750 as the next beta; a = 2^(1/3)/(3^(2/3) Gamma(2/3)), b = 2^(2/3)/(3^(1/3) Gamma(1/3)).
  const a = '2^(1/3)/(3^(2/3)*gamma(2/3))';
  const b = '2^(2/3)/(3^(1/3)*gamma(1/3))';
  it('J_n(n)', () => expectExpansion(expansionOf('J_n(n)', { ...atInfinity, terms: 4 }), `${a}*(n^(-1/3) - n^(-7/3)/225) + ${b}*(-n^(-5/3)/70 + 1213/1023750*n^(-11/3))`, '13/3', 0, positive('n')));
  it('Y_n(n)', () => expectExpansion(expansionOf('Y_n(n)', { ...atInfinity, terms: 2 }), `-sqrt(3)*${a}*n^(-1/3) - sqrt(3)*${b}*n^(-5/3)/70`, '7/3', 0, positive('n')));
  // DLMF 10.19.3 with U_1(p) = (3 p - 5 p^3)/24 (DLMF 10.41.10), at p = coth alpha = 2/sqrt(3).
  it('J_n(n/2)', () => expect(valueOf(partialSum(expansionOf('J_n(n/2)', { ...atInfinity, terms: 2 })), { n: 50 })).toBeCloseTo(valueOf(latex(String.raw`\frac{e^{n(\sqrt3/2 - \ln(2+\sqrt3))}}{\sqrt{2\pi n\sqrt3/2}}(1 - \frac{11}{36\sqrt3 n})`), { n: 50 }), 20));
});

/** Gamma(1/3) and Gamma(2/3) as decimals (DLMF 5.4.6 gives no closed form; values of mpmath). */
function inNumbers(e: Expression): Expression {
  if (e.kind === 'call' && e.function === 'gamma' && e.args[0]?.kind === 'number') return build.number(Q.toDouble(e.args[0].value) < 0.5 ? Q.rational(2678938534707747633n, 10n ** 18n) : Q.rational(13541179394264004169n, 10n ** 19n));
  return mapChildren(e, inNumbers);
}

describe('values at n = 50', () => {
  // The errors left with three terms are below the next terms: a few 50^-3, for the transition region 50^-(7/3).
  const rows: readonly (readonly [text: string, value: number, relative: number])[] = [
    ['J_n(n/2)', 9.7561594280229815e-12, 1e-5],
    ['Y_n(n/2)', -753573251.4466261627, 1e-5],
    ['J_n(2n)', -0.038698339728525383, 1e-5],
    ['Y_n(2n)', 0.076505263944803040, 1e-5],
    ['I_n(2n)', 4.8219580855940807e36, 1e-5],
    ['K_n(n/3)', 6845123333879656.3609, 1e-5],
    ['J_n(n+1)', 0.15001224585840711, 1e-3],
    ['Y_n(n-1)', -0.26574546570667623, 1e-3],
    ["J_n'(n)", 0.029786120623857174, 1e-5],
    ['J_n(3)', 2.0059490258497251e-56, 1e-3],
    ['K_n(3)', 4.5559542293221519e53, 1e-3],
  ];
  for (const [text, value, relative] of rows) {
    it(text, () => {
      const found = valueOf(inNumbers(partialSum(expansionOf(text, { ...atInfinity, terms: 4 }))), { n: 50 });
      expect(Math.abs(found / value - 1)).toBeLessThan(relative);
    });
  }
});

it('the argument of J_n(x n) must be known to lie below or above the order', () => {
  const found = outcomeOf(latex('J_n(nx)'), { ...atInfinity, assumptions: positive('x') });
  expect(found.ok ? null : found.error.code).toBe('needs-assumption');
});
