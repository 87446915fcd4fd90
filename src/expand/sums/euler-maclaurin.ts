/** sum of (k + a)^p log(k + a)^j by Euler-Maclaurin, the constant from derivatives of the zeta function or Stieltjes constants. Source: DLMF 2.10.1, 25.2.4, 25.2.11 (from memory). */
import { build, type Expression, Q, rationalOf } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { divide, growth, type Multi, monomialOf, scaleBy, sumOf, sumOfSeries, theta } from '../../series/index.ts';
import type { Evaluate, Session } from '../session.ts';
import { bind, freshSymbol } from '../session.ts';
import { bernoulliNumbers } from './bernoulli.ts';
import { type PowerTerm } from './summand.ts';

const MOST_BERNOULLI = 120;

/** The sum without its coefficient, from an integer `lower` with lower + shift a positive integer, to an `upper` that grows without bound. */
export function eulerMaclaurin(s: Session, t: PowerTerm, lower: Expression, upper: Expression, evaluate: Evaluate): Multi {
  const c = s.context;
  const first = rationalOf(build.sum(lower, t.shift));
  const exponent = rationalOf(t.exponent);
  if (!exponent || first?.den !== 1n || first.num < 1n || first.num > 200n) {
    throw new Declined('no-expansion', 'The constant of this sum is not known; let the logarithm and power start at a positive integer.');
  }
  const last = evaluate(s, build.sum(upper, t.shift));
  if (growth(c, last) !== 'large') throw new Declined('no-expansion', 'A sum with a symbolic upper limit is expanded where that limit grows without bound; choose the point infinity.');
  const name = freshSymbol(s, 'n');
  const inner = bind(s, [[name, last]]);
  const n = build.symbol(name);
  const log = build.call('log', n);
  const summand = build.product(build.power(n, t.exponent), build.power(log, t.logs));
  const f = evaluate(inner, summand);
  const speed = theta(c, last);
  const derivatives: Multi[] = [f];
  const derivative = (k: number): Multi => {
    while (derivatives.length <= k) derivatives.push(divide(c, theta(c, derivatives[derivatives.length - 1] as Multi), speed));
    return derivatives[k] as Multi;
  };
  const bernoulli = bernoulliNumbers(2 * MOST_BERNOULLI);
  let factorial = 1n;
  const weights = [Q.ONE];
  for (let k = 1; k <= MOST_BERNOULLI; k += 1) {
    factorial *= BigInt(2 * k - 1) * BigInt(2 * k);
    weights.push(Q.divide(bernoulli[2 * k] ?? Q.ZERO, Q.rational(factorial)));
  }
  const correction = (k: number): Multi => {
    const weight = weights[k + 1];
    if (!weight) throw new Declined('bad-request', 'So many terms of this sum are not expanded; ask for fewer.');
    return scaleBy(c, derivative(2 * k + 1), weight);
  };
  c.notes.divergent = true;
  const element = monomialOf(c, last)?.factors[0]?.element ?? c.scale.local;
  const constant = evaluate(s, constantOf(exponent, t.logs));
  const before = Array.from({ length: Number(first.num) - 1 }, (_, j) => {
    const k = build.number(j + 1);
    return evaluate(s, build.negation(build.product(build.power(k, t.exponent), build.power(build.call('log', k), t.logs))));
  });
  return sumOf(c, [constant, ...before, evaluate(inner, primitive(exponent, t.logs, n)), scaleBy(c, f, Q.HALF), sumOfSeries(c, element, correction)]);
}

/** (-1)^j zeta^(j)(-p); the Stieltjes constant gamma_j for p = -1. */
function constantOf(exponent: { num: bigint; den: bigint }, logs: number): Expression {
  if (Q.equal(exponent, Q.MINUS_ONE)) return build.call('stieltjes', build.number(logs));
  const value = build.call('zetaDerivative', build.number(logs), build.number(Q.negate(exponent)));
  return logs % 2 === 0 ? value : build.negation(value);
}

/** The antiderivative of n^p log(n)^j that is n^(p+1) times a polynomial in log n. */
function primitive(exponent: { num: bigint; den: bigint }, logs: number, n: Expression): Expression {
  const log = build.call('log', n);
  const up = Q.add(exponent, Q.ONE);
  if (Q.isZero(up)) return build.quotient(build.power(log, logs + 1), build.number(logs + 1));
  const terms: Expression[] = [];
  let weight = Q.reciprocal(up);
  for (let j = logs; j >= 0; j -= 1) {
    terms.push(build.product(build.number(weight), build.power(log, j)));
    weight = Q.negate(Q.divide(Q.multiply(weight, Q.rational(j)), up));
  }
  return build.product(build.power(n, build.number(up)), build.sum(...terms));
}
