/** The free algebra: sums of words in letters that do not commute, with exact coefficients that do. A letter may stand inverted; it cancels beside itself. */
import type { Element, Field } from '../../algebra/types.ts';
import { isRational } from '../../series/index.ts';
import { Q } from '../../expression/index.ts';

/** Index of a letter from 1 on; negative for its inverse. */
export type Letter = number;
export type Word = readonly Letter[];
export interface Summand {
  readonly word: Word;
  readonly coefficient: Element;
}
/** By the word's key; no coefficient is known to be zero. */
export type Sum = ReadonlyMap<string, Summand>;

const keyOf = (w: Word): string => w.join(',');
export const NONE: Sum = new Map();
export const one = (coefficient: Element, word: Word = []): Sum => new Map([[keyOf(word), { word, coefficient }]]);

/** Words joined, inverses cancelled where they meet. */
function join(a: Word, b: Word): Word {
  let cut = 0;
  while (cut < a.length && cut < b.length && a[a.length - 1 - cut] === -(b[cut] as number)) cut += 1;
  return [...a.slice(0, a.length - cut), ...b.slice(cut)];
}

/** Adds up summands by word, then drops those whose coefficient is zero. */
class Collector {
  readonly #found = new Map<string, Summand>();
  constructor(private readonly field: Field) {}

  add(word: Word, coefficient: Element): void {
    const key = keyOf(word);
    const known = this.#found.get(key);
    this.#found.set(key, { word, coefficient: known ? this.field.add(known.coefficient, coefficient) : coefficient });
  }

  total(): Sum {
    for (const [key, { coefficient }] of this.#found) if (isRational(coefficient) ? Q.isZero(coefficient) : this.field.isZero(coefficient) === 'yes') this.#found.delete(key);
    return this.#found;
  }
}

function collect(field: Field, summands: Iterable<Summand>): Sum {
  const all = new Collector(field);
  for (const { word, coefficient } of summands) all.add(word, coefficient);
  return all.total();
}

export const addSums = (field: Field, a: Sum, b: Sum): Sum => (a.size === 0 ? b : b.size === 0 ? a : collect(field, [...a.values(), ...b.values()]));
export const scaleSum = (field: Field, a: Sum, factor: Element): Sum => collect(field, [...a.values()].map((s) => ({ word: s.word, coefficient: field.multiply(s.coefficient, factor) })));
/** The sum of the products of pairs. Cost: for each pair, the product of the numbers of words. */
export function sumOfProducts(field: Field, pairs: readonly (readonly [Sum, Sum])[], check: () => void = () => undefined): Sum {
  const all = new Collector(field);
  for (const [a, b] of pairs) {
    for (const x of a.values()) {
      check();
      for (const y of b.values()) all.add(join(x.word, y.word), field.multiply(x.coefficient, y.coefficient));
    }
  }
  return all.total();
}
export const multiplySums = (field: Field, a: Sum, b: Sum): Sum => sumOfProducts(field, [[a, b]]);

/** The multiple of the identity that the sum is; null where it holds a letter. */
export function scalarOf(a: Sum): Element | null {
  if (a.size === 0) return Q.ZERO;
  const [only] = a.values();
  return a.size === 1 && only && only.word.length === 0 ? only.coefficient : null;
}
/** Of one word the inverse is known. */
export function inverseOf(field: Field, a: Sum): Sum | null {
  const [only] = a.values();
  return a.size === 1 && only ? one(field.divide(Q.ONE, only.coefficient), only.word.map((x) => -x).reverse()) : null;
}
