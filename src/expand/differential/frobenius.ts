/**
 * Solutions of linear equations at a regular singular point: h^r times power series, with logarithms where exponents differ by integers.
 * Source: Frobenius, J. reine angew. Math. 76 (1873); DLMF 2.7(i) for two exponents.
 */
import type { Element } from '../../algebra/types.ts';
import { type Expression, mapChildren, Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { addElements, type Context, isRational, isZero, negateElement } from '../../series/index.ts';
import { recentre } from '../equation.ts';
import type { ExpansionProblem } from '../expansion.ts';
import type { RawTerm } from '../flatten.ts';
import type { OpenSide } from '../open-side.ts';
import { zerosOf } from '../root/zeros.ts';
import type { SideResult } from '../side.ts';
import type { EulerForm } from './linear.ts';
import { addPolynomials, applyOperator, invertOperator, type Polynomial, scalePolynomial, trimmed } from './operator.ts';

export interface Exponent {
  readonly value: Element;
  readonly multiplicity: number;
}

/** Zeros of the indicial polynomial, larger ones first where that can be decided. */
export function exponentsOf(c: Context, indicial: Polynomial): Exponent[] {
  const p = trimmed(c, indicial);
  const low = p.findIndex((a) => !isZero(c, a));
  const zero: Exponent[] = low > 0 ? [{ value: Q.ZERO, multiplicity: low }] : [];
  const rest = p.slice(low);
  const others = rest.length === 3 ? quadratic(c, rest) : rest.length < 2 ? [] : zerosOf(c, rest, true).map(({ value, multiplicity }) => ({ value, multiplicity }));
  return [...zero, ...others].sort((a, b) => {
    const sign = c.field.compare(a.value, b.value);
    return sign === 1 ? -1 : sign === -1 ? 1 : 0;
  });
}

/** The zeros of a0 + a1 z + a2 z^2 are half +- sqrt(discriminant). */
export function halfAndDiscriminant(c: Context, [a0, a1, a2]: readonly [Element, Element, Element]): { readonly half: Element; readonly discriminant: Element } {
  const f = c.field;
  const half = f.divide(f.negate(a1), f.multiply(Q.rational(2), a2));
  return { half, discriminant: f.subtract(f.multiply(half, half), f.divide(a0, a2)) };
}

/** Both zeros; of sqrt(nu^2) = |nu| the bars are left out, since both signs are taken. */
function quadratic(c: Context, [a0, a1, a2]: Polynomial): Exponent[] {
  const f = c.field;
  if (a0 === undefined || a1 === undefined || a2 === undefined) return [];
  const { half, discriminant } = halfAndDiscriminant(c, [a0, a1, a2]);
  if (isZero(c, discriminant)) return [{ value: half, multiplicity: 2 }];
  const root = f.fromExpression(withoutBars(f.toExpression(f.power(discriminant, Q.HALF))));
  return [f.add(half, root), f.subtract(half, root)].map((value) => ({ value, multiplicity: 1 }));
}

export const withoutBars = (e: Expression): Expression => (e.kind === 'call' && e.function === 'abs' && e.args[0] ? withoutBars(e.args[0]) : mapChildren(e, withoutBars));

/** Coefficient of h^(exponent + k): a polynomial in log h. */
type Coefficients = (k: number) => Polynomial;

/**
 * y = h^r sum over k of Q_k(log h) h^k with I_0(r + k + D) Q_k = -(right side) - sum over i >= 1 of I_i(r + k - i + D) Q_(k-i), D = d/d(log h).
 * Constants that are free at later powers are 0.
 */
function recursion(c: Context, form: EulerForm, exponent: Element, first: Polynomial | null, right: (k: number) => Element): Coefficients {
  const known: Polynomial[] = first ? [first] : [];
  const shifted = (i: number, k: number): Polynomial => recentre(c, form.operator(i), addElements(c, exponent, Q.rational(k)));
  return (k) => {
    while (known.length <= k) {
      c.budget.check();
      const n = known.length;
      let total: Polynomial = [right(n)];
      for (let i = 1; i <= n; i += 1) {
        const q = known[n - i] as Polynomial;
        if (q.length > 0) total = addPolynomials(c, total, applyOperator(c, shifted(i, n - i), q));
      }
      known.push(trimmed(c, invertOperator(c, shifted(0, n), scalePolynomial(c, total, Q.MINUS_ONE))));
    }
    return known[k] as Polynomial;
  };
}

export interface Solution {
  readonly exponent: Element;
  readonly coefficients: Coefficients;
}

/** One solution for each zero of the indicial polynomial, multiple ones with (log h)^j in front. */
export function homogeneousSolutions(c: Context, form: EulerForm, exponents: readonly Exponent[]): Solution[] {
  return exponents.flatMap(({ value, multiplicity }) =>
    Array.from({ length: multiplicity }, (_, j) => ({
      exponent: value,
      coefficients: recursion(c, form, value, [...Array.from({ length: j }, () => Q.ZERO), Q.ONE], () => Q.ZERO),
    })),
  );
}

/** A solution of the equation with its right side; null where that is zero. */
export function particularSolution(c: Context, form: EulerForm): Solution | null {
  const { rightLowest } = form;
  if (rightLowest === null) return null;
  return { exponent: Q.rational(rightLowest), coefficients: recursion(c, form, Q.rational(rightLowest), null, (k) => form.right(rightLowest + k)) };
}

const MOST_QUIET = 60;

/** The terms of one solution in decreasing size: powers of h ascending, of log h descending. */
export function frobeniusTerms(side: OpenSide, form: EulerForm, solution: Solution, size: Pick<ExpansionProblem, 'terms' | 'order'>): SideResult {
  const c = side.context;
  const terms: RawTerm[] = [];
  let remainder: RawTerm | null = null;
  let quiet = 0;
  for (let k = 0; remainder === null; k += 1) {
    const q = solution.coefficients(k);
    const power = addElements(c, solution.exponent, Q.rational(k));
    quiet = q.length === 0 ? quiet + 1 : 0;
    if (quiet > MOST_QUIET) {
      // A recursion of finitely many steps that gave zero so often gives zero for ever.
      const degree = form.degree();
      const last = solution.exponent;
      if (degree !== null && quiet > degree && (form.rightLowest === null || (isRational(last) && k > degree))) break;
      throw new Declined('undecided', 'The solution shows no further term up to a high power, and it could not be decided whether it ends; ask for fewer terms.');
    }
    for (let log = q.length - 1; log >= 0 && remainder === null; log -= 1) {
      const value = q[log] as Element;
      if (isRational(value) ? value.num === 0n : isZero(c, value)) continue;
      const term: RawTerm = { coefficient: log % 2 === 0 ? value : negateElement(c, value), power, log, factors: [], oscillation: null, order: false };
      const beyond = size.terms !== undefined ? terms.length >= size.terms : size.order !== undefined && notBelow(c, power, size.order);
      if (beyond) remainder = term;
      else terms.push(term);
    }
  }
  return { context: c, series: Q.ZERO, terms, remainder, toVariable: side.toVariable };
}

function notBelow(c: Context, power: Element, order: NonNullable<ExpansionProblem['order']>): boolean {
  const sign = c.field.compare(power, order);
  if (sign === 'undecided' || sign === 'complex') throw new Declined('needs-assumption', 'The exponents of this solution depend on parameters, so that its terms cannot be compared with a power; ask for a number of terms.');
  return sign >= 0;
}

/** Whether the shown terms are whole powers without logarithms, the same on both sides of the point. */
export const isAnalytic = (side: SideResult): boolean => [...side.terms, ...(side.remainder ? [side.remainder] : [])].every((t) => t.log === 0 && isRational(t.power) && t.power.den === 1n);

