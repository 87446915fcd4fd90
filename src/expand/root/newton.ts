/** Newton's iteration in multiseries: each step about doubles the number of right terms. */
import { Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { add, compareMonomials, type Context, divide, isZero, type Monomial, monomialOf, type Multi, multiplyMonomials, negate, orderSeries, raiseMonomial, Series, truncate } from '../../series/index.ts';
import { type Curve, taylorAt } from './taylor.ts';

const MOST_STEPS = 24;

/**
 * The root that starts with `start`, as a multiseries that ends with an O-term behind at least `wanted` terms (or is exact).
 * `enough` decides from the multiseries whether it has the terms that were asked for.
 */
export function refine(curve: Curve, start: Multi, enough: (y: Multi) => boolean): Multi {
  const c = curve.side.context;
  let y = start;
  let width = 16;
  c.patience.value = 100;
  for (let step = 0; step < MOST_STEPS; step += 1) {
    c.budget.check();
    const taylor = taylorAt(curve, y, 4);
    const [c0 = Q.ZERO, c1 = Q.ZERO] = taylor.coefficients;
    if (isNull(c, c0)) return y;
    if (isNull(c, c1)) throw new Declined('undecided', 'A root of higher multiplicity could not be separated; factor the equation.');
    const slope = monomialOf(c, c1) as Monomial;
    const delta = negate(c, divide(c, c0, c1));
    if (taylor.complete && taylor.coefficients.length <= 2) return add(c, y, delta);
    const size = monomialOf(c, delta) as Monomial;
    const error = errorOf(c, taylor.coefficients, slope, size);
    if (error && compareMonomials(c, error, size) >= 0) throw new Declined('no-expansion', 'The leading term of the root could not be improved; name the value of the root.');
    const cut = truncate(c, delta, error, width);
    y = add(c, y, cut.kept);
    const bound = larger(c, error, cut.next);
    const result = bound ? add(c, y, orderSeries(c, bound)) : y;
    if (bound ? enough(result) : false) return result;
    if (cut.next && !error) width *= 2;
    else if (cut.next && cut.count >= width) width *= 2;
  }
  throw new Declined('undecided', 'The root did not settle after many steps; ask for fewer terms.');
}

const isNull = (c: Context, m: Multi): boolean => (m instanceof Series ? monomialOf(c, m) === null : isZero(c, m));
const larger = (c: Context, a: Monomial | null, b: Monomial | null): Monomial | null => (a && b ? (compareMonomials(c, a, b) >= 0 ? a : b) : (a ?? b));

/** The largest of delta^k c_k/c_1, k >= 2. */
function errorOf(c: Context, coefficients: readonly Multi[], slope: Monomial, delta: Monomial): Monomial | null {
  let worst: Monomial | null = null;
  for (let k = 2; k < coefficients.length; k += 1) {
    const lead = monomialOf(c, coefficients[k] as Multi);
    if (!lead) continue;
    const size = multiplyMonomials(c, multiplyMonomials(c, lead, raiseMonomial(c, delta, Q.rational(k))), raiseMonomial(c, slope, Q.MINUS_ONE));
    worst = larger(c, worst, size);
  }
  return worst;
}

