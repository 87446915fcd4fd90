/**
 * Meaning of published formulas: each is read and evaluated in double precision at one point, and compared with the value that mpmath 1.3.0 (30 digits)
 * gives for the same function. Formulas and their sources: data/meanings.json. Formulas with special functions are compared by reading only.
 */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { walk } from '../../src/expression/index.ts';
import { describe as description } from '../../src/functions/index.ts';
import { readFormula } from '../../src/read/index.ts';
import { valueOf } from './evaluate.ts';

interface Row {
  readonly latex: string;
  readonly variable: string;
  readonly at: Readonly<Record<string, number>>;
  readonly value: number;
  readonly source: string;
}
const rows = JSON.parse(readFileSync(new URL('data/meanings.json', import.meta.url), 'utf8')) as readonly Row[];

describe('published formulas', () => {
  it('are all read, with functions that have a description', () => {
    expect(rows.length).toBeGreaterThan(180);
    for (const row of rows) {
      const read = readFormula(row.latex, 'latex', { symbols: [row.variable] });
      expect(read.ok ? '' : `${row.latex}: ${read.error.message}`).toBe('');
      if (!read.ok) continue;
      for (const e of walk(read.value.expression)) if (e.kind === 'call' && e.function !== 're' && e.function !== 'im') expect(description(e.function), e.function).not.toBeNull();
    }
  });

  it('have the right value', () => {
    let compared = 0;
    for (const row of rows) {
      const read = readFormula(row.latex, 'latex', { symbols: [row.variable] });
      if (!read.ok) continue;
      const { expression } = read.value;
      const side = expression.kind === 'relation' ? expression.sides[expression.sides.length - 1] : expression;
      const value = side ? valueOf(side, row.at) : NaN;
      if (!Number.isFinite(value)) continue;
      compared += 1;
      expect(Math.abs(value - row.value), row.latex).toBeLessThanOrEqual(1e-6 * Math.abs(row.value) + 1e-12);
    }
    expect(compared).toBeGreaterThan(120);
  });
});
