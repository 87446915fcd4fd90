/** Rewritings of trees that keep a local model from being spoilt: logarithms that cancel are joined, exponentials that grow are divided out. */
import { build, type Expression, Q, sameExpression } from '../expression/index.ts';

/** c log u - c log v as c log(u/v), wherever two terms of a sum go together so; null where none do. */
export function joinedLogarithms(terms: readonly Expression[]): Expression | null {
  interface Part {
    readonly negative: boolean;
    readonly others: Expression;
    readonly argument: Expression;
  }
  const partOf = (e: Expression): Part | null => {
    if (e.kind === 'negation') {
      const inner = partOf(e.operand);
      return inner && { ...inner, negative: !inner.negative };
    }
    if (e.kind === 'call') return e.function === 'log' && e.args[0] ? { negative: false, others: build.number(1), argument: e.args[0] } : null;
    if (e.kind !== 'product') return null;
    const index = e.factors.findIndex((factor) => factor.kind === 'call' && factor.function === 'log');
    const factor = e.factors[index];
    if (factor?.kind !== 'call' || !factor.args[0]) return null;
    let negative = false;
    const others = e.factors.filter((_, k) => k !== index).map((other) => {
      const minus = other.kind === 'number' && other.value.num < 0n;
      if (minus) negative = !negative;
      return other.kind === 'number' && minus ? build.number(Q.negate(other.value)) : other;
    });
    return { negative, others: build.product(...others.filter((other) => !build.isOneNumber(other))), argument: factor.args[0] };
  };
  const rest = [...terms];
  for (const [i, one] of terms.entries()) {
    const first = partOf(one);
    if (!first) continue;
    for (const other of terms.slice(i + 1)) {
      const second = partOf(other);
      if (!second || first.negative === second.negative || !sameExpression(first.others, second.others)) continue;
      const [above, below] = first.negative ? [second, first] : [first, second];
      const joined = build.product(first.others, build.call('log', build.quotient(above.argument, below.argument)));
      return build.sum(joined, ...rest.filter((term) => term !== one && term !== other));
    }
  }
  return null;
}

/** The argument of the first exponential in a sum of exponentials and other terms. */
export function growingExponent(e: Expression): Expression | null {
  switch (e.kind) {
    case 'sum':
      return firstGrowing(e.terms);
    case 'product':
      return firstGrowing(e.factors);
    case 'negation':
      return growingExponent(e.operand);
    case 'power':
      return e.base.kind === 'constant' && e.base.name === 'e' ? e.exponent : null;
    case 'call':
      return ['exp', 'expm1', 'sinh', 'cosh'].includes(e.function) ? (e.args[0] ?? null) : null;
    default:
      return null;
  }
}
function firstGrowing(members: readonly Expression[]): Expression | null {
  for (const member of members) {
    const found = growingExponent(member);
    if (found) return found;
  }
  return null;
}

/** e times e^-u with the growth of e^u, e^u - 1, sinh u, cosh u taken out. */
export function timesDecay(e: Expression, u: Expression, decay: Expression): Expression | null {
  const half = build.number({ num: 1n, den: 2n });
  const one = build.number(1);
  const isThis = (x: Expression | undefined): boolean => x !== undefined && sameExpression(x, u);
  switch (e.kind) {
    case 'sum': {
      const terms = e.terms.map((term) => timesDecay(term, u, decay));
      return terms.every((term) => term !== null) ? build.sum(...terms) : null;
    }
    case 'negation': {
      const inner = timesDecay(e.operand, u, decay);
      return inner && build.negation(inner);
    }
    case 'product': {
      const index = e.factors.findIndex((factor) => growingExponent(factor) !== null);
      const factor = e.factors[index];
      if (factor === undefined) return build.product(e, decay);
      const inner = timesDecay(factor, u, decay);
      return inner && build.product(...e.factors.filter((_, k) => k !== index), inner);
    }
    case 'power':
      if (e.base.kind === 'constant' && e.base.name === 'e' && isThis(e.exponent)) return one;
      return build.product(e, decay);
    case 'call': {
      if (!isThis(e.args[0])) return build.product(e, decay);
      const square = build.product(decay, decay);
      if (e.function === 'exp') return one;
      if (e.function === 'expm1') return build.difference(one, decay);
      if (e.function === 'sinh') return build.product(half, build.difference(one, square));
      return e.function === 'cosh' ? build.product(half, build.sum(one, square)) : build.product(e, decay);
    }
    default:
      return build.product(e, decay);
  }
}
