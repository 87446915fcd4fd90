/** Short writing for the bodies of descriptions. Numbers are lifted, zeros and ones dropped, rational factors multiplied; nothing else is simplified. */
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';

export type Value = Expression | Rational | number | bigint;

const isExpression = (v: Value): v is Expression => typeof v === 'object' && 'kind' in v;
export const lift = (v: Value): Expression => (isExpression(v) ? v : build.number(v));
const numeric = (e: Expression): Rational | null => (e.kind === 'number' ? e.value : null);

export const pi: Expression = build.constant('pi');
export const euler: Expression = build.constant('eulerGamma');
export const imaginary: Expression = build.constant('i');

export function plus(...values: readonly Value[]): Expression {
  let total = Q.ZERO;
  const rest: Expression[] = [];
  for (const value of values) {
    const e = lift(value);
    const n = numeric(e);
    if (n) total = Q.add(total, n);
    else if (e.kind === 'sum') rest.push(...e.terms);
    else rest.push(e);
  }
  if (!Q.isZero(total) || rest.length === 0) rest.push(build.number(total));
  return build.sum(...rest);
}
export function neg(value: Value): Expression {
  const e = lift(value);
  const n = numeric(e);
  return n ? build.number(Q.negate(n)) : e.kind === 'negation' ? e.operand : build.negation(e);
}
export const minus = (a: Value, b: Value): Expression => plus(a, neg(b));

export function times(...values: readonly Value[]): Expression {
  let scale = Q.ONE;
  const rest: Expression[] = [];
  for (const value of values) {
    let e = lift(value);
    if (e.kind === 'negation') {
      scale = Q.negate(scale);
      e = e.operand;
    }
    const n = numeric(e);
    if (n) scale = Q.multiply(scale, n);
    else if (e.kind === 'product') rest.push(...e.factors);
    else rest.push(e);
  }
  if (Q.isZero(scale)) return build.number(0);
  if (rest.length === 0) return build.number(scale);
  if (Q.isOne(scale)) return build.product(...rest);
  if (Q.isOne(Q.negate(scale))) return build.negation(build.product(...rest));
  return build.product(build.number(scale), ...rest);
}
export function over(a: Value, b: Value): Expression {
  const denominator = lift(b);
  const n = numeric(denominator);
  if (n && !Q.isZero(n)) return times(Q.reciprocal(n), a);
  const numerator = lift(a);
  const top = numeric(numerator);
  return top && Q.isZero(top) ? numerator : build.quotient(numerator, denominator);
}
export function pow(base: Value, exponent: Value): Expression {
  const b = lift(base);
  const e = lift(exponent);
  const n = numeric(e);
  if (n && Q.isZero(n)) return build.number(1);
  if (n && Q.isOne(n)) return b;
  const m = numeric(b);
  if (m && n && Q.isInteger(n) && !Q.isZero(m)) return build.number(Q.power(m, n.num));
  return build.power(b, e);
}
export const square = (v: Value): Expression => pow(v, 2);
export const sqrt = (v: Value): Expression => {
  const n = numeric(lift(v));
  return n && (Q.isZero(n) || Q.isOne(n)) ? build.number(n) : build.squareRoot(lift(v));
};
export const call = (id: string, ...args: readonly Value[]): Expression => build.call(id, ...args.map(lift));
export const log = (v: Value): Expression => call('log', v);
export const exp = (v: Value): Expression => {
  const n = numeric(lift(v));
  return n && Q.isZero(n) ? build.number(1) : call('exp', v);
};
export const sin = (v: Value): Expression => call('sin', v);
export const cos = (v: Value): Expression => call('cos', v);
export const gamma = (v: Value): Expression => call('gamma', v);

/** 1/Gamma(v), zero at the poles of Gamma. */
export function reciprocalGamma(v: Value): Expression {
  const e = lift(v);
  const exact = rationalOf(e);
  if (exact && Q.isInteger(exact) && exact.num <= 0n) return build.number(0);
  return over(1, gamma(e));
}

/** Rational times rational stays rational, anything else becomes a tree. */
export function scaled(a: Rational | Expression, b: Rational | Expression): Rational | Expression {
  return 'kind' in a || 'kind' in b ? times(a, b) : Q.multiply(a, b);
}
export const q = (num: number | bigint, den: number | bigint = 1): Rational => Q.rational(num, den);
export const sym = (name: string): Expression => build.symbol(name);
export const bigO = (v: Value): Expression => ({ kind: 'order', little: false, argument: lift(v) });
export const half: Rational = Q.HALF;
export const argument = (args: readonly Expression[], index: number): Expression => args[index] ?? build.number(0);
