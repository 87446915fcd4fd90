/** Linear normal form over Q of a tree: enough to see that a + b + 1/2 - a - b is 1/2. */
import { build, type Expression, Q, type Rational, structureKey } from '../expression/index.ts';

interface Linear {
  readonly constant: Rational;
  readonly terms: ReadonlyMap<string, { readonly atom: Expression; readonly scale: Rational }>;
}

function combine(a: Linear, b: Linear, scale: Rational): Linear {
  const terms = new Map(a.terms);
  for (const [key, { atom, scale: s }] of b.terms) {
    const total = Q.add(terms.get(key)?.scale ?? Q.ZERO, Q.multiply(s, scale));
    if (Q.isZero(total)) terms.delete(key);
    else terms.set(key, { atom, scale: total });
  }
  return { constant: Q.add(a.constant, Q.multiply(b.constant, scale)), terms };
}
const none: Linear = { constant: Q.ZERO, terms: new Map() };
const numberForm = (value: Rational): Linear => ({ constant: value, terms: new Map() });
const isPlain = (l: Linear): boolean => l.terms.size === 0;

function linear(e: Expression, depth: number): Linear {
  const atom: Linear = { constant: Q.ZERO, terms: new Map([[structureKey(e), { atom: e, scale: Q.ONE }]]) };
  if (depth < 0) return atom;
  switch (e.kind) {
    case 'number':
      return numberForm(e.value);
    case 'negation':
      return combine(none, linear(e.operand, depth - 1), Q.MINUS_ONE);
    case 'sum':
      return e.terms.reduce<Linear>((total, term) => combine(total, linear(term, depth - 1), Q.ONE), none);
    case 'product': {
      let scale = Q.ONE;
      let rest: Linear | null = null;
      for (const factor of e.factors) {
        const part = linear(factor, depth - 1);
        if (isPlain(part)) scale = Q.multiply(scale, part.constant);
        else if (rest) return atom;
        else rest = part;
      }
      return rest ? combine(none, rest, scale) : numberForm(scale);
    }
    case 'quotient': {
      const bottom = linear(e.denominator, depth - 1);
      return isPlain(bottom) && !Q.isZero(bottom.constant) ? combine(none, linear(e.numerator, depth - 1), Q.reciprocal(bottom.constant)) : atom;
    }
    default:
      return atom;
  }
}

/** The tree with like terms collected: a number node where it is a number. */
export function collected(e: Expression): Expression {
  const { constant, terms } = linear(e, 24);
  const parts = [...terms.values()].map(({ atom, scale }) => (Q.isOne(scale) ? atom : Q.isOne(Q.negate(scale)) ? build.negation(atom) : build.product(build.number(scale), atom)));
  if (!Q.isZero(constant) || parts.length === 0) parts.push(build.number(constant));
  return build.sum(...parts);
}
