/** Taylor coefficients from a linear differential equation, in O(degree * order) operations a coefficient. Source: Stanley, Europ. J. Combin. 1 (1980) (from memory). */
import type { Element } from '../algebra/types.ts';
import { type Expression, Q } from '../expression/index.ts';
import type { FunctionDescription } from '../functions/index.ts';
import { addElements, type Context, isRational, isZero, multiplyElements } from '../series/index.ts';

/**
 * f^(k)(center)/k! of the function in its argument `index`, or null where there is no equation or the center is a singular point of it.
 * With sum over j of p_j(z) f^(j)(z) = 0 and p_j(center + u) = sum over i of p_ji u^i, the coefficient of u^n gives
 * sum over i, j of p_ji (n - i + j)!/(n - i)! a_(n-i+j) = 0, which is solved for the highest one.
 */
export function taylorFromEquation(c: Context, d: FunctionDescription, args: readonly Expression[], index: number, center: Element): ((k: number) => Element) | null {
  const equation = d.equation?.(args, index);
  const point = args[index];
  if (!equation || !point) return null;
  const shifted = equation.polynomials.map((p) => recentre(c, p.map((e) => c.field.fromExpression(e)), center));
  const order = shifted.length - 1;
  const top = shifted[order]?.[0];
  if (top === undefined || isZero(c, top)) return null;
  const a: Element[] = [];
  let factorial = 1n;
  for (let k = 0; k < order; k += 1) {
    const initial = equation.initial[k];
    if (!initial) return null;
    if (k > 1) factorial *= BigInt(k);
    a.push(multiplyElements(c, c.field.fromExpression(initial(point)), Q.rational(1, factorial)));
  }
  return (k) => {
    while (a.length <= k) a.push(next(c, shifted, order, top, a));
    return a[k] as Element;
  };
}

function next(c: Context, p: readonly (readonly Element[])[], order: number, top: Element, a: readonly Element[]): Element {
  c.budget.check();
  const n = a.length - order;
  let total: Element = Q.ZERO;
  p.forEach((polynomial, j) => {
    polynomial.forEach((coefficient, i) => {
      const m = n - i;
      if (m < 0 || (j === order && i === 0)) return;
      const value = a[m + j];
      if (value !== undefined) total = addElements(c, total, multiplyElements(c, multiplyElements(c, coefficient, value), Q.rational(falling(m + j, j))));
    });
  });
  const factor = multiplyElements(c, top, Q.rational(falling(n + order, order)));
  const quotient = isRational(total) && isRational(factor) ? Q.divide(total, factor) : c.field.divide(total, factor);
  return c.field.negate(quotient);
}

/** n (n-1) ... (n-j+1). */
function falling(n: number, j: number): bigint {
  let result = 1n;
  for (let k = 0; k < j; k += 1) result *= BigInt(n - k);
  return result;
}

/** The coefficients of p(center + u), by repeated synthetic division. */
export function recentre(c: Context, p: readonly Element[], center: Element): Element[] {
  const result = [...p];
  if (isRational(center) && center.num === 0n) return result;
  for (let k = 0; k < result.length; k += 1) {
    for (let i = result.length - 2; i >= k; i -= 1) result[i] = addElements(c, result[i] as Element, multiplyElements(c, center, result[i + 1] as Element));
  }
  return result;
}
