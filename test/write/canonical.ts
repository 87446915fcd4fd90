/** A key that two trees share if they differ only in how signs, fractions, products and powers with numeric exponents are laid out. Nothing is multiplied out. */
import { children, mapChildren, Q, structureKey, type Expression, type Rational } from '../../src/expression/index.ts';

interface Monomial {
  readonly coefficient: Rational;
  /** Base key -> exponent. */
  readonly powers: ReadonlyMap<string, Rational>;
}
const ONE: Monomial = { coefficient: Q.ONE, powers: new Map() };

function times(a: Monomial, b: Monomial, sign: 1 | -1 = 1): Monomial {
  const powers = new Map(a.powers);
  for (const [key, exponent] of b.powers) {
    const total = Q.add(powers.get(key) ?? Q.ZERO, sign === 1 ? exponent : Q.negate(exponent));
    if (Q.isZero(total)) powers.delete(key);
    else powers.set(key, total);
  }
  const other = sign === 1 || Q.isZero(b.coefficient) ? b.coefficient : Q.reciprocal(b.coefficient);
  return { coefficient: Q.multiply(a.coefficient, other), powers };
}

function monomial(e: Expression): Monomial {
  if (e.kind === 'symbol' && e.name === '\\pi') return monomial({ kind: 'constant', name: 'pi' });
  if (e.kind === 'call' && e.function === 'exp' && e.args[0]) return monomial({ kind: 'power', base: { kind: 'constant', name: 'e' }, exponent: e.args[0] });
  switch (e.kind) {
    case 'number':
      return { coefficient: e.value, powers: new Map() };
    case 'negation': {
      const inner = monomial(e.operand);
      return { ...inner, coefficient: Q.negate(inner.coefficient) };
    }
    case 'product':
      return e.factors.map(monomial).reduce((a, b) => times(a, b), ONE);
    case 'quotient':
      return times(monomial(e.numerator), monomial(e.denominator), -1);
    case 'power': {
      const exponent = monomial(e.exponent);
      if (exponent.powers.size > 0) break;
      const inner = monomial(e.base);
      if (Q.isInteger(exponent.coefficient) && !Q.isZero(inner.coefficient) && exponent.coefficient.num < 50n && exponent.coefficient.num > -50n) {
        const powers = new Map([...inner.powers].map(([k, p]): [string, Rational] => [k, Q.multiply(p, exponent.coefficient)]).filter(([, p]) => !Q.isZero(p)));
        return { coefficient: Q.power(inner.coefficient, exponent.coefficient.num), powers };
      }
      if (inner.powers.size === 0) return { coefficient: Q.ONE, powers: new Map([[`number ${Q.toText(inner.coefficient)} ^ ${Q.toText(exponent.coefficient)}`, Q.ONE]]) };
      return { coefficient: Q.ONE, powers: new Map([[`${canonicalKey(e.base)} ^ ${Q.toText(exponent.coefficient)}`, Q.ONE]]) };
    }
    case 'sum': {
      const total = new Map<string, Rational>();
      for (const term of e.terms.flatMap((t) => (t.kind === 'sum' ? t.terms : [t]))) {
        const m = monomial(term);
        const key = keyOf({ ...m, coefficient: Q.ONE });
        total.set(key, Q.add(total.get(key) ?? Q.ZERO, m.coefficient));
      }
      const parts = [...total].filter(([, c]) => !Q.isZero(c)).sort(([a], [b]) => (a < b ? -1 : 1));
      if (parts.length === 0) return { coefficient: Q.ZERO, powers: new Map() };
      return { coefficient: Q.ONE, powers: new Map([[`(${parts.map(([k, c]) => `${Q.toText(c)} ${k}`).join(' + ')})`, Q.ONE]]) };
    }
    default:
      break;
  }
  const rebuilt = children(e).length === 0 ? structureKey(e) : structureKey(mapChildren(e, (c) => ({ kind: 'symbol', name: canonicalKey(c) })));
  return { coefficient: Q.ONE, powers: new Map([[rebuilt, Q.ONE]]) };
}

function keyOf(m: Monomial): string {
  if (Q.isZero(m.coefficient)) return '0';
  return `${Q.toText(m.coefficient)}${[...m.powers].sort(([a], [b]) => (a < b ? -1 : 1)).map(([k, p]) => ` * ${k}^${Q.toText(p)}`).join('')}`;
}

export const canonicalKey = (e: Expression): string => keyOf(monomial(e));
