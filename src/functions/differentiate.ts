/** Symbolic derivatives of trees by the rules of calculus and the derivatives that descriptions state. */
import { build, type Expression, freeSymbols, Q, rationalOf } from '../expression/index.ts';
import { describe } from './registry.ts';

const isZero = (e: Expression): boolean => e.kind === 'number' && Q.isZero(e.value);
const times = (...factors: readonly Expression[]): Expression => (factors.some(isZero) ? build.number(0) : build.product(...factors.filter((f) => !build.isOneNumber(f))));
const plus = (terms: readonly Expression[]): Expression => build.sum(...terms.filter((t) => !isZero(t)));

/**
 * de/dx for x of that name; null where a function in it has no derivative in closed form.
 * `along` gives dv/dx for other symbols that move with x (a total derivative); null for those that do not.
 */
export function differentiate(e: Expression, name: string, along: (symbol: string) => Expression | null = () => null): Expression | null {
  const rate = (symbol: string): Expression | null => (symbol === name ? build.number(1) : along(symbol));
  if (!freeSymbols(e).some((symbol) => rate(symbol) !== null)) return build.number(0);
  const d = (inner: Expression): Expression | null => differentiate(inner, name, along);
  switch (e.kind) {
    case 'symbol':
      return rate(e.name);
    case 'sum':
      return all(e.terms.map(d), plus);
    case 'negation': {
      const inner = d(e.operand);
      return inner && build.negation(inner);
    }
    case 'product':
      return all(
        e.factors.map((f, i) => {
          const inner = d(f);
          return inner && times(...e.factors.map((g, j) => (i === j ? inner : g)));
        }),
        plus,
      );
    case 'quotient': {
      const [above, below] = [d(e.numerator), d(e.denominator)];
      if (!above || !below) return null;
      if (isZero(below)) return build.quotient(above, e.denominator);
      return build.quotient(plus([times(above, e.denominator), build.negation(times(e.numerator, below))]), build.power(e.denominator, 2));
    }
    case 'power': {
      const [base, exponent] = [d(e.base), d(e.exponent)];
      if (!base || !exponent) return null;
      const constant = rationalOf(e.exponent);
      if (constant && Q.isOne(constant)) return base;
      if (constant) return times(build.number(constant), Q.equal(constant, Q.rational(2)) ? e.base : build.power(e.base, Q.subtract(constant, Q.ONE)), base);
      const lower = build.difference(e.exponent, build.number(1));
      const byBase = isZero(base) ? build.number(0) : times(e.exponent, build.power(e.base, lower), base);
      const logarithm = e.base.kind === 'constant' && e.base.name === 'e' ? build.number(1) : build.call('log', e.base);
      return plus([byBase, isZero(exponent) ? exponent : times(e, logarithm, exponent)]);
    }
    case 'root': {
      const inner = d(e.radicand);
      return inner && times(e, inner, build.power(build.product(e.degree, e.radicand), -1));
    }
    case 'call': {
      const description = describe(e.function);
      const rule = description?.derivative;
      if (!rule) return description?.definition ? d(description.definition(e.args)) : null;
      return all(
        e.args.map((arg, i) => {
          const inner = d(arg);
          if (!inner || isZero(inner)) return inner;
          const outer = rule(e.args, i);
          return outer && times(outer, inner);
        }),
        plus,
      );
    }
    case 'derivative': {
      if (e.variable.kind !== 'symbol' || e.variable.name !== name) return null;
      let inner: Expression | null = e.body;
      for (let i = 0; i <= e.times && inner; i += 1) inner = d(inner);
      return inner;
    }
    case 'integral':
      return !e.lower && !e.upper && e.variable.kind === 'symbol' && e.variable.name === name ? e.body : null;
    default:
      return null;
  }
}

function all(parts: readonly (Expression | null)[], join: (parts: readonly Expression[]) => Expression): Expression | null {
  const known = parts.filter((p) => p !== null);
  return known.length === parts.length ? join(known) : null;
}
