/** Operators with constant coefficients on polynomials: what Euler's and constant-coefficient differential equations come down to. */
import type { Element } from '../../algebra/types.ts';
import { Q } from '../../expression/index.ts';
import { addElements, type Context, isRational, isZero, multiplyElements, negateElement } from '../../series/index.ts';

/** Coefficients, lowest power first. */
export type Polynomial = readonly Element[];

const vanishes = (c: Context, a: Element): boolean => (isRational(a) ? a.num === 0n : isZero(c, a));

export function divideElements(c: Context, a: Element, b: Element): Element {
  return isRational(a) && isRational(b) ? Q.divide(a, b) : c.field.divide(a, b);
}

export function addPolynomials(c: Context, a: Polynomial, b: Polynomial): Polynomial {
  return Array.from({ length: Math.max(a.length, b.length) }, (_, k) => addElements(c, a[k] ?? Q.ZERO, b[k] ?? Q.ZERO));
}
export const scalePolynomial = (c: Context, a: Polynomial, by: Element): Polynomial => a.map((x) => multiplyElements(c, x, by));
export const derivativeOf = (c: Context, a: Polynomial): Polynomial => a.slice(1).map((x, k) => multiplyElements(c, x, Q.rational(k + 1)));
const integralOf = (c: Context, a: Polynomial): Polynomial => [Q.ZERO, ...a.map((x, k) => multiplyElements(c, x, Q.rational(1, k + 1)))];
export function trimmed(c: Context, a: Polynomial): Polynomial {
  let length = a.length;
  while (length > 0 && vanishes(c, a[length - 1] as Element)) length -= 1;
  return a.slice(0, length);
}

/** sum over l of operator_l D^l applied to a polynomial. */
export function applyOperator(c: Context, operator: Polynomial, a: Polynomial): Polynomial {
  let total: Polynomial = [];
  let derivative = a;
  for (const coefficient of operator) {
    if (derivative.length === 0) break;
    total = addPolynomials(c, total, scalePolynomial(c, derivative, coefficient));
    derivative = derivativeOf(c, derivative);
  }
  return total;
}

/** The polynomial Q with operator Q = R whose constants of integration are 0. `operator_l` stands before D^l and not all are zero. */
export function invertOperator(c: Context, operator: Polynomial, right: Polynomial): Polynomial {
  const first = operator.findIndex((a) => !vanishes(c, a));
  const lead = operator[first];
  if (lead === undefined) throw new Error('an operator that is zero');
  let rest = trimmed(c, right);
  let solution: Polynomial = [];
  // Highest power first: lead * q = r there, and the tail of the operator lowers the degree.
  while (rest.length > 0) {
    const top = rest.length - 1;
    const monomial: Polynomial = [...Array.from({ length: top }, () => Q.ZERO), divideElements(c, rest[top] as Element, lead)];
    solution = addPolynomials(c, solution, monomial);
    rest = addPolynomials(c, rest, scalePolynomial(c, applyOperator(c, operator.slice(first), monomial), negateElement(c, Q.ONE))).slice(0, top);
    rest = trimmed(c, rest);
  }
  for (let k = 0; k < first; k += 1) solution = integralOf(c, solution);
  return solution;
}
