/** Newton's polygon over any asymptotic scale: the possible leading sizes of a root and the equations for its leading coefficients. */
import type { Element } from '../../algebra/types.ts';
import { Q } from '../../expression/index.ts';
import { compareMonomials, type Context, type Monomial, monomialOf, type Multi, multiplyMonomials, raiseMonomial } from '../../series/index.ts';

export interface Edge {
  /** The root is (constant) * size. */
  readonly size: Monomial;
  /** coefficients[k] of constant^k, lowest not zero. */
  readonly polynomial: readonly Element[];
}

/** All edges for sum of coefficient_k y^k; with a bound, only sizes smaller than it. Coefficient 0 must not vanish. */
export function polygonEdges(c: Context, coefficients: readonly Multi[], bound: Monomial | null): Edge[] {
  const leads = coefficients.map((a) => monomialOf(c, a));
  const edges: Edge[] = [];
  let start = leads.findIndex((m) => m !== null);
  for (;;) {
    let best: { size: Monomial; end: number } | null = null;
    const from = leads[start];
    if (!from) break;
    for (let k = start + 1; k < leads.length; k += 1) {
      const to = leads[k];
      if (!to) continue;
      const quotient = multiplyMonomials(c, from, raiseMonomial(c, to, Q.MINUS_ONE));
      const size = raiseMonomial(c, quotient, Q.rational(1, k - start));
      const order = best ? compareMonomials(c, size, best.size) : -1;
      if (order < 0) best = { size, end: k };
      else if (order === 0 && best) best = { size: best.size, end: k };
    }
    if (!best) break;
    const { size, end } = best;
    if (bound && compareMonomials(c, size, bound) >= 0) break;
    const top = from;
    const polynomial: Element[] = [];
    for (let k = start; k <= end; k += 1) {
      const lead = leads[k];
      const onEdge = lead && compareMonomials(c, multiplyMonomials(c, lead, raiseMonomial(c, size, Q.rational(k - start))), top) === 0;
      polynomial.push(onEdge ? lead.constant : Q.ZERO);
    }
    edges.push({ size, polynomial });
    start = end;
  }
  return edges;
}
