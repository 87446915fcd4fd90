/** Trees that are linear in one symbol, with rational numbers. */
import type { Expression } from './expression.ts';
import { literalRational } from './numbers.ts';
import * as Q from './rational.ts';
import type { Rational } from './rational.ts';

/** slope * k + shift. */
export interface Linear {
  readonly slope: Rational;
  readonly shift: Rational;
}
/** e as slope * k + shift with rational numbers; null otherwise. */
export function linearIn(e: Expression, index: string): Linear | null {
  switch (e.kind) {
    case 'symbol':
      return e.name === index ? { slope: Q.ONE, shift: Q.ZERO } : null;
    case 'number':
      return { slope: Q.ZERO, shift: e.value };
    case 'negation': {
      const inner = linearIn(e.operand, index);
      return inner && { slope: Q.negate(inner.slope), shift: Q.negate(inner.shift) };
    }
    case 'sum': {
      const parts = e.terms.map((t) => linearIn(t, index));
      const known = parts.filter((p) => p !== null);
      return known.length === parts.length ? known.reduce((a, b) => ({ slope: Q.add(a.slope, b.slope), shift: Q.add(a.shift, b.shift) })) : null;
    }
    case 'product': {
      let result: Linear = { slope: Q.ZERO, shift: Q.ONE };
      for (const f of e.factors) {
        const inner = linearIn(f, index);
        if (!inner || (!Q.isZero(inner.slope) && !Q.isZero(result.slope))) return null;
        result = Q.isZero(inner.slope)
          ? { slope: Q.multiply(result.slope, inner.shift), shift: Q.multiply(result.shift, inner.shift) }
          : { slope: Q.multiply(inner.slope, result.shift), shift: Q.multiply(inner.shift, result.shift) };
      }
      return result;
    }
    case 'quotient': {
      const [above, below] = [linearIn(e.numerator, index), literalRational(e.denominator)];
      return above && below && !Q.isZero(below) ? { slope: Q.divide(above.slope, below), shift: Q.divide(above.shift, below) } : null;
    }
    default:
      return null;
  }
}
