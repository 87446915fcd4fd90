/**
 * Formulas as handbooks, papers and programs print them, and each with one piece falsified: `⟦true→false⟧` marks the piece. The series of special functions are those of
 * DLMF chapters 4 to 10, 13, 15, 19, 25 and A&S chapters 3 and 4, from memory; the others follow from Taylor's theorem.
 */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { check } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';
import { CodeReader } from '../../src/read/code/index.ts';

const MARK = /⟦(.*?)→(.*?)⟧/gsu;

interface Variant {
  readonly text: string;
  readonly changed: { readonly start: number; readonly end: number } | null;
}

/** The true text, then one false text for each mark. */
function variantsOf(marked: string): readonly Variant[] {
  const count = [...marked.matchAll(MARK)].length;
  return Array.from({ length: count + 1 }, (_, wrong) => {
    let [text, at, seen] = ['', 0, 0];
    let changed: Variant['changed'] = null;
    for (const match of marked.matchAll(MARK)) {
      seen += 1;
      text += marked.slice(at, match.index);
      const piece = (seen === wrong ? match[2] : match[1]) ?? '';
      if (seen === wrong) changed = { start: text.length, end: text.length + piece.length };
      text += piece;
      at = match.index + match[0].length;
    }
    return { text: text + marked.slice(at), changed };
  });
}

const rows = readFileSync(new URL('./data/variants.txt', import.meta.url), 'utf8')
  .trimEnd()
  .split('\n---\n')
  .map((row) => ({ language: row.slice(1, row.indexOf('\n')), marked: row.slice(row.indexOf('\n') + 1) }));

describe('formulas with one piece falsified', () => {
  const code = new CodeReader(null);
  let [failures, placed, repaired] = [0, 0, 0];
  it.each(rows)('$marked', { timeout: 120_000 }, ({ language, marked }) => {
    for (const { text, changed } of variantsOf(marked)) {
      const outcome = check({ text, language, code }, budget(40_000));
      const verdicts = outcome.ok ? outcome.value.findings.map((f) => f.verdict) : [];
      expect(verdicts, text).toContain(changed ? 'fails' : 'holds');
      if (!changed) expect(verdicts, text).not.toContain('fails');
      const finding = outcome.ok && changed ? outcome.value.findings.find((f) => f.verdict === 'fails') : undefined;
      if (!finding || !changed) continue;
      failures += 1;
      placed += finding.start <= changed.end && finding.end >= changed.start ? 1 : 0;
      if (!finding.fix) continue;
      repaired += 1;
      const mended = check({ text: text.slice(0, finding.fix.start) + finding.fix.text + text.slice(finding.fix.end), language, code }, budget(40_000));
      expect(mended.ok && mended.value.findings.map((f) => f.verdict), `${text} with ${finding.fix.text}`).not.toContain('fails');
    }
  });
  it.each([
    String.raw`The root of $\tan x \approx 2x$ is near $1.17$.`,
    String.raw`At $x = 0.5$ we have $\sinh x \approx \frac{26}{25}x$.`,
    String.raw`$\sin x \approx \frac{2}{\pi} x$ and $\tan x \approx 1.1x$`,
    'def g(x):\n    return np.log1p(x)/x\n',
    '# Returns x where sin(x) = x - 0.1\na = 1\n',
    '// Uses y*sin(x)/x = 2 somewhere\nint a;\n',
  ])('raises nothing: %s', { timeout: 60_000 }, (text) => {
    const outcome = check({ text, language: text.startsWith('//') ? 'cpp' : text.includes('$') ? 'latex' : 'python', code }, budget(40_000));
    expect(outcome.ok && outcome.value.findings.map((f) => f.verdict)).not.toContain('fails');
  });
  it('underlines the changed piece and offers a right one', () => {
    expect(failures).toBeGreaterThan(80);
    expect(placed / failures).toBeGreaterThanOrEqual(0.95);
    expect(repaired / failures).toBeGreaterThanOrEqual(0.95);
  });
});
