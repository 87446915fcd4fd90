/** Derivatives as trees that code can evaluate. */
import { build, dependsOn, type Expression, Q } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { rationalOf } from '../rigorous/index.ts';

const isZero = (e: Expression): boolean => rationalOf(e)?.num === 0n;
const times = (...factors: readonly Expression[]): Expression => (factors.some(isZero) ? build.number(0) : build.product(...factors.filter((f) => !build.isOneNumber(f))));
const plus = (...terms: readonly Expression[]): Expression => build.sum(...terms.filter((t) => !isZero(t)));

/** de/dx; null where a function in it has no derivative in closed form. */
export function differentiate(e: Expression, x: string): Expression | null {
  if (!dependsOn(e, x)) return build.number(0);
  const d = (inner: Expression): Expression | null => differentiate(inner, x);
  const all = (parts: readonly (Expression | null)[]): readonly Expression[] | null => (parts.every((p): p is Expression => p !== null) ? parts : null);
  switch (e.kind) {
    case 'symbol':
      return build.number(1);
    case 'negation': {
      const inner = d(e.operand);
      return inner && build.negation(inner);
    }
    case 'sum': {
      const parts = all(e.terms.map(d));
      return parts && plus(...parts);
    }
    case 'product': {
      const parts = all(e.factors.map(d));
      return parts && plus(...parts.map((p, i) => times(...e.factors.map((f, j) => (i === j ? p : f)))));
    }
    case 'quotient': {
      const [n, m] = [d(e.numerator), d(e.denominator)];
      if (!n || !m) return null;
      if (isZero(m)) return build.quotient(n, e.denominator);
      return build.quotient(plus(times(n, e.denominator), build.negation(times(e.numerator, m))), build.power(e.denominator, 2));
    }
    case 'power': {
      const q = rationalOf(e.exponent);
      const base = d(e.base);
      if (q && base) return times(build.number(q), Q.equal(q, Q.rational(2)) ? e.base : build.power(e.base, Q.subtract(q, Q.ONE)), base);
      const exponent = d(e.exponent);
      if (!dependsOn(e.base, x) && exponent) return times(e, e.base.kind === 'constant' && e.base.name === 'e' ? build.number(1) : build.call('log', e.base), exponent);
      return null;
    }
    case 'call': {
      const parts = e.args.map((arg, k) => {
        if (!dependsOn(arg, x)) return build.number(0);
        const [outer, inner] = [describe(e.function)?.derivative?.(e.args, k) ?? null, d(arg)];
        return outer && inner && times(outer, inner);
      });
      const known = all(parts);
      return known && plus(...known);
    }
    default:
      return null;
  }
}
