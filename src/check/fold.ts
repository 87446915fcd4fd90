/** Exact arithmetic on what is only numbers, so that a general term at a given index is as plain as a printed one. */
import { build, mapChildren, Q, type Expression, type Rational } from '../expression/index.ts';

const LARGEST_FACTORIAL = 200n;
const LARGEST_POWER = 400n;
const LARGEST_BINOMIAL = 60n;

/** The tree with every purely numeric part computed, and factors 1 and terms 0 left out. A division by zero stays as it stands. */
export function fold(e: Expression): Expression {
  const inner = mapChildren(e, fold);
  const value = valueOf(inner);
  if (value) return build.number(value);
  switch (inner.kind) {
    case 'product': {
      const numbers = inner.factors.filter((f) => f.kind === 'number');
      const rest = inner.factors.filter((f) => f.kind !== 'number');
      const coefficient = numbers.reduce<Rational>((a, n) => (n.kind === 'number' ? Q.multiply(a, n.value) : a), Q.ONE);
      if (Q.isZero(coefficient)) return build.number(0);
      return build.product(...(Q.isOne(coefficient) && rest.length > 0 ? [] : [build.number(coefficient)]), ...rest);
    }
    case 'power':
      return inner.exponent.kind === 'number' && Q.isOne(inner.exponent.value) ? inner.base : inner.exponent.kind === 'number' && Q.isZero(inner.exponent.value) ? build.number(1) : inner;
    case 'call':
      return fallingBinomial(inner.function, inner.args) ?? inner;
    case 'sum':
      return build.sum(...inner.terms.filter((t) => !(t.kind === 'number' && Q.isZero(t.value))));
    default:
      return inner;
  }
}

/** A binomial coefficient with a whole lower index as a polynomial in the upper one (DLMF 1.2.6). */
function fallingBinomial(id: string, [upper, lower]: readonly Expression[]): Expression | null {
  if (id !== 'binomial' || !upper || lower?.kind !== 'number' || !Q.isInteger(lower.value) || lower.value.num < 0n || lower.value.num > LARGEST_BINOMIAL) return null;
  const factors: Expression[] = [];
  let factorial = 1n;
  for (let j = 0n; j < lower.value.num; j += 1n) {
    factors.push(j === 0n ? upper : build.sum(upper, build.number(Q.rational(-j))));
    factorial *= j + 1n;
  }
  return fold(build.quotient(build.product(build.number(1), ...factors), build.number(Q.rational(factorial))));
}

function valueOf(e: Expression): Rational | null {
  const numbers = (list: readonly Expression[]): readonly Rational[] | null => {
    const known = list.flatMap((x) => (x.kind === 'number' ? [x.value] : []));
    return known.length === list.length ? known : null;
  };
  switch (e.kind) {
    case 'number':
      return e.value;
    case 'negation':
      return e.operand.kind === 'number' ? Q.negate(e.operand.value) : null;
    case 'sum':
      return numbers(e.terms)?.reduce(Q.add) ?? null;
    case 'product':
      return numbers(e.factors)?.reduce(Q.multiply) ?? null;
    case 'quotient':
      return e.numerator.kind === 'number' && e.denominator.kind === 'number' && !Q.isZero(e.denominator.value) ? Q.divide(e.numerator.value, e.denominator.value) : null;
    case 'power': {
      if (e.base.kind !== 'number' || e.exponent.kind !== 'number' || !Q.isInteger(e.exponent.value)) return null;
      const n = e.exponent.value.num;
      return (n < 0n && Q.isZero(e.base.value)) || n > LARGEST_POWER || n < -LARGEST_POWER ? null : Q.power(e.base.value, n);
    }
    case 'call': {
      const [n] = e.args;
      if (e.function !== 'factorial' || n?.kind !== 'number' || !Q.isInteger(n.value) || n.value.num < 0n || n.value.num > LARGEST_FACTORIAL) return null;
      let product = 1n;
      for (let i = 2n; i <= n.value.num; i += 1n) product *= i;
      return Q.rational(product);
    }
    default:
      return null;
  }
}

/** A division by zero, or a factorial of a negative whole number, stands in the folded tree. */
export function isUndefined(e: Expression): boolean {
  if (e.kind === 'quotient' && e.denominator.kind === 'number' && Q.isZero(e.denominator.value)) return true;
  if (e.kind === 'power' && e.base.kind === 'number' && Q.isZero(e.base.value) && e.exponent.kind === 'number' && e.exponent.value.num < 0n) return true;
  if (e.kind === 'call' && e.function === 'factorial' && e.args[0]?.kind === 'number' && Q.isInteger(e.args[0].value) && e.args[0].value.num < 0n) return true;
  let found = false;
  mapChildren(e, (c) => {
    found ||= isUndefined(c);
    return c;
  });
  return found;
}
