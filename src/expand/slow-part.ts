/** F(f_0 + d) where d is smaller than every power of the scale on which f_0 grows: Taylor's formula with coefficients that stay functions of f_0. */
import { Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { type Context, divide, finiteStream, leading, levels, multiply, type Multi, type ScaleElement, scaleBy, Series, streamIn, sumOfSeries, type Term, theta, unnamed } from '../series/index.ts';

/**
 * sum over k of F^(k)(f_0) d^k/k!, with f_0 the coefficient of the fastest element's power 0 in f. `value` is F and `slope` F' at a multiseries.
 * Exact coefficients matter: F(f_0 + d) - F(f_0) must not be searched for its leading term among the powers of the slow scale.
 */
export function aroundSlowPart(c: Context, f: Series, value: (base: Multi) => Multi, slope: (base: Multi) => Multi): Multi {
  const { base, rest } = levels(c, positivePart(c, f));
  if (base === null) throw new Error('an unbounded argument without its slow part');
  const start = value(base);
  if (rest.at(0) === null) return start;
  const small = new Series(f.element, rest, unnamed);
  const speed = theta(c, base);
  const derivatives: Multi[] = [start];
  const powers: Multi[] = [Q.ONE];
  const part = (k: number): Multi => {
    while (derivatives.length <= k) {
      derivatives.push(derivatives.length === 1 ? slope(base) : divide(c, theta(c, derivatives[derivatives.length - 1] as Multi), speed));
      powers.push(scaleBy(c, multiply(c, powers[powers.length - 1] as Multi, small), Q.rational(1, powers.length)));
    }
    return multiply(c, derivatives[k] as Multi, powers[k] as Multi);
  };
  if (!(start instanceof Series) || start.element.rank <= f.element.rank) return sumOfSeries(c, f.element, part);
  const front = single(start, start.element);
  return new Series(
    start.element,
    finiteStream([{ exponent: front.exponent, coefficient: sumOfSeries(c, f.element, (k) => single(part(k), start.element).coefficient) }]),
    unnamed,
  );
}

/** f without change: its exponents must not be negative in its own element. */
function positivePart(c: Context, f: Series): Series {
  const lead = leading(c, f);
  if (lead && c.field.sign(lead.exponent) === -1) throw new Declined('no-expansion', 'A function of an argument on two unbounded scales is not expanded; choose another point.');
  return f;
}

/** The one power of the element that m consists of. */
function single(m: Multi, element: ScaleElement): Term {
  const stream = streamIn(m, element);
  const first = stream.at(0);
  if (!first || stream.at(1) !== null) throw new Declined('no-expansion', 'A function that mixes exponential scales with a shifted argument is not expanded; choose another point.');
  return first;
}
