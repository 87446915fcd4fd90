/** Expressions as they stand in programs, against trees built by hand. */
import { beforeAll, describe, expect, it } from 'vitest';
import { build, type Expression, Q } from '../../../src/expression/index.ts';
import { declined, key, keyOf, reader } from './reader.ts';

const { call, constant, negation: neg, number: n, power: pow, product: mul, quotient: div, squareRoot: sqrt, sum: add, symbol } = build;
const x = symbol('x');
const sub = (a: Expression, b: Expression): Expression => add(a, neg(b));
const f = (name: string, ...args: Expression[]): Expression => call(name, ...args);
const pi = constant('pi');

const rows: readonly (readonly [language: string, text: string, tree: Expression])[] = [
  ['c', '(1.0 - cos(x)) / (x*x)', div(sub(n(1), f('cos', x)), mul(x, x))],
  ['c', 'fmaf(x, x, 1.0f)', add(mul(x, x), n(1))],
  ['python', 'np.sqrt(1 + x)*np.exp(-x)', mul(sqrt(add(n(1), x)), f('exp', neg(x)))],
  ['rust', 'x.powi(2).sin() / x', div(f('sin', pow(x, 2)), x)],
  ['typescript', 'Math.log1p(t) - t', sub(f('log1p', symbol('t')), symbol('t'))],
  ['fortran', '1.0d0/(1.0d0+x)', div(n(1), add(n(1), x))],
  ['julia', '2x^2', mul(n(2), pow(x, 2))],
  ['julia', '2^3x', pow(n(2), mul(n(3), x))],
  ['julia', '1/2x', div(n(1), mul(n(2), x))],
  ['matlab', 'x.^2./(1+x)', div(pow(x, 2), add(n(1), x))],
  ['cpp', 'std::sin(x)/x + std::numbers::pi', add(div(f('sin', x), x), pi)],
  ['c', '0.1f*x', mul(n(Q.rational(1, 10)), x)],
];

describe('expressions in programs', () => {
  beforeAll(async () => {
    for (const language of new Set(rows.map(([l]) => l))) await reader.prepare(language);
  });
  it.each(rows)('%s: %s', (language, text, tree) => {
    expect(keyOf(text, language)).toBe(key(tree));
  });
  it('declines ^ in C and says what to write', () => {
    expect(declined('x^2', 'c').message).toContain('pow(x, y)');
  });
});
