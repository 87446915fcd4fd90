/** A plain double evaluator of trees, for comparing with what a compiler computed. Functions are those of the platform's Math. */
import { type Expression, Q } from '../../../src/expression/index.ts';

const FUNCTIONS: Readonly<Record<string, (...args: number[]) => number>> = {
  sin: Math.sin,
  cos: Math.cos,
  tan: Math.tan,
  exp: Math.exp,
  log: Math.log,
  log10: Math.log10,
  log2: Math.log2,
  log1p: Math.log1p,
  expm1: Math.expm1,
  exp2: (a) => 2 ** a,
  exp10: (a) => 10 ** a,
  sinh: Math.sinh,
  cosh: Math.cosh,
  tanh: Math.tanh,
  asin: Math.asin,
  acos: Math.acos,
  atan: Math.atan,
  asinh: Math.asinh,
  acosh: Math.acosh,
  atanh: Math.atanh,
  atan2: Math.atan2,
  hypot: Math.hypot,
  abs: Math.abs,
  sign: Math.sign,
};

export function evaluate(e: Expression, names: Readonly<Record<string, number>>): number {
  const go = (inner: Expression): number => evaluate(inner, names);
  switch (e.kind) {
    case 'number':
      return Q.toDouble(e.value);
    case 'constant': {
      const value = { pi: Math.PI, e: Math.E, infinity: Infinity, eulerGamma: 0.5772156649015329, catalan: 0.915965594177219, glaisher: 1.2824271291006226, i: NaN }[e.name];
      return value;
    }
    case 'symbol': {
      const value = names[e.name];
      if (value === undefined) throw new Error(`no value for ${e.name}`);
      return value;
    }
    case 'sum':
      return e.terms.map(go).reduce((a, b) => a + b, 0);
    case 'product':
      return e.factors.map(go).reduce((a, b) => a * b, 1);
    case 'quotient':
      return go(e.numerator) / go(e.denominator);
    case 'negation':
      return -go(e.operand);
    case 'power':
      return go(e.base) ** go(e.exponent);
    case 'root': {
      const [degree, value] = [go(e.degree), go(e.radicand)];
      return degree === 3 ? Math.cbrt(value) : Math.sign(value) * Math.abs(value) ** (1 / degree);
    }
    case 'call': {
      const f = FUNCTIONS[e.function];
      if (!f) throw new Error(`no evaluator for ${e.function}`);
      return f(...e.args.map(go));
    }
    case 'piecewise': {
      const branch = e.branches.find((b) => b.condition === null || holds(b.condition, names));
      return branch ? go(branch.value) : NaN;
    }
    default:
      throw new Error(`no value for ${e.kind}`);
  }
}

function holds(condition: Expression, names: Readonly<Record<string, number>>): boolean {
  if (condition.kind !== 'relation') throw new Error(condition.kind);
  const values = condition.sides.map((side) => evaluate(side, names));
  return condition.relations.every((relation, i) => {
    const [a, b] = [values[i] ?? NaN, values[i + 1] ?? NaN];
    return relation === '<' ? a < b : relation === '<=' ? a <= b : relation === '>' ? a > b : relation === '>=' ? a >= b : relation === '=' ? a === b : a !== b;
  });
}
