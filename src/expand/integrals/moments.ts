/**
 * Integrals over an infinite interval whose integrand is a power series in the variable with polynomial coefficients: each coefficient is integrated by moments.
 * Factors that mix variable and integration variable are (1 + x q)^a, exp(x q), sin(x q), cos(x q), log(1 + x q) with polynomials q, for which the remainder of the series
 * is bounded by a polynomial in v: this needs x q >= 0 (x q <= 0 in an exponential).
 */
import type { Element } from '../../algebra/types.ts';
import { build, children, dependsOn, type Expression, Q } from '../../expression/index.ts';
import { addElements, type Context, eventualSign, growth, mapStream, type Multi, multiplyElements, Series, unnamed } from '../../series/index.ts';
import { type Evaluate, type Session } from '../session.ts';
import { weakSign } from './monotone.ts';
import { polynomialIn, refuse } from './polynomial.ts';

/** v^power exp(-rate v^degree): what is integrated on an infinite interval. */
interface Weight {
  readonly rate: Element;
  readonly degree: bigint;
}

export function byMoments(s: Session, body: Expression, v: string, low: Expression | null, high: Expression | null, evaluate: Evaluate): Multi {
  const moves = (e: Expression): boolean => (e.kind === 'symbol' ? e.name !== v && s.bindings.has(e.name) : children(e).some(moves));
  const fixed: Expression[] = [];
  const mixed: Expression[] = [];
  const decays: Expression[] = [];
  if (!factors(body, v, moves, fixed, mixed, decays)) throw refuse();
  for (const f of mixed) requireClass(s, f, v, low, high, moves, evaluate);
  const weight = weightOf(s, decays, v, evaluate);
  const series = evaluate(s, build.product(...fixed, ...mixed));
  if (!(series instanceof Series)) return integrated(s, series, v, low, high, weight, evaluate);
  const stream = mapStream(series.stream, (t) => {
    if (t.order) return t;
    if (t.coefficient instanceof Series) throw refuse();
    return { ...t, coefficient: integrated(s, t.coefficient, v, low, high, weight, evaluate) };
  });
  return new Series(series.element, stream, unnamed);
}

/** Sorts the factors of the integrand: free of one of the two, exponents of exponentials in v alone, mixed. */
function factors(e: Expression, v: string, moves: (e: Expression) => boolean, fixed: Expression[], mixed: Expression[], decays: Expression[]): boolean {
  if (e.kind === 'negation') {
    fixed.push(build.number(-1));
    return factors(e.operand, v, moves, fixed, mixed, decays);
  }
  if (e.kind === 'product') return e.factors.every((f) => factors(f, v, moves, fixed, mixed, decays));
  if (e.kind === 'quotient') {
    if (!factors(e.numerator, v, moves, fixed, mixed, decays)) return false;
    return factors(build.power(e.denominator, -1), v, moves, fixed, mixed, decays);
  }
  const exponent = e.kind === 'power' && e.base.kind === 'constant' && e.base.name === 'e' ? e.exponent : e.kind === 'call' && e.function === 'exp' ? e.args[0] : undefined;
  if (exponent) {
    const terms = exponent.kind === 'sum' ? exponent.terms : [exponent];
    for (const t of terms) {
      if (moves(t)) (dependsOn(t, v) ? mixed : fixed).push(build.power(build.constant('e'), t));
      else decays.push(t);
    }
    return true;
  }
  if (moves(e) && dependsOn(e, v)) mixed.push(e);
  else fixed.push(e);
  return true;
}

