import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { check } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';
import { CodeReader } from '../../src/read/index.ts';

interface Row {
  readonly source: string;
  readonly text: string;
  readonly notation: 'latex' | 'plain';
  readonly correct: boolean;
  /** Where the wrong piece stands in the text, in UTF-16 code units. */
  readonly changed?: number;
}
/**
 * Formulas of handbooks and of public notes and comments (the section, as recalled, or the kind of place is named beside each), and the same with one number or
 * sign changed. `correct` was decided by evaluating both sides with mpmath at 80 digits at two distances from the point, independently of the readers here.
 */
const ROWS = JSON.parse(readFileSync(new URL('./data/public-claims.json', import.meta.url), 'utf8')) as readonly Row[];

describe('claims of handbooks, notes and comments', () => {
  const judged = ROWS.map((row) => {
    const before = row.notation === 'latex' ? 'We have \\[ ' : '# ';
    const text = row.notation === 'latex' ? `${before}${row.text} \\]\n` : `${before}${row.text}\n`;
    const outcome = check({ text, language: row.notation === 'latex' ? 'latex' : 'python', code: new CodeReader(null) }, budget(20_000));
    const findings = outcome.ok ? outcome.value.findings : [];
    const failing = findings.find((f) => f.verdict === 'fails');
    const at = before.length + (row.changed ?? 0);
    return { row, verdict: failing ? 'fails' : findings.some((f) => f.verdict === 'holds') ? 'holds' : 'undecided', under: failing !== undefined && failing.start <= at && at < failing.end };
  });
  const right = judged.filter((j) => j.row.correct);
  const wrong = judged.filter((j) => !j.row.correct);
  it('there are several hundred', () => {
    expect(right.length).toBeGreaterThanOrEqual(250);
    expect(wrong.length).toBeGreaterThanOrEqual(300);
  });
  it('no true one fails', () => {
    expect(right.filter((j) => j.verdict === 'fails').map((j) => j.row.text)).toEqual([]);
  });
  it('at least 95 % of the true ones hold', () => {
    expect(right.filter((j) => j.verdict === 'holds').length / right.length).toBeGreaterThanOrEqual(0.95);
  });
  it('at least 99 % of the changed ones fail, none holds, and the changed piece is underlined in 95 %', () => {
    expect(wrong.filter((j) => j.verdict === 'holds').map((j) => j.row.text)).toEqual([]);
    const failing = wrong.filter((j) => j.verdict === 'fails');
    expect(failing.length / wrong.length).toBeGreaterThanOrEqual(0.99);
    expect(failing.filter((j) => j.under).length / failing.length).toBeGreaterThanOrEqual(0.95);
  });
});
