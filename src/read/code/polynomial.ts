/** Polynomials in one variable with exact coefficients, from expressions. */
import { type Expression, Q, type Rational } from '../../expression/index.ts';

/** Lowest power first; the last entry is not zero (except for the zero polynomial, which is empty). */
export type Coefficients = readonly Rational[];

const MOST_DEGREE = 400;

const trim = (c: readonly Rational[]): Coefficients => {
  let n = c.length;
  while (n > 0 && Q.isZero(c[n - 1] ?? Q.ZERO)) n -= 1;
  return c.slice(0, n);
};

const plus = (a: Coefficients, b: Coefficients): Coefficients =>
  trim(Array.from({ length: Math.max(a.length, b.length) }, (_, k) => Q.add(a[k] ?? Q.ZERO, b[k] ?? Q.ZERO)));

function times(a: Coefficients, b: Coefficients): Coefficients | null {
  if (a.length === 0 || b.length === 0) return [];
  if (a.length + b.length - 1 > MOST_DEGREE + 1) return null;
  const product: Rational[] = Array.from({ length: a.length + b.length - 1 }, () => Q.ZERO);
  a.forEach((x, i) => {
    if (Q.isZero(x)) return;
    b.forEach((y, j) => {
      product[i + j] = Q.add(product[i + j] ?? Q.ZERO, Q.multiply(x, y));
    });
  });
  return trim(product);
}

/** The coefficients of a polynomial in `variable` with rational coefficients; null where it is none or its degree is beyond 400. */
export function polynomialIn(expression: Expression, variable: string): Coefficients | null {
  const known = new Map<Expression, Coefficients | null>();
  const visit = (e: Expression): Coefficients | null => {
    const found = known.get(e);
    if (found !== undefined) return found;
    const result = compute(e);
    known.set(e, result);
    return result;
  };
  const fold = (items: readonly Expression[], start: Coefficients, f: (a: Coefficients, b: Coefficients) => Coefficients | null): Coefficients | null => {
    let total: Coefficients | null = start;
    for (const item of items) {
      const value = visit(item);
      if (!value || !total) return null;
      total = f(total, value);
    }
    return total;
  };
  const compute = (e: Expression): Coefficients | null => {
    switch (e.kind) {
      case 'number':
        return trim([e.value]);
      case 'symbol':
        return e.name === variable ? [Q.ZERO, Q.ONE] : null;
      case 'negation': {
        const inner = visit(e.operand);
        return inner ? inner.map(Q.negate) : null;
      }
      case 'sum':
        return fold(e.terms, [], plus);
      case 'product':
        return fold(e.factors, [Q.ONE], times);
      case 'quotient': {
        const [top, bottom] = [visit(e.numerator), visit(e.denominator)];
        const [divisor] = bottom ?? [];
        return top && divisor && bottom?.length === 1 ? top.map((c) => Q.divide(c, divisor)) : null;
      }
      case 'power': {
        const power = visit(e.exponent);
        const [value = Q.ZERO] = power ?? [];
        const exponent = power && power.length <= 1 && Q.isInteger(value) ? value.num : null;
        const base = visit(e.base);
        if (!base || exponent === null || exponent < 0n || exponent > BigInt(MOST_DEGREE)) return null;
        let total: Coefficients | null = [Q.ONE];
        for (let k = 0n; k < exponent && total; k += 1n) total = times(total, base);
        return total;
      }
      default:
        return null;
    }
  };
  return visit(expression);
}
