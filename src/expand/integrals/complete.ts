/**
 * Integrals over the whole half line (0, inf) that are known exactly:
 * - t^(s-1) R(e^(-b t)), R rational with its poles at roots of unity: with R = sum c_k q^k the integral is Gamma(s) b^(-s) sum c_k k^(-s) (DLMF 25.5.1, 25.5.3, 25.11.25), where c_k is a polynomial in k
 *   on each residue class, so that the sum is one of Hurwitz zeta functions; likewise t^(s-1) log(1 -+ e^(-b t));
 * - t^(s-1) exp(-b t^m): Gamma(s/m) b^(-s/m)/m (DLMF 5.9.1);
 * - t^(s-1) sin(b t^m) and cos(b t^m): Gamma(s/m) times a sine or cosine of pi s/(2m) (DLMF 5.9.6, 5.9.7);
 * - t^(s-1) log(1 + d t^m) and arctan(d t^m), by parts from the next;
 * - t^(s-1) (c + d t^m)^(-r): a beta function (DLMF 5.12.3); on (0, (c/d)^(1/m)) the same with d < 0 (DLMF 5.12.1).
 */
import type { Element, Field } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, Q, type Rational, substitute } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { decayingSeries, type ResidueClass } from './geometric.ts';

/** Ends of (0, inf) at which the integral must converge; at the other one the analytic continuation in s stands for it. */
export interface Convergence {
  readonly atZero: boolean;
  readonly atInfinity: boolean;
}
/** The exponent e of v^e in a continuation. */
export const SHIFT = "e'";

const AT_BOTH: Convergence = { atZero: true, atInfinity: true };

