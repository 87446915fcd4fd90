/** Polynomials in the integration variable by their coefficients. */
import type { Element } from '../../algebra/types.ts';
import { type Expression, Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { isRational, isZero, monomial, Series } from '../../series/index.ts';
import { type Evaluate, bind, type Session } from '../session.ts';

export const refuse = (): Declined => new Declined('no-expansion', 'The integral over the parameter is not of a kind that is expanded here; integrate first or split the integrand.');

/** A polynomial in v by its coefficients: v becomes a series in a symbol of its own. */
export function polynomialIn(s: Session, e: Expression, v: string, evaluate: Evaluate): { power: bigint; coefficient: Element }[] {
  const c = s.context;
  const m = evaluate(bind(s, [[v, monomial(c, c.scale.local, Q.ONE)]]), e);
  if (!(m instanceof Series)) return isZero(c, m) ? [] : [{ power: 0n, coefficient: m }];
  const found: { power: bigint; coefficient: Element }[] = [];
  for (let k = 0; ; k += 1) {
    const t = m.stream.at(k);
    if (!t) return found;
    if (k > 400 || t.coefficient instanceof Series || !isRational(t.exponent) || t.exponent.den !== 1n || t.exponent.num < 0n) throw refuse();
    if (!isZero(c, t.coefficient)) found.push({ power: t.exponent.num, coefficient: t.coefficient });
  }
}
