/**
 * Random expressions against the languages themselves: semantics/values.json holds what gcc (C17), g++ (C++20), rustc, javac and java, CPython 3 and Node
 * made of them (semantics/record.mjs makes it again). Precedence, integer division, signs, powers, conversions and choices all take part.
 */
import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import { evaluate } from './evaluate.ts';
import { CodeReader } from '../../../src/read/code/index.ts';
import { reader } from './reader.ts';

const recorded = JSON.parse(readFileSync(new URL('semantics/values.json', import.meta.url), 'utf8')) as Record<string, readonly { readonly text: string; readonly values: readonly (number | null)[] }[]>;
const POINTS = [
  { x: 0.375, y: 1.75 },
  { x: -1.25, y: 0.5 },
];

const byPrecedence = new CodeReader(null);

describe.each(Object.keys(recorded))('%s computes what the tree says', (language) => {
  beforeAll(() => reader.prepare(language));
  it.each([
    ['by its grammar', reader],
    ['by operator precedence', byPrecedence],
  ])('%s, on every recorded expression', (_, own) => {
    let compared = 0;
    const wrong: string[] = [];
    const refused: string[] = [];
    for (const { text, values } of recorded[language] ?? []) {
      const read = own.readCode(text, language);
      if (!read.ok) {
        refused.push(`${text}: ${read.error.message}`);
        continue;
      }
      POINTS.forEach((point, k) => {
        const value = values[k];
        if (value === null || value === undefined) return;
        const found = evaluate(read.value.expression, point);
        compared += 1;
        if (!(Math.abs(found - value) <= 1e-9 * Math.max(1, Math.abs(value)))) wrong.push(`${text} at ${JSON.stringify(point)}: ${value}, read as ${found}`);
      });
    }
    expect(wrong).toEqual([]);
    expect(refused).toEqual([]);
    expect(compared).toBeGreaterThan(250);
  });
});
