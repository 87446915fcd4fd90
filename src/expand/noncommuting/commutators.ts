/**
 * Lie elements of the free algebra as sums of nested commutators: the Lyndon basis.
 * The bracketing of a Lyndon word w is w plus larger words, so the smallest word of a Lie element is Lyndon and names the next commutator (Chen, Fox, Lyndon 1958; Reutenauer, Free Lie Algebras, theorem 5.1; from memory).
 */
import type { Element, Field } from '../../algebra/types.ts';
import { Q } from '../../expression/index.ts';
import { addSums, multiplySums, one, scaleSum, type Sum, type Word } from './words.ts';

/** A letter, or the commutator of two. */
export type Bracket = number | readonly [Bracket, Bracket];
export interface BracketTerm {
  readonly coefficient: Element;
  readonly bracket: Bracket;
}

const compare = (a: Word, b: Word): number => {
  for (let k = 0; k < Math.min(a.length, b.length); k += 1) if (a[k] !== b[k]) return (a[k] as number) - (b[k] as number);
  return a.length - b.length;
};
const isLyndon = (w: Word): boolean => w.length > 0 && w.every((_, k) => k === 0 || compare(w, w.slice(k)) < 0);

/** [u, v] with v the longest proper suffix that is Lyndon. */
function bracketOf(w: Word): Bracket {
  if (w.length === 1) return w[0] as number;
  const cut = w.findIndex((_, k) => k > 0 && isLyndon(w.slice(k)));
  return [bracketOf(w.slice(0, cut)), bracketOf(w.slice(cut))];
}

function expanded(field: Field, b: Bracket): Sum {
  if (typeof b === 'number') return one(Q.ONE, [b]);
  const [x, y] = b.map((part) => expanded(field, part)) as [Sum, Sum];
  return addSums(field, multiplySums(field, x, y), scaleSum(field, multiplySums(field, y, x), Q.rational(-1)));
}

/** The element as commutators, each nested to the right where it can be; null where it is no Lie element, holds inverses, or only single letters. */
export function asCommutators(field: Field, a: Sum): readonly BracketTerm[] | null {
  const words = [...a.values()].map((s) => s.word);
  if (!words.some((w) => w.length > 1) || words.some((w) => w.length === 0 || w.some((x) => x < 0))) return null;
  const terms: BracketTerm[] = [];
  for (let rest = a; rest.size > 0; ) {
    const least = [...rest.values()].reduce((m, s) => (s.word.length < m.word.length || (s.word.length === m.word.length && compare(s.word, m.word) < 0) ? s : m));
    if (!isLyndon(least.word)) return null;
    const bracket = bracketOf(least.word);
    rest = addSums(field, rest, scaleSum(field, expanded(field, bracket), field.negate(least.coefficient)));
    const turned = rightNested(bracket);
    terms.push({ bracket: turned.bracket, coefficient: turned.sign === 1 ? least.coefficient : field.negate(least.coefficient) });
  }
  return terms;
}

/** [[A, B], B] is -[B, [A, B]]. */
function rightNested(b: Bracket): { readonly bracket: Bracket; readonly sign: 1 | -1 } {
  if (typeof b === 'number') return { bracket: b, sign: 1 };
  const [x, y] = b.map(rightNested) as [ReturnType<typeof rightNested>, ReturnType<typeof rightNested>];
  const sign = x.sign === y.sign ? 1 : -1;
  const turn = typeof x.bracket !== 'number' && typeof y.bracket === 'number';
  return turn ? { bracket: [y.bracket, x.bracket], sign: sign === 1 ? -1 : 1 } : { bracket: [x.bracket, y.bracket], sign };
}
