/** Exact test whether a function is identically zero: the field's normal form of its tree, with the local variable as one more positive symbol. */
import type { Truth } from '../algebra/types.ts';
import { build, children, type Expression } from '../expression/index.ts';
import { differentiate } from '../functions/index.ts';
import { Declined } from '../outcome.ts';
import type { Context } from './multi.ts';

/** Trees beyond this size (counted with repetition) are not tested: the answer is 'undecided'. */
const LARGEST_TREE = 4000;
/** A first test, of what is small enough to be quick. */
export const SMALL_TREE = 400;

export interface Difference {
  readonly whole: Expression;
  /** Subtracted: coefficient * base^exponent each. */
  readonly parts: readonly { readonly coefficient: Expression; readonly base: Expression; readonly exponent: Expression }[];
  /** The difference is known to tend to zero: it vanishes if its derivative does. */
  readonly tendsToZero: boolean;
}

/** Whether whole - sum of parts is zero. Never a guess: 'undecided' where the normal form does not say. */
export function vanishes(c: Context, build_: () => Difference, largest = LARGEST_TREE): Truth {
  try {
    const { whole, parts, tendsToZero } = build_();
    const tree = build.sum(whole, ...parts.map((p) => build.negation(build.product(p.coefficient, build.power(p.base, p.exponent)))));
    if (isLarger(tree, largest)) return 'undecided';
    const direct = c.field.isZero(c.field.fromExpression(tree));
    if (direct !== 'undecided' || !tendsToZero) return direct;
    const slope = differentiate(tree, c.local);
    return slope && !isLarger(slope, largest) && c.field.isZero(c.field.fromExpression(slope)) === 'yes' ? 'yes' : 'undecided';
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return 'undecided';
    throw error;
  }
}

function isLarger(e: Expression, limit: number): boolean {
  let count = 0;
  const stack: Expression[] = [e];
  for (let node = stack.pop(); node; node = stack.pop()) {
    count += 1;
    if (count > limit) return true;
    stack.push(...children(node));
  }
  return false;
}
