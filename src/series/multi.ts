/**
 * Multiseries: series in the fastest element of an asymptotic scale whose coefficients are multiseries in slower elements, down to exact constants.
 * Source: Richardson, Salvy, Shackell, van der Hoeven, "Asymptotic expansions of exp-log functions", ISSAC 1996 (from memory).
 */
import type { Element, Field } from '../algebra/types.ts';
import type { Expression, Rational } from '../expression/index.ts';
import { build, Q } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';

/** coefficient * element^exponent. The coefficient may turn out to be zero. With `order` it is only known to be O of that, and the stream ends there. */
export interface Term {
  readonly exponent: Element;
  readonly coefficient: Multi;
  readonly order?: true;
}

export interface Lead {
  readonly index: number;
  readonly exponent: Element;
  readonly coefficient: Multi;
}

/** A constant of the field, or a series in a scale element. */
export type Multi = Element | Series;

/** A memoised sequence. `next(k)` is called once for each k in turn and answers null at the end. A failure is remembered and thrown again. */
export class Stream {
  private readonly known: Term[] = [];
  private state: 'open' | 'busy' | 'done' | 'failed' = 'open';
  private error: unknown = null;
  /** `length`: the number of terms where it is known beforehand. */
  constructor(
    private readonly next: (index: number) => Term | null,
    private readonly length: number | null = null,
  ) {}

  /** Of these terms and no more. */
  static of(terms: readonly Term[]): Stream {
    const stream = new Stream(() => null);
    stream.known.push(...terms);
    stream.state = 'done';
    return stream;
  }

  at(index: number): Term | null {
    while (this.known.length <= index && this.state !== 'done') {
      if (this.state === 'failed') throw this.error;
      if (this.state === 'busy') throw new Declined('no-expansion', 'The terms depend on each other in a circle at this point (a singular point of a derivative or equation); choose another point.');
      this.state = 'busy';
      try {
        const term = this.next(this.known.length);
        this.state = term === null || term.order ? 'done' : 'open';
        if (term !== null) this.known.push(term);
      } catch (error) {
        this.state = 'failed';
        this.error = error;
        throw error;
      }
    }
    return this.known[index] ?? null;
  }

  /** Number of terms where it is known without asking for one (coefficients may still be zero), else null. */
  get knownLength(): number | null {
    return this.state === 'done' ? this.known.length : this.length;
  }
}

/** An element of the asymptotic scale: a positive function of t that tends to 0 as t -> 0+. */
export interface ScaleElement {
  /** Speed: a larger rank tends to zero faster than every power of a smaller one. Changes when elements are inserted between. */
  rank: number;
  /** A formal element stands for an independent quantity smaller than everything else: coefficients of its powers are derivatives. */
  readonly kind: 'local' | 'logarithm' | 'exponential' | 'formal';
  /** For a logarithm: 1 for 1/log(1/t), 2 for 1/log(log(1/t)), ...; else 0. */
  readonly depth: number;
  /** As a tree in t. */
  readonly expression: Expression;
  /** Set where it bounds dropped parts that are smaller than every power: it is then shown as the next power. */
  beyond?: true;
  /** Logarithm of the element, in slower elements; null where the scale does not hold it yet. */
  logarithm: Multi | null;
}

/** The elements from slow to fast; grows when a logarithm or an exponential needs a new one. */
export interface Scale {
  readonly elements: ScaleElement[];
  readonly local: ScaleElement;
  /** Tree of log(1/t). */
  readonly largeLogarithm: Expression;
}

/** Immutable value; `lead` caches the first term that is not zero (null: the series is zero). */
export class Series {
  lead?: Lead | null;
  constructor(
    readonly element: ScaleElement,
    readonly stream: Stream,
    /** The function that the series stands for, as a tree in the local variable. May throw Declined where it has no closed form. */
    readonly exact: () => Expression,
  ) {}
}

/** What every operation needs: the constants, the scale (which grows), and the time left. */
export interface Context {
  readonly field: Field;
  readonly budget: Budget;
  readonly scale: Scale;
  /** Name of the positive symbol that `exact` trees are written in: t itself, or 1/t. */
  readonly local: string;
  /** Whether bounded oscillation (sin of something unbounded) is allowed as a coefficient. */
  readonly oscillation: boolean;
  /** What was met on the way. */
  readonly notes: Notes;
  /** Vanishing terms that are passed before the function is tested for zero as a whole: raised where cancellation is expected. */
  readonly patience: { value: number };
}

export interface Notes {
  /** A step depended on t being positive: the other side needs its own computation. */
  sided: boolean;
  /** A step depended on t being real, of either sign. */
  onReal: boolean;
  divergent: boolean;
  /** A constant arose that is not provably real. While false, every series of the context is real by construction. */
  complex: boolean;
  readonly assumptions: Set<string>;
}

export const isRational = (e: Element): e is Rational => 'num' in e;
export const isLiteralZero = (m: Multi): boolean => !(m instanceof Series) && isRational(m) && m.num === 0n;
export const isLiteralOne = (m: Multi): boolean => !(m instanceof Series) && isRational(m) && m.num === 1n && m.den === 1n;

export const addElements = (c: Context, a: Element, b: Element): Element => (isRational(a) && isRational(b) ? Q.add(a, b) : c.field.add(a, b));
export const multiplyElements = (c: Context, a: Element, b: Element): Element => (isRational(a) && isRational(b) ? Q.multiply(a, b) : c.field.multiply(a, b));
export const negateElement = (c: Context, a: Element): Element => (isRational(a) ? Q.negate(a) : c.field.negate(a));

export function exactOf(c: Context, m: Multi): Expression {
  if (m instanceof Series) return m.exact();
  return isRational(m) ? build.number(m) : c.field.toExpression(m);
}

/** The `exact` of a series that has no closed form by itself. */
export function unnamed(): never {
  throw new Declined('undecided', 'A series without a closed form could not be compared with zero; write more terms or simplify the formula.');
}
