/**
 * Integrals over (low, inf) of f(t) K(a (t - m)) with unbounded a, where K is a step smoothed out: rational in its exponential, with a limit on the left and 0 on the right, both reached exponentially fast.
 * The step gives the integral of f up to m, the rest expands about m in the moments of K minus the step (Sommerfeld's lemma; Ashcroft & Mermin, appendix C, from memory).
 */
import type { Element } from '../../algebra/types.ts';
import { build, children, dependsOn, type Expression, mapChildren, Q, sameExpression, substitute } from '../../expression/index.ts';
import { add, beyondAllOrders, eventualSign, growth, isZero, type Multi, multiply, power, scaleBy, Series, split, sumOfSeries } from '../../series/index.ts';
import { openSide } from '../open-side.ts';
import { type Evaluate, freshSymbol, type Session } from '../session.ts';
import { completeIntegral } from './complete.ts';
import { transfer } from './end.ts';
import { exactIntegral } from './exact.ts';
import { type Range, regularOn } from './monotone.ts';
import { powersOf } from './powers.ts';
import { integrableAt } from './watson.ts';

const exponentOf = (e: Expression): Expression | undefined => (e.kind === 'power' && e.base.kind === 'constant' && e.base.name === 'e' ? e.exponent : e.kind === 'call' && e.function === 'exp' ? e.args[0] : undefined);

/** Null where the integrand is of another form or the conditions are not proven. */
export function bySmoothStep(s: Session, body: Expression, v: string, low: Expression, evaluate: Evaluate): Multi | null {
  const c = s.context;
  const { field } = c;
  const moves = (e: Expression): boolean => (e.kind === 'symbol' ? e.name !== v && s.bindings.has(e.name) : children(e).some(moves));
  const parts: Parts = { front: [], weight: [], step: [] };
  sort(body, v, moves, parts);
  const step = build.product(...parts.step);
  const argument = movingExponent(step, v, moves);
  const line = argument && powersOf(field, argument, v);
  const slope = line?.terms.find((t) => Q.isOne(t.exponent))?.coefficient;
  if (!argument || !slope || line.terms.some((t) => !Q.isOne(t.exponent) && !Q.isZero(t.exponent))) return null;
  const offset = line.terms.find((t) => Q.isZero(t.exponent))?.coefficient ?? Q.ZERO;
  const middle = field.toExpression(field.negate(field.divide(offset, slope)));
  const rate = evaluate(s, field.toExpression(slope));
  if (moves(middle) || growth(c, rate) !== 'large' || eventualSign(c, rate) !== 1) return null;
  if (field.sign(field.subtract(field.fromExpression(middle), field.fromExpression(low))) !== 1) return null;
  const y = freshSymbol(s, v);
  const kernel = replaced(step, argument, build.symbol(y));
  if (dependsOn(kernel, v) || moves(kernel)) return null;
  const f = build.product(...parts.weight);
  const range: Range = { variable: v, low, high: null, field };
  if (!regularOn(range, f) || !integrableAt(s, f, v, low, evaluate) || !isTame(s, f, v, evaluate)) return null;

  const left = openSide({ variable: build.symbol(y), point: '-inf', assumptions: [] }, '-inf', c.budget);
  const { large, constant } = split(left.context, evaluate(left.session, left.fromVariable(kernel)));
  if (large || constant instanceof Series) return null;
  const height = transfer(c, left.context, constant);
  const before = build.difference(substitute(kernel, y, build.negation(build.symbol(y))), field.toExpression(height));
  const moment = (n: number): Element | null => {
    const weight = build.power(build.symbol(y), n);
    const [right, other] = [kernel, before].map((e) => completeIntegral(field, build.product(weight, e), y, null));
    return right && other ? field.add(right, n % 2 === 0 ? other : field.negate(other)) : null;
  };
  if (moment(0) === null || moment(1) === null) return null;

  const inner = openSide({ variable: build.symbol(v), point: middle, assumptions: [{ kind: 'relation', left: middle, relation: '>', right: low }] }, 'right', c.budget);
  const around = evaluate(inner.session, inner.fromVariable(f));
  const stream = around instanceof Series && around.element === inner.context.scale.local ? around.stream : null;
  if (around instanceof Series && stream === null) return null;
  const term = (k: number): Multi | null => {
    const t = stream ? stream.at(k) : k === 0 ? { exponent: Q.ZERO, coefficient: around } : null;
    if (!t) return null;
    const n = inner.context.field.asRational(t.exponent);
    const size = n && n.den === 1n && n.num >= 0n ? moment(Number(n.num)) : null;
    if (size === null || n === null || t.coefficient instanceof Series) throw new Error('a regular function without a Taylor series');
    return scaleBy(c, power(c, rate, Q.rational(-n.num - 1n)), field.multiply(size, transfer(c, inner.context, t.coefficient)));
  };
  const sum = sumOfSeries(c, c.scale.local, (k) => term(k) ?? Q.ZERO, (k) => term(k) !== null);
  if (stream !== null && stream.at(MOST_TAYLOR) !== null) c.notes.divergent = true;
  const main = isZero(c, height) ? Q.ZERO : field.multiply(height, exactIntegral(c, f, { variable: v, low, high: middle }));
  return multiply(c, evaluate(s, build.product(...parts.front)), add(c, add(c, main, sum), beyondAllOrders(c, rate)));
}

/** Terms of a function that is taken for a polynomial where there are no more. */
const MOST_TAYLOR = 40;

interface Parts {
  readonly front: Expression[];
  readonly weight: Expression[];
  readonly step: Expression[];
}

function sort(e: Expression, v: string, moves: (e: Expression) => boolean, into: Parts, inverse = false): void {
  const put = inverse ? build.power(e, -1) : e;
  if (!dependsOn(e, v)) into.front.push(put);
  else if (!moves(e)) into.weight.push(put);
  else if (e.kind === 'product') e.factors.forEach((f) => sort(f, v, moves, into, inverse));
  else if (e.kind === 'quotient') {
    sort(e.numerator, v, moves, into, inverse);
    sort(e.denominator, v, moves, into, !inverse);
  } else into.step.push(put);
}

/** The exponent of the first exponential in which both variables meet. */
function movingExponent(e: Expression, v: string, moves: (e: Expression) => boolean): Expression | null {
  const exponent = exponentOf(e);
  if (exponent) return dependsOn(exponent, v) && moves(exponent) ? exponent : null;
  for (const child of children(e)) {
    const found = movingExponent(child, v, moves);
    if (found) return found;
  }
  return null;
}

const replaced = (e: Expression, old: Expression, by: Expression): Expression => (sameExpression(e, old) ? by : mapChildren(e, (child) => replaced(child, old, by)));

/** Whether an exponential outweighs the function at infinity. */
function isTame(s: Session, f: Expression, v: string, evaluate: Evaluate): boolean {
  const inner = openSide({ variable: build.symbol(v), point: 'inf', assumptions: [] }, 'inf', s.context.budget);
  const size = growth(inner.context, evaluate(inner.session, inner.fromVariable(build.product(f, build.power(build.constant('e'), build.negation(build.symbol(v)))))));
  return size === 'small' || size === 'zero';
}
