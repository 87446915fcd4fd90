/** Bounds over ranges of parameters, true maxima by hand: where the remainder is monotone in the parameter they stand at an end of its range. */
import { describe, expect, test } from 'vitest';
import { type Assumption, build, Q } from '../../src/expression/index.ts';
import { boundRemainder, type Measure } from '../../src/bound/index.ts';
import { expand } from '../../src/expand/index.ts';
import { budget } from '../../src/outcome.ts';
import { readAssumption, readExact } from '../../src/read/index.ts';
import { processorTime } from '../setup.ts';

const exact = (text: string) => {
  const read = readExact(text);
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  return read.value;
};
function boundOf(f: string, terms: number, range: string, measure: Measure, upper = '1') {
  const read = readAssumption(range);
  if (!read.ok) throw new Error(read.error.message);
  const assumptions = read.value.flatMap((a): readonly Assumption[] => (a.kind === 'relation' ? [a] : []));
  const expansion = expand({ function: exact(f), variable: build.symbol('x'), point: exact('0'), side: 'both', terms, assumptions }, budget(20_000));
  if (!expansion.ok) throw new Error(expansion.error.message);
  const found = boundRemainder({ expansion: expansion.value, interval: { lower: exact('0'), upper: exact(upper) }, measure, assumptions, budget: budget(20_000) });
  if (!found.ok) throw new Error(found.error.message);
  return found.value;
}

describe('ranges of parameters', () => {
  test.each([
    { f: 'exp(-c*x)', terms: 4, range: '0.9 <= c <= 1.1', measure: 'relative', truth: 1 - (1 - 1.1 + 1.21 / 2 - 1.331 / 6) * Math.exp(1.1), shown: true },
    { f: 'exp(-c*x)', terms: 4, range: '0.9 <= c <= 1.1', measure: 'absolute', truth: Math.exp(-1.1) - (1 - 1.1 + 1.21 / 2 - 1.331 / 6), shown: true },
    { f: 'sqrt(1+c*x)', terms: 2, range: '1/2 <= c <= 1', measure: 'absolute', truth: 1.5 - Math.SQRT2, shown: true },
    // The remainder is zero at c = 1, inside the range.
    { f: 'exp(-(c-1)^2*x)', terms: 2, range: '1/2 <= c <= 2', measure: 'absolute', truth: Math.exp(-1), shown: false },
  ] as const)('$f with $terms terms, $range, $measure', ({ f, terms, range, measure, truth, shown }) => {
    const bound = boundOf(f, terms, range, measure);
    const [above, below] = [Q.toDouble(bound.upperRational ?? Q.ZERO), Q.toDouble(bound.lowerRational ?? Q.ZERO)];
    expect(above).toBeGreaterThanOrEqual(truth * (1 - 1e-12));
    expect(above).toBeLessThan(truth * (shown ? 1.0005 : 1.002));
    expect(below).toBeLessThanOrEqual(truth * (1 + 1e-9));
    expect(bound.proof.some((step) => step.includes('keeps its sign'))).toBe(shown);
  });

  test('a range costs a few bounds, not hundreds: five times what was measured', () => {
    boundOf('exp(-c*x)', 4, '0.9 <= c <= 1.1', 'relative');
    const start = processorTime();
    boundOf('exp(-c*x)', 4, '0.8 <= c <= 1.2', 'relative');
    expect(processorTime() - start).toBeLessThan(1500);
  });
});
