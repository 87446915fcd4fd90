/** Calls of the functions of mathematics: what the field knows itself, then what their descriptions say, else a kernel. */
import { Declined } from '../outcome.ts';
import { algebraicCall } from './algebraicNumber.ts';
import type { Context } from './context.ts';
import { ELEMENTARY_RULES } from './elementary.ts';
import { opaque } from './circularFunctions.ts';
import { elementKey, negateElement } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { toExpression } from './toExpression.ts';
import type { Element } from './types.ts';

const isNegativeForm = (a: Element): boolean => (isQuotient(a) ? a.content.num < 0n : a.num < 0n);

/** Values are kept: series code asks for the same ones again and again. */
export function callFunction(ctx: Context, id: string, args: readonly Element[]): Element {
  const key = `${id}(${args.map(elementKey).join(', ')})`;
  const known = ctx.calls.get(key);
  if (known !== undefined) return known;
  const result = computeCall(ctx, id, args);
  ctx.calls.set(key, result);
  return result;
}

function computeCall(ctx: Context, id: string, args: readonly Element[]): Element {
  const [first, ...rest] = args;
  if (!first) throw new Declined('bad-request', `The function ${id} needs an argument.`);
  const own = ELEMENTARY_RULES[id];
  if (own) return own(ctx, [first, ...rest]);
  if (id === 'polynomialRoot') return algebraicCall(ctx, args) ?? opaque(ctx, id, args);
  const description = ctx.describe(id);
  if (!description) return opaque(ctx, id, args);
  const trees = args.map((a) => toExpression(ctx, a));
  const value = description.value?.(trees) ?? description.definition?.(trees);
  if (value && !(value.kind === 'call' && value.function === id)) return ctx.read(value);
  if (description.parity && args.length === 1 && isNegativeForm(first)) {
    const inner = callFunction(ctx, id, [negateElement(first)]);
    return description.parity === 'odd' ? negateElement(inner) : inner;
  }
  return opaque(ctx, id, args);
}
