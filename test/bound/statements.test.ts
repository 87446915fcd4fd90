/** What is said where no number of terms was found: no more than is proved. Facts about the series themselves: DLMF 4.6.1, 4.24.3, 25.12.10; the rest is elementary. */
import { describe, expect, test } from 'vitest';
import { build, type Expression, Q } from '../../src/expression/index.ts';
import { type Measure, termsNeeded, type TermsNeeded } from '../../src/bound/index.ts';
import { expand } from '../../src/expand/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';

const MILLISECONDS = 60_000;
function exact(text: string): Expression {
  const read = readExact(text);
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  return read.value;
}
function needed(f: string, point: string, lower: string, upper: string, tolerance: string, measure: Measure = 'absolute', milliseconds = 20_000): TermsNeeded {
  const limit = Q.fromDecimal(tolerance);
  if (!limit) throw new Error(tolerance);
  const found = termsNeeded(
    {
      expansionWithTerms: (terms) => expand({ function: exact(f), variable: build.symbol('x'), point: point === 'inf' ? point : exact(point), side: 'both', terms, radius: true, assumptions: [] }, budget(MILLISECONDS)),
      interval: { lower: exact(lower), upper: exact(upper) },
      measure,
      assumptions: [],
      budget: budget(milliseconds),
    },
    limit,
  );
  if (!found.ok) throw new Error(found.error.message);
  return found.value;
}

describe('the reach of a tolerance', () => {
  test('the end is closed where a number of terms is proven to serve there', () => {
    // pi/4 is the sum of 1 - 1/3 + 1/5 - ...
    const { terms, reach, reason } = needed('atan(x)', '0', '0', '2', '0.02');
    expect(terms).toBeNull();
    expect(reach).toEqual({ distance: '1', closed: true });
    expect(reason).toMatch(/up to \d+ is refuted by a proven lower bound/);
    expect(reason).toMatch(/unbounded; that each longer sum fails is not proved/);
  });
  test('it is open where the function is unbounded at it', () => {
    expect(needed('1/(1+x)', '0', '-1/2', '3', '0.01').reach).toEqual({ distance: '1', closed: false });
  });
  test('it is left open where neither is proved: the sums of 1 - x + x^2 - ... at 1 are 1 and 0 in turn', () => {
    expect(needed('1/(1+x)', '0', '0', '3', '0.01').reach).toEqual({ distance: '1' });
  });
  test('a relative error is not said to be kept up to the radius across another zero of the function', () => {
    // cos(pi x) of the numerator has a zero at 1/2, the pole is at distance 1.
    const { reach } = needed('cos(pi*x)/(1+x^2)', '0', '0', '2', '0.01', 'relative');
    expect(Number(reach?.distance ?? 0)).toBeLessThan(0.5);
  });
});

describe('unbounded remainders', () => {
  test('a singularity in the interval', () => {
    const { terms, reason, best, reach } = needed('tan(x)', '0', '0', '2', '0.1');
    expect({ terms, reason, best, closed: reach?.closed }).toEqual({ terms: null, reason: 'The function has a singularity in the interval that no sum removes.', best: undefined, closed: false });
  });
  test('a sum that falls behind at infinity may be followed by one that does not', () => {
    expect(needed('x+1/(1+x^4)', '0', '0', 'inf', '1.5').terms).toBe(2);
  });
  test('polynomials of growing degree are refuted as far as they were tried', () => {
    expect(needed('exp(-x)', '0', '0', 'inf', '0.5').reason).toMatch(/for every number of terms up to \d+\. For more terms nothing is proved\./);
  });
});

test('divergent series: the numbers tried, and the best among them', () => {
  const { terms, reason, best } = needed('exp(x)*expIntegralE(1,x)', 'inf', '4', 'inf', '1e-6', 'absolute', 4000);
  expect(terms).toBeNull();
  expect(reason).toMatch(/up to \d+ is refuted/);
  expect(Number(best?.bound)).toBeLessThan(0.012);
});

test('many coefficients from values on a circle: more of them than points would be wrong', () => {
  const found = needed('polylog(2,x)', '1/4', '0', '1/2', '1e-9');
  expect(found.terms).toBeGreaterThan(9);
  expect(found.minimal).toBe(true);
});
