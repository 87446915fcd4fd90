/** Values of read trees in double precision, elementary functions only: to compare meanings with other parsers, never to prove anything. */
import { type Expression, Q } from '../../src/expression/index.ts';

const FUNCTIONS: Readonly<Record<string, (...x: number[]) => number>> = {
  sin: Math.sin, cos: Math.cos, tan: Math.tan, cot: (x) => 1 / Math.tan(x), sec: (x) => 1 / Math.cos(x), csc: (x) => 1 / Math.sin(x),
  sinh: Math.sinh, cosh: Math.cosh, tanh: Math.tanh, coth: (x) => 1 / Math.tanh(x), asin: Math.asin, acos: Math.acos, atan: Math.atan,
  asinh: Math.asinh, acosh: Math.acosh, atanh: Math.atanh, acoth: (x) => Math.atanh(1 / x), asech: (x) => Math.acosh(1 / x), acsch: (x) => Math.asinh(1 / x),
  exp: Math.exp, log: Math.log, log10: Math.log10, log2: Math.log2, abs: Math.abs, expm1: Math.expm1, log1p: Math.log1p,
  factorial: (n) => (Number.isInteger(n) && n >= 0 ? Array.from({ length: n }, (_, i) => i + 1).reduce((a, b) => a * b, 1) : NaN),
};

/** NaN where the tree holds anything else than real elementary functions. */
export function valueOf(e: Expression, at: Readonly<Record<string, number>>): number {
  const v = (x: Expression): number => valueOf(x, at);
  switch (e.kind) {
    case 'number':
      return Q.toDouble(e.value);
    case 'constant':
      return e.name === 'pi' ? Math.PI : e.name === 'e' ? Math.E : e.name === 'infinity' ? Infinity : e.name === 'eulerGamma' ? 0.5772156649015329 : NaN;
    case 'symbol':
      return at[e.name] ?? NaN;
    case 'sum':
      return e.terms.map(v).reduce((a, b) => a + b, 0);
    case 'product':
      return e.factors.map(v).reduce((a, b) => a * b, 1);
    case 'quotient':
      return v(e.numerator) / v(e.denominator);
    case 'negation':
      return -v(e.operand);
    case 'power':
      return v(e.base) ** v(e.exponent);
    case 'root': {
      const [n, x] = [v(e.degree), v(e.radicand)];
      return x < 0 && n % 2 === 1 ? -((-x) ** (1 / n)) : x ** (1 / n);
    }
    case 'call':
      return FUNCTIONS[e.function]?.(...e.args.map(v)) ?? NaN;
    case 'indexedSum': {
      let total = 0;
      const name = e.index.kind === 'symbol' ? e.index.name : '';
      for (let k = v(e.lower); k <= Math.min(v(e.upper), 400); k += 1) total += valueOf(e.body, { ...at, [name]: k });
      return total;
    }
    default:
      return NaN;
  }
}
