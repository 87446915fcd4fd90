/** Random trees of what readers can read: for round trips. */
import fc from 'fast-check';
import { build, Q, type Expression } from '../../src/expression/index.ts';

const SYMBOLS = ['x', 'a', 'b', 'k_B', 'v_0', '\\epsilon', '\\theta', 'v_{max}', 'm'];
const UNARY = ['sin', 'cos', 'tan', 'asin', 'atan', 'sinh', 'tanh', 'asinh', 'log', 'abs', 'gamma', 'erf', 'factorial', 'digamma', 'airyAi', 'zeta', 'sinIntegral', 'expIntegralEi'];
const BINARY = ['besselJ', 'besselK', 'beta', 'binomial', 'polylog'];

export function expressions(symbols: readonly string[] = SYMBOLS, unary: readonly string[] = UNARY, binary: readonly string[] = BINARY): fc.Arbitrary<Expression> {
  const integer = fc.integer({ min: -30, max: 30 }).filter((k) => k !== 0);
  const leaf: fc.Arbitrary<Expression> = fc.oneof(
    { weight: 5, arbitrary: fc.constantFrom(...symbols).map((s) => build.symbol(s)) },
    { weight: 2, arbitrary: integer.map((k) => build.number(k)) },
    { weight: 1, arbitrary: fc.tuple(integer, fc.integer({ min: 2, max: 12 })).map(([k, d]) => build.number(Q.rational(k, d))) },
    { weight: 1, arbitrary: fc.constantFrom('pi', 'e').map((name) => build.constant(name as 'pi' | 'e')) },
  );
  const index = fc.constantFrom<Expression>(build.symbol('a'), build.symbol('m'), build.number(0), build.number(2), build.number(Q.rational(-1, 2)));
  const exponent = fc.oneof(
    fc.constantFrom(2, 3, 4, -1, -2, 10).map((k) => build.number(k)),
    fc.constantFrom([1, 2], [3, 2], [-1, 2], [1, 3], [-5, 2]).map(([k = 1, d = 2]) => build.number(Q.rational(k, d))),
    leaf,
  );
  return fc.letrec<{ tree: Expression }>((tie) => ({
    tree: fc.oneof(
      { maxDepth: 4, withCrossShrink: true },
      leaf,
      fc.array(tie('tree'), { minLength: 2, maxLength: 3 }).map((terms) => build.sum(...terms)),
      fc.array(tie('tree'), { minLength: 2, maxLength: 3 }).map((factors) => build.product(...factors)),
      fc.tuple(tie('tree'), tie('tree')).filter(([, d]) => !(d.kind === 'number' && Q.isZero(d.value))).map(([a, b]) => build.quotient(a, b)),
      tie('tree').map((e) => build.negation(e)),
      fc.tuple(tie('tree'), exponent).map(([b, e]) => build.power(b, e)),
      tie('tree').map((e) => build.root(3, e)),
      fc.tuple(fc.constantFrom(...unary), tie('tree')).map(([name, e]) => build.call(name, e)),
      ...(binary.length > 0 ? [fc.tuple(fc.constantFrom(...binary), index, tie('tree')).map(([name, a, b]) => build.call(name, a, build.sum(build.symbol('x'), b)))] : []),
    ),
  })).tree;
}
