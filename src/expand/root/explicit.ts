/** Equations in which the unknown occurs once are solved by undoing one operation after the other, with principal values. */
import { build, dependsOn, type Expression, Q } from '../../expression/index.ts';

const INVERSE: Readonly<Record<string, string>> = { exp: 'log', log: 'exp', sin: 'asin', cos: 'acos', tan: 'atan', sinh: 'asinh', cosh: 'acosh', tanh: 'atanh', expm1: 'log1p', log1p: 'expm1' };

/** A tree y with e(y) = value for every value where the inverse is defined; null if the unknown occurs more than once or cannot be freed. */
export function solveFor(e: Expression, unknown: string, value: Expression): Expression | null {
  const only = (parts: readonly Expression[]): { readonly moving: Expression; readonly fixed: readonly Expression[] } | null => {
    const moving = parts.filter((p) => dependsOn(p, unknown));
    const [first] = moving;
    return moving.length === 1 && first ? { moving: first, fixed: parts.filter((p) => p !== first) } : null;
  };
  switch (e.kind) {
    case 'symbol':
      return e.name === unknown ? value : null;
    case 'negation':
      return solveFor(e.operand, unknown, build.negation(value));
    case 'sum': {
      const parts = only(e.terms);
      return parts && solveFor(parts.moving, unknown, build.sum(value, ...parts.fixed.map(build.negation)));
    }
    case 'product': {
      const parts = only(e.factors);
      return parts && solveFor(parts.moving, unknown, build.quotient(value, build.product(...parts.fixed)));
    }
    case 'quotient': {
      const above = dependsOn(e.numerator, unknown);
      const below = dependsOn(e.denominator, unknown);
      if (above && !below) return solveFor(e.numerator, unknown, build.product(value, e.denominator));
      if (below && !above) return solveFor(e.denominator, unknown, build.quotient(e.numerator, value));
      return null;
    }
    case 'power': {
      if (dependsOn(e.exponent, unknown)) return dependsOn(e.base, unknown) ? null : solveFor(e.exponent, unknown, build.quotient(build.call('log', value), build.call('log', e.base)));
      const odd = e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num % 2n !== 0n && e.exponent.value.num > 1n;
      if (odd && e.exponent.kind === 'number') return solveFor(e.base, unknown, { kind: 'root', degree: e.exponent, radicand: value });
      const inverse = e.exponent.kind === 'number' && !Q.isZero(e.exponent.value) ? build.number(Q.reciprocal(e.exponent.value)) : build.quotient(build.number(1), e.exponent);
      return solveFor(e.base, unknown, build.power(value, inverse));
    }
    case 'root':
      return dependsOn(e.degree, unknown) ? null : solveFor(e.radicand, unknown, build.power(value, e.degree));
    case 'call': {
      const [a] = e.args;
      const inverse = INVERSE[e.function];
      return e.args.length === 1 && a && inverse ? solveFor(a, unknown, build.call(inverse, value)) : null;
    }
    default:
      return null;
  }
}
