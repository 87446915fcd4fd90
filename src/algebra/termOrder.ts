/** Sums in print: which term comes first, and whether a factor in front is multiplied in. */
import { Q, type Rational } from '../expression/index.ts';
import type { Context } from './context.ts';
import { denominatorOf, type Exponent, numeratorOf } from './exponent.ts';
import type { Kernel } from './kernel.ts';
import type { Monomial } from './monomial.ts';
import { kernelsIn, type Polynomial, type Term } from './polynomial.ts';

/** Whether c * (sum) is better written term by term: numbers always when the factor is whole, other sums when a term becomes plainer. */
export function distributes(ctx: Context, c: Rational, f: Polynomial): boolean {
  if (Q.isOne(c) || (c.num === -1n && c.den === 1n)) return true;
  const shapes = [...kernelsIn(f)].map((k) => ctx.table.kernels[k] as Kernel);
  const numeric = shapes.every((k) => k.shape.kind !== 'parameter');
  if (numeric && (c.den === 1n || (shapes.some((k) => k.relation?.numeric !== true) && f.some((t) => Q.gcd(t.coefficient, c.den) > 1n)))) return true;
  if (c.den === 1n) return false;
  return f.some((t) => (t.coefficient * c.num) % c.den === 0n);
}

/** Total degree of a term in parameters, then in all kernels: higher degrees are written first. */
function degrees(ctx: Context, m: Monomial): readonly [number, number] {
  let parameters = 0;
  let all = 0;
  m.kernels.forEach((k, i) => {
    const e = m.exponents[i] as Exponent;
    const d = numeratorOf(e) / denominatorOf(e);
    all += d;
    if ((ctx.table.kernels[k] as Kernel).shape.kind === 'parameter') parameters += d;
  });
  return [parameters, all];
}

/** The terms of a sum as they follow each other in print. */
export function naturalOrder(ctx: Context, f: Polynomial): readonly Term[] {
  const numeric = [...kernelsIn(f)].every((k) => ctx.table.relations[k]?.numeric === true);
  const ranked = f.map((t, i) => ({ t, i, d: degrees(ctx, t.monomial) }));
  const imaginary = (m: Monomial): number => (m.kernels.some((k) => (ctx.table.kernels[k] as Kernel).shape.kind === 'imaginary') ? 1 : 0);
  ranked.sort((x, y) => y.d[0] - x.d[0] || imaginary(x.t.monomial) - imaginary(y.t.monomial) || y.d[1] - x.d[1] || x.i - y.i);
  const terms = ranked.map((r) => r.t);
  // Numbers are written with the rational part first: 1 + sqrt(5).
  return numeric ? [...terms].sort((x, y) => imaginary(x.monomial) - imaginary(y.monomial) || terms.indexOf(y) - terms.indexOf(x)) : terms;
}
