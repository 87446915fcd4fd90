import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { check, CheckMemory } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';

const rows = JSON.parse(readFileSync(new URL('../reference/data/public-claims.json', import.meta.url), 'utf8')) as readonly { readonly text: string; readonly notation: string }[];
const text = `Let $g(x) = \\sin x / x$.\n${rows.filter((r) => r.notation === 'latex').filter((_, i) => i % 12 === 0).map((r) => `Words before.\n\\[ ${r.text} \\]\n`).join('')}Then $g(x) = 1 - \\frac{x^2}{5} + O(x^4)$, and KE of $CD = 1 - x^2/2$.\n`;

describe('checks with a memory', () => {
  it('say after every edit what a check without one says', () => {
    const memory = new CheckMemory();
    const edits = [text, `New words.\n${text}`, text.replace('\\sin x / x', '\\cos x'), `% comment\n${text.replace('Words before.', 'Some more words before, as $y \\to 0$.')}`, text.slice(40), `New words.\n${text}`];
    for (const edited of edits) {
      const [with_, without] = [check({ text: edited, language: 'latex', memory }, budget(60_000)), check({ text: edited, language: 'latex' }, budget(60_000))];
      expect(with_).toEqual(without);
    }
  });
});
