/**
 * Maxima that move with the parameter: x^a t^p and x^b t^q in one exponent over (0, inf) balance at t = x^g u with a + g p = b + g q, and become x^(a + g p) times a function of u; the logarithm of t counts as p = 0.
 * Source: the movable maxima of Laplace's method, Bender & Orszag 6.4 (from memory).
 */
import type { Element } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import type { Session } from '../session.ts';
import type { LaplaceForm } from './watson.ts';

interface Term {
  readonly coefficient: Element;
  readonly size: Element;
  readonly power: Element;
  readonly isLogarithm: boolean;
}

/** The integrand over (0, inf) in u = t x^(-g), with one large parameter; null where it is not of that form. `x` is the variable, which grows. */
export function rescaled(s: Session, body: Expression, v: string, x: string): LaplaceForm | null {
  const { field } = s.context;
  const exponents: Expression[] = [];
  let power: Element = Q.ZERO;
  const front: Expression[] = [];
  const visit = (e: Expression, sign: 1 | -1): boolean => {
    const signed = (a: Expression): Expression => (sign === 1 ? a : build.negation(a));
    if (!dependsOn(e, v)) {
      front.push(sign === 1 ? e : build.power(e, -1));
      return true;
    }
    switch (e.kind) {
      case 'negation':
        front.push(build.number(-1));
        return visit(e.operand, sign);
      case 'product':
        return e.factors.every((f) => visit(f, sign));
      case 'quotient':
        return visit(e.numerator, sign) && visit(e.denominator, sign === 1 ? -1 : 1);
      case 'symbol':
        power = field.add(power, Q.rational(sign));
        return true;
      case 'root':
        return visit(build.power(e.radicand, build.quotient(build.number(1), e.degree)), sign);
      case 'call':
        if (e.function === 'sqrt' && e.args[0]) return visit(build.power(e.args[0], build.number(Q.HALF)), sign);
        if (e.function !== 'exp' || !e.args[0]) return false;
        exponents.push(signed(e.args[0]));
        return true;
      case 'power':
        if (e.base.kind === 'constant' && e.base.name === 'e') exponents.push(signed(e.exponent));
        else if (e.base.kind !== 'symbol' || dependsOn(e.exponent, v)) return false;
        else if (dependsOn(e.exponent, x)) {
          // t^(x + c) = e^(x log t) t^c.
          const parts = e.exponent.kind === 'sum' ? e.exponent.terms : [e.exponent];
          for (const p of parts) {
            if (dependsOn(p, x)) exponents.push(signed(build.product(p, build.call('log', e.base))));
            else power = field.add(power, field.fromExpression(signed(p)));
          }
        } else power = field.add(power, field.fromExpression(signed(e.exponent)));
        return true;
      default:
        return false;
    }
  };
  try {
    if (!visit(body, 1)) return null;
    const terms = exponents.flatMap((e) => (e.kind === 'sum' ? e.terms : [e])).map((e) => termOf(s, e, v, x));
    const known = terms.flatMap((t) => (t ? [t] : []));
    const [a, b] = known;
    if (known.length !== terms.length || known.length !== 2 || !a || !b) return null;
    const gap = field.subtract(b.power, a.power);
    if (field.isZero(gap) !== 'no') return null;
    const g = field.divide(field.subtract(a.size, b.size), gap);
    const size = field.add(a.size, field.multiply(g, a.power));
    if (field.sign(size) !== 1 || field.isZero(g) !== 'no') return null;
    const tree = (e: Element): Expression => field.toExpression(e);
    const [variable, u] = [build.symbol(x), build.symbol(v)];
    // u = w^q clears fractional powers.
    const q = [power, ...known.map((t) => t.power)].reduce<bigint>((common, p) => {
      const r = field.asRational(p);
      return r ? (common / Q.gcd(common, r.den)) * r.den : common;
    }, 1n);
    const times = (e: Element): Expression => tree(field.multiply(Q.rational(q), e));
    const phi = known.map((t) => build.product(tree(field.negate(t.coefficient)), t.isLogarithm ? build.product(build.number(q), build.call('log', u)) : build.power(u, times(t.power))));
    // x^a log t = x^a (log u + g log x).
    const logarithms = known.filter((t) => t.isLogarithm).map((t) => build.power(build.constant('e'), build.product(tree(field.multiply(t.coefficient, g)), build.power(variable, tree(t.size)), build.call('log', variable))));
    return {
      front: build.product(...front, build.power(variable, tree(field.multiply(g, field.add(power, Q.ONE)))), ...logarithms),
      lambda: build.power(variable, tree(size)),
      phi: build.sum(...phi),
      weight: build.product(build.number(q), build.power(u, tree(field.subtract(field.multiply(Q.rational(q), field.add(power, Q.ONE)), Q.ONE)))),
    };
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}

/** c x^a t^p, or c x^a log t. */
function termOf(s: Session, e: Expression, v: string, x: string): Term | null {
  const { field } = s.context;
  let coefficient: Element = Q.ONE;
  let size: Element = Q.ZERO;
  let power: Element = Q.ZERO;
  let isLogarithm = false;
  const visit = (f: Expression, exponent: Element): boolean => {
    if (!dependsOn(f, v) && !dependsOn(f, x)) {
      coefficient = field.multiply(coefficient, field.power(field.fromExpression(f), exponent));
      return true;
    }
    switch (f.kind) {
      case 'negation':
        coefficient = field.negate(coefficient);
        return visit(f.operand, exponent);
      case 'product':
        return f.factors.every((g) => visit(g, exponent));
      case 'quotient':
        return visit(f.numerator, exponent) && visit(f.denominator, field.negate(exponent));
      case 'symbol':
        if (f.name === v) power = field.add(power, exponent);
        else size = field.add(size, exponent);
        return true;
      case 'power':
        return f.base.kind === 'symbol' && !dependsOn(f.exponent, v) && !dependsOn(f.exponent, x) && visit(f.base, field.multiply(exponent, field.fromExpression(f.exponent)));
      case 'call':
        if (f.function !== 'log' || isLogarithm || f.args[0]?.kind !== 'symbol' || f.args[0].name !== v || field.isZero(field.subtract(exponent, Q.ONE)) !== 'yes') return false;
        isLogarithm = true;
        return true;
      default:
        return false;
    }
  };
  if (!visit(e, Q.ONE) || (isLogarithm && field.isZero(power) !== 'yes')) return null;
  return { coefficient, size, power, isLogarithm };
}
