/** Where a divergent series is best stopped at one argument: before its least term, whose size tells how good the sum can get. */
import { type Assumption, type Expression, freeSymbols } from '../expression/index.ts';
import { type Expansion, partialSum } from '../expand/index.ts';
import { describe } from '../functions/index.ts';
import type { Budget } from '../outcome.ts';
import { type Ball, encloseReal, real } from '../rigorous/index.ts';
import { parameterBalls } from './region.ts';
import { variableName } from './remainder.ts';
import type { ExpansionWithTerms } from './types.ts';

export interface LeastTerm {
  /** How many terms stand before the least one; 0 where already the first is the least. */
  readonly terms: number;
  /** Its absolute value, rounded up. */
  readonly size: string;
}

const FIRST = 12;
/** Beyond this many terms the least one is not looked for. */
const MOST = 400;
const PRECISION = 128;

/**
 * The terms are followed until there are twice as many as stand before the least one, and a few more. Null where the series converges, is finite or oscillates,
 * where a term has no real value at the argument, and where the least term lies too far out for the time.
 */
export function leastTermAt(expansionWithTerms: ExpansionWithTerms, argument: Expression, assumptions: readonly Assumption[], budget: Budget): LeastTerm | null {
  for (let count = FIRST; count <= MOST; count *= 2) {
    const before = budget.remaining();
    const found = expansionWithTerms(count);
    if (!found.ok || !found.value.divergent || found.value.oscillating || found.value.terms.length < count) return null;
    const sizes = sizesAt(found.value, argument, assumptions);
    if (!sizes) return null;
    let least = 0;
    sizes.forEach((size, k) => {
      const best = sizes[least];
      if (best && real.compare(real.midpoint(size), real.midpoint(best)) === -1) least = k;
    });
    const value = sizes[least];
    if (value && 2 * (least + 1) + 4 <= count) return { terms: least, size: real.toDecimalUp(value, 3) };
    // Twice the terms cost about eight times the work.
    if (8 * (before - budget.remaining()) > budget.remaining()) return null;
  }
  return null;
}

function sizesAt(expansion: Expansion, argument: Expression, assumptions: readonly Assumption[]): readonly Ball[] | null {
  const variable = variableName(expansion);
  const parameters = parameterBalls(freeSymbols(expansion.function).filter((name) => name !== variable), assumptions);
  const x = encloseReal(argument, parameters, PRECISION, describe);
  if (x === null) return null;
  const environment = new Map([...parameters, [variable, x] as const]);
  const sizes: Ball[] = [];
  for (const term of expansion.terms) {
    const value = encloseReal(partialSum({ ...expansion, terms: [term] }), environment, PRECISION, describe);
    if (value === null) return null;
    sizes.push(real.absolute(value));
  }
  return sizes;
}
