/** Bounds of remainders: known closed forms, refusals, terms needed. */
import { describe, expect, test } from 'vitest';
import { build, type Expression, Q, type Rational } from '../../src/expression/index.ts';
import { boundRemainder, ladder, type Measure, type NeededProblem, reachFor, type RemainderBound, termsNeeded, valueAt } from '../../src/bound/index.ts';
import { expand, type Expansion } from '../../src/expand/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';
import { encloseReal, real } from '../../src/rigorous/index.ts';
import { describe as describeFunction } from '../../src/functions/index.ts';

const x = build.symbol('x');
function exact(text: string): Expression {
  const read = readExact(text);
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  return read.value;
}
function expansionOf(f: string, point: string, terms: number): Expansion {
  const found = expand({ function: exact(f), variable: x, point: point === 'inf' || point === '-inf' ? point : exact(point), side: 'both', terms, assumptions: [] }, budget(5000));
  if (!found.ok) throw new Error(found.error.message);
  return found.value;
}
const interval = (lower: string, upper: string): { lower: Expression; upper: Expression } => ({ lower: exact(lower), upper: exact(upper) });
function boundOf(f: string, point: string, terms: number, lower: string, upper: string, measure: Measure = 'absolute'): RemainderBound {
  const result = boundRemainder({ expansion: expansionOf(f, point, terms), interval: interval(lower, upper), measure, assumptions: [], budget: budget(10_000) });
  if (!result.ok) throw new Error(result.error.message);
  return result.value;
}
/** sup = the closed form given: enclosed, and tight to 1 part in 500. */
function expectSupremum(bound: RemainderBound, closedForm: string): void {
  const truth = encloseReal(exact(closedForm), new Map(), 200, describeFunction);
  const { upperRational, lowerRational } = bound;
  if (!truth || !upperRational || !lowerRational) throw new Error('no value');
  expect(real.compare(real.fromRational(upperRational, 200), truth)).not.toBe(-1);
  expect(real.compare(real.fromRational(lowerRational, 200), truth)).not.toBe(1);
  const ratio = real.divide(real.fromRational(upperRational, 200), truth, 60);
  expect(ratio && real.toDouble(ratio)).toBeLessThan(1.002);
}

// Suprema whose place is clear: the remainder is monotone on the interval, so its value at an end is the maximum.
const monotone: readonly (readonly [string, string, number, string, string, Measure, string])[] = [
  ['exp(x)', '0', 4, '-1/2', '1/2', 'absolute', 'exp(1/2)-1-1/2-1/8-1/48'],
  ['exp(x)', '0', 4, '-1/2', '1/2', 'relative', '(1-1/2+1/8-1/48-exp(-1/2))/exp(-1/2)*(-1)'],
  ['sin(x)', '0', 3, '-1/2', '1/2', 'absolute', '1/2-1/48+1/3840-sin(1/2)'],
  ['log(1+x)', '0', 5, '-1/2', '1/2', 'absolute', 'log(2)-1/2-1/8-1/24-1/64-1/160'],
  ['1/(1-x)', '0', 10, '-1/2', '1/2', 'absolute', '1/512'],
  ['sin(x)/x', '0', 3, '-1', '1', 'absolute', '1-1/6+1/120-sin(1)'],
  ['sqrt(x)*exp(x)', '0', 4, '0', '1', 'absolute', 'exp(1)-1-1-1/2-1/6'],
  ['cos(x)', '0', 3, '0', 'pi', 'absolute', '1-pi^2/2+pi^4/24+1'],
  ['atan(x)', '0', 5, '0', '1', 'absolute', '1-1/3+1/5-1/7+1/9-pi/4'],
  ['x*log(x)+exp(x)', '0', 4, '0', '1', 'absolute', 'exp(1)-1-1-1/2'],
  ['1/x', '1', 3, '1/2', '1', 'absolute', '2-1-1/2-1/4'],
  ['sqrt(1-x)', '0', 4, '0', '1', 'absolute', '1-1/2-1/8-1/16'],
  ['1/sin(x)', '0', 2, '-1/2', '1/2', 'absolute', '1/sin(1/2)-2-1/12'],
];
test.each(monotone)('%s at %s, %i terms on [%s, %s], %s', (f, point, terms, lower, upper, measure, closedForm) => {
  expectSupremum(boundOf(f, point, terms, lower, upper, measure), closedForm);
});

test('the example of the methods note: within a thousandth of the truth at 3, 8 and 20 terms', () => {
  // Interval Taylor and Cauchy overestimate here by 2.5 and 7.9 (3 terms), 1360 and 212 (8 terms), 1e6 and 107 (20 terms): measured, methods note of the project.
  for (const terms of [3, 8]) {
    const bound = boundOf('exp(sin(x))*log(1+cos(x))/sqrt(1+x^2)', '1/3', terms, '1/3-1/20', '1/3+1/20');
    const ratio = bound.upperRational && bound.lowerRational ? Q.toDouble(Q.divide(bound.upperRational, bound.lowerRational)) : NaN;
    expect(ratio).toBeLessThan(1.001);
    expect(bound.proof.length).toBeGreaterThan(0);
  }
});

