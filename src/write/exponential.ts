/** e^(x log x - x) as a person writes it: x^x e^(-x). By definition e^(A log B) is the principal value of B^A, so nothing changes. */
import { build, Q, structureKey, type Expression, type Rational } from '../expression/index.ts';

export interface SplitExponential {
  /** Powers B^A that were pulled out of the exponent. */
  readonly powers: readonly { readonly base: Expression; readonly exponent: Expression }[];
  /** What stays in the exponent of e; null where nothing does. */
  readonly rest: Expression | null;
}

/** Null where no logarithm stands in the exponent, or it is not a plain sum of products. */
export function splitExponential(exponent: Expression): SplitExponential | null {
  const terms = distribute(exponent);
  if (terms === null) return null;
  const powers: { base: Expression; exponent: Expression }[] = [];
  const numbers = new Map<string, { base: Rational; exponent: Expression }>();
  const rest: Expression[] = [];
  for (const { coefficient, factors } of terms) {
    const logs = factors.filter((f) => f.kind === 'call' && f.function === 'log');
    const [log] = logs;
    const inner = log?.kind === 'call' ? log.args[0] : undefined;
    if (logs.length !== 1 || !inner) {
      rest.push(monomial(coefficient, factors));
      continue;
    }
    const others = factors.filter((f) => f !== log);
    if (inner.kind === 'number' && inner.value.num > 0n && Q.isInteger(coefficient) && coefficient.num < 64n && coefficient.num > -64n && others.length > 0) {
      const key = others.map(structureKey).sort().join('*');
      const known = numbers.get(key);
      const base = Q.multiply(known?.base ?? Q.ONE, Q.power(inner.value, coefficient.num));
      numbers.set(key, { base, exponent: known?.exponent ?? build.product(...others) });
    } else powers.push({ base: inner, exponent: monomial(coefficient, others) });
  }
  if (powers.length === 0 && numbers.size === 0) return null;
  for (const { base, exponent: e } of numbers.values()) if (!Q.isOne(base)) powers.unshift({ base: build.number(base), exponent: e });
  return { powers, rest: rest.length === 0 ? null : build.sum(...rest) };
}

interface Product {
  readonly coefficient: Rational;
  readonly factors: readonly Expression[];
}

function monomial(coefficient: Rational, factors: readonly Expression[]): Expression {
  const magnitude = Q.absolute(coefficient);
  const above = [...(magnitude.num === 1n && factors.length > 0 ? [] : [build.number(magnitude.num)]), ...factors];
  const value = magnitude.den === 1n ? build.product(...above) : build.quotient(build.product(...above), build.number(magnitude.den));
  return coefficient.num < 0n ? build.negation(value) : value;
}

/** The expression as a sum of products, products distributed over sums; null where that has too many terms. */
function distribute(e: Expression): readonly Product[] | null {
  const LIMIT = 16;
  switch (e.kind) {
    case 'number':
      return [{ coefficient: e.value, factors: [] }];
    case 'negation':
      return distribute(e.operand)?.map((p) => ({ ...p, coefficient: Q.negate(p.coefficient) })) ?? null;
    case 'sum': {
      const all: Product[] = [];
      for (const term of e.terms) {
        const inner = distribute(term);
        if (!inner) return null;
        all.push(...inner);
      }
      return all.length > LIMIT ? null : all;
    }
    case 'product': {
      let all: readonly Product[] = [{ coefficient: Q.ONE, factors: [] }];
      for (const factor of e.factors) {
        const inner = distribute(factor);
        if (!inner || all.length * inner.length > LIMIT) return null;
        all = all.flatMap((a) => inner.map((b) => ({ coefficient: Q.multiply(a.coefficient, b.coefficient), factors: [...a.factors, ...b.factors] })));
      }
      return all;
    }
    case 'quotient': {
      if (e.denominator.kind !== 'number' || Q.isZero(e.denominator.value)) return [{ coefficient: Q.ONE, factors: [e] }];
      const divisor = Q.reciprocal(e.denominator.value);
      return distribute(e.numerator)?.map((p) => ({ ...p, coefficient: Q.multiply(p.coefficient, divisor) })) ?? null;
    }
    default:
      return [{ coefficient: Q.ONE, factors: [e] }];
  }
}
