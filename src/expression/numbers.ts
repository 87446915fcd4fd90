/** Trees that are rational numbers. */
import type { Expression } from './expression.ts';
import * as Q from './rational.ts';

const LARGEST_EXPONENT = Q.rational(64);

/** The rational number that the tree is by arithmetic on number nodes alone; null for any other tree, and for one nested deeper than `depth` or with huge powers. */
export function rationalOf(e: Expression, depth = 40): Q.Rational | null {
  if (depth < 0) return null;
  const inner = (child: Expression): Q.Rational | null => rationalOf(child, depth - 1);
  switch (e.kind) {
    case 'number':
      return e.value;
    case 'negation': {
      const value = inner(e.operand);
      return value && Q.negate(value);
    }
    case 'sum':
      return joinRationals(e.terms, Q.ZERO, Q.add, inner);
    case 'product':
      return joinRationals(e.factors, Q.ONE, Q.multiply, inner);
    case 'quotient': {
      const numerator = inner(e.numerator);
      const denominator = inner(e.denominator);
      return numerator && denominator && !Q.isZero(denominator) ? Q.divide(numerator, denominator) : null;
    }
    case 'power': {
      const base = inner(e.base);
      const exponent = inner(e.exponent);
      if (!base || !exponent || !Q.isInteger(exponent) || Q.compare(Q.absolute(exponent), LARGEST_EXPONENT) > 0) return null;
      return Q.isZero(base) && exponent.num < 0n ? null : Q.power(base, exponent.num);
    }
    default:
      return null;
  }
}

/** Rational values of all items, joined one after the other; null where an item has none. */
export function joinRationals(items: readonly Expression[], start: Q.Rational, step: (a: Q.Rational, b: Q.Rational) => Q.Rational, value: (e: Expression) => Q.Rational | null): Q.Rational | null {
  let total = start;
  for (const item of items) {
    const next = value(item);
    if (!next) return null;
    total = step(total, next);
  }
  return total;
}

/** A rational as it is written down (`2`, `-1`, `3/2`, `1.5`); null for anything that has yet to be worked out. */
export function literalRational(e: Expression): Q.Rational | null {
  if (e.kind === 'number') return e.value;
  if (e.kind === 'negation') {
    const value = literalRational(e.operand);
    return value && Q.negate(value);
  }
  if (e.kind === 'quotient') {
    const above = literalRational(e.numerator);
    const below = literalRational(e.denominator);
    return above && below && !Q.isZero(below) ? Q.divide(above, below) : null;
  }
  return null;
}
