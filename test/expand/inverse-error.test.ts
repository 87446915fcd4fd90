/** The inverse error functions away from 0: inverf' = (sqrt(pi)/2) e^(inverf^2) (DLMF 7.17.3), and the value of the series at nearby points against erf itself by balls. */
import { describe, expect, it } from 'vitest';
import { partialSum } from '../../src/expand/index.ts';
import { Q, substitute } from '../../src/expression/index.ts';
import { describe as describeFunction } from '../../src/functions/index.ts';
import { build } from '../../src/expression/index.ts';
import { encloseReal, real } from '../../src/rigorous/index.ts';
import { expansionOf } from './tools.ts';

/** erf of the partial sum at 1/2 + h, less the argument. */
function miss(text: string, h: string, undo: string): number {
  const found = expansionOf(text, { at: '1/2', terms: 6 });
  const argument = build.number(Q.add(Q.rational(1, 2), Q.fromDouble(Number(h))));
  const value = encloseReal(build.difference(build.call(undo, substitute(partialSum(found), 'x', argument)), argument), new Map(), 200, describeFunction);
  if (!value) throw new Error('no enclosure');
  return Math.abs(real.toDouble(value));
}

describe('inverse error functions at 1/2', () => {
  it.each([
    ['\\operatorname{erfinv}(x)', 'erf'],
    ['\\operatorname{erfcinv}(x)', 'erfc'],
  ])('%s: six terms miss by O(h^6)', (text, undo) => {
    const [wide, narrow] = [miss(text, '0.0625', undo), miss(text, '0.03125', undo)];
    expect(wide / narrow).toBeGreaterThan(50);
    expect(wide / narrow).toBeLessThan(80);
  });
});
