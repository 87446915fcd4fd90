/**
 * One coefficient, sign, exponent, factorial or order of true claims is changed in turn. A small part runs always; `MUTATIONS=all` runs every row in every notation.
 */
import { describe, expect, it } from 'vitest';
import { check } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';
import { type Mutant, mutantsOf, NOTATIONS, publishedRows, trueClaim } from './mutants.ts';

const ALL = process.env['MUTATIONS'] === 'all';
const rows = publishedRows(new URL('./data/expansions.jsonl', import.meta.url).pathname);
const chosen = ALL ? rows : rows.filter((_, i) => i % 9 === 0);

describe(`mutated claims (${chosen.length} published expansions, ${NOTATIONS.length} notations)`, () => {
  const pairs = chosen.flatMap((row) => NOTATIONS.map((notation) => ({ row, notation, text: trueClaim(row, notation) }))).filter((p) => p.text !== null);
  const judged: { readonly mutant: Mutant; readonly failed: boolean; readonly placed: boolean }[] = [];
  it('unchanged claims raise nothing', { timeout: 600_000 }, () => {
    expect(pairs.length).toBeGreaterThan(20);
    for (const { row, notation, text } of pairs) {
      const outcome = check({ text: text ?? '', language: notation.language }, budget(10_000));
      expect(outcome.ok && outcome.value.findings.map((f) => `${f.verdict}/${f.severity}`), `${row.id}: ${text}`).toEqual(['holds/none']);
    }
  });
  it('mutants are caught, in the right place', { timeout: 1_200_000 }, () => {
    for (const { row, notation } of pairs) {
      const mutants = mutantsOf(row, notation);
      for (const mutant of ALL ? mutants : mutants.filter((_, i) => i % 3 === 0)) {
        const outcome = check({ text: mutant.text, language: notation.language }, budget(10_000));
        const failure = outcome.ok ? outcome.value.findings.find((f) => f.verdict === 'fails') : undefined;
        const placed = failure !== undefined && failure.end > failure.start && failure.start <= mutant.changed.end && failure.end >= mutant.changed.start && failure.end - failure.start <= 40;
        judged.push({ mutant, failed: failure !== undefined, placed });
      }
    }
    const wrong = judged.filter((j) => !j.mutant.stillTrue);
    const caught = wrong.filter((j) => j.failed);
    expect(judged.filter((j) => j.mutant.stillTrue && j.failed).map((j) => j.mutant.text)).toEqual([]);
    expect(wrong.length).toBeGreaterThan(100);
    expect(caught.length / wrong.length, `missed: ${wrong.filter((j) => !j.failed).map((j) => j.mutant.text).slice(0, 5).join('\n')}`).toBeGreaterThanOrEqual(0.99);
    expect(caught.filter((j) => j.placed).length / caught.length).toBeGreaterThanOrEqual(0.95);
  });
});
