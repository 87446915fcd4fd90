/** Random trees for property tests. */
import fc from 'fast-check';
import { build, Q, type Expression } from '../../src/expression/index.ts';

const rationals = fc.tuple(fc.integer({ min: -9, max: 9 }), fc.integer({ min: 1, max: 6 })).map(([p, q]) => build.number(Q.rational(p, q)));
const positiveNumbers = fc.integer({ min: 2, max: 30 }).map((n) => build.number(n));

export interface Vocabulary {
  readonly symbols: readonly string[];
  readonly functions: readonly string[];
  readonly constants?: boolean;
  readonly imaginary?: boolean;
}

/** Trees of sums, products, quotients, rational and symbolic powers and the given functions. */
export function trees(words: Vocabulary, depth: number): fc.Arbitrary<Expression> {
  const leaves: fc.Arbitrary<Expression>[] = [rationals, positiveNumbers];
  if (words.symbols.length > 0) leaves.push(fc.constantFrom(...words.symbols).map(build.symbol));
  if (words.constants) leaves.push(fc.constantFrom('pi' as const, 'e' as const).map(build.constant));
  if (words.imaginary) leaves.push(fc.constant(build.constant('i')));
  const leaf = fc.oneof(...leaves);
  if (depth === 0) return leaf;
  const inner = trees(words, depth - 1);
  const choices: fc.Arbitrary<Expression>[] = [
    leaf,
    fc.tuple(inner, inner).map(([a, b]) => build.sum(a, b)),
    fc.tuple(inner, inner).map(([a, b]) => build.product(a, b)),
    fc.tuple(inner, inner).map(([a, b]) => build.quotient(a, b)),
    fc.tuple(inner, fc.constantFrom(Q.rational(1, 2), Q.rational(2), Q.rational(3), Q.rational(-1), Q.rational(-1, 2), Q.rational(1, 3), Q.rational(3, 2))).map(([a, r]) => build.power(a, r)),
  ];
  if (words.functions.length > 0) choices.push(fc.tuple(fc.constantFrom(...words.functions), inner).map(([f, a]) => build.call(f, a)));
  return fc.oneof(...choices);
}
