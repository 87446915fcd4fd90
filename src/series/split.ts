/** A multiseries as large part + constant + small part. */
import type { Element } from '../algebra/types.ts';
import { build, Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { signOfExponent } from './exponent.ts';
import { eventualSign, isZero } from './leading.ts';
import { type Context, exactOf, type Multi, Series } from './multi.ts';
import { add, negate } from './ring.ts';
import { dropTerms, finiteStream } from './stream.ts';

export interface Parts {
  /** All of whose terms grow without bound; null if none. */
  readonly large: Multi | null;
  readonly constant: Element;
  /** Tends to zero; null if none is left (or it is identically zero by form). */
  readonly small: Multi | null;
}

/** m = large + constant + small. Needs the signs of finitely many exponents. */
export function split(c: Context, m: Multi): Parts {
  if (!(m instanceof Series)) return { large: null, constant: m, small: null };
  const negative: { exponent: Element; coefficient: Multi }[] = [];
  let k = 0;
  for (; ; k += 1) {
    const term = m.stream.at(k);
    if (!term || signOfExponent(c, term.exponent) >= 0) break;
    if (term.order) throw new Declined('no-expansion', 'An O-term that is not small stands inside a function; write more terms before it.');
    if (!isZero(c, term.coefficient)) negative.push(term);
    c.budget.check();
  }
  const middle = m.stream.at(k);
  const hasMiddle = middle !== null && signOfExponent(c, middle.exponent) === 0;
  if (hasMiddle && middle.order) throw new Declined('no-expansion', 'An O-term that is not small stands inside a function; write more terms before it.');
  const inner: Parts = hasMiddle ? split(c, middle.coefficient) : { large: null, constant: Q.ZERO, small: null };
  const rest = dropFrom(c, m, k + (hasMiddle ? 1 : 0), [...negative, ...(hasMiddle ? [middle] : [])]);
  const large = negative.length > 0 ? partial(c, m, negative, inner.large) : inner.large;
  return { large, constant: inner.constant, small: combine(c, inner.small, rest) };
}

function dropFrom(c: Context, m: Series, index: number, before: readonly { exponent: Element; coefficient: Multi }[]): Series | null {
  if (m.stream.at(index) === null) return null;
  const exact = () =>
    build.sum(m.exact(), ...before.map((t) => build.negation(build.product(exactOf(c, t.coefficient), build.power(m.element.expression, exactOf(c, t.exponent))))));
  return new Series(m.element, dropTerms(m.stream, index), exact);
}

function partial(c: Context, m: Series, terms: readonly { exponent: Element; coefficient: Multi }[], rest: Multi | null): Multi {
  const all = rest ? [...terms, { exponent: Q.ZERO, coefficient: rest }] : terms;
  const exact = () => build.sum(...all.map((t) => build.product(exactOf(c, t.coefficient), build.power(m.element.expression, exactOf(c, t.exponent)))));
  return new Series(m.element, finiteStream(all), exact);
}

const combine = (c: Context, a: Multi | null, b: Multi | null): Multi | null => (a && b ? add(c, a, b) : (a ?? b));

/** Sign of a - b for small t. */
export const compareEventually = (c: Context, a: Multi, b: Multi): -1 | 0 | 1 | 'complex' => eventualSign(c, add(c, a, negate(c, b)));
