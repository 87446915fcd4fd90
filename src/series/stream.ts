/** Lazily found terms in strictly increasing exponents (of one scale element), and the arithmetic of such streams. */
import type { Element } from '../algebra/types.ts';
import { Q, type Rational } from '../expression/index.ts';
import { compareExponents } from './exponent.ts';
import { addElements, type Context, isLiteralZero, isRational, type Multi, Series, Stream, type Term } from './multi.ts';


export const finiteStream = (terms: readonly Term[]): Stream => Stream.of(terms);
export const mapStream = (s: Stream, f: (term: Term) => Term): Stream =>
  new Stream((k) => {
    const term = s.at(k);
    return term && f(term);
  }, s.knownLength);
/** The terms from index on. */
export const dropTerms = (s: Stream, count: number): Stream => new Stream((k) => s.at(k + count), s.knownLength === null ? null : Math.max(0, s.knownLength - count));
/** The first terms only. */
export const takeTerms = (s: Stream, count: number): Stream => new Stream((k) => (k < count ? s.at(k) : null));
export const prepend = (first: Term, rest: Stream): Stream => new Stream((k) => (k === 0 ? first : rest.at(k - 1)));

/**
 * The sum of infinitely many streams whose first exponents increase without bound; `part(k)` is null behind the last one.
 * `lead(k)` is a lower bound of the k-th first exponent.
 */
export function sumOfStreams(c: Context, ring: CoefficientRing, part: (k: number) => { readonly lead: Element; readonly stream: Stream } | null): Stream {
  const active: { readonly stream: Stream; index: number }[] = [];
  let opened = 0;
  let upcoming = part(0);
  return new Stream(() => {
    c.budget.check();
    for (;;) {
      let least: Element | null = null;
      for (const a of active) {
        const term = a.stream.at(a.index);
        if (term && (least === null || compareExponents(c, term.exponent, least) < 0)) least = term.exponent;
      }
      if (upcoming && (least === null || compareExponents(c, upcoming.lead, least) <= 0)) {
        active.push({ stream: upcoming.stream, index: 0 });
        opened += 1;
        upcoming = part(opened);
        continue;
      }
      if (least === null) return null;
      let total: Multi = Q.ZERO;
      let order = false;
      for (const a of active) {
        const term = a.stream.at(a.index);
        if (!term || compareExponents(c, term.exponent, least) !== 0) continue;
        a.index += 1;
        if (term.order || order) {
          total = isLiteralZero(total) ? term.coefficient : ring.envelope(total, term.coefficient);
          order = true;
        } else total = ring.add(total, term.coefficient);
      }
      return order ? { exponent: least, coefficient: total, order: true } : { exponent: least, coefficient: total };
    }
  });
}

/** The terms of a stream that is known to end, without those that are zero by form. */
export function allTerms(s: Stream): Term[] {
  const terms: Term[] = [];
  for (let k = 0; ; k += 1) {
    const term = s.at(k);
    if (!term) return terms;
    if (term.order || !isLiteralZero(term.coefficient)) terms.push(term);
  }
}

/** How coefficients are combined; given by the ring of multiseries, which is built on streams. */
export interface CoefficientRing {
  add(a: Multi, b: Multi): Multi;
  multiply(a: Multi, b: Multi): Multi;
  scale(a: Multi, by: Element): Multi;
  /** A coefficient whose size bounds both. */
  envelope(a: Multi, b: Multi): Multi;
}

export function sumStream(c: Context, ring: CoefficientRing, a: Stream, b: Stream): Stream {
  let i = 0;
  let j = 0;
  return new Stream(() => {
    const x = a.at(i);
    const y = b.at(j);
    if (!x || !y) {
      if (x) i += 1;
      else j += 1;
      return x ?? y;
    }
    const sign = compareExponents(c, x.exponent, y.exponent);
    if (sign < 0) {
      i += 1;
      return x;
    }
    if (sign > 0) {
      j += 1;
      return y;
    }
    i += 1;
    j += 1;
    if (x.order || y.order) return { exponent: x.exponent, coefficient: ring.envelope(x.coefficient, y.coefficient), order: true };
    return { exponent: x.exponent, coefficient: ring.add(x.coefficient, y.coefficient) };
  });
}

/** The numerators of a stream's rational coefficients over one common denominator, which grows as terms are read; null from the first coefficient that is not rational. */
class CommonDenominator {
  private readonly numerators: bigint[] = [];
  denominator = 1n;
  private plain = true;
  constructor(private readonly stream: Stream) {}

