/** A printed truncated expansion taken apart: what is kept, what the remainder mark says, and the printed terms one by one. */
import { build, children, dependsOn, mapChildren, Q, walk, type Expression, type OrderNode, type Span } from '../expression/index.ts';
import type { Setting } from './context.ts';
import { leading, type Size } from './size.ts';

export type Mark = 'O' | 'o' | 'dots' | 'none';

/** One printed term: `node` is what stands there (its span is the place), `value` includes every factor around it. */
export interface PrintedTerm {
  readonly node: Expression;
  readonly value: Expression;
}

export interface Truncated {
  readonly side: Expression;
  /** The side without O-terms and dots. */
  readonly kept: Expression;
  readonly mark: Mark;
  readonly orders: readonly OrderNode[];
  /** The function that the remainder is O (or o) of; null without such a mark. */
  readonly scale: Expression | null;
  readonly terms: readonly PrintedTerm[];
}

const ZERO = build.number(0);

/** The expression with every O-term replaced by `replacement(order)` and dots by nothing. */
export function withoutMarks(e: Expression, replacement: (order: OrderNode) => Expression = () => ZERO): Expression {
  switch (e.kind) {
    case 'order':
      return replacement(e);
    case 'dots':
      return ZERO;
    case 'sum': {
      const terms = e.terms.map((t) => withoutMarks(t, replacement)).filter((t) => !isZero(t));
      return terms.length === e.terms.length && terms.every((t, i) => t === e.terms[i]) ? e : { ...build.sum(...terms), ...(e.span ? { span: e.span } : {}) };
    }
    case 'negation': {
      const operand = withoutMarks(e.operand, replacement);
      return operand === e.operand ? e : isZero(operand) ? ZERO : { ...e, operand };
    }
    case 'product': {
      // Dots between factors stand for factors, which no value can replace.
      const factors = e.factors.map((f) => withoutMarks(f, replacement));
      return factors.some(isZero) ? ZERO : factors.every((f, i) => f === e.factors[i]) ? e : { ...e, factors };
    }
    default:
      return hasMarks(e) ? mapChildren(e, (c) => withoutMarks(c, replacement)) : e;
  }
}

const isZero = (e: Expression): boolean => e.kind === 'number' && Q.isZero(e.value);
export const hasMarks = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'order' || n.kind === 'dots');
/** Dots that stand for factors or list members rather than for terms of a sum. */
export const hasFactorDots = (e: Expression): boolean => [...walk(e)].some((n) => n.kind !== 'sum' && n.kind !== 'negation' && children(n).some((c) => c.kind === 'dots' || (c.kind === 'negation' && c.operand.kind === 'dots')) && !(n.kind === 'relation'));

export function takeApart(side: Expression, setting: Setting): Truncated {
  const orders = [...walk(side)].filter((n): n is OrderNode => n.kind === 'order');
  const kept = withoutMarks(side);
  const big = orders.filter((o) => !o.little);
  const counted = big.length > 0 ? big : orders;
  const mark: Mark = big.length > 0 ? 'O' : orders.length > 0 ? 'o' : [...walk(side)].some((n) => n.kind === 'dots') ? 'dots' : 'none';
  const scales = counted.map((order) => contribution(side, order)).filter((e) => e !== null);
  return { side, kept, mark, orders: counted, scale: largest(scales, setting), terms: printedTerms(side, setting) };
}

function largest(scales: readonly Expression[], setting: Setting): Expression | null {
  let best: { readonly e: Expression; readonly size: Size | null } | null = null;
  for (const e of scales) {
    const found = leading(setting, e);
    const size = found.kind === 'monomial' ? found.size : null;
    if (!best || (size && best.size && (Q.compare(size.power, best.size.power) < 0 || (Q.equal(size.power, best.size.power) && size.log > best.size.log)))) best = { e, size };
  }
  return best?.e ?? null;
}

/** What an O-term contributes to the whole side: its argument times the factors around it. */
function contribution(e: Expression, order: OrderNode): Expression | null {
  if (e === order) return order.argument;
  switch (e.kind) {
    case 'sum': {
      for (const t of e.terms) {
        const found = contribution(t, order);
        if (found) return found;
      }
      return null;
    }
    case 'negation':
      return contribution(e.operand, order);
    case 'product': {
      const index = e.factors.findIndex((f) => contribution(f, order) !== null);
      const inner = index < 0 ? null : contribution(e.factors[index] as Expression, order);
      return inner && build.product(...e.factors.map((f, i) => (i === index ? inner : withoutMarks(f))));
    }
    case 'quotient': {
      const inner = contribution(e.numerator, order);
      if (inner) return build.quotient(inner, withoutMarks(e.denominator));
      break;
    }
    default:
      break;
  }
  if (![...walk(e)].includes(order)) return null;
  return build.difference(withoutMarks(e, (o) => (o === order ? o.argument : ZERO)), withoutMarks(e));
}

