/**
 * Published expansions, judged numerically. `data/expansions.json` holds, for each row, its source, the values of the function at shrinking
 * distances (computed once with mpmath 1.3.0, 60 digits or more) and the error of the published partial sum there.
 * A row is right when the answer's partial sum is no worse than the published one (within a factor of 30 at the smallest distance) and its error
 * does not grow against the answer's own O as the distance shrinks. Declined is no failure of a row, a wrong answer always is.
 */
import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import { createEngine } from '../../src/engine.ts';
import type { ExpandAnswer } from '../../src/protocol.ts';
import { complex, type ComplexBall, real } from '../../src/rigorous/index.ts';
import { ballOf, evaluateNumericText, type Value } from './numericText.ts';

interface Row {
  readonly id: string;
  readonly tier: 'basic' | 'advanced' | 'hard';
  readonly source: string;
  readonly fromMemory: boolean;
  readonly kind: string;
  readonly request: Readonly<Record<string, unknown>> & { readonly variable: string };
  readonly terms: number;
  readonly order: string;
  readonly parameters: Readonly<Record<string, string>>;
  readonly points: readonly { readonly x: Value; readonly f: Value; readonly publishedError: string }[];
  readonly digits: number;
}
const rows = JSON.parse(readFileSync(new URL('data/expansions.json', import.meta.url), 'utf8')) as readonly Row[];
const engine = createEngine({ loadFile: () => Promise.reject(new Error('no files')) });

/** Rows whose LaTeX holds a remark instead of a formula that can be asked. */
const ANNOTATED = new Set(rows.filter((r) => r.kind === 'annotated').map((r) => r.id));
/** Declined so far: an integral whose limits and large argument need the constant of a complete integral. */
const DECLINED = new Set(['debye-D3-inf']);
/** An exact answer's value must agree to this part of the digits of the reference. */
const SPARE_DIGITS = 5;

type Verdict = 'right' | 'declined' | `wrong: ${string}`;

const size = (z: ComplexBall, bits: number): number => real.toDouble(complex.absolute(z, bits));
const logSize = (z: ComplexBall, bits: number): number => {
  const a = complex.absolute(z, bits);
  return a.mid === 0n ? -Infinity : real.exponentOf(a) * Math.LN2 + Math.log(Math.abs(real.toDouble({ ...a, exp: a.exp - real.exponentOf(a) })));
};

function judge(row: Row, answer: ExpandAnswer): Verdict {
  const bits = Math.ceil(row.digits * 3.33) + 64;
  const errors: number[] = [];
  const quotients: number[] = [];
  for (const point of row.points) {
    const symbols = new Map<string, ComplexBall>();
    for (const [name, latex] of Object.entries(answer.numeric.symbols)) {
      const value = latex === row.request.variable ? point.x : row.parameters[latex];
      if (value === undefined) return `wrong: the symbol ${latex} is not in the row`;
      symbols.set(name, ballOf(value, bits));
    }
    const sum = evaluateNumericText(answer.numeric.sum, symbols, bits);
    const error = complex.subtract(ballOf(point.f, bits), sum, bits);
    errors.push(logSize(error, bits));
    if (!answer.exact) quotients.push(errors[errors.length - 1] as number - logSize(evaluateNumericText(answer.numeric.scale, symbols, bits), bits));
    if (answer.exact && size(error, bits) > 10 ** -(row.digits - SPARE_DIGITS) * Math.max(1, size(ballOf(point.f, bits), bits))) return `wrong: exact, but off by ${size(error, bits)}`;
  }
  if (answer.exact) return 'right';
  const last = row.points[row.points.length - 1];
  const published = decimalLog(last?.publishedError ?? '0');
  const mine = errors[errors.length - 1] as number;
  const growth = (quotients[quotients.length - 1] as number) - (quotients[0] as number);
  if (growth > Math.log(30)) return `wrong: error grows against its own order by ${Math.exp(growth)}`;
  return mine - published <= Math.log(30) ? 'right' : `wrong: error e^${mine.toFixed(1)}, published e^${published.toFixed(1)}`;
}

/** A published root is one branch of its equation: the row is right when it is among the branches answered. */
function judgeBranches(row: Row, answer: ExpandAnswer): Verdict {
  const first = judge(row, answer);
  if (row.kind !== 'implicit' || first === 'right') return first;
  return (answer.branches ?? []).some((branch) => judge(row, branch) === 'right') ? 'right' : first;
}

/** Natural logarithm of a decimal too small for a double. */
function decimalLog(text: string): number {
  const [mantissa = '0', exponent = '0'] = text.split('e');
  return Math.log(Number(mantissa)) + Number(exponent) * Math.LN10;
}

describe('published expansions', () => {
  const verdicts = new Map<string, Verdict>();
  beforeAll(async () => {
    for (const row of rows) {
      if (ANNOTATED.has(row.id)) continue;
      const answer = await engine.ask({ ...row.request, terms: row.terms, budget_ms: 5000 });
      verdicts.set(row.id, answer.ok ? judgeBranches(row, answer as ExpandAnswer) : 'declined');
    }
  });

  it('gets none wrong', () => {
    expect([...verdicts].filter(([, v]) => v.startsWith('wrong'))).toEqual([]);
  });
  it.each(['basic', 'advanced'] as const)('answers every %s row', (tier) => {
    expect(rows.filter((r) => r.tier === tier && !ANNOTATED.has(r.id) && !DECLINED.has(r.id) && verdicts.get(r.id) !== 'right').map((r) => r.id)).toEqual([]);
  });
  it('answers at least nine tenths of the hard rows', () => {
    const hard = rows.filter((r) => r.tier === 'hard' && !ANNOTATED.has(r.id));
    expect(hard.filter((r) => verdicts.get(r.id) === 'right').length / hard.length).toBeGreaterThanOrEqual(0.9);
  });
});
