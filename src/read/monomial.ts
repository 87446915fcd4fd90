/** Expressions that are one product of symbols to rational powers, up to a constant: the units of which dimensionless ratios are made. */
import { type Expression, literalRational, Q, type Rational } from '../expression/index.ts';

/** Symbol -> exponent, in order of appearance; no zero exponents. */
export type Monomial = ReadonlyMap<string, Rational>;

/** The monomial that the expression is, constants ignored; null where it is none. */
export function monomialOf(e: Expression): Monomial | null {
  switch (e.kind) {
    case 'number':
    case 'constant':
      return new Map();
    case 'symbol':
      return new Map([[e.name, Q.ONE]]);
    case 'negation':
      return monomialOf(e.operand);
    case 'product':
      return e.factors.map(monomialOf).reduce<Monomial | null>((a, b) => (a && b ? combine(a, b, Q.ONE) : null), new Map<string, Rational>());
    case 'quotient': {
      const above = monomialOf(e.numerator);
      const below = monomialOf(e.denominator);
      return above && below ? combine(above, below, Q.MINUS_ONE) : null;
    }
    case 'power': {
      const base = monomialOf(e.base);
      const exponent = literalRational(e.exponent);
      return base && exponent ? combine(new Map(), base, exponent) : null;
    }
    case 'root': {
      const base = monomialOf(e.radicand);
      const degree = literalRational(e.degree);
      return base && degree && !Q.isZero(degree) ? combine(new Map(), base, Q.reciprocal(degree)) : null;
    }
    default:
      return null;
  }
}

function combine(a: Monomial, b: Monomial, times: Rational): Monomial {
  const out = new Map(a);
  for (const [name, exponent] of b) {
    const total = Q.add(out.get(name) ?? Q.ZERO, Q.multiply(exponent, times));
    if (Q.isZero(total)) out.delete(name);
    else out.set(name, total);
  }
  return out;
}

/** The same monomial with coprime whole exponents, the first one positive. */
export function primitive(m: Monomial): Monomial {
  let denominator = 1n;
  for (const { den } of m.values()) denominator = (denominator * den) / Q.gcd(denominator, den);
  let common = 0n;
  for (const { num, den } of m.values()) common = Q.gcd(common, (num * denominator) / den);
  const [first] = m.values();
  const scale = Q.rational(denominator * (first && first.num < 0n ? -1n : 1n), common === 0n ? 1n : common);
  return new Map([...m].map(([name, exponent]) => [name, Q.multiply(exponent, scale)]));
}

export const monomialKey = (m: Monomial): string => [...m].map(([name, q]) => `${name}^${Q.toText(q)}`).sort().join(' ');

/** The largest subtrees that are monomials with at least one symbol. */
export function maximalMonomials(root: Expression, children: (e: Expression) => readonly Expression[]): readonly Monomial[] {
  const out: Monomial[] = [];
  const stack: Expression[] = [root];
  for (let e = stack.pop(); e; e = stack.pop()) {
    const m = monomialOf(e);
    if (m) {
      if (m.size > 0) out.push(m);
      continue;
    }
    // A product of a monomial and something else: the monomial part counts as a whole.
    if (e.kind === 'product') {
      let part: Monomial = new Map();
      for (const factor of e.factors) {
        const own = monomialOf(factor);
        if (own) part = combine(part, own, Q.ONE);
        else stack.push(factor);
      }
      if (part.size > 0) out.push(part);
    } else stack.push(...children(e));
  }
  return out;
}
