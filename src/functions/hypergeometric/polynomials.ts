/** Classical orthogonal polynomials of explicit degree by their three-term recurrences (DLMF 18.9.1). */
import { type Expression, Q, type Rational } from '../../expression/index.ts';
import { argument, plus, pow, times } from '../compose.ts';
import { asInteger } from '../exactForms.ts';

type Polynomial = readonly Rational[];

/** p_(n+1) = (A_n x + B_n) p_n - C_n p_(n-1). */
function byRecurrence(first: Polynomial, step: (n: number) => readonly [Rational, Rational, Rational]): (args: readonly Expression[]) => Expression | null {
  return (args) => {
    const n = asInteger(argument(args, 0), 120);
    if (n === null || n < 0) return null;
    let [before, now]: [Polynomial, Polynomial] = [[Q.ONE], first];
    if (n === 0) now = before;
    for (let m = 1; m < n; m++) {
      const [a, b, c] = step(m);
      const at = (p: Polynomial, i: number): Rational => p[i] ?? Q.ZERO;
      const next = Array.from({ length: now.length + 1 }, (_, i) => Q.subtract(Q.add(Q.multiply(a, at(now, i - 1)), Q.multiply(b, at(now, i))), Q.multiply(c, at(before, i))));
      [before, now] = [now, next];
    }
    const x = argument(args, 1);
    return plus(...now.flatMap((c, i) => (Q.isZero(c) ? [] : [times(c, pow(x, i))])));
  };
}
const r = Q.rational;
export const legendreValue = byRecurrence([Q.ZERO, Q.ONE], (n) => [r(2 * n + 1, n + 1), Q.ZERO, r(n, n + 1)]);
export const chebyshevTValue = byRecurrence([Q.ZERO, Q.ONE], () => [r(2), Q.ZERO, Q.ONE]);
export const chebyshevUValue = byRecurrence([Q.ZERO, r(2)], () => [r(2), Q.ZERO, Q.ONE]);
export const hermiteValue = byRecurrence([Q.ZERO, r(2)], (n) => [r(2), Q.ZERO, r(2 * n)]);
export const laguerreValue = byRecurrence([Q.ONE, Q.MINUS_ONE], (n) => [r(-1, n + 1), r(2 * n + 1, n + 1), r(n, n + 1)]);