  at(index: number): bigint | null {
    while (this.plain && this.numerators.length <= index) {
      const term = this.stream.at(this.numerators.length);
      const value = term?.coefficient;
      if (!term || term.order || value === undefined || value instanceof Series || !isRational(value)) {
        this.plain = false;
        break;
      }
      const factor = value.den / Q.gcd(this.denominator, value.den);
      if (factor !== 1n) {
        this.denominator *= factor;
        for (let k = 0; k < this.numerators.length; k += 1) this.numerators[k] = (this.numerators[k] as bigint) * factor;
      }
      this.numerators.push(value.num * (this.denominator / value.den));
    }
    return this.plain ? (this.numerators[index] as bigint) : null;
  }
}

interface Row {
  readonly index: number;
  column: number;
  /** Exponent of the pair at (index, column); null while it has to be fetched. */
  head: Element | null;
}

/**
 * Product of two streams by merging rows; term k looks at no more than k + 1 terms of either factor, so that a factor may be defined through the product.
 * `weight(p, q)` multiplies the pair with exponents p and q. O(n) comparisons and as many multiplications a term.
 */
export function productStream(c: Context, ring: CoefficientRing, a: Stream, b: Stream, weight?: (p: Element, q: Element) => Element): Stream {
  const rows: Row[] = [];
  const left = new CommonDenominator(a);
  const right = new CommonDenominator(b);
  let opened = 0;
  let used: Row[] = [];
  return new Stream((k) => {
    c.budget.check();
    if (k === 0) {
      rows.push({ index: 0, column: 0, head: null });
      opened = 1;
    }
    for (const row of used) {
      if (row.column === 0) {
        rows.push({ index: opened, column: 0, head: null });
        opened += 1;
      }
      row.column += 1;
      row.head = null;
    }
    used = [];
    let least: Element | null = null;
    for (let r = 0; r < rows.length; r += 1) {
      const row = rows[r] as Row;
      if (row.head === null) {
        const x = a.at(row.index);
        const y = x && b.at(row.column);
        if (!x || !y) {
          rows.splice(r, 1);
          r -= 1;
          continue;
        }
        row.head = addElements(c, x.exponent, y.exponent);
      }
      const sign: number = least === null ? -1 : compareExponents(c, row.head, least);
      if (sign < 0) {
        least = row.head;
        used = [row];
      } else if (sign === 0) used.push(row);
    }
    if (least === null) return null;
    if (used.length > 1) {
      const sum = rationalSum(a, b, used, left, right, weight);
      if (sum) return { exponent: least, coefficient: sum };
    }
    let order = false;
    let total: Multi = Q.ZERO;
    for (const row of used) {
      const x = a.at(row.index) as Term;
      const y = b.at(row.column) as Term;
      if (isLiteralZero(x.coefficient) || isLiteralZero(y.coefficient)) continue;
      let value = ring.multiply(x.coefficient, y.coefficient);
      if (weight && !(x.order || y.order)) value = ring.scale(value, weight(x.exponent, y.exponent));
      const uncertain = x.order === true || y.order === true;
      if (uncertain || order) total = isLiteralZero(total) ? value : ring.envelope(total, value);
      else total = isLiteralZero(total) ? value : ring.add(total, value);
      order ||= uncertain;
    }
    return order ? { exponent: least, coefficient: total, order: true } : { exponent: least, coefficient: total };
  });
}

/** The sum of products of one term where all coefficients are rational: integers over one denominator, reduced once. Null where they are not. */
function rationalSum(a: Stream, b: Stream, used: readonly Row[], left: CommonDenominator, right: CommonDenominator, weight?: (p: Element, q: Element) => Element): Rational | null {
  let last = 0;
  for (const row of used) last = Math.max(last, row.index);
  if (left.at(last) === null) return null;
  last = 0;
  for (const row of used) last = Math.max(last, row.column);
  if (right.at(last) === null) return null;
  let total = 0n;
  for (const row of used) {
    const x = left.at(row.index);
    const y = right.at(row.column);
    if (x === null || y === null) return null;
    if (x === 0n || y === 0n) continue;
    if (weight) {
      const w = weight((a.at(row.index) as Term).exponent, (b.at(row.column) as Term).exponent);
      if (!isRational(w) || w.den !== 1n) return null;
      total += x * y * w.num;
    } else total += x * y;
  }
  return Q.rational(total, left.denominator * right.denominator);
}
