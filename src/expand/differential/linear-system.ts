/** Systems of linear equations over the field of coefficients. */
import type { Element } from '../../algebra/types.ts';
import { type Context, isZero } from '../../series/index.ts';

/** The x with matrix * x = right, by elimination with exact zero tests; the matrix is square and regular. O(n^3) operations of the field. */
export function solveSystem(c: Context, matrix: readonly (readonly Element[])[], right: readonly Element[]): Element[] {
  const n = right.length;
  const rows = matrix.map((row, i) => [...row, right[i] as Element]);
  for (let k = 0; k < n; k += 1) {
    const pivot = rows.findIndex((row, i) => i >= k && !isZero(c, row[k] as Element));
    const row = rows[pivot];
    if (!row) throw new Error('independent solutions with a singular matrix');
    [rows[k], rows[pivot]] = [row, rows[k] as Element[]];
    for (let i = 0; i < n; i += 1) {
      const other = rows[i] as Element[];
      if (i === k || isZero(c, other[k] as Element)) continue;
      const factor = c.field.divide(other[k] as Element, row[k] as Element);
      rows[i] = other.map((x, j) => c.field.subtract(x, c.field.multiply(factor, row[j] as Element)));
    }
  }
  return rows.map((row, k) => c.field.divide(row[n] as Element, row[k] as Element));
}
