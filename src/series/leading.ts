/** The first term that is not zero, and what it says: size, sign, limit. */
import type { Element, Truth } from '../algebra/types.ts';
import { Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { compareExponents, signOfExponent, undecidedSign } from './exponent.ts';
import { type Context, exactOf, isRational, type Lead, type Multi, type ScaleElement, Series } from './multi.ts';
import { plainText } from './plain.ts';
import { SMALL_TREE, vanishes } from './vanish.ts';

/** Vanishing candidates before the search gives up (zero test undecided; decided as non-zero). */
const CAP_UNDECIDED = 60;
const CAP = 3000;
/** Vanishing terms after which a small formula is tested for zero as a whole. */
const FEW = 3;

/** Null exactly if the series is zero. Throws Declined('undecided') where that cannot be found out, and 'no-expansion' where an O-term hides the leading term. */
export function leading(c: Context, s: Series): Lead | null {
  if (s.lead !== undefined) return s.lead;
  s.lead = nextTerm(c, s, 0);
  return s.lead;
}

/** The first non-zero term at or after index; null where the rest is zero. */
export function nextTerm(c: Context, s: Series, from: number): Lead | null {
  const found = nextTermOrOrder(c, s, from);
  if (found && (found.order || hidesLead(c, found.coefficient))) {
    throw new Declined('no-expansion', 'The O-term in the formula hides the leading term that is needed here; write more terms before it.');
  }
  return found;
}

/** Whether a coefficient is known only as an O-term. */
function hidesLead(c: Context, m: Multi): boolean {
  if (!(m instanceof Series)) return false;
  const first = nextTermOrOrder(c, m, 0);
  return first !== null && (first.order || hidesLead(c, first.coefficient));
}

/** Zero for certain; an O-term counts as present. */
function isAbsent(c: Context, m: Multi, mayVanish: boolean): boolean {
  if (m instanceof Series) return nextTermOrOrder(c, m, 0, mayVanish) === null;
  return mayVanish && !isRational(m) ? c.field.isZero(m) === 'yes' : isZero(c, m);
}

/** The first term at or after index that is not zero or is an O-term (`order`); null where the rest is zero. */
export function nextTermOrOrder(c: Context, s: Series, from: number, mayVanish = false): (Lead & { readonly order: boolean }) | null {
  let verdict: Truth | null = null;
  for (let k = from; ; k += 1) {
    const term = s.stream.at(k);
    if (!term) return null;
    if (term.order || !isAbsent(c, term.coefficient, mayVanish)) return { index: k, exponent: term.exponent, coefficient: term.coefficient, order: term.order === true };
    const seen = k - from;
    if (seen === Math.min(FEW, c.patience.value) || seen === c.patience.value) {
      verdict = restVanishes(c, s, from, term.exponent, seen === c.patience.value ? undefined : SMALL_TREE);
      if (verdict === 'yes') return null;
    }
    if (seen >= CAP || (verdict !== 'no' && seen >= Math.max(CAP_UNDECIDED, c.patience.value + 20))) {
      throw new Declined('undecided', `The first ${seen} terms of a difference cancel and it could not be decided whether it is zero; simplify the formula by hand.`);
    }
    c.budget.check();
  }
}

/** Whether the function minus the terms before index is identically zero; all terms up to element^reached are known to vanish. */
function restVanishes(c: Context, s: Series, index: number, reached: Element, largest?: number): Truth {
  const before: { exponent: Element; coefficient: Multi }[] = [];
  for (let k = 0; k < index; k += 1) {
    const term = s.stream.at(k);
    if (term) before.push(term);
  }
  return vanishes(
    c,
    () => ({
      whole: s.exact(),
      parts: before.map((t) => ({ coefficient: exactOf(c, t.coefficient), base: s.element.expression, exponent: exactOf(c, t.exponent) })),
      tendsToZero: signOfExponent(c, reached) >= 0,
    }),
    largest,
  );
}

/** True exactly if m is identically zero; throws Declined where undecided. */
export function isZero(c: Context, m: Multi): boolean {
  if (m instanceof Series) return leading(c, m) === null;
  if (isRational(m)) return m.num === 0n;
  const truth = c.field.isZero(m);
  if (truth === 'undecided') throw new Declined('undecided', `Whether ${plainText(c.field.toExpression(m))} is zero could not be decided; simplify it by hand.`, undefined, c.field.parameters(m));
  return truth === 'yes';
}

/** True if m is found to be identically zero; false where it is not, or where that could not be decided. */
export function isKnownZero(c: Context, m: Multi): boolean {
  try {
    return isZero(c, m);
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return false;
    throw error;
  }
}

/** constant * product of element^exponent, from fast to slow; exponents that are zero are left out. */
export interface Monomial {
  readonly constant: Element;
  readonly factors: readonly { readonly element: ScaleElement; readonly exponent: Element }[];
}

/** The leading monomial; null for zero. */
export function monomialOf(c: Context, m: Multi): Monomial | null {
  const factors: { element: ScaleElement; exponent: Element }[] = [];
  let rest: Multi = m;
  while (rest instanceof Series) {
    const lead = leading(c, rest);
    if (!lead) return null;
    if (signOfExponent(c, lead.exponent) !== 0) factors.push({ element: rest.element, exponent: lead.exponent });
    rest = lead.coefficient;
  }
  if (isZero(c, rest)) return null;
  return { constant: rest, factors };
}

/** 1 where |a| grows faster than |b| as t -> 0+, 0 where their quotient stays bounded both ways. */
export function compareMonomials(c: Context, a: Monomial, b: Monomial): -1 | 0 | 1 {
  let i = 0;
  let j = 0;
  for (;;) {
    const x = a.factors[i];
    const y = b.factors[j];
    if (!x && !y) return 0;
    if (x && (!y || x.element.rank > y.element.rank)) return signOfExponent(c, x.exponent) < 0 ? 1 : -1;
    if (y && (!x || y.element.rank > x.element.rank)) return signOfExponent(c, y.exponent) < 0 ? -1 : 1;
    if (x && y) {
      const sign = compareExponents(c, x.exponent, y.exponent);
      if (sign !== 0) return sign < 0 ? 1 : -1;
    }
    i += 1;
    j += 1;
  }
}

export type Growth = 'zero' | 'small' | 'finite' | 'large';

export function growth(c: Context, m: Multi): Growth {
  const lead = monomialOf(c, m);
  if (!lead) return 'zero';
  const first = lead.factors[0];
  if (!first) return 'finite';
  return signOfExponent(c, first.exponent) > 0 ? 'small' : 'large';
}

/** Sign of a real element other than zero; throws Declined where undecided. 0 for zero, 'complex' if not real. */
export function decideSign(c: Context, e: Element): -1 | 0 | 1 | 'complex' {
  if (isRational(e)) return Q.signOf(e);
  const sign = c.field.sign(e);
  if (sign === 'undecided') throw undecidedSign(c, e);
  return sign;
}

/** Sign of m for small positive t. */
export function eventualSign(c: Context, m: Multi): -1 | 0 | 1 | 'complex' {
  const lead = monomialOf(c, m);
  return lead ? decideSign(c, lead.constant) : 0;
}