describe('intervals that a sum cannot serve', () => {
  test.each([
    ['tan(x)', '0', 3, '0', '2', 'pi/2'],
    ['1/(1-x)', '0', 3, '0', '1', '1'],
    ['1/(x^2-2)', '0', 3, '0', '2', 'sqrt(2)'],
    ['log(1+x)', '0', 2, '-1', '1', '-1'],
  ])('%s at %s, %i terms on [%s, %s]: unbounded at %s', (f, point, terms, lower, upper, place) => {
    const bound = boundOf(f, point, terms, lower, upper);
    expect(bound.value).toBeNull();
    const [found, truth] = [bound.place && encloseReal(bound.place, new Map(), 100), encloseReal(exact(place), new Map(), 100)];
    expect(found && truth && real.overlaps(found, truth)).toBe(true);
  });
  test('a zero of f where the sum has none, in relative measure', () => {
    const bound = boundOf('sin(x)', '0', 2, '1', '4', 'relative');
    expect(bound.value).toBeNull();
    const place = bound.place && encloseReal(bound.place, new Map(), 100);
    expect(place && real.overlaps(place, real.pi(100))).toBe(true);
  });
  test('a parameter without a range is asked for', () => {
    const found = expand({ function: exact('exp(c*x)'), variable: x, point: build.number(0), side: 'both', terms: 3, assumptions: [] }, budget(2000));
    if (!found.ok) throw new Error(found.error.message);
    const result = boundRemainder({ expansion: found.value, interval: interval('0', '1'), measure: 'absolute', assumptions: [], budget: budget(2000) });
    expect(result.ok ? '' : result.error.code).toBe('needs-assumption');
  });
});

const needed = (f: string, point: string, lower: string, upper: string): NeededProblem => ({
  expansionWithTerms: (terms) => expand({ function: exact(f), variable: x, point: exact(point), side: 'both', terms, assumptions: [], radius: true }, budget(5000)),
  interval: interval(lower, upper),
  measure: 'absolute',
  assumptions: [],
  budget: budget(20_000),
});
const decimal = (text: string): Rational => Q.fromDecimal(text) ?? Q.ONE;

describe('terms needed', () => {
  // e^x on [-1/2, 1/2] within 0.001: a textbook exercise (common practice); x^5/5! alone is 2.6e-4 at 1/2, x^4/4! is 2.6e-3.
  // 1/(1-x) on [0, 1/2]: the error of n terms is exactly 2^(1-n). log 2 by n terms of its alternating series: error about 1/(2n), 50 terms for 0.01.
  test.each([
    ['exp(x)', '-1/2', '1/2', '0.001', 5],
    ['1/(1-x)', '0', '1/2', '0.001', 11],
    ['log(1+x)', '0', '1', '0.01', 50],
    ['sin(x)', '-pi/4', 'pi/4', '1e-6', 4],
  ] as const)('%s on [%s, %s] within %s: %i', (f, lower, upper, tolerance, terms) => {
    const result = termsNeeded(needed(f, '0', lower, upper), decimal(tolerance));
    expect(result.ok && result.value.terms).toBe(terms);
    expect(result.ok && result.value.minimal).toBe(true);
  });
  test('beyond the radius of convergence there is no number, and the reason says so', () => {
    const result = termsNeeded(needed('log(1+x)', '0', '0', '2'), decimal('0.01'));
    expect(result.ok && result.value.terms).toBeNull();
    expect(result.ok && result.value.reason).toMatch(/radius of convergence/);
  });
  test('more than a thousand terms are called slow, with an estimate', () => {
    const result = termsNeeded(needed('log(1+x)', '0', '0', '1'), decimal('1e-6'));
    expect(result.ok && result.value.reason).toBe('slow');
    expect(result.ok && result.value.estimate).toBeGreaterThan(100_000);
  });
});

test('ladder: bounds fall with every term inside the disc', () => {
  const rows = ladder(needed('exp(x)', '0', '-1', '1'), 8);
  if (!rows.ok) throw new Error(rows.error.message);
  const sizes = rows.value.map((row) => (row.bound.upperRational ? Q.toDouble(row.bound.upperRational) : NaN));
  expect(sizes.every((size, k) => k === 0 || size < (sizes[k - 1] ?? 0))).toBe(true);
});

test('reach: sin x by x - x^3/6 is good to 1 per cent up to about 1 (common practice: 57.7 degrees)', () => {
  const reach = reachFor({ expansion: expansionOf('sin(x)', '0', 2), measure: 'relative', assumptions: [], budget: budget(5000) }, decimal('0.01'));
  if (!reach.ok || !reach.value) throw new Error('no reach');
  expect(Number(reach.value.distance)).toBeGreaterThan(1.0077);
  expect(Number(reach.value.distance)).toBeLessThan(1.0079);
});

test('value at an argument', () => {
  const value = valueAt(expansionOf('sin(x)', '0', 2), exact('0.3'), [], budget(1000));
  if (!value.ok) throw new Error(value.error.message);
  // sin 0.3 = 0.295520206661339575... (Abramowitz & Stegun, table 4.6; from memory, checked with MPFR).
  expect(value.value.value.low.startsWith('0.29552020666')).toBe(true);
  expect(Number(value.value.percentage?.high)).toBeCloseTo(0.00683765809718, 10);
});