/** The integral of body over (0, high), high null for infinity; null where none of the forms above fits. */
export function completeIntegral(field: Field, body: Expression, v: string, high: Expression | null, ends: Convergence = AT_BOTH): Element | null {
  try {
    // As a whole first: the terms of 1 - tanh t have no integrals of their own.
    const joint = body.kind === 'sum' ? ofTerm(field, body, v, high, ends) : null;
    if (joint) return joint;
    let total: Element = Q.ZERO;
    for (const term of termsOf(body)) {
      const value = ofTerm(field, term, v, high, ends);
      if (!value) return null;
      total = field.add(total, value);
    }
    return total;
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}

function termsOf(e: Expression): readonly Expression[] {
  if (e.kind === 'sum') return e.terms.flatMap(termsOf);
  return e.kind === 'negation' ? termsOf(e.operand).map(build.negation) : [e];
}

interface Factors {
  constant: Element;
  /** Of t. */
  power: Element;
  readonly others: { readonly base: Expression; readonly exponent: Element }[];
}

function ofTerm(field: Field, e: Expression, v: string, high: Expression | null, ends: Convergence): Element | null {
  const parts: Factors = { constant: Q.ONE, power: Q.ZERO, others: [] };
  if (!sort(field, e, v, Q.ONE, parts)) return null;
  const s = field.add(parts.power, Q.ONE);
  // The continuation of the integral of a power alone, from 0 to 1 and on from there, is 0.
  if (parts.others.length === 0 && high === null && !ends.atZero && !ends.atInfinity) return Q.ZERO;
  const value = (high === null ? (byZeta(field, parts, v, s, ends) ?? byGamma(field, parts, v, s, ends) ?? byWave(field, parts, v, s, ends) ?? byParts(field, parts, v, s, ends)) : null) ?? byBeta(field, parts, v, s, high, ends);
  return value && field.multiply(parts.constant, value);
}

/** Constants, powers of t, and the rest with its exponents. */
function sort(field: Field, e: Expression, v: string, exponent: Element, into: Factors): boolean {
  if (!dependsOn(e, v)) {
    into.constant = field.multiply(into.constant, field.power(field.fromExpression(e), exponent));
    return true;
  }
  switch (e.kind) {
    case 'symbol':
      into.power = field.add(into.power, exponent);
      return true;
    case 'negation':
      return sort(field, build.number(-1), v, exponent, into) && sort(field, e.operand, v, exponent, into);
    case 'product':
      return e.factors.every((f) => sort(field, f, v, exponent, into));
    case 'quotient':
      return sort(field, e.numerator, v, exponent, into) && sort(field, e.denominator, v, field.negate(exponent), into);
    case 'power':
      if (dependsOn(e.exponent, v)) break;
      // (t^2)^(1/2) = t on the half line; other bases keep their sign.
      return isPositivePower(e.base, v) || field.asRational(field.fromExpression(e.exponent))?.den === 1n
        ? sort(field, e.base, v, field.multiply(exponent, field.fromExpression(e.exponent)), into)
        : other(e, exponent, into);
    case 'root':
      return e.radicand.kind === 'symbol' ? sort(field, e.radicand, v, field.divide(exponent, field.fromExpression(e.degree)), into) : other(e, exponent, into);
    default:
      break;
  }
  return other(e, exponent, into);
}

const isPositivePower = (base: Expression, v: string): boolean => base.kind === 'symbol' || (base.kind === 'power' && base.base.kind === 'symbol' && !dependsOn(base.exponent, v));

function other(base: Expression, exponent: Element, into: Factors): boolean {
  into.others.push({ base, exponent });
  return true;
}

/** sum over the classes of sum over k of P(k) k^(-s), times Gamma(s) rate^(-s). */
function byZeta(field: Field, parts: Factors, v: string, s: Element, ends: Convergence): Element | null {
  const series = decayingSeries(field, parts.others, v);
  if (!series) return null;
  // Integrable at 0: t^(s-1) times a pole of that order.
  if (ends.atZero && field.compare(s, Q.rational(Math.max(series.poleAtOne, 0))) !== 1) return null;
  const sum = series.classes.reduce<Element | null>((total, c) => total && addClass(field, total, c, s, series.classes, ends), Q.ZERO);
  if (!sum) return null;
  return field.multiply(field.multiply(field.call('gamma', [s]), field.power(series.rate, field.negate(s))), sum);
}

function addClass(field: Field, sum: Element, { residue, modulus, powers, corrections }: ResidueClass, s: Element, all: readonly ResidueClass[], ends: Convergence): Element | null {
  let total = sum;
  const a = Q.rational(residue, modulus);
  for (const { power, coefficient } of powers) {
    const order = field.subtract(s, Q.rational(power));
    const fixed = field.asRational(order);
    let value: Element;
    if (fixed && Q.isOne(fixed)) {
      // zeta(1 + e, a) = 1/e - psi(a): the poles of all classes cancel where the integral converges.
      const poles = all.flatMap((c) => c.powers).filter((p) => p.power === power);
      if (Q.signOf(poles.reduce<Rational>((x, p) => Q.add(x, p.coefficient), Q.ZERO)) !== 0) return null;
      value = field.negate(field.call('digamma', [a]));
    } else if (ends.atZero && fixed === null && field.compare(order, Q.ONE) !== 1) return null;
    else value = Q.isOne(a) ? field.call('zeta', [order]) : field.call('hurwitzZeta', [order, a]);
    total = field.add(total, field.multiply(field.multiply(coefficient, field.power(Q.rational(modulus), field.negate(order))), value));
  }
  for (const { index, coefficient } of corrections) total = field.add(total, field.multiply(coefficient, field.power(Q.rational(index), field.negate(s))));
  return total;
}

interface PowerOf {
  readonly coefficient: Element;
  readonly degree: Element;
}

/** b t^m with constant b and m != 0. */
function anyMonomialIn(field: Field, e: Expression, v: string): PowerOf | null {
  const parts: Factors = { constant: Q.ONE, power: Q.ZERO, others: [] };
  if (!sort(field, e, v, Q.ONE, parts) || parts.others.length > 0) return null;
  const sign = field.sign(parts.power);
  return sign === 1 || sign === -1 ? { coefficient: parts.constant, degree: parts.power } : null;
}

/** b t^m with constant b and m > 0. */
function monomialIn(field: Field, e: Expression, v: string): PowerOf | null {
  const found = anyMonomialIn(field, e, v);
  return found && field.sign(found.degree) === 1 ? found : null;
}

/** The monomial with a positive degree, in 1/t where it has a negative one in t. */
function turnedToRise(field: Field, e: Expression, v: string, s: Element, ends: Convergence): { readonly monomial: PowerOf; readonly s: Element; readonly ends: Convergence } | null {
  const monomial = anyMonomialIn(field, e, v);
  if (!monomial || field.sign(monomial.degree) === 1) return monomial && { monomial, s, ends };
  return { monomial: { ...monomial, degree: field.negate(monomial.degree) }, s: field.negate(s), ends: { atZero: ends.atInfinity, atInfinity: ends.atZero } };
}

/** The one argument of the one function that stands beside the power of t. */
function onlyCall({ others }: Factors, names: readonly string[]): { readonly name: string; readonly argument: Expression } | null {
  const [only] = others;
  if (!only || others.length !== 1 || only.base.kind !== 'call' || !names.includes(only.base.function) || only.base.args.length !== 1) return null;
  const [argument] = only.base.args;
  return argument && 'num' in only.exponent && Q.isOne(only.exponent) ? { name: only.base.function, argument } : null;
}

/** t^(s-1) sin(b t^m), cos(b t^m): 0 < s/m < 1, with the sine from -1 on. */
function byWave(field: Field, parts: Factors, v: string, power: Element, at: Convergence): Element | null {
  const wave = onlyCall(parts, ['sin', 'cos']);
  const turned = wave && turnedToRise(field, wave.argument, v, power, at);
  if (!wave || !turned) return null;
  const { monomial, s, ends } = turned;
  const order = field.divide(s, monomial.degree);
  const sine = wave.name === 'sin';
  if (ends.atZero && !isPositive(field, sine ? field.add(order, Q.ONE) : order)) return null;
  if (ends.atInfinity && !isPositive(field, field.subtract(Q.ONE, order))) return null;
  const sign = field.sign(monomial.coefficient);
  if (sign !== 1 && sign !== -1) return null;
  const rate = sign === 1 ? monomial.coefficient : field.negate(monomial.coefficient);
  const pi = field.fromExpression(build.constant('pi'));
  // Gamma(u) sin(pi u/2) tends to pi/2 at u = 0.
  const value = sine && field.isZero(order) === 'yes' ? field.multiply(Q.HALF, pi) : field.multiply(field.call('gamma', [order]), field.call(wave.name, [field.multiply(field.multiply(Q.HALF, pi), order)]));
  const whole = field.divide(value, field.multiply(monomial.degree, field.power(rate, order)));
  return sine && sign === -1 ? field.negate(whole) : whole;
}

/** t^(s-1) log(1 + d t^m): pi d^(-s/m)/(s sin(pi s/m)) for -m < s < 0; t^(s-1) arctan(d t^m): -pi d^(-s/m)/(2 s cos(pi s/(2m))) for -m < s < 0. */
function byParts(field: Field, parts: Factors, v: string, power: Element, at: Convergence): Element | null {
  const found = onlyCall(parts, ['log', 'log1p', 'atan']);
  if (!found) return null;
  const { argument } = found;
  const inner = found.name !== 'log' ? argument : argument.kind === 'sum' ? build.sum(...argument.terms.filter((t) => !(t.kind === 'number' && Q.isOne(t.value)))) : null;
  if (!inner || (found.name === 'log' && argument.kind === 'sum' && argument.terms.filter((t) => !dependsOn(t, v)).length !== 1)) return null;
  const turned = turnedToRise(field, inner, v, power, at);
  if (!turned || field.sign(turned.monomial.coefficient) !== 1) return null;
  const { monomial, s, ends } = turned;
  const order = field.divide(s, monomial.degree);
  if (ends.atZero && !isPositive(field, field.add(order, Q.ONE))) return null;
  if (ends.atInfinity && !isPositive(field, field.negate(s))) return null;
  const pi = field.fromExpression(build.constant('pi'));
  const above = field.multiply(pi, field.power(monomial.coefficient, field.negate(order)));
  if (found.name !== 'atan') return field.divide(above, field.multiply(s, field.call('sin', [field.multiply(pi, order)])));
  return field.negate(field.divide(above, field.multiply(Q.rational(2), field.multiply(s, field.call('cos', [field.multiply(field.multiply(Q.HALF, pi), order)])))));
}

function byGamma(field: Field, { others }: Factors, v: string, s: Element, ends: Convergence): Element | null {
  const [only] = others;
  if (!only || others.length !== 1) return null;
  const { base } = only;
  const exponent = base.kind === 'call' && base.function === 'exp' ? base.args[0] : base.kind === 'power' && base.base.kind === 'constant' && base.base.name === 'e' ? base.exponent : undefined;
  const monomial = exponent ? anyMonomialIn(field, exponent, v) : null;
  if (!monomial) return null;
  const rate = field.negate(field.multiply(monomial.coefficient, only.exponent));
  if (field.sign(rate) !== 1) return null;
  const order = field.divide(s, monomial.degree);
  const growing = field.sign(monomial.degree) === 1;
  if ((growing ? ends.atZero : ends.atInfinity) && !isPositive(field, order)) return null;
  const size = growing ? monomial.degree : field.negate(monomial.degree);
  return field.divide(field.call('gamma', [order]), field.multiply(size, field.power(rate, order)));
}

/** The integral of t^(s-1) (c + d t^m)^(-r): with u = s/m it is c^(-r) (c/d)^u B(u, r - u)/m, or on (0, (c/-d)^(1/m)) c^(-r) (c/-d)^u B(u, 1 - r)/m. */
function byBeta(field: Field, { others }: Factors, v: string, s: Element, high: Expression | null, ends: Convergence): Element | null {
  const [only] = others;
  if (!only || others.length !== 1 || (ends.atZero && !isPositive(field, s))) return null;
  const flat = only.base.kind === 'power' && !dependsOn(only.base.exponent, v) ? { base: only.base.base, exponent: field.multiply(only.exponent, field.fromExpression(only.base.exponent)) } : only.base.kind === 'root' ? { base: only.base.radicand, exponent: field.divide(only.exponent, field.fromExpression(only.base.degree)) } : only;
  if (flat.base.kind !== 'sum') return null;
  const fixed = flat.base.terms.filter((t) => !dependsOn(t, v));
  const moving = flat.base.terms.filter((t) => dependsOn(t, v));
  const [only2] = moving;
  const monomial = moving.length === 1 && only2 ? monomialIn(field, only2, v) : null;
  if (!monomial) return null;
  const c = field.fromExpression(build.sum(...fixed));
  const d = monomial.coefficient;
  if (field.sign(c) !== 1) return null;
  const r = field.negate(flat.exponent);
  const u = field.divide(s, monomial.degree);
  const pi = field.fromExpression(build.constant('pi'));
  // B(u, 1 - u) = pi/sin(pi u), DLMF 5.5.3.
  const beta = (x: Element, y: Element): Element | null =>
    (ends.atZero && !isPositive(field, x)) || ((ends.atInfinity || high !== null) && !isPositive(field, y)) || (high === null && !isPositive(field, r) && ends.atInfinity)
      ? null
      : field.isZero(field.subtract(field.add(x, y), Q.ONE)) === 'yes'
        ? field.divide(pi, field.multiply(monomial.degree, field.call('sin', [field.multiply(pi, x)])))
        : field.divide(field.multiply(field.call('gamma', [x]), field.call('gamma', [y])), field.multiply(monomial.degree, field.call('gamma', [field.add(x, y)])));
  const scaled = (value: Element | null, ratio: Element): Element | null => value && field.multiply(field.multiply(field.power(c, field.negate(r)), field.power(ratio, u)), value);
  if (high === null) return field.sign(d) === 1 ? scaled(beta(u, field.subtract(r, u)), field.divide(c, d)) : null;
  const ratio = field.negate(field.divide(c, d));
  if (field.sign(d) !== -1 || field.isZero(field.subtract(field.power(field.fromExpression(high), monomial.degree), ratio)) !== 'yes') return null;
  return scaled(beta(u, field.subtract(Q.ONE, r)), ratio);
}

/** Of a number that depends on the exponent's shift: at shift 0. */
function isPositive(field: Field, a: Element): boolean {
  const here = field.parameters(a).includes(SHIFT) ? field.fromExpression(substitute(field.toExpression(a), SHIFT, build.number(0))) : a;
  return field.sign(here) === 1;
}
