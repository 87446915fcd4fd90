/** Starts for A(y) = B(t) with unbounded B: inverse functions at infinity and at singular ends, with logarithmic scales. */
import type { Element } from '../../algebra/types.ts';
import { build, type Expression, Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import {
  divide, eventualSign, exponential, growth, isRational, isRealMulti, logarithm, type Monomial, monomialOf, type Multi, multiply, negate, power, scaleBy, Series, split, subtract,
} from '../../series/index.ts';
import { evaluate } from '../evaluate.ts';
import { type Direction, openSide } from '../open-side.ts';
import type { Start } from './start.ts';
import { type Curve, separate } from './taylor.ts';

/** One start for each end of the real line, and each side of 0, where A grows like B. */
export function infiniteStarts(curve: Curve): Start[] {
  const written = separate(curve);
  if (!written) return [];
  const { context: c, session } = curve.side;
  const shrinks = growth(c, evaluate(session, written.right)) === 'small';
  // A small A = B is a large 1/A = 1/B.
  const parts = shrinks ? { left: build.power(written.left, -1), right: build.power(written.right, -1) } : written;
  const goal = evaluate(session, parts.right);
  if (growth(c, goal) !== 'large') return [];
  const starts: Start[] = [];
  for (const end of ['right', 'left', '-inf', 'inf'] as const) {
    const found = atEnd(curve, parts.left, goal, end);
    if (!found) continue;
    const wrap = (e: Expression): Expression => Array.from({ length: found.logarithms }).reduce<Expression>((inner) => build.call('log', inner), found.negative ? build.negation(e) : e);
    const tree = found.logarithms > 0 ? build.difference(wrap(parts.left), wrap(parts.right)) : null;
    starts.push({ value: found.value, multiplicity: 1, exact: false, ...(tree ? { tree } : {}) });
  }
  return starts;
}

interface End {
  readonly value: Multi;
  /** How often the logarithm of both sides was taken, after a change of sign where `negative`. */
  readonly logarithms: number;
  readonly negative: boolean;
}

function atEnd(curve: Curve, left: Expression, goal: Multi, end: Direction): End | null {
  const c = curve.side.context;
  const infinite = end === 'inf' || end === '-inf';
  const point = infinite ? end : build.number(0);
  try {
    const inner = openSide({ variable: build.symbol(curve.unknown), point, assumptions: [] }, end, c.budget);
    const a = evaluate(inner.session, inner.fromVariable(left));
    if (growth(inner.context, a) !== 'large' || !isRealMulti(inner.context, a)) return null;
    if (eventualSign(inner.context, a) !== eventualSign(c, goal)) return null;
    const large = invert(curve, inner.context, a, goal);
    if (!large) return null;
    // The large quantity is 1/s for the end's local variable s.
    const size = infinite ? large.value : divide(c, Q.ONE, large.value);
    return { ...large, value: end === '-inf' || end === 'left' ? negate(c, size) : size };
  } catch (error) {
    if (error instanceof Declined && (error.failure.code === 'no-expansion' || error.failure.code === 'needs-assumption')) return null;
    throw error;
  }
}

/** The large quantity Y with A(1/Y) = goal to leading order, A given in its own scale. */
function invert(curve: Curve, own: Parameters<typeof monomialOf>[0], a: Multi, goal: Multi): End | null {
  const c = curve.side.context;
  let left = a;
  let right = goal;
  const negative = eventualSign(own, a) === -1;
  for (let depth = 0; depth < 4; depth += 1) {
    const lead: Monomial | null = monomialOf(own, left);
    if (!lead) return null;
    const [first] = lead.factors;
    if (!first) return null;
    if (first.element.kind === 'exponential' && first.element.rank > own.scale.local.rank) {
      if (depth > 0 && eventualSign(own, left) !== 1) return null;
      left = logarithm(own, negative && depth === 0 ? negate(own, left) : left);
      right = logarithm(c, negative && depth === 0 ? negate(c, right) : right);
      continue;
    }
    const constant = transfer(c, own, lead.constant);
    const quotient = scaleBy(c, right, c.field.divide(Q.ONE, constant));
    if (first.element.kind === 'local') {
      const down = transfer(c, own, first.exponent);
      const exponent = c.field.divide(Q.MINUS_ONE, down);
      let value = power(c, quotient, exponent);
      const [, second, third] = lead.factors;
      if (third || (second && second.element.depth !== 1)) return null;
      if (second) value = multiply(c, value, power(c, scaleBy(c, logarithm(c, quotient), exponent), c.field.multiply(exponent, transfer(c, own, second.exponent))));
      return { value, logarithms: depth, negative: negative && depth > 0 };
    }
    // c log Y + bounded: Y = exp((goal - bounded limit)/c)
    if (first.element.depth === 1 && lead.factors.length === 1 && isRational(first.exponent) && first.exponent.num === -1n && first.exponent.den === 1n && left instanceof Series) {
      const { large, constant: rest } = split(own, left);
      const bounded = large && monomialOf(own, subtract(own, left, large)) !== null;
      const value = exponential(c, bounded ? subtract(c, quotient, c.field.divide(transfer(c, own, rest), constant)) : quotient);
      return { value, logarithms: depth, negative: negative && depth > 0 };
    }
    return null;
  }
  return null;
}

/** A constant of one field as an element of another. */
const transfer = (to: Parameters<typeof monomialOf>[0], from: Parameters<typeof monomialOf>[0], e: Element): Element => (isRational(e) ? e : to.field.fromExpression(from.field.toExpression(e)));

