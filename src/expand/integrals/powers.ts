/** Finite sums of rational powers of one symbol, read off trees. */
import type { Element, Field } from '../../algebra/types.ts';
import { dependsOn, type Expression, Q, type Rational } from '../../expression/index.ts';

export interface PowerTerm {
  readonly exponent: Rational;
  readonly coefficient: Element;
}
/** `positive`: the form holds for v >= 0 only. */
export interface PowerSum {
  readonly terms: readonly PowerTerm[];
  readonly positive: boolean;
}

const MOST_POWER = 400n;

function multiplied(field: Field, a: PowerSum, b: PowerSum): PowerSum {
  const terms = a.terms.flatMap((x) => b.terms.map((y) => ({ exponent: Q.add(x.exponent, y.exponent), coefficient: field.multiply(x.coefficient, y.coefficient) })));
  return { terms: collected(field, terms), positive: a.positive || b.positive };
}

function collected(field: Field, terms: readonly PowerTerm[]): PowerTerm[] {
  const byExponent = new Map<string, PowerTerm>();
  for (const t of terms) {
    const key = `${t.exponent.num}/${t.exponent.den}`;
    const other = byExponent.get(key);
    byExponent.set(key, other ? { ...t, coefficient: field.add(other.coefficient, t.coefficient) } : t);
  }
  return [...byExponent.values()].filter((t) => field.isZero(t.coefficient) !== 'yes');
}

/** A tree as a finite sum of rational powers of v; null for others. */
export function powersOf(field: Field, e: Expression, v: string): PowerSum | null {
  const single = (exponent: Rational, coefficient: Element): PowerSum => ({ terms: [{ exponent, coefficient }], positive: false });
  if (!dependsOn(e, v)) return single(Q.ZERO, field.fromExpression(e));
  switch (e.kind) {
    case 'symbol':
      return single(Q.ONE, Q.ONE);
    case 'negation': {
      const inner = powersOf(field, e.operand, v);
      return inner && multiplied(field, inner, single(Q.ZERO, Q.MINUS_ONE));
    }
    case 'sum': {
      const parts = e.terms.map((t) => powersOf(field, t, v));
      if (!parts.every((p) => p !== null)) return null;
      return { terms: collected(field, parts.flatMap((p) => p.terms)), positive: parts.some((p) => p.positive) };
    }
    case 'product':
      return e.factors.reduce<PowerSum | null>((a, f) => {
        const own = a && powersOf(field, f, v);
        return a && own && multiplied(field, a, own);
      }, single(Q.ZERO, Q.ONE));
    case 'quotient': {
      const above = powersOf(field, e.numerator, v);
      const below = above && powersOf(field, e.denominator, v);
      const inverse = below && raised(field, below, Q.MINUS_ONE);
      return above && inverse && multiplied(field, above, inverse);
    }
    case 'power': {
      const exponent = dependsOn(e.exponent, v) ? null : field.asRational(field.fromExpression(e.exponent));
      const base = exponent && powersOf(field, e.base, v);
      return base && exponent && raised(field, base, exponent);
    }
    default:
      return null;
  }
}

function raised(field: Field, base: PowerSum, n: Rational): PowerSum | null {
  const whole = n.den === 1n;
  const [only] = base.terms;
  if (only && base.terms.length === 1) {
    if (!whole && field.sign(only.coefficient) !== 1) return null;
    return { terms: [{ exponent: Q.multiply(only.exponent, n), coefficient: field.power(only.coefficient, n) }], positive: base.positive || !whole };
  }
  if (!whole || n.num < 0n || n.num > MOST_POWER) return null;
  let result: PowerSum = { terms: [{ exponent: Q.ZERO, coefficient: Q.ONE }], positive: false };
  for (let k = 0n; k < n.num; k += 1n) result = multiplied(field, result, base);
  return result;
}
