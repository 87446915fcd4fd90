/** Power series given as infinite sums: sum over k of c(k) u^(a k + b) with u -> 0, term by term. */
import type { Element } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, type IndexedNode, Q, type Rational, rationalOf, substitute } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { compose, growth, type Multi, multiply } from '../../series/index.ts';
import type { Evaluate, Session } from '../session.ts';
import { linear } from './summand.ts';

interface Parts {
  /** Free of what varies. */
  readonly coefficient: Expression[];
  /** base^(slope (k + shift)) of varying bases. */
  readonly powers: { readonly base: Expression; readonly slope: Expression; readonly shift: Expression }[];
}

/** Null where the summand is not of this kind. Declined where the series is not known to converge or its argument is not small. */
export function powerSeries(s: Session, e: IndexedNode, varies: (e: Expression) => boolean, evaluate: Evaluate): Multi | null {
  const k = e.index.kind === 'symbol' ? e.index.name : null;
  const lower = rationalOf(e.lower);
  if (k === null || !lower || lower.den !== 1n || !varies(e.body)) return null;
  const parts: Parts = { coefficient: [], powers: [] };
  if (!collect(e.body, 1, k, varies, parts) || parts.powers.length === 0) return null;
  const c = s.context;
  const coefficientTree = build.product(...parts.coefficient);
  const weight = factorialWeight(coefficientTree, k);
  if (!weight) return null;
  if (Q.signOf(weight) > 0) throw new Declined('no-expansion', 'The coefficients of the infinite sum grow like factorials, so that it diverges; write a finite upper limit.');
  const argument = evaluate(s, build.product(...parts.powers.map((p) => build.power(p.base, p.slope))));
  const size = growth(c, argument);
  if (size !== 'small') throw new Declined('no-expansion', 'The infinite sum is expanded where the quantity whose powers are summed tends to zero; choose that point.');
  const front = evaluate(s, build.product(...parts.powers.map((p) => build.power(p.base, build.product(p.slope, build.sum(build.number(lower), p.shift))))));
  const coefficients: Element[] = [];
  const coefficient = (j: number): Element => (coefficients[j] ??= c.field.fromExpression(substitute(coefficientTree, k, build.number(lower.num + BigInt(j)))));
  return multiply(c, front, compose(c, coefficient, argument));
}

function collect(e: Expression, sign: 1 | -1, k: string, varies: (e: Expression) => boolean, into: Parts): boolean {
  if (!varies(e)) {
    into.coefficient.push(sign === 1 ? e : build.power(e, -1));
    return true;
  }
  switch (e.kind) {
    case 'product':
      return e.factors.every((f) => collect(f, sign, k, varies, into));
    case 'quotient':
      return collect(e.numerator, sign, k, varies, into) && collect(e.denominator, sign === 1 ? -1 : 1, k, varies, into);
    case 'negation':
      into.coefficient.push(build.number(-1));
      return collect(e.operand, sign, k, varies, into);
    case 'power': {
      if (dependsOn(e.base, k) || varies(e.exponent)) return false;
      const exponent = linear(e.exponent, k);
      if (!exponent) return false;
      into.powers.push({ base: e.base, slope: sign === 1 ? exponent.slope : build.negation(exponent.slope), shift: exponent.shift });
      return true;
    }
    default:
      return false;
  }
}

/** w with |c(k)| <= A B^k (k!)^w for large k; null where that is not known. Rules out nothing else: c may vanish. */
function factorialWeight(e: Expression, k: string): Rational | null {
  if (!dependsOn(e, k) || isPolynomial(e, k)) return Q.ZERO;
  switch (e.kind) {
    case 'negation':
      return factorialWeight(e.operand, k);
    case 'sum': {
      const all = e.terms.map((t) => factorialWeight(t, k));
      return all.reduce<Rational | null>((most, w) => (most && w ? (Q.compare(w, most) > 0 ? w : most) : null), all[0] ?? null);
    }
    case 'product': {
      const all = e.factors.map((f) => factorialWeight(f, k));
      return all.reduce<Rational | null>((total, w) => (total && w ? Q.add(total, w) : null), Q.ZERO);
    }
    case 'quotient': {
      const above = factorialWeight(e.numerator, k);
      const below = weightBelow(e.denominator, k);
      return above && below && Q.subtract(above, below);
    }
    case 'power': {
      if (!dependsOn(e.base, k)) return linear(e.exponent, k) ? Q.ZERO : null;
      if (e.exponent.kind !== 'number') return null;
      const w = Q.signOf(e.exponent.value) > 0 ? factorialWeight(e.base, k) : weightBelow(e.base, k);
      return w && Q.multiply(w, e.exponent.value);
    }
    case 'call':
      return e.function === 'binomial' && e.args[0] && !dependsOn(e.args[0], k) && e.args[1] && linear(e.args[1], k) ? Q.ZERO : weightOfCall(e, k);
    default:
      return null;
  }
}

/** w with |d(k)| >= A B^k (k!)^w, A and B positive, wherever d(k) is not zero. */
function weightBelow(e: Expression, k: string): Rational | null {
  if (!dependsOn(e, k) || isPolynomial(e, k)) return Q.ZERO;
  switch (e.kind) {
    case 'negation':
      return weightBelow(e.operand, k);
    case 'product': {
      const all = e.factors.map((f) => weightBelow(f, k));
      return all.reduce<Rational | null>((total, w) => (total && w ? Q.add(total, w) : null), Q.ZERO);
    }
    case 'power': {
      if (!dependsOn(e.base, k)) return linear(e.exponent, k) ? Q.ZERO : null;
      const w = e.exponent.kind === 'number' && Q.signOf(e.exponent.value) > 0 ? weightBelow(e.base, k) : null;
      return w && e.exponent.kind === 'number' ? Q.multiply(w, e.exponent.value) : null;
    }
    case 'call':
      return weightOfCall(e, k);
    default:
      return null;
  }
}

/** Factorials of linear arguments with a positive rational slope, by Stirling's formula. */
function weightOfCall(e: Extract<Expression, { kind: 'call' }>, k: string): Rational | null {
  const [argument] = e.args;
  const slope = e.args.length === 1 && argument ? rationalOf(linear(argument, k)?.slope ?? build.number(0)) : null;
  if (!slope || Q.signOf(slope) <= 0) return null;
  if (e.function === 'factorial' || e.function === 'gamma') return slope;
  return e.function === 'doubleFactorial' ? Q.multiply(slope, Q.HALF) : null;
}

function isPolynomial(e: Expression, k: string): boolean {
  if (!dependsOn(e, k)) return true;
  switch (e.kind) {
    case 'symbol':
      return true;
    case 'sum':
      return e.terms.every((t) => isPolynomial(t, k));
    case 'product':
      return e.factors.every((f) => isPolynomial(f, k));
    case 'negation':
      return isPolynomial(e.operand, k);
    case 'power':
      return e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num >= 0n && isPolynomial(e.base, k);
    default:
      return false;
  }
}
