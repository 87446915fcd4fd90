/** Partial sums against MPFR at shrinking h: the error divided by the stated scale must not grow. */
import { init } from 'gmp-wasm';
import { expect, test } from 'vitest';
import { type Expansion, partialSum, remainderScale } from '../../src/expand/index.ts';
import { type Expression, Q } from '../../src/expression/index.ts';
import { expansionOf, latex } from './tools.ts';

const library = await init();
const context = library.getContext({ precisionBits: 700 });
const UNARY = ['exp', 'ln', 'sin', 'cos', 'tan', 'sinh', 'cosh', 'tanh', 'asin', 'acos', 'atan', 'asinh', 'acosh', 'atanh', 'abs', 'gamma', 'lngamma', 'digamma', 'erf', 'erfc', 'neg'] as const;
type Unary = (typeof UNARY)[number];
/** What is used of a number of the library. */
type Value = Readonly<Record<Unary, () => Value> & Record<'add' | 'sub' | 'mul' | 'div' | 'pow', (other: Value) => Value>> & { readonly toNumber: () => number };
const float = (v: string | number): Value => context.Float(v) as unknown as Value;
const rational = (n: bigint, d: bigint): Value => float(`${n}`).div(float(`${d}`));
const functionNames: Readonly<Record<string, Unary>> = { log: 'ln', logGamma: 'lngamma' };
const isUnary = (name: string): name is Unary => (UNARY as readonly string[]).includes(name);

function valueOf(e: Expression, x: Value): Value {
  const go = (t: Expression): Value => valueOf(t, x);
  switch (e.kind) {
    case 'number':
      return rational(e.value.num, e.value.den);
    case 'symbol':
      return x;
    case 'constant':
      if (e.name === 'pi') return context.Pi() as unknown as Value;
      if (e.name === 'e') return float(1).exp();
      break;
    case 'sum':
      return e.terms.map(go).reduce((a, b) => a.add(b));
    case 'product':
      return e.factors.map(go).reduce((a, b) => a.mul(b));
    case 'quotient':
      return go(e.numerator).div(go(e.denominator));
    case 'negation':
      return go(e.operand).neg();
    case 'power':
      if (e.base.kind === 'constant' && e.base.name === 'e') return go(e.exponent).exp();
      return go(e.base).pow(go(e.exponent));
    case 'call': {
      const [a] = e.args;
      if (!a) break;
      const name = functionNames[e.function] ?? e.function;
      if (isUnary(name)) return go(a)[name]();
      break;
    }
    default:
      break;
  }
  throw new Error(`no value for ${e.kind}`);
}

function expectHolds(f: Expression, found: Expansion, points: readonly string[]): void {
  const ratios = points.map((p) => {
    const x = float(p);
    const error = valueOf(f, x).sub(valueOf(partialSum(found), x)).abs();
    return error.div(valueOf(remainderScale(found), x)).toNumber();
  });
  const [first = 0, ...later] = ratios;
  for (const r of later) expect(r).toBeLessThan(8 * Math.max(first, 1));
  expect(Number.isFinite(first)).toBe(true);
}

test.each([
  ['\\tan(\\sin x)-\\sin(\\tan x)', '0', ['0.01', '0.0001', '0.000001']],
  ['\\frac{x}{\\sin x}', '0', ['0.01', '0.0001', '0.000001']],
  ['x^{\\sin x}', '0', ['0.01', '0.0001', '0.00000001']],
  ['\\ln\\tan x', '0', ['0.01', '0.0001', '0.000001']],
  ['\\operatorname{artanh}(1-x)', '0', ['0.01', '0.0001', '0.000001']],
  ['\\frac{1}{x\\ln x}+e^{\\sqrt{x}}', '0', ['0.01', '0.0001', '0.000001']],
  ['\\sqrt{x+\\sqrt{x+\\sqrt{x}}}-\\sqrt{x}', 'inf', ['100', '10000', '1000000']],
  ['\\left(1+\\frac1x\\right)^{x^2}e^{-x}', 'inf', ['100', '1000', '10000']],
  ['e^{\\sqrt{\\ln^2 x+\\ln x}}', 'inf', ['1e10', '1e20', '1e40']],
  ['\\Gamma(x)', 'inf', ['20', '100', '400']],
  ['\\ln\\Gamma(x)', 'inf', ['20', '100', '4000']],
  ['\\operatorname{erfc}(x)', 'inf', ['4', '8', '12']],
  ['\\frac{\\ln(x+e^x)}{\\ln x}', 'inf', ['20', '40', '80']],
  ['\\tanh x', 'inf', ['5', '10', '20']],
] as const)('%s at %s', (text, at, points) => {
  const f = latex(text);
  expectHolds(f, expansionOf(f, { at, side: 'right', terms: 4 }), points);
});

test('200 terms of exp(sin x) at x = 1/10 agree to 200 digits', () => {
  const f = latex('e^{\\sin x}');
  const found = expansionOf(f, { terms: 200 });
  const x = float(1).div(float(10));
  const error = valueOf(f, x).sub(valueOf(partialSum(found), x)).abs();
  expect(error.toNumber()).toBeLessThan(1e-200);
  expect(Q.compare(found.terms[199]?.power.kind === 'number' ? found.terms[199].power.value : Q.ZERO, Q.rational(200))).toBeGreaterThanOrEqual(0);
});
