/** Kernels with a relation (a root, sine and cosine, an algebraic number): powers beyond their period replaced. */
import { compareExponents, type Exponent, periodsIn } from './exponent.ts';
import type { KernelTable } from './kernel.ts';
import { type Monomial, monomialOf, multiplyMonomials } from './monomial.ts';
import { collect, kernelsIn, multiplyPolynomials, type Polynomial, powerOfPolynomial, type Term } from './polynomial.ts';

export const inRange = (table: KernelTable, m: Monomial): boolean => {
  for (let i = 0; i < m.kernels.length; i += 1) {
    const relation = table.relations[m.kernels[i] as number];
    if (relation) {
      const e = m.exponents[i] as Exponent;
      if (compareExponents(e, 0) < 0 || compareExponents(e, relation.period) >= 0) return false;
    }
  }
  return true;
};

/** Applies the kernels' relations until every exponent is in range. Exponents must not be negative. */
export function reduceByRelations(table: KernelTable, f: Polynomial): Polynomial {
  if (f.every((t) => inRange(table, t.monomial))) return f;
  const done: Term[] = [];
  const open: Term[] = [...f];
  for (let t = open.pop(); t; t = open.pop()) {
    let changed = false;
    for (let i = 0; i < t.monomial.kernels.length; i += 1) {
      const k = t.monomial.kernels[i] as number;
      const relation = table.relations[k];
      const e = t.monomial.exponents[i] as Exponent;
      if (!relation || compareExponents(e, relation.period) < 0) continue;
      const count = relation.pure ? periodsIn(e, relation.period) : 1;
      const rest = multiplyMonomials(t.monomial, monomialOf(k, -count * relation.period));
      const value = count === 1 ? relation.value : powerOfPolynomial(relation.value, count);
      for (const v of value) open.push({ monomial: multiplyMonomials(rest, v.monomial), coefficient: t.coefficient * v.coefficient });
      changed = true;
      break;
    }
    if (!changed) done.push(t);
    if (open.length > 64) {
      const merged = collect(open);
      open.length = 0;
      open.push(...merged);
      table.check();
    }
  }
  return collect(done);
}

export const multiplyReduced = (table: KernelTable, f: Polynomial, g: Polynomial): Polynomial => reduceByRelations(table, multiplyPolynomials(f, g));

export const usesRelation = (table: KernelTable, f: Polynomial): boolean => [...kernelsIn(f)].some((k) => table.relations[k] !== null);
