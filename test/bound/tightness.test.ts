/**
 * How near bounds come to the truth, over a table of all kinds of questions: data/tightness.json names the source of each expansion (sections of DLMF) or says that there is none.
 * The true maximum is found by dense sampling in 192-bit balls (largest.ts), whose functions are themselves judged by MPFR in test/rigorous and test/functions.
 */
import { readFileSync } from 'node:fs';
import { afterAll, describe, expect, test } from 'vitest';
import { type Assumption, build, type Expression, Q } from '../../src/expression/index.ts';
import { boundRemainder, type Measure, termsNeeded } from '../../src/bound/index.ts';
import { expand, type Expansion } from '../../src/expand/index.ts';
import { budget, type Outcome } from '../../src/outcome.ts';
import { readAssumption, readExact } from '../../src/read/index.ts';
import { type Ball, encloseReal, real } from '../../src/rigorous/index.ts';
import { largestRemainder } from './largest.ts';

interface Row {
  readonly f: string;
  readonly point: string;
  readonly terms: number;
  readonly interval: readonly [string, string];
  readonly measure?: Measure;
  readonly tolerance?: string;
  readonly assume?: readonly string[];
}
interface Group {
  readonly name: string;
  /** Finite or reciprocal intervals inside the disc of convergence, enveloping series, or beyond the disc. */
  readonly limit: 'disc' | 'enveloping' | 'other';
  readonly source: string;
  readonly rows: readonly Row[];
}
const groups = JSON.parse(readFileSync(new URL('data/tightness.json', import.meta.url), 'utf8')) as readonly Group[];
const WORST = { disc: 1.1, enveloping: 1.5, other: 1.1 };
const MILLISECONDS = 30_000;
const x = build.symbol('x');

function exact(text: string): Expression {
  const read = readExact(text);
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  return read.value;
}
function valueOf<T>(outcome: Outcome<T>): T {
  if (!outcome.ok) throw new Error(outcome.error.message);
  return outcome.value;
}
const ratio = (a: Ball, b: Ball): number => {
  const quotient = real.divide(a, b, 80);
  return quotient === null ? Infinity : real.toDouble(quotient);
};
const cpu = (): number => {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
};

/** Values of a parameter at which the supremum is looked for: the ends of its range, or 1 for a free scale. */
function choices(assumptions: readonly Assumption[]): readonly ReadonlyMap<string, Ball>[] {
  if (assumptions.length === 0) return [new Map()];
  const ends = assumptions.flatMap((a) => (a.kind === 'relation' ? [a.left, a.right] : [])).flatMap((side) => {
    const value = encloseReal(side, new Map(), 320);
    return value && real.isPositive(value) ? [value] : [];
  });
  return (ends.length > 0 ? ends : [real.ONE]).map((end) => new Map([['c', end]]));
}

const ratios: Record<Group['limit'], number[]> = { disc: [], enveloping: [], other: [] };
const times: number[] = [];

describe.each(groups)('$name ($source)', ({ rows, limit }) => {
  test.each(rows)('$f at $point, $terms terms on $interval $measure', ({ f, point, terms, interval: ends, measure = 'absolute', tolerance, assume = [] }) => {
    const assumptions = assume.flatMap((text) => valueOf(readAssumption(text)).flatMap((a): readonly Assumption[] => (a.kind === 'relation' ? [a] : [])));
    const withTerms = (n: number): Outcome<Expansion> => expand({ function: exact(f), variable: x, point: point === 'inf' || point === '-inf' ? point : exact(point), side: 'both', terms: n, radius: true, assumptions }, budget(MILLISECONDS));
    const interval = { lower: exact(ends[0]), upper: exact(ends[1]) };
    const expansion = valueOf(withTerms(terms));
    const start = cpu();
    const bound = valueOf(boundRemainder({ expansion, interval, measure, assumptions, budget: budget(MILLISECONDS) }));
    times.push(cpu() - start);
    const { upperRational: upper, lowerRational: lower } = bound;
    if (upper === null || lower === null) throw new Error('unbounded');
    expect(bound.proof.length).toBeGreaterThan(0);
    const parameters = choices(assumptions);
    const largest = (e: Expansion): Ball => parameters.map((values) => largestRemainder(e, 'x', interval, measure, values) ?? real.ZERO).reduce((a, b) => real.maximum(a, b));
    const truth = largest(expansion);
    const above = ratio(real.fromRational(upper, 300), truth);
    // A bound, and a lower bound of the supremum; the search may miss the maximum by a little.
    expect(above).toBeGreaterThanOrEqual(1 - 1e-12);
    expect(ratio(real.fromRational(lower, 300), truth)).toBeLessThan(1 + 1e-4);
    expect(above).toBeLessThan(WORST[limit]);
    ratios[limit].push(above);

    if (tolerance === undefined) return;
    const wanted = Q.fromDecimal(tolerance);
    if (!wanted) throw new Error(`the tolerance ${tolerance}`);
    const needed = valueOf(termsNeeded({ expansionWithTerms: withTerms, interval, measure, assumptions, budget: budget(MILLISECONDS) }, wanted));
    if (needed.terms === null) {
      expect(expansion.divergent).toBe(true);
      return;
    }
    expect(needed.minimal).toBe(true);
    const allowed = real.fromRational(wanted, 300);
    expect(real.compare(largest(valueOf(withTerms(needed.terms))), allowed)).not.toBe(1);
    if (needed.terms > 1) expect(real.compare(largest(valueOf(withTerms(needed.terms - 1))), allowed)).toBe(1);
  });
});

const quantile = (list: readonly number[], q: number): number => [...list].sort((a, b) => a - b)[Math.min(list.length - 1, Math.floor(q * list.length))] ?? NaN;
describe('over the whole table', () => {
  test('at least 200 cases', () => {
    expect(ratios.disc.length + ratios.enveloping.length + ratios.other.length).toBeGreaterThanOrEqual(200);
  });
  test('inside the disc of convergence: the median within a thousandth, 99 % within 2 %, the worst within 10 %', () => {
    expect(quantile(ratios.disc, 0.5)).toBeLessThanOrEqual(1.001);
    expect(quantile(ratios.disc, 0.99)).toBeLessThanOrEqual(1.02);
    expect(quantile(ratios.disc, 1)).toBeLessThanOrEqual(WORST.disc);
  });
  test('enveloping series by themselves: at most one and a half times the truth', () => {
    expect(ratios.enveloping.length).toBeGreaterThanOrEqual(30);
    expect(quantile(ratios.enveloping, 1)).toBeLessThanOrEqual(WORST.enveloping);
  });
  test('the processor time of a bound: five times what is aimed at, first questions included', () => {
    expect(quantile(times, 0.5)).toBeLessThan(25);
  });
});
afterAll(() => {
  const line = (list: readonly number[]): string => `median ${quantile(list, 0.5).toFixed(7)}, 99 % ${quantile(list, 0.99).toFixed(6)}, worst ${quantile(list, 1).toFixed(6)} of ${list.length}`;
  process.stdout.write(`bound over true maximum: disc ${line(ratios.disc)}; enveloping ${line(ratios.enveloping)}; beyond ${line(ratios.other)}; processor time median ${quantile(times, 0.5).toFixed(1)} ms, worst ${quantile(times, 1).toFixed(0)} ms\n`);
});