/** The factor must be one of the classes named above, with argument x q(v). */
function requireClass(s: Session, f: Expression, v: string, low: Expression | null, high: Expression | null, moves: (e: Expression) => boolean, evaluate: Evaluate): void {
  const c = s.context;
  const small = (e: Expression, wanted: 1 | -1 | 0): void => {
    // e = (variable part) * q(v), q a polynomial, the variable part small.
    const parts = separated(e, v, moves);
    if (!parts) throw refuse();
    const size = evaluate(s, parts.variable);
    if (growth(c, size) !== 'small') throw refuse();
    if (wanted === 0) return;
    const range = { variable: v, low, high, field: c.field };
    const sign = weakSign(range, parts.polynomial);
    const direction = eventualSign(c, size);
    if (sign === null || direction === 'complex' || direction === 0 || sign * direction !== wanted) throw refuse();
  };
  if (f.kind === 'power' && f.base.kind === 'constant' && f.base.name === 'e') return small(f.exponent, -1);
  if (f.kind === 'power' && !moves(f.exponent) && !dependsOn(f.exponent, v)) return small(withoutOne(f.base), 1);
  if (f.kind === 'call' && (f.function === 'sin' || f.function === 'cos') && f.args[0]) return small(f.args[0], 0);
  if (f.kind === 'call' && f.function === 'log' && f.args[0]) return small(withoutOne(f.args[0]), 1);
  if (f.kind === 'call' && f.function === 'log1p' && f.args[0]) return small(f.args[0], 1);
  throw refuse();
}

function withoutOne(e: Expression): Expression {
  if (e.kind !== 'sum') throw refuse();
  const rest = e.terms.filter((t) => !(t.kind === 'number' && Q.isOne(t.value)));
  if (rest.length !== e.terms.length - 1) throw refuse();
  return build.sum(...rest);
}

/** A product as (part without v) * (part in v alone). */
export function separated(e: Expression, v: string, moves: (e: Expression) => boolean): { variable: Expression; polynomial: Expression } | null {
  const variable: Expression[] = [];
  const polynomial: Expression[] = [];
  const visit = (f: Expression): boolean => {
    if (!dependsOn(f, v)) variable.push(f);
    else if (!moves(f)) polynomial.push(f);
    else if (f.kind === 'product') return f.factors.every(visit);
    else if (f.kind === 'negation') {
      variable.push(build.number(-1));
      return visit(f.operand);
    } else if (f.kind === 'quotient' && !dependsOn(f.denominator, v)) {
      variable.push(build.power(f.denominator, -1));
      return visit(f.numerator);
    } else return false;
    return true;
  };
  return visit(e) ? { variable: build.product(...variable), polynomial: build.product(...polynomial) } : null;
}

/** exp of one term -rate v^degree, rate > 0, degree a positive integer. */
function weightOf(s: Session, decays: readonly Expression[], v: string, evaluate: Evaluate): Weight {
  const c = s.context;
  const [only] = decays;
  if (decays.length !== 1 || !only) throw refuse();
  const terms = polynomialIn(s, only, v, evaluate);
  const [term] = terms;
  if (terms.length !== 1 || !term || term.power < 1n) throw refuse();
  const rate = c.field.negate(term.coefficient);
  if (c.field.sign(rate) !== 1) throw refuse();
  return { rate, degree: term.power };
}

/** The integral of coefficient(v) times the weight over the interval. */
function integrated(s: Session, coefficient: Element, v: string, low: Expression | null, high: Expression | null, weight: Weight, evaluate: Evaluate): Element {
  const c = s.context;
  const { field } = c;
  let total: Element = Q.ZERO;
  for (const t of polynomialIn(s, field.toExpression(coefficient), v, evaluate)) {
    total = addElements(c, total, multiplyElements(c, t.coefficient, momentOn(c, weight, t.power, low, high)));
  }
  return total;
}

/** integral of v^n exp(-rate v^m): Gamma((n+1)/m)/(m rate^((n+1)/m)) on (0, inf). */
function momentOn(c: Context, weight: Weight, n: bigint, low: Expression | null, high: Expression | null): Element {
  const { field } = c;
  const order = Q.rational(n + 1n, weight.degree);
  const half = field.divide(field.call('gamma', [order]), field.multiply(Q.rational(weight.degree), field.power(weight.rate, order)));
  const isZeroEnd = (e: Expression | null): boolean => e !== null && e.kind === 'number' && Q.isZero(e.value);
  if (isZeroEnd(low) && high === null) return half;
  if (low === null && high === null && weight.degree % 2n === 0n) return n % 2n === 0n ? field.multiply(Q.rational(2), half) : Q.ZERO;
  throw refuse();
}
