/** Exponents are exact and must be comparable: rationals, or field elements ordered under the assumptions. */
import type { Element } from '../algebra/types.ts';
import { build, type Expression, Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { type Context, isRational } from './multi.ts';
import { plainText } from './plain.ts';

/** Sign of a - b; throws Declined where the assumptions do not decide it. */
export function compareExponents(c: Context, a: Element, b: Element): -1 | 0 | 1 {
  if (a === b) return 0;
  if (isRational(a) && isRational(b)) return a.den === b.den ? (a.num < b.num ? -1 : a.num > b.num ? 1 : 0) : Q.compare(a, b);
  const sign = c.field.compare(a, b);
  if (sign === 'undecided' || sign === 'complex') {
    const difference = c.field.subtract(a, b);
    throw undecidedSign(c, difference);
  }
  return sign;
}

export const signOfExponent = (c: Context, a: Element): -1 | 0 | 1 => compareExponents(c, a, Q.ZERO);

/** The failure for an element whose sign the answer depends on. */
export function undecidedSign(c: Context, element: Element): Declined {
  if (c.field.parameters(element).includes(c.local)) return new Declined('no-expansion', 'The answer depends on the sign of an oscillating function, which changes again and again near the point; choose another point.');
  const written = plainText(c.field.toExpression(element));
  // -b > 0 or -b < 0 asks the same as b > 0 or b < 0.
  const text = written.startsWith('-') ? plainText(c.field.toExpression(c.field.negate(element))) : written;
  const parameters = c.field.parameters(element);
  return parameters.length > 0
    ? new Declined('needs-assumption', `The answer depends on the sign of ${text}; assume ${text} > 0 or ${text} < 0.`, undefined, parameters)
    : new Declined('undecided', `The sign of ${text} could not be decided; give it as a decimal or simplify it.`);
}

export const zeroExpression: Expression = build.number(0);