/** The printed terms in reading order, sums inside one common factor opened (`T_0 (1 + x^2/16)`, nested forms), marks left out. */
export function printedTerms(side: Expression, setting: Setting): readonly PrintedTerm[] {
  const out: PrintedTerm[] = [];
  const visit = (e: Expression, wrap: (inner: Expression) => Expression): void => {
    if (e.kind === 'order' || e.kind === 'dots') return;
    if (e.kind === 'sum' && !isShift(e, setting)) {
      for (const t of e.terms) visit(t, wrap);
      return;
    }
    if (e.kind === 'negation') {
      if (opened(e.operand)) visit(e.operand, (inner) => wrap(build.negation(inner)));
      else if (e.operand.kind !== 'order' && e.operand.kind !== 'dots') out.push({ node: e, value: wrap(e) });
      return;
    }
    if (e.kind === 'product') {
      const sums = e.factors.filter((f) => opened(f));
      const [only] = sums;
      if (sums.length === 1 && only) {
        visit(only, (inner) => wrap(build.product(...e.factors.map((f) => (f === only ? inner : f)))));
        return;
      }
    }
    if (e.kind === 'quotient' && opened(e.numerator)) {
      visit(e.numerator, (inner) => wrap(build.quotient(inner, e.denominator)));
      return;
    }
    if (!hasMarks(e)) out.push({ node: e, value: wrap(e) });
    else out.push({ node: e, value: wrap(withoutMarks(e)) });
  };
  const opened = (e: Expression): boolean =>
    (e.kind === 'sum' && !isShift(e, setting) && (dependsOn(e, setting.variable) || hasMarks(e))) ||
    (e.kind === 'product' && e.factors.filter(opened).length === 1) ||
    (e.kind === 'negation' && opened(e.operand)) ||
    (e.kind === 'quotient' && opened(e.numerator) && !dependsOn(e.denominator, setting.variable));
  visit(side, (inner) => inner);
  return out;
}

/** x - a at the point a: the local variable is one quantity. */
function isShift(e: Expression, setting: Setting): boolean {
  if (e.kind !== 'sum' || e.terms.length !== 2 || typeof setting.point !== 'object' || isZero(setting.point)) return false;
  return e.terms.some((t) => t.kind === 'symbol' && t.name === setting.variable) || e.terms.some((t) => t.kind === 'negation' && t.operand.kind === 'symbol' && t.operand.name === setting.variable);
}

/** The size of the last kept term, relative losses of products counted; null where a term is on another scale. */
export function lastKept(truncated: Truncated, setting: Setting): { readonly lead: Size; readonly last: Size } | null {
  let lead: Size | null = null;
  let last: Size | null = null;
  for (const term of truncated.terms) {
    const reach = extent(term.value, setting);
    if (!reach) return null;
    if (!lead || less(reach.lead, lead)) lead = reach.lead;
    if (!last || less(last, reach.last)) last = reach.last;
  }
  return lead && last ? { lead, last } : null;
}

const less = (a: Size, b: Size): boolean => Q.compare(a.power, b.power) < 0 || (Q.equal(a.power, b.power) && a.log > b.log);

/** Largest and smallest kept order of one printed term. A product of several truncated sums is as good as its worst factor. */
function extent(e: Expression, setting: Setting): { readonly lead: Size; readonly last: Size } | null {
  const own = leading(setting, e);
  if (own.kind !== 'monomial') return null;
  if (e.kind !== 'product') return { lead: own.size, last: own.size };
  let loss: Rational | null = null;
  for (const factor of e.factors) {
    if (factor.kind !== 'sum' || !dependsOn(factor, setting.variable) || isShift(factor, setting)) continue;
    const sizes = factor.terms.map((t) => leading(setting, t));
    if (sizes.some((s) => s.kind !== 'monomial')) continue;
    const powers = sizes.flatMap((s) => (s.kind === 'monomial' ? [s.size.power] : []));
    const [low, high] = [powers.reduce((a, b) => (Q.compare(a, b) <= 0 ? a : b)), powers.reduce((a, b) => (Q.compare(a, b) >= 0 ? a : b))];
    const width = Q.subtract(high, low);
    if (!loss || Q.compare(width, loss) < 0) loss = width;
  }
  return { lead: own.size, last: loss ? { power: Q.add(own.size.power, loss), log: own.size.log } : own.size };
}

type Rational = ReturnType<typeof Q.rational>;
export type Place = Span;
