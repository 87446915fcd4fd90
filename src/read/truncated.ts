/** Marks of a truncated expansion in a formula. */
import { children, type Expression, type OrderNode, walk } from '../expression/index.ts';

/** All O- and o-terms, in reading order. */
export function orderTerms(e: Expression): readonly OrderNode[] {
  return [...walk(e)].filter((n): n is OrderNode => n.kind === 'order');
}

/** A side that is an expansion already: an order term or dots as a term of a sum, prefactors and brackets looked through. */
export function isTruncated(e: Expression): boolean {
  switch (e.kind) {
    case 'order':
    case 'dots':
      return true;
    case 'sum':
    case 'product':
    case 'negation':
    case 'quotient':
      return children(e).some(isTruncated);
    default:
      return false;
  }
}

/** A symbol, a number, or an unspecified function of symbols: nothing that could be expanded by itself. */
export function isBareName(e: Expression): boolean {
  switch (e.kind) {
    case 'number':
    case 'constant':
    case 'symbol':
      return true;
    case 'negation':
      return isBareName(e.operand);
    case 'apply':
      return e.args.every(isBareName);
    case 'vector':
      return e.operation === 'symbol';
    default:
      return false;
  }
}

/**
 * The side of a chain that an expansion is wanted of: the first one that is neither a bare name nor truncated;
 * null where there is none, or where the relation is an equation to be solved (a side 0, or not of the form name = formula with further sides).
 */
export function principalSide(e: Expression): number | null {
  if (e.kind !== 'relation') return null;
  const index = e.sides.findIndex((side) => !isBareName(side) && !isTruncated(side));
  return index < 0 ? null : index;
}
