/** Vector functions, `\mathbf{u}(t)`: unspecified functions that may stand where a formula is linear in them, and nowhere else. */
import { type Expression, isVectorName, walk } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';

const holds = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'apply' && isVectorName(n.name));

/** Declines lengths, products and functions of vector functions: their components would be needed. */
export function requireLinearInFunctions(e: Expression): void {
  if (!holds(e)) return;
  switch (e.kind) {
    case 'apply':
      if (isVectorName(e.name) && !e.args.some(holds)) return;
      break;
    case 'sum':
      return e.terms.forEach(requireLinearInFunctions);
    case 'negation':
      return requireLinearInFunctions(e.operand);
    case 'quotient':
      if (!holds(e.denominator)) return requireLinearInFunctions(e.numerator);
      break;
    case 'product':
      if (e.factors.filter(holds).length === 1) return e.factors.forEach(requireLinearInFunctions);
      break;
    case 'derivative':
    case 'integral':
      return requireLinearInFunctions(e.body);
    case 'relation':
      return e.sides.forEach(requireLinearInFunctions);
    default:
  }
  throw new Declined('no-expansion', 'Lengths and products of a vector function are not expanded; give the vector a name without an argument, or write its components.');
}
